//! From candidates to a verdict: what decides, what only agrees, and what holds an objection back.

use super::mean::Tested;
use super::target::{Fit, Target};
use super::{Distance, Method, Quantity, Recomputation, Slip, reason, working};
use crate::context::Test;
use crate::printed::Range;
use crate::query::{Ground, Verdict};
use crate::reading::Assumption;
use crate::text::Span;
use std::fmt;
use std::rc::Rc;

/// What was computed, for people. Few candidates are shown, so a test is put into words only when it is.
#[derive(Clone, Debug)]
pub(crate) enum Line {
    Words(String),
    /// A test of means: what it rests on, its name, its symbol and its figures.
    Test {
        on: Rc<str>,
        short: &'static str,
        symbol: &'static str,
        tested: Tested,
    },
}

impl From<String> for Line {
    fn from(words: String) -> Line {
        Line::Words(words)
    }
}

impl fmt::Display for Line {
    fn fmt(&self, f: &mut fmt::Formatter) -> fmt::Result {
        match self {
            Line::Words(words) => f.write_str(words),
            Line::Test { on, short, symbol, tested: t } => {
                let df = match *symbol {
                    "F" => format!("{} and {}", t.df.lo, t.df.hi),
                    _ => working::range(t.df, 3),
                };
                let statistic = working::range(t.statistic, 3);
                write!(f, "{on}; {short}; {symbol} = {statistic}, df {df}; {}", working::p(t.p))
            }
        }
    }
}

/// One way to compute a figure.
#[derive(Clone, Debug)]
pub(crate) struct Candidate {
    pub method: &'static Method,
    /// Encloses the value at every point of the inputs' box.
    pub range: Range,
    pub working: Line,
    pub assumptions: Vec<Assumption>,
    /// What it is called beside a stated test: "Pearson".
    pub short: &'static str,
    /// It is the stated test or a variant of it; always true where none is stated for the result.
    pub decides: bool,
}

impl Candidate {
    pub fn new(method: &'static Method, short: &'static str, range: Range, working: impl Into<Line>) -> Candidate {
        Candidate { method, range, working: working.into(), assumptions: Vec::new(), short, decides: true }
    }

    pub fn assuming(mut self, assumption: Assumption) -> Candidate {
        self.assumptions.push(assumption);
        self
    }
}

/// How a difference is to be taken.
#[derive(Clone, Debug)]
pub(crate) struct Policy {
    pub of: Quantity,
    pub ground: Ground,
    /// Why a difference is no ground for an objection here.
    pub hold: Option<&'static str>,
    /// Smaller distances (see [`Distance`]) stay undecided.
    pub least: f64,
    /// Smaller shifts of p as a normal deviate (see [`Target::shift`]) stay undecided.
    pub least_shift: f64,
    pub alpha: f64,
    /// The stated test's name, where one is stated for this result.
    pub stated: Option<Test>,
}

