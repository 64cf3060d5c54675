//! The estimate of one row, with its interval.

use super::super::lexicon::Classes;
use super::super::sentence::SentenceView;
use super::super::{Estimate, Figure, Inference, IntervalReading, Measure, Origin, Readings, Scale};
use super::cell::{self, Form};
use super::{Setting, Table};
use crate::layout::{ColumnRole, Row};
use crate::printed::Printed;

/// Appends the estimate and interval of a row. `counts` tells that the row's groups are counts.
pub(super) fn read(table: &Table, row: &Row, setting: &Setting, counts: bool, readings: &mut Readings) {
    for index in row.cells.clone().filter(|&i| *table.role_of(i) == ColumnRole::Estimate) {
        let Some(header) = table.layout.columns.get(table.grid.cells[index].column as usize).and_then(|c| c.header)
        else {
            continue;
        };
        let (view, head) = (table.view(index), table.view(header));
        let Some(read) = cell::read(&view) else { continue };
        let percent_sign = (0..view.len()).any(|i| view.sign(i, '%'));
        let (value, limits) = match read.form {
            Form::Pair { centre, lower, upper } => (centre, Some((lower, upper))),
            Form::Single { value, .. } => (value, None),
            _ => continue,
        };
        let Some((mut measure, mut scale)) = measure(&head, counts) else { continue };
        if counts && measure == Measure::MeanDifference {
            measure = Measure::RiskDifference;
        }
        let negative = |p: Printed| p.value() <= 0.0;
        if scale == Scale::Ratio && (negative(value.printed) || limits.is_some_and(|(a, b)| negative(a) || negative(b)))
        {
            // A header for several measures, of which this is another.
            (measure, scale) = (Measure::Other, Scale::Unknown);
        }
        // A difference of shares beyond 1 is in percentage points, printed or not.
        let points = measure == Measure::RiskDifference && value.printed.value().abs() > 1.0;
        let percent = percent_sign || points || measure == Measure::PercentDifference;
        let adjusted = (0..head.len()).any(|i| {
            head.any(i, &["adjusted", "adj", "ancova"]) || matches!(head.word(i), "aOR" | "aHR" | "aRR" | "AOR" | "AHR")
        }) && !(0..head.len()).any(|i| head.any(i, &["unadjusted"]));
        let span = view.span(value.first, value.last);
        readings.estimates.push(Estimate {
            span,
            sentence: view.id,
            measure,
            scale,
            value: value.printed,
            se: None,
            percent,
            adjusted,
        });
        let Some((a, b)) = limits else { continue };
        let level = level(&head);
        let ci = level.is_some() || (0..head.len()).any(|i| head.is(i, Classes::CI) || head.is(i, Classes::CONFIDENCE));
        if !ci && !setting.around.ci {
            continue;
        }
        let reversed = a.value() > b.value();
        let (lower, upper) = if reversed { (b, a) } else { (a, b) };
        readings.intervals.push(IntervalReading {
            span: view.span(read.first, read.last),
            sentence: view.id,
            level,
            lower,
            upper,
            percent,
            credible: (0..head.len()).any(|i| head.any(i, &["credible", "cri"])),
            reversed,
            estimate: Some((value.printed, span)),
        });
    }
}

/// `95` of `95% CI` in a header.
fn level(head: &SentenceView) -> Option<Figure> {
    (0..head.len()).find_map(|i| {
        let printed = head.number(i).filter(|p: &Printed| (80.0..100.0).contains(&p.value()))?;
        let named = (i + 1..i + 4).any(|k| head.is(k, Classes::CI) || head.is(k, Classes::CONFIDENCE))
            || i > 0 && head.is(i - 1, Classes::CI);
        named.then(|| Figure { printed, origin: Origin::Inferred(Inference::Header, head.span(i, i)) })
    })
}

/// The measure that a header names, and its scale. "Odds ratio or mean difference" is the ratio for counts.
fn measure(head: &SentenceView, counts: bool) -> Option<(Measure, Scale)> {
    let two = |a: &[&str], b: &[&str]| (0..head.len()).any(|i| head.any(i, a) && head.any(i + 1, b));
    let one = |words: &[&str]| (0..head.len()).any(|i| words.contains(&head.word(i)));
    let ratio: &[&str] = &["ratio", "ratios"];
    let difference: &[&str] = &["difference", "differences"];
    let has = |words: &[&str]| (0..head.len()).any(|i| head.any(i, words));
    let differs = has(difference) || one(&["MD", "RD", "ARD"]);
    let divides = has(ratio) || one(&["HR", "OR", "RR", "IRR"]) || has(&["relative"]) && has(&["risk"]);
    if differs && divides && !counts {
        return Some((Measure::MeanDifference, Scale::Difference));
    }
    Some(if one(&["HR", "aHR", "AHR"]) || two(&["hazard", "hazards"], ratio) {
        (Measure::HazardRatio, Scale::Ratio)
    } else if one(&["OR", "aOR", "AOR"]) || two(&["odds"], ratio) {
        (Measure::OddsRatio, Scale::Ratio)
    } else if one(&["IRR"]) || two(&["rate"], ratio) {
        (Measure::RateRatio, Scale::Ratio)
    } else if one(&["RR", "aRR"]) || two(&["risk"], ratio) || two(&["relative"], &["risk", "risks"]) {
        (Measure::RiskRatio, Scale::Ratio)
    } else if one(&["RD", "ARD"]) || two(&["risk"], difference) {
        (Measure::RiskDifference, Scale::Difference)
    } else if one(&["SMD"]) || has(&["standardized", "standardised"]) && has(difference) {
        (Measure::StandardizedDifference, Scale::Difference)
    } else if has(&["effect"]) && has(&["size"]) {
        (Measure::StandardizedDifference, Scale::Unknown)
    } else if has(difference) && (two(&["percent", "percentage", "relative"], difference)) {
        (Measure::PercentDifference, Scale::Difference)
    } else if has(difference) || one(&["MD"]) {
        (Measure::MeanDifference, Scale::Difference)
    } else if has(ratio) {
        (Measure::Other, Scale::Ratio)
    } else {
        return None;
    })
}
