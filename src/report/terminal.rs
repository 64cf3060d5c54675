//! The report for people: a galley with the queries in its margin.
//!
//! The words in question stand between « and » in their sentence, so that the report can be read
//! without colour. Styles are always written; whoever opens the output strips them where they are
//! not wanted.

use std::collections::BTreeSet;
use std::io::{self, Write};

use anstyle::{AnsiColor, Style};

use super::galley::{Galley, Piece, clean, first_part, last_part};
use super::place::{Context, Places};
use super::{Account, Audited, CAUTIONS, Entry, Line, Report, numbers, ranked, words};
use crate::manuscript::Location;
use crate::query::{Level, Query, Related, Repair, RepairKind, Verdict};
use crate::reading::{Figure, Group};
use crate::recompute::{Checked, Quantity, Recomputation};
use crate::text::Span;

/// Characters of a sentence shown before and after the words in question, and of the words themselves.
const AROUND: usize = 220;
const WORDS: usize = 320;

const PLAIN: Style = Style::new();
const BOLD: Style = Style::new().bold();
const FAINT: Style = Style::new().dimmed();
/// The pencil: query numbers.
const PENCIL: Style = AnsiColor::Blue.on_default().bold();
/// The words in question.
const RINGED: Style = Style::new().bold().underline();

/// The report for people.
#[derive(Clone, Copy, Debug)]
pub struct Terminal {
    /// Columns to fill.
    pub width: usize,
    /// Print every recomputation, also where nothing differs.
    pub workings: bool,
}

impl Report for Terminal {
    fn begin(&self, _out: &mut dyn Write) -> io::Result<()> {
        Ok(())
    }

    /// A manuscript that could not be read has had its sentence on standard error.
    fn manuscript(&self, entry: &Entry, out: &mut dyn Write) -> io::Result<()> {
        let Ok(audited) = entry.outcome else { return Ok(()) };
        let mut galley = Galley::new(out, self.width);
        let places = Places::new(audited);
        opening(&mut galley, entry.path, audited)?;
        queries(&mut galley, audited, &places)?;
        if self.workings {
            as_read(&mut galley, audited)?;
            workings(&mut galley, audited)?;
        }
        account(&mut galley, audited)
    }

    fn between(&self, out: &mut dyn Write) -> io::Result<()> {
        writeln!(out)
    }

    fn end(&self, lines: &[Line], out: &mut dyn Write) -> io::Result<()> {
        if lines.iter().all(|l| l.outcome.is_err()) {
            return Ok(());
        }
        let mut galley = Galley::new(out, self.width);
        if lines.len() > 1 {
            worklist(&mut galley, lines)?;
        }
        galley.gap()?;
        galley.note(BOLD, "Bear in");
        galley.note(BOLD, "mind");
        for caution in CAUTIONS {
            galley.text(&[(PLAIN, caution)])?;
        }
        galley.flush()
    }
}

fn opening(galley: &mut Galley, path: &str, audited: &Audited) -> io::Result<()> {
    galley.across(&[(BOLD, &clean(path))])?;
    let counts = by_level(&audited.by_level());
    galley.across(&[(PLAIN, &format!("read as {}; {counts}", audited.manuscript.source.format))])?;
    for notice in &audited.notices {
        galley.gap()?;
        galley.note(FAINT, "Notice");
        galley.text(&[(PLAIN, &clean(&notice.0))])?;
    }
    galley.flush()
}

/// "4 queries: 1 major, 2 minor, 1 note"
fn by_level(counts: &[usize; 3]) -> String {
    let all: usize = counts.iter().sum();
    let named = |level: Level| {
        let n = counts[level as usize];
        (n > 0).then(|| if level == Level::Note { plural(n, "note") } else { format!("{n} {}", level.name()) })
    };
    let parts: Vec<_> = Level::ALL.into_iter().rev().filter_map(named).collect();
    match all {
        0 => "no queries".to_owned(),
        1 => format!("1 query: {}", parts.join(", ")),
        _ => format!("{all} queries: {}", parts.join(", ")),
    }
}

fn plural(n: usize, word: &str) -> String {
    format!("{n} {word}{}", if n == 1 { "" } else { "s" })
}

fn queries(galley: &mut Galley, audited: &Audited, places: &Places) -> io::Result<()> {
    let mut section: Option<&[String]> = None;
    for (i, query) in audited.queries.iter().enumerate() {
        galley.gap()?;
        if section != Some(&query.section) {
            let title = clean(&places.below_title(&query.section).join(" › "));
            if !title.is_empty() {
                galley.across(&[(BOLD, "§ "), (BOLD, &title)])?;
                galley.gap()?;
            }
            section = Some(&query.section);
        }
        one_query(galley, i + 1, query, audited, places)?;
    }
    Ok(())
}

