//! What typing does, apart from any page.

use workbook::Entry;
use workbook::reading::{DecimalMark, Reading, read};
use workbook::units::{Kind, UnitSystem};

/// The unit a bare number in this entry is read in: the entry's own, or the
/// screen's where it has none.
#[must_use]
pub fn unit_of(entry: &Entry, kind: Kind, system: UnitSystem) -> &'static str {
    kind.unit(&entry.unit)
        .filter(|_| !entry.unit.is_empty())
        .unwrap_or_else(|| kind.default_unit(system))
        .symbol
}

/// The unit after this one on the unit button.
#[must_use]
pub fn next_unit(kind: Kind, symbol: &str) -> &'static str {
    let units = kind.units();
    let place = units.iter().position(|u| u.symbol == symbol);
    let next = place.map_or(0, |p| (p + 1) % units.len());
    units.get(next).map_or("", |u| u.symbol)
}

/// The text with its sign changed: what the minus key does.
#[must_use]
pub fn change_sign(text: &str) -> String {
    let text = text.trim_start();
    match text.strip_prefix(['-', '\u{2212}', '\u{2013}']) {
        Some(rest) => rest.trim_start().to_owned(),
        None => format!("-{text}"),
    }
}

/// The text with a place for a doubt: what the ± key does.
#[must_use]
pub fn add_doubt(text: &str) -> String {
    if text.contains('±') || text.trim().is_empty() {
        return text.to_owned();
    }
    format!("{} ± ", text.trim_end())
}

/// How the text was read, where that is not plain from the text itself: it
/// may be read otherwise, carries its own unit, or a doubt.
#[must_use]
pub fn worth_showing(text: &str, kind: Kind, symbol: &str, mark: DecimalMark) -> Option<Reading> {
    let reading = read(text, kind, kind.unit(symbol)?, mark).ok()??;
    (reading.ambiguous || reading.own_unit || reading.plus_minus.is_some()).then_some(reading)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_unit_button_goes_round_once() {
        let mut symbol = "L/s";
        for _ in 0..Kind::Flow.units().len() {
            symbol = next_unit(Kind::Flow, symbol);
        }
        assert_eq!(symbol, "L/s");
        assert_eq!(next_unit(Kind::Number, ""), "");
        assert_eq!(next_unit(Kind::Bore, "furlong"), "mm");
    }

    #[test]
    fn the_entry_keeps_its_own_unit_over_the_screens() {
        let entry = Entry::typed("4", "in", Kind::Bore, DecimalMark::Point);
        assert_eq!(unit_of(&entry, Kind::Bore, UnitSystem::Metric), "in");
        let empty = Entry::default();
        assert_eq!(unit_of(&empty, Kind::Bore, UnitSystem::Metric), "mm");
        assert_eq!(unit_of(&empty, Kind::Bore, UnitSystem::UsCustomary), "in");
    }

    #[test]
    fn the_sign_changes_and_changes_back() {
        assert_eq!(change_sign("12.5"), "-12.5");
        assert_eq!(change_sign("-12.5"), "12.5");
        assert_eq!(change_sign("\u{2212}3"), "3");
        assert_eq!(change_sign(""), "-");
    }

    #[test]
    fn a_doubt_is_asked_for_once() {
        assert_eq!(add_doubt("38"), "38 ± ");
        assert_eq!(add_doubt("38 ± 2"), "38 ± 2");
        assert_eq!(add_doubt(" "), " ");
    }

    #[test]
    fn only_what_is_not_plain_is_read_back() {
        let show = |t| worth_showing(t, Kind::Bore, "mm", DecimalMark::Point);
        assert!(show("150").is_none());
        assert!(show("4 in").is_some_and(|r| r.own_unit));
        assert!(show("1,234").is_some_and(|r| r.ambiguous));
        assert!(show("x").is_none());
    }
}
