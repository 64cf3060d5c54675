//! p from an estimate and its own interval or standard error; the interval against p; the estimate inside its
//! interval.

use super::case::{Case, own, size};
use super::target::{Fit, Target};
use super::verdict::{Candidate, Inputs, Policy, judge};
use super::{Distance, Quantity, Recomputation, Slip, method, reason, slip, statistic, tail, working};
use crate::context::Test;
use crate::distribution::RELATIVE_ERROR;
use crate::printed::{Printed, Range};
use crate::query::{Ground, Verdict};
use crate::reading::{Assumption, Estimate, IntervalReading, Measure, Relation, Role, Scale};

/// Degrees of freedom tried where the number of participants is unknown: from six up to the normal distribution.
const LEAST_DF: f64 = 6.0;

/// A figure on the scale on which its interval is symmetric about it and its null value is 0.
fn on_scale(scale: Scale, r: Range, percent: bool) -> Option<Range> {
    let log = |x: f64| if x <= 0.0 { f64::NEG_INFINITY } else { x.ln() };
    match scale {
        Scale::Difference => Some(r),
        Scale::Ratio => Some(r.increasing(log)),
        Scale::Correlation => Some(r.clamped(-1.0, 1.0).increasing(f64::atanh)),
        Scale::Efficacy => {
            let part = if percent { r * 0.01 } else { r };
            // Turned round, so that it still increases.
            Some(part.increasing(|x| -log(1.0 - x)))
        }
        Scale::Reciprocal | Scale::Single | Scale::Unknown => None,
    }
}

/// Estimate and limits on one scale.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Wald {
    pub estimate: Range,
    pub lower: Range,
    pub upper: Range,
}

impl Wald {
    pub fn new(scale: Scale, e: &Estimate, lower: Printed, upper: Printed) -> Option<Wald> {
        let large = [e.value, lower, upper].iter().any(|p| p.value().abs() > 1.0);
        let percent = e.percent || large;
        let on = |p: Printed| on_scale(scale, p.rounded(), percent);
        Some(Wald { estimate: on(e.value)?, lower: on(lower)?, upper: on(upper)? })
    }

    /// Half the interval's width; a limit at the end of the scale leaves it open.
    fn half(&self) -> Range {
        let width = |upper: f64, lower: f64, open: f64| {
            let w = (upper - lower) / 2.0;
            if w.is_nan() { open } else { w.max(0.0) }
        };
        Range::new(width(self.upper.lo, self.lower.hi, 0.0), width(self.upper.hi, self.lower.lo, f64::INFINITY))
    }

    /// |estimate| in half widths of its interval: grows with |estimate|, falls as the interval widens.
    pub fn ratio(&self) -> Range {
        let (e, half) = (self.estimate.abs(), self.half());
        let divide = |a: f64, b: f64| {
            if b == f64::INFINITY {
                0.0
            } else if b <= 0.0 {
                f64::INFINITY
            } else {
                a / b
            }
        };
        Range::new(divide(e.lo, half.hi), divide(e.hi, half.lo))
    }

    /// Whether the estimate can lie in the middle of its limits, give or take a twentieth of the half width.
    pub fn symmetric(&self) -> bool {
        if !(self.lower.lo.is_finite() && self.upper.hi.is_finite()) {
            return true;
        }
        let middle = (self.lower + self.upper) * 0.5;
        let slack = self.half().hi * 0.05;
        Range::new(middle.lo - slack, middle.hi + slack).meets(self.estimate)
    }
}

/// p of an estimate that is `ratio` half widths of its `level` interval away from the null value, when both
/// come from t with `df` (infinite: normal). Falls with the ratio; for a given ratio it moves one way in df, the
/// other way on the other side of ratio 1, so the four corners enclose it.
pub(crate) fn p_of_ratio(ratio: Range, level: f64, df: Range) -> Option<Range> {
    let upper = (1.0 - level / 100.0) / 2.0;
    let at = |k: f64, df: f64| tail::two_sided(k * tail::critical(upper, df)?, df);
    let mut all: Option<Range> = None;
    for d in [df.lo, df.hi] {
        let r = Range::new(at(ratio.hi, d)?, at(ratio.lo, d)?);
        all = Some(all.map_or(r, |a| a.hull(r)));
    }
    // The quantile's error moves t by as much; a tail's logarithm moves at most about t² times that.
    all.map(|r| r.widened(100.0 * RELATIVE_ERROR).clamped(0.0, 1.0))
}