fn level_style(level: Level) -> Style {
    match level {
        Level::Major => AnsiColor::Red.on_default().bold(),
        Level::Minor => AnsiColor::Magenta.on_default(),
        Level::Note => FAINT,
    }
}

fn one_query(galley: &mut Galley, number: usize, query: &Query, audited: &Audited, places: &Places) -> io::Result<()> {
    galley.note(PENCIL, format!("Query {number}"));
    galley.note(level_style(query.level), query.level.name());
    let context = places.context(&query.location, &query.quote);
    for note in where_it_stands(&query.location, places) {
        galley.note(FAINT, note);
    }
    in_context(galley, query, &context)?;
    galley.gap()?;
    let in_question = in_question(query, audited);
    if in_question.len() != 1 || query.results.len() != 1 {
        galley.text(&[(PLAIN, &clean(&query.says))])?;
        galley.gap()?;
    }
    for r in in_question {
        galley.labelled("printed", &[(BOLD, &clean(audited.manuscript.quote(r.figure)))])?;
        if let Some(computed) = r.computed {
            let computed = numbers::range(r.of, computed);
            let of = if r.of == Quantity::P { "P " } else { "" };
            let method = format!(" ({})", r.method.name);
            galley.labelled("recomputed", &[(BOLD, of), (BOLD, &computed), (PLAIN, &method)])?;
        }
    }
    if let Some(working) = &query.working {
        galley.labelled("working", &[(PLAIN, &clean(working))])?;
    }
    galley.labelled("ground", &[(PLAIN, words::ground(query.ground))])?;
    galley.gap()?;
    galley.text(&[(BOLD, &clean(&query.asks))])?;
    galley.gap()?;
    aside(galley, query)?;
    galley.flush()
}

/// What helps to answer a query: explanations, related places, a repair, the rule.
fn aside(galley: &mut Galley, query: &Query) -> io::Result<()> {
    let (assumed, innocent): (Vec<_>, Vec<_>) = query.explanations.iter().partition(|e| words::is_assumption(&e.kind));
    for (label, explanations) in [("perhaps", innocent), ("assumed", assumed)] {
        if !explanations.is_empty() {
            let says: Vec<_> = explanations.iter().map(|e| clean(&e.says)).collect();
            galley.labelled(label, &[(PLAIN, &says.join(" "))])?;
        }
    }
    for (i, related) in query.related.iter().enumerate() {
        galley.labelled(if i == 0 { "see" } else { "" }, &[(PLAIN, &see(related))])?;
    }
    if let Some(repair) = &query.repair {
        galley.labelled("repair", &[(PLAIN, &repair_in_words(repair, &query.quote))])?;
    }
    galley.labelled("rule", &[(FAINT, &query.rule)])
}

fn see(related: &Related) -> String {
    let Location { line, column, .. } = related.location;
    format!("{line}:{column} “{}”, {}", first_part(&clean(&related.quote), 80), clean(&related.part))
}

fn repair_in_words(repair: &Repair, quote: &str) -> String {
    let text = clean(&repair.text);
    let Location { line, column, .. } = repair.location;
    let put = match repair.kind {
        RepairKind::Replace => format!("{line}:{column}, in place of “{}”: {text}", first_part(&clean(quote), 80)),
        RepairKind::InsertAfter => format!("{line}:{column}, insert after: {text}"),
    };
    if repair.needs_confirmation { format!("{put} (once the author has confirmed it)") } else { put }
}

/// "47:81", and in a table "Table 2," "row 3".
fn where_it_stands(location: &Location, places: &Places) -> Vec<String> {
    let mut notes = vec![format!("{}:{}", location.line, location.column)];
    if let Some(cell) = location.cell {
        notes.push(format!("Table {},", cell.table + 1));
        notes.push(match places.body_row(cell) {
            Some(row) => format!("row {}", row + 1),
            None => "its header".to_owned(),
        });
    }
    notes
}

/// The words in question, ringed in their sentence or row.
fn in_context(galley: &mut Galley, query: &Query, context: &Option<Context>) -> io::Result<()> {
    let quote = clean(&query.quote);
    let ringed = if quote.chars().count() > WORDS {
        format!("«{} {}»", first_part(&quote, WORDS / 2), last_part(&quote, WORDS / 2).trim_start_matches("… "))
    } else {
        format!("«{quote}»")
    };
    let (before, after, columns) = match context {
        Some(c) => (last_part(&clean(c.before), AROUND), first_part(&clean(c.after), AROUND), c.columns),
        None => Default::default(),
    };
    if let Some(columns) = columns {
        galley.text(&[(FAINT, &first_part(&clean(columns), AROUND))])?;
    }
    let pieces: [Piece; 3] =
        [(PLAIN, before.trim_start()), (RINGED, &ringed), (PLAIN, after.trim_end_matches([' ', '·']))];
    galley.text(&pieces)
}

