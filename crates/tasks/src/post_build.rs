//! `cargo task post-build`, called by trunk once the page lies in its staging
//! folder: writes the service worker and checks that the page keeps to itself.

use crate::trouble::Trouble;
use crate::{places, say};
use base64::Engine;
use base64::engine::general_purpose::STANDARD as BASE64;
use sha2::{Digest, Sha256};
use std::fmt::Write as _;
use std::path::{Path, PathBuf};
use std::process::ExitCode;
use std::{env, fs, io};

/// The policy that the page must carry, word for word.
const POLICY: &str = "default-src 'none'; script-src 'self' 'wasm-unsafe-eval'; \
    style-src 'self'; img-src 'self' data: blob:; connect-src 'self'; \
    manifest-src 'self'; worker-src 'self'; base-uri 'none'; form-action 'none'";

/// Absolute addresses that are names, not places anything is fetched from.
const NAMES: &[&str] = &[
    "http://www.w3.org/2000/svg",
    "http://www.w3.org/1999/xlink",
    "http://www.w3.org/1999/xhtml",
    "http://www.w3.org/1998/Math/MathML",
    "http://www.w3.org/XML/1998/namespace",
    "https://json-schema.org/draft/",
];

/// Finishes the page in the folder that trunk names, or in `dist`.
pub(crate) fn run(_: &[String]) -> Result<ExitCode, Trouble> {
    let folder = env::var_os("TRUNK_STAGING_DIR").map_or_else(places::dist, PathBuf::from);
    let (files, version) = finish(&folder)?;
    say::note(&format!("service worker: {files} files, version {version}"));
    Ok(ExitCode::SUCCESS)
}

/// Checks the built page and writes its service worker; returns the number of
/// files it keeps and the version it bears.
pub(crate) fn finish(folder: &Path) -> Result<(usize, String), Trouble> {
    let pattern_path = places::root().join("www/sw.js");
    let pattern = fs::read_to_string(&pattern_path)
        .map_err(|error| Trouble::file("read", &pattern_path, &error))?;
    let mut contents = Vec::new();
    for name in files_below(folder).map_err(|error| Trouble::file("read", folder, &error))? {
        if name != "sw.js" {
            let path = folder.join(&name);
            let bytes = fs::read(&path).map_err(|error| Trouble::file("read", &path, &error))?;
            contents.push((name, bytes));
        }
    }

    let found = wrong(&contents);
    if !found.is_empty() {
        return Err(Trouble::new(
            format!(
                "The built page does not keep to itself:\n  {}",
                found.join("\n  ")
            ),
            "The page may name no other host and must keep its policy: mend www/ or the page.",
        ));
    }

    let (worker, version) = worker(&pattern, &contents);
    let path = folder.join("sw.js");
    fs::write(&path, worker).map_err(|error| Trouble::file("write", &path, &error))?;
    Ok((contents.len(), version))
}

/// The files below a folder, as sorted paths with forward slashes; hidden ones,
/// such as what a build that was stopped has left in its stage, do not count.
pub(crate) fn files_below(folder: &Path) -> io::Result<Vec<String>> {
    let mut found = Vec::new();
    let mut folders = vec![(folder.to_path_buf(), String::new())];
    while let Some((folder, prefix)) = folders.pop() {
        for entry in fs::read_dir(folder)? {
            let entry = entry?;
            let name = entry.file_name().to_string_lossy().into_owned();
            if name.starts_with('.') {
                continue;
            }
            let name = format!("{prefix}{name}");
            if entry.file_type()?.is_dir() {
                folders.push((entry.path(), format!("{name}/")));
            } else {
                found.push(name);
            }
        }
    }
    found.sort();
    Ok(found)
}

