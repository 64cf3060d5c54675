//! Reports: one file per output, each rendering plain data of the lower floors.

use crate::intake::Notice;
use crate::manuscript::Manuscript;
use crate::query::Query;
use crate::reading::Readings;
use crate::recompute::Checked;
use crate::result::ReportedResult;

/// A manuscript after the audit.
#[derive(Clone, Debug)]
pub struct Audited {
    pub manuscript: Manuscript,
    pub notices: Vec<Notice>,
    pub readings: Readings,
    pub results: Vec<ReportedResult>,
    /// One for each result, in the same order.
    pub checked: Vec<Checked>,
    pub queries: Vec<Query>,
}
