//! p and test statistics from the summaries of groups.

use super::case::{Case, own, size};
use super::mean::{self, Summary, Tested};
use super::proportion::{self, Cell};
use super::target::{Fit, Target};
use super::verdict::{Candidate, Inputs, Line, Policy, judge};
use super::{Quantity, Recomputation, Slip, method, reason, slip, statistic, tail, working};
use crate::context::Test;
use crate::distribution;
use crate::printed::{Printed, Range};
use crate::query::Ground;
use crate::reading::{Assumption, Figure, Group, Origin, Relation, SpreadKind, Symbol};
use std::rc::Rc;

/// An objection needs p to be off by at least this much as a normal deviate, where the group sizes are printed with
/// the groups; more where they come from a header, whose n may shrink down a table.
const LEAST_SHIFT: f64 = 0.05;
const LEAST_SHIFT_HEADER_N: f64 = 0.1;

/// A spread read one way, with what to call it.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) enum Read {
    Sd,
    Se,
    /// An interval of the mean at this level in percent (in tenths).
    Ci,
}

/// The ways in which the groups' spreads may be read.
pub(crate) fn ways(case: &Case, groups: &[&Group]) -> Result<Vec<Read>, &'static str> {
    let kind = |g: &Group| match g.spread_kind {
        Some(SpreadKind::Unstated) => case.context.spread.map_or(SpreadKind::Unstated, |s| s.value),
        Some(kind) => kind,
        None => SpreadKind::Iqr,
    };
    let first = kind(groups[0]);
    if groups.iter().any(|g| kind(g) != first) {
        return Err(reason::NO_SPREAD);
    }
    match first {
        SpreadKind::Sd => Ok(vec![Read::Sd]),
        SpreadKind::Se => Ok(vec![Read::Se]),
        SpreadKind::Ci => Ok(vec![Read::Ci]),
        SpreadKind::Unstated if groups.iter().all(|g| g.spread.len() == 1) => Ok(vec![Read::Sd, Read::Se]),
        _ => Err(reason::NO_SPREAD),
    }
}

/// n, mean and SD of a group, its spread read as `read`.
pub(crate) fn summary(g: &Group, read: Read) -> Result<Summary, &'static str> {
    let n = size(g).ok_or(reason::NO_SIZES)?.printed.value();
    let mean = g.mean.ok_or(reason::MEDIANS)?.rounded();
    if n < 2.0 {
        return Err(reason::NO_SIZES);
    }
    let positive = |r: Range| r.clamped(0.0, f64::INFINITY);
    let sd = match (read, g.spread.as_slice()) {
        (Read::Sd, [sd]) => positive(sd.rounded()),
        (Read::Se, [se]) => positive(se.rounded()) * n.sqrt(),
        (Read::Ci, [lower, upper]) => {
            let half = positive(upper.rounded() - lower.rounded()) * 0.5;
            let critical = tail::critical(0.025, n - 1.0).ok_or(reason::NO_SIZES)?;
            half * (n.sqrt() / critical)
        }
        _ => return Err(reason::NO_SPREAD),
    };
    if sd.hi <= 0.0 || g.spread.iter().all(|s| s.digits == 0) {
        return Err(reason::NO_SPREAD);
    }
    Ok(Summary { n, mean, sd })
}

pub(crate) fn summaries(groups: &[&Group], read: Read) -> Result<Vec<Summary>, &'static str> {
    groups.iter().map(|g| summary(g, read)).collect()
}

/// Stands for a size that is not printed where the spread is a standard error or an interval: it drops out as it grows.
const LARGE: f64 = 1e6;

/// Summaries without any sizes whose spreads are errors of the mean: the comparison is that by z.
fn without_sizes(groups: &[&Group], read: Read) -> Option<Vec<Summary>> {
    if read == Read::Sd || groups.iter().any(|g| size(g).is_some()) {
        return None;
    }
    let large = |g: &&Group| {
        let origin = Origin::Assumed(Assumption::PlausibleDf);
        let sized = Group { n: Some(Figure { printed: Printed::whole(LARGE as u64), origin }), ..(**g).clone() };
        summary(&sized, read).ok()
    };
    groups.iter().map(large).collect()
}

