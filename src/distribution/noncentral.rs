//! The noncentral t distribution.

use super::continuous::normal_upper;
use super::kernel::{SQRT_2PI, deviance, finite, ln_normal_upper, stirling};
use super::{DistributionError, Tails};

/// Bound on the points of one quadrature.
const MOST_POINTS: usize = 20_000;

/// Density of `v = ln s`, where `df·s²` is chi-squared with `df`, over its value
/// scale: returns ln of the density. `v = 0` is the mode.
pub(super) fn ln_density_of_log_scale(v: f64, df: f64) -> f64 {
    // With a = df/2 and x = a·s²: 2·x^a e^−x/Γ(a), as a deviance from a.
    let u = (2.0 * v).exp_m1();
    let a = 0.5 * df;
    let exponent = if u > -0.4 { deviance(u, u + 1.0) } else { u - 2.0 * v };
    (2.0 * a.sqrt() / SQRT_2PI).ln() - stirling(a) - a * exponent
}

/// Noncentral t distribution with `df > 0` and noncentrality `delta`: both tails
/// at `t`.
///
/// Checked for tails above 1e-9, `|delta|` up to 40 and `df` from 1 to 1e6 (the
/// module's statement); beyond that it is bounded but not checked. Errors: [`DistributionError::NotFinite`],
/// [`DistributionError::OutOfDomain`] for `df ≤ 0`,
/// [`DistributionError::TooLarge`] where the quadrature would need more points
/// than its cap. Method: the normal tail integrated over the chi density, in
/// `ln s`, by the trapezoidal rule, which converges geometrically for integrands
/// of this kind (Trefethen & Weideman, SIAM Review 56 (2014) 385).
pub fn noncentral_student(t: f64, df: f64, delta: f64) -> Result<Tails, DistributionError> {
    finite(&[t, df, delta])?;
    if df <= 0.0 {
        return Err(DistributionError::OutOfDomain);
    }
    // T ≥ t exactly when Z ≥ t·s − δ.
    Ok(Tails { lower: integrate(-t, df, -delta)?, upper: integrate(t, df, delta)? })
}

/// ∫ Φ(δ − t·s) f(s) ds.
fn integrate(t: f64, df: f64, delta: f64) -> Result<f64, DistributionError> {
    let log = |v: f64| ln_normal_upper(t * v.exp() - delta) + ln_density_of_log_scale(v, df);
    // The integrand has one mode: both factors are log-concave in s.
    let (mut low, mut high) = (-800.0 / df.max(1.0) - 2.0, 5.0);
    for _ in 0..120 {
        let (one, two) = (low + (high - low) / 3.0, high - (high - low) / 3.0);
        if log(one) < log(two) {
            low = one;
        } else {
            high = two;
        }
        if high - low < 1e-9 {
            break;
        }
    }
    let mode = 0.5 * (low + high);
    // The rule's error is that of the integrand's Gaussian part near the mode, and
    // of the strip of half-width π/4 in which the chi density stays bounded: both
    // are below 1e-13 with these steps. The normal tail turns where t·s = δ, on the scale 1/δ of ln s.
    let turn = (t * mode.exp().max(1.0)).abs().max(delta.abs());
    let step = (0.55 / (2.0 * df + turn * turn).sqrt()).min(0.1);
    let value = |v: f64| normal_upper(t * v.exp() - delta) * ln_density_of_log_scale(v, df).exp();
    let mut sum = value(mode);
    if sum.is_nan() {
        return Err(DistributionError::NotConverged);
    }
    if sum <= 0.0 {
        return Ok(0.0);
    }
    for direction in [1.0, -1.0] {
        let mut settled = false;
        for i in 1..MOST_POINTS {
            let term = value(mode + direction * step * i as f64);
            sum += term;
            if term <= 1e-17 * sum {
                settled = true;
                break;
            }
        }
        if !settled {
            return Err(DistributionError::TooLarge);
        }
    }
    Ok((sum * step).clamp(0.0, 1.0))
}
