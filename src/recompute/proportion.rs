//! Tests of proportions from counts: the arithmetic, over the sets of counts that the printed figures allow.

use super::tail;
use crate::distribution;
use crate::printed::{Range, totals_that_fit};

/// Events and total of one group, each as all whole numbers from the first to the second.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct Cell {
    pub events: (u64, u64),
    pub total: (u64, u64),
}

/// At most this many values of a count are looked at; both ends always are.
const VALUES: u64 = 9;

impl Cell {
    pub fn exact(events: u64, total: u64) -> Cell {
        Cell { events: (events, events), total: (total, total) }
    }

    /// The counts that a printed percent (as a range) of `n` allows.
    pub fn from_percent(percent: Range, n: u64) -> Option<Cell> {
        let (n_f, hair) = (n as f64, 1e-9);
        let least = (n_f * percent.lo / 100.0 - hair).ceil().max(0.0) as u64;
        let most = (n_f * percent.hi / 100.0 + hair).floor().clamp(0.0, n_f) as u64;
        (least <= most && n > 0).then_some(Cell { events: (least, most), total: (n, n) })
    }

    /// The totals that a count and its percent allow.
    pub fn from_events(events: u64, percent: Range) -> Option<Cell> {
        let total = totals_that_fit(events, percent)?;
        (total.1 - total.0 <= total.0 / 5).then_some(Cell { events: (events, events), total })
    }

    pub fn is_exact(&self) -> bool {
        self.events.0 == self.events.1 && self.total.0 == self.total.1
    }

    /// The proportions that it allows.
    pub fn proportion(&self) -> Range {
        let share = |e: u64, n: u64| (e as f64 / n as f64).min(1.0);
        Range::new(share(self.events.0, self.total.1), share(self.events.1, self.total.0))
    }

    fn values(self) -> Vec<(u64, u64)> {
        let steps = |(lo, hi): (u64, u64)| {
            let count = (hi - lo + 1).min(VALUES);
            (0..count).map(move |i| if count == 1 { lo } else { lo + (hi - lo) * i / (count - 1) })
        };
        steps(self.total).flat_map(|n| steps(self.events).map(move |e| (e.min(n), n))).collect()
    }
}

/// Pearson's statistic of groups by yes and no; `correction` is subtracted from every |O − E| (2 × 2 only).
/// `None` without events or without non-events.
pub(crate) fn pearson(counts: &[(u64, u64)], correction: f64) -> Option<f64> {
    let events: f64 = counts.iter().map(|c| c.0 as f64).sum();
    let total: f64 = counts.iter().map(|c| c.1 as f64).sum();
    let p = events / total;
    if !(p > 0.0 && p < 1.0) {
        return None;
    }
    Some(
        counts
            .iter()
            .map(|&(e, n)| {
                let away = ((e as f64 - n as f64 * p).abs() - correction).max(0.0);
                away * away / (n as f64 * p * (1.0 - p))
            })
            .sum(),
    )
}

/// Pearson's statistic and degrees of freedom of a table of counts, rows by columns.
pub(crate) fn pearson_table(rows: &[Vec<u64>]) -> Option<(f64, f64)> {
    let columns = rows.first()?.len();
    let row: Vec<f64> = rows.iter().map(|r| r.iter().sum::<u64>() as f64).collect();
    let column: Vec<f64> = (0..columns).map(|j| rows.iter().map(|r| r[j]).sum::<u64>() as f64).collect();
    let total: f64 = row.iter().sum();
    if total <= 0.0 || column.contains(&0.0) {
        return None;
    }
    // Empty rows are categories nobody is in.
    let filled = row.iter().filter(|r| **r > 0.0).count();
    let mut sum = 0.0;
    for (i, r) in rows.iter().enumerate().filter(|(i, _)| row[*i] > 0.0) {
        for (j, &o) in r.iter().enumerate() {
            let e = row[i] * column[j] / total;
            sum += (o as f64 - e) * (o as f64 - e) / e;
        }
    }
    (filled > 1).then_some((sum, (filled as f64 - 1.0) * (columns as f64 - 1.0)))
}

/// Visits every combination of the cells' counts; `false` where there are more than a few hundred.
fn every(cells: &[Cell], mut visit: impl FnMut(&[(u64, u64)])) -> bool {
    let values: Vec<Vec<(u64, u64)>> = cells.iter().map(|c| c.values()).collect();
    let many: usize = values.iter().map(Vec::len).fold(1, usize::saturating_mul);
    if many > 1000 {
        return false;
    }
    let mut at = vec![0usize; cells.len()];
    let mut now: Vec<(u64, u64)> = values.iter().map(|v| v[0]).collect();
    loop {
        visit(&now);
        let mut i = 0;
        loop {
            if i == at.len() {
                return true;
            }
            at[i] += 1;
            if at[i] < values[i].len() {
                now[i] = values[i][at[i]];
                break;
            }
            at[i] = 0;
            now[i] = values[i][0];
            i += 1;
        }
    }
}

