//! Intervals of a single proportion.

use super::beta::{log_ratio, pair_at};
use super::kernel::open_unit;
use super::{DistributionError, Tails, normal_quantile};

/// Exact interval of Clopper & Pearson (1934) for `x` events among `n`, at the
/// confidence `level` in (0, 1), as (lower, upper).
///
/// Relative error below 1e-11. Errors: [`DistributionError::NotFinite`],
/// [`DistributionError::OutOfDomain`] for `n = 0`, `x > n` or a level outside
/// (0, 1), [`DistributionError::NotConverged`].
pub fn clopper_pearson(x: u64, n: u64, level: f64) -> Result<(f64, f64), DistributionError> {
    open_unit(level)?;
    if n == 0 || x > n {
        return Err(DistributionError::OutOfDomain);
    }
    let side = 0.5 * (1.0 - level);
    let (events, others) = (x as f64, (n - x) as f64);
    let lower = if x == 0 {
        0.0
    } else {
        let target = Tails { lower: side, upper: 1.0 - side };
        pair_at(log_ratio(target, events, others + 1.0)?, events, others + 1.0).0
    };
    let upper = if x == n {
        1.0
    } else {
        let target = Tails { lower: 1.0 - side, upper: side };
        pair_at(log_ratio(target, events + 1.0, others)?, events + 1.0, others).0
    };
    Ok((lower, upper))
}

/// Score interval of Wilson (1927), without continuity correction, for `x` events
/// among `n`, at the confidence `level` in (0, 1), as (lower, upper).
///
/// Relative error below 1e-13. Errors as for [`clopper_pearson`].
pub fn wilson(x: u64, n: u64, level: f64) -> Result<(f64, f64), DistributionError> {
    open_unit(level)?;
    if n == 0 || x > n {
        return Err(DistributionError::OutOfDomain);
    }
    let z = normal_quantile(0.5 * (1.0 - level))?;
    let square = z * z;
    let (size, events, others) = (n as f64, x as f64, (n - x) as f64);
    let half = z * (events * others / size + 0.25 * square).sqrt();
    // The limits p solve (x − np)² = z² n p (1 − p). The larger root of p, and of
    // 1 − p, is a plain sum; the smaller follows from the product of the two.
    let upper = (events + 0.5 * square + half) / (size + square);
    let lower = events * events / (size * (size + square) * upper);
    Ok((lower, if x == n { 1.0 } else { upper }))
}
