//! The languages spoken, and which one a browser asks for.

use workbook::reading::DecimalMark;

/// A language of the message files.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, Default)]
pub enum Language {
    /// English.
    #[default]
    English,
    /// Spanish, as the trade speaks it in Latin America.
    Spanish,
}

impl Language {
    /// Every language, in the order of the message files.
    pub const ALL: [Language; 2] = [Language::English, Language::Spanish];

    /// Its two-letter code (ISO 639-1), as in the page's `lang`.
    #[must_use]
    pub fn code(self) -> &'static str {
        match self {
            Language::English => "en",
            Language::Spanish => "es",
        }
    }

    /// Its name in itself.
    #[must_use]
    pub fn own_name(self) -> &'static str {
        match self {
            Language::English => "English",
            Language::Spanish => "Español",
        }
    }

    /// The decimal mark it is usually written with.
    #[must_use]
    pub fn mark(self) -> DecimalMark {
        match self {
            Language::English => DecimalMark::Point,
            Language::Spanish => DecimalMark::Comma,
        }
    }

    /// The language of a code or tag ("es", "es-PE", "ES_mx"), if it is one
    /// of ours.
    #[must_use]
    pub fn from_tag(tag: &str) -> Option<Language> {
        let code = tag.split(['-', '_']).next().unwrap_or("").trim();
        Language::ALL
            .into_iter()
            .find(|l| l.code().eq_ignore_ascii_case(code))
    }

    /// The first of a browser's languages, most wanted first, that is ours;
    /// English where none is.
    #[must_use]
    pub fn pick<'a>(tags: impl IntoIterator<Item = &'a str>) -> Language {
        tags.into_iter()
            .find_map(Language::from_tag)
            .unwrap_or_default()
    }

    pub(crate) fn index(self) -> usize {
        match self {
            Language::English => 0,
            Language::Spanish => 1,
        }
    }
}

/// Regions that write Spanish with a decimal point (Unicode CLDR 44, locales
/// es-MX and its like: `decimal` of `symbols-numberSystem-latn`; from memory).
const POINT_REGIONS: [&str; 9] = ["MX", "GT", "HN", "NI", "PA", "PR", "DO", "SV", "US"];

/// The decimal mark of a browser's languages, most wanted first: that of the
/// first tag whose language is ours, by its region where that is told.
#[must_use]
pub fn decimal_mark<'a>(tags: impl IntoIterator<Item = &'a str>) -> DecimalMark {
    for tag in tags {
        let Some(language) = Language::from_tag(tag) else {
            continue;
        };
        let region = tag
            .split(['-', '_'])
            .skip(1)
            .find(|part| part.len() == 2)
            .unwrap_or("");
        let points = POINT_REGIONS.iter().any(|r| r.eq_ignore_ascii_case(region));
        return if points {
            DecimalMark::Point
        } else {
            language.mark()
        };
    }
    DecimalMark::Point
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_browser_list_picks_the_first_of_ours() {
        assert_eq!(Language::pick(["es-PE", "en"]), Language::Spanish);
        assert_eq!(Language::pick(["qu", "es"]), Language::Spanish);
        assert_eq!(Language::pick(["en-US", "es"]), Language::English);
        assert_eq!(Language::pick(["est"]), Language::English);
        assert_eq!(Language::pick([]), Language::English);
    }

    #[test]
    fn the_region_decides_the_mark() {
        assert_eq!(decimal_mark(["es-PE"]), DecimalMark::Comma);
        assert_eq!(decimal_mark(["es-419"]), DecimalMark::Comma);
        assert_eq!(decimal_mark(["qu", "es-MX"]), DecimalMark::Point);
        assert_eq!(decimal_mark(["en-ZA"]), DecimalMark::Point);
        assert_eq!(decimal_mark([]), DecimalMark::Point);
    }
}
