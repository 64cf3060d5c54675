//! Estimates and their intervals from group summaries: differences, ratios, numbers needed to treat; the interval
//! of a correlation, of one mean, of one proportion.

use super::case::{Case, own, size};
use super::groups::{cell, summaries, ways};
use super::mean;
use super::proportion::Cell;
use super::statistic;
use super::target::{Fit, Target};
use super::verdict::{Candidate, Inputs, Policy, judge, soften};
use super::{Distance, Method, Quantity, Recomputation, method, reason, tail, working};
use crate::distribution;
use crate::printed::{Printed, Range};
use crate::query::{Ground, Verdict};
use crate::reading::{Assumption, Estimate, Group, IntervalReading, Measure, Symbol};

/// A way to compute an interval.
struct Limits {
    method: &'static Method,
    short: &'static str,
    lower: Range,
    upper: Range,
}

/// Everything about the estimate and interval of a result that its groups give.
pub(crate) fn check(case: &Case) -> Vec<Recomputation> {
    let mut out = Vec::new();
    if let Some(e) = case.estimate() {
        out.extend(statistic::eta_squared(case, e));
        out.extend(from_groups(case, e));
    }
    let Some(i) = case.interval else { return out };
    let limits = match case.groups[..] {
        [a, b] => two_groups(case, a, b),
        [g] if case.result.estimate.is_none() => one_group(case, g),
        _ => Vec::new(),
    };
    out.extend(judge_interval(case, i, limits));
    out.extend(correlation_interval(case, i));
    out
}

/// Proportion of one group in percent: exact from a count, else as printed.
fn percent_of(g: &Group) -> Option<Range> {
    match cell(g) {
        Ok((c, false)) if c.is_exact() => Some(c.proportion() * 100.0),
        _ => g.percent.map(Printed::rounded),
    }
}

/// Dividing positive ranges.
fn ratio(a: Range, b: Range) -> Option<Range> {
    (a.lo >= 0.0 && b.lo > 0.0).then(|| Range::new(a.lo / b.hi, a.hi / b.lo))
}

fn odds(p: Range) -> Range {
    p.clamped(0.0, 99.999_999).increasing(|x| x / (100.0 - x))
}

/// The printed estimate from two groups, either way round.
fn from_groups(case: &Case, e: &Estimate) -> Option<Recomputation> {
    let [a, b] = case.groups[..] else { return None };
    let (a_shown, b_shown);
    let mut candidates = Vec::new();
    let mut add = |method: &'static Method, short, range: Option<Range>, line: String| {
        if let Some(r) = range {
            let line = format!("{line} = {}", working::range(r, 3));
            candidates.push(Candidate::new(method, short, r, line).assuming(Assumption::Unadjusted));
        }
    };
    // Differences are held against the figure without its sign.
    let mut unsigned = false;
    match e.measure {
        Measure::MeanDifference => {
            let (m1, m2) = (a.mean?, b.mean?);
            unsigned = true;
            add(
                &method::DIFFERENCE,
                "difference",
                Some((m1.rounded() - m2.rounded()).abs()),
                format!("{m1} and {m2}; difference"),
            );
        }
        Measure::PercentDifference if a.mean.is_some() => return None,
        Measure::RiskDifference | Measure::PercentDifference => {
            let (p, q) = (percent_of(a)?, percent_of(b)?);
            unsigned = true;
            let unit = if e.percent || e.value.value().abs() > 1.0 { 1.0 } else { 0.01 };
            (a_shown, b_shown) = (shown(a), shown(b));
            add(
                &method::DIFFERENCE,
                "difference",
                Some((p - q).abs() * unit),
                format!("{a_shown} and {b_shown}; difference"),
            );
        }
        Measure::RiskRatio | Measure::OddsRatio | Measure::Efficacy | Measure::NumberNeededToTreat => {
            let (p, q) = (percent_of(a)?, percent_of(b)?);
            (a_shown, b_shown) = (shown(a), shown(b));
            let line = |name| format!("{a_shown} and {b_shown}; {name}");
            match e.measure {
                Measure::RiskRatio => {
                    add(&method::KATZ, "risk ratio", ratio(p, q), line("risk ratio"));
                    add(&method::KATZ, "risk ratio", ratio(q, p), line("risk ratio the other way round"));
                }
                Measure::OddsRatio => {
                    let (p, q) = (odds(p), odds(q));
                    add(&method::WOOLF, "odds ratio", ratio(p, q), line("odds ratio"));
                    add(&method::WOOLF, "odds ratio", ratio(q, p), line("odds ratio the other way round"));
                }
                Measure::Efficacy => {
                    let unit = if e.percent || e.value.value().abs() > 1.0 { 100.0 } else { 1.0 };
                    let part = |r: Range| (Range::point(1.0) - r) * unit;
                    add(&method::EFFICACY, "1 − risk ratio", ratio(p, q).map(part), line("1 − risk ratio"));
                    add(&method::EFFICACY, "1 − risk ratio", ratio(q, p).map(part), line("1 − risk ratio"));
                }
                _ => {
                    unsigned = true;
                    let d = (p - q).abs() * 0.01;
                    let range = Range::new(1.0 / d.hi, if d.lo > 0.0 { 1.0 / d.lo } else { f64::INFINITY });
                    add(&method::NNT, "1 / risk difference", Some(range), line("1 / risk difference"));
                    // It is usually rounded up.
                    if e.value.places == 0 && range.hi < 1e9 {
                        let up = Range::new(range.lo.ceil(), range.hi.ceil());
                        add(&method::NNT, "1 / risk difference", Some(up), line("1 / risk difference, rounded up"));
                    }
                }
            }
        }
        _ => return None,
    }
    let mut hold = case.group_hold();
    let means = a.mean.is_some();
    if a.change != b.change || means && a.events.is_some() {
        hold = hold.or(Some(reason::UNCLEAR));
    }
    if !means && [a, b].iter().any(|g| cell(g).is_ok_and(|(_, doubtful)| doubtful)) {
        hold = hold.or(Some(reason::SIZES_DOUBTFUL));
    }
    let target = if unsigned { Target::unsigned(e.value, e.span) } else { Target::figure(e.value, e.span) };
    let inputs: Inputs = vec![(a.span, "the first group"), (b.span, "the second group")];
    let policy = Policy {
        of: Quantity::Estimate,
        ground: Ground::IfUnadjusted,
        hold,
        least: 1.0,
        least_shift: 0.0,
        alpha: case.alpha,
        stated: None,
    };
    let mut out = judge(&target, candidates, &policy, inputs, || None)?;
    soften(&mut out, 0.1);
    Some(out)
}

