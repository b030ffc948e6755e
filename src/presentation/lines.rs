//! Plain text laid out to a width: labelled lines with a hanging indent.

/// Width of the label column.
pub const LABEL: usize = 31;

fn width_of(text: &str) -> usize {
    text.chars().count()
}

/// Breaks a text into lines of at most `width` characters, at spaces. A number and its unit are kept
/// together by writing a no-break space (U+00A0) between them; it is printed as an ordinary space.
#[must_use]
pub fn wrap(text: &str, width: usize) -> Vec<String> {
    let width = width.max(16);
    let mut lines = Vec::new();
    let mut line = String::new();
    for word in text.split(' ').filter(|w| !w.is_empty()) {
        let needed = width_of(&line) + usize::from(!line.is_empty()) + width_of(word);
        if needed > width && !line.is_empty() {
            lines.push(std::mem::take(&mut line));
        }
        if !line.is_empty() {
            line.push(' ');
        }
        line.push_str(word);
    }
    if !line.is_empty() || lines.is_empty() {
        lines.push(line);
    }
    lines.iter().map(|l| l.replace('\u{a0}', " ")).collect()
}

/// A label and a value, the value wrapped under itself; a label too long for its column has a line of its
/// own.
#[must_use]
pub fn labelled(label: &str, value: &str, width: usize) -> Vec<String> {
    let long = width_of(label) >= LABEL;
    let mut lines: Vec<String> = if long {
        vec![label.to_owned()]
    } else {
        Vec::new()
    };
    for (i, line) in wrap(value, width.saturating_sub(LABEL))
        .into_iter()
        .enumerate()
    {
        let left = if i == 0 && !long { label } else { "" };
        lines.push(format!("{left:<LABEL$}{line}").trim_end().to_owned());
    }
    lines
}

/// A text with a mark in front, wrapped under itself.
#[must_use]
pub fn marked(mark: &str, text: &str, width: usize) -> Vec<String> {
    let indent = width_of(mark) + 1;
    wrap(text, width.saturating_sub(indent))
        .into_iter()
        .enumerate()
        .map(|(i, line)| {
            let left = if i == 0 { mark } else { "" };
            format!("{left:<indent$}{line}").trim_end().to_owned()
        })
        .collect()
}

/// Joins a number and a unit that belong together so that no line breaks between them.
#[must_use]
pub fn joined(text: &str) -> String {
    text.replace(' ', "\u{a0}")
}
