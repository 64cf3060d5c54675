//! The estimate of one row, with its interval.

use super::super::lexicon::Classes;
use super::super::sentence::SentenceView;
use super::super::{Estimate, Figure, Inference, IntervalReading, Measure, Readings, Scale};
use super::cell::{self, At, Form};
use super::{Setting, Table};
use crate::layout::{ColumnRole, Part, Row};
use crate::printed::Printed;
use crate::text::Span;

/// Appends the estimates and intervals of a row. `counts` tells that the row's groups are counts.
///
/// `whole_row` tells that its cells are estimates whatever their columns are.
pub(super) fn read(
    table: &Table,
    row: &Row,
    setting: &Setting,
    counts: bool,
    whole_row: bool,
    readings: &mut Readings,
) {
    // The last estimate with its column, for an interval in cells of its own.
    let mut last: Option<(usize, Estimate)> = None;
    for index in row.cells.clone() {
        let mut role = table.role_of(index);
        if whole_row && (role.summarises() || matches!(role, ColumnRole::Other | ColumnRole::Size)) {
            role = &ColumnRole::Estimate;
        }
        if !matches!(role, ColumnRole::Estimate | ColumnRole::Interval | ColumnRole::Lower | ColumnRole::Part(Part::Ci))
        {
            continue;
        }
        let view = table.view(index);
        if view.is_empty() {
            continue;
        }
        let column = table.grid.cells[index].column as usize;
        let heads: Vec<SentenceView> = table.heads(column).collect();
        match role {
            ColumnRole::Estimate => {
                let beside = Beside {
                    labels: row.labels.iter().chain(&row.section).map(|&l| table.view(l)).collect(),
                    counts,
                    ci: setting.around.ci || setting.columns.ci,
                    error: table.error_beside(index),
                    heads,
                };
                let mut reads = cell::read(&view);
                if reads.is_empty() {
                    reads.extend(cell::read_first(&view));
                }
                if reads.is_empty() {
                    // An interval in a column headed for both, as in the second line of a cell.
                    if let (Some(pair), true) = (cell::limits(&view), says_ci(&beside.heads)) {
                        push_interval(&view, pair, &beside.heads, None, readings);
                    }
                    continue;
                }
                for read in &reads {
                    if let Some(e) = estimate(&view, read, &beside, readings) {
                        last = Some((column, e));
                    }
                }
            }
            ColumnRole::Interval | ColumnRole::Part(_) => {
                let near = last.take().filter(|(k, _)| table.same_bundle(*k, column)).map(|(_, e)| e);
                // The head may stand over the estimate alone.
                let all: Vec<SentenceView> = if says_ci(&heads) {
                    heads
                } else {
                    heads.into_iter().chain(table.heads(column.saturating_sub(1))).collect()
                };
                if let Some(pair) = cell::limits(&view) {
                    push_interval(&view, pair, &all, near.as_ref(), readings);
                }
            }
            _ => {
                let near = last.take().filter(|(k, _)| table.same_bundle(*k, column)).map(|(_, e)| e);
                let upper = (index + 1..row.cells.end.min(index + 3)).find(|&i| *table.role_of(i) == ColumnRole::Upper);
                let Some(upper) = upper.map(|i| table.view(i)) else { continue };
                let (Some(a), Some(b)) = (only_number(&view), only_number(&upper)) else { continue };
                let span = Span { end: upper.span(b.first, b.last).end, ..view.span(a.first, a.last) };
                add_interval(&view, span, (a.printed, b.printed), &heads, near.as_ref(), readings);
            }
        }
    }
}

