//! Small state vectors and matrices, and the two laws of motion: acceleration wandering freely, and acceleration dying away.

/// A state of `N` entries; the first one is what is measured.
pub type Vector<const N: usize> = [f64; N];
/// A square matrix, row by row.
pub type Matrix<const N: usize> = [[f64; N]; N];

/// One step of a linear law of motion: x' = f x + noise of covariance q.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Step<const N: usize> {
    pub f: Matrix<N>,
    pub q: Matrix<N>,
}

/// Position, velocity, acceleration over `step_s` seconds, driven by white-noise jerk of spectral density
/// `jerk_density` (yd²/s⁵).
///
/// f = [[1, h, h²/2], [0, 1, h], [0, 0, 1]], q = jerk_density · [[h⁵/20, h⁴/8, h³/6], [h⁴/8, h³/3, h²/2], [h³/6, h²/2, h]].
/// Source: Bar-Shalom, Li & Kirubarajan 2001, continuous white-noise jerk model.
///
/// ```
/// let s = tailchase::kinematics::state::white_jerk(2.0, 3.0);
/// assert_eq!(s.f[0], [1.0, 2.0, 2.0]);
/// assert_eq!(s.q[2][2], 6.0);
/// ```
#[inline]
pub fn white_jerk(step_s: f64, jerk_density: f64) -> Step<3> {
    let h = step_s;
    let h2 = h * h;
    let (h3, qh) = (h2 * h, jerk_density * h);
    let (pv, pa, va) = (qh * h3 / 8.0, qh * h2 / 6.0, qh * h / 2.0);
    Step {
        f: [[1.0, h, 0.5 * h2], [0.0, 1.0, h], [0.0, 0.0, 1.0]],
        q: [[qh * h2 * h2 / 20.0, pv, pa], [pv, qh * h2 / 3.0, va], [pa, va, qh]],
    }
}

/// The same with an acceleration that dies away at `decay_per_s` between pushes (Singer 1970).
///
/// f's last column is g(h) = ((e^{−βh} − 1 + βh)/β², (1 − e^{−βh})/β, e^{−βh}), q = jerk_density · ∫₀ʰ g(s) g(s)ᵀ ds, taken by
/// Gauss–Legendre quadrature on five nodes (exact to rounding for βh well below 1). `decay_per_s` must be above 0.
pub fn decaying(step_s: f64, jerk_density: f64, decay_per_s: f64) -> Step<3> {
    const NODE: [f64; 5] = [-0.906_179_845_938_664, -0.538_469_310_105_683_1, 0.0, 0.538_469_310_105_683_1, 0.906_179_845_938_664];
    const WEIGHT: [f64; 5] =
        [0.236_926_885_056_189_1, 0.478_628_670_499_366_47, 0.568_888_888_888_888_9, 0.478_628_670_499_366_47, 0.236_926_885_056_189_1];
    let b = decay_per_s;
    let response = |s: f64| {
        let lost = -(-b * s).exp_m1();
        [(b * s - lost) / (b * b), lost / b, 1.0 - lost]
    };
    let g = response(step_s);
    let mut q = [[0.0; 3]; 3];
    for (node, weight) in NODE.iter().zip(WEIGHT) {
        let r = response(0.5 * step_s * (node + 1.0));
        for i in 0..3 {
            for j in 0..3 {
                q[i][j] += 0.5 * step_s * weight * jerk_density * r[i] * r[j];
            }
        }
    }
    Step { f: [[1.0, step_s, g[0]], [0.0, 1.0, g[1]], [0.0, 0.0, g[2]]], q }
}

/// m · v.
#[inline]
pub fn apply<const N: usize>(m: &Matrix<N>, v: &Vector<N>) -> Vector<N> {
    std::array::from_fn(|i| (0..N).map(|j| m[i][j] * v[j]).sum())
}

/// a · b.
#[inline]
pub fn product<const N: usize>(a: &Matrix<N>, b: &Matrix<N>) -> Matrix<N> {
    std::array::from_fn(|i| std::array::from_fn(|j| (0..N).map(|k| a[i][k] * b[k][j]).sum()))
}

/// a · bᵀ.
#[inline]
pub fn product_transposed<const N: usize>(a: &Matrix<N>, b: &Matrix<N>) -> Matrix<N> {
    std::array::from_fn(|i| std::array::from_fn(|j| (0..N).map(|k| a[i][k] * b[j][k]).sum()))
}

/// a · s · aᵀ + c for symmetric s and c; the result is symmetric to the last bit.
#[inline]
pub fn congruence<const N: usize>(a: &Matrix<N>, s: &Matrix<N>, c: &Matrix<N>) -> Matrix<N> {
    let m = product(a, s);
    let mut out = [[0.0; N]; N];
    for i in 0..N {
        for j in 0..=i {
            let v: f64 = (0..N).map(|k| m[i][k] * a[j][k]).sum::<f64>() + c[i][j];
            out[i][j] = v;
            out[j][i] = v;
        }
    }
    out
}

/// b · s⁻¹ for a symmetric positive definite s, through its factors s = l d lᵀ; none when s is not positive definite.
#[inline]
pub fn times_inverse<const N: usize>(b: &Matrix<N>, s: &Matrix<N>) -> Option<Matrix<N>> {
    // Below the diagonal of l stand its entries, in `scaled` those of l d.
    let (mut l, mut scaled) = ([[0.0; N]; N], [[0.0; N]; N]);
    let mut inverse_d = [0.0; N];
    for i in 0..N {
        for j in 0..=i {
            let rest = s[i][j] - (0..j).map(|k| l[i][k] * scaled[j][k]).sum::<f64>();
            if i == j {
                if rest <= 0.0 || !rest.is_finite() {
                    return None;
                }
                inverse_d[i] = 1.0 / rest;
            } else {
                scaled[i][j] = rest;
                l[i][j] = rest * inverse_d[j];
            }
        }
    }
    let mut out = [[0.0; N]; N];
    for (row, target) in b.iter().zip(out.iter_mut()) {
        let mut y = [0.0; N];
        for i in 0..N {
            y[i] = row[i] - (0..i).map(|k| l[i][k] * y[k]).sum::<f64>();
        }
        for i in (0..N).rev() {
            target[i] = y[i] * inverse_d[i] - (i + 1..N).map(|k| l[k][i] * target[k]).sum::<f64>();
        }
    }
    Some(out)
}

/// f p and f p fᵀ + q for [`white_jerk`]'s step, with only the products that are not with 0 or 1.
#[inline]
pub fn through_white_jerk(p: &Matrix<3>, step_s: f64, jerk_density: f64) -> (Matrix<3>, Matrix<3>) {
    let h = step_s;
    let half = 0.5 * h * h;
    let q = white_jerk(h, jerk_density).q;
    let m: Matrix<3> =
        [std::array::from_fn(|j| p[0][j] + h * p[1][j] + half * p[2][j]), std::array::from_fn(|j| p[1][j] + h * p[2][j]), p[2]];
    let pp = m[0][0] + h * m[0][1] + half * m[0][2] + q[0][0];
    let pv = m[0][1] + h * m[0][2] + q[0][1];
    let pa = m[0][2] + q[0][2];
    let vv = m[1][1] + h * m[1][2] + q[1][1];
    let va = m[1][2] + q[1][2];
    let aa = m[2][2] + q[2][2];
    (m, [[pp, pv, pa], [pv, vv, va], [pa, va, aa]])
}