/// The service worker for these files, and the version it bears.
fn worker(pattern: &str, contents: &[(String, Vec<u8>)]) -> (String, String) {
    let mut whole = Sha256::new();
    whole.update(pattern);
    let mut list = String::new();
    for (name, bytes) in contents {
        let hash = BASE64.encode(Sha256::digest(bytes));
        whole.update(format!("\n{name} {hash}"));
        // The start page is asked for by its folder.
        let name = if name == "index.html" { "./" } else { name };
        let _ = write!(list, "\n  {name:?}: \"sha256-{hash}\",");
    }
    let version: String = whole
        .finalize()
        .iter()
        .take(8)
        .fold(String::new(), |mut text, byte| {
            let _ = write!(text, "{byte:02x}");
            text
        });
    let worker = pattern
        .replace("@VERSION@", &version)
        .replace("/* @FILES@ */", &format!("{list}\n"));
    (worker, version)
}

/// Everything that a page which keeps to itself would not have.
fn wrong(contents: &[(String, Vec<u8>)]) -> Vec<String> {
    let mut found = Vec::new();
    for (name, bytes) in contents {
        if name.contains(|character: char| {
            !(character.is_ascii_alphanumeric() || "._-/".contains(character))
        }) {
            found.push(format!(
                "{name}: a name that would need encoding in an address"
            ));
        }
        // A module names sources in its sentences and fetches nothing by itself:
        // what it asks for goes through the policy, and the walk watches it.
        if name.ends_with(".wasm") || name.ends_with(".png") {
            continue;
        }
        let Ok(text) = str::from_utf8(bytes) else {
            found.push(format!("{name}: not UTF-8"));
            continue;
        };
        // What stands in a comment asks for nothing; the glue of wasm-bindgen has some.
        let code: String = text
            .lines()
            .filter(|line| !(name.ends_with(".js") && line.trim_start().starts_with("//")))
            .flat_map(|line| [line, "\n"])
            .collect();
        found.extend(foreign(&code).map(|address| format!("{name}: names {address}")));
        if name.ends_with(".html") {
            found.extend(
                page_wrong(text)
                    .into_iter()
                    .map(|what| format!("{name}: {what}")),
            );
        }
        if name.ends_with(".svg") && text.contains("<script") {
            found.push(format!("{name}: a script in a picture"));
        }
    }
    if !contents.iter().any(|(name, _)| name == "index.html") {
        found.push("index.html: missing".to_owned());
    }
    found
}

/// Addresses with a host of their own.
fn foreign(text: &str) -> impl Iterator<Item = String> {
    text.match_indices("//").filter_map(|(at, _)| {
        let before = text.get(..at).unwrap_or("");
        let from_host = text.get(at..).unwrap_or("");
        let host_follows = from_host
            .get(2..)
            .and_then(|rest| rest.chars().next())
            .is_some_and(|first| first.is_ascii_alphanumeric() || first == '[');
        let scheme = before.ends_with(':').then(|| {
            let start = before
                .trim_end_matches(':')
                .rfind(|character: char| !character.is_ascii_alphanumeric())
                .map_or(0, |index| index + 1);
            before.get(start..).unwrap_or("")
        });
        // "//host" alone counts where an address may stand: behind a quote or a bracket.
        let bare = before.ends_with(['"', '\'', '`', '(', '=']);
        if !host_follows || (scheme.is_none_or(|scheme| scheme == ":") && !bare) {
            return None;
        }
        let end = from_host
            .find(|character: char| character.is_whitespace() || "\"'`)<>,;".contains(character))
            .unwrap_or(from_host.len());
        let address = format!(
            "{}{}",
            scheme.unwrap_or(""),
            from_host.get(..end).unwrap_or("")
        );
        (!NAMES.iter().any(|name| address.starts_with(name))).then_some(address)
    })
}

/// What the policy would refuse in a document, some of it silently.
fn page_wrong(text: &str) -> Vec<String> {
    let mut found = Vec::new();
    let policy = format!("http-equiv=\"Content-Security-Policy\" content=\"{POLICY}\"");
    match text.find(&policy) {
        None => found.push("the Content-Security-Policy is not the agreed one".to_owned()),
        Some(at) => {
            let head = text.get(..at).unwrap_or("");
            if ["<script", "<link", "<style"]
                .iter()
                .any(|tag| head.contains(tag))
            {
                found.push("the policy must come before anything that is fetched".to_owned());
            }
        }
    }
    for tag in text
        .split('<')
        .skip(1)
        .map(|part| part.split('>').next().unwrap_or(""))
    {
        let name: String = tag
            .chars()
            .take_while(char::is_ascii_alphanumeric)
            .collect::<String>()
            .to_ascii_lowercase();
        if name == "script" && !tag.contains(" src=") {
            found.push("an inline script".to_owned());
        }
        if name == "style" {
            found.push("an inline style sheet".to_owned());
        }
        for attribute in tag.split_whitespace().skip(1) {
            let attribute = attribute.to_ascii_lowercase();
            if attribute.starts_with("style=")
                || (attribute.starts_with("on") && attribute.contains('='))
            {
                found.push(format!("the attribute {attribute}"));
            }
        }
    }
    found
}

