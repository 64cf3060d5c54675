//! The closing account: what was read, what could be checked, and why the rest could not be.

use std::collections::BTreeMap;

use super::{Audited, words};
use crate::query::Verdict;
use crate::recompute::{Checked, Quantity, Recomputation};
use crate::text::Span;

/// What silence means for one manuscript.
#[derive(Clone, Debug, Default, PartialEq, Eq)]
pub struct Account {
    /// p-values of results; thresholds and legends are not counted.
    pub read: usize,
    /// Those that were recomputed, or from which another printed figure was.
    pub checked: usize,
    /// Those that agree with every figure they were set against.
    pub tallies: usize,
    /// Those of them that a tenfold change would have shown up.
    pub sharp: usize,
    /// Those that differ and that a query asks about.
    pub queried: usize,
    /// Why the others could not be checked, with how many.
    pub not_checked: BTreeMap<String, usize>,
    /// Other figures by kind: how many were recomputed, and how many of these tally.
    pub others: BTreeMap<&'static str, (usize, usize)>,
}

/// What is known of one p-value from all results that it belongs to.
#[derive(Clone, Default)]
struct Standing<'a> {
    results: Vec<usize>,
    tallies: bool,
    differs: bool,
    sharp: bool,
    reason: Option<&'a str>,
}

const NOTHING_BESIDE_IT: &str = "nothing was printed beside it to recompute it from";

impl Account {
    /// Takes stock of one manuscript.
    pub fn of(audited: &Audited) -> Account {
        let mut standings = vec![Standing::default(); audited.readings.p.len()];
        let mut account = Account { read: standings.len(), ..Account::default() };
        for (result, checked) in audited.results.iter().zip(&audited.checked) {
            for r in checked.recomputations.iter().filter(|r| r.of != Quantity::P && decided(r)) {
                let (done, tally) = account.others.entry(words::quantity(r.of)).or_default();
                *done += 1;
                *tally += usize::from(r.verdict == Verdict::Tallies);
            }
            if let Some(p) = result.p {
                standings[p].add(checked, audited.readings.p[p].span);
            }
        }
        let mut asked = vec![false; audited.results.len()];
        for &result in audited.queries.iter().flat_map(|q| &q.results) {
            asked[result] = true;
        }
        for s in standings {
            if s.differs || s.tallies {
                account.checked += 1;
                account.tallies += usize::from(!s.differs);
                account.sharp += usize::from(!s.differs && s.sharp);
                account.queried += usize::from(s.differs && s.results.iter().any(|&r| asked[r]));
            } else {
                *account.not_checked.entry(s.reason.unwrap_or(NOTHING_BESIDE_IT).to_owned()).or_default() += 1;
            }
        }
        account
    }
}

fn decided(r: &Recomputation) -> bool {
    r.verdict != Verdict::Undecided
}

impl<'a> Standing<'a> {
    fn add(&mut self, checked: &'a Checked, p: Span) {
        self.results.push(checked.result);
        let of_this_p = |r: &&Recomputation| r.figure.overlaps(p) || r.inputs.iter().any(|(i, _)| i.overlaps(p));
        let (mut tallies, mut differs, mut undecided) = (false, false, None);
        for r in checked.recomputations.iter().filter(of_this_p) {
            tallies |= r.verdict == Verdict::Tallies;
            differs |= r.verdict == Verdict::Differs;
            self.sharp |= r.verdict == Verdict::Tallies && r.sharp;
            undecided = undecided.or(r.reason.as_deref().filter(|_| !decided(r)));
        }
        // Of several methods that compete for one p, the verdict of the result says which decides.
        let differs = differs && checked.verdict == Verdict::Differs;
        self.differs |= differs;
        self.tallies |= tallies && !differs && checked.verdict != Verdict::Undecided;
        self.reason = self.reason.or(checked.reason).or(undecided);
    }
}
