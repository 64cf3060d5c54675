//! Questions that several checks put to the facts.

use super::shift::{Shift, shifts};
use super::{Facts, wording};
use crate::context::Context;
use crate::manuscript::{BlockKind, Grid, Manuscript, MarkKind, SectionKind};
use crate::query::Verdict;
use crate::reading::{Claim, Group, PValue, PlanningKind, Readings, Relation, Role, Scan, Sides, within};
use crate::recompute::{Checked, Quantity};
use crate::result::ReportedResult;
use crate::text::Span;
use std::cell::RefCell;
use std::collections::{HashMap, HashSet};
use std::ops::Range;

/// Numerical slack of comparisons with alpha: printed decimals are not exact doubles.
const SLACK: f64 = 1e-12;

/// The significance levels of a manuscript. A p is set against the one that speaks for the authors.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Alpha {
    pub lowest: f64,
    pub highest: f64,
    /// Stated by the manuscript; otherwise 0.05 is assumed.
    pub stated: bool,
}

impl Alpha {
    /// Above every level that is in use. P equal to alpha is on neither side.
    pub fn below(self, p: &PValue) -> bool {
        let Some(value) = p.value else { return p.relation == Relation::NotSignificant };
        match p.relation {
            Relation::Equal => value.value() > self.highest + SLACK && value.rounded().lo >= self.highest - SLACK,
            Relation::Greater | Relation::AtLeast => value.value() >= self.highest - SLACK,
            Relation::NotSignificant => true,
            Relation::Less | Relation::AtMost => false,
        }
    }

    /// Below every level that is in use.
    pub fn above(self, p: &PValue) -> bool {
        let Some(value) = p.value else { return false };
        match p.relation {
            Relation::Equal => value.value() < self.lowest - SLACK && value.rounded().hi <= self.lowest + SLACK,
            Relation::Less => value.value() <= self.lowest + SLACK,
            Relation::AtMost => value.value() < self.lowest - SLACK,
            Relation::Greater | Relation::AtLeast | Relation::NotSignificant => false,
        }
    }

    pub fn words(self) -> String {
        match (self.stated, self.lowest == self.highest) {
            (false, _) => "0.05 (assumed)".to_owned(),
            (true, true) => self.lowest.to_string(),
            (true, false) => format!("{} or {}", self.lowest, self.highest),
        }
    }
}

/// Phrases in lower case.
type Phrases = &'static [&'static str];

/// The facts, and what checks look up in them again and again: made once, so that a check's time does not grow with the
/// square of the manuscript.
pub struct Look<'a> {
    pub manuscript: &'a Manuscript,
    pub scan: &'a Scan,
    pub readings: &'a Readings,
    pub context: &'a Context,
    pub results: &'a [ReportedResult],
    pub checked: &'a [Checked],
    pub alpha: Alpha,
    /// P columns that fit when they are moved by a row.
    pub(super) shifts: Vec<Shift>,
    shifted: HashSet<Span>,
    /// Readings of results, each with the result's number.
    members: Vec<(Span, usize)>,
    /// Where the claims, intervals and estimates stand, by place.
    claims: Vec<Span>,
    intervals: Vec<Span>,
    estimates: Vec<Span>,
    /// The parts of the manuscript in which an interval stands.
    with_interval: HashSet<u32>,
    settled: HashMap<(Quantity, u32), Settled>,
    /// Answers of [`Look::mentions`].
    mentioned: RefCell<Vec<(Phrases, bool)>>,
}

/// How many recomputations of one quantity in one block tally sharply, and how many differ.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub struct Settled {
    pub sharp: usize,
    pub differ: usize,
}

impl Settled {
    pub fn add(&mut self, verdict: Verdict, sharp: bool) {
        self.sharp += usize::from(verdict == Verdict::Tallies && sharp);
        self.differ += usize::from(verdict == Verdict::Differs);
    }
}

