//! Partial pooling and circular statistics against published tables.

use serde::Deserialize;
use std::collections::BTreeMap;
use tailchase::stats::{Circular, Pooled, TauMethod, TauPosterior, pool, pool_at};

fn fixture<T: for<'a> Deserialize<'a>>(name: &str) -> T {
    let path = format!("{}/fixtures/published/{name}", env!("CARGO_MANIFEST_DIR"));
    toml::from_str(&std::fs::read_to_string(&path).unwrap()).unwrap_or_else(|e| panic!("{path}: {e}"))
}

#[derive(Deserialize)]
struct PoolingFile {
    tolerance: BTreeMap<String, f64>,
    data: BTreeMap<String, DataSet>,
    row: Vec<PoolingRow>,
}

#[derive(Deserialize)]
#[serde(deny_unknown_fields)]
struct DataSet {
    #[allow(dead_code)]
    source: String,
    effect: Option<String>,
    y: Option<Vec<f64>>,
    v: Option<Vec<f64>>,
    s: Option<Vec<f64>>,
    treated: Option<Vec<f64>>,
    treated_events: Option<Vec<f64>>,
    control: Option<Vec<f64>>,
    control_events: Option<Vec<f64>>,
    hits: Option<Vec<f64>>,
    trials: Option<f64>,
    later: Option<Vec<f64>>,
}

#[derive(Deserialize, Debug)]
struct PoolingRow {
    data: String,
    method: String,
    quantity: String,
    expected: OneOrMany,
    tolerance: String,
    #[allow(dead_code)]
    origin: String,
    #[allow(dead_code)]
    branch: String,
}

#[derive(Deserialize, Debug)]
#[serde(untagged)]
enum OneOrMany {
    One(f64),
    Many(Vec<f64>),
}

impl DataSet {
    /// y and v, from whatever the set gives.
    fn effects(&self) -> (Vec<f64>, Vec<f64>) {
        match self.effect.as_deref() {
            None => {
                let v = self.v.clone().or_else(|| self.s.as_ref().map(|s| s.iter().map(|s| s * s).collect()));
                (self.y.clone().unwrap(), v.unwrap())
            }
            Some(kind @ ("log_odds_ratio" | "log_risk_ratio")) => {
                let tables = [&self.treated_events, &self.treated, &self.control_events, &self.control].map(|c| c.clone().unwrap());
                (0..tables[0].len())
                    .map(|i| {
                        let [a, n1, c, n2] = [tables[0][i], tables[1][i], tables[2][i], tables[3][i]];
                        let (b, d) = (n1 - a, n2 - c);
                        if kind == "log_odds_ratio" {
                            ((a * d / (b * c)).ln(), 1.0 / a + 1.0 / b + 1.0 / c + 1.0 / d)
                        } else {
                            ((a / n1 / (c / n2)).ln(), 1.0 / a - 1.0 / n1 + 1.0 / c - 1.0 / n2)
                        }
                    })
                    .unzip()
            }
            Some("proportion") => {
                let n = self.trials.unwrap();
                let y: Vec<f64> = self.hits.iter().flatten().map(|h| h / n).collect();
                let mean = y.iter().sum::<f64>() / y.len() as f64;
                let v = vec![mean * (1.0 - mean) / n; y.len()];
                (y, v)
            }
            Some("arcsine") => {
                let n = self.trials.unwrap();
                let y: Vec<f64> = self.hits.iter().flatten().map(|h| arcsine(h / n, n)).collect();
                let v = vec![1.0; y.len()];
                (y, v)
            }
            Some(other) => panic!("no such effect: {other}"),
        }
    }

    /// The later truth on the scale of y.
    fn truth(&self) -> Vec<f64> {
        let later = self.later.clone().unwrap();
        if self.effect.as_deref() == Some("arcsine") { later.iter().map(|p| arcsine(*p, self.trials.unwrap())).collect() } else { later }
    }
}

fn arcsine(share: f64, n: f64) -> f64 {
    n.sqrt() * (2.0 * share - 1.0).asin()
}

fn pooled(method: &str, y: &[f64], v: &[f64]) -> Pooled {
    let by = |m| pool(y, v, m).unwrap();
    match method {
        "dl" => by(TauMethod::DerSimonianLaird),
        "he" => by(TauMethod::Hedges),
        "ml" => by(TauMethod::MaximumLikelihood),
        "reml" => by(TauMethod::Reml),
        "pm" => by(TauMethod::PauleMandel),
        "em" => by(TauMethod::EfronMorris),
        "fixed" | "flat" | "raw" => pool_at(y, v, 0.0).unwrap(),
        given => pool_at(y, v, given.strip_prefix("tau=").unwrap().parse::<f64>().unwrap().powi(2)).unwrap(),
    }
}

fn squared_error(a: &[f64], b: &[f64]) -> f64 {
    a.iter().zip(b).map(|(a, b)| (a - b).powi(2)).sum()
}

/// Places of the values from the largest down, counted from 1.
fn order_down(values: &[f64]) -> Vec<f64> {
    let mut order: Vec<usize> = (0..values.len()).collect();
    order.sort_by(|a, b| values[*b].total_cmp(&values[*a]));
    order.into_iter().map(|i| (i + 1) as f64).collect()
}

