//! Arithmetic on one group: count, total and percent.

use std::collections::HashMap;

use super::case::own;
use super::target::{Fit, Target};
use super::verdict::{Candidate, Inputs, Policy, judge};
use super::{Distance, Quantity, Recomputation, Slip, method, reason, slip, working};
use crate::printed::{Printed, Range, totals_that_fit};
use crate::query::{Ground, Verdict};
use crate::reading::{Figure, Group, Inference, Origin, Readings};
use crate::text::Span;

/// How the percentages of one block (a table, a paragraph) agree with totals taken from elsewhere. In a table
/// whose rows tally, the totals are the denominators of its percentages.
#[derive(Clone, Copy, Debug, Default)]
pub(crate) struct Agreement {
    tally: u32,
    off: u32,
}

impl Agreement {
    fn settled(self) -> bool {
        self.tally >= 4 && self.tally >= 6 * self.off
    }
}

/// Counts, per block, the groups whose percent agrees with a total from a header or the like.
pub(crate) fn agreement(readings: &Readings) -> HashMap<u32, Agreement> {
    let mut blocks: HashMap<u32, Agreement> = HashMap::new();
    for g in &readings.groups {
        let (Some(events), Some(total), Some(percent)) = (g.events, g.total, g.percent) else { continue };
        if own(&total) || total.is_inferred(Inference::FromPercent) {
            continue;
        }
        let (Some(e), Some(n)) = (events.printed.count(), total.printed.count()) else { continue };
        if n == 0 {
            continue;
        }
        let fit = Target::figure(percent, g.span).fit(Range::point(100.0 * e as f64 / n as f64));
        let agreement = blocks.entry(g.span.block).or_default();
        if fit == Fit::Off { agreement.off += 1 } else { agreement.tally += 1 }
    }
    blocks
}

/// Percent from count and total; a count larger than its total.
pub(crate) fn check(g: &Group, agreement: Agreement) -> Vec<Recomputation> {
    let (Some(events), Some(total)) = (g.events, g.total) else { return Vec::new() };
    let (Some(e), Some(n)) = (events.printed.count(), total.printed.count()) else { return Vec::new() };
    if n == 0 || total.is_inferred(Inference::FromPercent) || matches!(total.origin, Origin::Assumed(_)) {
        return Vec::new();
    }
    let inputs: Inputs = [part(&events, "the count"), part(&total, "the total")].into_iter().flatten().collect();
    let printed_here = g.one_expression || own(&total);
    if e > n {
        let verdict = if printed_here && own(&events) { Verdict::Differs } else { Verdict::Undecided };
        return vec![larger_than_total(g, &events, e, n, verdict, inputs)];
    }
    let Some(percent) = g.percent else { return Vec::new() };
    let exact = 100.0 * e as f64 / n as f64;
    let target = Target::figure(percent, g.span);
    let line = format!("{e}/{n} = {} %", working::number(exact, 4));
    let candidate = Candidate::new(&method::PERCENT, "arithmetic", Range::point(exact), line);
    // Missing answers make a percentage larger than the header's n gives, never smaller.
    let below_all = target.range.hi < exact;
    let hold = match (g.one_expression, printed_here) {
        _ if g.approximate => Some(reason::ABOUT),
        _ if total.is_inferred(Inference::Siblings) => None,
        (true, _) | (_, true) => None,
        // None of any number is 0 %.
        _ if e == 0 && percent.value() == 0.0 => None,
        _ if agreement.settled() && below_all => None,
        _ => Some(reason::DENOMINATOR),
    };
    let policy = Policy {
        of: Quantity::Percent,
        ground: if g.one_expression { Ground::ByDefinition } else { Ground::IfOneMethod },
        hold,
        least: 0.0,
        least_shift: 0.0,
        alpha: 0.05,
        stated: None,
    };
    let slips = || percent_slip(g, e, n);
    let mut out = judge(&target, vec![candidate], &policy, inputs, slips);
    if let Some(r) = &mut out
        && r.reason.as_deref() == Some(reason::DENOMINATOR)
        && let Some((least, most)) = totals_that_fit(e, target.range).filter(|_| target.range.lo > 0.0)
    {
        let fits = if least == most { least.to_string() } else { format!("{least} to {most}") };
        r.working.push_str(&format!("; {percent} % would fit a total of {fits}"));
    }
    out.into_iter().collect()
}