impl<'a> Look<'a> {
    pub fn new(facts: &Facts<'a>) -> Look<'a> {
        let &Facts { manuscript, scan, readings, context, results, checked } = facts;
        let sorted = |spans: &mut dyn Iterator<Item = Span>| {
            let mut spans: Vec<Span> = spans.collect();
            spans.sort_unstable();
            spans
        };
        let mut settled: HashMap<(Quantity, u32), Settled> = HashMap::new();
        for r in checked.iter().flat_map(|c| &c.recomputations) {
            settled.entry((r.of, r.figure.block)).or_default().add(r.verdict, r.sharp);
        }
        let mut look = Look {
            manuscript,
            scan,
            readings,
            context,
            results,
            checked,
            alpha: alpha(facts),
            shifts: shifts(facts),
            shifted: HashSet::new(),
            members: members(facts),
            claims: sorted(&mut readings.claims.iter().map(|c| c.span)),
            intervals: sorted(&mut readings.intervals.iter().map(|i| i.span)),
            estimates: sorted(&mut readings.estimates.iter().map(|e| e.span)),
            with_interval: HashSet::new(),
            settled,
            mentioned: RefCell::default(),
        };
        let in_shift = |s: &Shift| s.moved.iter().map(|m| m.p).chain(s.end).collect::<Vec<_>>();
        look.shifted = look.shifts.iter().flat_map(in_shift).collect();
        look.with_interval = readings.intervals.iter().map(|i| look.part(i.span)).collect();
        look
    }

    /// A quote for people, on one line, with raised figures raised: `14.6⁵` is 14.6 with a note, not 14.65.
    pub(super) fn shown(&self, span: Span) -> String {
        let block = self.manuscript.block(span);
        let mut text = String::new();
        let mut at = span.start;
        for mark in block.marks_over(span.start, span.end).filter(|m| m.kind == MarkKind::Superscript) {
            let (from, to) = (mark.start.clamp(at, span.end), mark.end.clamp(at, span.end));
            text.push_str(&block.text[at as usize..from as usize]);
            text.push_str(&wording::raised(&block.text[from as usize..to as usize]));
            at = to;
        }
        text.push_str(&block.text[at as usize..span.end as usize]);
        wording::one_line(&text)
    }

    pub(super) fn quote(&self, span: Span) -> &'a str {
        self.manuscript.quote(span)
    }

    pub(super) fn in_table(&self, span: Span) -> bool {
        self.manuscript.block(span).is_table()
    }

    /// The tables in which groups were read, each with the number of its block and the groups.
    pub(super) fn groups_of_tables(&self) -> impl Iterator<Item = (usize, &'a Grid, &'a [Group])> {
        let blocks = self.readings.groups.chunk_by(|a, b| a.span.block == b.span.block);
        blocks.filter_map(|here| {
            let number = here[0].span.block as usize;
            match &self.manuscript.blocks[number].kind {
                BlockKind::Table(grid) => Some((number, grid, here)),
                _ => None,
            }
        })
    }

    /// The numbers of the results that a reading belongs to, in order.
    pub(super) fn results_with(&self, reading: Span) -> impl Iterator<Item = usize> {
        let first = self.members.partition_point(|m| m.0 < reading);
        self.members[first..].iter().take_while(move |m| m.0 == reading).map(|m| m.1)
    }

    /// How the recomputations of a quantity in one block came out.
    pub(super) fn settled(&self, of: Quantity, block: u32) -> Settled {
        self.settled.get(&(of, block)).copied().unwrap_or_default()
    }

    /// Whether an estimate or interval stands wholly between two places of one block.
    pub(super) fn stands_between(&self, first: Span, second: Span) -> bool {
        [&self.estimates, &self.intervals].into_iter().any(|spans| {
            let from = spans.partition_point(|s| (s.block, s.start) < (first.block, first.end));
            let mut near = spans[from..].iter().take_while(|s| (s.block, s.start) <= (first.block, second.start));
            near.any(|s| s.end <= second.start)
        })
    }

    /// The p-value stands in a column that fits when it is moved: asked about with the column.
    pub(super) fn is_shifted(&self, p: Span) -> bool {
        self.shifted.contains(&p)
    }

    /// The titles of the sections that a place stands in, from the top.
    pub(super) fn titles(&self, span: Span) -> Vec<String> {
        let mut titles = Vec::new();
        let mut at = Some(self.manuscript.block(span).section);
        while let Some(section) = at.map(|i| &self.manuscript.sections[i as usize]) {
            if !section.title.is_empty() {
                titles.push(section.title.clone());
            }
            at = section.parent;
        }
        titles.reverse();
        titles
    }

    /// The widest section of one kind that a place stands in: "Results", not its third subsection.
    pub(super) fn part(&self, span: Span) -> u32 {
        let sections = &self.manuscript.sections;
        let mut at = self.manuscript.block(span).section;
        while let Some(parent) = sections[at as usize].parent {
            let (own, above) = (&sections[at as usize], &sections[parent as usize]);
            let same = own.kind == above.kind && own.kind != SectionKind::Unknown;
            if !(same || own.in_abstract && above.in_abstract) {
                break;
            }
            at = parent;
        }
        at
    }

