//! JSON for programs: one object for one file, an array for several, or one object a line.
//!
//! Field names are fixed, because other tools read them; more may be added. Indexes refer to the
//! lists of the same object. Lists are written as they are walked: nothing is copied beforehand.

use std::io::{self, Write};

use serde::{Serialize, Serializer};

use super::{Account, Audited, CAUTIONS, Entry, Line, Report, words};
use crate::manuscript::{Location, Manuscript};
use crate::printed::Printed;
use crate::query::{Explanation, Query, Related, Repair};
use crate::reading::{
    Claim, Estimate, Figure, Group, IntervalReading, Origin, PValue, Planning, Relation, Sides, Statistic,
};
use crate::recompute::{Checked, Recomputation, Slip};
use crate::result::{ReportedResult, StatedTest};
use crate::text::Span;

/// The shape of the output.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Json {
    /// One object for one manuscript.
    Object,
    /// An array of objects.
    Array,
    /// One object a line.
    Lines,
}

impl Report for Json {
    fn begin(&self, out: &mut dyn Write) -> io::Result<()> {
        if *self == Json::Array { out.write_all(b"[\n") } else { Ok(()) }
    }

    fn manuscript(&self, entry: &Entry, out: &mut dyn Write) -> io::Result<()> {
        match entry.outcome {
            Ok(audited) => self.object(&Document::of(entry.path, audited), out),
            Err(why) => self.object(&Failed { source: entry.path, error: why }, out),
        }
    }

    fn between(&self, out: &mut dyn Write) -> io::Result<()> {
        if *self == Json::Array { out.write_all(b",") } else { Ok(()) }
    }

    fn end(&self, _lines: &[Line], out: &mut dyn Write) -> io::Result<()> {
        if *self == Json::Array { out.write_all(b"]\n") } else { Ok(()) }
    }
}

impl Json {
    fn object(self, object: &impl Serialize, mut out: &mut dyn Write) -> io::Result<()> {
        match self {
            Json::Object => serde_json::to_writer_pretty(&mut out, object)?,
            Json::Array | Json::Lines => serde_json::to_writer(&mut out, object)?,
        }
        out.write_all(b"\n")
    }
}

#[derive(Serialize)]
struct Failed<'a> {
    source: &'a str,
    error: &'a str,
}

#[derive(Serialize)]
struct Document<'a> {
    tool: Tool,
    source: Source<'a>,
    notices: Vec<&'a str>,
    readings: Readings<'a>,
    results: Results<'a>,
    queries: List<'a, Query>,
    summary: Summary,
    cautions: [&'static str; 3],
}

#[derive(Serialize)]
struct Tool {
    name: &'static str,
    version: &'static str,
}

#[derive(Serialize)]
struct Source<'a> {
    path: &'a str,
    format: &'a str,
}

#[derive(Serialize)]
struct Readings<'a> {
    p: List<'a, PValue>,
    intervals: List<'a, IntervalReading>,
    statistics: List<'a, Statistic>,
    groups: List<'a, Group>,
    estimates: List<'a, Estimate>,
    claims: List<'a, Claim>,
    planning: List<'a, Planning>,
}

#[derive(Serialize)]
struct Summary {
    p: SummaryOfP,
    not_checked: std::collections::BTreeMap<String, usize>,
}

#[derive(Serialize)]
struct SummaryOfP {
    read: usize,
    checked: usize,
    tallies: usize,
    sharp: usize,
    queried: usize,
}

impl<'a> Document<'a> {
    fn of(path: &'a str, audited: &'a Audited) -> Document<'a> {
        let manuscript = &audited.manuscript;
        let readings = &audited.readings;
        let account = Account::of(audited);
        Document {
            tool: Tool { name: env!("CARGO_PKG_NAME"), version: env!("CARGO_PKG_VERSION") },
            source: Source { path, format: manuscript.source.format },
            notices: audited.notices.iter().map(|n| n.0.as_str()).collect(),
            readings: Readings {
                p: List::of(manuscript, &readings.p),
                intervals: List::of(manuscript, &readings.intervals),
                statistics: List::of(manuscript, &readings.statistics),
                groups: List::of(manuscript, &readings.groups),
                estimates: List::of(manuscript, &readings.estimates),
                claims: List::of(manuscript, &readings.claims),
                planning: List::of(manuscript, &readings.planning),
            },
            results: Results(audited),
            queries: List::of(manuscript, &audited.queries),
            summary: Summary {
                p: SummaryOfP {
                    read: account.read,
                    checked: account.checked,
                    tallies: account.tallies,
                    sharp: account.sharp,
                    queried: account.queried,
                },
                not_checked: account.not_checked,
            },
            cautions: CAUTIONS,
        }
    }
}

