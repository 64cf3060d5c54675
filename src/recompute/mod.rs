//! Figures computed anew from the other figures of a result, as ranges, and the verdicts.

use crate::context::Context;
use crate::printed::Range;
use crate::query::{Ground, Verdict};
use crate::reading::{Assumption, Readings};
use crate::result::ReportedResult;
use crate::text::Span;

/// A published method.
#[derive(Debug, PartialEq, Eq)]
pub struct Method {
    /// In the trade's words: "Welch t test".
    pub name: &'static str,
    /// Where it is published.
    pub source: &'static str,
}

/// What was recomputed.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum Quantity {
    P,
    Interval,
    Estimate,
    Percent,
    Statistic,
    Df,
    Events,
    Total,
}

/// An innocent slip, one step away, that restores the printed figure exactly.
#[derive(Clone, Debug, PartialEq)]
pub struct Slip {
    /// `one-sided`, `se-for-sd`, `sd-for-se`, `another-level`, `continuity-correction`, `digits-swapped`,
    /// `decimal-point`, `sign-lost`, `group-size`, `log-scale`, `proportion-as-percent` …
    pub kind: &'static str,
    /// One clause for people: "it agrees with a one-sided test".
    pub says: String,
}

/// How far off a figure is, for the level policy.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Distance {
    /// Ratio of printed and recomputed p (1 or more, the nearest ends of both ranges); for other figures
    /// the distance in units of the last printed place.
    pub size: f64,
    /// Printed and recomputed p lie on two sides of alpha under every candidate (alpha itself is on neither).
    pub across_alpha: bool,
}

#[derive(Clone, Debug, PartialEq)]
pub struct Recomputation {
    pub of: Quantity,
    pub method: &'static Method,
    pub ground: Ground,
    /// All values that the printed figures allow; `None` when undecided before computing.
    pub computed: Option<Range>,
    /// What the printed figure stands for.
    pub printed: Option<Range>,
    pub verdict: Verdict,
    /// A tenfold change of the printed figure, in the direction against it, would have differed.
    pub sharp: bool,
    /// Why it is undecided, or why a near miss tallies ("cut, not rounded").
    pub reason: Option<String>,
    /// "n = 24 and 25; Welch; t = 2.31, df 45.8; P 0.023–0.028"
    pub working: String,
    pub assumptions: Vec<Assumption>,
    pub distance: Option<Distance>,
    pub slip: Option<Slip>,
    /// The printed figure in question.
    pub figure: Span,
    /// The figures it was recomputed from, each with its part.
    pub inputs: Vec<(Span, &'static str)>,
}

/// A result with what was recomputed of it.
#[derive(Clone, Debug, PartialEq)]
pub struct Checked {
    /// Index of the result.
    pub result: usize,
    pub recomputations: Vec<Recomputation>,
    pub verdict: Verdict,
    /// Why nothing was decided: one of a small set of phrases, for the closing account.
    pub reason: Option<&'static str>,
}

/// Recomputes every result; one [`Checked`] each, in the same order.
pub fn recompute(_readings: &Readings, _context: &Context, results: &[ReportedResult]) -> Vec<Checked> {
    (0..results.len())
        .map(|result| Checked { result, recomputations: Vec::new(), verdict: Verdict::Undecided, reason: None })
        .collect()
}
