//! The regularised incomplete beta function, both tails, and its inverse.

use super::kernel::{bracketed_root, deviance, difference_of_products, finite, open_unit, stirling};
use super::{DistributionError, Tails, normal_quantile};

/// Bound on the steps of the continued fraction. It needs about the square root
/// of the larger parameter near the centre and fewer than a hundred elsewhere.
const MOST_STEPS: usize = 100_000;

/// What one evaluation of the incomplete beta function yields.
pub(super) struct Evaluation {
    pub tails: Tails,
    /// `x^a y^b / B(a, b)`: the derivative of the lower tail by the log odds.
    pub slope: f64,
}

/// Regularised incomplete beta function: `lower` = I_x(a, b), `upper` = I_y(b, a).
///
/// `x` and `y = 1 − x` are both taken from the caller, who knows each exactly
/// where subtraction would lose the other. `a, b > 0`.
///
/// Errors: [`DistributionError::NotFinite`]; [`DistributionError::OutOfDomain`]
/// if `x` or `y` is outside [0, 1], if they do not add up to 1 (within 1e-12), or
/// if `a` or `b` is not positive; [`DistributionError::NotConverged`].
///
/// Accuracy: see the module's statement. Sources: continued fraction of
/// DiDonato & Morris, ACM Trans. Math. Softw. 18 (1992) 360, with the
/// saddle-point prefactor of Loader, "Fast and accurate computation of binomial
/// probabilities" (2000).
pub fn beta(x: f64, y: f64, a: f64, b: f64) -> Result<Tails, DistributionError> {
    finite(&[x, y, a, b])?;
    if !(0.0..=1.0).contains(&x) || !(0.0..=1.0).contains(&y) || (x + y - 1.0).abs() > 1e-12 {
        return Err(DistributionError::OutOfDomain);
    }
    if a <= 0.0 || b <= 0.0 {
        return Err(DistributionError::OutOfDomain);
    }
    Ok(evaluate(x, y, a, b, difference_of_products(a, y, b, x))?.tails)
}

/// The evaluation behind [`beta`], for parameters already checked.
///
/// `lambda` is `a·y − b·x`, positive below the mean. Callers that know it better
/// than the products give it pass their own.
pub(super) fn evaluate(x: f64, y: f64, a: f64, b: f64, lambda: f64) -> Result<Evaluation, DistributionError> {
    if x <= 0.0 || y <= 0.0 {
        let lower = if x <= 0.0 { 0.0 } else { 1.0 };
        return Ok(Evaluation { tails: Tails { lower, upper: 1.0 - lower }, slope: 0.0 });
    }
    let slope = prefactor(x, y, a, b, lambda);
    let (direct, swapped) = if lambda >= 0.0 {
        (slope * fraction(x, y, a, b, lambda)?, false)
    } else {
        (slope * fraction(y, x, b, a, -lambda)?, true)
    };
    if direct.is_nan() {
        return Err(DistributionError::NotConverged);
    }
    let direct = direct.clamp(0.0, 1.0);
    let other = 1.0 - direct;
    let tails = if swapped { Tails { lower: other, upper: direct } } else { Tails { lower: direct, upper: other } };
    Ok(Evaluation { tails, slope })
}

/// `x^a y^b / B(a, b)` as a deviance from the mean (Loader 2000).
pub(super) fn prefactor(x: f64, y: f64, a: f64, b: f64, lambda: f64) -> f64 {
    let n = a + b;
    // x = (a/n)(1 + u) and y = (b/n)(1 + w); a·u + b·w = 0 on paper, which is why
    // only the deviances remain.
    let exponent = a * deviance(-lambda / a, x * (n / a)) + b * deviance(lambda / b, y * (n / b));
    let correction = stirling(n) - stirling(a) - stirling(b);
    (a / n * b / std::f64::consts::TAU).sqrt() * (correction - exponent).exp()
}

/// The continued fraction of DiDonato & Morris (1992): I_x(a, b) over the
/// prefactor, for `x` at or below the mean.
fn fraction(x: f64, y: f64, a: f64, b: f64, lambda: f64) -> Result<f64, DistributionError> {
    // Convergents A/B, rescaled so that the current B is 1.
    let mut n = 0.0;
    let mut inverse = 1.0 / (a + 1.0);
    let mut value = (a + 1.0) / (a * (lambda + 1.0));
    let (mut above, mut below) = (0.0, value);
    for _ in 0..MOST_STEPS {
        n += 1.0;
        let t = n * (b - n) * x * inverse;
        let next_inverse = 1.0 / (a + 2.0 * n + 1.0);
        let numerator = (a + n - 1.0) * (a + b + n - 1.0) * x * t * inverse;
        let denominator = n + t + (a + n) * (lambda + 1.0 + n * (1.0 + y)) * next_inverse;
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
        inverse = next_inverse;
    }
    Err(DistributionError::NotConverged)
}

/// Odds beyond which they can no longer be held as a pair of numbers.
const EXTREME_ODDS: f64 = 1e290;

