//! The regularised incomplete gamma function, both tails, and its inverse; the
//! chi-squared distribution.

use super::kernel::{bracketed_root, deviance, finite, open_unit, stirling};
use super::{DistributionError, Tails, normal_quantile};

/// Bound on the steps of the series and the continued fraction.
const MOST_STEPS: usize = 200_000;

/// What one evaluation of the incomplete gamma function yields.
struct Evaluation {
    pub tails: Tails,
    /// `x^a e^−x / Γ(a)`: the derivative of the lower tail by `ln x`.
    pub slope: f64,
}

/// Regularised incomplete gamma function: `lower` = P(a, x), `upper` = Q(a, x),
/// for `x ≥ 0`, `a > 0`.
///
/// Errors: [`DistributionError::NotFinite`], [`DistributionError::OutOfDomain`],
/// [`DistributionError::NotConverged`]. Accuracy: see the module's statement.
///
/// Sources: series and continued fraction of Abramowitz & Stegun 6.5.29 and
/// 6.5.31, arranged as in DiDonato & Morris, ACM Trans. Math. Softw. 12 (1986)
/// 377; prefactor of Loader (2000).
pub fn gamma(x: f64, a: f64) -> Result<Tails, DistributionError> {
    finite(&[x, a])?;
    if x < 0.0 || a <= 0.0 {
        return Err(DistributionError::OutOfDomain);
    }
    Ok(evaluate(x, (x - a) / a, a)?.tails)
}

/// The evaluation behind [`gamma`], for arguments already checked; `excess` is
/// `x/a − 1`, which the quantile knows better than the quotient gives it.
fn evaluate(x: f64, excess: f64, a: f64) -> Result<Evaluation, DistributionError> {
    if x <= 0.0 {
        return Ok(Evaluation { tails: Tails { lower: 0.0, upper: 1.0 }, slope: 0.0 });
    }
    let slope = (a / std::f64::consts::TAU).sqrt() * (-stirling(a) - a * deviance(excess, x / a)).exp();
    if slope.is_nan() {
        return Err(DistributionError::NotConverged);
    }
    // Below the mean the lower tail is summed. The floor of one half keeps the
    // continued fraction away from small x, where it crawls.
    let tails = if x < a.max(0.5) {
        let lower = (slope * series(x, a)?).clamp(0.0, 1.0);
        Tails { lower, upper: 1.0 - lower }
    } else {
        let upper = (slope * fraction(x, a)?).clamp(0.0, 1.0);
        Tails { lower: 1.0 - upper, upper }
    };
    Ok(Evaluation { tails, slope })
}

/// P(a, x) over the prefactor: `Σ x^n / (a (a+1) … (a+n))`.
fn series(x: f64, a: f64) -> Result<f64, DistributionError> {
    let mut term = 1.0 / a;
    let mut sum = term;
    let mut at = a;
    for _ in 0..MOST_STEPS {
        at += 1.0;
        term *= x / at;
        sum += term;
        if term <= 1e-17 * sum {
            return Ok(sum);
        }
    }
    Err(DistributionError::NotConverged)
}

/// Q(a, x) over the prefactor, by the even part of Legendre's fraction.
fn fraction(x: f64, a: f64) -> Result<f64, DistributionError> {
    let mut denominator = x + 1.0 - a;
    // Convergents A/B, rescaled so that the current B is 1.
    let mut value = 1.0 / denominator;
    let (mut above, mut below) = (0.0, value);
    let mut n = 0.0;
    for _ in 0..MOST_STEPS {
        n += 1.0;
        denominator += 2.0;
        let numerator = n * (a - n);
        let scale = 1.0 / (denominator + numerator * below);
        let next = (denominator * value + numerator * above) * scale;
        if !next.is_finite() {
            return Err(DistributionError::NotConverged);
        }
        if (next - value).abs() <= 1e-16 * next.abs() {
            return Ok(next);
        }
        above = value * scale;
        below = scale;
        value = next;
    }
    Err(DistributionError::NotConverged)
}

/// `ln(x/a)` at which the tails of the gamma distribution with shape `a` are those
/// given; only the smaller one is used.
fn log_ratio(target: Tails, a: f64) -> Result<f64, DistributionError> {
    let use_lower = target.lower <= target.upper;
    let wanted = if use_lower { target.lower } else { target.upper };
    if wanted <= 0.0 {
        return Err(DistributionError::OutOfDomain);
    }
    let z = normal_quantile(wanted)?;
    let z = if use_lower { -z } else { z };
    // Wilson & Hilferty (1931): the cube root is nearly normal.
    let ninth = 1.0 / (9.0 * a);
    let root = 1.0 - ninth + z * ninth.sqrt();
    let start = if root > 0.1 {
        3.0 * root.ln()
    } else {
        // In the far lower tail P ≈ x^a / Γ(a + 1).
        (wanted.ln() + libm::lgamma(a + 1.0)) / a - a.ln()
    };
    let log_wanted = wanted.ln();
    bracketed_root(start.clamp(-700.0, 700.0), use_lower, |w| {
        let at = evaluate(a * w.exp(), w.exp_m1(), a)?;
        let (tail, slope) = if use_lower { (at.tails.lower, at.slope) } else { (at.tails.upper, -at.slope) };
        Ok((tail.ln() - log_wanted, slope / tail))
    })
}

/// Chi-squared distribution with `df > 0` (need not be whole): tails at `x ≥ 0`.
///
/// `upper` is the p-value of a chi-squared statistic. Errors, accuracy and
/// sources as for [`gamma`].
pub fn chi_squared(x: f64, df: f64) -> Result<Tails, DistributionError> {
    gamma(0.5 * x, 0.5 * df)
}

/// The value that a chi-squared variable with `df > 0` exceeds with probability
/// `upper`, 0 < `upper` < 1.
///
/// Errors and accuracy as for [`gamma`]; the root is found on the log scale in
/// the smaller tail.
pub fn chi_squared_quantile(upper: f64, df: f64) -> Result<f64, DistributionError> {
    open_unit(upper)?;
    finite(&[df])?;
    if df <= 0.0 {
        return Err(DistributionError::OutOfDomain);
    }
    let target = Tails { lower: 1.0 - upper, upper };
    let x = df * log_ratio(target, 0.5 * df)?.exp();
    if x.is_finite() { Ok(x) } else { Err(DistributionError::OutOfDomain) }
}
