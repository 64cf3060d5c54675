//! p from a printed test statistic, and the statistic's degrees of freedom against the groups.

use super::case::{Case, own, size};
use super::target::{Fit, Target};
use super::verdict::{Candidate, Inputs, Policy, judge};
use super::{Distance, Method, Quantity, Recomputation, Slip, method, reason, slip, tail, working};
use crate::context::Test;
use crate::distribution;
use crate::printed::Range;
use crate::query::{Ground, Verdict};
use crate::reading::{Assumption, Estimate, Figure, Measure, Relation, Statistic, Symbol};
use crate::result::Feature;

/// What the printed statistic stands for. `F < 1` is a bound.
fn value_range(s: &Statistic) -> Range {
    let v = s.value.rounded();
    match s.relation {
        Relation::Less | Relation::AtMost => Range::new(if s.value.negative { f64::NEG_INFINITY } else { 0.0 }, v.hi),
        Relation::Greater | Relation::AtLeast => Range::new(v.lo, f64::INFINITY),
        _ => v,
    }
}

/// Degrees of freedom as printed: decimals are rounded; a whole number of ten or more may be a rounded
/// Welch–Satterthwaite value when `welch`.
fn df_range(figure: &Figure, welch: bool) -> Option<Range> {
    let printed = figure.printed;
    let v = printed.value();
    if !(v > 0.0 && v < 1e9) {
        return None;
    }
    Some(if printed.places > 0 || (welch && v >= 10.0) { printed.rounded() } else { Range::point(v) })
}

/// A sample size: printed with the statistic, or of the only group beside it.
fn sample(case: &Case, s: &Statistic) -> Option<(f64, Figure)> {
    let figure = s.n.or_else(|| match case.groups.as_slice() {
        [g] => size(g),
        _ => None,
    })?;
    let n = figure.printed.count()?;
    (n > 3).then_some((n as f64, figure))
}

/// p from t of a correlation: t = r √(df / (1 − r²)) grows with |r| and df.
pub(crate) fn correlation(r: Range, df: f64) -> Option<Range> {
    let t = |r: f64| if r >= 1.0 { f64::INFINITY } else { r * (df / (1.0 - r * r)).sqrt() };
    let r = r.abs().clamped(0.0, 1.0);
    tail::student(r.increasing(t), Range::point(df))
}

/// Normal deviate of U without and with continuity correction (ties unknown); falls as U nears n₁n₂/2.
pub(crate) fn mann_whitney(u: Range, n1: f64, n2: f64, correction: f64) -> Option<Range> {
    let (middle, sd) = (n1 * n2 / 2.0, (n1 * n2 * (n1 + n2 + 1.0) / 12.0).sqrt());
    let away = (u - Range::point(middle)).abs();
    tail::normal(away.increasing(|x| (x - correction).max(0.0) / sd))
}

/// p from the statistic, by its symbol. The reason when nothing can be computed.
pub(crate) fn p_from_statistic(case: &Case) -> Result<Option<Recomputation>, &'static str> {
    let (Some(p), Some(s)) = (case.p, case.statistic) else { return Ok(None) };
    let Some(target) = Target::p(p, case.alpha) else { return Ok(None) };
    let mut inputs: Inputs = vec![(s.span, "the test statistic")];
    for df in [s.df1, s.df2].iter().flatten() {
        if let Some(span) = df.place().filter(|x| !s.span.contains(*x)) {
            inputs.push((span, "the degrees of freedom"));
        }
    }
    let mut ground = Ground::ByDefinition;
    let mut hold = (p.corrected || case.has(Feature::Corrected)).then_some(reason::CORRECTED);
    if case.has(Feature::Unclear) {
        hold = Some(reason::UNCLEAR);
    }
    if case.here().any(|t| t == Test::PostHoc) {
        hold = Some(reason::CORRECTED);
    }
    let candidates = candidates(case, s, value_range(s), &mut ground, &mut hold, &mut inputs)?;
    if candidates.is_empty() {
        return Err(reason::NO_METHOD);
    }
    let mut all = candidates.clone();
    let one_sided = matches!(s.symbol, Symbol::T | Symbol::Z | Symbol::R | Symbol::Rho);
    if case.one_sided() && one_sided {
        all.extend(candidates.iter().map(|c| Candidate {
            range: halved(c.range),
            working: format!("{}, one-sided", c.working).into(),
            ..c.clone()
        }));
    }
    let policy =
        Policy { of: Quantity::P, ground, hold, least: 1.0, least_shift: 0.0, alpha: case.alpha, stated: None };
    let slips = || {
        if one_sided && candidates.iter().any(|c| target.fit(halved(c.range)) == Fit::Full) {
            return Some(Slip { kind: "one-sided", says: "it agrees with a one-sided test".into() });
        }
        let ranges: Vec<Range> = candidates.iter().map(|c| c.range).collect();
        slip::in_p(p.value.filter(|_| p.relation == Relation::Equal), &ranges).or_else(|| moved_statistic(s, &target))
    };
    let mut out = judge(&target, all, &policy, inputs, slips);
    if let Some(r) = out.as_mut().filter(|r| r.verdict == Verdict::Differs && s.relation == Relation::Equal) {
        // The statistic may be cut instead of rounded.
        let (mut ground, mut hold, mut inputs) = (policy.ground, None, Inputs::new());
        let cut = self::candidates(case, s, s.value.cut(), &mut ground, &mut hold, &mut inputs)?;
        if let Some(c) = cut.into_iter().find(|c| target.fit(c.range) == Fit::Full) {
            r.verdict = Verdict::Tallies;
            r.sharp = target.sharp_against(c.range);
            r.reason = Some(reason::CUT.into());
            (r.computed, r.working, r.distance, r.slip) = (Some(c.range), c.working.to_string(), None, None);
        }
    }
    Ok(out)
}

