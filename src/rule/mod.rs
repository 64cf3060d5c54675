//! The catalogue of rules, the closed set of check kinds, the level policy, and the engine that turns
//! facts into queries.

use crate::context::Context;
use crate::manuscript::Manuscript;
use crate::query::Query;
use crate::reading::{Readings, Scan};
use crate::recompute::Checked;
use crate::result::ReportedResult;

/// What the engine looks at: the plain data of the lower floors, by shared reference.
#[derive(Clone, Copy)]
pub struct Facts<'a> {
    pub manuscript: &'a Manuscript,
    pub scan: &'a Scan,
    pub readings: &'a Readings,
    pub context: &'a Context,
    pub results: &'a [ReportedResult],
    pub checked: &'a [Checked],
}

/// The queries of all rules, in reading order.
pub fn queries(_facts: &Facts) -> Vec<Query> {
    Vec::new()
}