/// A list of plain data with the manuscript that its places are resolved in.
struct List<'a, T> {
    manuscript: &'a Manuscript,
    items: &'a [T],
}

/// The form that an item takes in JSON.
trait Shown {
    fn shown<'a>(&'a self, manuscript: &'a Manuscript) -> impl Serialize + 'a;
}

impl<'a, T> List<'a, T> {
    fn of(manuscript: &'a Manuscript, items: &'a [T]) -> List<'a, T> {
        List { manuscript, items }
    }
}

impl<T: Shown> Serialize for List<'_, T> {
    fn serialize<S: Serializer>(&self, serializer: S) -> Result<S::Ok, S::Error> {
        serializer.collect_seq(self.items.iter().map(|item| item.shown(self.manuscript)))
    }
}

struct Results<'a>(&'a Audited);

impl Serialize for Results<'_> {
    fn serialize<S: Serializer>(&self, serializer: S) -> Result<S::Ok, S::Error> {
        let Results(audited) = self;
        let pairs = audited.results.iter().zip(&audited.checked);
        serializer.collect_seq(pairs.map(|(result, checked)| ShownResult::of(result, checked, &audited.manuscript)))
    }
}

#[derive(Serialize)]
struct Place {
    start: usize,
    end: usize,
    line: u32,
    column: u32,
    exact: bool,
    #[serde(skip_serializing_if = "Option::is_none")]
    table: Option<u32>,
    #[serde(skip_serializing_if = "Option::is_none")]
    row: Option<u32>,
    #[serde(skip_serializing_if = "Option::is_none")]
    column_index: Option<u32>,
}

impl Place {
    fn of(location: &Location) -> Place {
        Place {
            start: location.start,
            end: location.end,
            line: location.line,
            column: location.column,
            exact: location.exact,
            table: location.cell.map(|c| c.table),
            row: location.cell.map(|c| c.row),
            column_index: location.cell.map(|c| c.column),
        }
    }
}

/// A place and the canonical text that stands there: what every reading begins with.
#[derive(Serialize)]
struct Quoted<'a> {
    place: Place,
    quote: &'a str,
}

impl<'a> Quoted<'a> {
    fn of(manuscript: &'a Manuscript, span: Span) -> Quoted<'a> {
        Quoted { place: Place::of(&manuscript.locate(span)), quote: manuscript.quote(span) }
    }
}

/// Counts stay whole numbers.
#[derive(Serialize)]
#[serde(untagged)]
enum Number {
    Whole(u64),
    Real(f64),
}

impl Number {
    fn of(printed: Printed) -> Number {
        printed.count().map_or_else(|| Number::Real(printed.value()), Number::Whole)
    }

    fn figure(figure: &Option<Figure>) -> Option<Number> {
        figure.as_ref().map(|f| Number::of(f.printed))
    }
}

/// Where a figure comes from, unless it is printed in the reading itself.
fn origin(figure: &Option<Figure>) -> Option<&'static str> {
    figure.as_ref().filter(|f| !matches!(f.origin, Origin::Printed(_))).map(|f| words::origin(f.origin))
}

impl Shown for PValue {
    fn shown<'a>(&'a self, manuscript: &'a Manuscript) -> impl Serialize + 'a {
        #[derive(Serialize)]
        struct View<'a> {
            #[serde(flatten)]
            at: Quoted<'a>,
            relation: &'static str,
            value: Option<f64>,
            role: &'static str,
            corrected: bool,
            shared: bool,
        }
        View {
            at: Quoted::of(manuscript, self.span),
            relation: words::relation(self.relation),
            value: self.value.filter(|_| self.relation != Relation::NotSignificant).map(Printed::value),
            role: words::role(self.role),
            corrected: self.corrected,
            shared: self.shared,
        }
    }
}

impl Shown for IntervalReading {
    fn shown<'a>(&'a self, manuscript: &'a Manuscript) -> impl Serialize + 'a {
        #[derive(Serialize)]
        struct View<'a> {
            #[serde(flatten)]
            at: Quoted<'a>,
            level: Option<Number>,
            lower: f64,
            upper: f64,
            percent: bool,
            credible: bool,
        }
        View {
            at: Quoted::of(manuscript, self.span),
            level: Number::figure(&self.level),
            lower: self.lower.value(),
            upper: self.upper.value(),
            percent: self.percent,
            credible: self.credible,
        }
    }
}