/// The degrees of freedom to try beside the normal distribution, and whether they come from group sizes.
fn degrees(case: &Case, scale: Scale, measure: Measure) -> Option<(Range, bool)> {
    // A ratio of means, say; an unnamed figure is more often a ratio of risks.
    let named = case.estimate().is_some_and(|e| e.scale == Scale::Ratio);
    let ratio_of_means = named && scale == Scale::Ratio && matches!(measure, Measure::Other);
    if !(scale == Scale::Difference || ratio_of_means) || measure == Measure::RiskDifference {
        return None;
    }
    let sizes: Vec<f64> = case.groups.iter().filter_map(|g| size(g).filter(own).map(|f| f.printed.value())).collect();
    if sizes.len() >= 2 && sizes.len() == case.groups.len() && !case.groups.iter().any(|g| g.events.is_some()) {
        let n: f64 = sizes.iter().sum();
        if n > 4.0 {
            // A model with a few covariates, or Welch's fewer degrees of freedom.
            let least = (n - 10.0).max(sizes.iter().fold(n, |a, &b| a.min(b)) - 1.0).min(n - 2.0).max(1.0);
            return Some((Range::new(least, n - 2.0), true));
        }
    }
    Some((Range::new(LEAST_DF, f64::INFINITY), false))
}

fn sorted(i: &IntervalReading) -> (Printed, Printed) {
    if i.lower.value() <= i.upper.value() { (i.lower, i.upper) } else { (i.upper, i.lower) }
}

/// The scale of the measure; where it is not known, every scale on which the interval is symmetric.
fn scales(e: &Estimate, lower: Printed, upper: Printed) -> Vec<Scale> {
    match e.scale {
        Scale::Unknown => {
            let fits = |s| Wald::new(s, e, lower, upper).is_some_and(|w| w.symmetric());
            let positive = lower.value() > 0.0;
            let both = [(Scale::Difference, true), (Scale::Ratio, positive)];
            both.into_iter().filter(|&(s, can)| can && fits(s)).map(|(s, _)| s).collect()
        }
        Scale::Reciprocal | Scale::Single => Vec::new(),
        scale => vec![scale],
    }
}

/// p from the estimate and its interval (Altman & Bland 2011), on the scale of the measure.
pub(crate) fn p_from_interval(case: &Case) -> Result<Vec<Recomputation>, &'static str> {
    let (Some(p), Some(i)) = (case.p, case.interval) else { return Ok(Vec::new()) };
    let Some(e) = case.estimate() else { return Err(reason::NO_ESTIMATE) };
    if i.credible {
        return Err(reason::NO_METHOD);
    }
    let Some(target) = Target::p(p, case.alpha) else { return Ok(Vec::new()) };
    let (lower, upper) = sorted(i);
    let scales = scales(e, lower, upper);
    let Some(&scale) = scales.first() else { return Err(reason::SCALE) };
    let wald = Wald::new(scale, e, lower, upper).ok_or(reason::SCALE)?;
    let (level, printed_level) = case.level();
    // A log-rank p is near that of the hazard ratio: a factor of five is no matter of the test.
    let log_rank = case.here().any(|t| t == Test::LogRank) && e.measure == Measure::HazardRatio;
    let mut hold = case.interval_hold().filter(|&h| !(log_rank && h == reason::TIME_TO_EVENT));
    if e.scale == Scale::Unknown {
        hold = hold.or(Some(reason::SCALE));
    }
    let asymmetric = !wald.symmetric();
    if asymmetric {
        hold = hold.or(Some(reason::ASYMMETRIC));
    }
    let mut candidates = interval_candidates(case, e, &wald, scale, level, lower, upper);
    for &other in &scales[1..] {
        if let Some(wald) = Wald::new(other, e, lower, upper) {
            candidates.extend(interval_candidates(case, e, &wald, other, level, lower, upper));
        }
    }
    if candidates.is_empty() {
        return Err(reason::NO_METHOD);
    }
    if !printed_level {
        candidates = candidates.into_iter().map(|c| c.assuming(Assumption::Level95)).collect();
    }
    if case.one_sided() {
        let one: Vec<Candidate> = candidates
            .iter()
            .map(|c| Candidate {
                range: statistic::halved(c.range),
                working: format!("{}, one-sided", c.working).into(),
                ..c.clone()
            })
            .collect();
        candidates.extend(one);
    }
    if hold.is_none() && !printed_level {
        let other = [90.0, 99.0].into_iter().any(|level| {
            interval_candidates(case, e, &wald, scale, level, lower, upper)
                .iter()
                .any(|c| target.fit(c.range) == Fit::Full)
        });
        hold = other.then_some(reason::LEVEL);
    }
    let inputs: Inputs = vec![(e.span, "the estimate"), (i.span, "the interval")];
    let policy = Policy {
        of: Quantity::P,
        ground: Ground::IfOneMethod,
        hold,
        least: if log_rank {
            5.0
        } else if rival_tests(case, e) {
            2.0
        } else {
            1.2
        },
        least_shift: 0.0,
        alpha: case.alpha,
        stated: None,
    };
    let slips = || interval_slip(case, e, lower, upper, scale, level, &target);
    let mut out: Vec<Recomputation> = judge(&target, candidates, &policy, inputs.clone(), slips).into_iter().collect();
    // Where the width decides nothing, the side of the null value still does.
    if asymmetric && case.interval_hold().is_none() {
        out.extend(exclusion(case, &target, &wald, level, inputs));
    }
    Ok(out)
}