/// The counts of one group, and whether its total had to be guessed at.
pub(crate) fn cell(g: &Group) -> Result<(Cell, bool), &'static str> {
    let n = g.total.or(g.n).and_then(|f| f.printed.count()).filter(|n| *n > 0);
    let events = g.events.and_then(|f| f.printed.count());
    match (events, n, g.percent) {
        (Some(e), Some(n), percent) => {
            let fits = |p: crate::printed::Printed| {
                Target::figure(p, g.span).fit(Range::point(100.0 * e as f64 / n as f64)) != Fit::Off
            };
            if e <= n && percent.is_none_or(fits) {
                return Ok((Cell::exact(e, n), false));
            }
            let percent = percent.ok_or(reason::DENOMINATOR)?;
            Cell::from_events(e, percent.rounded()).map(|c| (c, true)).ok_or(reason::DENOMINATOR)
        }
        (Some(e), None, Some(percent)) => {
            Cell::from_events(e, percent.rounded()).map(|c| (c, false)).ok_or(reason::NO_SIZES)
        }
        (None, Some(n), Some(percent)) => Cell::from_percent(percent.rounded(), n)
            .or_else(|| Cell::from_percent(percent.cut(), n))
            .map(|c| (c, false))
            .ok_or(reason::DENOMINATOR),
        _ => Err(reason::NO_SIZES),
    }
}

/// The spans of sizes, and whether all of them stand with their groups.
fn size_inputs(groups: &[&Group]) -> (Inputs, bool) {
    let sizes: Vec<_> = groups.iter().filter_map(|g| size(g)).collect();
    let mut inputs: Inputs = groups.iter().map(|g| (g.span, "the group's summary")).collect();
    inputs.extend(sizes.iter().filter_map(Figure::place).map(|span| (span, "the group size")));
    (inputs, sizes.iter().all(own))
}

fn sizes_line(n: impl Iterator<Item = f64>) -> String {
    format!("n = {}", working::list(&n.map(|n| format!("{n}")).collect::<Vec<_>>()))
}

fn policy(case: &Case, of: Quantity, own_sizes: bool) -> Policy {
    let rivals = case.rivals_proposed();
    Policy {
        of,
        ground: case.group_ground(),
        hold: case.group_hold(),
        least: if rivals { 2.0 } else { 1.05 },
        least_shift: if rivals || !own_sizes { LEAST_SHIFT_HEADER_N } else { LEAST_SHIFT },
        alpha: case.alpha,
        stated: case.stated(),
    }
}

fn means_candidates(case: &Case, groups: &[&Group]) -> Result<(Vec<Candidate>, Vec<Tested>), &'static str> {
    let ways = ways(case, groups)?;
    let mut candidates = Vec::new();
    let mut tests = Vec::new();
    for &read in &ways {
        let by_z = if ways.len() == 1 { without_sizes(groups, read) } else { None };
        let sized = by_z.is_none();
        let s = match by_z {
            Some(s) => s,
            None => summaries(groups, read)?,
        };
        let named = match (ways.len(), read) {
            (1, Read::Ci) => "; SD from the intervals",
            (1, Read::Se) => "; SD from the SEs",
            (1, _) => "",
            (_, Read::Sd) => "; ± read as SD",
            (_, _) => "; ± read as SE",
        };
        let sizes = if sized { sizes_line(s.iter().map(|s| s.n)) } else { "n not printed, taken as large".into() };
        let on: Rc<str> = format!("{sizes}{named}").into();
        let mut add = |tested: Option<Tested>, method, short: &'static str, symbol: &'static str, variants: &[Test]| {
            let Some(t) = tested else { return };
            let line = Line::Test { on: on.clone(), short, symbol, tested: t };
            let mut c = Candidate::new(method, short, t.p, line).assuming(Assumption::Unadjusted);
            if ways.len() > 1 {
                c = c.assuming(Assumption::SpreadUnnamed);
            }
            c.decides = case.decides(variants);
            candidates.push(c);
            tests.push(t);
        };
        if let [a, b] = s[..] {
            add(
                mean::two_means(a, b, false),
                &method::POOLED_T,
                "pooled t test",
                "t",
                &[Test::T, Test::Anova, Test::Z],
            );
            let variants = &[Test::T, Test::WelchT, Test::Z];
            add(mean::two_means(a, b, true), &method::WELCH_T, "Welch", "t", variants);
        } else {
            add(mean::anova(&s), &method::ANOVA, "one-way ANOVA", "F", &[Test::Anova]);
        }
    }
    if candidates.is_empty() { Err(reason::NO_METHOD) } else { Ok((candidates, tests)) }
}

