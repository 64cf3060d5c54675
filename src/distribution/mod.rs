//! Distribution functions: tails and quantiles with stated accuracy.

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