pub(crate) fn halved(p: Range) -> Range {
    Range::new(p.lo / 2.0, p.hi / 2.0)
}

/// The statistic with its decimal point lost or moved restores p.
fn moved_statistic(s: &Statistic, target: &Target) -> Option<Slip> {
    let df = |f: Option<Figure>| f.map(|f| Range::point(f.printed.value())).filter(|r| r.lo > 0.0);
    let p = |value: Range| match s.symbol {
        Symbol::T => tail::student(value, df(s.df1)?),
        Symbol::F => tail::f(value, df(s.df1)?, df(s.df2)?),
        Symbol::ChiSquared => tail::chi_squared(value, df(s.df1)?.lo),
        Symbol::Z => tail::normal(value),
        _ => None,
    };
    let fits = |x: &crate::printed::Printed| {
        p(x.rounded()).is_some_and(|r| target.fit(r) == Fit::Full && target.sharp_against(r))
    };
    if let Some(x) = slip::swapped(s.value).find(fits) {
        return Some(Slip { kind: "digits-swapped", says: format!("it agrees with a statistic of {x}") });
    }
    let x = slip::moved(s.value).find(fits)?;
    Some(Slip { kind: "decimal-point", says: format!("it agrees with a statistic of {}", x.value()) })
}

fn candidates(
    case: &Case,
    s: &Statistic,
    value: Range,
    ground: &mut Ground,
    hold: &mut Option<&'static str>,
    inputs: &mut Inputs,
) -> Result<Vec<Candidate>, &'static str> {
    let mut out = Vec::new();
    let mut add = |method: &'static Method, short, range: Option<Range>, line: String| {
        if let Some(range) = range {
            let working = format!("{line}; {}", working::p(range));
            out.push(Candidate::new(method, short, range, working));
        }
    };
    match s.symbol {
        Symbol::Z => add(&method::Z_STATISTIC, "z", tail::normal(value), format!("z = {}", s.value)),
        Symbol::T => {
            if let Some(df) = s.df1 {
                let range = df_range(&df, true).ok_or(reason::NO_DF)?;
                add(
                    &method::T_STATISTIC,
                    "t",
                    tail::student(value, range),
                    format!("t = {}, df {}", s.value, df.printed),
                );
            } else {
                *ground = Ground::IfOneMethod;
                // Without any size, all degrees of freedom: |t| < 1 is far from significant with any.
                let (low, high) = plausible_df(case).unwrap_or((1.0, f64::INFINITY));
                for g in &case.groups {
                    inputs.extend(size(g).and_then(|n| n.place()).map(|span| (span, "the group size")));
                }
                if high.is_infinite() || case.groups.iter().any(|g| !size(g).is_some_and(|n| own(&n))) {
                    *hold = hold.or(Some(reason::NO_DF));
                }
                let line = format!("t = {}, df {}", s.value, working::range(Range::new(low, high), 3));
                add(&method::T_STATISTIC, "t", tail::student(value, Range::new(low, high)), line);
            }
        }
        Symbol::F => {
            let df2 = s.df2.or(s.df1.filter(|_| s.df2.is_some()));
            let (Some(d1), Some(d2)) = (s.df1, df2) else { return Err(reason::NO_DF) };
            let (r1, r2) = (df_range(&d1, false).ok_or(reason::NO_DF)?, df_range(&d2, false).ok_or(reason::NO_DF)?);
            let line = format!("F = {}, df {} and {}", s.value, d1.printed, d2.printed);
            add(&method::F_STATISTIC, "F", tail::f(value, r1, r2), line);
        }
        Symbol::ChiSquared | Symbol::Q | Symbol::H => {
            let kruskal = s.symbol == Symbol::H;
            let name = if kruskal { "H" } else { "χ²" };
            let method = if kruskal { &method::KRUSKAL_WALLIS } else { &method::CHI_STATISTIC };
            if let Some(df) = s.df1 {
                let range = df_range(&df, false).ok_or(reason::NO_DF)?;
                add(
                    method,
                    name,
                    tail::chi_squared(value, range.middle()),
                    format!("{name} = {}, df {}", s.value, df.printed),
                );
                if kruskal && case.groups.iter().filter_map(|g| size(g)).any(|n| n.printed.value() < 6.0) {
                    *hold = hold.or(Some(reason::APPROXIMATE));
                }
            } else {
                *ground = Ground::IfOneMethod;
                let two_counts =
                    case.groups.len() == 2 && case.groups.iter().all(|g| g.events.is_some() || g.percent.is_some());
                let df = match (two_counts, kruskal) {
                    (true, false) => 1.0,
                    (_, true) if case.groups.len() >= 2 => case.groups.len() as f64 - 1.0,
                    _ => return Err(reason::NO_DF),
                };
                if case.has(Feature::OtherGroups) || kruskal {
                    *hold = hold.or(Some(reason::OTHER_GROUPS));
                }
                add(
                    method,
                    name,
                    tail::chi_squared(value, df),
                    format!("{name} = {}, df {df} from the groups", s.value),
                );
            }
        }
        Symbol::R | Symbol::Rho => {
            let rank = s.symbol == Symbol::Rho;
            let name = if rank { "rho" } else { "r" };
            if value.lo > 1.0 || value.hi < -1.0 {
                return Err(reason::NO_METHOD);
            }
            let df = match (s.df1, sample(case, s)) {
                (Some(df), _) => df.printed.value(),
                (None, Some((n, figure))) => {
                    inputs.extend(figure.place().map(|span| (span, "the number of participants")));
                    *ground = Ground::IfOneMethod;
                    if !own(&figure) {
                        *hold = hold.or(Some(reason::SIZES_DOUBTFUL));
                    }
                    if case.has(Feature::Ranked) {
                        let z = value.abs() * n.sqrt();
                        add(
                            &method::R_FROM_Z,
                            "r = z/√n",
                            tail::normal(z),
                            format!("r = {}, n = {n}; z = r√n", s.value),
                        );
                    }
                    n - 2.0
                }
                _ => return Err(reason::NO_SIZES),
            };
            if df <= 0.0 {
                return Err(reason::NO_SIZES);
            }
            if rank {
                *ground = Ground::IfOneMethod;
                if df < 28.0 {
                    *hold = hold.or(Some(reason::APPROXIMATE));
                }
            }
            let method = if rank { &method::RHO_STATISTIC } else { &method::R_STATISTIC };
            add(method, name, correlation(value, df), format!("{name} = {}, df {df}", s.value));
        }
        Symbol::U => {
            let sizes: Vec<u64> = case.groups.iter().filter_map(|g| size(g)?.printed.count()).collect();
            let [n1, n2] = sizes[..] else { return Err(reason::NO_SIZES) };
            *ground = Ground::IfOneMethod;
            // Ties, unknown here, change the variance.
            *hold = Some(reason::RANKED);
            let line = format!("U = {}, n = {n1} and {n2}", s.value);
            let (a, b) = (n1 as f64, n2 as f64);
            add(&method::MANN_WHITNEY, "U", mann_whitney(value, a, b, 0.0), format!("{line}; normal approximation"));
            add(&method::MANN_WHITNEY, "U", mann_whitney(value, a, b, 0.5), format!("{line}; continuity correction"));
            if n1 * n2 <= 400
                && let Some(u) = s.value.count()
                && let Ok(tails) = distribution::mann_whitney_exact(u, n1, n2)
            {
                let exact = (2.0 * tails.lower.min(tails.upper)).min(1.0);
                let range = Range::point(exact).widened(distribution::RELATIVE_ERROR);
                add(&method::MANN_WHITNEY, "U", Some(range), format!("{line}; exact"));
            }
        }
        Symbol::W | Symbol::Tau | Symbol::Other => return Err(reason::NO_METHOD),
    }
    if s.df1.is_none() {
        for c in &mut out {
            if matches!(s.symbol, Symbol::T | Symbol::ChiSquared | Symbol::H | Symbol::Q) {
                c.assumptions.push(Assumption::PlausibleDf);
            }
        }
    }
    Ok(out)
}

