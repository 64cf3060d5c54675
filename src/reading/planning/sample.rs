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
const REMARKS: &[&str] = &[
    "small",
    "smaller",
    "limited",
    "large",
    "larger",
    "modest",
    "low",
    "convenience",
    "random",
    "representative",
    "purposive",
    "consecutive",
    "unequal",
];
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
const ASSUMES: &[&str] = &["detect", "assuming", "assumption", "assumptions", "difference"];
const AIMS: &[&str] = &[
    "aimed", "aim", "planned", "plan", "intended", "intend", "target", "goal", "aiming", "sought", "decided",
    "targeted", "will",
];
/// A sample "of 40" is planned where one of these stands.
const PLANNED: &[&str] = &[
    "needed",
    "required",
    "targeted",
    "planned",
    "will",
    "would",
    "sufficient",
    "necessary",
    "estimated",
    "calculated",
    "detect",
    "power",
    "calculation",
    "aimed",
];
const TAKEN_IN: &[&str] =
    &["randomised", "randomized", "included", "enrolled", "recruited", "studied", "allocated", "enlisted"];
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
            let sample = v.any(i, &["sample", "samples"]);
            let size = sample && (v.any(i + 1, &["size", "sizes"]) || v.sign(i + 1, '-') && v.any(i + 2, &["size"]))
                || sample
                    && v.any(i + 1, &["of"])
                    && self.counts_people(i + 2)
                    && (0..v.len()).any(|j| v.any(j, PLANNED));
            // "a small sample size (19 lambs)", "a convenience sample of 40": what was had.
            if size && !(i.saturating_sub(2)..i).any(|j| v.any(j, REMARKS)) {
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
        // Without a number only the size itself could be spoken of.
        if !(0..v.len()).any(|i| v.number(i).is_some() || v.is(i, Classes::NUMBER_WORD)) {
            return;
        }
        // "N … were needed": the clause with its assumption.
        if self.planned_target() || planning_words() && self.gives_power() {
            return;
        }
        let planning_words = planning_words();
        for w in 0..v.len() {
            let be = v.any(w.wrapping_sub(1), &["be", "is", "are", "was", "were"]);
            let taken_in = v.any(w, TAKEN_IN) && be;
            let needed = v.any(w, NEEDED)
                || taken_in
                    && v.any(w - 1, &["be"])
                    && (w.saturating_sub(4)..w)
                        .any(|j| v.any(j, &["need", "needed", "had", "have", "will", "required", "needs", "should"]))
                // "assuming 10 % in A …, with 80 % power, 60 per group were enrolled"
                || taken_in && (0..v.len()).any(|j| v.any(j, &["power"])) && (0..v.len()).any(|j| v.any(j, ASSUMES) || v.any(j, &["based"]));
            // "200 keepers will be needed" says it without the words of a calculation.
            let plain = be && (v.any(w, &["required", "needed", "necessary", "sufficient"]) || v.any(w - 1, &["be"]));
            if !needed || !(planning_words || plain) {
                continue;
            }
            let behind = (w.saturating_sub(16)..w)
                .rev()
                .find(|&j| self.headcount(j) && self.people_after(j))
                .map(|j| self.outside(j));
            let ahead = (w + 1..(w + 9).min(v.len())).find(|&j| self.headcount(j) && self.people_after(j));
            let active = v.any(w, &["recruit", "enroll", "enrol", "require", "requires", "need", "needs"])
                || !be && v.any(w, &["needed", "required"]) && (w + 1..w + 4).any(|j| self.headcount(j));
            let Some(number) = (if active { ahead.or(behind) } else { behind.or(ahead) }) else { continue };
            let (mut first, mut last) = (number.min(w), number.max(w));
            if v.any(w, &["recruit", "enroll", "enrol", "require"]) && ahead.is_none() {
                continue;
            }
            // Without the words of a calculation: not "nine forms, and then were required", "all were required to walk".
            let loose = number > w
                || (number..w).any(|j| v.signs(j, &[',', ';', ':']))
                || v.any(w + 1, &["to"]) && !v.any(w + 2, &["detect", "show", "demonstrate", "achieve", "reach"]);
            if !planning_words && loose {
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
            // "calculations were performed with a program … to detect a change of 30 %": the assumption alone.
            let detect = (said + 5..v.len()).find(|&j| v.any(j, &["detect"]) && v.any(j - 1, &["to"]));
            let near = (said + 1..(said + 5).min(v.len())).any(|j| v.any(j, ASSUMES));
            let (i, said) = match detect {
                Some(at) if !near => (at - 1, at),
                _ => (i, said),
            };
            let last = (said + 1..(said + 20).min(v.len()))
                .take_while(|&j| !v.signs(j, &[';', '.', ',', '(']) && !v.any(j, &["with", "and"]))
                .last()
                .unwrap_or(said);
            // An assumption without a figure assumes nothing that could be checked.
            if (i..=last).any(|j| v.number(j).is_some()) {
                self.add(PlanningKind::SampleSize, i, last, None, None);
            }
        }
    }

    /// "we aimed to recruit 120 keepers".
    fn planned_target(&mut self) -> bool {
        let v = self.view;
        for i in 0..v.len() {
            if !v.any(i, AIMS) {
                continue;
            }
            // "will include": a protocol's plan, where the number follows close.
            let will = v.any(i, &["will"]);
            let verb = (i + 1..(i + if will { 2 } else { 9 }).min(v.len()))
                .find(|&j| v.any(j, TAKES_IN) || v.any(i, &["goal", "target"]) && v.any(j, &["be", "was", "is"]));
            let number = verb
                .filter(|&w| !v.any(w, &["of"]) || v.any(i, &["goal", "target"]) || w == i + 1 && !will)
                .and_then(|w| {
                    (w + 1..(w + if will { 5 } else { 8 }).min(v.len()))
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
            // "with 60 per group there was an 80 % chance to detect"
            let there = v.any(w, &["there"]) && v.any(w + 1, &["was", "is", "will", "would", "were"]);
            let gives = (there || v.any(w, GIVES))
                && (w + 1..(w + 12).min(v.len())).any(|j| v.any(j, &["power", "detect", "detection"]));
            if !gives {
                continue;
            }
            let reach = if there { 22 } else { 14 };
            let number = (w.saturating_sub(reach)..w).rev().find(|&j| self.headcount(j) && self.people_after(j));
            let Some(number) = number.map(|j| self.outside(j)) else {
                // "there was 80 % power to show it with 214 hives in A and 107 in B"
                let ahead = (w + 1..(w + 20).min(v.len()))
                    .find(|&j| v.any(j, &["with"]) && self.headcount(j + 1) && self.people_after(j + 1));
                let Some(with) = ahead else { continue };
                self.add(PlanningKind::SampleSize, w, (with + 2).min(v.len() - 1), self.count(with + 1), None);
                return true;
            };
            let last = (w + 1..(w + 30).min(v.len()))
                .take_while(|&j| !v.signs(j, &[',', ';', '.', '(']) && !v.any(j, &["with", "at", "assuming"]))
                .last()
                .unwrap_or(w);
            self.add(PlanningKind::SampleSize, number, last, self.count(number), None);
            return true;
        }
        false
    }

    /// The number that one in a bracket explains: 80 in "80 hives (40 per group)".
    fn outside(&self, j: usize) -> usize {
        let v = self.view;
        let open = (j.saturating_sub(4)..j).rev().find(|&h| v.signs(h, &['(', ')']));
        let Some(open) = open.filter(|&h| v.sign(h, '(')) else { return j };
        (open.saturating_sub(4)..open).rev().find(|&h| self.headcount(h)).unwrap_or(j)
    }

    /// A number of people at `i` or a word or two later: "of n = 40", "of at least 40 hives".
    fn counts_people(&self, i: usize) -> bool {
        (i..i + 4).any(|j| self.headcount(j) && self.people_after(j))
    }

    /// A whole number that may count people, not a percent, year or measure.
    fn headcount(&self, j: usize) -> bool {
        let v = self.view;
        let ordinal = !v.spaced(j + 1) && v.any(j + 1, &["th", "st", "nd", "rd"])
            || v.any(j.wrapping_sub(1), &["at", "first"]) && !v.any(j.wrapping_sub(2), &["size", "sizes"]);
        if ordinal {
            return false;
        }
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
        // "n = 64"
        v.sign(j.wrapping_sub(1), '=') && v.any(j.wrapping_sub(2), &["n"])
            || (j + 1..(j + 6).min(v.len())).any(|h| v.is(h, Classes::GROUP) || v.any(h, PEOPLE))
    }
}
