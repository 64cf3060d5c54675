//! Figures computed anew from the other figures of a result, as ranges, and the verdicts.

mod association;
mod case;
mod crosstab;
mod estimate;
mod groups;
mod mean;
pub mod method;
mod percent;
mod proportion;
pub mod reason;
mod slip;
mod statistic;
mod tail;
mod target;
mod verdict;
mod working;

use std::collections::HashMap;

use crate::context::Context;
use crate::printed::Range;
use crate::query::{Ground, Verdict};
use crate::reading::{Assumption, Readings};
use crate::result::ReportedResult;
use crate::text::Span;

use case::Case;

/// A published method.
#[derive(Debug, PartialEq, Eq)]
pub struct Method {
    /// In the trade's words: "Welch t test".
    pub name: &'static str,
    /// Where it is published.
    pub source: &'static str,
}

/// What was recomputed.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum Quantity {
    P,
    Interval,
    Estimate,
    Percent,
    Statistic,
    Df,
    Events,
    Total,
}

/// An innocent slip, one step away, that restores the printed figure exactly.
#[derive(Clone, Debug, PartialEq)]
pub struct Slip {
    /// `one-sided`, `se-for-sd`, `sd-for-se`, `another-level`, `continuity-correction`, `digits-swapped`,
    /// `decimal-point`, `sign-lost`, `group-size`, `log-scale`, `proportion-as-percent` …
    pub kind: &'static str,
    /// One clause for people: "it agrees with a one-sided test".
    pub says: String,
}

/// How far off a figure is, for the level policy.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Distance {
    /// Ratio of printed and recomputed p (1 or more, the nearest ends of both ranges); for other figures
    /// the distance in units of the last printed place.
    pub size: f64,
    /// Printed and recomputed p lie on two sides of alpha under every candidate (alpha itself is on neither).
    pub across_alpha: bool,
}

#[derive(Clone, Debug, PartialEq)]
pub struct Recomputation {
    pub of: Quantity,
    pub method: &'static Method,
    pub ground: Ground,
    /// All values that the printed figures allow; `None` when undecided before computing.
    pub computed: Option<Range>,
    /// What the printed figure stands for.
    pub printed: Option<Range>,
    pub verdict: Verdict,
    /// A tenfold change of the printed figure, in the direction against it, would have differed.
    pub sharp: bool,
    /// Why it is undecided, or why a near miss tallies ("cut, not rounded").
    pub reason: Option<String>,
    /// "n = 24 and 25; Welch; t = 2.31, df 45.8; P 0.023–0.028"
    pub working: String,
    pub assumptions: Vec<Assumption>,
    pub distance: Option<Distance>,
    pub slip: Option<Slip>,
    /// The printed figure in question.
    pub figure: Span,
    /// The figures it was recomputed from, each with its part.
    pub inputs: Vec<(Span, &'static str)>,
}

/// A result with what was recomputed of it.
#[derive(Clone, Debug, PartialEq)]
pub struct Checked {
    /// Index of the result.
    pub result: usize,
    pub recomputations: Vec<Recomputation>,
    pub verdict: Verdict,
    /// Why nothing was decided: one of a small set of phrases, for the closing account.
    pub reason: Option<&'static str>,
}

/// Recomputes every result; one [`Checked`] each, in the same order.
pub fn recompute(readings: &Readings, context: &Context, results: &[ReportedResult]) -> Vec<Checked> {
    let agreement = percent::agreement(readings);
    results.iter().enumerate().map(|(index, result)| check(readings, context, result, index, &agreement)).collect()
}

fn check(
    readings: &Readings,
    context: &Context,
    result: &ReportedResult,
    index: usize,
    agreement: &HashMap<u32, percent::Agreement>,
) -> Checked {
    let case = Case::new(readings, context, result);
    let mut found = Vec::new();
    let mut why: Option<&'static str> = None;
    // The first reason given is that of the strongest ground.
    let mut note = |reason: &'static str| {
        why.get_or_insert(reason);
    };
    match statistic::p_from_statistic(&case) {
        Ok(r) => found.extend(r),
        Err(reason) => note(reason),
    }
    match estimate::p_from_interval(&case) {
        Ok(r) => found.extend(r),
        Err(reason) => note(reason),
    }
    found.extend(estimate::p_from_se(&case));
    if case.p.is_some() && !case.groups.is_empty() {
        match p_from_groups(&case) {
            Ok(r) => found.extend(r),
            Err(reason) => note(reason),
        }
    }
    found.extend(groups::statistic_from_groups(&case));
    found.extend(statistic::df_against_groups(&case));
    found.extend(estimate::inside(&case));
    found.extend(association::check(&case));
    if case.p.is_none() && case.interval.is_none() && case.statistic.is_none() && case.estimate().is_none() {
        for g in &case.groups {
            found.extend(percent::check(g, agreement.get(&g.span.block).copied().unwrap_or_default()));
            found.extend(percent::parts(g, &readings.groups));
        }
    }
    if context.multiplicity.is_some() {
        found.iter_mut().for_each(allow_for_correction);
    }
    if case.one_sided() {
        found.iter_mut().for_each(allow_for_one_side);
    }
    let verdict = verdict::settle(&mut found, case.p.is_some());
    let reason = match verdict {
        Verdict::Undecided => Some(undecided(&case, &found, why)),
        _ => None,
    };
    // Mostly one, where a vector makes room for four.
    found.shrink_to_fit();
    Checked { result: index, recomputations: found, verdict, reason }
}

