//! Reads the message files and checks them against one another.
//!
//! The format is told at the head of `messages/en.txt`. Each trouble names
//! file and line.

use std::collections::BTreeMap;

/// One message in every language.
#[derive(Debug, Clone, PartialEq, Eq)]
pub(crate) struct Message {
    /// Its key, with dots.
    pub(crate) key: String,
    /// Names of what is filled in, in the order they first come in the
    /// reference language. A plural's count is first, named `count`.
    pub(crate) names: Vec<String>,
    /// The text in each language, in the order of the files.
    pub(crate) texts: Vec<Forms>,
}

/// The text of a message in one language.
#[derive(Debug, Clone, PartialEq, Eq)]
pub(crate) enum Forms {
    /// One text for all.
    Plain(String),
    /// By a count: for exactly one, and for all others.
    Plural {
        /// For exactly one.
        one: String,
        /// For all others.
        other: String,
    },
}

impl Forms {
    /// Every text, one or two.
    pub(crate) fn all(&self) -> Vec<&str> {
        match self {
            Forms::Plain(text) => vec![text],
            Forms::Plural { one, other } => vec![other, one],
        }
    }
}

#[derive(Debug, Clone)]
struct Line {
    number: usize,
    text: String,
}

type Lines = BTreeMap<String, Line>;

/// Compiles the files, given as name and content; the first is the reference.
///
/// # Errors
/// Every trouble found, each naming file and line.
pub(crate) fn compile(files: &[(String, String)]) -> Result<Vec<Message>, Vec<String>> {
    let mut troubles = Vec::new();
    let mut read = Vec::new();
    for (file, text) in files {
        read.push(lines(file, text, &mut troubles));
    }
    let mut languages = Vec::new();
    for ((file, _), lines) in files.iter().zip(&read) {
        languages.push(group(file, lines, &mut troubles));
    }
    let Some((reference, others)) = languages.split_first() else {
        return Err(vec!["no message files".to_owned()]);
    };
    let mut messages = Vec::new();
    for (key, (forms, line)) in reference {
        let at = |i: usize, line: usize| format!("{}:{line}", files[i].0);
        let names = names(forms);
        for text in forms.all() {
            if matches!(forms, Forms::Plain(_)) && names.iter().any(|n| n == "count") {
                troubles.push(format!(
                    "{}: {key}: {{count}} is kept for plurals, with .one and .other: {text}",
                    at(0, *line)
                ));
            }
        }
        let mut texts = vec![forms.clone()];
        for (i, other) in others.iter().enumerate() {
            let Some((translated, other_line)) = other.get(key) else {
                troubles.push(format!(
                    "{}: {key} is missing here (it stands in {})",
                    files[i + 1].0,
                    at(0, *line)
                ));
                continue;
            };
            if std::mem::discriminant(translated) != std::mem::discriminant(forms) {
                troubles.push(format!(
                    "{}: {key} is a plural in one language only (see {})",
                    at(i + 1, *other_line),
                    at(0, *line)
                ));
            }
            let mut ours = self::names(translated);
            let mut theirs = names.clone();
            ours.sort();
            theirs.sort();
            if ours != theirs {
                troubles.push(format!(
                    "{}: {key} fills in {{{}}}, but {} fills in {{{}}}",
                    at(i + 1, *other_line),
                    ours.join("} {"),
                    at(0, *line),
                    theirs.join("} {")
                ));
            }
            texts.push(translated.clone());
        }
        messages.push(Message {
            key: key.clone(),
            names,
            texts,
        });
    }
    for (i, other) in others.iter().enumerate() {
        for (key, (_, line)) in other {
            if !reference.contains_key(key) {
                troubles.push(format!(
                    "{}:{line}: {key} is unknown: it does not stand in {}",
                    files[i + 1].0,
                    files[0].0
                ));
            }
        }
    }
    if troubles.is_empty() {
        Ok(messages)
    } else {
        Err(troubles)
    }
}

/// The lines of one file by key, each text in one piece.
fn lines(file: &str, text: &str, troubles: &mut Vec<String>) -> Lines {
    let mut found = Lines::new();
    let mut section = String::new();
    let mut last: Option<String> = None;
    for (i, raw) in text.lines().enumerate() {
        let number = i + 1;
        let line = raw.trim();
        if line.is_empty() || line.starts_with('#') {
            last = None;
            continue;
        }
        if raw.starts_with([' ', '\t']) {
            match last.as_ref().and_then(|key| found.get_mut(key)) {
                Some(open) => {
                    open.text.push(' ');
                    open.text.push_str(line);
                }
                None => troubles.push(format!(
                    "{file}:{number}: an indented line goes on from the line above, but there is none"
                )),
            }
            continue;
        }
        last = None;
        if let Some(name) = line.strip_prefix('[').and_then(|l| l.strip_suffix(']')) {
            if !is_key(name) {
                troubles.push(format!("{file}:{number}: [{name}] is no section name"));
            }
            section = format!("{name}.");
            continue;
        }
        let Some((key, text)) = line.split_once('=') else {
            troubles.push(format!("{file}:{number}: not of the form key = text"));
            continue;
        };
        let (key, text) = (format!("{section}{}", key.trim()), text.trim());
        if !is_key(&key) {
            troubles.push(format!(
                "{file}:{number}: {key} is no key: small letters, digits and _ , parted by dots"
            ));
            continue;
        }
        if let Some(first) = found.get(&key) {
            troubles.push(format!(
                "{file}:{number}: {key} stands twice (first in line {})",
                first.number
            ));
            continue;
        }
        last = Some(key.clone());
        found.insert(
            key,
            Line {
                number,
                text: text.to_owned(),
            },
        );
    }
    for (key, line) in &found {
        if let Err(why) = check(&line.text) {
            troubles.push(format!("{file}:{}: {key}: {why}", line.number));
        }
    }
    found
}