/// p from means, spreads and sizes.
pub(crate) fn p_from_means(case: &Case) -> Result<Option<Recomputation>, &'static str> {
    let Some(p) = case.p else { return Ok(None) };
    let groups = &case.groups;
    if groups.len() < 2 {
        return Err(reason::ONE_GROUP);
    }
    let Some(target) = Target::p(p, case.alpha) else { return Ok(None) };
    let (mut candidates, _) = means_candidates(case, groups)?;
    let (inputs, own_sizes) = size_inputs(groups);
    let mut policy = policy(case, Quantity::P, own_sizes);
    if groups.iter().any(|g| size(g).is_none()) {
        policy.hold = policy.hold.or(Some(reason::NO_SIZES));
    }
    one_sided_too(case, &mut candidates);
    if groups.len() > 2
        && policy.stated != Some(Test::Anova)
        && candidates.iter().all(|c| target.fit(c.range) == Fit::Off)
    {
        // The p may be that of two of the groups.
        let pairs = (0..groups.len()).flat_map(|i| (i + 1..groups.len()).map(move |j| (i, j))).take(15);
        let pair = |(i, j): (usize, usize)| means_candidates(case, &[groups[i], groups[j]]).ok();
        if pairs.filter_map(pair).any(|(c, _)| c.iter().any(|c| target.fit(c.range) != Fit::Off)) {
            policy.hold = policy.hold.or(Some(reason::OTHER_GROUPS));
        }
    }
    let slips = || means_slip(case, &target);
    Ok(judge(&target, candidates, &policy, inputs, slips))
}

fn one_sided_too(case: &Case, candidates: &mut Vec<Candidate>) {
    if !case.one_sided() || case.groups.len() != 2 {
        return;
    }
    let halves: Vec<Candidate> = candidates
        .iter()
        .map(|c| Candidate {
            range: statistic::halved(c.range),
            working: format!("{}, one-sided", c.working).into(),
            ..c.clone()
        })
        .collect();
    candidates.extend(halves);
}

fn means_slip(case: &Case, target: &Target) -> Option<Slip> {
    let p = case.p?;
    let groups = &case.groups;
    let fits = |r: Range| target.fit(r) == Fit::Full && target.sharp_against(r);
    let ways = ways(case, groups).ok()?;
    let tests = |read: Read, n: &[Option<f64>]| -> Vec<Range> {
        let Ok(mut s) = summaries(groups, read) else { return Vec::new() };
        for (s, n) in s.iter_mut().zip(n) {
            s.n = n.unwrap_or(s.n);
        }
        match s[..] {
            [a, b] => [false, true].into_iter().filter_map(|w| mean::two_means(a, b, w)).map(|t| t.p).collect(),
            _ => mean::anova(&s).map(|t| t.p).into_iter().collect(),
        }
    };
    let as_printed: Vec<Range> = ways.iter().flat_map(|&w| tests(w, &[])).collect();
    if groups.len() == 2 && as_printed.iter().any(|&r| fits(statistic::halved(r))) {
        return Some(Slip { kind: "one-sided", says: "it agrees with a one-sided test".into() });
    }
    if ways == [Read::Sd] && tests(Read::Se, &[]).into_iter().any(fits) {
        return Some(Slip { kind: "se-for-sd", says: "it agrees when the spreads are standard errors".into() });
    }
    if ways == [Read::Se] && tests(Read::Sd, &[]).into_iter().any(fits) {
        return Some(Slip { kind: "sd-for-se", says: "it agrees when the spreads are standard deviations".into() });
    }
    let other = other_sizes(case);
    if !other.is_empty() && ways.iter().any(|&w| tests(w, &other).into_iter().any(fits)) {
        let n = working::list(&other.iter().flatten().map(|n| format!("{n}")).collect::<Vec<_>>());
        return Some(Slip { kind: "group-size", says: format!("it agrees with group sizes of {n}") });
    }
    slip::in_p(p.value.filter(|_| p.relation == Relation::Equal), &as_printed)
}

