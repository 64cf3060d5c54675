//! Reports: one file per output, each rendering plain data of the lower floors.
//!
//! A report writes to any writer and knows neither rules nor files. A batch streams: `begin`, then
//! each manuscript with `between` between two of them, then `end`. [`Report::manuscript`] takes
//! `&self`, so that manuscripts of a batch may be rendered side by side and written in order.

mod account;
pub mod galley;
pub mod json;
mod numbers;
mod place;
pub mod terminal;
mod words;

use std::io::{self, Write};

use crate::intake::Notice;
use crate::manuscript::Manuscript;
use crate::query::{Level, Query};
use crate::reading::{Readings, Scan};
use crate::recompute::Checked;
use crate::result::ReportedResult;

pub use account::Account;
pub use json::Json;
pub use terminal::Terminal;

/// A manuscript after the audit.
#[derive(Clone, Debug)]
pub struct Audited {
    pub manuscript: Manuscript,
    pub notices: Vec<Notice>,
    pub scan: Scan,
    pub readings: Readings,
    pub results: Vec<ReportedResult>,
    /// One for each result, in the same order.
    pub checked: Vec<Checked>,
    pub queries: Vec<Query>,
}

/// One manuscript of a run: where it came from, and what came of it.
#[derive(Clone, Copy, Debug)]
pub struct Entry<'a> {
    /// As given on the command line.
    pub path: &'a str,
    /// What was found, or one sentence that says why nothing could be read and what to do.
    pub outcome: Result<&'a Audited, &'a str>,
}

/// What is kept of each manuscript for the close of a batch.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Line {
    pub path: String,
    /// Queries by level, in the order of [`Level::ALL`]; `None` when it could not be read.
    pub queries: Option<[usize; 3]>,
}

/// An output format.
pub trait Report: Sync {
    /// Opens the output.
    fn begin(&self, out: &mut dyn Write) -> io::Result<()>;
    /// Writes one manuscript.
    fn manuscript(&self, entry: &Entry, out: &mut dyn Write) -> io::Result<()>;
    /// Stands between two manuscripts.
    fn between(&self, out: &mut dyn Write) -> io::Result<()>;
    /// Closes the output, with a line for each manuscript in the order of the run.
    fn end(&self, lines: &[Line], out: &mut dyn Write) -> io::Result<()>;
}

impl Audited {
    /// Queries by level, in the order of [`Level::ALL`].
    pub fn by_level(&self) -> [usize; 3] {
        Level::ALL.map(|level| self.queries.iter().filter(|q| q.level == level).count())
    }
}

impl Line {
    pub fn of(entry: &Entry) -> Line {
        Line { path: entry.path.to_owned(), queries: entry.outcome.ok().map(Audited::by_level) }
    }
}

/// What every report says once, plainly.
pub const CAUTIONS: [&str; 3] = [
    "Recomputation from rounded summaries cannot show what analysis was run. Adjusted, paired, clustered, weighted or \
     model-based analyses can rightly differ from it.",
    "A query is a question, not a finding of error or misconduct. No decision about a person, a patient or a \
     publication rests on it alone: the journal's own policy and a qualified statistician decide.",
    "Silence is no clean bill: it covers only what could be checked.",
];