/// Appends the intervals of a row that holds nothing else, of the figures in the row above: "95% CI" below "Mean".
pub(super) fn read_limits(table: &Table, number: usize, readings: &mut Readings) {
    let row = &table.layout.rows[number];
    let (own, _) = table.said(row);
    let labels: Vec<SentenceView> = row.labels.iter().map(|&l| table.view(l)).collect();
    if !own.ci
        || own.measure
        || own.quantiles.is_some()
        || own.mean
        || own.median
        || !labels.last().is_some_and(ends_in_ci)
    {
        return;
    }
    let above = number.checked_sub(1).map(|n| &table.layout.rows[n]);
    for index in row.cells.clone().filter(|&i| table.role_of(i).summarises()) {
        let view = table.view(index);
        let Some((a, b)) = cell::limits(&view) else { continue };
        if readings.intervals.iter().rev().take_while(|i| i.sentence >= view.id).any(|i| i.sentence == view.id) {
            continue;
        }
        let column = table.grid.cells[index].column as usize;
        let over = above.and_then(|r| table.layout.cell_in(table.grid, r, column)).map(|c| table.view(c).id);
        let group = over
            .and_then(|id| readings.groups.iter().rev().take_while(|g| g.sentence >= id).find(|g| g.sentence == id));
        let centre = group.and_then(|g| Some((g.mean.or(g.median).or(g.percent)?, g.span)));
        push_interval(&view, (a, b), &labels, None, readings);
        if let Some(interval) = readings.intervals.last_mut() {
            interval.estimate = centre;
        }
    }
}

/// "95% CI", "(95% confidence interval)": nothing is said behind it.
fn ends_in_ci(label: &SentenceView) -> bool {
    let last = (0..label.len()).rev().find(|&i| label.get(i).is_some_and(|t| t.is_word()));
    last.is_some_and(|i| label.is(i, Classes::CI) || label.any(i, &["ci", "interval", "intervals", "limits"]))
}

/// The one number of a cell that holds nothing else, brackets aside.
fn only_number(view: &SentenceView) -> Option<At> {
    let from = usize::from(view.signs(0, &['(', '[']));
    let to = view.len() - usize::from(view.len() > from && view.signs(view.len() - 1, &[')', ']', ',', '-']));
    let cut = SentenceView { tokens: view.tokens.get(from..to)?, ..*view };
    match cell::read(&cut)[..] {
        [cell::Read { form: Form::Single { value, .. }, .. }] => {
            Some(At { first: value.first + from, last: value.last + from, ..value })
        }
        _ => None,
    }
}

/// What the texts and cells beside an estimate say of it.
struct Beside<'a> {
    heads: Vec<SentenceView<'a>>,
    labels: Vec<SentenceView<'a>>,
    /// The row's groups are counts.
    counts: bool,
    /// The table as a whole tells of confidence intervals.
    ci: bool,
    /// The next cell holds the standard error, where it can be read.
    error: Option<Option<Printed>>,
}

impl Table<'_> {
    /// What the next cell of the row holds, where it is one of standard errors.
    fn error_beside(&self, index: usize) -> Option<Option<Printed>> {
        let next = self.grid.cells.get(index + 1).filter(|c| c.row == self.grid.cells[index].row)?;
        let is_error = *self.layout.role(next) == ColumnRole::Part(Part::Se);
        is_error.then(|| only_number(&self.view(index + 1)).map(|n| n.printed))
    }
}

