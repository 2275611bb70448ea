//! A tiny reader for the data tables: comma-separated, `#` for remarks, the
//! source at the head. Nothing in the tables is quoted, so nothing is unquoted.

use super::Attested;

/// Rows of a table as trimmed fields, remarks and the header row left out.
pub(super) fn rows(text: &'static str) -> impl Iterator<Item = Vec<&'static str>> {
    text.lines()
        .map(str::trim)
        .filter(|line| !line.is_empty() && !line.starts_with('#'))
        .skip(1)
        .map(|line| line.split(',').map(str::trim).collect())
}

/// The field that says whether the source was seen.
pub(super) fn attested(field: &str) -> Attested {
    if field == "seen" {
        Attested::Seen
    } else {
        Attested::FromMemory
    }
}

/// One row of a table of one variable.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct Entry {
    pub(super) x: f64,
    pub(super) y: f64,
    pub(super) attested: Attested,
}

/// How values between two rows are found.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(super) enum Between {
    /// Straight line.
    Linear,
    /// Straight line in the logarithm of the value.
    Logarithmic,
}

/// Value at `x` of a table sorted by `x`; the less well attested of the two
/// rows decides. `None` outside the table.
pub(super) fn lookup(entries: &[Entry], x: f64, between: Between) -> Option<(f64, Attested)> {
    let after = entries.iter().position(|entry| entry.x >= x)?;
    let high = entries.get(after)?;
    if high.x <= x {
        return Some((high.y, high.attested));
    }
    let low = entries.get(after.checked_sub(1)?)?;
    let share = (x - low.x) / (high.x - low.x);
    let value = match between {
        Between::Linear => low.y + share * (high.y - low.y),
        Between::Logarithmic => low.y * crate::math::pow(high.y / low.y, share),
    };
    Some((value, low.attested.max(high.attested)))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn looks_up_and_interpolates() {
        let entry = |x, y, attested| Entry { x, y, attested };
        let table = [
            entry(1.0, 10.0, Attested::Seen),
            entry(2.0, 20.0, Attested::Seen),
            entry(4.0, 80.0, Attested::FromMemory),
        ];
        assert_eq!(lookup(&table, 0.9, Between::Linear), None);
        assert_eq!(lookup(&table, 4.1, Between::Linear), None);
        assert_eq!(
            lookup(&table, 2.0, Between::Linear),
            Some((20.0, Attested::Seen))
        );
        assert_eq!(
            lookup(&table, 1.5, Between::Linear),
            Some((15.0, Attested::Seen))
        );
        let (value, attested) = lookup(&table, 3.0, Between::Logarithmic).unwrap();
        assert!((value - 40.0).abs() < 1e-12);
        assert_eq!(attested, Attested::FromMemory);
    }
}
