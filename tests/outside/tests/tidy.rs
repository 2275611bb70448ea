//! Keeps the house tidy: the arrows between crates, who may touch the browser,
//! and what no file may hold. DEVELOPERS.md states the same in words.
#![allow(clippy::unwrap_used, reason = "a helper of tests fails as a test does")]

use std::collections::{BTreeMap, BTreeSet};
use std::fs;
use std::path::{Path, PathBuf};

fn root() -> PathBuf {
    Path::new(env!("CARGO_MANIFEST_DIR")).join("../..")
}

/// Files under `dir` whose name ends in one of `ends`, build output left out.
fn files(dir: &Path, ends: &[&str]) -> Vec<PathBuf> {
    let mut found = Vec::new();
    let mut stack = vec![dir.to_path_buf()];
    while let Some(dir) = stack.pop() {
        for entry in fs::read_dir(&dir).unwrap().map(Result::unwrap) {
            let path = entry.path();
            let name = entry.file_name().to_string_lossy().into_owned();
            if path.is_dir() {
                if !["target", "dist", ".git", "node_modules", "vendor"].contains(&name.as_str()) {
                    stack.push(path);
                }
            } else if ends.iter().any(|end| name.ends_with(end)) {
                found.push(path);
            }
        }
    }
    found.sort();
    found
}

/// The names of our own crates that a manifest's `[dependencies]` lists.
fn own_dependencies(krate: &str) -> BTreeSet<String> {
    let manifest = root().join("crates").join(krate).join("Cargo.toml");
    let text = fs::read_to_string(&manifest).unwrap();
    let own = [
        "hydraulics",
        "statics",
        "pipes",
        "workbook",
        "words",
        "page",
        "tasks",
    ];
    let mut section = String::new();
    let mut found = BTreeSet::new();
    for line in text.lines() {
        if let Some(name) = line.strip_prefix('[') {
            section = name.trim_end_matches(']').to_owned();
        } else if section == "dependencies" || section.starts_with("target.") {
            let name = line.split(['.', '=', ' ']).next().unwrap_or("");
            if own.contains(&name) {
                found.insert(name.to_owned());
            }
        }
    }
    found
}

#[test]
fn arrows_run_one_way() {
    let allowed: BTreeMap<&str, &[&str]> = BTreeMap::from([
        ("hydraulics", &[][..]),
        ("statics", &["hydraulics"][..]),
        ("pipes", &["hydraulics", "statics"][..]),
        ("workbook", &["hydraulics", "statics", "pipes"][..]),
        ("words", &["workbook", "pipes", "statics", "hydraulics"][..]),
        (
            "page",
            &["words", "workbook", "pipes", "statics", "hydraulics"][..],
        ),
        (
            "tasks",
            &["words", "workbook", "pipes", "statics", "hydraulics"][..],
        ),
    ]);
    for (krate, may) in allowed {
        for dependency in own_dependencies(krate) {
            assert!(
                may.contains(&dependency.as_str()),
                "{krate} must not use {dependency}"
            );
        }
    }
}

#[test]
fn the_engineering_knows_no_file_no_screen_and_no_clock() {
    for krate in ["hydraulics", "statics", "pipes"] {
        let manifest =
            fs::read_to_string(root().join("crates").join(krate).join("Cargo.toml")).unwrap();
        for outside in [
            "serde",
            "web-sys",
            "js-sys",
            "wasm-bindgen",
            "leptos",
            "schemars",
        ] {
            assert!(!manifest.contains(outside), "{krate} depends on {outside}");
        }
        for file in files(&root().join("crates").join(krate).join("src"), &[".rs"]) {
            let text = fs::read_to_string(&file).unwrap();
            for outside in [
                "std::fs",
                "std::net",
                "std::time",
                "std::env",
                "std::io",
                "println!",
            ] {
                assert!(!text.contains(outside), "{} uses {outside}", file.display());
            }
        }
    }
}

#[test]
fn only_the_platform_touches_the_browser() {
    let src = root().join("crates/page/src");
    for file in files(&src, &[".rs"]) {
        let inside = file.strip_prefix(&src).unwrap();
        if inside.starts_with("platform") || inside == Path::new("platform.rs") {
            continue;
        }
        let text = fs::read_to_string(&file).unwrap();
        for outside in [
            "web_sys::window",
            "js_sys::",
            "idb::",
            "wasm_bindgen_futures::",
        ] {
            assert!(
                !text.contains(outside),
                "{} uses {outside}: only page/src/platform may",
                file.display()
            );
        }
    }
}

#[test]
fn no_markup_carries_its_own_style() {
    for file in files(&root().join("crates/page/src"), &[".rs"]) {
        // Modules that are tests only.
        if file.ends_with("gallery.rs") || file.ends_with("tests.rs") {
            continue;
        }
        let text = fs::read_to_string(&file).unwrap();
        let code = text.split("#[cfg(test)]").next().unwrap();
        // The policy refuses style attributes, silently.
        for inline in ["style=\"", "style=format", "style=move", "style:"] {
            assert!(
                !code.contains(inline),
                "{} has an inline {inline}",
                file.display()
            );
        }
    }
}