fn estimate(view: &SentenceView, read: &cell::Read, beside: &Beside, readings: &mut Readings) -> Option<Estimate> {
    let Beside { heads, labels, counts, .. } = beside;
    let counts = *counts;
    let percent_sign = (0..view.len()).any(|i| view.sign(i, '%'));
    let says_se = heads.iter().any(|h| (0..h.len()).any(|i| h.is(i, Classes::SE)));
    let (value, limits, se) = match read.form {
        Form::Pair { centre, lower, upper } => (centre, Some((lower, upper)), None),
        Form::Single { value, .. } => (value, None, None),
        Form::PlusMinus { centre, spread } => (at_start(view, read, centre), None, says_se.then_some(spread)),
        Form::Bracket { centre, inner, percent: false, .. } => (centre, None, says_se.then_some(inner)),
        _ => return None,
    };
    let named = measure(heads, counts).filter(|m| m.0 != Measure::Other).or_else(|| measure(labels, counts));
    let (mut measure, mut scale) = named.or_else(|| general(heads)).unwrap_or((Measure::Other, Scale::Unknown));
    if counts && measure == Measure::MeanDifference {
        measure = Measure::RiskDifference;
    }
    let negative = |p: Printed| p.value() <= 0.0;
    if scale == Scale::Ratio && (negative(value.printed) || limits.is_some_and(|(a, b)| negative(a) || negative(b))) {
        // A header for several measures, of which this is another.
        (measure, scale) = (Measure::Other, Scale::Unknown);
    }
    // A difference of shares beyond 1 is in percentage points, printed or not.
    let points = measure == Measure::RiskDifference && value.printed.value().abs() > 1.0;
    let percent = percent_sign || points || measure == Measure::PercentDifference;
    let says = |words: &[&str]| heads.iter().any(|h| (0..h.len()).any(|i| h.any(i, words)));
    let short = heads.iter().any(|h| (0..h.len()).any(|i| matches!(h.word(i), "aOR" | "aHR" | "aRR" | "AOR" | "AHR")));
    let adjusted =
        (says(&["adjusted", "adj", "ancova", "multivariate", "multivariable"]) || short) && !says(&["unadjusted"]);
    let mut span = view.span(value.first, value.last);
    let se = beside.error.filter(|_| limits.is_none()).unwrap_or(se).filter(|s| !s.negative);
    if matches!(read.form, Form::PlusMinus { .. } | Form::Bracket { .. }) && se.is_some() {
        span = view.span(read.first, read.last);
    }
    let estimate = Estimate { span, sentence: view.id, measure, scale, value: value.printed, se, percent, adjusted };
    readings.estimates.push(estimate.clone());
    if let Some((a, b)) = limits
        && (says_ci(heads) || says_ci(labels) || beside.ci)
    {
        let all: Vec<SentenceView> = heads.iter().chain(labels).copied().collect();
        add_interval(view, view.span(read.first, read.last), (a, b), &all, Some(&estimate), readings);
    }
    Some(estimate)
}

/// The token of a figure that a form begins with.
fn at_start(view: &SentenceView, read: &cell::Read, printed: Printed) -> At {
    let last = (read.first..=read.last).find(|&i| view.number(i).is_some()).unwrap_or(read.first);
    At { printed, first: read.first, last }
}

/// The heads speak of confidence intervals.
fn says_ci(heads: &[SentenceView]) -> bool {
    heads.iter().any(|h| {
        let named = |i: usize| h.is(i, Classes::CI) || h.is(i, Classes::CONFIDENCE);
        level(h).is_some() || (0..h.len()).any(|i| named(i) || h.any(i, &["c"]) && h.any(i + 2, &["i"]))
    })
}

fn push_interval(
    view: &SentenceView,
    (a, b): (At, At),
    heads: &[SentenceView],
    near: Option<&Estimate>,
    readings: &mut Readings,
) {
    let open = usize::from(a.first > 0 && view.signs(a.first - 1, &['(', '[', '{']));
    let close = usize::from(view.signs(b.last + 1, &[')', ']', '}']));
    let span = view.span(a.first - open, b.last + close);
    add_interval(view, span, (a.printed, b.printed), heads, near, readings);
}

fn add_interval(
    view: &SentenceView,
    span: Span,
    (a, b): (Printed, Printed),
    heads: &[SentenceView],
    near: Option<&Estimate>,
    readings: &mut Readings,
) {
    let reversed = a.value() > b.value();
    let (lower, upper) = if reversed { (b, a) } else { (a, b) };
    readings.intervals.push(IntervalReading {
        span,
        sentence: view.id,
        level: heads.iter().find_map(level),
        lower,
        upper,
        percent: near.is_some_and(|e| e.percent),
        credible: heads.iter().any(|h| (0..h.len()).any(|i| h.any(i, &["credible", "cri"]))),
        reversed,
        estimate: near.map(|e| (e.value, e.span)).or_else(|| mean_before(view, readings)),
    });
}