/// Whether two names are one, case ignored.
fn same_name(a: &str, b: &str) -> bool {
    if a.is_ascii() && b.is_ascii() {
        return a.eq_ignore_ascii_case(b);
    }
    a.chars().flat_map(char::to_lowercase).eq(b.chars().flat_map(char::to_lowercase))
}

/// The sizes of the arms that bear the groups' names, where they are other ones.
fn other_sizes(case: &Case) -> Vec<Option<f64>> {
    // Sizes that are not known for all groups are of no use.
    let arms = &case.context.arms;
    if arms.is_empty() || case.groups.iter().any(|g| g.label.is_empty()) {
        return Vec::new();
    }
    let arm = |g: &&Group| arms.iter().find(|a| same_name(&a.label, &g.label)).map(|a| a.n as f64);
    let sizes: Vec<Option<f64>> = case.groups.iter().map(arm).collect();
    let differ =
        case.groups.iter().zip(&sizes).any(|(g, n)| n.is_some_and(|n| size(g).is_some_and(|f| f.printed.value() != n)));
    if differ && sizes.iter().all(Option::is_some) { sizes } else { Vec::new() }
}

/// Cells of all groups; whether they form one row per group, or several categories over the same arms.
fn cells(groups: &[&Group]) -> Result<(Vec<Cell>, bool), &'static str> {
    let mut doubtful = false;
    let mut cells = Vec::with_capacity(groups.len());
    for g in groups {
        let (c, d) = cell(g)?;
        doubtful |= d;
        cells.push(c);
    }
    Ok((cells, doubtful))
}

/// Exhaustive categories over the same arms: the rows of a table, and its number of columns.
fn categories(cells: &[Cell]) -> Option<Vec<Vec<u64>>> {
    if cells.len() < 4 || cells.iter().any(|c| c.events.0 != c.events.1) {
        return None;
    }
    let by_columns = |arms: usize, interleaved: bool| -> Option<Vec<Vec<u64>>> {
        let rows = cells.len() / arms;
        let at = |i: usize, j: usize| if interleaved { i * arms + j } else { j * rows + i };
        let table: Vec<Vec<u64>> = (0..rows).map(|i| (0..arms).map(|j| cells[at(i, j)].events.0).collect()).collect();
        let sums_to_total = (0..arms).all(|j| {
            let total = table.iter().map(|r| r[j]).sum::<u64>();
            (0..rows).map(|i| cells[at(i, j)].total).all(|(least, most)| least <= total && total <= most)
        });
        sums_to_total.then_some(table)
    };
    let divisors = (2..=cells.len() / 2).filter(|k| cells.len().is_multiple_of(*k));
    divisors.flat_map(|k| [(k, true), (k, false)]).find_map(|(k, way)| by_columns(k, way))
}

