//! The kinds of check, one function each, by what they look at.

mod claims;
mod copied;
mod denominators;
mod direction;
mod figures;
mod planning;
mod recomputed;
mod repeated;
mod reporting;
mod shifted;
mod skewed;
mod sums;

use super::check::Check;
use super::finding::Finding;
use super::look::Look;
use std::collections::HashMap;

/// Runs one check. Exhaustive: a new kind does not compile until it is answered here.
pub fn run(check: &Check, facts: &Look) -> Vec<Finding> {
    match check {
        Check::RecomputationDiffers { of, from } => gathered(facts, recomputed::differs(facts, *of, from)),
        Check::Outside { field, lowest, highest } => {
            gathered(facts, figures::outside(facts, *field, *lowest, *highest))
        }
        Check::Order { of } => gathered(facts, figures::order(facts, *of)),
        Check::EstimateOutsideInterval {} => gathered(facts, figures::estimate_outside_interval(facts)),
        Check::SameResultDiffers {} => repeated::same_result_differs(facts),
        Check::OtherTotal {} => denominators::other_total(facts),
        Check::LowMeans {} => skewed::low_means(facts),
        Check::SameEstimate {} => gathered(facts, copied::same_estimate(facts)),
        Check::ColumnShifted {} => shifted::columns(facts),
        Check::ArmsAgainstWhole {} => sums::arms_against_whole(facts),
        Check::PrintedZero {} => gathered(facts, figures::printed_zero(facts)),
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

/// Many rows of one table (or figures of one paragraph) that stand alike have one cause: one question, at the first of
/// them, with the others beside it.
fn gathered(facts: &Look, findings: Vec<Finding>) -> Vec<Finding> {
    let mut alike: HashMap<u32, usize> = HashMap::new();
    for f in &findings {
        *alike.entry(f.at[0].block).or_default() += 1;
    }
    let mut first: HashMap<u32, usize> = HashMap::new();
    let mut kept: Vec<Finding> = Vec::new();
    for f in findings {
        let (at, count) = (f.at[0], alike[&f.at[0].block]);
        let (many, whole, part) =
            if facts.in_table(at) { (4, "rows of this table", "row") } else { (3, "in this paragraph", "place") };
        if count < many {
            kept.push(f);
            continue;
        }
        if let Some(&k) = first.get(&at.block) {
            kept[k].related.push((at, format!("another such {part}")));
            kept[k].figures.push(at);
            kept[k].results.extend(f.results);
            continue;
        }
        first.insert(at.block, kept.len());
        let says = format!("{} {} more {whole} stand likewise.", f.says, count - 1);
        kept.push(Finding { says, ..f });
    }
    kept
}