/// The mean of the cell before an interval in a cell of its own.
fn mean_before(view: &SentenceView, readings: &Readings) -> Option<(Printed, Span)> {
    let group = readings.groups.last().filter(|g| g.sentence + 1 == view.id)?;
    Some((group.mean.or(group.percent)?, group.span))
}

/// Measures that a head names in general terms: a coefficient of a model, a standardised effect.
fn general(heads: &[SentenceView]) -> Option<(Measure, Scale)> {
    let says = |words: &[&str]| heads.iter().any(|h| (0..h.len()).any(|i| words.contains(&h.word(i))));
    if says(&[
        "β",
        "B",
        "b",
        "beta",
        "Beta",
        "coefficient",
        "Coefficient",
        "coefficients",
        "Coefficients",
        "slope",
        "Slope",
    ]) {
        Some((Measure::RegressionCoefficient, Scale::Difference))
    } else if says(&["d", "ES"]) {
        Some((Measure::StandardizedDifference, Scale::Difference))
    } else if heads.iter().any(|h| {
        (1..h.len()).any(|i| {
            h.sign(i, '-') && h.get(i + 1).is_some_and(|t| t.is_word()) && (h.spaced(i) || h.spaced(i + 1))
                || h.any(i, &["minus"])
        })
    }) {
        Some((Measure::MeanDifference, Scale::Difference))
    } else {
        None
    }
}

/// `95` of `95% CI` in a header.
pub(super) fn level(head: &SentenceView) -> Option<Figure> {
    (0..head.len()).find_map(|i| {
        let printed = head.number(i).filter(|p: &Printed| (80.0..100.0).contains(&p.value()))?;
        let dotted = |k: usize| head.any(k, &["c"]) && head.sign(k + 1, '.') && head.any(k + 2, &["i"]);
        let named = (i + 1..i + 4).any(|k| head.is(k, Classes::CI) || head.is(k, Classes::CONFIDENCE) || dotted(k))
            || i > 0 && head.is(i - 1, Classes::CI);
        named.then(|| Figure::inferred(printed, Inference::Header, head.span(i, i)))
    })
}

/// The measure that heads name, and its scale. "Odds ratio or mean difference" is the ratio for counts.
fn measure(heads: &[SentenceView], counts: bool) -> Option<(Measure, Scale)> {
    let any = |test: &dyn Fn(&SentenceView, usize) -> bool| heads.iter().any(|h| (0..h.len()).any(|i| test(h, i)));
    let two = |a: &[&str], b: &[&str]| any(&|h, i| h.any(i, a) && h.any(i + 1, b));
    let one = |words: &[&str]| any(&|h, i| words.contains(&h.word(i)));
    let ratio: &[&str] = &["ratio", "ratios"];
    let difference: &[&str] = &["difference", "differences"];
    let has = |words: &[&str]| any(&|h, i| h.any(i, words));
    let differs = has(difference) || one(&["MD", "RD", "ARD"]);
    let divides = has(ratio) || one(&["HR", "OR", "RR", "IRR"]) || has(&["relative"]) && has(&["risk"]);
    if differs && divides && !counts {
        return Some((Measure::MeanDifference, Scale::Difference));
    }
    if one(&["NNT"]) && !divides && !differs {
        return Some((Measure::NumberNeededToTreat, Scale::Reciprocal));
    }
    let dotted =
        |first: &str| any(&|h, i| h.eq(i, first) && h.sign(i + 1, '.') && h.eq(i + 2, "r") && h.sign(i + 3, '.'));
    Some(if dotted("h") {
        (Measure::HazardRatio, Scale::Ratio)
    } else if dotted("o") {
        (Measure::OddsRatio, Scale::Ratio)
    } else if dotted("r") {
        (Measure::RiskRatio, Scale::Ratio)
    } else if one(&["HR", "aHR", "AHR"]) || two(&["hazard", "hazards"], ratio) {
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