    /// Whether the section was recognised as one that reports results.
    pub(super) fn reports_results(&self, span: Span) -> bool {
        let section = self.manuscript.section(span);
        section.in_abstract || matches!(section.kind, SectionKind::Results | SectionKind::Abstract)
    }

    /// In the title, the abstract or the conclusions: what readers take away.
    pub(super) fn drives_message(&self, span: Span) -> bool {
        let section = self.manuscript.section(span);
        section.in_abstract
            || matches!(section.kind, SectionKind::Title | SectionKind::Abstract)
            || section.title.to_lowercase().contains("conclusion")
    }

    /// A confidence interval in the same part of the manuscript's message.
    pub(super) fn interval_in_part(&self, span: Span) -> bool {
        self.with_interval.contains(&self.part(span))
    }

    /// The paragraph or one beside it points to a table or a figure, where the numbers may stand.
    pub(super) fn points_to_table(&self, span: Span) -> bool {
        let blocks = &self.manuscript.blocks;
        let at = span.block as usize;
        let (from, to) = (at.saturating_sub(2), (at + 2).min(blocks.len()));
        blocks[from..to].iter().any(|b| {
            b.section == blocks[at].section && ["Table", "table ", "Fig", "figure "].iter().any(|w| b.text.contains(w))
        })
    }

    /// The sentence of a claim cites others: it stands outside the results and holds a reference to the literature.
    pub(super) fn cites_others(&self, claim: &Claim) -> bool {
        if self.reports_results(claim.span) {
            return false;
        }
        let around = self.around(claim);
        let block = self.manuscript.block(claim.span);
        // References stand behind the last word, too; and what follows a citation goes on about it.
        const BEFORE: usize = 250;
        let from = block.text.floor_char_boundary(around.start.saturating_sub(BEFORE));
        block.marked(MarkKind::Reference, from as u32, around.end as u32 + 8)
            || block.text[from..around.end].contains("et al")
    }

    /// The text of a claim's sentence, in lower case; of an endless sentence, what stands near the claim.
    pub(super) fn sentence(&self, claim: &Claim) -> String {
        self.manuscript.block(claim.span).text[self.around(claim)].to_lowercase()
    }

    /// The bytes of a claim's sentence, or of what stands near the claim in it.
    fn around(&self, claim: &Claim) -> Range<usize> {
        // No real sentence is as long; text without full stops is, and would be read again for each of its claims.
        const NEAR: usize = 4000;
        let s = self.scan.sentences[claim.sentence as usize];
        let tokens = &self.scan.tokens[s.first as usize..s.last as usize];
        let (Some(first), Some(last)) = (tokens.first(), tokens.last()) else { return 0..0 };
        let text = &self.manuscript.block(claim.span).text;
        let start = text.floor_char_boundary(claim.span.range().start.saturating_sub(NEAR));
        let end = text.floor_char_boundary(claim.span.range().end + NEAR);
        start.max(first.start as usize)..end.min(last.end as usize)
    }

    /// Lower-case text between two places of one block; empty when they touch or cross.
    pub(super) fn between(&self, first: Span, second: Span) -> String {
        let text = &self.manuscript.block(first).text;
        let (from, to) = (first.end as usize, second.start as usize);
        if first.block == second.block { text.get(from..to).unwrap_or("").to_lowercase() } else { String::new() }
    }

    /// The p-values that a claim speaks of: those after it and before the next claim of its sentence; when
    /// the sentence makes one claim only, all of them.
    pub(super) fn p_of(&self, claim: &Claim) -> Vec<&'a PValue> {
        let own = claim.sentence..claim.sentence + 1;
        let from = self.claims.partition_point(|s| (s.block, s.start) < (claim.span.block, claim.span.end));
        let s = self.scan.sentences[claim.sentence as usize];
        let end = self.scan.tokens[s.last as usize - 1].end;
        let next = self.claims.get(from).filter(|s| s.block == claim.span.block && s.start < end).map(|s| s.start);
        let mut claims = within(&self.readings.claims, |c| c.sentence, own.clone()).iter();
        let all = within(&self.readings.p, |p| p.sentence, own).iter();
        let after = all.clone().filter(|p| p.span.start >= claim.span.start);
        let own: Vec<_> = after.filter(|p| next.is_none_or(|n| p.span.end <= n)).collect();
        if own.is_empty() && claims.all(|c| c.span.overlaps(claim.span)) { all.collect() } else { own }
    }

    /// Any phrase of these anywhere in the manuscript (lower case).
    pub(super) fn mentions(&self, phrases: Phrases) -> bool {
        let known = self.mentioned.borrow().iter().find(|m| m.0 == phrases).map(|m| m.1);
        known.unwrap_or_else(|| {
            let answer = self.manuscript.blocks.iter().any(|b| {
                let text = b.text.to_lowercase();
                phrases.iter().any(|p| text.contains(p))
            });
            self.mentioned.borrow_mut().push((phrases, answer));
            answer
        })
    }

    /// Another sentence of the same paragraph prints a p, an interval, an estimate or groups.
    pub(super) fn figures_in_block(&self, span: Span) -> bool {
        let (r, own) = (self.readings, self.scan.of_block(span.block as usize));
        !within(&r.p, |x| x.sentence, own.clone()).is_empty()
            || !within(&r.intervals, |x| x.sentence, own.clone()).is_empty()
            || !within(&r.estimates, |x| x.sentence, own.clone()).is_empty()
            || !within(&r.groups, |x| x.sentence, own.clone()).is_empty()
            || !within(&r.statistics, |x| x.sentence, own).is_empty()
    }
}

