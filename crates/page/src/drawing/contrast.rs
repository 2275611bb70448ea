//! Every theme of `www/styles/tokens.css` can be read: contrast as WCAG 2.2
//! defines it (relative luminance and contrast ratio; success criteria 1.4.3 and
//! 1.4.11).

use std::collections::BTreeMap;

const TOKENS: &str = include_str!("../../../../www/styles/tokens.css");
const LOOK: &str = include_str!("../../../../www/styles/app.css");
const PRINT: &str = include_str!("../../../../www/styles/print.css");

type Theme = BTreeMap<String, String>;

/// Style sheet without comments.
fn bare(css: &str) -> String {
    let mut out = String::new();
    let mut rest = css;
    while let Some((before, after)) = rest.split_once("/*") {
        out.push_str(before);
        rest = after.split_once("*/").map_or("", |(_, r)| r);
    }
    out + rest
}

/// The declarations of each rule that sets a paper colour, by its selector.
fn themes() -> BTreeMap<String, Theme> {
    let css = bare(TOKENS);
    let mut found = BTreeMap::new();
    for rule in css.split('}') {
        let Some((selector, body)) = rule.rsplit_once('{') else {
            continue;
        };
        let selector = selector.rsplit('{').next().unwrap_or(selector).trim();
        let selector = selector.split_whitespace().collect::<Vec<_>>().join(" ");
        let theme: Theme = body
            .split(';')
            .filter_map(|d| d.trim().strip_prefix("--")?.split_once(':'))
            .map(|(k, v)| (k.trim().to_owned(), v.trim().to_owned()))
            .collect();
        if theme.contains_key("paper") {
            found.insert(selector, theme);
        }
    }
    found
}

fn channels(hex: &str) -> [f64; 3] {
    let hex = hex.strip_prefix('#').unwrap();
    assert_eq!(hex.len(), 6, "{hex}");
    [0, 2, 4].map(|i| f64::from(u8::from_str_radix(&hex[i..i + 2], 16).unwrap()) / 255.0)
}

fn luminance(hex: &str) -> f64 {
    let linear = |c: f64| {
        if c <= 0.04045 {
            c / 12.92
        } else {
            hydraulics::math::pow((c + 0.055) / 1.055, 2.4)
        }
    };
    let [r, g, b] = channels(hex).map(linear);
    0.2126 * r + 0.7152 * g + 0.0722 * b
}

fn contrast(a: &str, b: &str) -> f64 {
    let (a, b) = (luminance(a), luminance(b));
    (a.max(b) + 0.05) / (a.min(b) + 0.05)
}

#[test]
fn contrast_is_as_wcag_defines_it() {
    assert!((contrast("#000000", "#ffffff") - 21.0).abs() < 1e-9);
    // The lightest grey that is given as passing on white for text.
    assert!(contrast("#767676", "#ffffff") >= 4.5 && contrast("#777777", "#ffffff") < 4.5);
}

#[test]
fn every_theme_is_there() {
    let names: Vec<String> = themes().into_keys().collect();
    for wanted in [
        ":root",
        ":root.theme-outdoor",
        ":root.theme-dark",
        ".print-sheet",
    ] {
        assert!(names.iter().any(|n| n == wanted), "{wanted} in {names:?}");
    }
    assert!(
        names
            .iter()
            .any(|n| n.starts_with(":root, :root.theme-paper")),
        "{names:?}"
    );
}

#[test]
fn text_and_lines_can_be_read_in_every_theme() {
    for (name, theme) in themes() {
        for ground in ["paper", "selected", "veil", "raised"] {
            for text in ["ink", "soft", "water", "ground", "surge", "fails"] {
                let ratio = contrast(&theme[text], &theme[ground]);
                assert!(ratio >= 4.5, "{name}: {text} on {ground} is {ratio:.2}");
            }
            for line in ["line", "hatch"] {
                let ratio = contrast(&theme[line], &theme[ground]);
                assert!(ratio >= 3.0, "{name}: {line} on {ground} is {ratio:.2}");
            }
        }
    }
}

#[test]
fn outdoors_is_pure_and_paper_is_black_alone() {
    let themes = themes();
    let outdoor = &themes[":root.theme-outdoor"];
    assert_eq!(
        (outdoor["paper"].as_str(), outdoor["ink"].as_str()),
        ("#ffffff", "#000000")
    );
    for (name, theme) in themes
        .iter()
        .filter(|(n, _)| n.contains("print") || n.contains(", "))
    {
        for (token, value) in theme.iter().filter(|(_, v)| v.starts_with('#')) {
            assert!(
                value == "#000000" || value == "#ffffff",
                "{name}: {token} is {value}"
            );
        }
    }
}

#[test]
fn colours_live_in_the_tokens_and_nothing_is_fetched() {
    for (file, css) in [("app.css", LOOK), ("print.css", PRINT)] {
        let css = bare(css);
        assert!(!css.contains("url("), "{file}");
        assert!(!css.contains("http"), "{file}");
        let hex: Vec<&str> = css
            .split(['#', '\n'])
            .filter(|s| s.len() >= 3 && s.bytes().take(3).all(|b| b.is_ascii_hexdigit()))
            .collect();
        // Margin boxes of a page take no custom properties in every browser.
        let allowed = if file == "print.css" { 5 } else { 0 };
        assert!(
            hex.len() <= allowed,
            "{file} has colours of its own: {hex:?}"
        );
    }
}

/// Every class the drawings write is dressed somewhere.
#[test]
fn every_class_of_the_drawings_is_dressed() {
    use super::{Size, long_section, samples, sweep_chart, verdict_mark};
    let number = |v: f64, d: usize| format!("{v:.d$}");
    let mut svg = String::new();
    for section in [samples::section(), samples::long_line(40)] {
        let d = long_section::draw(&section, Size::screen(900.0, 420.0), &number).unwrap();
        svg.push_str(&d.picture.svg);
    }
    for chart in [
        samples::sweep(24),
        samples::sweep(700),
        samples::catalogue_sweep(),
    ] {
        let d = sweep_chart::draw(&chart, Size::screen(360.0, 340.0), &number, &number);
        svg.push_str(&d.unwrap().picture.svg);
    }
    for verdict in [
        super::Verdict::Holds,
        super::Verdict::Tight,
        super::Verdict::Unsettled,
        super::Verdict::Fails,
    ] {
        svg.push_str(&verdict_mark::verdict_mark(verdict, Some(0.7)));
    }
    let look = bare(LOOK);
    for classes in svg
        .split("class=\"")
        .skip(1)
        .filter_map(|s| s.split('"').next())
    {
        for class in classes.split(' ') {
            assert!(look.contains(&format!(".{class}")), "{class}");
        }
    }
}
