//! Sample sizes: the number needed, the number aimed at, and what the calculation assumes.

use super::super::lexicon::{self, Classes};
use super::super::token::Style;
use super::words::*;
use super::{PlanningKind, Reader};
use crate::printed::Printed;

/// Words that say how many it takes.
const NEEDED: &[&str] = &[
    "required",
    "needed",
    "necessary",
    "sufficient",
    "require",
    "recruit",
    "enroll",
    "enrol",
    "need",
    "needs",
    "requires",
    "adequate",
];
/// Remarks on a size that was had, not planned.
const REMARKS: &[&str] = &["small", "smaller", "limited", "large", "larger", "modest", "low"];
const COMPUTED: &[&str] = &[
    "calculated",
    "estimated",
    "determined",
    "computed",
    "based",
    "chosen",
    "calculation",
    "calculations",
    "selected",
    "powered",
];
const ASSUMES: &[&str] = &["detect", "assuming", "assumption", "assumptions", "hypothesis", "difference"];
const AIMS: &[&str] = &[
    "aimed", "aim", "planned", "plan", "intended", "intend", "target", "goal", "aiming", "sought", "decided",
    "targeted",
];
const TAKES_IN: &[&str] = &[
    "recruit",
    "enrol",
    "enroll",
    "include",
    "randomise",
    "randomize",
    "recruiting",
    "enrolling",
    "enrollment",
    "enrolment",
    "recruitment",
    "of",
    "obtain",
];
const GIVES: &[&str] = &[
    "give",
    "gives",
    "gave",
    "provide",
    "provides",
    "provided",
    "providing",
    "giving",
    "yield",
    "yields",
    "have",
    "had",
    "has",
    "having",
    "allow",
    "allows",
    "achieve",
    "achieves",
    "ensure",
    "enable",
    "enables",
    "afford",
    "afforded",
    "result",
    "offer",
    "yielded",
    "detect",
];

impl Reader<'_, '_> {
    /// "a sample size of 320", "17 volunteers per group were needed to detect …".
    pub(super) fn sample_size(&mut self) {
        let v = self.view;
        let planning_words = || (0..v.len()).any(|i| v.any(i, CALCULATES));
        let mut without_number = None;
        for i in 0..v.len() {
            let size = v.any(i, &["sample"])
                && (v.any(i + 1, &["size", "sizes"]) || v.sign(i + 1, '-') && v.any(i + 2, &["size"]));
            if size {
                // A number close behind: "sample size of 320 subjects", "sample size was calculated to be 60".
                let number = (i + 2..(i + 14).min(v.len()))
                    .take_while(|&j| !v.signs(j, &[';', '.']))
                    .find(|&j| self.headcount(j));
                let number = number.filter(|&n| !(i..n).any(|j| v.any(j, REMARKS)));
                let Some(number) = number else {
                    let achieved =
                        (i + 2..(i + 6).min(v.len())).find(|&j| v.any(j, &["achieved", "reached", "obtained"]));
                    if let Some(last) = achieved {
                        let first = (i.saturating_sub(2)..i)
                            .find(|&j| v.any(j, &["our", "planned", "the", "required", "target"]))
                            .unwrap_or(i);
                        self.add(PlanningKind::SampleSize, first, last, None, None);
                        return;
                    }
                    without_number.get_or_insert(i);
                    continue;
                };
                let mut last = number;
                while last + 1 < v.len()
                    && last < number + 4
                    && v.tokens[last + 1].is_word()
                    && !v.any(last + 1, &["and", "to", "with", "was", "were", "in", "at", "would", "for", "as"])
                {
                    last += 1;
                }
                let first = if i > 0 && v.any(i - 1, &["a", "the", "total", "required"]) { i - 1 } else { i };
                let value = self.count(number);
                self.add(PlanningKind::SampleSize, first, last, value, None);
                return;
            }
        }
        // "N … were needed": the clause with its assumption.
        if self.planned_target() || !planning_words() || self.gives_power() {
            return;
        }
        for w in 0..v.len() {
            let needed = v.any(w, NEEDED)
                || v.any(w, &["randomised", "randomized", "included", "enrolled", "recruited", "studied", "allocated"])
                    && v.any(w.wrapping_sub(1), &["be"])
                    && (w.saturating_sub(4)..w)
                        .any(|j| v.any(j, &["need", "needed", "had", "will", "required", "needs"]));
            if !needed {
                continue;
            }
            let behind = (w.saturating_sub(16)..w).rev().find(|&j| self.headcount(j) && self.people_after(j));
            let ahead = (w + 1..(w + 9).min(v.len())).find(|&j| self.headcount(j) && self.people_after(j));
            let active = v.any(w, &["recruit", "enroll", "enrol", "require", "requires", "need", "needs"]);
            let Some(number) = (if active { ahead.or(behind) } else { behind.or(ahead) }) else { continue };
            let (mut first, mut last) = (number.min(w), number.max(w));
            if v.any(w, &["recruit", "enroll", "enrol", "require"]) && ahead.is_none() {
                continue;
            }
            if first > 1 && v.any(first - 1, &["least"]) && v.any(first - 2, &["at"]) {
                first -= 2;
            } else if first > 0 && v.any(first - 1, &["approximately", "about"]) {
                first -= 1;
            }
            // With its assumption: "to detect a 30 % difference between treatments".
            if v.any(last + 1, &["to"])
                && v.any(last + 2, &["detect", "show", "demonstrate", "find", "achieve", "provide", "obtain"])
            {
                last = (last + 2..(last + 14).min(v.len()))
                    .take_while(|&j| !v.signs(j, &[',', ';', '.', '(']) && !v.any(j, &["with", "at"]))
                    .last()
                    .unwrap_or(last);
            } else if number > w {
                while last + 1 < v.len()
                    && last < number + 6
                    && v.tokens[last + 1].is_word()
                    && !v.any(last + 1, &["and", "to", "with", "was", "were", "at"])
                {
                    last += 1;
                }
            }
            if let Some(assuming) = (first.saturating_sub(40)..first).find(|&j| v.any(j, &["assuming"])) {
                first = assuming;
            }
            self.add(PlanningKind::SampleSize, first, last, self.count(number), None);
            return;
        }
        // "The sample size was calculated to detect a difference of …": what it assumes, without its number.
        let Some(i) = without_number else { return };
        let said = (i + 2..(i + 8).min(v.len())).find(|&j| v.any(j, COMPUTED));
        if let Some(said) = said.filter(|&s| (s + 1..v.len()).any(|j| v.any(j, ASSUMES))) {
            let last = (said + 1..(said + 20).min(v.len()))
                .take_while(|&j| !v.signs(j, &[';', '.', ',', '(']) && !v.any(j, &["with", "and"]))
                .last()
                .unwrap_or(said);
            self.add(PlanningKind::SampleSize, i, last, None, None);
        }
    }

