//! The small pieces that every distribution here is built from.
//!
//! They exist because the textbook forms subtract large numbers: `ln Γ(a)` near
//! `a = 1e6` carries an absolute error of 1e-9, which would be a relative error
//! of 1e-9 in every probability. Loader (2000) writes the same densities as a
//! deviance times a slowly varying factor, and nothing cancels.

use std::f64::consts::{LN_2, PI};

use super::DistributionError;

/// ln √(2π).
pub(super) const LN_SQRT_2PI: f64 = 0.918_938_533_204_672_8;

/// √(2π).
pub(super) const SQRT_2PI: f64 = 2.506_628_274_631_000_7;

/// Refuses what is not a finite number, before anything is computed with it.
pub(super) fn finite(values: &[f64]) -> Result<(), DistributionError> {
    if values.iter().all(|value| value.is_finite()) { Ok(()) } else { Err(DistributionError::NotFinite) }
}

/// Accepts a probability strictly between 0 and 1.
pub(super) fn open_unit(p: f64) -> Result<(), DistributionError> {
    finite(&[p])?;
    if p > 0.0 && p < 1.0 { Ok(()) } else { Err(DistributionError::OutOfDomain) }
}

/// `u − ln(1 + u)` for `ratio = 1 + u`, without cancellation near `u = 0`.
///
/// Both arguments are taken because each is exact where the other is not: the
/// caller knows `u` near 0 and the ratio near 0.
pub(super) fn deviance(u: f64, ratio: f64) -> f64 {
    if u.abs() < 0.4 {
        // With v = u/(2+u), ln(1+u) = 2 artanh v and u − 2v = uv, so that the
        // leading terms cancel on paper instead of in the machine.
        let v = u / (2.0 + u);
        let square = v * v;
        let mut power = square;
        let mut sum = 0.0;
        let mut odd = 3.0;
        // |v| ≤ 1/4, so that 1/16 is won per term.
        for _ in 0..16 {
            let term = power / odd;
            sum += term;
            if term < 1e-17 * sum {
                break;
            }
            power *= square;
            odd += 2.0;
        }
        v * (u - 2.0 * sum)
    } else {
        u - ratio.ln()
    }
}

/// Stirling's correction `ln Γ(a) − (a − ½) ln a + a − ln √(2π)`, `a > 0`.
///
/// Absolute error below 1e-15 times `max(1, |ln a|)`.
pub(super) fn stirling(a: f64) -> f64 {
    if a >= 10.0 {
        // Abramowitz & Stegun 6.1.41; at 10 the first term left out is 2e-17.
        let inverse = 1.0 / a;
        let s = inverse * inverse;
        inverse
            * (1.0 / 12.0
                - s * (1.0 / 360.0
                    - s * (1.0 / 1260.0
                        - s * (1.0 / 1680.0
                            - s * (1.0 / 1188.0
                                - s * (691.0 / 360_360.0 - s * (1.0 / 156.0 - s * (3617.0 / 122_400.0))))))))
    } else {
        libm::lgamma(a) - (a - 0.5) * a.ln() + a - LN_SQRT_2PI
    }
}

/// `a·b − c·d` with one rounding error of the result instead of the products
/// (Kahan's difference of products).
pub(super) fn difference_of_products(a: f64, b: f64, c: f64, d: f64) -> f64 {
    let cd = c * d;
    let error = (-c).mul_add(d, cd);
    a.mul_add(b, -cd) + error
}

/// ln Φ(−z), the logarithm of the normal upper tail, also where the tail itself
/// underflows.
pub(super) fn ln_normal_upper(z: f64) -> f64 {
    if z < 37.0 {
        libm::erfc(z * std::f64::consts::FRAC_1_SQRT_2).ln() - LN_2
    } else {
        let s = 1.0 / (z * z);
        // Mills' ratio; at z = 37 the first term left out is 1e-9 of an exponent
        // of 700, and this branch only steers a search.
        -0.5 * z * z - z.ln() - 0.5 * (2.0 * PI).ln() + (-s * (1.0 - 3.0 * s)).ln_1p()
    }
}

/// Finds the root of an increasing or decreasing `g` by Newton steps kept inside
/// a bracket that is built on the way.
///
/// `evaluate` returns `(g, g′)`; `g` may be `±∞` where a tail underflows, and the
/// search then falls back on the bracket. At most [`MOST_STEPS`] evaluations.
pub(super) fn bracketed_root(
    start: f64,
    rising: bool,
    mut evaluate: impl FnMut(f64) -> Result<(f64, f64), DistributionError>,
) -> Result<f64, DistributionError> {
    let mut low = f64::NEG_INFINITY;
    let mut high = f64::INFINITY;
    let mut at = start;
    let mut reach = 1.0;
    let mut last_size = f64::INFINITY;
    for _ in 0..MOST_STEPS {
        let (g, slope) = evaluate(at)?;
        if g.is_nan() {
            return Err(DistributionError::NotConverged);
        }
        if g == 0.0 {
            return Ok(at);
        }
        if (g < 0.0) == rising {
            low = low.max(at);
        } else {
            high = high.min(at);
        }
        let mut next = at - g / slope;
        if !next.is_finite() || next <= low || next >= high {
            next = if low.is_finite() && high.is_finite() {
                0.5 * (low + high)
            } else if low.is_finite() {
                low + reach
            } else {
                high - reach
            };
            reach *= 2.0;
        } else if (next - at).abs() > 20.0 * reach && !(low.is_finite() && high.is_finite()) {
            // A first step from far off may overshoot by orders of magnitude.
            next = at + (20.0 * reach).copysign(next - at);
            reach *= 2.0;
        }
        let size = (next - at).abs();
        let resolution = 2.0 * f64::EPSILON * next.abs().max(f64::MIN_POSITIVE);
        if size <= resolution || high - low <= resolution {
            return Ok(next);
        }
        // Newton's steps shrink quadratically until they are rounding noise; a
        // step that no longer shrinks there is the end of what can be had.
        if size <= 1e-13 * next.abs().max(1e-3) && size >= 0.5 * last_size {
            return Ok(next);
        }
        last_size = size;
        at = next;
    }
    Err(DistributionError::NotConverged)
}

/// Bound on the evaluations of one root search. Newton needs under twenty;
/// bisection over all of `f64` needs under 150.
const MOST_STEPS: usize = 400;