fn quantity(row: &PoolingRow, data: &DataSet) -> Vec<f64> {
    let (y, v) = data.effects();
    let p = pooled(&row.method, &y, &v);
    let z = tailchase::base::normal::quantile(0.975);
    let shrunken: Vec<f64> = p.units.iter().map(|u| u.value).collect();
    let flat = || TauPosterior::flat(&y, &v).unwrap();
    let units = || y.iter().zip(&v).map(|(y, v)| flat().unit(*y, *v)).collect::<Vec<_>>();
    match (row.method.as_str(), row.quantity.as_str()) {
        ("flat", "tau_mean") => vec![flat().tau_mean()],
        ("flat", "tau_median") => vec![flat().tau_quantile(0.5)],
        ("flat", "mean") => vec![flat().mean().0],
        ("flat", "sd") => vec![flat().mean().1],
        ("flat", "unit_mean") => units().iter().map(|u| u.0).collect(),
        ("flat", "unit_sd") => units().iter().map(|u| u.1).collect(),
        ("raw", "order_down_first") => order_down(&y)[..2].to_vec(),
        (_, "order_down") => order_down(&shrunken),
        (_, "tau2") => vec![p.tau2],
        (_, "tau") => vec![p.tau2.sqrt()],
        (_, "mean") => vec![p.mean],
        (_, "se") => vec![p.se],
        (_, "z") => vec![p.mean / p.se],
        (_, "q") => vec![p.q],
        (_, "i2") => vec![p.i2],
        (_, "mean_low") => vec![p.mean - z * p.se],
        (_, "mean_high") => vec![p.mean + z * p.se],
        (_, "shrunken") => shrunken,
        (_, "shrunken_low") => p.units.iter().map(|u| u.value - z * u.variance.sqrt()).collect(),
        (_, "weight_of_first") => vec![p.units[0].weight],
        (_, "pull_of_first") => vec![1.0 - p.units[0].weight],
        (_, "scatter") => vec![(p.tau2 + v[0]) * (y.len() - 3) as f64],
        (_, "squared_error_raw") => vec![squared_error(&y, &data.truth())],
        (_, "squared_error_shrunken") => vec![squared_error(&shrunken, &data.truth())],
        (_, "error_ratio") => vec![squared_error(&y, &data.truth()) / squared_error(&shrunken, &data.truth())],
        (_, "back_transformed") => shrunken.iter().map(|x| 0.5 * (1.0 + (x / data.trials.unwrap().sqrt()).sin())).collect(),
        other => panic!("no such quantity: {other:?}"),
    }
}

#[test]
fn published_pooling() {
    let file: PoolingFile = fixture("pooling.toml");
    let mut failures = Vec::new();
    for row in &file.row {
        let found = quantity(row, &file.data[&row.data]);
        let expected = match &row.expected {
            OneOrMany::One(v) => vec![*v],
            OneOrMany::Many(v) => v.clone(),
        };
        let tolerance = file.tolerance[&row.tolerance];
        let is_met = found.len() == expected.len() && found.iter().zip(&expected).all(|(f, e)| (f - e).abs() <= tolerance);
        if !is_met {
            failures.push(format!("{row:?}\n  found {found:?}"));
        }
    }
    assert!(failures.is_empty(), "{}", failures.join("\n"));
    assert_eq!(file.row.len(), 157);
}

#[derive(Deserialize)]
struct CircularFile {
    row: Vec<CircularRow>,
}

#[derive(Deserialize, Debug)]
struct CircularRow {
    name: String,
    deg: Vec<f64>,
    mean_deg: f64,
    resultant: f64,
    sd_deg: f64,
    angular_deviation_deg: f64,
    kappa: f64,
    kappa_corrected: Option<f64>,
    printed: Vec<PrintedCircular>,
}

#[derive(Deserialize, Debug)]
struct PrintedCircular {
    quantity: String,
    value: f64,
    tolerance: f64,
}

#[test]
fn published_circular() {
    let file: CircularFile = fixture("circular.toml");
    let mut checks = 0;
    for row in &file.row {
        let c = Circular::of(&row.deg.iter().map(|d| d.to_radians()).collect::<Vec<_>>()).unwrap();
        let mean_deg = c.mean_rad.unwrap().to_degrees().rem_euclid(360.0);
        let found = BTreeMap::from([
            ("mean_deg", mean_deg),
            ("resultant", c.resultant),
            ("sd_deg", c.sd_rad().unwrap().to_degrees()),
            ("angular_deviation_deg", c.angular_deviation_rad().to_degrees()),
            ("kappa", c.kappa().unwrap()),
        ]);
        let expected = [row.mean_deg, row.resultant, row.sd_deg, row.angular_deviation_deg, row.kappa];
        for (name, value) in ["mean_deg", "resultant", "sd_deg", "angular_deviation_deg", "kappa"].into_iter().zip(expected) {
            // 1e-8, for values above one relative to them: they are given to ten digits or fewer.
            assert!((found[name] - value).abs() <= 1e-8 * value.max(1.0), "{}: {name} {} against {value}", row.name, found[name]);
            checks += 1;
        }
        for p in &row.printed {
            assert!((found[p.quantity.as_str()] - p.value).abs() <= p.tolerance, "{}: {p:?} found {found:?}", row.name);
            checks += 1;
        }
        match row.kappa_corrected {
            Some(value) => assert!((c.kappa_corrected().unwrap() - value).abs() < 1e-6, "{row:?}"),
            None if c.n > 15 => assert_eq!(c.kappa_corrected(), c.kappa()),
            None => assert!(c.kappa_corrected().unwrap() < c.kappa().unwrap()),
        }
        checks += 1;
    }
    assert_eq!((file.row.len(), checks), (5, 37));
}