/// p from counts and totals, or from percentages and sizes.
pub(crate) fn p_from_counts(case: &Case) -> Result<Option<Recomputation>, &'static str> {
    let Some(p) = case.p else { return Ok(None) };
    if case.groups.len() < 2 {
        return Err(reason::ONE_GROUP);
    }
    let Some(target) = Target::p(p, case.alpha) else { return Ok(None) };
    let (cells, doubtful) = cells(&case.groups)?;
    let (inputs, own_sizes) = size_inputs(&case.groups);
    let mut policy = policy(case, Quantity::P, own_sizes);
    if doubtful {
        policy.hold = policy.hold.or(Some(reason::SIZES_DOUBTFUL));
    }
    let mut candidates = match categories(&cells) {
        Some(table) => table_candidates(case, &table)?,
        None => counts_candidates(case, &cells, &target)?,
    };
    if cells.len() > 2 && candidates.iter().all(|c| target.fit(c.range) == Fit::Off) {
        // One p beside several groups may compare two of them, or several outcomes.
        let stated = policy.stated.is_some() && cells.len() == 3;
        let pair = |i: usize, j: usize| counts_candidates(case, &[cells[i], cells[j]], &target).ok();
        let mut pairs = (0..cells.len()).flat_map(|i| (i + 1..cells.len()).map(move |j| (i, j))).take(15);
        if !stated || pairs.any(|(i, j)| pair(i, j).is_some_and(|c| c.iter().any(|c| target.fit(c.range) != Fit::Off)))
        {
            policy.hold = policy.hold.or(Some(reason::OTHER_GROUPS));
        }
    }
    one_sided_too(case, &mut candidates);
    let slips = || counts_slip(case, &cells, &target);
    Ok(judge(&target, candidates, &policy, inputs, slips))
}

fn cells_line(cells: &[Cell]) -> String {
    let span = |(lo, hi): (u64, u64)| if lo == hi { lo.to_string() } else { format!("{lo}–{hi}") };
    let shown: Vec<String> = cells.iter().map(|c| format!("{}/{}", span(c.events), span(c.total))).collect();
    working::list(&shown)
}

fn counts_candidates(case: &Case, cells: &[Cell], target: &Target) -> Result<Vec<Candidate>, &'static str> {
    let shown = cells_line(cells);
    let two = cells.len() == 2;
    let mut out: Vec<Candidate> = Vec::new();
    let mut add = |method, short: &'static str, p: Option<Range>, detail: String, variants: &[Test]| {
        let Some(p) = p else { return };
        let line = format!("{shown}; {short}{detail}; {}", working::p(p));
        let mut c = Candidate::new(method, short, p, line).assuming(Assumption::Unadjusted);
        c.decides = case.decides(variants);
        out.push(c);
    };
    let plain = proportion::chi_squared(cells, false).ok_or(reason::ROUGH)?;
    let detail = |x: Range| format!(", χ² = {}, df {}", working::range(x, 3), cells.len() - 1);
    let p = proportion::chi_squared_p(plain, cells.len());
    add(&method::PEARSON, "Pearson χ²", p, detail(plain), &[Test::ChiSquared, Test::Z]);
    if two {
        if let Some(x) = proportion::chi_squared(cells, true) {
            let p = proportion::chi_squared_p(x, 2);
            let variants = &[Test::ChiSquared, Test::YatesChiSquared];
            add(&method::YATES, "χ² with continuity correction", p, detail(x), variants);
        }
        let wald = proportion::wald_p(cells);
        add(&method::WALD_Z, "z test, unpooled", wald, String::new(), &[Test::Z]);
    }
    // Fisher's test is dear: only where it is named or nothing else agrees.
    let named = case.here().any(|t| t == Test::FisherExact);
    let fits = |c: &Candidate| target.fit(c.range) == Fit::Full;
    if named || !out.iter().any(fits) {
        let (p, range_shown) = if two { (proportion::fisher(cells), "") } else { (fisher_table(cells, named), "") };
        let shown = cells_line(cells);
        if let Some(p) = p {
            let line = format!("{shown}; Fisher{range_shown}; {}", working::p(p));
            let mut c = Candidate::new(&method::FISHER, "Fisher", p, line).assuming(Assumption::Unadjusted);
            c.decides = case.decides(&[Test::FisherExact]);
            out.push(c);
        }
    }
    Ok(out)
}

