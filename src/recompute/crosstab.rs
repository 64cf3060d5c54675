//! p of a table of categories by groups: the counts of a block of rows.

use super::case::Case;
use super::groups::table_candidates;
use super::target::{Fit, Target};
use super::verdict::{Candidate, Inputs, Policy, judge};
use super::{Quantity, Recomputation, reason};
use crate::context::Test;
use crate::distribution;
use crate::printed::Range;

/// p from the counts of a block, one row for each category.
pub(crate) fn p_from_table(case: &Case) -> Result<Option<Recomputation>, &'static str> {
    let Some(p) = case.p else { return Ok(None) };
    let Some(target) = Target::p(p, case.alpha) else { return Ok(None) };
    let arms = case.result.arms;
    let mut rows: Vec<Vec<u64>> = Vec::new();
    for row in case.groups.chunks(arms) {
        let counts: Option<Vec<u64>> = row.iter().map(|g| g.events.and_then(|e| e.printed.count())).collect();
        rows.push(counts.ok_or(reason::NO_SIZES)?);
    }
    let whole = |table: &[Vec<u64>]| {
        let mut candidates = table_candidates(case, table).unwrap_or_default();
        if !candidates.iter().any(|c| target.fit(c.range) == Fit::Full) {
            candidates.extend(fisher(case, table));
        }
        candidates
    };
    let mut candidates = whole(&rows);
    let off = |candidates: &[Candidate]| candidates.iter().all(|c| target.fit(c.range) == Fit::Off);
    // Those in no category that is listed, where the totals are known.
    if off(&candidates)
        && let Some(rest) = rest(case, &rows)
    {
        let with_rest: Vec<Vec<u64>> = rows.iter().cloned().chain([rest]).collect();
        candidates.extend(whole(&with_rest));
    }
    // One category may have been left out: missing answers, those lost.
    if off(&candidates) && rows.len() > 2 && rows.len() <= 12 {
        for left_out in 0..rows.len() {
            let fewer: Vec<Vec<u64>> =
                rows.iter().enumerate().filter(|(i, _)| *i != left_out).map(|(_, r)| r.clone()).collect();
            let found = whole(&fewer);
            if !off(&found) {
                candidates.extend(found);
                break;
            }
        }
    }
    if candidates.is_empty() {
        return Err(reason::NO_METHOD);
    }
    // Ordered categories are often compared by ranks or for trend.
    let named = case.here().any(|t| matches!(t, Test::ChiSquared | Test::FisherExact | Test::YatesChiSquared));
    let open = (rows.len() > 2 || arms > 2) && !named;
    let inputs: Inputs =
        case.groups.iter().filter_map(|g| g.events).filter_map(|e| e.place()).map(|span| (span, "a count")).collect();
    let policy = Policy {
        of: Quantity::P,
        ground: case.group_ground(),
        hold: case.group_hold().or(open.then_some(reason::UNCLEAR)),
        least: if case.rivals_proposed() { 2.0 } else { 1.05 },
        least_shift: 0.1,
        alpha: case.alpha,
        stated: case.stated(),
    };
    Ok(judge(&target, candidates, &policy, inputs, || None))
}

/// Fisher's test of the whole table, for small ones.
fn fisher(case: &Case, table: &[Vec<u64>]) -> Option<Candidate> {
    let total: u64 = table.iter().flatten().sum();
    let small = total <= 200 && table.len() <= 6 && table[0].len() <= 4 && (table.len() > 2 || table[0].len() > 2);
    if !small {
        return None;
    }
    let rows: Vec<&[u64]> = table.iter().map(Vec::as_slice).collect();
    let p = distribution::fisher_exact_table(&rows).ok()?;
    let shown: Vec<String> =
        table.iter().map(|r| r.iter().map(u64::to_string).collect::<Vec<_>>().join(", ")).collect();
    let p = Range::point(p).widened(distribution::RELATIVE_ERROR);
    let line = format!("[{}]; Fisher; {}", shown.join("; "), super::working::p(p));
    let mut c =
        Candidate::new(&super::method::FISHER, "Fisher", p, line).assuming(crate::reading::Assumption::Unadjusted);
    c.decides = case.decides(&[Test::FisherExact]);
    Some(c)
}

/// What is left of each group's total beside the listed categories; `None` where nothing is, or a total is not known.
fn rest(case: &Case, rows: &[Vec<u64>]) -> Option<Vec<u64>> {
    let arms = case.result.arms;
    let rest: Option<Vec<u64>> = (0..arms)
        .map(|a| {
            let total = case.groups[a].total.and_then(|t| t.printed.count())?;
            total.checked_sub(rows.iter().map(|r| r[a]).sum())
        })
        .collect();
    rest.filter(|r| r.iter().any(|&x| x > 0))
}
