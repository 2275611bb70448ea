//! Where air collects in the pipe, and where water stays in it.
//!
//! Placement after AWWA Manual M51 (from memory): a vent at each high point,
//! and where the pipe turns down so that it rises less or falls more, because
//! bubbles carried that far can be carried no further. How great a turn is
//! stated: fall per length of pipe below the station less that above it. M51
//! also asks for vents on very long even runs and behind the inlet gate; the
//! second is a caution of every line.

use crate::book::Id;
use crate::figure::{CloneGap, Figure};
use crate::resolve::Resolved;
use crate::resolve::profile::StationAt;
use hydraulics::quantity::PipeLength;

/// Where the rule for placing vents comes from.
pub const SOURCE: &str = "placement after AWWA Manual M51 (from memory)";

/// Levels nearer than this are one level, m.
const LEVEL_M: f64 = 1e-6;

/// Why air collects at a place.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Collects {
    /// The pipe rises to it and falls from it.
    HighPoint,
    /// The pipe turns down there.
    Steepens {
        /// Fall per length of pipe below it less that above it.
        by: f64,
    },
}

/// A place where air collects: a vent is needed.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Vent {
    /// The station.
    pub station: Id,
    /// Where it is.
    pub at: PipeLength,
    /// Why.
    pub why: Collects,
}

/// A low point between two high ones: water stays in it, and silt settles. A
/// drain is needed.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Drain {
    /// The station.
    pub station: Id,
    /// Where it is.
    pub at: PipeLength,
}

/// Places that need a vent, and places that need a drain.
#[derive(Debug, Clone, PartialEq)]
pub struct Relief {
    /// Down the line.
    pub vents: Figure<Vec<Vent>>,
    /// Down the line, the foot left out: the jets drain it.
    pub drains: Figure<Vec<Drain>>,
}

/// Vents and drains of a line.
#[must_use]
pub fn relief(found: &Resolved) -> Relief {
    Relief {
        vents: found
            .profile
            .whole()
            .and_then(|stations| Ok(vents(stations, found.air_slope_change.clone()?))),
        drains: found.profile.whole().map(drains),
    }
}

/// Whether a leg falls, rises, or is level, within what is surveyed.
fn fall(a: &StationAt, b: &StationAt) -> f64 {
    let fall = (a.level - b.level).m();
    if fall.abs() <= LEVEL_M { 0.0 } else { fall }
}

fn vents(stations: &[StationAt], limit: f64) -> Vec<Vent> {
    let mut vents = Vec::new();
    let mut rising = false;
    for trio in stations.windows(3) {
        let [a, b, c] = trio else { continue };
        let (above, below) = (fall(a, b), fall(b, c));
        // Over a level top the air is carried to its lower end.
        rising = above < 0.0 || (above == 0.0 && rising);
        let by = below / (c.chainage - b.chainage).m() - above / (b.chainage - a.chainage).m();
        let why = if rising && below == 0.0 {
            continue;
        } else if rising && below > 0.0 {
            Collects::HighPoint
        } else if by >= limit {
            Collects::Steepens { by }
        } else {
            continue;
        };
        vents.push(Vent {
            station: b.id,
            at: b.chainage,
            why,
        });
    }
    vents
}

fn drains(stations: &[StationAt]) -> Vec<Drain> {
    let mut drains = Vec::new();
    // Where the last fall ended.
    let mut low: Option<&StationAt> = None;
    for pair in stations.windows(2) {
        let [a, b] = pair else { continue };
        let leg = fall(a, b);
        if leg > 0.0 {
            low = Some(b);
        } else if leg < 0.0
            && let Some(at) = low.take()
        {
            drains.push(Drain {
                station: at.id,
                at: at.chainage,
            });
        }
    }
    drains
}

impl Relief {
    /// The stations that need a vent, high points first.
    #[must_use]
    pub fn vent_stations(&self) -> (Vec<Id>, Vec<Id>) {
        let all = self.vents.clone_gap().map_or(&[][..], |v| &v[..]);
        let (high, steep): (Vec<&Vent>, Vec<&Vent>) =
            all.iter().partition(|v| v.why == Collects::HighPoint);
        let ids = |vents: Vec<&Vent>| vents.into_iter().map(|v| v.station).collect();
        (ids(high), ids(steep))
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use hydraulics::quantity::{HorizontalDistance, Level};

    /// Stations 10 m of pipe apart on these levels.
    fn line(levels: &[f64]) -> Vec<StationAt> {
        let mut at = -10.0;
        (1..)
            .zip(levels)
            .map(|(id, level)| {
                at += 10.0;
                StationAt {
                    id,
                    name: String::new(),
                    chainage: PipeLength::from_m(at),
                    horizontal: HorizontalDistance::from_m(at),
                    level: Level::from_m(*level),
                }
            })
            .collect()
    }

    fn vented(levels: &[f64]) -> Vec<(Id, bool)> {
        vents(&line(levels), 0.1)
            .iter()
            .map(|v| (v.station, v.why == Collects::HighPoint))
            .collect()
    }

    fn drained(levels: &[f64]) -> Vec<Id> {
        drains(&line(levels)).iter().map(|d| d.station).collect()
    }

    #[test]
    fn a_hump_needs_a_vent_on_top_and_a_drain_before_it() {
        let hump = [100.0, 95.0, 97.0, 90.0];
        assert_eq!(vented(&hump), [(3, true)]);
        assert_eq!(drained(&hump), [2]);
    }

    #[test]
    fn a_level_top_is_vented_at_its_lower_end_and_a_level_bottom_drained_once() {
        let top = [100.0, 97.0, 98.0, 98.0, 98.0, 90.0];
        assert_eq!(vented(&top), [(5, true)]);
        assert_eq!(drained(&[100.0, 95.0, 95.0, 96.0, 90.0]), [2]);
    }

    #[test]
    fn only_a_turn_downward_of_the_stated_share_collects_air() {
        // 5 % to 16 % steepens by 11 points; to 14 % by 9; 16 % to 5 % eases.
        assert_eq!(vented(&[100.0, 99.5, 97.9]), [(2, false)]);
        assert_eq!(vented(&[100.0, 99.5, 98.1]), []);
        assert_eq!(vented(&[100.0, 98.4, 97.9]), []);
        // A rise that eases is a turn downward too.
        assert_eq!(vented(&[100.0, 102.0, 102.5]), [(2, false)]);
    }

    #[test]
    fn an_even_fall_needs_neither() {
        let even = [100.0, 95.0, 90.0, 85.0];
        assert_eq!(vented(&even), []);
        assert!(drained(&even).is_empty());
    }
}