fn shown(g: &Group) -> String {
    match cell(g) {
        Ok((c, false)) if c.is_exact() => format!("{}/{}", c.events.0, c.total.0),
        _ => g.percent.map(|p| format!("{p} %")).unwrap_or_default(),
    }
}

/// Log-normal limits around a ratio: grow and fall with the standard error of its logarithm.
fn log_limits(method: &'static Method, short: &'static str, estimate: f64, se: f64, z: f64) -> Limits {
    let at = |z: f64| Range::point((estimate.ln() + z * se).exp()).widened(1e-9);
    Limits { method, short, lower: at(-z), upper: at(z) }
}

/// Katz's interval of a risk ratio.
fn katz(a: &Cell, b: &Cell, z: f64) -> Option<Limits> {
    let (x, m, y, n) = counts(a, b)?;
    let se = (1.0 / x - 1.0 / m + 1.0 / y - 1.0 / n).sqrt();
    (x > 0.0 && y > 0.0).then(|| log_limits(&method::KATZ, "log interval", (x / m) / (y / n), se, z))
}

/// Woolf's interval of an odds ratio.
fn woolf(a: &Cell, b: &Cell, z: f64) -> Option<Limits> {
    let (x, m, y, n) = counts(a, b)?;
    let se = (1.0 / x + 1.0 / (m - x) + 1.0 / y + 1.0 / (n - y)).sqrt();
    se.is_finite().then(|| log_limits(&method::WOOLF, "logit interval", (x / (m - x)) / (y / (n - y)), se, z))
}

/// Wald's interval of a risk difference, as proportions.
fn wald(a: &Cell, b: &Cell, z: f64) -> Option<Limits> {
    let (x, m, y, n) = counts(a, b)?;
    let (p, q) = (x / m, y / n);
    let half = z * (p * (1.0 - p) / m + q * (1.0 - q) / n).sqrt();
    let at = |v: f64| Range::new(v - 1e-12, v + 1e-12);
    Some(Limits { method: &method::RISK_DIFFERENCE, short: "Wald", lower: at(p - q - half), upper: at(p - q + half) })
}