impl Shown for Statistic {
    fn shown<'a>(&'a self, manuscript: &'a Manuscript) -> impl Serialize + 'a {
        #[derive(Serialize)]
        struct View<'a> {
            #[serde(flatten)]
            at: Quoted<'a>,
            symbol: &'static str,
            relation: &'static str,
            df1: Option<Number>,
            df2: Option<Number>,
            value: f64,
            n: Option<Number>,
        }
        View {
            at: Quoted::of(manuscript, self.span),
            symbol: words::symbol(self.symbol),
            relation: words::relation(self.relation),
            df1: Number::figure(&self.df1),
            df2: Number::figure(&self.df2),
            value: self.value.value(),
            n: Number::figure(&self.n),
        }
    }
}

impl Shown for Group {
    fn shown<'a>(&'a self, manuscript: &'a Manuscript) -> impl Serialize + 'a {
        #[derive(Serialize)]
        struct View<'a> {
            #[serde(flatten)]
            at: Quoted<'a>,
            label: &'a str,
            n: Option<Number>,
            events: Option<Number>,
            total: Option<Number>,
            percent: Option<f64>,
            mean: Option<f64>,
            median: Option<f64>,
            spread_kind: Option<&'static str>,
            spread: Vec<f64>,
            change: bool,
            #[serde(skip_serializing_if = "Option::is_none")]
            n_from: Option<&'static str>,
            #[serde(skip_serializing_if = "Option::is_none")]
            total_from: Option<&'static str>,
        }
        View {
            at: Quoted::of(manuscript, self.span),
            label: &self.label,
            n: Number::figure(&self.n),
            events: Number::figure(&self.events),
            total: Number::figure(&self.total),
            percent: self.percent.map(Printed::value),
            mean: self.mean.map(Printed::value),
            median: self.median.map(Printed::value),
            spread_kind: self.spread_kind.map(words::spread_kind),
            spread: self.spread.iter().map(|s| s.value()).collect(),
            change: self.change,
            n_from: origin(&self.n),
            total_from: origin(&self.total),
        }
    }
}

impl Shown for Estimate {
    fn shown<'a>(&'a self, manuscript: &'a Manuscript) -> impl Serialize + 'a {
        #[derive(Serialize)]
        struct View<'a> {
            #[serde(flatten)]
            at: Quoted<'a>,
            measure: &'static str,
            value: f64,
            se: Option<f64>,
            percent: bool,
            adjusted: bool,
        }
        View {
            at: Quoted::of(manuscript, self.span),
            measure: words::measure(self.measure),
            value: self.value.value(),
            se: self.se.map(Printed::value),
            percent: self.percent,
            adjusted: self.adjusted,
        }
    }
}

impl Shown for Claim {
    fn shown<'a>(&'a self, manuscript: &'a Manuscript) -> impl Serialize + 'a {
        #[derive(Serialize)]
        struct View<'a> {
            #[serde(flatten)]
            at: Quoted<'a>,
            kind: &'static str,
            #[serde(skip_serializing_if = "Option::is_none")]
            form: Option<&'static str>,
            attribution: &'static str,
            direction: Option<&'static str>,
            says_significant: bool,
        }
        View {
            at: Quoted::of(manuscript, self.span),
            kind: words::claim_kind(self.kind),
            form: words::claim_form(self.kind),
            attribution: words::attribution(self.attribution),
            direction: self.direction.map(words::direction),
            says_significant: self.says_significant,
        }
    }
}

impl Shown for Planning {
    fn shown<'a>(&'a self, manuscript: &'a Manuscript) -> impl Serialize + 'a {
        #[derive(Serialize)]
        struct View<'a> {
            #[serde(flatten)]
            at: Quoted<'a>,
            what: &'static str,
            value: Option<Number>,
            sides: Option<u8>,
        }
        View {
            at: Quoted::of(manuscript, self.span),
            what: words::planning_kind(self.what),
            value: self.value.map(Number::of),
            sides: self.sides.map(|s| match s {
                Sides::One => 1,
                Sides::Two => 2,
            }),
        }
    }
}

#[derive(Serialize)]
struct ShownResult<'a> {
    p: Option<usize>,
    interval: Option<usize>,
    statistic: Option<usize>,
    estimate: Option<usize>,
    groups: &'a [usize],
    /// The test that is named for this very result.
    test: Option<&'static str>,
    recomputations: Vec<ShownRecomputation<'a>>,
    verdict: &'static str,
    reason: Option<&'static str>,
}

