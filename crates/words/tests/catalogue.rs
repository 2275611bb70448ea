//! The build stops at message files that are not complete, and says where.
#![expect(clippy::tests_outside_test_module, reason = "an integration test")]

#[path = "../build/catalogue.rs"]
mod catalogue;

use catalogue::{Forms, compile};

fn files(english: &str, spanish: &str) -> Vec<(String, String)> {
    vec![
        ("en.txt".to_owned(), english.to_owned()),
        ("es.txt".to_owned(), spanish.to_owned()),
    ]
}

#[test]
fn complete_files_become_messages() {
    let messages = compile(&files(
        "# a remark\n[a]\nplain = One\n  two\nfilled = {b} of {c}\nn.one = {count} {x}\nn.other = {count} {x}s\n",
        "[a]\nplain = Uno dos\nfilled = de {c}, {b}\nn.one = {count} {x}\nn.other = {count} {x}es\n",
    ))
    .unwrap();
    let keys: Vec<&str> = messages.iter().map(|m| m.key.as_str()).collect();
    assert_eq!(keys, ["a.filled", "a.n", "a.plain"]);
    assert_eq!(messages[0].names, ["b", "c"]);
    assert_eq!(messages[1].names, ["count", "x"]);
    assert_eq!(messages[2].texts[0], Forms::Plain("One two".to_owned()));
}

#[test]
fn each_trouble_names_file_and_line() {
    for (english, spanish, says) in [
        (
            "[a]\nb = x\nc = y\n",
            "[a]\nb = x\n",
            "es.txt: a.c is missing here (it stands in en.txt:3)",
        ),
        (
            "b = x\n",
            "b = x\nc = y\n",
            "es.txt:2: c is unknown: it does not stand in en.txt",
        ),
        (
            "b = x {p}\n",
            "\nb = x {q}\n",
            "es.txt:2: b fills in {q}, but en.txt:1 fills in {p}",
        ),
        (
            "b = x {p}\n",
            "b = x\n",
            "es.txt:1: b fills in {}, but en.txt:1 fills in {p}",
        ),
        (
            "b = x\nb = y\n",
            "b = x\n",
            "en.txt:2: b stands twice (first in line 1)",
        ),
        ("b = x {p\n", "b = x\n", "en.txt:1: b: a { without its }"),
        ("b = x }\n", "b = x\n", "en.txt:1: b: a } without its {"),
        ("b = x {P}\n", "b = x\n", "en.txt:1: b: {P} is no name"),
        ("b =\n", "b = x\n", "en.txt:1: b: the text is empty"),
        (
            "b = Stop!\n",
            "b = x\n",
            "en.txt:1: b: no exclamation marks",
        ),
        (
            "b = x\n",
            "b = ¡Alto\n",
            "es.txt:1: b: no exclamation marks",
        ),
        ("nothing\n", "", "en.txt:1: not of the form key = text"),
        ("B = x\n", "", "en.txt:1: B is no key"),
        ("[A b]\n", "", "en.txt:1: [A b] is no section name"),
        (
            "  x\n",
            "",
            "en.txt:1: an indented line goes on from the line above, but there is none",
        ),
        ("n.one = {count} x\n", "", "en.txt:1: n.one has no n.other"),
        (
            "n = x\nn.one = x\nn.other = y\n",
            "",
            "en.txt:1: n is both a plain message and a plural",
        ),
        (
            "n = {count} x\n",
            "n = {count} x\n",
            "en.txt:1: n: {count} is kept for plurals",
        ),
        (
            "n.one = x\nn.other = y\n",
            "n = x\n",
            "es.txt:1: n is a plural in one language only",
        ),
        (
            "a.b = x\na_b = y\n",
            "a.b = x\na_b = y\n",
            "would have the same name in Rust",
        ),
    ] {
        let troubles = compile(&files(english, spanish)).unwrap_err();
        assert!(
            troubles.iter().any(|t| t.contains(says)),
            "{says}: {troubles:?}"
        );
    }
}

#[test]
fn a_lone_other_is_a_plain_message() {
    let messages = compile(&files("[a]\nother = x\n", "[a]\nother = y\n")).unwrap();
    assert_eq!(messages[0].key, "a.other");
}
