//! Readings that belong together: groups, estimate, interval, statistic, p.

use crate::context::{Context, Stated, Test};
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

/// Where the test of a result is named.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct StatedTest {
    pub test: Stated<Test>,
    /// Named for this very result (its sentence, its row's mark); otherwise the Methods only propose it.
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
    /// Candidates in order; those stated `here` first.
    pub tests: Vec<StatedTest>,
    /// With the place that says it.
    pub features: Vec<(Feature, Span)>,
}

impl ReportedResult {
    pub fn has(&self, feature: Feature) -> bool {
        self.features.iter().any(|&(f, _)| f == feature)
    }
}

/// Joins the readings of a manuscript to results, in reading order.
pub fn join(_manuscript: &Manuscript, _scan: &Scan, _readings: &Readings, _context: &Context) -> Vec<ReportedResult> {
    Vec::new()
}
