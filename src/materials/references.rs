//! References: BibTeX entries, found by key without parsing the whole file, printed author–journal–year.

use std::collections::BTreeMap;
use std::ops::Range;

use biblatex::{Bibliography, ChunksExt, Entry, PermissiveType};

/// How far a source was opened.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub enum Opened {
    /// The whole text.
    FullText,
    /// The abstract.
    Abstract,
    /// Another text that quotes it.
    QuotedElsewhere,
    /// Not opened.
    NotOpened,
}

/// One reference.
#[derive(Clone, PartialEq, Eq, Debug)]
pub struct Reference {
    /// Key.
    pub key: String,
    /// Short form for tables: `Piraux 1998`.
    pub short: String,
    /// Full form: authors, title, journal, volume, pages, year, DOI.
    pub full: String,
    /// How far it was opened.
    pub opened: Option<Opened>,
}

/// A BibTeX text with an index of its entries. Entries are parsed when asked for.
#[derive(Clone, Debug)]
pub struct References {
    text: String,
    entries: BTreeMap<String, Range<usize>>,
    /// Keys that stand more than once.
    pub duplicates: Vec<String>,
}

impl References {
    /// Indexes a BibTeX text: the range of each entry by key.
    #[must_use]
    pub fn new(text: &str) -> Self {
        let mut entries = BTreeMap::new();
        let mut duplicates = Vec::new();
        let bytes = text.as_bytes();
        let mut at = 0;
        while let Some(offset) = text[at..].find('@') {
            let start = at + offset;
            let Some(open) = text[start..].find('{').map(|o| start + o) else {
                break;
            };
            let mut depth = 0_usize;
            let mut end = open;
            for (i, b) in bytes.iter().enumerate().skip(open) {
                match b {
                    b'{' => depth += 1,
                    b'}' => depth = depth.saturating_sub(1),
                    _ => {}
                }
                end = i + 1;
                if depth == 0 {
                    break;
                }
            }
            if let Some(comma) = text[open..end].find(',') {
                let key = text[open + 1..open + comma].trim().to_owned();
                if entries.insert(key.clone(), start..end).is_some() {
                    duplicates.push(key);
                }
            }
            at = end.max(start + 1);
        }
        Self {
            text: text.to_owned(),
            entries,
            duplicates,
        }
    }

    /// Lays another BibTeX text over this one: its entries come first.
    pub fn lay_over(&mut self, text: &str) {
        let shift = self.text.len() + 1;
        let other = Self::new(text);
        self.text.push('\n');
        self.text.push_str(text);
        for (key, range) in other.entries {
            self.entries
                .insert(key, range.start + shift..range.end + shift);
        }
        self.duplicates.extend(other.duplicates);
    }

    /// Keys, sorted.
    pub fn keys(&self) -> impl Iterator<Item = &str> {
        self.entries.keys().map(String::as_str)
    }

    /// Whether the key is known.
    #[must_use]
    pub fn has(&self, key: &str) -> bool {
        self.entries.contains_key(key)
    }

    /// The entry as BibTeX text.
    #[must_use]
    pub fn bibtex(&self, key: &str) -> Option<&str> {
        self.text.get(self.entries.get(key)?.clone())
    }

    /// The reference of that key.
    ///
    /// # Errors
    /// The reason why the entry cannot be read; `None` inside the error where the key is not known.
    pub fn get(&self, key: &str) -> Result<Reference, Option<String>> {
        let text = self.bibtex(key).ok_or(None)?;
        let parsed = Bibliography::parse(text).map_err(|e| Some(e.to_string()))?;
        let entry = parsed.get(key).ok_or(None)?;
        Ok(reference(entry))
    }
}

fn field(entry: &Entry, name: &str) -> Option<String> {
    entry
        .get(name)
        .map(|chunks| chunks.format_verbatim())
        .filter(|s| !s.trim().is_empty())
}

fn year(entry: &Entry) -> String {
    match entry.date() {
        Ok(PermissiveType::Typed(_)) | Ok(PermissiveType::Chunks(_)) | Err(_) => {
            field(entry, "year")
                .or_else(|| field(entry, "date"))
                .unwrap_or_else(|| "no year".to_owned())
        }
    }
}

fn reference(entry: &Entry) -> Reference {
    let mut people: Vec<String> = entry
        .author()
        .map(|authors| {
            authors
                .into_iter()
                .map(|a| a.name)
                .filter(|n| !n.is_empty())
                .collect()
        })
        .unwrap_or_default();
    // BibTeX writes a list that goes on as `and others`.
    let goes_on = people.iter().any(|p| p == "others");
    people.retain(|p| p != "others");
    let year = year(entry);
    let surname = people.first().cloned().unwrap_or_else(|| {
        field(entry, "author")
            .or_else(|| field(entry, "title"))
            .unwrap_or_else(|| entry.key.clone())
    });
    let short_authors = match people.len() {
        _ if goes_on => format!("{surname} et al."),
        0 | 1 => surname,
        2 => format!("{surname} and {}", people[1]),
        _ => format!("{surname} et al."),
    };
    let authors = match people.len() {
        0 => short_authors.clone(),
        _ if goes_on => format!("{} et al.", people[0]),
        1..=3 => people.join(", "),
        _ => format!("{} et al.", people[0]),
    };
    let mut full = authors;
    let mut add = |text: Option<String>| {
        if let Some(text) = text {
            full.push_str(", ");
            full.push_str(&text);
        }
    };
    add(field(entry, "title"));
    let journal = field(entry, "journaltitle").or_else(|| field(entry, "journal"));
    let volume = field(entry, "volume");
    let pages = field(entry, "pages");
    let place = [journal.or_else(|| field(entry, "publisher")), volume, pages]
        .into_iter()
        .flatten()
        .collect::<Vec<_>>()
        .join(" ");
    add(Some(place).filter(|p| !p.is_empty()));
    add(field(entry, "howpublished"));
    full.push_str(&format!(" ({year})"));
    if let Some(doi) = field(entry, "doi") {
        full.push_str(&format!(", doi:{doi}"));
    }
    let opened = field(entry, "opened").and_then(|o| match o.as_str() {
        "full text" => Some(Opened::FullText),
        "abstract" => Some(Opened::Abstract),
        "quoted elsewhere" => Some(Opened::QuotedElsewhere),
        "not opened" => Some(Opened::NotOpened),
        _ => None,
    });
    Reference {
        key: entry.key.clone(),
        short: format!("{short_authors} {year}"),
        full,
        opened,
    }
}
