//! Savitzky–Golay weights and filter: the smoother's independent check.
//!
//! Source: Savitzky & Golay 1964, corrected by Steinier, Termonia & Deltour 1972.

/// Weights that give, from `window` evenly spaced values, the `derivative`-th derivative of their least-squares polynomial of
/// degree `degree` at place `at` (0 = first value, (window − 1)/2 = middle), for a spacing of 1.
///
/// Formed over the discrete orthogonal (Gram) polynomials by their three-term recurrence, so that only rounding parts them
/// from the exact rational weights. No result when `degree` is not below `window`.
///
/// ```
/// use tailchase::kinematics::savgol::weights;
/// let w = weights(5, 2, 0, 2.0).unwrap_or_default();
/// assert!((w[2] - 17.0 / 35.0).abs() < 1e-15);
/// ```
pub fn weights(window: usize, degree: usize, derivative: usize, at: f64) -> Option<Vec<f64>> {
    if window == 0 || degree >= window {
        return None;
    }
    let middle = (window - 1) as f64 / 2.0;
    let xs: Vec<f64> = (0..window).map(|i| i as f64 - middle).collect();
    let x0 = at - middle;
    // p: values of the current and last polynomial at the nodes; d: their derivatives 0..=derivative at x0.
    let (mut p_last, mut p) = (vec![0.0; window], vec![1.0; window]);
    let (mut d_last, mut d) = (vec![0.0; derivative + 1], vec![0.0; derivative + 1]);
    d[0] = 1.0;
    let mut norm_last = 1.0;
    let mut out = vec![0.0; window];
    for order in 0..=degree {
        let norm: f64 = p.iter().map(|v| v * v).sum();
        for (w, v) in out.iter_mut().zip(&p) {
            *w += v * d[derivative] / norm;
        }
        // P(n+1) = x P(n) − (norm(n)/norm(n−1)) P(n−1); nodes lie evenly about 0, so there is no middle term.
        let b = if order == 0 { 0.0 } else { norm / norm_last };
        let p_next: Vec<f64> = (0..window).map(|i| xs[i] * p[i] - b * p_last[i]).collect();
        let d_next: Vec<f64> =
            (0..=derivative).map(|j| x0 * d[j] + if j > 0 { j as f64 * d[j - 1] } else { 0.0 } - b * d_last[j]).collect();
        p_last = std::mem::replace(&mut p, p_next);
        d_last = std::mem::replace(&mut d, d_next);
        norm_last = norm;
    }
    Some(out)
}

/// The filter over a whole series at spacing `step`; at the ends the first and last window's polynomial is read off at each
/// place (the mode often called "interp"). No result when `window` is even or longer than the series, or `degree` too high.
pub fn filter(values: &[f64], window: usize, degree: usize, derivative: usize, step: f64) -> Option<Vec<f64>> {
    let n = values.len();
    if window.is_multiple_of(2) || window > n {
        return None;
    }
    let half = window / 2;
    let scale = step.powi(-i32::try_from(derivative).ok()?);
    let inner = weights(window, degree, derivative, half as f64)?;
    let dot = |w: &[f64], v: &[f64]| w.iter().zip(v).map(|(a, b)| a * b).sum::<f64>() * scale;
    (0..n)
        .map(|k| {
            let start = k.saturating_sub(half).min(n - window);
            let at = k - start;
            let part = &values[start..start + window];
            if at == half { Some(dot(&inner, part)) } else { Some(dot(&weights(window, degree, derivative, at as f64)?, part)) }
        })
        .collect()
}
