//! Which rows of the sweep are shown, and in what order.

use pipes::Material;
use std::cmp::Ordering;
use workbook::Measure;
use workbook::figure::Figure;
use workbook::sweep::Row;
use workbook::verdict::Verdict;

/// A column that rows can be ordered by.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub enum Column {
    /// As in the catalogue.
    Pipe,
    /// Bore.
    Bore,
    /// Velocity.
    Velocity,
    /// Head lost.
    Loss,
    /// The same as a share of gross head.
    LossShare,
    /// Net head.
    NetHead,
    /// Power in the jets.
    Power,
    /// Standing pressure.
    Standing,
    /// Quick surge estimate.
    Quick,
    /// Share of class used.
    Share,
    /// Collapse: vacuum over what the wall stands.
    Collapse,
    /// Verdict.
    Verdict,
}

/// How many of [`COLUMNS`] a phone shows; the others follow in a second line.
pub const NARROW: usize = 5;

/// Every column, in the order of the table: the verdict beside the name, then
/// what is chosen by, so that a phone shows it without moving sideways.
pub const COLUMNS: [Column; 12] = [
    Column::Pipe,
    Column::Verdict,
    Column::Bore,
    Column::LossShare,
    Column::Share,
    Column::Velocity,
    Column::Loss,
    Column::NetHead,
    Column::Power,
    Column::Standing,
    Column::Quick,
    Column::Collapse,
];

/// What is shown.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Filter {
    /// Of this material; none for all.
    pub material: Option<Material>,
    /// Only those that neither fail nor lose more than the cap.
    pub fit_only: bool,
    /// Ordered by this column.
    pub by: Column,
    /// From the greatest down.
    pub down: bool,
}

impl Default for Filter {
    fn default() -> Filter {
        Filter {
            material: None,
            fit_only: true,
            by: Column::Bore,
            down: false,
        }
    }
}

impl Filter {
    /// The same ordered by a column; a second time, the other way round.
    #[must_use]
    pub fn ordered(self, by: Column) -> Filter {
        Filter {
            down: self.by == by && !self.down,
            by,
            ..self
        }
    }
}

/// Vacuum over what the wall stands of it.
#[must_use]
pub fn collapse_share(row: &Row) -> Option<f64> {
    let figures = row.collapse.as_ref().ok()?;
    let allowed = Measure::from(figures.allowed).value;
    (allowed > 0.0).then(|| Measure::from(figures.vacuum).value / allowed)
}

/// Whether a pipe neither fails nor loses more than the cap. Where a loss is
/// not known, nothing speaks against it.
#[must_use]
pub fn is_fit(row: &Row, cap: Option<f64>) -> bool {
    let too_much = match (&row.loss_share, cap) {
        (Ok(share), Some(cap)) => *share > cap,
        _ => false,
    };
    row.verdict.verdict != Verdict::Fails && !too_much
}

/// Whether the filter takes a row, its sources apart.
fn is_asked_for(row: &Row, filter: Filter, cap: Option<f64>) -> bool {
    filter.material.is_none_or(|m| row.material == m) && (!filter.fit_only || is_fit(row, cap))
}

/// Whether a row stands back: it rests on values from memory, so it cannot
/// hold, and it is shown only where it is asked for.
fn stands_back(row: &Row, filter: Filter) -> bool {
    !row.seen && filter.fit_only && filter.material.is_none()
}

/// How many rows that the filter takes stand back, resting on values from
/// memory.
#[must_use]
pub fn held_back(rows: &[Row], filter: Filter, cap: Option<f64>, chosen: &[String]) -> usize {
    rows.iter()
        .filter(|r| is_asked_for(r, filter, cap) && stands_back(r, filter))
        .filter(|r| !chosen.contains(&r.pipe))
        .count()
}

/// Places of the rows shown, in order. Rows without the figure they are
/// ordered by come last, whichever way. What is chosen is shown though it rests
/// on values from memory.
#[must_use]
pub fn shown(rows: &[Row], filter: Filter, cap: Option<f64>, chosen: &[String]) -> Vec<usize> {
    let mut places: Vec<usize> = (0..rows.len())
        .filter(|i| {
            let row = &rows[*i];
            is_asked_for(row, filter, cap)
                && (!stands_back(row, filter) || chosen.contains(&row.pipe))
        })
        .collect();
    if filter.by == Column::Pipe {
        if filter.down {
            places.reverse();
        }
        return places;
    }
    places.sort_by(
        |a, b| match (key(&rows[*a], filter.by), key(&rows[*b], filter.by)) {
            (Some(a), Some(b)) if filter.down => b.total_cmp(&a),
            (Some(a), Some(b)) => a.total_cmp(&b),
            (Some(_), None) => Ordering::Less,
            (None, Some(_)) => Ordering::Greater,
            (None, None) => Ordering::Equal,
        },
    );
    places
}