/// The recomputations that a query is about: those that differ at its place, else all that differ.
fn in_question<'a>(query: &Query, audited: &'a Audited) -> Vec<&'a Recomputation> {
    let of_results = query.results.iter().filter_map(|&r| audited.checked.get(r));
    let differing: Vec<_> =
        of_results.flat_map(|c| &c.recomputations).filter(|r| r.verdict == Verdict::Differs).collect();
    let here = |r: &&&Recomputation| {
        let at = audited.manuscript.locate(r.figure);
        at.start < query.location.end && query.location.start < at.end
    };
    let mut chosen: Vec<_> = differing.iter().filter(here).copied().collect();
    if chosen.is_empty() {
        chosen = differing;
    }
    chosen.truncate(3);
    chosen
}

/// What each stretch of a snippet was taken for.
fn as_read(galley: &mut Galley, audited: &Audited) -> io::Result<()> {
    let r = &audited.readings;
    let mut read: Vec<(Span, &str, String)> = Vec::new();
    read.extend(r.p.iter().map(|x| (x.span, "p-value", words::role(x.role).to_owned())));
    read.extend(r.intervals.iter().map(|x| (x.span, "interval", format!("{} to {}", x.lower, x.upper))));
    read.extend(r.statistics.iter().map(|x| (x.span, "statistic", words::symbol(x.symbol).to_owned())));
    read.extend(r.groups.iter().map(|x| (x.span, "group", group_in_words(x))));
    read.extend(r.estimates.iter().map(|x| (x.span, "estimate", words::measure(x.measure).to_owned())));
    read.extend(r.claims.iter().map(|x| (x.span, "claim", words::claim_kind(x.kind).to_owned())));
    read.extend(r.planning.iter().map(|x| (x.span, "planning", words::planning_kind(x.what).to_owned())));
    read.sort_by_key(|(span, ..)| *span);
    if read.is_empty() {
        return Ok(());
    }
    galley.gap()?;
    galley.across(&[(BOLD, "What was read")])?;
    galley.gap()?;
    for (span, kind, what) in read {
        let quote = first_part(&clean(audited.manuscript.quote(span)), 80);
        let comma = if what.is_empty() { "" } else { ": " };
        galley.labelled(kind, &[(BOLD, &quote), (FAINT, comma), (FAINT, &clean(&what))])?;
    }
    galley.flush()
}

/// "sling, n = 119": the name and sizes that a group was given.
fn group_in_words(group: &Group) -> String {
    let size = |name: &str, figure: &Option<Figure>| figure.as_ref().map(|f| format!("{name} = {}", f.printed));
    let label = (!group.label.is_empty()).then(|| group.label.clone());
    let spread = group.spread_kind.map(|k| format!("spread {}", words::spread_kind(k)));
    let parts = [label, size("n", &group.n), size("events", &group.events), size("total", &group.total), spread];
    parts.into_iter().flatten().collect::<Vec<_>>().join(", ")
}

/// Everything that follows from the figures, for a snippet.
fn workings(galley: &mut Galley, audited: &Audited) -> io::Result<()> {
    galley.gap()?;
    galley.across(&[(BOLD, "What follows from the figures")])?;
    let recomputed: Vec<&Checked> = audited.checked.iter().filter(|c| !c.recomputations.is_empty()).collect();
    if recomputed.is_empty() {
        let reasons: BTreeSet<&str> = audited.checked.iter().filter_map(|c| c.reason).collect();
        let because = if reasons.is_empty() { "" } else { ": " };
        let reasons: Vec<_> = reasons.into_iter().collect();
        galley.gap()?;
        galley.text(&[
            (PLAIN, "Nothing can be recomputed from the figures of this text alone"),
            (PLAIN, because),
            (PLAIN, &reasons.join("; ")),
            (PLAIN, "."),
        ])?;
    }
    for (i, checked) in recomputed.iter().enumerate() {
        galley.gap()?;
        galley.note(PENCIL, format!("Result {}", i + 1));
        galley.note(PLAIN, checked.verdict.name());
        for (j, r) in checked.recomputations.iter().enumerate() {
            if j > 0 {
                galley.gap()?;
            }
            working(galley, r, audited)?;
        }
        galley.flush()?;
    }
    Ok(())
}

