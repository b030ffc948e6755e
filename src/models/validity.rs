//! Where the ladder's assumptions end: caveats for given inputs, as data.