fn key(row: &Row, by: Column) -> Option<f64> {
    fn of<T: Copy + Into<Measure>>(figure: &Figure<T>) -> Option<f64> {
        figure.as_ref().ok().map(|x| (*x).into().value)
    }
    match by {
        Column::Pipe => None,
        Column::Bore => Some(Measure::bore(row.bore).value),
        Column::Velocity => of(&row.velocity),
        Column::Loss => of(&row.loss),
        Column::LossShare => row.loss_share.as_ref().ok().copied(),
        Column::NetHead => of(&row.net_head),
        Column::Power => of(&row.power),
        Column::Standing => of(&row.standing),
        Column::Quick => of(&row.quick_rise),
        Column::Share => row.share.as_ref().ok().copied(),
        Column::Collapse => collapse_share(row),
        Column::Verdict => Some(match row.verdict.verdict {
            Verdict::Holds => 0.0,
            Verdict::Tight => 1.0,
            Verdict::Unsettled => 2.0,
            Verdict::Fails => 3.0,
        }),
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use workbook::demo::demo;
    use workbook::sweep::Sweep;

    fn rows() -> Vec<Row> {
        let mut sweep = Sweep::new(&demo("k"));
        let total = sweep.total();
        sweep.advance(total)
    }

    #[test]
    fn only_fit_pipes_of_the_material_are_shown_in_order() {
        let rows = rows();
        let filter = Filter {
            material: Some(Material::Pe100),
            by: Column::LossShare,
            ..Filter::default()
        };
        let places = shown(&rows, filter, Some(0.1), &[]);
        assert!(!places.is_empty());
        for pair in places.windows(2) {
            let [a, b] = pair else { continue };
            assert!(rows[*a].loss_share.as_ref().unwrap() <= rows[*b].loss_share.as_ref().unwrap());
        }
        for i in &places {
            assert_eq!(rows[*i].material, Material::Pe100);
            assert!(*rows[*i].loss_share.as_ref().unwrap() <= 0.1);
            assert_ne!(rows[*i].verdict.verdict, Verdict::Fails);
        }
        let all = Filter {
            fit_only: false,
            ..filter
        };
        assert!(shown(&rows, all, Some(0.1), &[]).len() > places.len());
    }

    #[test]
    fn values_from_memory_stand_back_until_asked_for() {
        let rows = rows();
        let filter = Filter::default();
        let unseen = |places: &[usize]| places.iter().filter(|i| !rows[**i].seen).count();
        let plain = shown(&rows, filter, None, &[]);
        assert_eq!(unseen(&plain), 0);
        let back = held_back(&rows, filter, None, &[]);
        assert!(back > 0 && !plain.is_empty());
        let one = rows
            .iter()
            .find(|r| !r.seen && is_fit(r, None))
            .map(|r| vec![r.pipe.clone()])
            .unwrap();
        assert_eq!(unseen(&shown(&rows, filter, None, &one)), 1);
        assert_eq!(held_back(&rows, filter, None, &one), back - 1);
        let grp = Filter {
            material: Some(Material::Grp),
            ..filter
        };
        assert!(unseen(&shown(&rows, grp, None, &[])) > 0);
        assert_eq!(held_back(&rows, grp, None, &[]), 0);
    }

    #[test]
    fn rows_without_the_figure_come_last_either_way() {
        let rows = rows();
        for down in [false, true] {
            let filter = Filter {
                fit_only: false,
                by: Column::NetHead,
                down,
                ..Filter::default()
            };
            let places = shown(&rows, filter, None, &[]);
            let first_gap = places
                .iter()
                .position(|i| rows[*i].net_head.is_err())
                .unwrap();
            assert!(
                places[first_gap..]
                    .iter()
                    .all(|i| rows[*i].net_head.is_err())
            );
        }
    }

    #[test]
    fn a_second_tap_turns_the_order_round() {
        let filter = Filter::default().ordered(Column::Loss);
        assert!(!filter.down);
        assert!(filter.ordered(Column::Loss).down);
        assert!(!filter.ordered(Column::Loss).ordered(Column::Bore).down);
        let rows = rows();
        let mut up = shown(
            &rows,
            Filter {
                by: Column::Pipe,
                ..Filter::default()
            },
            None,
            &[],
        );
        let down = shown(
            &rows,
            Filter {
                by: Column::Pipe,
                down: true,
                ..Filter::default()
            },
            None,
            &[],
        );
        up.reverse();
        assert_eq!(up, down);
    }
}
