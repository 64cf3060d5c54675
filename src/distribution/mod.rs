//! Distribution functions: tails and quantiles with stated accuracy.
//!
//! Floor 1: knows numbers only, nothing of results. No function panics or hangs:
//! input that is not finite or out of range is an `Err`, and every loop is
//! bounded. Both tails are returned, each accurate relative to its own size,
//! because a p-value is as often read from one as from the other.
//!
//! # Accuracy
//!
//! Largest relative error over the committed tables (`tests/reference/*.csv`; truth
//! from Arb at 50 digits and more or in whole numbers, by `make.py` beside them).
//! `tests/distribution.rs` asserts the bounds on every row; "reached" is what was
//! measured when the tables were written.
//!
//! | function | region | bound, 1 to 1e-30 | reached | bound to 1e-300 | reached |
//! |---|---|---|---|---|---|
//! | [`normal`] | \|z\| ≤ 37 | 4e-15 | 2e-16 | 4e-15 | 2e-16 |
//! | [`normal_quantile`] | 1e-300 to 1 | 1e-14 | 3e-16 | 1e-14 | 3e-16 |
//! | [`student`] | df 1 to 1e6 | 1e-12 | 3e-14 | 1e-11 | 2e-13 |
//! | [`f`] | df 1 to 1e6, both | 1e-12 | 5e-14 | 1e-11 | 2e-13 |
//! | [`chi_squared`], [`gamma`] | df 1 to 1e6; a 0.05 to 1e6 | 1e-12 | 4e-14 | 1e-11 | 8e-13 |
//! | [`beta`] | a, b 0.5 to 1e6 | 2e-12 | 8e-13 | 1e-11 | 3e-12 |
//! | [`binomial`] | n ≤ 1e6 | 1e-12 | 2e-14 | 1e-11 | 4e-13 |
//! | [`poisson`] | mean ≤ 1e6 | 1e-12 | 4e-14 | 1e-11 | 6e-13 |
//! | [`hypergeometric`] | population ≤ 1e6 | 1e-12 | 6e-14 | 1e-11 | 2e-13 |
//! | [`student_quantile`] | df 1 to 1e6 | 1e-12 | 4e-13 | 1e-12 | 4e-13 |
//! | [`f_quantile`] | df 1 to 1e6, both | 1e-12 | 3e-13 | 1e-12 | 3e-13 |
//! | [`chi_squared_quantile`] | df 1 to 1e6 | 1e-12 | 5e-13 | 1e-12 | 5e-13 |
//! | [`beta_quantile`] | a, b 0.5 to 1e6 | 1e-12 | 4e-14 | 1e-12 | 4e-14 |
//! | [`fisher_exact`] | total ≤ 1e6 | 1e-12 | 4e-15 | 1e-12 | 5e-15 |
//! | [`mcnemar_exact`] | pairs ≤ 1e6 | 1e-13 to 10,000 pairs, 1e-12 beyond | 3e-14 | the same | 3e-14 |
//! | [`mann_whitney_exact`] | n1·n2 ≤ 10,000 | 1e-13 | 2e-15 | 1e-13 | 2e-15 |
//! | [`clopper_pearson`] | n ≤ 1e6, level 0.9 to 0.999 | 1e-12 | 2e-15 | | |
//! | [`wilson`] | n ≤ 1e6, level 0.9 to 0.999 | 1e-13 | 4e-16 | | |
//! | [`noncentral_student`] | df 1 to 1e6, \|δ\| ≤ 40, tails above 1e-9 | 1e-11 | 7e-14 | | |
//! | [`studentized_range`] | k ≤ 20, df 1 to 1000, upper above 1e-12, lower above 1e-10 | 1e-11 | 7e-14 | | |
//!
//! Parameters below 0.5 (less than one degree of freedom) lose up to the factor by
//! which the smaller tail at the mean falls short of one half; they do not occur in
//! manuscripts. [`beta`] is limited by its arguments: where `a + b` is 1e6, the last
//! bit of `x` is worth 1e-13 to 1e-12 of a far tail. [`f`] and [`student`] do not
//! pass through `x` near the mean and are not limited so.
//!
//! # Cost
//!
//! On one core of the build machine: 0.1 to 0.5 µs per tail up to 1,000 degrees of
//! freedom, 2 to 8 µs near the centre at 1e6; quantiles 1 to 3 µs; Fisher's test 0.03
//! to 2 µs up to totals of a few thousand, 20 µs at 1e6; noncentral t about 25 µs;
//! studentized range about 0.2 ms; Mann–Whitney 0.03 ms at 20 and 20, 28 ms at 100
//! and 100.

mod beta;
mod continuous;
mod discrete;
mod exact;
mod gamma;
mod interval;
mod kernel;
mod noncentral;
mod range;

pub use beta::{beta, beta_quantile};
pub use continuous::{f, f_quantile, normal, normal_quantile, student, student_quantile, student_two_sided};
pub use discrete::{binomial, hypergeometric, mcnemar_exact, poisson};
pub use exact::{Fisher, fisher_exact, fisher_exact_table, mann_whitney_exact};
pub use gamma::{chi_squared, chi_squared_quantile, gamma};
pub use interval::{clopper_pearson, wilson};
pub use noncentral::noncentral_student;
pub use range::studentized_range;

/// The two tails of a distribution at one point, each computed so that it is
/// accurate relative to its own size.
///
/// For a continuous distribution `lower + upper = 1`. For a discrete one both
/// include the point itself: `lower` = P(X ≤ k), `upper` = P(X ≥ k).
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Tails {
    /// P(X ≤ x).
    pub lower: f64,
    /// P(X ≥ x).
    pub upper: f64,
}

/// Bound on the relative error of every tail between 1 and 1e-30 and of every
/// quantile there, for degrees of freedom and sizes up to 1e6, unless a
/// function states a wider one. Callers widen a recomputed interval by it.
pub const RELATIVE_ERROR: f64 = 1e-10;

/// Why a distribution function has no answer.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum DistributionError {
    /// An argument is infinite or not a number.
    NotFinite,
    /// An argument lies outside the range the function is defined on.
    OutOfDomain,
    /// The method did not settle within its bound on steps.
    NotConverged,
    /// The exact method would take more work than its cap allows.
    TooLarge,
}

impl std::fmt::Display for DistributionError {
    fn fmt(&self, out: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        out.write_str(match self {
            Self::NotFinite => "an argument is infinite or not a number",
            Self::OutOfDomain => "an argument lies outside the range of the distribution",
            Self::NotConverged => "the computation did not settle within its bound on steps",
            Self::TooLarge => "the exact computation is larger than its cap allows",
        })
    }
}

impl std::error::Error for DistributionError {}