#[cfg(test)]
mod tests {
    use super::*;

    fn page(body: &str) -> Vec<(String, Vec<u8>)> {
        let text = format!(
            "<html><head><meta http-equiv=\"Content-Security-Policy\" content=\"{POLICY}\">\
             </head><body>{body}</body></html>"
        );
        vec![("index.html".to_owned(), text.into_bytes())]
    }

    #[test]
    fn a_page_that_keeps_to_itself_passes() {
        let mut contents = page("<script src=\"boot.js\"></script>");
        contents.push((
            "a.js".into(),
            b"// https://example.org in a comment\nconst x = 'http://www.w3.org/2000/svg';".into(),
        ));
        assert_eq!(wrong(&contents), Vec::<String>::new());
    }

    #[test]
    fn everything_else_is_named() {
        for (body, expected) in [
            ("<script>1</script>", "inline script"),
            ("<style>p{}</style>", "inline style sheet"),
            ("<p style=\"color:red\">", "attribute style="),
            ("<p onclick=\"x()\">", "attribute onclick="),
            (
                "<a href=\"https://example.org/x\">",
                "names https://example.org/x",
            ),
            ("<img src=\"//example.org/x\">", "names //example.org/x"),
            ("<a href=\"wss://example.org\">", "names wss://example.org"),
        ] {
            let found = wrong(&page(body));
            assert_eq!(found.len(), 1, "{body}: {found:?}");
            assert!(found[0].contains(expected), "{body}: {found:?}");
        }
        let without = vec![("index.html".to_owned(), b"<p>".to_vec())];
        assert!(wrong(&without)[0].contains("Content-Security-Policy"));
        assert!(wrong(&[])[0].contains("missing"));
    }

    #[test]
    fn the_own_page_passes_and_has_the_words_in_both_languages() {
        let text = fs::read_to_string(places::root().join("www/index.html")).unwrap();
        assert_eq!(page_wrong(&text), Vec::<String>::new());
        let (english, spanish) = text.split_once("<div lang=\"es\"").unwrap();
        for key in ["stopped", "browser", "loading", "books", "nobooks"] {
            let say = format!("data-say=\"{key}\"");
            assert_eq!(
                english.matches(&say).count(),
                spanish.matches(&say).count(),
                "{key}"
            );
            assert!(english.contains(&say), "{key}");
        }
    }

    #[test]
    fn the_version_follows_the_contents_and_nothing_else() {
        let pattern = fs::read_to_string(places::root().join("www/sw.js")).unwrap();
        let one = vec![
            ("index.html".to_owned(), b"a".to_vec()),
            ("b.js".to_owned(), b"b".to_vec()),
        ];
        let mut other = one.clone();
        other[1].1 = b"c".to_vec();
        let (text, version) = worker(&pattern, &one);
        assert_eq!(version, worker(&pattern, &one).1);
        assert_ne!(version, worker(&pattern, &other).1);
        assert!(text.contains(&format!("const VERSION = \"{version}\"")));
        // SHA-256 of "a" and "b" as OpenSSL computes it.
        assert!(text.contains("\"./\": \"sha256-ypeBEsobvcr6wjGzmiPcTaeG7/gUfE5yuYB3ha/uSLs=\""));
        assert!(text.contains("\"b.js\": \"sha256-PiPoFgA5WUoziU9lZOGxNIu9egCI1CxKy3PurtWcAJ0=\""));
        assert!(!text.contains('@'), "{text}");
    }
}
