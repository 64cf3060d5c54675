//! Normal, Student and F distributions.

use std::f64::consts::FRAC_1_SQRT_2;

use super::beta::{evaluate_ratio, log_ratio};
use super::kernel::{finite, open_unit};
use super::{DistributionError, Tails};

/// Standard normal distribution: both tails at `z`.
///
/// Any `z`; infinite `z` gives 0 and 1, a NaN gives NaN. Source: `libm::erfc`
/// (FreeBSD msun); the argument's rounding is corrected to first order.
#[must_use]
pub fn normal(z: f64) -> Tails {
    Tails { lower: normal_upper(-z), upper: normal_upper(z) }
}

/// The upper tail of the standard normal distribution.
pub(super) fn normal_upper(z: f64) -> f64 {
    let h = z * FRAC_1_SQRT_2;
    let tail = 0.5 * libm::erfc(h);
    if z > 1.0 && z < 37.5 {
        // h is z/√2 rounded; in the far tail that rounding is worth z² ulps. The
        // low part of 1/√2 is 1/√2 − FRAC_1_SQRT_2.
        const LOW: f64 = -4.833_646_656_726_457e-17;
        let error = z.mul_add(FRAC_1_SQRT_2, -h) + z * LOW;
        // d ln erfc(h)/dh = −2h (1 + 1/(2h²) − …); two terms are ample for a
        // correction of 1e-13.
        let slope = (2.0 / std::f64::consts::PI.sqrt()) * (-h * h).exp() / (2.0 * tail);
        return tail * (1.0 - slope * error);
    }
    tail
}

/// The `z` whose upper tail is `upper`, 0 < `upper` < 1.
///
/// Errors: [`DistributionError::NotFinite`], [`DistributionError::OutOfDomain`].
/// Source: `statrs` 0.19 (inverse erfc), measured at 2e-16 down to 1e-300.
pub fn normal_quantile(upper: f64) -> Result<f64, DistributionError> {
    open_unit(upper)?;
    Ok(std::f64::consts::SQRT_2 * statrs::function::erf::erfc_inv(2.0 * upper))
}

/// Student's t distribution with `df > 0` (need not be whole): both tails at `t`.
///
/// Errors: [`DistributionError::NotFinite`], [`DistributionError::OutOfDomain`]
/// for `df ≤ 0`, [`DistributionError::NotConverged`]. Accuracy: see the module's
/// statement. Source: the incomplete beta function (Abramowitz & Stegun 26.7.1),
/// see [`super::beta`].
pub fn student(t: f64, df: f64) -> Result<Tails, DistributionError> {
    let two_sided = student_two_sided(t, df)?;
    let small = 0.5 * two_sided;
    let large = 1.0 - small;
    Ok(if t >= 0.0 { Tails { lower: large, upper: small } } else { Tails { lower: small, upper: large } })
}

/// Two-sided p-value of Student's `t` with `df > 0`: P(|T| ≥ |t|).
///
/// Errors, accuracy and source as for [`student`].
pub fn student_two_sided(t: f64, df: f64) -> Result<f64, DistributionError> {
    finite(&[t, df])?;
    if df <= 0.0 {
        return Err(DistributionError::OutOfDomain);
    }
    // t² is F with 1 and df degrees of freedom; t² − 1 as a product keeps what
    // squaring near t = 1 would round away.
    let t = t.abs();
    let excess = (t - 1.0) * (t + 1.0);
    let at = evaluate_ratio(t * t, excess, 2.0 * t.ln(), 0.5, 0.5 * df)?;
    Ok(at.tails.upper)
}

/// F distribution with `df1, df2 > 0` (need not be whole): both tails at `x ≥ 0`.
///
/// `upper` is the p-value of an F statistic. Errors: as for [`student`], and
/// [`DistributionError::OutOfDomain`] for `x < 0`. Source: the incomplete beta
/// function (Abramowitz & Stegun 26.6.2), see [`super::beta`].
pub fn f(x: f64, df1: f64, df2: f64) -> Result<Tails, DistributionError> {
    finite(&[x, df1, df2])?;
    if x < 0.0 || df1 <= 0.0 || df2 <= 0.0 {
        return Err(DistributionError::OutOfDomain);
    }
    Ok(evaluate_ratio(x, x - 1.0, x.ln(), 0.5 * df1, 0.5 * df2)?.tails)
}

/// The `t` that Student's t with `df > 0` exceeds with probability `upper`,
/// 0 < `upper` < 1.
///
/// Errors and accuracy as for [`student`]; infinite only where `t` would exceed
/// the largest `f64`, which is an [`DistributionError::OutOfDomain`].
pub fn student_quantile(upper: f64, df: f64) -> Result<f64, DistributionError> {
    open_unit(upper)?;
    finite(&[df])?;
    if df <= 0.0 {
        return Err(DistributionError::OutOfDomain);
    }
    if upper == 0.5 {
        return Ok(0.0);
    }
    // For upper > 1/2 the reflection 1 − upper is exact.
    let small = upper.min(1.0 - upper);
    let target = Tails { lower: 1.0 - 2.0 * small, upper: 2.0 * small };
    let t = (0.5 * log_ratio(target, 0.5, 0.5 * df)?).exp();
    if !t.is_finite() {
        return Err(DistributionError::OutOfDomain);
    }
    Ok(if upper < 0.5 { t } else { -t })
}

/// The value that F with `df1, df2 > 0` exceeds with probability `upper`,
/// 0 < `upper` < 1.
///
/// Errors and accuracy as for [`f`].
pub fn f_quantile(upper: f64, df1: f64, df2: f64) -> Result<f64, DistributionError> {
    open_unit(upper)?;
    finite(&[df1, df2])?;
    if df1 <= 0.0 || df2 <= 0.0 {
        return Err(DistributionError::OutOfDomain);
    }
    let target = Tails { lower: 1.0 - upper, upper };
    let x = log_ratio(target, 0.5 * df1, 0.5 * df2)?.exp();
    if x.is_finite() { Ok(x) } else { Err(DistributionError::OutOfDomain) }
}
