//! Directions have no smallest and no largest: their mean, spread and concentration are taken on the circle.

use super::root::falling_root;
use crate::base::wrap_rad;

/// Sample size up to which the concentration is corrected for bias.
const SMALL_SAMPLE: usize = 15;
/// Concentration beyond which the asymptotic series of the Bessel ratio is exact to rounding.
const LARGE_KAPPA: f64 = 700.0;
/// Length of the mean vector below which a sample has no direction.
const NO_DIRECTION: f64 = 1e-12;

/// The mean vector of a sample of directions.
///
/// Angles in radians. Source: Mardia & Jupp, *Directional Statistics* (2000), chapters 2 and 5.
///
/// ```
/// use tailchase::stats::Circular;
/// let c = Circular::of(&[(-10.0_f64).to_radians(), 20_f64.to_radians(), 350_f64.to_radians()]).unwrap();
/// assert!(c.mean_rad.unwrap().to_degrees().abs() < 0.2); // never near 120
/// ```
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Circular {
    pub n: usize,
    /// In (−π, π]; none when the directions cancel out.
    pub mean_rad: Option<f64>,
    /// R̄, the length of the mean vector, 0..1.
    pub resultant: f64,
}

impl Circular {
    /// No result for an empty sample or an angle that is not finite.
    pub fn of(angles_rad: &[f64]) -> Option<Circular> {
        if angles_rad.is_empty() || !angles_rad.iter().all(|a| a.is_finite()) {
            return None;
        }
        let (mut east, mut north) = (crate::base::Sum::default(), crate::base::Sum::default());
        for angle_rad in angles_rad {
            let (sine, cosine) = angle_rad.sin_cos();
            east.add(cosine);
            north.add(sine);
        }
        let n = angles_rad.len();
        let resultant = (east.value().hypot(north.value()) / n as f64).min(1.0);
        let mean_rad = (resultant > NO_DIRECTION).then(|| wrap_rad(north.value().atan2(east.value())));
        Some(Circular { n, mean_rad, resultant })
    }

    /// Circular standard deviation √(−2 ln R̄), radians; none when the directions cancel out.
    pub fn sd_rad(&self) -> Option<f64> {
        (self.resultant > NO_DIRECTION).then(|| (-2.0 * self.resultant.ln()).max(0.0).sqrt())
    }

    /// Angular deviation √(2 (1 − R̄)), radians.
    pub fn angular_deviation_rad(&self) -> f64 {
        (2.0 * (1.0 - self.resultant)).sqrt()
    }

    /// Concentration κ of the von Mises distribution by maximum likelihood: I₁(κ)/I₀(κ) = R̄.
    ///
    /// None when all directions are the same, for then it has no bound.
    pub fn kappa(&self) -> Option<f64> {
        if self.resultant <= NO_DIRECTION {
            return Some(0.0);
        }
        if 1.0 - self.resultant < 1e-15 {
            return None;
        }
        // κ is below 2/(1 − R̄) everywhere: the ratio is above 1 − 1/κ for κ of any size that matters.
        let high = 2.0 / (1.0 - self.resultant);
        Some(falling_root(0.0, high, |kappa| self.resultant - bessel_ratio(kappa)))
    }

    /// κ with the small-sample correction of Best & Fisher (1981), used for n ≤ 15.
    pub fn kappa_corrected(&self) -> Option<f64> {
        let kappa = self.kappa()?;
        if self.n > SMALL_SAMPLE {
            return Some(kappa);
        }
        let n = self.n as f64;
        Some(if kappa < 2.0 { (kappa - 2.0 / (n * kappa)).max(0.0) } else { (n - 1.0).powi(3) * kappa / (n.powi(3) + n) })
    }
}

/// I₁(κ)/I₀(κ), rising from 0 to 1.
///
/// Continued fraction 1/(2/κ + 1/(4/κ + 1/(6/κ + …))), walked from the far end; beyond κ = 700 the asymptotic series
/// 1 − 1/2κ − 1/8κ² − 1/8κ³ − 25/128κ⁴ − 13/32κ⁵ (from Abramowitz & Stegun 9.7.1).
pub fn bessel_ratio(kappa: f64) -> f64 {
    if kappa <= 0.0 {
        return 0.0;
    }
    if kappa > LARGE_KAPPA {
        let i = 1.0 / kappa;
        return 1.0 - i * (0.5 + i * (0.125 + i * (0.125 + i * (25.0 / 128.0 + i * 13.0 / 32.0))));
    }
    let terms = 40 + (1.5 * kappa) as usize;
    let mut tail = 0.0;
    for m in (1..=terms).rev() {
        tail = 1.0 / (2.0 * m as f64 / kappa + tail);
    }
    tail
}
