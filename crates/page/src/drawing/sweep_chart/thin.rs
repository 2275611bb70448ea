//! Which points are drawn in full where there are more than marks have room for.
//!
//! Pipes of all series fall on nearly one line, so a catalogue would be a worm of
//! overlapping marks. Each family in turn gives its best that still stands clear of
//! what is drawn; the rest are ticks, which say that there is a pipe and no more.

use super::super::Verdict;
use super::{SweepChart, SweepPoint};

/// How a point is drawn.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(super) enum Role {
    /// Not in the picture.
    Absent,
    /// The chosen one, in its ring.
    Chosen,
    /// A mark of its own.
    Full,
    /// A small light mark: it fails, or is beaten.
    Light,
    /// A tick: its mark would lie over another.
    Tick,
}

/// The role of each point. `clear` and `light_clear` are the pixels between the
/// middles of two marks, `ring` those around the chosen one.
pub(super) fn roles(
    chart: &SweepChart,
    pixels: &[Option<(f64, f64)>],
    (clear, light_clear, ring): (f64, f64, f64),
) -> Vec<Role> {
    let mut roles = vec![Role::Absent; chart.points.len()];
    let mut taken: Vec<((f64, f64), f64)> = Vec::new();
    let mut full: Vec<Vec<usize>> = vec![Vec::new(); chart.families.len().max(1)];
    let mut light = Vec::new();
    let mut chosen_yet = false;
    for (i, (p, at)) in chart.points.iter().zip(pixels).enumerate() {
        let Some(at) = *at else { continue };
        if p.chosen && !chosen_yet {
            chosen_yet = true;
            roles[i] = Role::Chosen;
            taken.push((at, ring));
            continue;
        }
        roles[i] = Role::Tick;
        if p.dominated && !p.chosen {
            light.push(i);
        } else {
            let last = full.len() - 1;
            full[p.family.min(last)].push(i);
        }
    }
    let mut settle = |i: usize, clear: f64, role: Role, roles: &mut Vec<Role>| {
        let Some(at) = pixels[i] else { return false };
        let is_clear = taken.iter().all(|(other, keep)| {
            let (dx, dy) = (other.0 - at.0, other.1 - at.1);
            let wanted = if *keep > clear { *keep } else { clear };
            dx * dx + dy * dy >= wanted * wanted
        });
        if is_clear {
            roles[i] = role;
            taken.push((at, 0.0));
        }
        is_clear
    };
    // The best verdict first, then the narrowest that will do: it costs least.
    let order = |a: &usize, b: &usize| {
        let (a, b) = (&chart.points[*a], &chart.points[*b]);
        rank(a)
            .cmp(&rank(b))
            .then(b.loss_share.total_cmp(&a.loss_share))
    };
    for family in &mut full {
        family.sort_by(order);
    }
    let mut queues: Vec<_> = full.into_iter().map(Vec::into_iter).collect();
    loop {
        let mut any = false;
        for queue in &mut queues {
            any |= queue
                .by_ref()
                .any(|i| settle(i, clear, Role::Full, &mut roles));
        }
        if !any {
            break;
        }
    }
    light.sort_by(order);
    for i in light {
        settle(i, light_clear, Role::Light, &mut roles);
    }
    roles
}

fn rank(p: &SweepPoint) -> u8 {
    match p.verdict {
        Verdict::Holds => 0,
        Verdict::Tight => 1,
        Verdict::Unsettled => 2,
        Verdict::Fails => 3,
    }
}
