//! What passes, what is lost, and what the arithmetic leaves over.

use super::march::March;
use super::run::Balance;

/// Sums of what passes, per unit of time step: volumes in m3/s, energies in
/// m of head times m3/s.
#[derive(Debug, Default)]
pub(super) struct Account {
    pub(super) entered: f64,
    pub(super) left: f64,
    pub(super) passed: f64,
    pub(super) work: f64,
    pub(super) jets: f64,
    pub(super) joints: f64,
    pub(super) ends: f64,
    pub(super) cavities: f64,
}

impl March<'_> {
    /// Adds up what a joint passes, loses and gives off.
    pub(super) fn count_joint(&mut self, index: usize, q: f64, before: f64, time: f64) {
        let model = self.model;
        let joint = &model.joints[index];
        let account = &mut self.account;
        // What the inertia gained, plus what its implicit step loses.
        account.joints += joint.loss * q.abs() * q * q
            + 0.5 * joint.inertia * (q * q - before * before) / self.dt;
        if index == 0 {
            account.entered += q;
            account.work += model.forebay * q;
            account.passed += q.abs();
        }
        if index == model.reaches.len() {
            account.left += q;
            account.passed += q.abs();
            let c = self.course.conductance(time);
            if c > 0.0 {
                account.jets += q.abs() * q * q / c;
            }
        } else if let Some(reach) = model.reaches.get(index) {
            account.ends += reach.half * q.abs() * q * q;
        }
    }

    /// Volume and energy of the two waves on their way: P at every node but
    /// the first of a reach, M at every node but the last.
    pub(super) fn stock(&self) -> (f64, f64) {
        let (mut volume, mut energy) = (0.0, 0.0);
        for reach in &self.model.reaches {
            let (mut sum, mut squares) = (0.0, 0.0);
            for cell in 0..reach.cells {
                let p = self.scratch.p[self.base_p + reach.first + cell + 1];
                let m = self.scratch.m[self.base_m + reach.first + cell];
                sum += p + m;
                squares += p * p + m * m;
            }
            volume += sum * self.dt / (2.0 * reach.b);
            energy += squares * self.dt / (4.0 * reach.b);
        }
        (volume, energy)
    }

    pub(super) fn voids(&self) -> f64 {
        if self.gas.is_some() {
            // The inlet's gas never moves, so it adds nothing.
            self.scratch.void.iter().sum()
        } else {
            0.0
        }
    }

    pub(super) fn balance(&self, before: (f64, f64), void_before: f64) -> Balance {
        let after = self.stock();
        let account = &self.account;
        let gained = after.0 - before.0;
        let grown = self.voids() - void_before;
        let over = (account.entered - account.left) * self.dt - gained + grown;
        let amount = account.passed * self.dt + gained.abs() + grown.abs() + after.0.abs();
        let friction: f64 = self
            .model
            .reaches
            .iter()
            .map(|reach| {
                let lost: f64 = self.scratch.lost[reach.first..=reach.first + reach.cells]
                    .iter()
                    .sum();
                lost / (2.0 * reach.b)
            })
            .sum();
        let parts = [
            account.work,
            -account.jets,
            -account.joints,
            -account.ends,
            -account.cavities,
            -friction,
            -(after.1 - before.1) / self.dt,
        ];
        let left: f64 = parts.iter().sum();
        let all: f64 = parts.iter().map(|part| part.abs()).sum::<f64>() + after.1 / self.dt;
        let share = |over: f64, of: f64| if of > 0.0 { over / of } else { 0.0 };
        Balance {
            volume: share(over, amount),
            energy: share(left, all),
        }
    }
}
