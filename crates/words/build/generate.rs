//! Writes the checked messages as Rust.
//!
//! A plain message becomes a constant of `Key`, one that is filled in becomes
//! a function of the same name: a name that is wrong or a piece that is left
//! out does not compile, and what is not used is not linked.

use crate::catalogue::{Forms, Message, Piece, pieces};
use std::fmt::Write;

/// The generated module.
pub(crate) fn rust(messages: &[Message]) -> String {
    let mut keys = String::new();
    let mut functions = String::new();
    let mut samples = String::new();
    for message in messages {
        let reference = &message.texts[0];
        let texts: Vec<String> = message.texts.iter().map(|f| literal(f, message)).collect();
        let texts = texts.join(", ");
        let name = message.key.replace('.', "_");
        let doc = doc(reference);
        if message.names.is_empty() {
            let name = name.to_uppercase();
            let _ = writeln!(
                keys,
                "    {doc}\n    pub const {name}: Key = Key(&[{texts}]);"
            );
            let _ = writeln!(
                samples,
                "        (\"{}\", words.say(Key::{name}).to_owned()),",
                message.key
            );
            continue;
        }
        let plural = matches!(reference, Forms::Plural { .. });
        let rest: Vec<&String> = message.names.iter().filter(|n| *n != "count").collect();
        let arguments: String = rest.iter().map(|n| format!(", {n}: &str")).collect();
        let passed: String = rest.iter().map(|n| format!(", {n}")).collect();
        let sample = "\"sample\", ".repeat(rest.len());
        if plural {
            let _ = writeln!(
                functions,
                "{doc}\n#[must_use]\npub fn {name}(words: Words, count: usize{arguments}) -> String {{\n    \
                 let shown = words.count(count);\n    \
                 fill_plural(words, count, &[{texts}], &[&shown{passed}])\n}}\n"
            );
            for count in [0, 1, 2] {
                let _ = writeln!(
                    samples,
                    "        (\"{}\", {name}(words, {count}, {sample})),",
                    message.key
                );
            }
        } else {
            let _ = writeln!(
                functions,
                "{doc}\n#[must_use]\npub fn {name}(words: Words{arguments}) -> String {{\n    \
                 fill(words, &[{texts}], &[{}])\n}}\n",
                passed.trim_start_matches(", ")
            );
            let _ = writeln!(
                samples,
                "        (\"{}\", {name}(words, {sample})),",
                message.key
            );
        }
    }
    format!(
        "impl Key {{\n{keys}}}\n\n{functions}\
         /// Every message, filled with samples where it is filled in.\n\
         #[cfg(test)]\npub(crate) fn every_message(words: Words) -> Vec<(&'static str, String)> {{\n    \
         vec![\n{samples}    ]\n}}\n"
    )
}

fn doc(reference: &Forms) -> String {
    let text = reference.all().join(" / ");
    // A doc comment is Markdown: keep it from making links and tags of ours.
    format!("/// `{}`", text.replace('`', "'"))
}

/// The text of one language as a Rust expression. What is filled in stands as
/// a control character, one above its place among the names.
fn literal(forms: &Forms, message: &Message) -> String {
    let one = |text: &str| {
        let mut out = String::new();
        for piece in pieces(text).unwrap_or_default() {
            match piece {
                Piece::Text(text) => out.push_str(text),
                Piece::Name(name) => {
                    let place = message.names.iter().position(|n| n == name).unwrap_or(0);
                    let mark = u8::try_from(place + 1).unwrap_or(0);
                    out.push(char::from(mark));
                }
            }
        }
        format!("{out:?}")
    };
    match forms {
        Forms::Plain(text) => one(text),
        Forms::Plural { one: single, other } => format!("[{}, {}]", one(single), one(other)),
    }
}
