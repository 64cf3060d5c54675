//! A worklist for a methods editor's spreadsheet (RFC 4180): one row a manuscript, what needs a human first.

use std::io::{self, Write};

use super::{CAUTIONS, Digest, Entry, Line, Report, ranked};
use crate::query::Query;

/// The columns.
const HEADER: [&str; 13] = [
    "rank",
    "manuscript",
    "major",
    "minor",
    "note",
    "rules",
    "first_question",
    "place",
    "p_read",
    "p_checked",
    "p_tallying",
    "p_sharply",
    "remark",
];

/// One row a manuscript. Those that could not be read come last, then the cautions in rows of their own.
#[derive(Clone, Copy, Debug)]
pub struct Worklist;

impl Report for Worklist {
    fn begin(&self, _out: &mut dyn Write) -> io::Result<()> {
        Ok(())
    }

    fn manuscript(&self, _entry: &Entry, _out: &mut dyn Write) -> io::Result<()> {
        Ok(())
    }

    fn between(&self, _out: &mut dyn Write) -> io::Result<()> {
        Ok(())
    }

    fn end(&self, lines: &[Line], out: &mut dyn Write) -> io::Result<()> {
        let mut table = csv::WriterBuilder::new().terminator(csv::Terminator::CRLF).from_writer(out);
        table.write_record(HEADER)?;
        for (k, (line, digest)) in ranked(lines).into_iter().enumerate() {
            table.write_record(row(k + 1, &line.path, digest))?;
        }
        for line in lines {
            if let Err(why) = &line.outcome {
                table.write_record(remark(&line.path, why))?;
            }
        }
        for caution in CAUTIONS {
            table.write_record(remark("", caution))?;
        }
        table.flush()
    }
}

fn row(rank: usize, path: &str, digest: &Digest) -> [String; HEADER.len()] {
    let [notes, minor, major] = digest.queries;
    let rules: Vec<String> =
        digest.rules.iter().map(|(level, rule, n)| format!("{n} {} {rule}", level.name())).collect();
    let (place, asks) = digest.first.clone().unwrap_or_default();
    let [read, checked, tallies, sharp] = digest.p.map(|n| n.to_string());
    [
        rank.to_string(),
        inert(path),
        major.to_string(),
        minor.to_string(),
        notes.to_string(),
        inert(&rules.join("; ")),
        inert(&asks),
        inert(&place),
        read,
        checked,
        tallies,
        sharp,
        inert(&digest.notices.join(" ")),
    ]
}

/// A row that says something of a manuscript, or of them all, and counts nothing.
fn remark(path: &str, says: &str) -> [String; HEADER.len()] {
    let mut row: [String; HEADER.len()] = Default::default();
    row[1] = inert(path);
    row[HEADER.len() - 1] = inert(says);
    row
}

/// Where a query stands, for people: section, then table and row or the line of the file.
pub(super) fn place(query: &Query) -> String {
    let at = match query.location.cell {
        Some(cell) => format!("table {}, line {}", cell.table + 1, query.location.line),
        None => format!("line {}", query.location.line),
    };
    match query.section.last() {
        Some(section) => format!("{section}, {at}"),
        None => at,
    }
}

/// Text that a spreadsheet shows and does not compute: what a manuscript holds must not run as a formula. Control
/// characters are left out.
fn inert(text: &str) -> String {
    let text: String = text.chars().map(|c| if c.is_control() { ' ' } else { c }).collect();
    if text.trim_start().starts_with(['=', '+', '-', '@']) { format!("'{text}") } else { text }
}
