//! Exact tests by counting: Fisher's and the Mann–Whitney test.

use super::discrete::Margins;
use super::{DistributionError, Tails};

/// P-values of Fisher's exact test of a 2×2 table `[a, b; c, d]`.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Fisher {
    /// One-sided, odds ratio below 1: P(A ≤ a).
    pub less: f64,
    /// One-sided, odds ratio above 1: P(A ≥ a).
    pub greater: f64,
    /// Sum over all tables that are not more probable than the one observed.
    pub two_sided: f64,
}

/// Two tables whose probabilities differ by less than this factor are equally
/// probable: they often are on paper, and rounding must not part them. (Common
/// practice of statistical packages.)
const TIE: f64 = 1.0 + 1e-7;

/// Fisher's exact test of the 2×2 table with rows `(a, b)` and `(c, d)`.
///
/// The two-sided p-value sums the tables that are not more probable than the one
/// observed. Relative error below 1e-12 for totals up to 1e6; p-values below
/// about 1e-300 come out as 0. Errors: [`DistributionError::TooLarge`] beyond a
/// total of 9e7. Source: Fisher (1935), probabilities by the ratio of neighbours
/// from the mode outward.
pub fn fisher_exact(a: u64, b: u64, c: u64, d: u64) -> Result<Fisher, DistributionError> {
    let sum = |x: u64, y: u64| x.checked_add(y).ok_or(DistributionError::TooLarge);
    let (first_row, first_column) = (sum(a, b)?, sum(a, c)?);
    let total = sum(first_row, sum(c, d)?)?;
    let margins = Margins::new(total, first_row, first_column)?;
    let observed = a as f64;
    let mode = margins.mode();
    // Weights are relative to the mode; first the weight of the table observed.
    let mut own = 1.0;
    let mut at = mode;
    while at < observed && own > 0.0 {
        own *= margins.up(at);
        at += 1.0;
    }
    while at > observed && own > 0.0 {
        own *= margins.down(at);
        at -= 1.0;
    }
    let above = Side::sum(&margins, mode, true, own, observed);
    let below = Side::sum(&margins, mode, false, own, observed);
    let total = above.all + 1.0 + below.all;
    // The side that the observed table lies on is summed; the other is the rest.
    let (less, greater) = if observed > mode {
        (total - (above.from_observed - own), above.from_observed)
    } else if observed < mode {
        (below.from_observed, total - (below.from_observed - own))
    } else {
        (1.0 + below.all, 1.0 + above.all)
    };
    let mode_counts = if 1.0 <= own * TIE { 1.0 } else { 0.0 };
    let two_sided = above.not_more_probable + below.not_more_probable + mode_counts;
    Ok(Fisher {
        less: (less / total).clamp(0.0, 1.0),
        greater: (greater / total).clamp(0.0, 1.0),
        two_sided: (two_sided / total).clamp(0.0, 1.0),
    })
}

/// Sums over the tables on one side of the mode, the mode itself left out.
#[derive(Default)]
struct Side {
    all: f64,
    from_observed: f64,
    not_more_probable: f64,
}

impl Side {
    fn sum(margins: &Margins, mode: f64, up: bool, own: f64, observed: f64) -> Self {
        let mut side = Self::default();
        let mut at = mode;
        let mut weight = 1.0;
        loop {
            if up {
                if at >= margins.most {
                    break;
                }
                weight *= margins.up(at);
                at += 1.0;
            } else {
                if at <= margins.least {
                    break;
                }
                weight *= margins.down(at);
                at -= 1.0;
            }
            side.all += weight;
            if (up && at >= observed) || (!up && at <= observed) {
                side.from_observed += weight;
            }
            if weight <= own * TIE {
                side.not_more_probable += weight;
                // From here on every table counts and they fall off fast.
                let passed = if up { at >= observed } else { at <= observed };
                if passed && weight <= 1e-18 * side.not_more_probable {
                    break;
                }
            }
            if weight == 0.0 {
                break;
            }
        }
        side
    }
}

/// Most tables that [`fisher_exact_table`] looks at.
const MOST_WORK: u64 = 5_000_000;

/// Fisher's exact test (Freeman & Halton 1951) of a table with any number of
/// rows and columns, given row by row: the two-sided p-value that sums all
/// tables with the same margins that are not more probable than the one given.
///
/// Rows must be of equal length. Checked only against [`fisher_exact`], to 1e-10 for
/// 2×2 tables up to a total of 240; rounding grows with ln N!, to about 1e-10 at a
/// total of 100,000, beyond which it is an error. Errors:
/// [`DistributionError::OutOfDomain`] for an empty or ragged table or a total of
/// 0, [`DistributionError::TooLarge`] where more than five million partial tables
/// would have to be looked at.
pub fn fisher_exact_table(table: &[&[u64]]) -> Result<f64, DistributionError> {
    let columns = table.first().map_or(0, |row| row.len());
    if columns == 0 || table.iter().any(|row| row.len() != columns) {
        return Err(DistributionError::OutOfDomain);
    }
    let row_total = |row: &[u64]| row.iter().try_fold(0u64, |sum, &x| sum.checked_add(x));
    let mut total = 0u64;
    for row in table {
        let sum = row_total(row).ok_or(DistributionError::TooLarge)?;
        total = total.checked_add(sum).ok_or(DistributionError::TooLarge)?;
    }
    if total == 0 {
        return Err(DistributionError::OutOfDomain);
    }
    if total > 100_000 {
        return Err(DistributionError::TooLarge);
    }
    let log_factorial = log_factorials(total as usize);
    let mut rows: Vec<usize> = Vec::new();
    for row in table {
        rows.push(row.iter().sum::<u64>() as usize);
    }
    let mut column_totals = vec![0usize; columns];
    for row in table {
        for (sum, &x) in column_totals.iter_mut().zip(row.iter()) {
            *sum += x as usize;
        }
    }
    let constant: f64 =
        rows.iter().chain(&column_totals).map(|&m| log_factorial[m]).sum::<f64>() - log_factorial[total as usize];
    let observed: f64 =
        constant - table.iter().flat_map(|row| row.iter()).map(|&x| log_factorial[x as usize]).sum::<f64>();
    rows.retain(|&m| m > 0);
    column_totals.retain(|&m| m > 0);
    if rows.len() > column_totals.len() {
        std::mem::swap(&mut rows, &mut column_totals);
    }
    let mut walk =
        Walk { log_factorial: &log_factorial, columns: &column_totals, limit: observed + 1e-7, work: 0, sum: 0.0 };
    walk.column(0, &mut rows.clone(), constant)?;
    Ok(walk.sum.min(1.0))
}