/// Categories of one sentence whose percentages make 100: their counts make the total of each. Agreement only:
/// whether they are exhaustive is a guess.
pub(crate) fn parts(g: &Group, all: &[Group]) -> Option<Recomputation> {
    let plain = |x: &Group| Some((x.events?.printed.count()?, x.percent?));
    if g.total.is_some() {
        return None;
    }
    let (e, percent) = plain(g)?;
    // Readings are in order, so that one sentence is one run.
    let first = all.partition_point(|x| x.sentence < g.sentence);
    let same = all[first..].iter().take_while(|x| x.sentence == g.sentence).take(12);
    let siblings: Vec<(u64, Printed, Span)> =
        same.filter(|x| x.total.is_none()).filter_map(|x| plain(x).map(|(e, p)| (e, p, x.span))).collect();
    let sum: f64 = siblings.iter().map(|s| s.1.value()).sum();
    let slack: f64 = siblings.iter().map(|s| s.1.unit() / 2.0).sum();
    let total = siblings.iter().try_fold(0u64, |t, s| t.checked_add(s.0))?;
    if siblings.len() < 2 || total == 0 || (sum - 100.0).abs() > slack + 1e-9 {
        return None;
    }
    let exact = 100.0 * e as f64 / total as f64;
    let counts: Vec<String> = siblings.iter().map(|s| s.0.to_string()).collect();
    let line = format!("{e}/({}) = {} %", counts.join(" + "), working::number(exact, 4));
    let candidate = Candidate::new(&method::PERCENT, "arithmetic", Range::point(exact), line);
    let policy = Policy {
        of: Quantity::Percent,
        ground: Ground::IfOneMethod,
        hold: Some(reason::DENOMINATOR),
        least: 0.0,
        least_shift: 0.0,
        alpha: 0.05,
        stated: None,
    };
    let inputs = siblings.iter().map(|s| (s.2, "a category")).collect();
    judge(&Target::figure(percent, g.span), vec![candidate], &policy, inputs, || None)
}

fn part(figure: &Figure, name: &'static str) -> Option<(Span, &'static str)> {
    figure.place().map(|span| (span, name))
}

fn larger_than_total(g: &Group, events: &Figure, e: u64, n: u64, verdict: Verdict, inputs: Inputs) -> Recomputation {
    Recomputation {
        of: Quantity::Events,
        method: &method::PART_OF_WHOLE,
        ground: if g.one_expression { Ground::ByDefinition } else { Ground::IfOneMethod },
        computed: Some(Range::new(0.0, n as f64)),
        printed: Some(Range::point(e as f64)),
        sharp: verdict == Verdict::Differs,
        reason: (verdict == Verdict::Undecided).then(|| reason::DENOMINATOR.to_string()),
        verdict,
        working: format!("{e} of {n}: the count is larger than its total"),
        assumptions: Vec::new(),
        distance: Some(Distance { size: (e - n) as f64, across_alpha: false }),
        slip: slip::digits_swapped_count(e, |x| x <= n)
            .filter(|&x| g.percent.is_some_and(|p| p.rounded().contains(100.0 * x as f64 / n as f64)))
            .map(|x| Slip { kind: "digits-swapped", says: format!("with two digits swapped it reads {x} of {n}") }),
        figure: events.place().unwrap_or(g.span),
        inputs,
    }
}

fn percent_slip(g: &Group, e: u64, n: u64) -> Option<Slip> {
    let percent = g.percent?;
    let exact = 100.0 * e as f64 / n as f64;
    let proportion = exact / 100.0;
    if percent.rounded().contains(proportion) || percent.cut().contains(proportion) {
        let says = format!("{percent} is the proportion, not the percentage");
        return Some(Slip { kind: "proportion-as-percent", says });
    }
    if let Some(swapped) = slip::swapped(percent).find(|x| x.rounded().contains(exact)) {
        return Some(Slip { kind: "digits-swapped", says: format!("with two digits swapped it reads {swapped} %") });
    }
    if let Some(moved) = slip::moved(percent).find(|x| x.rounded().contains(exact)) {
        return Some(Slip {
            kind: "decimal-point",
            says: format!("with its decimal point moved it reads {}", moved.value()),
        });
    }
    let fits = |e: u64, n: u64| e <= n && n > 0 && percent.rounded().contains(100.0 * e as f64 / n as f64);
    if let Some(x) = slip::digits_swapped_count(n, |x| fits(e, x)) {
        return Some(Slip { kind: "digits-swapped", says: format!("a total of {x} would fit") });
    }
    if let Some(x) = slip::digits_swapped_count(e, |x| fits(x, n)) {
        return Some(Slip { kind: "digits-swapped", says: format!("a count of {x} would fit") });
    }
    None
}