/// Newcombe's method 10: the Wilson limits of each proportion, as proportions.
fn newcombe(a: &Cell, b: &Cell, level: f64) -> Option<Limits> {
    let (x, m, y, n) = counts(a, b)?;
    let (p, q) = (x / m, y / n);
    let (l1, u1) = distribution::wilson(a.events.0, a.total.0, level / 100.0).ok()?;
    let (l2, u2) = distribution::wilson(b.events.0, b.total.0, level / 100.0).ok()?;
    let at = |v: f64| Range::new(v - 1e-12, v + 1e-12);
    let lower = p - q - ((p - l1).powi(2) + (u2 - q).powi(2)).sqrt();
    let upper = p - q + ((u1 - p).powi(2) + (q - l2).powi(2)).sqrt();
    Some(Limits { method: &method::NEWCOMBE, short: "Newcombe", lower: at(lower), upper: at(upper) })
}

fn counts(a: &Cell, b: &Cell) -> Option<(f64, f64, f64, f64)> {
    let f = |x: u64| x as f64;
    (a.is_exact() && b.is_exact()).then(|| (f(a.events.0), f(a.total.0), f(b.events.0), f(b.total.0)))
}

fn turned(l: Limits) -> Limits {
    Limits { lower: -l.upper, upper: -l.lower, ..l }
}

/// The intervals that two groups give for the measure of the result.
fn two_groups(case: &Case, a: &Group, b: &Group) -> Vec<Limits> {
    let (level, _) = case.level();
    let upper = (1.0 - level / 100.0) / 2.0;
    let Some(z) = tail::critical(upper, f64::INFINITY) else { return Vec::new() };
    let mut out = Vec::new();
    if a.mean.is_some() && b.mean.is_some() {
        let measure = case.estimate().map_or(Measure::MeanDifference, |e| e.measure);
        let groups = [a, b];
        if !matches!(measure, Measure::MeanDifference) {
            return out;
        }
        for read in ways(case, &groups).unwrap_or_default() {
            let Ok(s) = summaries(&groups, read) else { continue };
            for (welch, method, short) in
                [(false, &method::MEAN_INTERVAL, "pooled t"), (true, &method::MEAN_INTERVAL, "Welch")]
            {
                if let Some((lower, upper)) = mean::difference_interval(s[0], s[1], welch, level) {
                    out.push(Limits { method, short, lower, upper });
                    out.push(turned(Limits { method, short, lower, upper }));
                }
            }
        }
        return out;
    }
    let (Ok((c, false)), Ok((d, false))) = (cell(a), cell(b)) else { return out };
    let percent =
        case.interval.is_some_and(|i| i.percent || i.upper.value().abs() > 1.0 || i.lower.value().abs() > 1.0);
    let unit = if percent { 100.0 } else { 1.0 };
    let scaled = |l: Limits| Limits { lower: l.lower * unit, upper: l.upper * unit, ..l };
    match case.estimate().map(|e| e.measure) {
        Some(Measure::RiskRatio) => {
            out.extend(katz(&c, &d, z));
            out.extend(katz(&d, &c, z));
        }
        Some(Measure::OddsRatio) => {
            out.extend(woolf(&c, &d, z));
            out.extend(woolf(&d, &c, z));
        }
        Some(Measure::Other) | None => {
            out.extend([katz(&c, &d, z), katz(&d, &c, z)].into_iter().flatten());
            out.extend([woolf(&c, &d, z), woolf(&d, &c, z)].into_iter().flatten());
            for l in [wald(&c, &d, z), newcombe(&c, &d, level)].into_iter().flatten() {
                let other = turned(Limits { ..l });
                out.push(scaled(l));
                out.push(scaled(other));
            }
        }
        Some(Measure::RiskDifference | Measure::PercentDifference) => {
            for l in [wald(&c, &d, z), newcombe(&c, &d, level)].into_iter().flatten() {
                let other = turned(Limits { ..l });
                out.push(scaled(l));
                out.push(scaled(other));
            }
        }
        Some(Measure::Efficacy) => {
            for l in [katz(&c, &d, z), katz(&d, &c, z)].into_iter().flatten() {
                let part = |r: Range| (Range::point(1.0) - r) * unit;
                out.push(Limits { lower: part(l.upper), upper: part(l.lower), ..l });
            }
        }
        Some(Measure::NumberNeededToTreat) => {
            for l in [wald(&c, &d, z), newcombe(&c, &d, level)].into_iter().flatten() {
                let l = if l.upper.hi < 0.0 { turned(l) } else { l };
                // Through infinity otherwise.
                if l.lower.lo > 0.0 {
                    out.push(Limits {
                        lower: l.upper.decreasing_reciprocal(),
                        upper: l.lower.decreasing_reciprocal(),
                        ..l
                    });
                }
            }
        }
        _ => {}
    }
    out
}