/// The figures that a recomputation used, each with its part.
pub(crate) type Inputs = Vec<(Span, &'static str)>;

/// Holds the candidates against the printed figure. `slips` is asked only where nothing agrees.
pub(crate) fn judge(
    target: &Target,
    candidates: Vec<Candidate>,
    policy: &Policy,
    inputs: Inputs,
    slips: impl FnOnce() -> Option<Slip>,
) -> Option<Recomputation> {
    let any_decides = candidates.iter().any(|c| c.decides);
    let rank = |c: &Candidate| (target.fit(c.range), any_decides && !c.decides);
    // The stated test first; then the fit; then the order given.
    let best = candidates.iter().enumerate().min_by_key(|(i, c)| (rank(c), *i)).map(|(i, _)| i)?;
    let (fit, other_test) = rank(&candidates[best]);
    let sharp = candidates.iter().all(|c| target.sharp_against(c.range));
    if fit != Fit::Off {
        let mut out = blank(target, &candidates[best], policy, inputs);
        out.sharp = sharp;
        out.reason = match fit {
            Fit::Cut => Some(reason::CUT.into()),
            Fit::LastPlace => Some(reason::LAST_PLACE.into()),
            _ => None,
        };
        if other_test && let Some(stated) = policy.stated {
            out.reason = Some(format!("agrees with {}, not with the stated {}", candidates[best].short, stated.name()));
        }
        match policy.hold {
            // Agreement that a wide range allows anyway says nothing where the analysis may be another one.
            Some(hold) if !sharp => out.reason = Some(hold.into()),
            _ => out.verdict = Verdict::Tallies,
        }
        return Some(out);
    }
    let deciding = || candidates.iter().filter(|c| c.decides || !any_decides);
    let nearest = deciding().min_by(|a, b| target.distance(a.range).total_cmp(&target.distance(b.range)))?;
    let mut out = blank(target, nearest, policy, inputs);
    // Candidates on both sides of the printed figure have no common range that leaves it out: those on the nearest's side.
    let above = nearest.range.lo > target.range.hi;
    let beside = |c: &&Candidate| (c.range.lo > target.range.hi) == above;
    out.computed = deciding().filter(beside).map(|c| c.range).reduce(Range::hull);
    let size = candidates.iter().map(|c| target.distance(c.range)).fold(f64::INFINITY, f64::min);
    let shift = candidates.iter().map(|c| target.shift(c.range)).fold(f64::INFINITY, f64::min);
    let across_alpha = candidates.iter().all(|c| target.across(c.range, policy.alpha));
    out.distance = Some(Distance { size, across_alpha });
    if let Some(hold) = policy.hold {
        out.reason = Some(hold.into());
    } else if size < policy.least || target.is_p && shift < policy.least_shift {
        out.reason = Some(reason::CLOSE.into());
    } else {
        out.verdict = Verdict::Differs;
        out.sharp = true;
        out.slip = slips();
    }
    Some(out)
}

fn blank(target: &Target, candidate: &Candidate, policy: &Policy, inputs: Inputs) -> Recomputation {
    Recomputation {
        of: policy.of,
        method: candidate.method,
        ground: policy.ground,
        computed: Some(candidate.range),
        printed: Some(target.range),
        verdict: Verdict::Undecided,
        sharp: false,
        reason: None,
        working: candidate.working.to_string(),
        assumptions: candidate.assumptions.clone(),
        distance: None,
        slip: None,
        figure: target.figure,
        inputs,
    }
}

/// Lets stronger grounds speak first, and gives the verdict of the whole result.
///
/// A weaker ground that differs where a stronger one tallies for the same claim becomes undecided: a p that
/// agrees with its printed statistic or interval comes from an analysis that the summaries do not give.
pub(crate) fn settle(recomputations: &mut [Recomputation], has_p: bool) -> Verdict {
    let strongest_tally = recomputations
        .iter()
        .filter(|r| {
            r.verdict == Verdict::Tallies && matches!(r.of, Quantity::P | Quantity::Estimate | Quantity::Interval)
        })
        .filter(|r| r.ground <= Ground::IfOneMethod && r.method != &super::method::INSIDE)
        .map(|r| r.ground)
        .min();
    if let Some(ground) = strongest_tally {
        for r in recomputations.iter_mut() {
            let weaker = r.ground > ground || r.ground == Ground::GivenTheStatedTest;
            if r.verdict == Verdict::Differs && weaker && r.ground != Ground::ByDefinition {
                r.verdict = Verdict::Undecided;
                r.sharp = false;
                r.slip = None;
                r.reason = Some(reason::STRONGER.into());
            }
        }
    }
    // A test on the counts beside a Wald interval: its p agrees with the groups and need not agree with the interval.
    let by_groups = |r: &Recomputation| {
        r.of == Quantity::P
            && r.verdict == Verdict::Tallies
            && r.sharp
            && r.ground > Ground::ByDefinition
            && r.method != &super::method::INTERVAL_TO_P
            && r.method != &super::method::INTERVAL_AGAINST_P
    };
    if recomputations.iter().any(by_groups) {
        for r in recomputations.iter_mut() {
            if r.of == Quantity::P && r.verdict == Verdict::Differs && r.ground == Ground::IfOneMethod {
                r.verdict = Verdict::Undecided;
                r.sharp = false;
                r.slip = None;
                r.reason = Some(reason::OTHER_METHOD.into());
            }
        }
    }
    // An estimate that lies inside its interval says nothing of a p beside them.
    let counts = |r: &&Recomputation| !(has_p && r.method == &super::method::INSIDE);
    if recomputations.iter().any(|r| r.verdict == Verdict::Differs) {
        Verdict::Differs
    } else if recomputations.iter().filter(counts).any(|r| r.verdict == Verdict::Tallies) {
        Verdict::Tallies
    } else {
        Verdict::Undecided
    }
}

/// A difference of less than `relative` of the figure itself stays undecided.
pub(crate) fn soften(r: &mut Recomputation, relative: f64) {
    let (Some(c), Some(p)) = (r.computed, r.printed) else { return };
    let gap = (c.lo - p.hi).max(p.lo - c.hi);
    if r.verdict == Verdict::Differs && gap < relative * p.middle().abs() {
        r.verdict = Verdict::Undecided;
        r.sharp = false;
        r.slip = None;
        r.reason = Some(reason::CLOSE.into());
    }
}