fn working(galley: &mut Galley, r: &Recomputation, audited: &Audited) -> io::Result<()> {
    let verdict = match (r.verdict, r.sharp) {
        (Verdict::Tallies, true) => "tallies sharply",
        (Verdict::Tallies, false) => "tallies, but proves little: a tenfold change might have tallied too",
        (Verdict::Differs, _) => "differs",
        (Verdict::Undecided, _) => "undecided",
    };
    let quote = first_part(&clean(audited.manuscript.quote(r.figure)), 80);
    galley.labelled("printed", &[(BOLD, &quote)])?;
    match r.computed {
        Some(range) => {
            let range = numbers::range(r.of, range);
            let of = if r.of == Quantity::P { "P " } else { "" };
            let method = format!(" ({})", r.method.name);
            galley.labelled("recomputed", &[(BOLD, of), (BOLD, &range), (PLAIN, &method)])?;
        }
        None => galley.labelled("method", &[(PLAIN, r.method.name)])?,
    }
    match &r.reason {
        Some(reason) => galley.labelled("verdict", &[(BOLD, verdict), (PLAIN, "; "), (PLAIN, &clean(reason))])?,
        None => galley.labelled("verdict", &[(BOLD, verdict)])?,
    }
    if !r.working.is_empty() {
        galley.labelled("working", &[(PLAIN, &clean(&r.working))])?;
    }
    galley.labelled("ground", &[(PLAIN, words::ground(r.ground))])?;
    for (i, &assumption) in r.assumptions.iter().enumerate() {
        galley.labelled(if i == 0 { "assumed" } else { "" }, &[(PLAIN, words::assumption(assumption))])?;
    }
    if let Some(slip) = &r.slip {
        galley.labelled("perhaps", &[(PLAIN, &clean(&slip.says))])?;
    }
    galley.labelled("published", &[(FAINT, r.method.source)])
}

/// What silence means.
fn account(galley: &mut Galley, audited: &Audited) -> io::Result<()> {
    let account = Account::of(audited);
    galley.gap()?;
    galley.note(BOLD, "What");
    galley.note(BOLD, "silence");
    galley.note(BOLD, "means");
    if account.read == 0 {
        galley.text(&[(PLAIN, "No p-value of a result was read.")])?;
    } else {
        let Account { read, checked, tallies, sharp, queried, .. } = account;
        let mut says = format!("Read {}; {checked} could be checked", plural(read, "p-value"));
        if checked > 0 {
            says += &format!(": {tallies} {} ({sharp} sharply)", if tallies == 1 { "tallies" } else { "tally" });
            says += &format!(", {queried} queried");
            let passed = checked - tallies - queried;
            if passed > 0 {
                says += &format!(", {passed} differing by less than a query is made of");
            }
        }
        galley.text(&[(PLAIN, &(says + "."))])?;
    }
    if !account.others.is_empty() {
        let each = |(name, (done, tally)): (&&str, &(usize, usize))| format!("{name} {tally} of {done}");
        let others: Vec<_> = account.others.iter().map(each).collect();
        galley.text(&[(PLAIN, &format!("Other figures recomputed, tallying: {}.", others.join(", ")))])?;
    }
    let not_checked: usize = account.not_checked.values().sum();
    if not_checked > 0 {
        let text = format!("{} could not be checked, because", plural(not_checked, "p-value"));
        galley.text(&[(PLAIN, &text)])?;
        let mut reasons: Vec<_> = account.not_checked.iter().collect();
        reasons.sort_by_key(|&(reason, &n)| (std::cmp::Reverse(n), reason));
        for (reason, n) in reasons {
            galley.counted(*n, &clean(reason))?;
        }
    }
    galley.flush()
}

/// How many manuscripts without a query are named in a worklist.
const QUIET: usize = 10;

/// The manuscripts of a batch, those with the most and gravest queries first.
fn worklist(galley: &mut Galley, lines: &[Line]) -> io::Result<()> {
    galley.gap()?;
    galley.across(&[(BOLD, "Worklist, the gravest first")])?;
    let ranked = ranked(lines);
    let quiet = ranked.partition_point(|(_, d)| d.queries.iter().sum::<usize>() > 0);
    galley.gap()?;
    let shown = if ranked.len() - quiet > QUIET { quiet } else { ranked.len() };
    for (line, digest) in &ranked[..shown] {
        galley.text(&[(PLAIN, &clean(&line.path)), (FAINT, ": "), (FAINT, &by_level(&digest.queries))])?;
    }
    if shown < ranked.len() {
        galley.text(&[(PLAIN, &format!("{} more raise no query", ranked.len() - shown))])?;
    }
    for line in lines.iter().filter(|l| l.outcome.is_err()) {
        galley.text(&[(PLAIN, &clean(&line.path)), (FAINT, ": could not be read")])?;
    }
    galley.flush()
}
