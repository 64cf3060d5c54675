//! Readings that belong together: groups, estimate, interval, statistic, p.

mod feature;
pub mod repeat;
mod sentence;
mod table;

use crate::context::{Stated, Test};
use crate::manuscript::Manuscript;
use crate::reading::{Readings, Scan};
use crate::text::Span;

/// Why a plain recomputation from group summaries may not be the authors' analysis.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum Feature {
    /// Paired or repeated measurements, a comparison with baseline, crossover.
    Paired,
    /// The summaries are changes from baseline.
    Change,
    /// Adjusted, ANCOVA, regression, mixed model.
    Adjusted,
    Clustered,
    /// A rank test or medians.
    Ranked,
    /// Log-transformed, geometric means.
    Transformed,
    /// p corrected for multiple comparisons.
    Corrected,
    /// Survival: log-rank, Kaplan–Meier percentages.
    TimeToEvent,
    /// The p compares more groups, or other ones, than are printed beside it.
    OtherGroups,
    Imputed,
    /// The sentence leaves open which figures the p belongs to.
    Unclear,
}

/// More tests than a sentence or the notes of a table name. Text made to hurt names more, and every result beside them
/// would take them all.
const MOST_TESTS: usize = 40;

/// Where the test of a result is named.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct StatedTest {
    pub test: Stated<Test>,
    /// Named for this very result (its sentence, its row's mark); otherwise the table's notes only propose it.
    pub here: bool,
}

/// A result: indexes into [`Readings`]. Arithmetic on one group is a result of its own, with that group alone.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct ReportedResult {
    pub p: Option<usize>,
    pub interval: Option<usize>,
    pub statistic: Option<usize>,
    pub estimate: Option<usize>,
    /// In printed order; two or more when the result compares them.
    pub groups: Vec<usize>,
    /// The groups are the counts of categories, row by row, with this many groups of participants in each; 0 where they
    /// are not.
    pub arms: usize,
    /// Candidates in order; those stated `here` first. What the Methods propose for all results stands in the context.
    pub tests: Vec<StatedTest>,
    /// With the place that says it.
    pub features: Vec<(Feature, Span)>,
}

impl ReportedResult {
    pub fn has(&self, feature: Feature) -> bool {
        self.features.iter().any(|&(f, _)| f == feature)
    }
}

/// Joins the readings of a manuscript to results, in reading order: inside a sentence or across a table's row,
/// never by mere nearness.
pub fn join(manuscript: &Manuscript, scan: &Scan, readings: &Readings) -> Vec<ReportedResult> {
    let mut results = Vec::new();
    let mut from = sentence::Members { p: 0..0, intervals: 0..0, statistics: 0..0, groups: 0..0, estimates: 0..0 };
    loop {
        // Readings are in reading order, so each list is walked once.
        let next = [
            readings.p.get(from.p.end).map(|x| x.sentence),
            readings.intervals.get(from.intervals.end).map(|x| x.sentence),
            readings.statistics.get(from.statistics.end).map(|x| x.sentence),
            readings.groups.get(from.groups.end).map(|x| x.sentence),
            readings.estimates.get(from.estimates.end).map(|x| x.sentence),
        ];
        let Some(id) = next.into_iter().flatten().min() else { break };
        let block = scan.sentences[id as usize].block as usize;
        let in_table = manuscript.blocks[block].is_table();
        let part = if in_table { scan.of_block(block) } else { id..id + 1 };
        from = sentence::Members {
            p: run(&readings.p, from.p.end, |x| part.contains(&x.sentence)),
            intervals: run(&readings.intervals, from.intervals.end, |x| part.contains(&x.sentence)),
            statistics: run(&readings.statistics, from.statistics.end, |x| part.contains(&x.sentence)),
            groups: run(&readings.groups, from.groups.end, |x| part.contains(&x.sentence)),
            estimates: run(&readings.estimates, from.estimates.end, |x| part.contains(&x.sentence)),
        };
        if in_table {
            table::join(manuscript, scan, block, &from, readings, &mut results);
        } else {
            sentence::join(&scan.view(manuscript, id), &from, readings, &mut results);
        }
    }
    results.shrink_to_fit();
    results
}

/// The run of list members from `start` that a test accepts.
fn run<T>(list: &[T], start: usize, accept: impl Fn(&T) -> bool) -> std::ops::Range<usize> {
    start..start + list[start..].iter().take_while(|x| accept(x)).count()
}