/// A log-rank, exact or χ² test is proposed for this kind of estimate: its p may stand beside a Wald interval.
fn rival_tests(case: &Case, e: &Estimate) -> bool {
    let rival = |t: Test| match e.measure {
        Measure::HazardRatio => t == Test::LogRank,
        Measure::RiskRatio | Measure::OddsRatio | Measure::RiskDifference => {
            matches!(t, Test::FisherExact | Test::ChiSquared | Test::YatesChiSquared | Test::CochranMantelHaenszel)
        }
        _ => matches!(t, Test::MannWhitney | Test::WilcoxonSignedRank | Test::KruskalWallis),
    };
    case.result.tests.iter().any(|t| rival(t.test.value)) || case.context.tests.iter().any(|t| rival(t.value))
}

fn interval_candidates(
    case: &Case,
    e: &Estimate,
    wald: &Wald,
    scale: Scale,
    level: f64,
    lower: Printed,
    upper: Printed,
) -> Vec<Candidate> {
    let ratio = wald.ratio();
    let normal = Range::point(f64::INFINITY);
    let shown = format!("{} ({lower} to {upper})", e.value);
    let logs = match scale {
        Scale::Ratio => "; on the log scale",
        Scale::Efficacy => "; log(1 − efficacy)",
        Scale::Correlation => "; Fisher's z",
        _ => "",
    };
    let level_shown = if level == 95.0 { String::new() } else { format!("; {level} % interval") };
    let mut out = Vec::new();
    if let Some(p) = p_of_ratio(ratio, level, normal) {
        let z = ratio * tail::critical((1.0 - level / 100.0) / 2.0, f64::INFINITY).unwrap_or(f64::NAN);
        let line = format!("{shown}{logs}{level_shown}; z = {}; {}", working::range(z, 3), working::p(p));
        out.push(Candidate::new(&method::INTERVAL_TO_P, "z", p, line).assuming(Assumption::UsualScale));
    }
    if let Some((df, known)) = degrees(case, scale, e.measure)
        && let Some(p) = p_of_ratio(ratio, level, df)
    {
        let df_shown = if df.hi.is_finite() { working::range(df, 3) } else { format!("{} or more", df.lo) };
        let line = format!("{shown}{logs}{level_shown}; t with df {df_shown}; {}", working::p(p));
        let c = Candidate::new(&method::INTERVAL_TO_P, "t", p, line).assuming(Assumption::UsualScale);
        out.push(if known { c } else { c.assuming(Assumption::PlausibleDf) });
    }
    // A percent change may have been computed as a ratio.
    if e.measure == Measure::PercentDifference && scale == Scale::Difference && lower.value() > -100.0 {
        let on = |p: Printed| p.rounded().clamped(-99.999_999, f64::INFINITY).increasing(|x| (x / 100.0).ln_1p());
        let log = Wald { estimate: on(e.value), lower: on(lower), upper: on(upper) };
        if let Some(p) = p_of_ratio(log.ratio(), level, normal) {
            let line = format!("{shown}; as a ratio, on the log scale; {}", working::p(p));
            out.push(Candidate::new(&method::INTERVAL_TO_P, "log scale", p, line).assuming(Assumption::UsualScale));
        }
    }
    out
}