/// Tails at the odds `x/y = (a/b)·ratio`, where `excess` is `ratio − 1` and `log`
/// is `ln ratio`. Near the mean `excess` is exact where `x` and `y` are not, and in
/// the far tails the logarithm still is where the odds overflow.
pub(super) fn evaluate_ratio(
    ratio: f64,
    excess: f64,
    log: f64,
    a: f64,
    b: f64,
) -> Result<Evaluation, DistributionError> {
    let odds = a / b * ratio;
    if odds.is_nan() {
        return Err(DistributionError::NotConverged);
    }
    if odds > EXTREME_ODDS {
        let upper = leading_term(-log, b, a)?;
        return Ok(Evaluation { tails: Tails { lower: 1.0 - upper, upper }, slope: b * upper });
    }
    if odds < 1.0 / EXTREME_ODDS {
        let lower = leading_term(log, a, b)?;
        return Ok(Evaluation { tails: Tails { lower, upper: 1.0 - lower }, slope: a * lower });
    }
    let (x, y) = if odds > 1.0 {
        let inverse = 1.0 / odds;
        (1.0 / (1.0 + inverse), inverse / (1.0 + inverse))
    } else {
        (odds / (1.0 + odds), 1.0 / (1.0 + odds))
    };
    // a·y − b·x = −a·y·(ratio − 1), or with x: the factor below 1 is the better.
    let lambda = if odds > 1.0 { -b * x * (excess / ratio) } else { -a * y * excess };
    evaluate(x, y, a, b, lambda)
}

/// I_x(a, b) at the odds `(a/b)·e^log`, for `x` so small that the series is its
/// first term, `x^a / (a B(a, b))`; the next is smaller by the factor `x` itself.
fn leading_term(log: f64, a: f64, b: f64) -> Result<f64, DistributionError> {
    let n = a + b;
    // x is (a/b)·e^log up to a factor 1 + x. With Stirling's form of B(a, b):
    // x^a/B = e^{a log} (n/b)^n √(ab/(2πn)) e^{δ(n) − δ(a) − δ(b)}.
    let exponent = a * log + n * (a / b).ln_1p() + stirling(n) - stirling(a) - stirling(b) - a.ln()
        + 0.5 * (a / n * b / std::f64::consts::TAU).ln();
    let value = exponent.exp();
    if value.is_nan() { Err(DistributionError::NotConverged) } else { Ok(value.min(1.0)) }
}

/// `ln((x/y)/(a/b))` at which the tails of the beta distribution are those given:
/// the log odds less those of the mean, which is the logarithm of F. Only the
/// smaller tail is used, so that nothing is lost in either.
pub(super) fn log_ratio(target: Tails, a: f64, b: f64) -> Result<f64, DistributionError> {
    let use_lower = target.lower <= target.upper;
    let wanted = if use_lower { target.lower } else { target.upper };
    if wanted <= 0.0 {
        return Err(DistributionError::OutOfDomain);
    }
    let z = normal_quantile(wanted)?;
    // The log odds of a beta variable are nearly normal about ln(a/b).
    let spread = z * (1.0 / a + 1.0 / b).sqrt();
    let start = if use_lower { -spread } else { spread };
    let log_wanted = wanted.ln();
    bracketed_root(start.clamp(-700.0, 700.0), use_lower, |w| {
        let at = evaluate_ratio(w.exp(), w.exp_m1(), w, a, b)?;
        let (tail, slope) = if use_lower { (at.tails.lower, at.slope) } else { (at.tails.upper, -at.slope) };
        Ok((tail.ln() - log_wanted, slope / tail))
    })
}

/// The pair `(x, 1 − x)` whose odds are `(a/b)·e^log`.
pub(super) fn pair_at(log: f64, a: f64, b: f64) -> (f64, f64) {
    if log > 0.0 {
        let inverse = b / a * (-log).exp();
        (1.0 / (1.0 + inverse), inverse / (1.0 + inverse))
    } else {
        let odds = a / b * log.exp();
        (odds / (1.0 + odds), 1.0 / (1.0 + odds))
    }
}

/// The `x` below which the beta distribution with parameters `a, b > 0` has
/// probability `lower`, 0 < `lower` < 1.
///
/// Errors and accuracy as for [`beta`]; an `x` below the smallest `f64` comes out as
/// 0. The root is found on the log-odds scale
/// in the smaller tail.
pub fn beta_quantile(lower: f64, a: f64, b: f64) -> Result<f64, DistributionError> {
    open_unit(lower)?;
    finite(&[a, b])?;
    if a <= 0.0 || b <= 0.0 {
        return Err(DistributionError::OutOfDomain);
    }
    let target = Tails { lower, upper: 1.0 - lower };
    let x = pair_at(log_ratio(target, a, b)?, a, b).0;
    // Shapes hundreds of powers of ten apart leave nothing between 0 and 1 to tell.
    if x.is_finite() { Ok(x) } else { Err(DistributionError::OutOfDomain) }
}