trait Reciprocal {
    fn decreasing_reciprocal(self) -> Range;
}

impl Reciprocal for Range {
    fn decreasing_reciprocal(self) -> Range {
        Range::new(1.0 / self.hi, 1.0 / self.lo)
    }
}

/// The intervals of one mean or proportion.
fn one_group(case: &Case, g: &Group) -> Vec<Limits> {
    let (level, _) = case.level();
    let upper = (1.0 - level / 100.0) / 2.0;
    let mut out = Vec::new();
    let method = &method::ONE_MEAN;
    if let Some(mean) = g.mean {
        for read in ways(case, &[g]).unwrap_or_default() {
            let Ok(s) = summaries(&[g], read) else { continue };
            let (Some(t), Some(z)) = (tail::critical(upper, s[0].n - 1.0), tail::critical(upper, f64::INFINITY)) else {
                continue;
            };
            for (short, critical) in [("t", t), ("z", z)] {
                let half = s[0].sd * (critical / s[0].n.sqrt());
                let m = mean.rounded();
                let (lower, upper) = (m - half, m + half);
                out.push(Limits { method, short, lower, upper });
            }
        }
    } else if let Ok((c, false)) = cell(g)
        && c.is_exact()
    {
        let (x, n) = (c.events.0, c.total.0);
        let p = x as f64 / n as f64;
        let half = tail::critical(upper, f64::INFINITY).map(|z| z * (p * (1.0 - p) / n as f64).sqrt());
        let percent = case.interval.is_some_and(|i| i.percent || i.upper.value() > 1.0);
        let unit = if percent { 100.0 } else { 1.0 };
        let methods = [
            ("Wilson", distribution::wilson(x, n, level / 100.0).ok()),
            ("Clopper–Pearson", distribution::clopper_pearson(x, n, level / 100.0).ok()),
            ("Wald", half.map(|h| (p - h, p + h))),
        ];
        for (short, limits) in methods {
            if let Some((l, u)) = limits {
                let at = |v: f64| Range::new(v - 1e-10, v + 1e-10) * unit;
                out.push(Limits { method: &method::ONE_PROPORTION, short, lower: at(l), upper: at(u) });
            }
        }
    }
    out
}

/// Fisher's interval of a correlation: tanh(atanh r ± z/√(n − 3)), growing with r.
pub(crate) fn fisher_z(r: Range, n: f64, z: f64) -> (Range, Range) {
    let at = |side: f64| r.clamped(-1.0, 1.0).increasing(|r| (r.atanh() + side * z / (n - 3.0).sqrt()).tanh());
    (at(-1.0), at(1.0))
}

fn correlation_interval(case: &Case, i: &IntervalReading) -> Option<Recomputation> {
    let from_estimate = case.estimate().filter(|e| e.measure == Measure::Correlation).map(|e| e.value);
    let statistic = case.statistic.filter(|s| s.symbol == Symbol::R);
    let r = from_estimate.or(statistic.map(|s| s.value))?;
    let n = statistic.and_then(|s| s.n).or(match case.groups[..] {
        [g] => size(g),
        _ => None,
    });
    let n = n?.printed.count().filter(|n| *n > 3)? as f64;
    let (level, _) = case.level();
    let z = tail::critical((1.0 - level / 100.0) / 2.0, f64::INFINITY)?;
    let (lower, upper) = fisher_z(r.rounded(), n, z);
    let limits = Limits {
        method: &method::FISHER_Z,
        short: "Fisher's z",
        lower: lower.widened(1e-9),
        upper: upper.widened(1e-9),
    };
    judge_interval(case, i, vec![limits])
}

