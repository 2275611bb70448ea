//! The inner loop: nodes within a reach whose factor is constant.

/// Largest k D of the start up to which D/(1 + k D) is taken as
/// D (1 - k D + (k D)^2), without a division: at ten times the flow of the start
/// the two still differ by less than 0.3 % of the friction.
pub(super) const MILD: f64 = 0.005;

/// How strong friction is in one cell.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct Friction {
    /// Half of k, 1/m.
    pub(super) half_k: f64,
    /// Whether k D of the start is at most [`MILD`].
    pub(super) mild: bool,
}

/// The rows of the nodes strictly within a reach.
#[derive(Debug)]
pub(super) struct Rows<'a> {
    pub(super) p: &'a mut [f64],
    pub(super) m: &'a mut [f64],
    /// Twice the highest grade.
    pub(super) high: &'a mut [f64],
    /// Twice the lowest grade.
    pub(super) low: &'a mut [f64],
}

/// One step of the nodes within a reach: envelope, then friction. The shift of
/// the two waves is done by moving the base of each row.
///
/// `curve` times (P - M)^2 is twice the velocity head. `lost`, if there, sums
/// r (2 D - r), the energy friction takes.
///
/// # Method
/// A node holds P and M as they arrive, D = (P - M)/2 = B Q + R Q|Q|/2 and
/// E = (P + M)/2: the trapezoidal rule for friction, second order in the step.
/// Leaving it, D is D/(1 + k|D|): the exact course of dQ/dt = -c Q|Q| over a
/// step, which never reverses a flow however coarse the grid. k is such that
/// the steady start is met exactly: with r what friction takes of D in a cell,
/// r(D0) = R Q0^2.
pub(super) fn step(rows: Rows<'_>, lost: Option<&mut [f64]>, friction: Friction, curve: f64) {
    let (k, quarter) = (friction.half_k, 0.5 * friction.half_k);
    match (friction.mild, lost) {
        (true, None) => plain(rows, curve, |d, size| {
            (d * size) * (quarter - quarter * k * size)
        }),
        (false, None) => plain(rows, curve, |d, size| {
            (d * size) * quarter / (1.0 + k * size)
        }),
        (true, Some(lost)) => counted(rows, lost, curve, |d, size| {
            (d * size) * (quarter - quarter * k * size)
        }),
        (false, Some(lost)) => counted(rows, lost, curve, |d, size| {
            (d * size) * quarter / (1.0 + k * size)
        }),
    }
}

/// The loop without the account of energy.
fn plain(rows: Rows<'_>, curve: f64, taken: impl Fn(f64, f64) -> f64) {
    let Rows { p, m, high, low } = rows;
    let n = p.len();
    let (p, m) = (&mut p[..n], &mut m[..n]);
    let (high, low) = (&mut high[..n], &mut low[..n]);
    for i in 0..n {
        let (a, b) = (p[i], m[i]);
        let d = a - b;
        let grade = (a + b) - curve * (d * d);
        let r = taken(d, d.abs());
        p[i] = a - r;
        m[i] = b + r;
        high[i] = if grade > high[i] { grade } else { high[i] };
        low[i] = if grade < low[i] { grade } else { low[i] };
    }
}

/// The loop with it.
fn counted(rows: Rows<'_>, lost: &mut [f64], curve: f64, taken: impl Fn(f64, f64) -> f64) {
    let Rows { p, m, high, low } = rows;
    let n = p.len();
    let (p, m) = (&mut p[..n], &mut m[..n]);
    let (high, low) = (&mut high[..n], &mut low[..n]);
    let lost = &mut lost[..n];
    for i in 0..n {
        let (a, b) = (p[i], m[i]);
        let d = a - b;
        let grade = (a + b) - curve * (d * d);
        let r = taken(d, d.abs());
        p[i] = a - r;
        m[i] = b + r;
        high[i] = if grade > high[i] { grade } else { high[i] };
        low[i] = if grade < low[i] { grade } else { low[i] };
        lost[i] += r * (d - r);
    }
}