/// Pearson's statistic over all counts that the cells allow, without or with continuity correction. It grows as
/// the proportions part, so that where only some of many counts are looked at, the ends still enclose it; where
/// the proportions can be equal, 0 is in.
pub(crate) fn chi_squared(cells: &[Cell], corrected: bool) -> Option<Range> {
    if corrected && cells.len() != 2 {
        return None;
    }
    let mut range: Option<Range> = None;
    let correction = if corrected { 0.5 } else { 0.0 };
    let done = every(cells, |counts| {
        if let Some(x) = pearson(counts, correction) {
            range = Some(range.map_or(Range::point(x), |r| r.hull(Range::point(x))));
        }
    });
    let all_exact = cells.iter().all(Cell::is_exact);
    let equal = || {
        let all = cells.iter().map(Cell::proportion);
        all.clone().map(|r| r.lo).fold(0.0, f64::max) <= all.map(|r| r.hi).fold(1.0, f64::min)
    };
    if !done {
        return None;
    }
    range.map(|r| if !all_exact && equal() { r.hull(Range::point(0.0)) } else { r }).map(|r| r.widened(1e-12))
}

/// p of [`chi_squared`] with k − 1 degrees of freedom.
pub(crate) fn chi_squared_p(statistic: Range, groups: usize) -> Option<Range> {
    tail::chi_squared(statistic, groups as f64 - 1.0)
}

/// Fisher's exact two-sided p over all counts that two cells allow (every one of them up to nine a cell; beyond,
/// the ends and steps between, where p moves by little from one count to the next). `None` for totals beyond
/// 20,000.
pub(crate) fn fisher(cells: &[Cell]) -> Option<Range> {
    if cells.len() != 2 || cells.iter().map(|c| c.total.1).sum::<u64>() > 20_000 {
        return None;
    }
    let mut range: Option<Range> = None;
    let mut failed = false;
    let done = every(cells, |counts| {
        let [(a, n1), (c, n2)] = counts else { return };
        match distribution::fisher_exact(*a, n1 - a, *c, n2 - c) {
            Ok(f) => {
                let p = Range::point(f.two_sided.min(1.0));
                range = Some(range.map_or(p, |r| r.hull(p)));
            }
            Err(_) => failed = true,
        }
    });
    let range = range.filter(|_| done && !failed)?;
    Some(range.widened(distribution::RELATIVE_ERROR).clamped(0.0, 1.0))
}

/// p of the difference with separate variances (Wald) over all counts.
pub(crate) fn wald_p(cells: &[Cell]) -> Option<Range> {
    if cells.len() != 2 {
        return None;
    }
    let mut z: Option<Range> = None;
    let done = every(cells, |counts| {
        let [(a, n1), (c, n2)] = counts else { return };
        let (n1, n2) = (*n1 as f64, *n2 as f64);
        let (p1, p2) = (*a as f64 / n1, *c as f64 / n2);
        let variance = p1 * (1.0 - p1) / n1 + p2 * (1.0 - p2) / n2;
        if variance > 0.0 {
            let x = Range::point((p1 - p2) / variance.sqrt());
            z = Some(z.map_or(x, |r| r.hull(x)));
        }
    });
    tail::normal(z.filter(|_| done)?)
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    proptest! {
        #[test]
        fn chi_squared_encloses_every_count(n1 in 10u64..400, n2 in 10u64..400, p1 in 2.0..98.0f64, p2 in 2.0..98.0f64,
            half in 0.05..2.0f64, u in 0.0..1.0f64, v in 0.0..1.0f64, corrected: bool) {
            let cell = |p: f64, n| Cell::from_percent(Range::new(p - half, p + half), n);
            if let (Some(a), Some(b)) = (cell(p1, n1), cell(p2, n2)) {
                let range = chi_squared(&[a, b], corrected);
                let pick = |c: Cell, u: f64| c.events.0 + ((c.events.1 - c.events.0) as f64 * u).round() as u64;
                let one = pearson(&[(pick(a, u), n1), (pick(b, v), n2)], if corrected { 0.5 } else { 0.0 });
                if let (Some(range), Some(one)) = (range, one) {
                    prop_assert!(range.widened(1e-9).contains(one), "{range:?} {one}");
                }
            }
        }
    }

    #[test]
    fn counts_from_percent() {
        let c = Cell::from_percent(Range::new(44.55, 44.65), 101).unwrap();
        assert_eq!(c, Cell::exact(45, 101));
        assert_eq!(Cell::from_percent(Range::new(44.6, 44.7), 10), None);
    }
}
