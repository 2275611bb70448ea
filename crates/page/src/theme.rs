//! Themes of the screen.

use crate::platform::settings;
use words::Key;
use workbook::book::Paper;

/// A theme.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Default)]
pub enum Theme {
    /// Ink on paper.
    #[default]
    Paper,
    /// Black on white, heavier and larger: for a screen in the sun.
    Outdoor,
    /// Ink reversed.
    Dark,
}

impl Theme {
    /// The theme kept from an earlier visit.
    #[must_use]
    pub fn kept() -> Theme {
        settings::get(settings::THEME).map_or(Theme::Paper, |slug| Theme::of(&slug))
    }

    fn of(slug: &str) -> Theme {
        [Theme::Outdoor, Theme::Dark]
            .into_iter()
            .find(|t| t.slug() == slug)
            .unwrap_or_default()
    }

    /// Its name in settings and classes.
    #[must_use]
    pub fn slug(self) -> &'static str {
        match self {
            Theme::Paper => "paper",
            Theme::Outdoor => "outdoor",
            Theme::Dark => "dark",
        }
    }

    /// Its name to the person.
    #[must_use]
    pub fn key(self) -> Key {
        match self {
            Theme::Paper => Key::SETTING_THEME_PAPER,
            Theme::Outdoor => Key::SETTING_THEME_OUTDOOR,
            Theme::Dark => Key::SETTING_THEME_DARK,
        }
    }

    /// The theme after it.
    #[must_use]
    pub fn next(self) -> Theme {
        match self {
            Theme::Paper => Theme::Outdoor,
            Theme::Outdoor => Theme::Dark,
            Theme::Dark => Theme::Paper,
        }
    }
}

/// Classes of the root element.
#[must_use]
pub fn classes(theme: Theme, paper: Paper) -> String {
    let paper = match paper {
        Paper::A4 => "a4",
        Paper::Letter => "letter",
    };
    format!("theme-{} paper-{paper}", theme.slug())
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn every_theme_comes_round_and_is_found_by_its_name() {
        let mut theme = Theme::Paper;
        for _ in 0..3 {
            assert_eq!(Theme::of(theme.slug()), theme);
            theme = theme.next();
        }
        assert_eq!(theme, Theme::Paper);
        assert_eq!(Theme::of("unknown"), Theme::Paper);
    }
}
