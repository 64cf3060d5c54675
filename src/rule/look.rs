//! Questions that several checks put to the facts.

use super::Facts;
use crate::manuscript::{BlockKind, MarkKind, SectionKind};
use crate::reading::{Claim, PValue, Relation, Role, Sides};
use crate::text::Span;

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

impl<'a> Facts<'a> {
    pub(super) fn quote(&self, span: Span) -> &'a str {
        self.manuscript.quote(span)
    }

    pub(super) fn in_table(&self, span: Span) -> bool {
        matches!(self.manuscript.block(span).kind, BlockKind::Table(_))
    }

    /// The significance levels stated, those of thresholds included; 0.05 where there are none.
    pub(super) fn alpha(&self) -> Alpha {
        // "P < 0.20 entered the model" is no significance level.
        const HIGHEST: f64 = 0.101;
        let thresholds = self.readings.planning.iter().filter(|p| {
            matches!(p.what, crate::reading::PlanningKind::Alpha | crate::reading::PlanningKind::Threshold)
        });
        let stated = self.context.alpha.iter().map(|a| a.value).chain(thresholds.filter_map(|p| p.value));
        let mut levels: Vec<f64> = stated.map(|p| p.value()).filter(|a| (1e-9..HIGHEST).contains(a)).collect();
        if levels.is_empty() {
            return Alpha { lowest: 0.05, highest: 0.05, stated: false };
        }
        // A one-sided 0.025 is the same demand as a two-sided 0.05.
        if self.context.sides.is_some_and(|s| s.value == Sides::One) {
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
        let part = self.part(span);
        self.readings.intervals.iter().any(|i| self.part(i.span) == part)
    }

    /// The sentence cites others: it stands outside the results and holds a reference to the literature.
    pub(super) fn cites_others(&self, span: Span, sentence: u32) -> bool {
        if self.reports_results(span) {
            return false;
        }
        let s = self.scan.sentences[sentence as usize];
        let tokens = &self.scan.tokens[s.first as usize..s.last as usize];
        let (Some(first), Some(last)) = (tokens.first(), tokens.last()) else { return false };
        // References stand behind the last word, too.
        let block = self.manuscript.block(span);
        block.marked(MarkKind::Reference, first.start, last.end + 8) || self.sentence(sentence).contains("et al")
    }

    /// The text of a sentence, in lower case.
    pub(super) fn sentence(&self, id: u32) -> String {
        let view = self.scan.view(self.manuscript, id);
        if view.is_empty() { String::new() } else { view.quote(0, view.len() - 1).to_lowercase() }
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
        let claims = self.readings.claims.iter().filter(|c| c.sentence == claim.sentence);
        let next = claims.clone().map(|c| c.span.start).filter(|&s| s >= claim.span.end).min();
        let alone = claims.filter(|c| !c.span.overlaps(claim.span)).count() == 0;
        let all = self.readings.p.iter().filter(|p| p.sentence == claim.sentence);
        let after = all.clone().filter(|p| p.span.start >= claim.span.start);
        let own: Vec<_> = after.filter(|p| next.is_none_or(|n| p.span.end <= n)).collect();
        if own.is_empty() && alone { all.collect() } else { own }
    }

    /// Any phrase of these anywhere in the manuscript (lower case).
    pub(super) fn mentions(&self, phrases: &[&str]) -> bool {
        self.manuscript.blocks.iter().any(|b| {
            let text = b.text.to_lowercase();
            phrases.iter().any(|p| text.contains(p))
        })
    }

    /// Another sentence of the same paragraph prints a p, an interval, an estimate or groups.
    pub(super) fn figures_in_block(&self, span: Span) -> bool {
        let r = self.readings;
        let mut spans = (r.p.iter().map(|x| x.span))
            .chain(r.intervals.iter().map(|x| x.span))
            .chain(r.estimates.iter().map(|x| x.span))
            .chain(r.groups.iter().map(|x| x.span))
            .chain(r.statistics.iter().map(|x| x.span));
        spans.any(|s| s.block == span.block)
    }
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