/// The significance levels stated, those of thresholds included; 0.05 where there are none.
fn alpha(facts: &Facts) -> Alpha {
    // "P < 0.20 entered the model" is no significance level.
    const HIGHEST: f64 = 0.101;
    let thresholds =
        facts.readings.planning.iter().filter(|p| matches!(p.what, PlanningKind::Alpha | PlanningKind::Threshold));
    let stated = facts.context.alpha.iter().map(|a| a.value).chain(thresholds.filter_map(|p| p.value));
    let mut levels: Vec<f64> = stated.map(|p| p.value()).filter(|a| (1e-9..HIGHEST).contains(a)).collect();
    if levels.is_empty() {
        return Alpha { lowest: 0.05, highest: 0.05, stated: false };
    }
    // A one-sided 0.025 is the same demand as a two-sided 0.05.
    if facts.context.sides.is_some_and(|s| s.value == Sides::One) {
        levels.push(levels.iter().fold(0.0, |a: f64, &b| a.max(b)).max(0.05));
    }
    // Several levels belong to several analyses, and the usual one may go without saying.
    if levels.iter().any(|&a| a != levels[0]) {
        levels.push(0.05);
    }
    let lowest = levels.iter().copied().fold(f64::INFINITY, f64::min);
    let highest = levels.iter().copied().fold(0.0, f64::max);
    Alpha { lowest, highest, stated: true }
}

/// Every reading of every result, by place.
fn members(facts: &Facts) -> Vec<(Span, usize)> {
    let r = facts.readings;
    let mut members = Vec::with_capacity(2 * facts.results.len());
    for (number, result) in facts.results.iter().enumerate() {
        let mut add = |span: Span| members.push((span, number));
        result.p.into_iter().for_each(|i| add(r.p[i].span));
        result.interval.into_iter().for_each(|i| add(r.intervals[i].span));
        result.estimate.into_iter().for_each(|i| add(r.estimates[i].span));
        result.statistic.into_iter().for_each(|i| add(r.statistics[i].span));
        result.groups.iter().for_each(|&i| add(r.groups[i].span));
    }
    members.sort_unstable();
    members.dedup();
    members
}

/// Whether a p stands for a comparison on which the paper's results hang.
pub fn is_effect(p: &PValue) -> bool {
    p.role == Role::Effect
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::printed::Printed;

    fn p(relation: Relation, value: &str) -> PValue {
        PValue {
            span: Span::new(0, 0, 1),
            sentence: 0,
            relation,
            value: Printed::parse(value),
            role: Role::Effect,
            corrected: false,
            shared: false,
        }
    }

    #[test]
    fn p_equal_to_alpha_is_on_neither_side() {
        let alpha = Alpha { lowest: 0.05, highest: 0.05, stated: false };
        for value in ["0.05", "0.050"] {
            let p = p(Relation::Equal, value);
            assert!(!alpha.below(&p) && !alpha.above(&p));
        }
        assert!(alpha.below(&p(Relation::Equal, "0.06")) && alpha.above(&p(Relation::Equal, "0.04")));
        assert!(alpha.below(&p(Relation::Greater, "0.05")) && alpha.above(&p(Relation::Less, "0.05")));
        assert!(!alpha.above(&p(Relation::Less, "0.1")) && !alpha.below(&p(Relation::Less, "0.1")));
    }

    #[test]
    fn with_two_levels_a_p_between_them_is_on_neither_side() {
        let alpha = Alpha { lowest: 0.01, highest: 0.05, stated: true };
        let p = p(Relation::Equal, "0.03");
        assert!(!alpha.below(&p) && !alpha.above(&p));
    }
}