fn interval_slip(
    case: &Case,
    e: &Estimate,
    lower: Printed,
    upper: Printed,
    scale: Scale,
    level: f64,
    target: &Target,
) -> Option<Slip> {
    let fits = |e: &Estimate, lower, upper, level| {
        Wald::new(scale, e, lower, upper)
            .filter(Wald::symmetric)
            .map(|w| interval_candidates(case, e, &w, scale, level, lower, upper))
            .is_some_and(|cs| cs.iter().any(|c| target.fit(c.range) == Fit::Full && target.sharp_against(c.range)))
    };
    let normal =
        Wald::new(scale, e, lower, upper).and_then(|w| p_of_ratio(w.ratio(), level, Range::point(f64::INFINITY)));
    if normal
        .is_some_and(|p| target.fit(statistic::halved(p)) == Fit::Full && target.sharp_against(statistic::halved(p)))
    {
        return Some(Slip { kind: "one-sided", says: "it agrees with a one-sided test".into() });
    }
    for other in [90.0, 99.0].into_iter().filter(|&x| x != level) {
        if fits(e, lower, upper, other) {
            return Some(Slip { kind: "another-level", says: format!("it agrees with a {other} % interval") });
        }
    }
    if scale == Scale::Difference {
        for (l, u, which) in [(lower.negated(), upper, "lower"), (lower, upper.negated(), "upper")] {
            if l.value() < u.value() && fits(e, l, u, level) {
                let says = format!("it agrees with the sign of the {which} limit turned");
                return Some(Slip { kind: "sign-lost", says });
            }
        }
    }
    let printed = case.p.filter(|p| p.relation == Relation::Equal).and_then(|p| p.value);
    normal.and_then(|p| slip::in_p(printed, &[p]))
}

/// The interval excludes the null value exactly when p < 1 − its own level.
fn exclusion(case: &Case, target: &Target, wald: &Wald, level: f64, inputs: Inputs) -> Option<Recomputation> {
    let p = case.p.filter(|p| p.role == Role::Effect)?;
    let edge = 1.0 - level / 100.0;
    let excluded = if wald.lower.lo > 0.0 || wald.upper.hi < 0.0 {
        true
    } else if wald.lower.hi < 0.0 && wald.upper.lo > 0.0 {
        false
    } else {
        return None;
    };
    let computed = if excluded { Range::new(0.0, edge) } else { Range::new(edge, 1.0) };
    // The usual methods differ a little: an objection needs p well on the other side.
    let off = target.range.lo > edge * 1.3 && excluded || target.range.hi < edge / 1.3 && !excluded;
    let agrees = target.range.hi <= edge && excluded || target.range.lo >= edge && !excluded;
    if !off && !agrees {
        return None;
    }
    let word = if excluded { "excludes" } else { "contains" };
    let sign = if excluded { "<" } else { "≥" };
    Some(Recomputation {
        of: Quantity::P,
        method: &method::INTERVAL_AGAINST_P,
        ground: Ground::IfOneMethod,
        computed: Some(computed),
        printed: Some(target.range),
        verdict: if off { Verdict::Differs } else { Verdict::Tallies },
        sharp: off,
        reason: None,
        working: format!("the {level} % interval {word} the null value; P {sign} {}", working::number(edge, 1)),
        assumptions: Vec::new(),
        distance: off
            .then(|| Distance { size: target.distance(computed), across_alpha: target.across(computed, case.alpha) }),
        slip: None,
        figure: p.span,
        inputs,
    })
}

