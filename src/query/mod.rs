//! A query to the author, as plain data that reports render: self-contained, with its places resolved.

use crate::manuscript::Location;

/// How much a query matters, as in a reviewer's report.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum Level {
    Note,
    Minor,
    Major,
}

/// Why a figure must agree, strongest first (design: the number core).
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum Ground {
    ByDefinition,
    GivenTheStatedTest,
    IfOneMethod,
    IfUnadjusted,
    /// The query is about wording or reporting: no figure is recomputed.
    Reporting,
}

#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum Verdict {
    Tallies,
    Differs,
    Undecided,
}

/// A place that has a part in a query.
#[derive(Clone, Debug, PartialEq)]
pub struct Related {
    pub location: Location,
    pub quote: String,
    /// What part it has: "the group size", "the interval" …
    pub part: String,
}

/// An innocent explanation worth checking first.
#[derive(Clone, Debug, PartialEq)]
pub struct Explanation {
    /// `one-sided`, `se-for-sd`, `another level` … or `assumption`.
    pub kind: String,
    pub says: String,
}

#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum RepairKind {
    Replace,
    InsertAfter,
}

/// Ready to paste.
#[derive(Clone, Debug, PartialEq)]
pub struct Repair {
    pub kind: RepairKind,
    pub location: Location,
    pub text: String,
    pub needs_confirmation: bool,
}

#[derive(Clone, Debug, PartialEq)]
pub struct Query {
    /// `family/name`.
    pub rule: String,
    pub level: Level,
    pub ground: Ground,
    pub location: Location,
    pub quote: String,
    /// The section's titles from the top, for people.
    pub section: Vec<String>,
    pub related: Vec<Related>,
    /// What stands there and what was found, in one sentence.
    pub says: String,
    /// A line of arithmetic that can be checked by hand.
    pub working: Option<String>,
    /// The question to the author.
    pub asks: String,
    pub explanations: Vec<Explanation>,
    pub repair: Option<Repair>,
    pub fingerprint: String,
    /// Indexes of results in the same manuscript.
    pub results: Vec<usize>,
}

impl Level {
    pub const ALL: [Level; 3] = [Level::Note, Level::Minor, Level::Major];

    pub fn name(self) -> &'static str {
        match self {
            Level::Note => "note",
            Level::Minor => "minor",
            Level::Major => "major",
        }
    }
}

impl Ground {
    pub fn name(self) -> &'static str {
        match self {
            Ground::ByDefinition => "by definition",
            Ground::GivenTheStatedTest => "given the stated test",
            Ground::IfOneMethod => "if one method",
            Ground::IfUnadjusted => "if unadjusted",
            Ground::Reporting => "reporting",
        }
    }
}

impl Verdict {
    pub fn name(self) -> &'static str {
        match self {
            Verdict::Tallies => "tallies",
            Verdict::Differs => "differs",
            Verdict::Undecided => "undecided",
        }
    }
}

impl RepairKind {
    pub fn name(self) -> &'static str {
        match self {
            RepairKind::Replace => "replace",
            RepairKind::InsertAfter => "insert-after",
        }
    }
}