/// Fisher's test of several groups: only for small tables, since the work grows fast.
fn fisher_table(cells: &[Cell], named: bool) -> Option<Range> {
    // Of two rows there are at most so many tables as the smaller row can be shared out in.
    let events: u64 = cells.iter().map(|c| c.events.1).sum();
    let total: u64 = cells.iter().map(|c| c.total.1).sum();
    let tables = events.min(total.saturating_sub(events)).saturating_add(1).saturating_pow(cells.len() as u32 - 1);
    let small = tables <= if named { 100_000 } else { 20_000 } && total <= 5_000 && cells.len() <= 4;
    if !small || !cells.iter().all(Cell::is_exact) {
        return None;
    }
    let events: Vec<u64> = cells.iter().map(|c| c.events.0).collect();
    let others: Vec<u64> = cells.iter().map(|c| c.total.0 - c.events.0).collect();
    let p = distribution::fisher_exact_table(&[&events, &others]).ok()?;
    Some(Range::point(p).widened(distribution::RELATIVE_ERROR))
}

pub(crate) fn table_candidates(case: &Case, table: &[Vec<u64>]) -> Result<Vec<Candidate>, &'static str> {
    let (x, df) = proportion::pearson_table(table).ok_or(reason::NO_METHOD)?;
    let p = tail::chi_squared(Range::point(x).widened(1e-12), df).ok_or(reason::NO_METHOD)?;
    let rows: Vec<String> = table.iter().map(|r| r.iter().map(u64::to_string).collect::<Vec<_>>().join(", ")).collect();
    let line = format!("[{}]; Pearson χ² = {}, df {df}; {}", rows.join("; "), working::number(x, 3), working::p(p));
    let mut c = Candidate::new(&method::PEARSON, "Pearson χ²", p, line).assuming(Assumption::Unadjusted);
    c.decides = case.decides(&[Test::ChiSquared]);
    let mut out = vec![c];
    if let [yes, no] = table
        && let ([a, c], [b, d]) = (yes.as_slice(), no.as_slice())
    {
        let cells = [Cell::exact(*a, a + b), Cell::exact(*c, c + d)];
        if let Some(p) = proportion::fisher(&cells) {
            let line = format!("[{}]; Fisher; {}", rows.join("; "), working::p(p));
            let mut c = Candidate::new(&method::FISHER, "Fisher", p, line).assuming(Assumption::Unadjusted);
            c.decides = case.decides(&[Test::FisherExact]);
            out.push(c);
        }
        if let Some(p) = proportion::chi_squared(&cells, true).and_then(|x| proportion::chi_squared_p(x, 2)) {
            let line = format!("[{}]; χ² with continuity correction; {}", rows.join("; "), working::p(p));
            let mut c = Candidate::new(&method::YATES, "χ² with continuity correction", p, line);
            c.assumptions.push(Assumption::Unadjusted);
            c.decides = case.decides(&[Test::ChiSquared, Test::YatesChiSquared]);
            out.push(c);
        }
    }
    Ok(out)
}