/// The degrees of freedom that two groups allow: from Welch's least to n₁ + n₂ − 2.
pub(crate) fn plausible_df(case: &Case) -> Option<(f64, f64)> {
    let n: Vec<f64> = case.groups.iter().filter_map(|g| size(g).map(|f| f.printed.value())).collect();
    match n[..] {
        [a, b] if a > 1.0 && b > 1.0 => Some((a.min(b) - 1.0, a + b - 2.0)),
        _ => None,
    }
}

/// Printed degrees of freedom of t larger than two printed group sizes allow.
pub(crate) fn df_against_groups(case: &Case) -> Option<Recomputation> {
    let s = case.statistic.filter(|s| s.symbol == Symbol::T)?;
    let df = s.df1?;
    let [g1, g2] = case.groups[..] else { return None };
    let (n1, n2) = (g1.n.or(g1.total)?, g2.n.or(g2.total)?);
    let most = n1.printed.count()? as f64 + n2.printed.count()? as f64 - 2.0;
    let printed = df.printed.rounded();
    if printed.lo <= most + 0.5 || case.group_hold().is_some() || !own(&n1) || !own(&n2) {
        return None;
    }
    let text = format!("n = {} and {}; df at most {most}", n1.printed, n2.printed);
    Some(Recomputation {
        of: Quantity::Df,
        method: &method::T_DF,
        ground: Ground::IfUnadjusted,
        computed: Some(Range::new(1.0, most)),
        printed: Some(printed),
        verdict: Verdict::Differs,
        sharp: true,
        reason: None,
        working: text,
        assumptions: vec![Assumption::Unadjusted],
        distance: Some(Distance { size: printed.lo - most, across_alpha: false }),
        slip: None,
        figure: df.place().unwrap_or(s.span),
        inputs: [n1, n2].iter().filter_map(|n| n.place().map(|span| (span, "the group size"))).collect(),
    })
}