    /// "we aimed to recruit 120 keepers".
    fn planned_target(&mut self) -> bool {
        let v = self.view;
        for i in 0..v.len() {
            if !v.any(i, AIMS) {
                continue;
            }
            let verb = (i + 1..(i + 6).min(v.len())).find(|&j| v.any(j, TAKES_IN) || j == i + 1 && v.any(j, &["of"]));
            let number = verb.and_then(|w| {
                (w + 1..(w + 8).min(v.len()))
                    .take_while(|&j| !v.signs(j, &[';', ',', '(']))
                    .find(|&j| self.headcount(j) && self.people_after(j))
            });
            if let Some(number) = number {
                let people = (number + 1..(number + 6).min(v.len())).find(|&j| v.any(j, PEOPLE));
                let last = people.unwrap_or(number);
                self.add(PlanningKind::SampleSize, i, last, self.count(number), None);
                return true;
            }
        }
        false
    }

    /// "60 hives would give 80 % power to detect …", "with 30 dogs per arm, the study has 90 % power".
    fn gives_power(&mut self) -> bool {
        let v = self.view;
        for w in 1..v.len() {
            let gives =
                v.any(w, GIVES) && (w + 1..(w + 12).min(v.len())).any(|j| v.any(j, &["power", "detect", "detection"]));
            if !gives {
                continue;
            }
            let number = (w.saturating_sub(14)..w).rev().find(|&j| self.headcount(j) && self.people_after(j));
            let Some(number) = number else { continue };
            let last = (w + 1..(w + 30).min(v.len()))
                .take_while(|&j| !v.signs(j, &[',', ';', '.', '(']) && !v.any(j, &["with", "at", "assuming"]))
                .last()
                .unwrap_or(w);
            self.add(PlanningKind::SampleSize, number, last, self.count(number), None);
            return true;
        }
        false
    }

    /// A whole number that may count people, not a percent, year or measure.
    fn headcount(&self, j: usize) -> bool {
        let v = self.view;
        let Some(n) = v.number(j).and_then(Printed::count) else {
            return v.is(j, Classes::NUMBER_WORD) && lexicon::number_word(v.word(j)).is_some_and(|n| n > 5);
        };
        let span = v.sign(j + 1, '-') && v.any(j + 2, &["sided", "tailed", "week", "month", "day", "year"]);
        let measure = v.signs(j + 1, &['%', '/'])
            || v.is(j + 1, Classes::PERCENT.or(Classes::UNIT))
            || v.any(j + 1, MEASURES) && !(v.any(j + 1, &["per"]) && v.is(j + 2, Classes::GROUP));
        let before = j.wrapping_sub(1);
        let other = v.any(before, &["of"]) && v.any(j.wrapping_sub(2), &["power", "difference", "sd", "alpha"]);
        let year = (1990..2040).contains(&n) && !self.people_after(j)
            || (1900..2100).contains(&n) && v.any(before, &["in", "since", "until", "from"]);
        let plain = v.style(j) == Style::Plain && !v.signs(before, &['[', '±', '/', '<', '>']);
        (4..1_000_000).contains(&n) && plain && !(span || measure || other || year)
    }

    /// The count in digits or in one word.
    fn count(&self, j: usize) -> Option<Printed> {
        self.view.number(j).or_else(|| lexicon::number_word(self.view.word(j)).map(Printed::whole))
    }

    fn people_after(&self, j: usize) -> bool {
        let v = self.view;
        (j + 1..(j + 6).min(v.len())).any(|h| v.is(h, Classes::GROUP) || v.any(h, PEOPLE))
    }
}
