//! The inner loop: nodes within a reach whose factor is constant.

/// One step of the nodes within a reach: envelope, then friction. The shift of
/// the two waves is done by moving the base of each row.
///
/// # Method
/// A node holds P and M as they arrive, D = (P - M)/2 = B Q + R Q|Q|/2 and
/// E = (P + M)/2: the trapezoidal rule for friction, second order in the step.
/// Leaving it, D is D/(1 + k|D|): the exact course of dQ/dt = -c Q|Q| over a
/// step, which never reverses a flow however coarse the grid. k is such that
/// the steady start is met exactly: k = R Q0^2/(D0 (D0 - R Q0^2)).
///
/// `grade_*` hold twice the grade; `curve` times (P - M)^2 is twice the
/// velocity head.
#[derive(Debug)]
pub(super) struct Rows<'a> {
    pub(super) p: &'a mut [f64],
    pub(super) m: &'a mut [f64],
    pub(super) high: &'a mut [f64],
    pub(super) low: &'a mut [f64],
}

/// The step without the account of energy.
#[inline(never)]
pub(super) fn step(rows: Rows<'_>, half_k: f64, curve: f64) {
    let Rows { p, m, high, low } = rows;
    let n = p.len();
    let (p, m) = (&mut p[..n], &mut m[..n]);
    let (high, low) = (&mut high[..n], &mut low[..n]);
    let quarter = 0.5 * half_k;
    for i in 0..n {
        let (a, b) = (p[i], m[i]);
        let d = a - b;
        let size = d.abs();
        let grade = (a + b) - curve * (d * d);
        let r = (d * size) * quarter / (1.0 + half_k * size);
        p[i] = a - r;
        m[i] = b + r;
        high[i] = if grade > high[i] { grade } else { high[i] };
        low[i] = if grade < low[i] { grade } else { low[i] };
    }
}

/// The step with the account of energy: `lost` sums r (2 D - r).
#[inline(never)]
pub(super) fn step_counted(rows: Rows<'_>, lost: &mut [f64], half_k: f64, curve: f64) {
    let Rows { p, m, high, low } = rows;
    let n = p.len();
    let (p, m) = (&mut p[..n], &mut m[..n]);
    let (high, low) = (&mut high[..n], &mut low[..n]);
    let lost = &mut lost[..n];
    let quarter = 0.5 * half_k;
    for i in 0..n {
        let (a, b) = (p[i], m[i]);
        let d = a - b;
        let size = d.abs();
        let grade = (a + b) - curve * (d * d);
        let r = (d * size) * quarter / (1.0 + half_k * size);
        p[i] = a - r;
        m[i] = b + r;
        high[i] = if grade > high[i] { grade } else { high[i] };
        low[i] = if grade < low[i] { grade } else { low[i] };
        lost[i] += r * (d - r);
    }
}