fn counts_slip(case: &Case, cells: &[Cell], target: &Target) -> Option<Slip> {
    let p = case.p?;
    let fits = |r: Range| target.fit(r) == Fit::Full && target.sharp_against(r);
    let plain = proportion::chi_squared(cells, false).and_then(|x| proportion::chi_squared_p(x, cells.len()));
    if cells.len() == 2 {
        if plain.is_some_and(|r| fits(statistic::halved(r))) {
            return Some(Slip { kind: "one-sided", says: "it agrees with a one-sided test".into() });
        }
        if cells.iter().all(Cell::is_exact) {
            let ([a, c], [n1, n2]) = ([cells[0].events.0, cells[1].events.0], [cells[0].total.0, cells[1].total.0]);
            let exact = if n1 + n2 <= 20_000 { distribution::fisher_exact(a, n1 - a, c, n2 - c).ok() } else { None };
            if exact.is_some_and(|f| fits(Range::point(f.less.min(f.greater)))) {
                return Some(Slip { kind: "one-sided", says: "it agrees with Fisher's test one-sided".into() });
            }
        }
    }
    let other = other_sizes(case);
    if !other.is_empty() {
        let with = |(c, n): (&Cell, &Option<f64>)| n.map(|n| Cell { total: (n as u64, n as u64), ..*c });
        let cells: Option<Vec<Cell>> = cells.iter().zip(&other).map(with).collect();
        let cells = cells.filter(|c| c.iter().all(|c| c.events.1 <= c.total.0));
        let p = cells.and_then(|c| proportion::chi_squared_p(proportion::chi_squared(&c, false)?, c.len()));
        if p.is_some_and(fits) {
            let n = working::list(&other.iter().flatten().map(|n| format!("{n}")).collect::<Vec<_>>());
            return Some(Slip { kind: "group-size", says: format!("it agrees with group sizes of {n}") });
        }
    }
    let printed = p.value.filter(|_| p.relation == Relation::Equal);
    plain.and_then(|r| slip::in_p(printed, &[r]))
}

/// The printed t, F or χ² from the groups' summaries.
pub(crate) fn statistic_from_groups(case: &Case) -> Option<Recomputation> {
    let s = case.statistic?;
    if case.groups.len() < 2 || s.relation != Relation::Equal {
        return None;
    }
    let mut candidates: Vec<Candidate> = Vec::new();
    let mut add = |method, short, range: Range, line: String| {
        candidates.push(Candidate::new(method, short, range, line).assuming(Assumption::Unadjusted));
    };
    if case.groups.iter().all(|g| g.mean.is_some()) {
        let ways = ways(case, &case.groups).ok()?;
        for &read in &ways {
            let sum = summaries(&case.groups, read).ok()?;
            let n = sizes_line(sum.iter().map(|s| s.n));
            match (s.symbol, &sum[..]) {
                (Symbol::T, &[a, b]) => {
                    for (welch, short, method) in
                        [(false, "pooled", &method::POOLED_T), (true, "Welch", &method::WELCH_T)]
                    {
                        let t = mean::two_means(a, b, welch)?.statistic.abs();
                        add(method, short, t, format!("{n}; {short}; t = {}", working::range(t, 3)));
                    }
                }
                (Symbol::F, _) => {
                    let f = mean::anova(&sum)?.statistic;
                    add(&method::ANOVA, "one-way ANOVA", f, format!("{n}; F = {}", working::range(f, 3)));
                }
                _ => return None,
            }
        }
    } else if s.symbol == Symbol::ChiSquared {
        let (cells, _) = cells(&case.groups).ok()?;
        if categories(&cells).is_some() {
            return None;
        }
        let shown = cells_line(&cells);
        let x = proportion::chi_squared(&cells, false)?;
        add(&method::PEARSON, "Pearson", x, format!("{shown}; χ² = {}", working::range(x, 3)));
        if let Some(x) = proportion::chi_squared(&cells, true) {
            let line = format!("{shown}; corrected χ² = {}", working::range(x, 3));
            add(&method::YATES, "with continuity correction", x, line);
        }
    } else {
        return None;
    }
    let (inputs, own_sizes) = size_inputs(&case.groups);
    // Several outcomes, other groups or a model give another statistic: only two groups whose test is named
    // here are objected to.
    let settled = case.groups.len() == 2 && case.stated().is_some() && own_sizes;
    let hold = case.group_hold().or((!settled).then_some(reason::OTHER_TEST));
    let ground = if case.stated().is_some() { Ground::GivenTheStatedTest } else { Ground::IfUnadjusted };
    let policy =
        Policy { of: Quantity::Statistic, ground, hold, least: 1.0, least_shift: 0.0, alpha: case.alpha, stated: None };
    let mut out = judge(&Target::unsigned(s.value, s.span), candidates, &policy, inputs, || None)?;
    super::verdict::soften(&mut out, 0.1);
    Some(out)
}