/// Where the Methods announce a correction for several comparisons, a printed p may rightly be larger than its statistic
/// or interval gives.
fn allow_for_correction(r: &mut Recomputation) {
    let (Some(computed), Some(printed)) = (r.computed, r.printed) else { return };
    if r.of == Quantity::P && r.verdict == Verdict::Differs && printed.lo > computed.hi {
        r.verdict = Verdict::Undecided;
        r.reason = Some(reason::CORRECTED.to_owned());
        r.slip = None;
    }
}

/// Where the tests are stated to be one-sided, half the two-sided p tallies as well.
fn allow_for_one_side(r: &mut Recomputation) {
    let (Some(computed), Some(printed)) = (r.computed, r.printed) else { return };
    if r.of == Quantity::P && r.verdict == Verdict::Differs && printed.meets(computed * 0.5) {
        r.verdict = Verdict::Tallies;
        r.reason = Some("one-sided, as stated".to_owned());
        r.slip = None;
    }
}

/// p from the groups: means, else counts.
fn p_from_groups(case: &Case) -> Result<Option<Recomputation>, &'static str> {
    if case.result.arms > 1 && case.groups.len().is_multiple_of(case.result.arms) {
        crosstab::p_from_table(case)
    } else if case.groups.iter().all(|g| g.mean.is_some()) {
        groups::p_from_means(case)
    } else if case.groups.iter().all(|g| g.events.is_some() || g.percent.is_some()) {
        groups::p_from_counts(case)
    } else if case.groups.iter().any(|g| g.median.is_some()) {
        Err(reason::MEDIANS)
    } else {
        Err(reason::UNCLEAR)
    }
}

/// The phrase for the closing account.
fn undecided(case: &Case, found: &[Recomputation], why: Option<&'static str>) -> &'static str {
    let of_p = found.iter().filter(|r| r.of == Quantity::P || case.p.is_none());
    let said = of_p.filter_map(|r| r.reason.as_deref()).find_map(reason::listed);
    if let Some(said) = said {
        return said;
    }
    let alone =
        case.interval.is_none() && case.statistic.is_none() && case.estimate().is_none() && case.groups.is_empty();
    match (case.p.is_some(), alone) {
        (true, true) => reason::ONLY_P,
        (true, false) if why.is_none() && case.estimate().is_some() && case.groups.is_empty() => reason::NO_INTERVAL,
        (true, false) => why.or(case.group_hold()).unwrap_or(reason::NO_METHOD),
        (false, _) => why.unwrap_or(reason::NO_P),
    }
}
