//! The test suite: one binary, one module a question.

mod quantities;
