//! What the figures of a row mean, as labels, headers, the caption and the notes say it.

use super::super::SpreadKind;
use super::super::group::Declared;
use super::super::lexicon::Classes;
use super::super::sentence::SentenceView;

/// What one text says of figures.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub(super) struct Meaning {
    pub mean: bool,
    pub median: bool,
    /// SD or SE beside a mean; `Unstated` where both are named and it is not said which figure has which.
    pub spread: Option<SpreadKind>,
    /// IQR or range.
    pub quantiles: Option<SpreadKind>,
    /// A confidence interval of the mean.
    pub ci: bool,
    /// `n (%)`, `n/N (%)`
    pub count: bool,
    /// `% (n)`
    pub percent_first: bool,
    /// `n/N`
    pub fraction: bool,
    /// A percent sign without a count.
    pub percent: bool,
    /// "change", Δ
    pub change: bool,
    /// "reduction", "gain", "difference": a change or a level, as the case may be.
    pub shift: bool,
    /// "n", "no.", "number"
    pub number: bool,
    /// `(n)` at its end: bare figures are counts.
    pub bare_count: bool,
    /// `(%)`: what stands in brackets is a percentage, or the unit of what stands alone.
    pub bracket_percent: bool,
    /// A rate of events, often per person-time.
    pub rate: bool,
    /// A measure that compares groups: "odds ratio", "difference".
    pub measure: bool,
    /// A geometric mean: its spread is no SD.
    pub geometric: bool,
}

const SHIFTS: &[&str] =
    &["reduction", "reductions", "increase", "decrease", "gain", "improvement", "difference", "differences"];

impl Meaning {
    /// What a text says.
    pub fn of(view: &SentenceView) -> Meaning {
        let mut meaning = Meaning::default();
        meaning.add(view);
        meaning
    }

    /// Adds what a text says.
    pub fn add(&mut self, view: &SentenceView) {
        let (mut sd, mut se) = (false, false);
        for i in 0..view.len() {
            // "means" as a verb and `m` for metres say nothing.
            self.mean |= view.any(i, &["mean", "means", "average"]);
            self.median |= view.is(i, Classes::MEDIAN);
            self.geometric |= view.any(i, &["geometric"]);
            sd |= view.is(i, Classes::SD) || view.any(i, &["s"]) && view.sign(i + 1, '.') && view.any(i + 2, &["d"]);
            // Selenium is no standard error.
            se |= matches!(view.word(i), "SE" | "SEM" | "s.e" | "sem" | "SEs")
                || view.any(i, &["standard"]) && view.any(i + 1, &["error", "errors"]);
            if view.is(i, Classes::IQR) || view.any(i, &["25th", "percentile", "percentiles", "p25", "q1"]) {
                self.quantiles = Some(SpreadKind::Iqr);
            } else if view.any(i, &["range", "ranges"]) && self.quantiles.is_none() {
                self.quantiles = Some(SpreadKind::Range);
            }
            self.ci |= view.any(i, &["ci"]) || view.is(i, Classes::CONFIDENCE);
            self.change |= view.any(i, &["change", "changes", "delta"])
                || view.word(i).starts_with(['Δ', '∆'])
                || view.signs(i, &['Δ', '∆']);
            self.shift |= view.any(i, SHIFTS)
                || view.any(i, &["loss"]) && !(i > 0 && view.any(i - 1, &["blood", "hearing", "hair"]));
            let number = view.is(i, Classes::N) || view.any(i, &["no", "number", "numbers", "num", "frequency"]);
            self.number |= number;
            let enclosed = |i: usize| i > 0 && view.signs(i - 1, &['(', '[']) && view.signs(i + 1, &[')', ']']);
            self.bare_count |=
                view.is(i, Classes::N) && (enclosed(i) || i > 0 && view.sign(i - 1, ',') && i + 1 == view.len());
            self.bracket_percent |= (view.sign(i, '%') || view.is(i, Classes::PERCENT))
                && enclosed(i)
                && !(i > 1
                    && (view.is(i - 2, Classes::SD) || view.any(i - 2, &["mean", "median", "change", "reduction"])));
            self.rate |= view.any(i, &["rate", "rates", "incidence", "density"]);
            self.measure |= matches!(view.word(i), "OR" | "RR" | "HR" | "NNT" | "aOR" | "IRR")
                || view.any(i, &["ratio", "difference"]) && !view.any(i + 1, &["before", "between"]);
            if number && self.percent_after(view, i) {
                self.count = true;
            }
            if view.any(i, &["n"]) && view.sign(i + 1, '/') && view.any(i + 2, &["n"]) {
                (self.count, self.fraction) = (true, true);
            }
            if view.sign(i, '%') || view.is(i, Classes::PERCENT) {
                self.percent = true;
                let open = i + usize::from(view.sign(i + 1, ',')) + 1;
                if view.signs(open, &['(', '[']) && (view.is(open + 1, Classes::N) || view.any(open + 1, &["no"])) {
                    (self.count, self.percent_first) = (true, true);
                }
            }
        }
        let kind = match (sd, se) {
            (true, true) => Some(SpreadKind::Unstated),
            (true, false) => Some(SpreadKind::Sd),
            (false, true) => Some(SpreadKind::Se),
            (false, false) => {
                let mut declared = Declared::default();
                declared.note(view);
                declared.bracket.or(declared.plus_minus).filter(|k| matches!(k, SpreadKind::Sd | SpreadKind::Se))
            }
        };
        self.spread = match (self.spread, kind) {
            (Some(a), Some(b)) if a != b => Some(SpreadKind::Unstated),
            (a, b) => a.or(b),
        };
    }

    /// `n (%)`, `No. (%)`, `no. of patients (%)`, `n, %`, `number and percentage`.
    fn percent_after(&self, view: &SentenceView, i: usize) -> bool {
        for k in i + 1..(i + 7).min(view.len()) {
            if view.sign(k, '%') || view.is(k, Classes::PERCENT) {
                return true;
            }
            let passes = view.signs(k, &['(', '[', ',', '.', '/', ')', ';'])
                || view.any(k, &["of", "and", "n", "in"])
                || view.is(k, Classes::GROUP);
            if !passes {
                return false;
            }
        }
        false
    }

    /// Says what the figures of a cell are.
    pub fn speaks(&self) -> bool {
        self.spread.is_some() || self.median || self.count || self.ci || self.quantiles.is_some()
    }

    /// Says what one figure in brackets is; intervals and quartiles are two.
    pub fn tells_brackets(&self) -> bool {
        self.spread.is_some() || self.median || self.count
    }

    /// Says that figures are means or medians with a spread.
    pub fn summary(&self) -> bool {
        self.spread.is_some() || self.median || self.ci || self.quantiles.is_some()
    }
}