/// p from the estimate and its standard error.
pub(crate) fn p_from_se(case: &Case) -> Option<Recomputation> {
    let (p, e) = (case.p?, case.estimate()?);
    let se = e.se.filter(|se| se.digits > 0)?;
    if !matches!(e.scale, Scale::Difference | Scale::Unknown) {
        return None;
    }
    let target = Target::p(p, case.alpha)?;
    let (value, se_range) = (e.value.rounded().abs(), se.rounded());
    let t = Range::new(value.lo / se_range.hi, value.hi / se_range.lo.max(f64::MIN_POSITIVE));
    let shown = format!("{} / {se} = {}", e.value, working::range(t, 3));
    let normal = tail::normal(t)?;
    let mut candidates =
        vec![Candidate::new(&method::SE_TO_P, "z", normal, format!("z = {shown}; {}", working::p(normal)))];
    let (df, _) = degrees(case, Scale::Difference, e.measure)?;
    let range = tail::student(t, df)?;
    let line = format!("t = {shown}; df {} or more; {}", df.lo, working::p(range));
    candidates.push(Candidate::new(&method::SE_TO_P, "t", range, line).assuming(Assumption::PlausibleDf));
    let hold = case.interval_hold().or((e.scale == Scale::Unknown).then_some(reason::SCALE));
    let policy = Policy {
        of: Quantity::P,
        ground: Ground::IfOneMethod,
        hold,
        least: 1.2,
        least_shift: 0.0,
        alpha: case.alpha,
        stated: None,
    };
    let printed = p.value.filter(|_| p.relation == Relation::Equal);
    let slips = || {
        if target.fit(statistic::halved(normal)) == Fit::Full && target.sharp_against(statistic::halved(normal)) {
            return Some(Slip { kind: "one-sided", says: "it agrees with a one-sided test".into() });
        }
        slip::in_p(printed, &[normal])
    };
    judge(&target, candidates, &policy, vec![(e.span, "the estimate and its standard error")], slips)
}

/// The estimate lies inside its interval, and the lower limit comes first.
pub(crate) fn inside(case: &Case) -> Option<Recomputation> {
    let (e, i) = (case.estimate()?, case.interval?);
    let reversed = i.reversed || i.lower.value() > i.upper.value();
    let (lower, upper) = sorted(i);
    let whole = Range::new(lower.rounded().lo, upper.rounded().hi).widened(1e-12);
    let value = e.value.rounded();
    let reciprocal = e.scale == Scale::Reciprocal;
    let inside = whole.meets(value);
    // A percentage whose limits stand without the sign: limits of the percentage, of the proportion, or of the ratio
    // that it is a change of. None of them may hold it.
    let apart = e.percent && !i.percent && !readings_of_percent(value).iter().any(|r| whole.meets(*r));
    // A figure of an unnamed kind before the limits may be another thing.
    if !inside && e.measure == Measure::Other && e.scale == Scale::Unknown && !apart {
        return None;
    }
    if !inside && (reciprocal || e.percent != i.percent && !apart) {
        return None;
    }
    let unit = e.value.unit().max(lower.unit());
    let distance = if value.lo > whole.hi { value.lo - whole.hi } else { whole.lo - value.hi };
    let at_limit = inside && at_a_limit(e, lower, upper);
    let slip = (!inside).then(|| inside_slip(e, lower, upper)).flatten();
    let unclear = case.has(crate::result::Feature::Unclear);
    let verdict = match (inside && !at_limit, unclear || !inside && distance < unit) {
        (true, _) => Verdict::Tallies,
        (false, true) => Verdict::Undecided,
        (false, false) => Verdict::Differs,
    };
    // Ten times the figure, away from 0, would have been noticed.
    let tenfold = value * 10.0;
    let noticed = !whole.meets(tenfold);
    Some(Recomputation {
        of: Quantity::Interval,
        method: &method::INSIDE,
        ground: Ground::ByDefinition,
        computed: Some(value),
        printed: Some(Range::new(i.lower.value(), i.upper.value())),
        verdict,
        sharp: verdict == Verdict::Differs || verdict == Verdict::Tallies && noticed,
        reason: if reversed {
            Some(reason::REVERSED.into())
        } else if verdict == Verdict::Undecided {
            Some(reason::CLOSE.into())
        } else {
            None
        },
        working: match (inside, at_limit) {
            (true, false) => format!("{} lies within {lower} to {upper}", e.value),
            (true, true) => format!("{} is itself a limit of {lower} to {upper}", e.value),
            (false, _) => format!("{} lies outside {lower} to {upper}", e.value),
        },
        assumptions: Vec::new(),
        distance: (verdict == Verdict::Differs)
            .then_some(Distance { size: if at_limit { 1.0 } else { distance / unit }, across_alpha: false }),
        slip,
        figure: i.span,
        inputs: vec![(e.span, "the estimate"), (i.span, "the interval")],
    })
}