/// Holds both limits against the printed ones. An objection needs an interval of another width altogether: there
/// are many ways to compute limits.
fn judge_interval(case: &Case, i: &IntervalReading, limits: Vec<Limits>) -> Option<Recomputation> {
    let (lower, upper) = (Target::figure(i.lower, i.span), Target::figure(i.upper, i.span));
    let fit = |l: &Limits| lower.fit(l.lower).max(upper.fit(l.upper));
    let off = |l: &Limits| lower.distance(l.lower) + upper.distance(l.upper);
    let best = limits.iter().min_by(|a, b| fit(a).cmp(&fit(b)).then(off(a).total_cmp(&off(b))))?;
    let computed = Range::new(best.lower.middle(), best.upper.middle());
    let sharp = limits.iter().all(|l| lower.sharp_against(l.lower) || upper.sharp_against(l.upper));
    let hold = case.group_hold();
    let sizes_own = case.groups.iter().all(|g| size(g).is_some_and(|n| own(&n)));
    let named = case.estimate().is_some_and(|e| e.measure != Measure::Other);
    let (verdict, why) = match fit(best) {
        Fit::Off => {
            let printed = upper.range.middle() - lower.range.middle();
            let widths = limits.iter().map(|l| (l.lower - l.upper).abs());
            let far = widths.clone().all(|w| printed > 1.5 * w.hi || printed < w.lo / 1.5);
            match hold {
                Some(hold) => (Verdict::Undecided, Some(hold)),
                None if far && case.groups.len() == 2 && sizes_own && named => (Verdict::Differs, None),
                None => (Verdict::Undecided, Some(reason::CLOSE)),
            }
        }
        _ if hold.is_some() && !sharp => (Verdict::Undecided, hold),
        Fit::LastPlace => (Verdict::Tallies, Some(reason::LAST_PLACE)),
        Fit::Cut => (Verdict::Tallies, Some(reason::CUT)),
        Fit::Full => (Verdict::Tallies, None),
    };
    let mut inputs: Inputs = case.groups.iter().map(|g| (g.span, "the group's summary")).collect();
    inputs.extend(
        case.groups.iter().filter_map(|g| size(g)).filter_map(|f| f.place()).map(|span| (span, "the group size")),
    );
    let line = format!(
        "{} {}: {} to {}",
        best.method.name,
        best.short,
        working::range(best.lower, 3),
        working::range(best.upper, 3)
    );
    Some(Recomputation {
        of: Quantity::Interval,
        method: best.method,
        ground: Ground::IfUnadjusted,
        computed: Some(computed),
        printed: Some(Range::new(i.lower.value(), i.upper.value())),
        verdict,
        sharp: sharp && verdict != Verdict::Undecided,
        reason: why.map(str::to_string),
        working: line,
        assumptions: vec![Assumption::Unadjusted],
        distance: (verdict == Verdict::Differs).then(|| Distance { size: off(best), across_alpha: false }),
        slip: None,
        figure: i.span,
        inputs,
    })
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    proptest! {
        #[test]
        fn fisher_z_encloses(r in -0.98..0.97f64, w in 0.0..0.01f64, n in 5u32..500, u in 0.0..1.0f64) {
            let (lower, upper) = fisher_z(Range::new(r, r + w), f64::from(n), 1.959_964);
            let (l, h) = fisher_z(Range::point(r + u * w), f64::from(n), 1.959_964);
            prop_assert!(lower.widened(1e-12).contains(l.lo) && upper.widened(1e-12).contains(h.lo));
        }

        #[test]
        fn ratios_enclose(a in 1.0..99.0f64, b in 1.0..99.0f64, h in 0.0..0.5f64, u in -1.0..1.0f64, v in -1.0..1.0f64) {
            let (p, q) = (Range::new(a - h, a + h), Range::new(b - h, b + h));
            prop_assert!(ratio(p, q).unwrap().widened(1e-12).contains((a + u * h) / (b + v * h)));
            let odd = |x: f64| x / (100.0 - x);
            prop_assert!(ratio(odds(p), odds(q)).unwrap().widened(1e-12).contains(odd(a + u * h) / odd(b + v * h)));
        }
    }

    /// Fagerland, Lydersen & Laake, as given in the project's list of worked examples (no. 18 to 21).
    #[test]
    fn seven_of_34_against_one_of_34() {
        let (a, b, z) = (Cell::exact(7, 34), Cell::exact(1, 34), 1.959_964);
        let near = |l: Option<Limits>, lower: f64, upper: f64, tolerance: f64| {
            let l = l.unwrap();
            assert!((l.lower.middle() - lower).abs() < tolerance, "{:?}", l.lower);
            assert!((l.upper.middle() - upper).abs() < tolerance, "{:?}", l.upper);
        };
        near(wald(&a, &b, z), 0.0292, 0.3238, 5e-5);
        near(katz(&a, &b, z), 0.9096, 53.8695, 5e-4);
        near(woolf(&a, &b, z), 0.9905, 73.90, 5e-3);
        near(newcombe(&a, &b, 95.0), 0.0189, 0.3404, 5e-5);
    }
}