/// ln n! for n up to `most`.
fn log_factorials(most: usize) -> Vec<f64> {
    let mut table = Vec::with_capacity(most + 1);
    table.push(0.0);
    for n in 1..=most {
        table.push(libm::lgamma(n as f64 + 1.0));
    }
    table
}

/// The enumeration of all tables with given margins, column by column.
struct Walk<'a> {
    log_factorial: &'a [f64],
    columns: &'a [usize],
    limit: f64,
    work: u64,
    sum: f64,
}

impl Walk<'_> {
    /// Fills column `index` in every way that the rows' rests allow.
    fn column(&mut self, index: usize, rests: &mut Vec<usize>, log: f64) -> Result<(), DistributionError> {
        if index + 1 == self.columns.len() {
            // The last column is what is left.
            let log = log - rests.iter().map(|&x| self.log_factorial[x]).sum::<f64>();
            if log <= self.limit {
                self.sum += log.exp();
            }
            return Ok(());
        }
        self.cell(index, 0, self.columns[index], rests, log)
    }

    fn cell(
        &mut self,
        index: usize,
        row: usize,
        left: usize,
        rests: &mut Vec<usize>,
        log: f64,
    ) -> Result<(), DistributionError> {
        self.work += 1;
        if self.work > MOST_WORK {
            return Err(DistributionError::TooLarge);
        }
        let rest = rests[row];
        if row + 1 == rests.len() {
            if left <= rest {
                rests[row] = rest - left;
                self.column(index + 1, rests, log - self.log_factorial[left])?;
                rests[row] = rest;
            }
            return Ok(());
        }
        let others: usize = rests[row + 1..].iter().sum();
        for x in left.saturating_sub(others)..=left.min(rest) {
            rests[row] = rest - x;
            self.cell(index, row + 1, left - x, rests, log - self.log_factorial[x])?;
        }
        rests[row] = rest;
        Ok(())
    }
}

/// Largest product of the group sizes that [`mann_whitney_exact`] counts out.
const MOST_PAIRS: u64 = 10_000;

/// Exact null distribution of the Mann–Whitney statistic without ties:
/// `lower` = P(U ≤ u), `upper` = P(U ≥ u) for groups of `n1` and `n2`. Both
/// include `u`; the two-sided p-value is twice the smaller, at most 1.
///
/// Errors: [`DistributionError::OutOfDomain`] for an empty group or `u > n1·n2`,
/// [`DistributionError::TooLarge`] for `n1·n2` beyond 10,000. Relative error
/// below 1e-13. Source: the recurrence of Mann & Whitney (1947), on
/// probabilities, so that only positive numbers are added.
pub fn mann_whitney_exact(u: u64, n1: u64, n2: u64) -> Result<Tails, DistributionError> {
    let pairs = n1.checked_mul(n2).ok_or(DistributionError::TooLarge)?;
    if pairs == 0 || u > pairs {
        return Err(DistributionError::OutOfDomain);
    }
    if pairs > MOST_PAIRS {
        return Err(DistributionError::TooLarge);
    }
    // The distribution is symmetric about pairs/2: the nearer end is counted.
    let near = u.min(pairs - u) as usize;
    let (small, large) = (n1.min(n2) as usize, n1.max(n2) as usize);
    // table[m][v] = P(U = v) for groups of m and n, n rising.
    let mut table = vec![vec![0.0f64; near + 1]; small + 1];
    for row in &mut table {
        row[0] = 1.0;
    }
    for n in 1..=large {
        for m in 1..=small {
            // The largest observation belongs to the first group with
            // probability m/(m+n), and then beats all n of the second.
            let first = m as f64 / (m + n) as f64;
            let second = n as f64 / (m + n) as f64;
            let (done, rest) = table.split_at_mut(m);
            let (before, row) = (&done[m - 1], &mut rest[0]);
            let most = near.min(m * n);
            for v in 0..=most {
                let mut value = second * row[v];
                if v >= n {
                    value += first * before[v - n];
                }
                row[v] = value;
            }
        }
    }
    let row = &table[small];
    let to_near: f64 = row.iter().sum();
    let before_near: f64 = to_near - row[near];
    let (near_tail, far_tail) = (to_near.min(1.0), (1.0 - before_near).clamp(0.0, 1.0));
    Ok(if u <= pairs - u {
        Tails { lower: near_tail, upper: far_tail }
    } else {
        Tails { lower: far_tail, upper: near_tail }
    })
}
