//! What the manuscript states about its own methods: alpha, sides, tests named, adjustment, pairing,
//! arms and group sizes, interval level, each with its place.

pub mod test_name;

use crate::manuscript::Manuscript;
use crate::printed::Printed;
use crate::reading::{Readings, Scan, Sides};
use crate::text::Span;

pub use test_name::{Test, tests_in};

/// A statement with its place.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Stated<T> {
    pub value: T,
    pub span: Span,
}

/// An arm with its size, as the text introduces it: `placebo (n = 24)`.
#[derive(Clone, Debug, PartialEq)]
pub struct Arm {
    /// The name, as printed, without "group".
    pub label: String,
    pub n: u64,
    pub span: Span,
}

#[derive(Clone, Debug, Default)]
pub struct Context {
    /// The two-sided (or stated) significance level, as a proportion. More than one when the text states several.
    pub alpha: Vec<Stated<Printed>>,
    pub sides: Option<Stated<Sides>>,
    pub power: Option<Stated<Printed>>,
    /// Tests named in a Methods section, in order.
    pub tests: Vec<Stated<Test>>,
    /// A general adjustment for multiple comparisons.
    pub multiplicity: Option<Stated<()>>,
    /// Analyses are adjusted, or by a model with covariates, as the Methods say.
    pub adjusted: Option<Stated<()>>,
    pub paired: Option<Stated<()>>,
    pub clustered: Option<Stated<()>>,
    pub crossover: Option<Stated<()>>,
    pub non_inferiority: Option<Stated<()>>,
    /// Percent, as printed.
    pub level: Option<Stated<Printed>>,
    /// What an unnamed ± stands for, where the Methods say it ("values are mean ± SD").
    pub spread: Option<Stated<crate::reading::SpreadKind>>,
    pub arms: Vec<Arm>,
    /// Sizes of all participants ("60 patients were randomised").
    pub randomised: Option<Stated<u64>>,
    /// Kinds of section that were recognised by their heading.
    pub has_methods: bool,
    pub has_results: bool,
}

/// Gathers the context of a manuscript.
pub fn gather(_manuscript: &Manuscript, _scan: &Scan, _readings: &Readings) -> Context {
    Context::default()
}
