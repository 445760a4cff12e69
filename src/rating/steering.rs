//! The steering law of a player, pooled over his pursuits, and its word where the intervals allow one.

use super::measure::{Measured, PooledValue, pool_players, raw_means};
use super::roster::{ByGame, Defender};
use crate::base::normal;

/// Least difference that a fitted gain can show; own choice.
const RESOLUTION: f64 = 1e-3;

/// One player's steering law.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub struct Steering {
    /// Gain on the line rate, shrunken.
    pub n: Option<f64>,
    /// Gain on the deviation angle, 1/s, shrunken.
    pub k_per_s: Option<f64>,
    pub word: Option<&'static str>,
}

/// Steering laws in the order of the defenders, whose fitted gains are taken out of them.
pub fn steering(defenders: &mut [Defender<'_>], level: f64) -> Vec<Steering> {
    let mut pooled = |gains: for<'b> fn(&'b mut Defender<'_>) -> &'b mut ByGame| -> Vec<Option<Measured>> {
        let values: Vec<Vec<Vec<f64>>> = defenders.iter_mut().map(|d| std::mem::take(gains(d)).values).collect();
        let mut players = raw_means(&values, RESOLUTION);
        pool_players(&mut players, level);
        players
    };
    let (gain_n, gain_k) = (pooled(|d| &mut d.steer_n), pooled(|d| &mut d.steer_k_per_s));
    let z = normal::quantile(0.5 + 0.5 * level);
    gain_n
        .iter()
        .zip(&gain_k)
        .map(|(n, k)| Steering {
            n: n.and_then(|m| m.pooled).map(|p| p.value),
            k_per_s: k.and_then(|m| m.pooled).map(|p| p.value),
            word: own_interval(n, z).and_then(|n| word(n, own_interval(k, z)?)),
        })
        .collect()
}

/// The interval of his own mean, not the pooled one: a word about him must not be the others' word.
fn own_interval(measured: &Option<Measured>, z: f64) -> Option<PooledValue> {
    let m = measured.as_ref()?;
    let half = z * m.variance?.sqrt();
    Some(PooledValue { value: m.raw, low: m.raw - half, high: m.raw + half })
}

/// Leads: N above 1 (at N = 1 the bearing is not steadied at all) and K not above zero. Mixed: both at work. Runs at the man:
/// K above zero and N below 1, not above zero. None where the intervals leave it open.
fn word(n: PooledValue, k: PooledValue) -> Option<&'static str> {
    match (n.low > 0.0, k.low > 0.0) {
        (true, true) => Some("mixed"),
        (true, false) if n.low > 1.0 => Some("leads"),
        (false, true) if n.high < 1.0 => Some("runs at the man"),
        _ => None,
    }
}
