//! Weighted least squares with a small dense solver: orthogonal columns (Gram & Schmidt, done twice), no pivoting surprises.

/// A column whose part outside the earlier ones is below this share of its length counts as dependent on them.
const DEPENDENT: f64 = 1e-9;

/// A fitted linear model.
#[derive(Clone, Debug, PartialEq)]
pub struct Fit {
    /// One for each column, in the unit of y over the unit of the column; 0 for a column that was left out.
    pub coefficients: Vec<f64>,
    /// False for a column left out because the earlier ones already say the same.
    pub kept: Vec<bool>,
    /// Weighted sum of squared residuals (the ridge penalty not included).
    pub residual_ss: f64,
    /// Columns kept.
    pub rank: usize,
    /// (XᵀWX + ridge)⁻¹ over the kept columns, zeros elsewhere; times the residual variance it is the coefficients' covariance.
    pub inverse: Vec<Vec<f64>>,
}

impl Fit {
    /// xᵀ (XᵀWX)⁻¹ x: the variance of a prediction in units of the residual variance.
    pub fn leverage(&self, row: &[f64]) -> f64 {
        self.inverse.iter().zip(row).map(|(line, a)| a * line.iter().zip(row).map(|(c, b)| c * b).sum::<f64>()).sum()
    }

    pub fn predict(&self, row: &[f64]) -> f64 {
        self.coefficients.iter().zip(row).map(|(c, x)| c * x).sum()
    }
}

/// Minimises Σ wᵢ (yᵢ − Σⱼ xᵢⱼ βⱼ)² + ridge Σⱼ βⱼ².
///
/// `columns[j]` holds column j, one value a row; an intercept is a column of ones that the caller adds.
/// `weights`: none for equal ones. `ridge` 0 for plain least squares; it is never raised silently.
/// No result when lengths differ, a number is not finite, a weight is negative, or there is no row.
///
/// ```
/// use tailchase::stats::least_squares;
/// let fit = least_squares(&[vec![1.0, 1.0, 1.0], vec![0.0, 1.0, 2.0]], &[1.0, 3.0, 5.0], None, 0.0).unwrap();
/// assert!((fit.coefficients[0] - 1.0).abs() < 1e-12 && (fit.coefficients[1] - 2.0).abs() < 1e-12);
/// ```
pub fn least_squares(columns: &[Vec<f64>], y: &[f64], weights: Option<&[f64]>, ridge: f64) -> Option<Fit> {
    let n = y.len();
    let is_whole = columns.iter().all(|c| c.len() == n && c.iter().all(|v| v.is_finite()))
        && y.iter().all(|v| v.is_finite())
        && weights.is_none_or(|w| w.len() == n && w.iter().all(|v| v.is_finite() && *v >= 0.0))
        && ridge.is_finite()
        && ridge >= 0.0;
    if n == 0 || !is_whole {
        return None;
    }
    let weighted = |values: &[f64]| -> Vec<f64> {
        match weights {
            Some(w) => values.iter().zip(w).map(|(v, w)| v * w.sqrt()).collect(),
            None => values.to_vec(),
        }
    };
    let p = columns.len();
    // The penalty as p more rows: √ridge on the diagonal, 0 as target.
    let extra = if ridge > 0.0 { p } else { 0 };
    let mut q: Vec<Vec<f64>> = Vec::new();
    let mut kept = vec![false; p];
    let mut r: Vec<Vec<f64>> = Vec::new();
    for (j, column) in columns.iter().enumerate() {
        let mut rest = weighted(column);
        rest.resize(n + extra, 0.0);
        if extra > 0 {
            rest[n + j] = ridge.sqrt();
        }
        let length = norm(&rest);
        let mut shares = project_out(&mut rest, &q);
        let left = norm(&rest);
        if length == 0.0 || left <= DEPENDENT * length {
            continue;
        }
        rest.iter_mut().for_each(|v| *v /= left);
        shares.push(left);
        q.push(rest);
        r.push(shares);
        kept[j] = true;
    }
    let mut target = weighted(y);
    target.resize(n + extra, 0.0);
    let rotated = project_out(&mut target, &q);
    let rank = q.len();
    let solved = back_substitute(&r, &rotated);
    let places: Vec<usize> = (0..p).filter(|j| kept[*j]).collect();
    let mut coefficients = vec![0.0; p];
    for (place, value) in places.iter().zip(&solved) {
        coefficients[*place] = *value;
    }
    let root = weights.map(|w| w.iter().map(|v| v.sqrt()).collect::<Vec<_>>());
    let residual_ss = (0..n)
        .map(|i| {
            let fitted: f64 = columns.iter().zip(&coefficients).map(|(c, b)| c[i] * b).sum();
            let residual = (y[i] - fitted) * root.as_ref().map_or(1.0, |w| w[i]);
            residual * residual
        })
        .sum();
    Some(Fit { coefficients, kept, residual_ss, rank, inverse: inverse(&r, &places, p) })
}

/// Takes the parts along the unit vectors `q` out of `v`, twice, so that rounding leaves nothing; returns the parts.
fn project_out(v: &mut [f64], q: &[Vec<f64>]) -> Vec<f64> {
    let mut shares = vec![0.0; q.len()];
    for _ in 0..2 {
        for (share, direction) in shares.iter_mut().zip(q) {
            let part: f64 = direction.iter().zip(v.iter()).map(|(a, b)| a * b).sum();
            *share += part;
            v.iter_mut().zip(direction).for_each(|(b, a)| *b -= part * a);
        }
    }
    shares
}

fn norm(v: &[f64]) -> f64 {
    v.iter().map(|x| x * x).sum::<f64>().sqrt()
}

/// Solves R x = b, R upper triangular, `r[j]` its column j down to the diagonal.
fn back_substitute(r: &[Vec<f64>], b: &[f64]) -> Vec<f64> {
    let mut x = b.to_vec();
    for j in (0..r.len()).rev() {
        x[j] /= r[j][j];
        for i in 0..j {
            x[i] -= r[j][i] * x[j];
        }
    }
    x
}

/// (RᵀR)⁻¹ spread over the places of the kept columns.
fn inverse(r: &[Vec<f64>], places: &[usize], p: usize) -> Vec<Vec<f64>> {
    let rank = r.len();
    // Columns of R⁻¹.
    let inverted: Vec<Vec<f64>> = (0..rank)
        .map(|j| {
            let mut unit = vec![0.0; rank];
            unit[j] = 1.0;
            back_substitute(r, &unit)
        })
        .collect();
    let mut out = vec![vec![0.0; p]; p];
    for (a, place_a) in places.iter().enumerate() {
        for (b, place_b) in places.iter().enumerate() {
            out[*place_a][*place_b] = inverted.iter().map(|column| column[a] * column[b]).sum();
        }
    }
    out
}
