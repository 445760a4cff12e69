//! Standard errors of means whose observations come in clusters (the pursuits of one game share a day, a pitch, an opponent).
//!
//! A cluster-robust variance from three games is itself mostly noise, and with one game there is none. So it is pulled
//! towards what all units together say, as moderated variances are in the literature (Smyth 2004, with a fixed prior):
//!
//! ```text
//! v        = (d₀ v_model + d v_robust) / (d₀ + d),   d = clusters − 1
//! v_model  = σ_c² Σ m_g²/n² + σ_w²/n                 (nested analysis of variance, pooled over all units)
//! v_robust = G/(G − 1) Σ_g (Σ_{j∈g} (y_j − ȳ))²/n²   (Liang & Zeger 1986)
//! ```
//!
//! A unit with one cluster (d = 0) gets v_model, and two equal values do not make a unit certain.

/// Degrees of freedom that the pooled variance counts for; own choice.
pub const PRIOR_DF: f64 = 10.0;

/// A unit's mean with its moderated, clustered variance.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Clustered {
    pub n: usize,
    pub clusters: usize,
    pub mean: f64,
    /// None when nothing at all is known about the scatter (one observation in all).
    pub variance: Option<f64>,
}

/// Cluster-robust variance of the mean of all values, in the square of their unit.
///
/// `clusters`: the values, cluster by cluster; empty clusters are passed over. No result below two clusters.
/// Source: Liang & Zeger, Biometrika 73 (1986), with the factor G/(G − 1).
///
/// ```
/// use tailchase::stats::cluster_variance;
/// // One value a cluster: the plain s²/n.
/// assert_eq!(cluster_variance(&[vec![1.0], vec![3.0]]), Some(1.0));
/// assert_eq!(cluster_variance(&[vec![1.0, 3.0]]), None);
/// ```
pub fn cluster_variance(clusters: &[Vec<f64>]) -> Option<f64> {
    let n: usize = clusters.iter().map(Vec::len).sum();
    let filled = clusters.iter().filter(|c| !c.is_empty()).count();
    if filled < 2 {
        return None;
    }
    let mean = mean_of(clusters);
    let squares: f64 = clusters.iter().map(|c| c.iter().map(|y| y - mean).sum::<f64>().powi(2)).sum();
    let g = filled as f64;
    Some(g / (g - 1.0) * squares / (n as f64).powi(2))
}

/// Means of many units with moderated, clustered variances.
///
/// `units[i][g]`: the values of unit i in its cluster g. The result has one entry a unit, none for a unit without a value.
/// `resolution`: the smallest difference that the measure can show; each variance is at least its square over n, so that
/// equal values never make a unit certain.
/// Assumes finite values.
pub fn clustered_means(units: &[Vec<Vec<f64>>], resolution: f64) -> Vec<Option<Clustered>> {
    let components = Components::of(units);
    units
        .iter()
        .map(|clusters| {
            let n: usize = clusters.iter().map(Vec::len).sum();
            if n == 0 {
                return None;
            }
            let filled = clusters.iter().filter(|c| !c.is_empty()).count();
            let variance = components.map(|c| {
                let model = c.variance_of_mean(clusters);
                let df = (filled - 1) as f64;
                let moderated = cluster_variance(clusters).map_or(model, |robust| (PRIOR_DF * model + df * robust) / (PRIOR_DF + df));
                moderated.max(resolution * resolution / n as f64)
            });
            Some(Clustered { n, clusters: filled, mean: mean_of(clusters), variance })
        })
        .collect()
}

fn mean_of(clusters: &[Vec<f64>]) -> f64 {
    let n: usize = clusters.iter().map(Vec::len).sum();
    clusters.iter().flatten().sum::<f64>() / n as f64
}

/// Share of σ_w²/n below which a pooled variance of a mean is not believed, however negative σ_c² comes out.
const LEAST_SHARE: f64 = 0.5;

/// Variance between the clusters of a unit, and within a cluster, pooled over all units. `between` may come out negative; it
/// is kept so, for a cut at zero would make every variance too large on average, and τ² too small.
#[derive(Clone, Copy, Debug, PartialEq)]
struct Components {
    between: f64,
    within: f64,
}

impl Components {
    /// Analysis-of-variance estimates for an unbalanced nested design (Searle 1971). Where a level has no degrees of
    /// freedom the next one takes its place: one value a cluster, then all scatter within a unit counts as within; one
    /// value a unit, then all scatter counts as within, which leaves nothing between units and pools them completely.
    fn of(units: &[Vec<Vec<f64>>]) -> Option<Components> {
        let (mut values, mut cells, mut filled_units) = (0_usize, 0_usize, 0_usize);
        let (mut scatter_within, mut scatter_between, mut overlap) = (0.0, 0.0, 0.0);
        for clusters in units {
            let n: usize = clusters.iter().map(Vec::len).sum();
            if n == 0 {
                continue;
            }
            filled_units += 1;
            values += n;
            let unit_mean = mean_of(clusters);
            for cluster in clusters.iter().filter(|c| !c.is_empty()) {
                let m = cluster.len() as f64;
                let mean = cluster.iter().sum::<f64>() / m;
                cells += 1;
                overlap += m * m / n as f64;
                scatter_between += m * (mean - unit_mean).powi(2);
                scatter_within += cluster.iter().map(|y| (y - mean).powi(2)).sum::<f64>();
            }
        }
        let within_df = (values - cells) as f64;
        let between_df = (cells - filled_units) as f64;
        if within_df > 0.0 {
            let within = scatter_within / within_df;
            let spare = values as f64 - overlap;
            let between = if between_df > 0.0 && spare > 0.0 { (scatter_between - within * between_df) / spare } else { 0.0 };
            Some(Components { between, within })
        } else if between_df > 0.0 {
            Some(Components { between: 0.0, within: scatter_between / between_df })
        } else if values > 1 {
            let all: Vec<f64> = units.iter().flatten().flatten().copied().collect();
            let mean = all.iter().sum::<f64>() / values as f64;
            Some(Components { between: 0.0, within: all.iter().map(|y| (y - mean).powi(2)).sum::<f64>() / (values - 1) as f64 })
        } else {
            None
        }
    }

    fn variance_of_mean(&self, clusters: &[Vec<f64>]) -> f64 {
        let n = clusters.iter().map(Vec::len).sum::<usize>() as f64;
        let squares: f64 = clusters.iter().map(|c| (c.len() * c.len()) as f64).sum();
        (self.between * squares / (n * n) + self.within / n).max(LEAST_SHARE * self.within / n)
    }
}
