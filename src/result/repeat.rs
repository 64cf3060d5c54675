//! The same result printed in several places, and where the places disagree.
//!
//! Results are the same when they share figures that chance does not repeat: an estimate with its interval, a p with
//! both limits, two summaries with their spreads. Words are not compared, so nothing is guessed about outcomes.

use std::collections::HashMap;

use super::{Feature, ReportedResult};
use crate::printed::{Printed, Range};
use crate::reading::{Group, PValue, Readings, Relation, Role};
use crate::text::Span;

/// Significant digits that shared figures must have together.
const FIGURES: u32 = 6;
/// The same for summaries of groups, which are often small whole numbers.
const SUMMARIES: u32 = 10;
/// Places at which one result is looked for. Text made to hurt repeats one figure without end.
const MOST: usize = 12;

/// The figure in which two places disagree.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum Part {
    P,
    Estimate,
    LowerLimit,
    UpperLimit,
}

/// Two results, by number, that agree in all figures but one.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Disagreement {
    pub first: usize,
    pub second: usize,
    pub part: Part,
    /// The figure in question at both places.
    pub figures: (Span, Span),
    /// What each stands for.
    pub ranges: (Range, Range),
}

/// What two places share.
#[derive(Clone, Debug, PartialEq, Eq, Hash)]
struct Key {
    part: Part,
    shared: Vec<Printed>,
}

/// One place at which a key was met, with the figure that the key leaves out.
#[derive(Clone, Copy)]
struct Place {
    result: usize,
    block: u32,
    sentence: u32,
    figure: Span,
    range: Range,
}

/// Finds pairs of results that agree in all figures but one. `is_table(block)` tells tables from text: rows of one table
/// are different results however alike they are.
pub fn disagreements(
    readings: &Readings,
    results: &[ReportedResult],
    is_table: impl Fn(u32) -> bool,
) -> Vec<Disagreement> {
    let mut met: HashMap<Key, Vec<Place>> = HashMap::new();
    let mut found: Vec<Disagreement> = Vec::new();
    for (number, result) in results.iter().enumerate() {
        if result.has(Feature::Unclear) {
            continue;
        }
        for (key, figure, sentence, range) in keys(readings, result) {
            let place = Place { result: number, block: figure.block, sentence, figure, range };
            let before = met.entry(key.clone()).or_default();
            let apart = |p: &&Place| p.sentence != place.sentence && !(p.block == place.block && is_table(p.block));
            let other = before.iter().filter(apart).find(|p| !p.range.meets(place.range));
            // Where one earlier place agrees, the disagreement of the others has been found before.
            let known = before.iter().filter(apart).any(|p| p.range.meets(place.range));
            if let Some(first) = other.filter(|_| !known) {
                found.push(Disagreement {
                    first: first.result,
                    second: number,
                    part: key.part,
                    figures: (first.figure, figure),
                    ranges: (first.range, range),
                });
            }
            if before.len() < MOST {
                before.push(place);
            }
        }
    }
    found.sort_by_key(|d| (d.figures.1.block, d.figures.1.start));
    found.dedup_by_key(|d| d.figures);
    found
}

/// What a result may share with another place, each with the figure that is then compared.
fn keys(readings: &Readings, result: &ReportedResult) -> Vec<(Key, Span, u32, Range)> {
    // A p for homogeneity or trend may stand in the same row.
    let p = result.p.map(|i| &readings.p[i]).filter(|p| !p.corrected && !p.shared && p.role == Role::Effect);
    let exact = p.filter(|p| p.relation == Relation::Equal).and_then(|p| p.value);
    let estimate = result.estimate.map(|i| &readings.estimates[i]);
    let interval = result.interval.map(|i| &readings.intervals[i]);
    let mut keys = Vec::new();
    let mut add = |part, shared: Vec<Printed>, least, figure: Span, sentence, range| {
        if shared.iter().map(|s| s.significant_digits()).sum::<u32>() >= least {
            keys.push((Key { part, shared }, figure, sentence, range));
        }
    };
    if let Some(i) = interval {
        if let (Some(e), Some(p)) = (estimate, p) {
            add(Part::P, vec![e.value, i.lower, i.upper], FIGURES, p.span, p.sentence, range_of(p));
        }
        if let (Some(e), Some(p)) = (estimate, exact) {
            add(Part::Estimate, vec![p, i.lower, i.upper], FIGURES, e.span, e.sentence, e.value.rounded());
            add(Part::LowerLimit, vec![p, e.value, i.upper], FIGURES, i.span, i.sentence, i.lower.rounded());
            add(Part::UpperLimit, vec![p, e.value, i.lower], FIGURES, i.span, i.sentence, i.upper.rounded());
        }
    }
    if let Some(p) = p.filter(|_| result.groups.len() >= 2) {
        let figures: Option<Vec<Vec<Printed>>> = result.groups.iter().map(|&g| summary(&readings.groups[g])).collect();
        if let Some(figures) = figures {
            add(Part::P, figures.concat(), SUMMARIES, p.span, p.sentence, range_of(p));
        }
    }
    keys
}

/// A mean or median with its spread, or a count with its total; less does not tell two results apart.
fn summary(group: &Group) -> Option<Vec<Printed>> {
    let mut figures: Vec<Printed> = Vec::new();
    match (group.mean.or(group.median), group.events) {
        (Some(centre), _) if !group.spread.is_empty() => {
            figures.push(centre);
            figures.extend(&group.spread);
        }
        (None, Some(events)) => {
            figures.push(events.printed);
            figures.push(group.total?.printed);
        }
        _ => return None,
    }
    Some(figures)
}

/// What a printed p stands for.
fn range_of(p: &PValue) -> Range {
    let Some(value) = p.value else { return Range::new(0.05, 1.0) };
    match p.relation {
        Relation::Equal => value.rounded(),
        Relation::Less | Relation::AtMost => Range::new(0.0, value.value()),
        Relation::Greater | Relation::AtLeast => Range::new(value.value(), 1.0),
        Relation::NotSignificant => Range::new(0.05, 1.0),
    }
}
