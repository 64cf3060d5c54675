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
pub mod worklist;

use std::cmp::Reverse;
use std::collections::BTreeMap;
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
pub use worklist::Worklist;

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
    /// Or one sentence that says why it could not be read.
    pub outcome: Result<Digest, String>,
}

/// What a list of manuscripts says of one of them.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Digest {
    /// Queries by level, in the order of [`Level::ALL`].
    pub queries: [usize; 3],
    /// Queries by level and rule, the gravest first, then by name.
    pub rules: Vec<(Level, String, usize)>,
    /// The gravest query, the first of them in the text: where it stands, and what it asks.
    pub first: Option<(String, String)>,
    /// p-values read, recomputed, tallying, and sharply so.
    pub p: [usize; 4],
    /// What the reader of the file had to say of it.
    pub notices: Vec<String>,
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
        let outcome = entry.outcome.map(Digest::of).map_err(str::to_owned);
        Line { path: entry.path.to_owned(), outcome }
    }
}

impl Digest {
    fn of(audited: &Audited) -> Digest {
        let mut rules: BTreeMap<(Reverse<Level>, &str), usize> = BTreeMap::new();
        for q in &audited.queries {
            *rules.entry((Reverse(q.level), &q.rule)).or_default() += 1;
        }
        let account = Account::of(audited);
        // Of equals the last would be taken, so from the end.
        let first = audited.queries.iter().rev().max_by_key(|q| q.level);
        Digest {
            queries: audited.by_level(),
            rules: rules.into_iter().map(|((level, rule), n)| (level.0, rule.to_owned(), n)).collect(),
            first: first.map(|q| (worklist::place(q), q.asks.clone())),
            p: [account.read, account.checked, account.tallies, account.sharp],
            notices: audited.notices.iter().map(|n| n.0.clone()).collect(),
        }
    }
}

/// The manuscripts that could be read, those with the most and gravest queries first, then in the order of the run.
fn ranked(lines: &[Line]) -> Vec<(&Line, &Digest)> {
    let mut ranked: Vec<_> = lines.iter().filter_map(|l| l.outcome.as_ref().ok().map(|d| (l, d))).collect();
    ranked.sort_by_key(|(_, digest)| {
        let [notes, minor, major] = digest.queries;
        Reverse((major, minor, notes))
    });
    ranked
}

/// What every report says once, plainly.
pub const CAUTIONS: [&str; 3] = [
    "Recomputation from rounded summaries cannot show what analysis was run. Adjusted, paired, clustered, weighted or \
     model-based analyses can rightly differ from it.",
    "A query is a question, not a finding of error or misconduct. No decision about a person, a patient or a \
     publication rests on it alone: the journal's own policy and a qualified statistician decide.",
    "Silence is no clean bill: it covers only what could be checked.",
];