impl<'a> ShownResult<'a> {
    fn of(result: &'a ReportedResult, checked: &'a Checked, manuscript: &Manuscript) -> ShownResult<'a> {
        let named = |t: &&StatedTest| t.here;
        ShownResult {
            p: result.p,
            interval: result.interval,
            statistic: result.statistic,
            estimate: result.estimate,
            groups: &result.groups,
            test: result.tests.iter().find(named).map(|t| t.test.value.name()),
            recomputations: checked.recomputations.iter().map(|r| ShownRecomputation::of(r, manuscript)).collect(),
            verdict: checked.verdict.name(),
            reason: checked.reason,
        }
    }
}

#[derive(Serialize)]
struct ShownRecomputation<'a> {
    of: &'static str,
    place: Place,
    method: &'static str,
    source: &'static str,
    ground: &'static str,
    lower: Option<f64>,
    upper: Option<f64>,
    verdict: &'static str,
    sharp: bool,
    reason: Option<&'a str>,
    working: &'a str,
    assumptions: Vec<&'static str>,
    #[serde(skip_serializing_if = "Option::is_none")]
    slip: Option<Named<'a>>,
}

/// Something with a kind and a clause for people.
#[derive(Serialize)]
struct Named<'a> {
    kind: &'a str,
    says: &'a str,
}

impl<'a> ShownRecomputation<'a> {
    fn of(r: &'a Recomputation, manuscript: &Manuscript) -> ShownRecomputation<'a> {
        let slip = |s: &'a Slip| Named { kind: s.kind, says: &s.says };
        ShownRecomputation {
            of: words::quantity(r.of),
            place: Place::of(&manuscript.locate(r.figure)),
            method: r.method.name,
            source: r.method.source,
            ground: r.ground.name(),
            lower: r.computed.map(|c| c.lo),
            upper: r.computed.map(|c| c.hi),
            verdict: r.verdict.name(),
            sharp: r.sharp,
            reason: r.reason.as_deref(),
            working: &r.working,
            assumptions: r.assumptions.iter().map(|&a| words::assumption_name(a)).collect(),
            slip: r.slip.as_ref().map(slip),
        }
    }
}

impl Shown for Query {
    fn shown<'a>(&'a self, _manuscript: &'a Manuscript) -> impl Serialize + 'a {
        #[derive(Serialize)]
        struct View<'a> {
            rule: &'a str,
            level: &'static str,
            ground: &'static str,
            place: Place,
            section: &'a [String],
            related: Vec<ShownRelated<'a>>,
            quote: &'a str,
            says: &'a str,
            working: Option<&'a str>,
            asks: &'a str,
            explanations: Vec<Named<'a>>,
            repair: Option<ShownRepair<'a>>,
            fingerprint: &'a str,
            results: &'a [usize],
        }
        let explanation = |e: &'a Explanation| Named { kind: &e.kind, says: &e.says };
        View {
            rule: &self.rule,
            level: self.level.name(),
            ground: self.ground.name(),
            place: Place::of(&self.location),
            section: &self.section,
            related: self.related.iter().map(ShownRelated::of).collect(),
            quote: &self.quote,
            says: &self.says,
            working: self.working.as_deref(),
            asks: &self.asks,
            explanations: self.explanations.iter().map(explanation).collect(),
            repair: self.repair.as_ref().map(ShownRepair::of),
            fingerprint: &self.fingerprint,
            results: &self.results,
        }
    }
}

#[derive(Serialize)]
struct ShownRelated<'a> {
    place: Place,
    quote: &'a str,
    part: &'a str,
}

impl<'a> ShownRelated<'a> {
    fn of(related: &'a Related) -> ShownRelated<'a> {
        ShownRelated { place: Place::of(&related.location), quote: &related.quote, part: &related.part }
    }
}

#[derive(Serialize)]
struct ShownRepair<'a> {
    kind: &'static str,
    place: Place,
    text: &'a str,
    needs_confirmation: bool,
}

impl<'a> ShownRepair<'a> {
    fn of(repair: &'a Repair) -> ShownRepair<'a> {
        ShownRepair {
            kind: repair.kind.name(),
            place: Place::of(&repair.location),
            text: &repair.text,
            needs_confirmation: repair.needs_confirmation,
        }
    }
}