/// What limits without a percent sign may be limits of, for an estimate printed in percent.
fn readings_of_percent(value: Range) -> [Range; 6] {
    let part = value * 0.01;
    let from = |whole: f64, r: Range| Range::new(whole - r.hi, whole - r.lo);
    [value, part, from(1.0, part), Range::new(1.0 + part.lo, 1.0 + part.hi), from(100.0, value), value * -1.0]
}

/// Whether a ratio is printed as one of its own limits while the other lies far off: no usual interval of a ratio begins
/// or ends at its estimate.
fn at_a_limit(e: &Estimate, lower: Printed, upper: Printed) -> bool {
    if e.scale != Scale::Ratio || lower.value() <= 0.0 || upper.value() < 1.5 * lower.value() {
        return false;
    }
    // Few digits may put an estimate that lies well inside on its limit.
    let coarse = |limit: Printed| limit.unit() > 0.05 * limit.value();
    let same = |limit: Printed| e.value.value() == limit.value() && !coarse(limit);
    same(lower) || same(upper)
}

fn inside_slip(e: &Estimate, lower: Printed, upper: Printed) -> Option<Slip> {
    let fits = |value: Printed, l: Printed, u: Printed| {
        let e = Estimate { value, ..e.clone() };
        let scale = if e.scale == Scale::Ratio { Scale::Ratio } else { Scale::Difference };
        l.value() <= value.value()
            && value.value() <= u.value()
            && Wald::new(scale, &e, l, u).is_some_and(|w| w.symmetric())
    };
    if e.scale != Scale::Ratio {
        for (value, l, u) in [
            (e.value.negated(), lower, upper),
            (e.value, lower.negated(), upper),
            (e.value, upper.negated(), lower.negated()),
        ] {
            if fits(value, l, u) {
                return Some(Slip { kind: "sign-lost", says: "with a sign turned the estimate lies inside".into() });
            }
        }
    }
    if let Some(x) = slip::moved(e.value).find(|x| fits(*x, lower, upper)) {
        let says = format!("with its decimal point moved the estimate reads {}", x.value());
        return Some(Slip { kind: "decimal-point", says });
    }
    let x = slip::swapped(e.value).find(|x| fits(*x, lower, upper))?;
    Some(Slip { kind: "digits-swapped", says: format!("with two digits swapped the estimate reads {x}") })
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    proptest! {
        #[test]
        fn p_of_ratio_encloses_the_box(k in 0.0..4.0f64, w in 0.0..0.3f64, d in 1.0..60.0f64, dw in 0.0..200.0f64,
            u in 0.0..1.0f64, v in 0.0..1.0f64) {
            let p = p_of_ratio(Range::new(k, k + w), 95.0, Range::new(d, d + dw)).unwrap();
            let inside = p_of_ratio(Range::point(k + u * w), 95.0, Range::point(d + v * dw)).unwrap();
            prop_assert!(p.lo <= inside.hi && inside.lo <= p.hi && p.contains(inside.middle()));
        }

        #[test]
        fn ratio_encloses_the_box(e in -3.0..3.0f64, half in 0.1..3.0f64, u in 0.0..1.0f64, v in 0.0..1.0f64, w in 0.0..1.0f64) {
            let r = |x: f64| Range::new(x - 0.05, x + 0.05);
            let wald = Wald { estimate: r(e), lower: r(e - half), upper: r(e + half) };
            let at = |r: Range, u: f64| r.lo + u * r.width();
            let half_at = (at(wald.upper, w) - at(wald.lower, v)) / 2.0;
            if half_at > 0.0 {
                prop_assert!(wald.ratio().widened(1e-12).contains(at(wald.estimate, u).abs() / half_at));
            }
        }
    }
}