/// Partial η² = F·df₁ / (F·df₁ + df₂), which grows with F. Agreement only: there are other kinds of η².
pub(crate) fn eta_squared(case: &Case, e: &Estimate) -> Option<Recomputation> {
    let s = case.statistic.filter(|s| s.symbol == Symbol::F && e.measure == Measure::EtaSquared)?;
    let (d1, d2) = (s.df1?.printed.value(), s.df2?.printed.value());
    if d1 <= 0.0 || d2 <= 0.0 {
        return None;
    }
    let range = s.value.rounded().clamped(0.0, f64::MAX).increasing(|f| f * d1 / (f * d1 + d2));
    let line = format!("F = {}, df {d1} and {d2}; η² = {}", s.value, working::range(range, 3));
    let candidate = Candidate::new(&method::ETA, "partial η²", range, line);
    let policy = Policy {
        of: Quantity::Estimate,
        ground: Ground::IfOneMethod,
        hold: Some(reason::NO_METHOD),
        least: 0.0,
        least_shift: 0.0,
        alpha: case.alpha,
        stated: None,
    };
    judge(&Target::figure(e.value, e.span), vec![candidate], &policy, vec![(s.span, "the test statistic")], || None)
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    proptest! {
        #[test]
        fn correlation_encloses_and_is_attained(r in -0.99..0.99f64, w in 0.0..0.009f64, df in 1u32..200, u in 0.0..1.0f64) {
            let range = Range::new(r, r + w);
            let df = f64::from(df);
            let p = correlation(range, df).unwrap();
            let at = |r: f64| correlation(Range::point(r), df).unwrap();
            prop_assert!(p.contains(at(r + u * w).middle()));
            prop_assert!((p.lo - at(range.abs().hi).lo).abs() <= 1e-9 * p.lo.max(1e-300));
        }

        #[test]
        fn mann_whitney_encloses(u0 in 0.0..100.0f64, w in 0.0..1.0f64, v in 0.0..1.0f64, cc in 0u8..2) {
            let cc = f64::from(cc) / 2.0;
            let p = mann_whitney(Range::new(u0, u0 + w), 10.0, 12.0, cc).unwrap();
            prop_assert!(p.contains(mann_whitney(Range::point(u0 + v * w), 10.0, 12.0, cc).unwrap().middle()));
        }
    }
}