fn is_key(key: &str) -> bool {
    key.split('.').all(|part| {
        part.starts_with(|c: char| c.is_ascii_lowercase())
            && part
                .chars()
                .all(|c| c.is_ascii_lowercase() || c.is_ascii_digit() || c == '_')
    })
}

/// Whether the text is one we print: braces well formed, nothing shouted.
fn check(text: &str) -> Result<(), String> {
    if text.is_empty() {
        return Err("the text is empty".to_owned());
    }
    if text.contains(['!', '¡']) {
        return Err("no exclamation marks".to_owned());
    }
    if text.chars().any(char::is_control) {
        return Err("a control character stands in the text".to_owned());
    }
    pieces(text).map(|_| ())
}

/// A piece of a text.
#[derive(Debug, Clone, PartialEq, Eq)]
pub(crate) enum Piece<'a> {
    /// Printed as it is.
    Text(&'a str),
    /// Filled in.
    Name(&'a str),
}

/// Cuts a text at its names in braces.
///
/// # Errors
/// A brace without its fellow, or a name that is none.
pub(crate) fn pieces(text: &str) -> Result<Vec<Piece<'_>>, String> {
    let mut pieces = Vec::new();
    let mut rest = text;
    loop {
        let Some(open) = rest.find(['{', '}']) else {
            if !rest.is_empty() {
                pieces.push(Piece::Text(rest));
            }
            return Ok(pieces);
        };
        if open > 0 {
            pieces.push(Piece::Text(&rest[..open]));
        }
        let Some(inner) = rest[open..].strip_prefix('{') else {
            return Err("a } without its {".to_owned());
        };
        let Some(close) = inner.find('}') else {
            return Err("a { without its }".to_owned());
        };
        let name = &inner[..close];
        if !is_key(name) || name.contains('.') {
            return Err(format!("{{{name}}} is no name"));
        }
        pieces.push(Piece::Name(name));
        rest = &inner[close + 1..];
    }
}

/// Names filled into any form, in order of appearance.
fn names(forms: &Forms) -> Vec<String> {
    let mut names: Vec<String> = Vec::new();
    if matches!(forms, Forms::Plural { .. }) {
        names.push("count".to_owned());
    }
    for text in forms.all() {
        for piece in pieces(text).unwrap_or_default() {
            if let Piece::Name(name) = piece
                && !names.iter().any(|n| n == name)
            {
                names.push(name.to_owned());
            }
        }
    }
    names
}

/// Joins `key.one` and `key.other` to a plural.
fn group(
    file: &str,
    lines: &Lines,
    troubles: &mut Vec<String>,
) -> BTreeMap<String, (Forms, usize)> {
    let mut found = BTreeMap::new();
    for (key, line) in lines {
        if let Some(stem) = key.strip_suffix(".one") {
            match lines.get(&format!("{stem}.other")) {
                Some(other) => {
                    found.insert(
                        stem.to_owned(),
                        (
                            Forms::Plural {
                                one: line.text.clone(),
                                other: other.text.clone(),
                            },
                            line.number,
                        ),
                    );
                }
                None => troubles.push(format!("{file}:{}: {key} has no {stem}.other", line.number)),
            }
        } else if key
            .strip_suffix(".other")
            .is_some_and(|stem| lines.contains_key(&format!("{stem}.one")))
        {
            // Taken with its `.one`. Alone it is a plain message.
        } else if lines.contains_key(&format!("{key}.one")) {
            troubles.push(format!(
                "{file}:{}: {key} is both a plain message and a plural",
                line.number
            ));
        } else {
            found.insert(key.clone(), (Forms::Plain(line.text.clone()), line.number));
        }
    }
    let mut rust_names = BTreeMap::new();
    for (key, (_, line)) in &found {
        if let Some(first) = rust_names.insert(key.replace('.', "_"), key) {
            troubles.push(format!(
                "{file}:{line}: {key} and {first} would have the same name in Rust"
            ));
        }
    }
    found
}
