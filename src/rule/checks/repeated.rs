//! One result in several places.

use super::super::finding::Finding;
use super::super::level::{Off, Weight};
use super::super::look::Look;
use crate::query::Ground;
use crate::result::repeat::{self, Part};

/// Two places that print one result and differ in one figure. The later place is asked about.
pub fn same_result_differs(facts: &Look) -> Vec<Finding> {
    let is_table = |block: u32| facts.manuscript.blocks[block as usize].is_table();
    let found = repeat::disagreements(facts.readings, facts.results, is_table);
    let about = |d: &repeat::Disagreement| {
        let (first, second) = d.figures;
        let quote = |span| facts.shown(span);
        let (before, here) = (quote(first), quote(second));
        let (figure, shared) = match d.part {
            Part::P => ("the p-value", "the same figures"),
            Part::Estimate => ("the estimate", "the same interval and p-value"),
            Part::LowerLimit => ("the lower limit", "the same estimate, upper limit and p-value"),
            Part::UpperLimit => ("the upper limit", "the same estimate, lower limit and p-value"),
        };
        let says = format!("Printed {here} beside {shared} that stand with {before} elsewhere: {figure} differs.");
        let weight = Weight { distance: off(facts, d), ..same_result() };
        let mut f = Finding::at(second, weight, says);
        f.fills = vec![("printed", here), ("computed", before)];
        f.related.push((first, "the same result elsewhere".to_owned()));
        f.figures.push(first);
        f.results = vec![d.first, d.second];
        f
    };
    found.iter().map(about).collect()
}

/// The figures agree if both places tell of one analysis.
fn same_result() -> Weight {
    Weight { ground: Ground::IfOneMethod, ..Weight::reporting() }
}

fn off(facts: &Look, d: &repeat::Disagreement) -> Off {
    if d.part != Part::P {
        return Off::Figure;
    }
    let (a, b) = d.ranges;
    let (low, high) = if a.hi < b.lo { (a, b) } else { (b, a) };
    let factor = if low.hi > 0.0 { high.lo / low.hi } else { f64::INFINITY };
    let across_alpha = low.hi <= facts.alpha.lowest && high.lo >= facts.alpha.highest && low.hi < high.lo;
    Off::P { factor, across_alpha }
}