#[test]
fn nothing_shipped_names_a_host() {
    let mut shipped = files(
        &root().join("www"),
        &[".html", ".js", ".css", ".webmanifest", ".svg"],
    );
    shipped.extend(files(&root().join("crates/page/src"), &[".rs"]));
    for file in shipped {
        let text = fs::read_to_string(&file).unwrap();
        for (i, line) in text.lines().enumerate() {
            // The namespace of SVG is a name, never fetched.
            let line = line.replace("http://www.w3.org/2000/svg", "");
            assert!(
                !line.contains("http://") && !line.contains("https://"),
                "{}:{} names a host",
                file.display(),
                i + 1
            );
        }
    }
}

#[test]
fn nothing_is_left_unfinished() {
    let marks = [
        "to".to_owned() + "do!(",
        "unimpl".to_owned() + "emented!(",
        "FIX".to_owned() + "ME",
    ];
    for dir in ["crates", "tests"] {
        for file in files(&root().join(dir), &[".rs"]) {
            let text = fs::read_to_string(&file).unwrap();
            for mark in &marks {
                assert!(!text.contains(mark), "{} holds {mark}", file.display());
            }
        }
    }
}

#[test]
fn every_data_file_names_its_source() {
    for krate in ["pipes", "hydraulics"] {
        for file in files(&root().join("crates").join(krate), &[".csv"]) {
            let text = fs::read_to_string(&file).unwrap();
            let head: String = text
                .lines()
                .take_while(|l| l.starts_with(['#', '!']))
                .collect();
            let columns = text
                .lines()
                .find(|l| !l.starts_with(['#', '!']))
                .unwrap_or("");
            // At the head for the whole file, in a column for each row, or
            // in the file that the head names.
            let head = head.to_lowercase();
            assert!(
                head.contains("source") || head.contains("named in") || columns.contains("source"),
                "{} does not name its source",
                file.display()
            );
        }
    }
}

#[test]
fn every_lint_exception_gives_its_reason() {
    for dir in ["crates", "tests"] {
        for file in files(&root().join(dir), &[".rs"]) {
            let text = fs::read_to_string(&file).unwrap();
            let openings = ["#[", "#!["].map(|o| [format!("{o}expect("), format!("{o}allow(")]);
            for part in openings
                .iter()
                .flatten()
                .flat_map(|o| text.split(o.as_str()).skip(1))
            {
                let attribute = part.split(")]").next().unwrap();
                assert!(
                    attribute.contains("reason"),
                    "{}: {attribute}",
                    file.display()
                );
            }
        }
    }
}

/// Keys of the reference messages, as the generated code names them.
fn message_names() -> Vec<(String, String)> {
    let text = fs::read_to_string(root().join("crates/words/messages/en.txt")).unwrap();
    let mut section = String::new();
    let mut keys = BTreeSet::new();
    for line in text.lines() {
        if line.is_empty() || line.starts_with(['#', ' ', '\t']) {
            continue;
        }
        match line.strip_prefix('[').and_then(|l| l.strip_suffix(']')) {
            Some(name) => section = name.to_owned(),
            None => {
                let key = line.split('=').next().unwrap().trim();
                keys.insert(format!("{section}.{key}"));
            }
        }
    }
    // The two forms of a plural are one message.
    let stem = |key: &str| {
        let pair = key
            .strip_suffix(".one")
            .map(|stem| (stem, ".other"))
            .or_else(|| key.strip_suffix(".other").map(|stem| (stem, ".one")))?;
        keys.contains(&format!("{}{}", pair.0, pair.1))
            .then(|| pair.0.to_owned())
    };
    keys.iter()
        .map(|key| {
            let name = stem(key).unwrap_or_else(|| key.clone());
            (key.clone(), name.replace('.', "_"))
        })
        .collect()
}

#[test]
fn every_message_is_said_somewhere() {
    let mut named = BTreeSet::new();
    for krate in ["words", "page", "tasks"] {
        for file in files(&root().join("crates").join(krate).join("src"), &[".rs"]) {
            let text = fs::read_to_string(&file).unwrap();
            named.extend(
                text.split(|c: char| !c.is_ascii_alphanumeric() && c != '_')
                    .map(str::to_owned),
            );
        }
    }
    let unsaid: Vec<String> = message_names()
        .into_iter()
        .filter(|(_, name)| !named.contains(name) && !named.contains(&name.to_uppercase()))
        .map(|(key, _)| key)
        .collect();
    assert!(
        unsaid.is_empty(),
        "nothing says {unsaid:?}: take them out of every file in crates/words/messages"
    );
}
