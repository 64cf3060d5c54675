//! The kinds of check, one function each, by what they look at.

mod claims;
mod direction;
mod figures;
mod planning;
mod recomputed;
mod repeated;
mod reporting;

use super::check::Check;
use super::finding::Finding;
use super::look::Look;

/// Runs one check. Exhaustive: a new kind does not compile until it is answered here.
pub fn run(check: &Check, facts: &Look) -> Vec<Finding> {
    match check {
        Check::RecomputationDiffers { of, from } => recomputed::differs(facts, *of, from),
        Check::Outside { field, lowest, highest } => figures::outside(facts, *field, *lowest, *highest),
        Check::Order { of } => figures::order(facts, *of),
        Check::EstimateOutsideInterval {} => figures::estimate_outside_interval(facts),
        Check::SameResultDiffers {} => repeated::same_result_differs(facts),
        Check::PrintedZero {} => figures::printed_zero(facts),
        Check::ThresholdOnly { bounds } => reporting::threshold_only(facts, bounds),
        Check::Missing { what } => reporting::missing(facts, *what),
        Check::SpreadUnnamed { sign } => reporting::spread_unnamed(facts, *sign),
        Check::Claim { kinds, of, backing, per } => claims::claim(facts, kinds, of, *backing, *per),
        Check::ClaimAgainstP { says } => claims::against_p(facts, *says),
        Check::DirectionAgainstFigures {} => direction::against_figures(facts),
        Check::Unstated { what } => planning::unstated(facts, *what),
        Check::OneSidedUnexplained {} => planning::one_sided_unexplained(facts),
    }
}
