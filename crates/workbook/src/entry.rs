//! One entered quantity: the text as typed, kept whether usable or not, with
//! the value read from it.

use crate::reading::{DecimalMark, Reading, Unreadable, read};
use crate::units::{Kind, UnitSystem};
use schemars::JsonSchema;
use serde::{Deserialize, Serialize};

/// An entered quantity. The field that holds it says its [`Kind`], and the
/// field's name ends in the base unit of `value`.
#[derive(Debug, Clone, PartialEq, Default, Serialize, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields)]
pub struct Entry {
    /// As typed, usable or not. Empty: nothing entered.
    #[serde(default)]
    pub text: String,
    /// The unit a bare number was typed in (the field's unit button).
    #[serde(default, skip_serializing_if = "String::is_empty")]
    pub unit: String,
    /// The value in the base unit the field's name ends in; none where the
    /// text cannot be used.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub value: Option<f64>,
    /// The standard uncertainty typed with it (±), in the same unit.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub plus_minus: Option<f64>,
}

/// Why an entry cannot be used.
#[derive(Debug, Clone, PartialEq)]
#[non_exhaustive]
pub enum EntryTrouble {
    /// The text does not read as a number of its kind.
    Unreadable(Unreadable),
    /// The unit kept with it is none of its kind's.
    Unit {
        /// The unit as it stands in the file.
        unit: String,
    },
    /// The text and the value kept beside it differ: the file was changed by
    /// hand.
    Disagrees {
        /// What the text reads as, in the base unit.
        text: f64,
        /// The value kept.
        kept: f64,
    },
    /// Outside the range that makes sense for this field.
    OutOfRange {
        /// The value entered, in the base unit.
        value: f64,
        /// Least value taken.
        least: f64,
        /// Greatest value taken.
        most: f64,
    },
    /// A whole number is needed.
    NotWhole {
        /// The value entered.
        value: f64,
    },
}

impl Entry {
    /// What a person typed into a field whose unit button showed `unit`.
    #[must_use]
    pub fn typed(text: &str, unit: &str, kind: Kind, mark: DecimalMark) -> Entry {
        let reading = kind
            .unit(unit)
            .and_then(|u| read(text, kind, u, mark).ok().flatten());
        Entry {
            text: text.to_owned(),
            unit: unit.to_owned(),
            value: reading.map(|r| r.value),
            plus_minus: reading.and_then(|r| r.plus_minus),
        }
    }

    /// A value set by the program on the user's word (a proposal taken, a
    /// pipe chosen): printed shortly in `system`'s unit, and read back.
    #[must_use]
    pub fn set(value: f64, kind: Kind, system: UnitSystem) -> Entry {
        let unit = kind.default_unit(system);
        let text = format!("{}", round_to(unit.from_base(value), 4));
        Entry::typed(&text, unit.symbol, kind, DecimalMark::Point)
    }

    /// Whether nothing was entered.
    #[must_use]
    pub fn is_empty(&self) -> bool {
        self.text.trim().is_empty()
    }

    /// Whether there is nothing to keep, not even a unit chosen: left out of
    /// the file.
    #[must_use]
    pub fn is_untouched(&self) -> bool {
        *self == Entry::default()
    }

    /// The value in the base unit, if there is one.
    ///
    /// # Errors
    /// [`EntryTrouble`] where the text cannot be used, or the value kept with
    /// it is another.
    pub fn usable(&self, kind: Kind) -> Result<Option<f64>, EntryTrouble> {
        if self.is_empty() {
            return Ok(None);
        }
        let unit = self.unit_of(kind)?;
        let point = read(&self.text, kind, unit, DecimalMark::Point);
        let Some(kept) = self.value else {
            return match point {
                Ok(Some(r)) => Ok(Some(r.value)),
                Ok(None) => Ok(None),
                Err(why) => Err(EntryTrouble::Unreadable(why)),
            };
        };
        let says = |r: &Reading| (r.value - kept).abs() <= 1e-9 * kept.abs().max(1e-9);
        if let Ok(Some(r)) = &point
            && says(r)
        {
            return Ok(Some(r.value));
        }
        let comma = read(&self.text, kind, unit, DecimalMark::Comma);
        match (comma, point) {
            (Ok(Some(r)), _) if says(&r) => Ok(Some(r.value)),
            (Ok(Some(r)), _) | (_, Ok(Some(r))) => Err(EntryTrouble::Disagrees {
                text: r.value,
                kept,
            }),
            (Err(why), _) | (_, Err(why)) => Err(EntryTrouble::Unreadable(why)),
            (Ok(None), Ok(None)) => Ok(None),
        }
    }

    fn unit_of(&self, kind: Kind) -> Result<crate::units::Unit, EntryTrouble> {
        if self.unit.is_empty() {
            return Ok(kind.default_unit(UnitSystem::Metric));
        }
        kind.unit(&self.unit).ok_or_else(|| EntryTrouble::Unit {
            unit: self.unit.clone(),
        })
    }
}

/// `x` to `digits` significant figures, for a text a person will read.
fn round_to(x: f64, digits: usize) -> f64 {
    format!("{x:.*e}", digits.saturating_sub(1))
        .parse()
        .unwrap_or(x)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_text_is_kept_whether_usable_or_not() {
        let e = Entry::typed("38 L", "L/s", Kind::Flow, DecimalMark::Point);
        assert_eq!((e.text.as_str(), e.value), ("38 L", None));
        assert!(matches!(
            e.usable(Kind::Flow),
            Err(EntryTrouble::Unreadable(Unreadable::UnknownUnit { .. }))
        ));
        assert_eq!(Entry::default().usable(Kind::Flow), Ok(None));
    }

    #[test]
    fn a_value_read_under_either_mark_stands() {
        for mark in [DecimalMark::Point, DecimalMark::Comma] {
            let e = Entry::typed("1,234", "m", Kind::Distance, mark);
            assert_eq!(e.usable(Kind::Distance), Ok(e.value));
        }
    }

    #[test]
    fn a_value_changed_by_hand_is_not_believed() {
        let mut e = Entry::typed("38", "L/s", Kind::Flow, DecimalMark::Point);
        e.value = Some(3.8);
        assert!(matches!(
            e.usable(Kind::Flow),
            Err(EntryTrouble::Disagrees { .. })
        ));
        e.value = None;
        assert_eq!(e.usable(Kind::Flow), Ok(Some(0.038)));
        e.unit = "furlong".into();
        assert!(matches!(
            e.usable(Kind::Flow),
            Err(EntryTrouble::Unit { .. })
        ));
    }

    #[test]
    fn a_set_value_reads_short() {
        let e = Entry::set(0.062_347_89, Kind::Bore, UnitSystem::Metric);
        assert_eq!(e.text, "62.35");
    }
}
