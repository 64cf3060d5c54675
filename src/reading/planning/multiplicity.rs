//! Corrections for multiple testing, by their names and by their purpose.

use super::super::claim_words::MULTIPLE;
use super::words::*;
use super::{PlanningKind, Reader};

impl Reader<'_, '_> {
    /// "Bonferroni correction", "Tukey post hoc tests", "adjusted for multiple comparisons".
    pub(super) fn multiplicity(&mut self) {
        let v = self.view;
        let mut i = 0;
        while i < v.len() {
            if !v.is(i, MULTIPLE) {
                i += 1;
                continue;
            }
            let multiple = v.any(i, &["multiple", "multiplicity"]);
            let discovery = v.any(i, &["discovery"]);
            let capitals = |i: usize| v.word(i).bytes().all(|b| b.is_ascii_uppercase());
            let mut first = i;
            let mut last = i;
            if multiple {
                let about = v.any(i, &["multiplicity"])
                    || v.any(i + 1, &["comparisons", "comparison", "testing", "tests", "hypotheses", "hypothesis"]);
                let adjust = (i.saturating_sub(7)..i).find(|&j| v.any(j, ADJUSTS));
                let after =
                    (i + 1..(i + 5).min(v.len())).find(|&j| v.any(j, ADJUSTS) || v.any(j, &["procedure", "test"]));
                if !about || adjust.is_none() && after.is_none() {
                    i += 1;
                    continue;
                }
                first = adjust.unwrap_or(i);
                last = after.unwrap_or(i).max(if v.any(i, &["multiplicity"]) { i } else { i + 1 });
            } else if discovery {
                if !(v.any(i.wrapping_sub(1), &["false"]) && v.any(i + 1, &["rate", "rates"])) {
                    i += 1;
                    continue;
                }
                first = i - 1;
                last = i + 1;
            } else if v.any(i, &["hierarchical", "closed", "sequential", "fixed"]) {
                // An order of tests, not a model or a bottle.
                let test = i + 1 + usize::from(v.sign(i + 1, '-'));
                let procedure = v.any(
                    test + 1,
                    &["procedure", "strategy", "sequence", "approach", "procedures", "principle", "scheme"],
                );
                let named = v.any(test, &["testing", "gatekeeping"]);
                if !(named || procedure && v.any(test, &["test", "tests", "sequence"])) {
                    i += 1;
                    continue;
                }
                last = test + usize::from(procedure);
            } else if v.any(i, &["lsd"])
                && capitals(i)
                && (0..v.len()).any(|j| v.any(j, &["anova", "post", "means", "comparisons", "difference"]))
            {
                // "separated by LSD".
            } else if v.any(i, &["fdr", "hsd", "lsd"]) && !capitals(i)
                || v.any(i, &["newman", "multiple", "dunn", "duncan", "holm", "hommel", "dunn's", "lsd"])
                    && !(i + 1..i + 7).any(|j| v.any(j, TEST_WORDS) || v.is(j, MULTIPLE))
            {
                i += 1;
                continue;
            } else {
                while last + 1 < v.len()
                    && last < i + 8
                    && (v.sign(last + 1, '-')
                        || v.is(last + 1, MULTIPLE)
                        || v.any(last + 1, TEST_WORDS)
                        || v.any(last + 1, CORRECTION_LINKS)
                        || v.sign(last + 1, '\''))
                {
                    last += 1;
                }
                while last > i && (v.signs(last, &['-', '\'']) || v.any(last, &["for", "and"])) {
                    last -= 1;
                }
                // A test named alone in a bracket after a result is its test, and still the correction.
            }
            self.add(PlanningKind::Multiplicity, first, last, None, None);
            i = last + 1;
        }
    }

    /// "Fisher's least significant difference".
    pub(super) fn least_significant(&mut self) {
        let v = self.view;
        for i in 0..v.len() {
            if v.any(i, &["least"])
                && v.any(i + 1, &["significant", "significance"])
                && v.any(i + 2, &["difference", "differences"])
                && !self.out.iter().rev().take(4).any(|o| {
                    o.sentence == v.id && o.what == PlanningKind::Multiplicity && o.span.end >= v.span(i, i + 2).start
                })
            {
                self.add(PlanningKind::Multiplicity, i, i + 2, None, None);
            }
        }
    }
}
