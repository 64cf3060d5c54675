//! Alpha and power: the levels that a plan sets.

use super::super::lexicon::Classes;
use super::words::*;
use super::{PlanningKind, Reader, limit};
use crate::printed::Printed;

impl Reader<'_, '_> {
    /// A probability: `0.05`, `.05`, `5 %`; the token after it.
    pub(super) fn share(&self, i: usize) -> Option<(Printed, usize)> {
        let x = self.view.number(i)?;
        let (end, percent) = self.percent_after(i);
        if percent {
            return Some((x.shifted(-2), end));
        }
        (x.value() < 1.0 && x.places > 0).then_some((x, end))
    }

    /// The token after a number and the sign or words for percent, and whether there are any.
    fn percent_after(&self, i: usize) -> (usize, bool) {
        let v = self.view;
        if v.any(i + 1, &["per"]) {
            return (i + 3, true);
        }
        let percent = v.sign(i + 1, '%') || v.is(i + 1, Classes::PERCENT);
        (i + 1 + usize::from(percent), percent)
    }

    /// Over "level", "was", "set", "at", "of", "=" … to a probability.
    fn share_after(&self, i: usize, reach: usize) -> Option<(Printed, usize)> {
        let v = self.view;
        let mut j = i;
        while j < (i + reach).min(v.len()) {
            if let Some(x) = self.share(j) {
                return Some(x);
            }
            let skip = v.signs(j, &['=', '(', ':', ')', '-', '<', '≤', ',', '[', ']', '~', '\''])
                || v.is(j, Classes::P.or(Classes::SIDED).or(Classes::NUMBER_WORD))
                || v.any(j, ALPHA_LINKS)
                || v.number(j).is_some_and(|x| x.count().is_some_and(|n| n <= 2));
            if !skip {
                return None;
            }
            j += 1;
        }
        None
    }

    fn in_p(&self, i: usize) -> bool {
        self.p.iter().any(|x| x.first <= i && i <= x.last)
    }

    pub(super) fn taken(&self, i: usize) -> bool {
        // A number inside a p that was read as a threshold is not told twice.
        self.p.iter().zip(self.defines.iter()).any(|(x, &d)| d && x.first <= i && i <= x.last)
    }

    pub(super) fn alpha(&mut self) {
        let v = self.view;
        let mut i = 0;
        while i < v.len() {
            let named = v.any(i, &["alpha", "α"]);
            let one = i + 1 + usize::from(v.sign(i + 1, '-'));
            let error = one + 1 + usize::from(v.sign(one + 1, '-'));
            let type_one = v.any(i, &["type"])
                && (v.any(one, &["i", "one"]) || v.number(one).and_then(Printed::count) == Some(1))
                && v.any(error, &["error", "errors"]);
            let bare = v.any(i, &["significance"]) && self.states_significance(i)
                || v.any(i, &["error"]) && v.any(i + 1, &["probability"]);
            // "significant at the 5 % level".
            let at_level = v.any(i, &["level", "levels"])
                && (v.sign(i.wrapping_sub(1), '%')
                    || v.is(i.wrapping_sub(1), Classes::PERCENT)
                    || i > 0 && !self.in_p(i - 1) && v.number(i - 1).is_some_and(|x| x.places > 0 && limit(x)))
                && (0..v.len()).any(|j| v.is(j, Classes::SIGNIFICANCE) || v.any(j, &["test", "tests", "tested"]));
            let level = v.any(i, &["significance"]) && v.any(i + 1, &["level", "levels", "threshold"])
                || v.any(i, &["level"])
                    && v.any(i + 1, &["of"])
                    && (v.any(i + 2, &["significance"])
                        || v.any(i + 2, &["statistical"]) && v.any(i + 3, &["significance"]));
            if !(named || type_one || level || bare || at_level)
                || named
                    && v.any(i.wrapping_sub(1), &["cronbach", "cronbach's", "interferon", "cronbachs", "coefficient"])
            {
                i += 1;
                continue;
            }
            let start = if named {
                i + 1
            } else if type_one {
                error + 1
            } else if bare || at_level {
                i + 1
            } else if v.any(i, &["level"]) {
                i + 3
            } else {
                i + 2
            };
            let ahead = self.share_after(start, 10).filter(|x| x.0.value() <= 0.2 && x.0.value() > 0.0);
            let ahead = ahead.filter(|x| !at_level && (named || type_one || level || limit(x.0)));
            // "0.05 level of significance", "5 % significance level", "0.05 alpha".
            let behind = (i.saturating_sub(6)..i).rev().find_map(|j| {
                let (x, end) = self.share(j)?;
                let linked = (end..i).all(|h| {
                    v.sign(h, '-')
                        || v.is(h, Classes::SIDED.or(Classes::NUMBER_WORD))
                        || v.any(h, &["level", "statistical", "alpha", "of", "two", "one", "a", "probability"])
                });
                // "the 95 % significance level" means 5 %.
                let x = if x.value() >= 0.9 && x.value() < 1.0 && !named { complement(x)? } else { x };
                (linked && x.value() <= 0.2 && x.value() > 0.0 && (!at_level || limit(x))).then_some((x, j))
            });
            let cronbach =
                (i.saturating_sub(4)..i).any(|j| v.any(j, &["cronbach", "cronbach's", "consistency", "reliability"]));
            if cronbach {
                i += 1;
                continue;
            }
            if let Some((x, first)) = behind {
                let last = if named {
                    i
                } else if v.any(i, &["level"]) && v.any(i + 2, &["significance"]) {
                    i + 2
                } else if type_one {
                    error
                } else if bare || at_level {
                    i
                } else {
                    (i + 1).min(v.len() - 1)
                };
                if !self.taken(first) {
                    self.add(PlanningKind::Alpha, first, last, Some(x), None);
                }
                i = last + 1;
            } else if let Some((x, end)) = ahead {
                if !self.taken(end - 1) && !self.taken(end.saturating_sub(2)) {
                    self.add(PlanningKind::Alpha, i, end - 1, Some(x), None);
                }
                i = end;
            } else {
                i = start;
            }
        }
    }

    /// "significance of 5 %", "significance was set at 0.05", "5 % significance".
    fn states_significance(&self, i: usize) -> bool {
        let v = self.view;
        let verb = |j: usize| v.any(j, &["of", "set", "at", "defined", "accepted", "fixed", "assumed"]);
        verb(i + 1) && !(v.any(i + 1, &["of"]) && v.is(i + 2, Classes::P))
            || v.any(i + 1, &["was", "is", "will", "being"]) && (i + 2..i + 4).any(verb)
            || v.sign(i.wrapping_sub(1), '%')
    }

    pub(super) fn power(&mut self) {
        let v = self.view;
        let mut i = 0;
        while i < v.len() {
            let power = v.any(i, &["power", "powers", "powered"])
                && !v.any(i + 1, &["output", "doppler", "spectrum", "spectral"])
                && !v.any(i.wrapping_sub(1), OTHER_POWERS);
            let beta = v.any(i, &["beta", "β"]) && !v.sign(i.wrapping_sub(1), '-') && !(v.sign(i + 1, '-'));
            let type_two = v.any(i, &["type"]) && v.any(i + 1, &["ii", "two"]) && v.any(i + 2, &["error", "errors"]);
            if power {
                let behind = (i.saturating_sub(4)..i).rev().find_map(|j| {
                    let x = v.number(j)?;
                    let (end, percent) = self.percent_after(j);
                    let linked =
                        (end..i).all(|h| v.any(h, &["statistical", "study", "a", "of", "statistic"]) || v.sign(h, '-'));
                    (linked && plausible_power(x, percent)).then_some((x, j))
                });
                if let Some((x, first)) = behind {
                    self.add(PlanningKind::Power, first, i, Some(x), None);
                    i += 1;
                    continue;
                }
                // "power of 80 %", "power (1 − β) was set at 0.8".
                let mut j = i + 1;
                while j < (i + 12).min(v.len()) {
                    if let Some(x) = v.number(j) {
                        let (end, percent) = self.percent_after(j);
                        if plausible_power(x, percent)
                            && !(v.tokens.get(j + 1).is_some_and(|t| t.is_word())
                                && v.any(j + 1, &["w", "kw", "watts"]))
                        {
                            self.add(PlanningKind::Power, i, end - 1, Some(x), None);
                            i = end - 1;
                            break;
                        }
                        if x.count() != Some(1) {
                            break;
                        }
                    } else if !(v.signs(j, &['=', '(', ')', ':', '-', ',', '≥', '>', '[', ']'])
                        || v.any(j, POWER_LINKS))
                    {
                        break;
                    }
                    j += 1;
                }
            } else if v.any(i, &["chance", "probability"])
                && v.any(i + 1, &["of", "to"])
                && (i + 2..i + 4).any(|j| v.any(j, &["detecting", "detect", "finding", "demonstrating"]))
                && v.sign(i.wrapping_sub(1), '%')
            {
                // "a 90 % chance of detecting".
                if let Some(x) = i.checked_sub(2).and_then(|j| v.number(j)).filter(|&x| plausible_power(x, true)) {
                    self.add(PlanningKind::Power, i - 2, i, Some(x), None);
                }
            } else if beta || type_two {
                let at = if beta { i + 1 } else { i + 3 };
                let planned = type_two || (0..v.len()).any(|j| v.any(j, &["alpha", "α", "power", "sample"]));
                // Beta in sample-size sentences: the power is its complement, printed as beta.
                if planned
                    && !(beta && v.any(i.wrapping_sub(2), &["1"])
                        || v.number(i.wrapping_sub(2)).is_some() && v.sign(i.wrapping_sub(1), '-'))
                    && let Some((x, end)) = self
                        .share_after(at, 8)
                        .filter(|x| (0.01..=0.5).contains(&x.0.value()) || (0.7..1.0).contains(&x.0.value()))
                {
                    // "beta to 80 %": what is printed as beta is the power.
                    let complement = if x.value() > 0.5 { Some(x) } else { complement(x) };
                    self.add(PlanningKind::Power, i, end - 1, complement, None);
                    i = end;
                    continue;
                }
            }
            i += 1;
        }
    }
}

fn plausible_power(x: Printed, percent: bool) -> bool {
    if percent { (50.0..100.0).contains(&x.value()) } else { x.places > 0 && (0.5..1.0).contains(&x.value()) }
}

/// 1 − β with the digits that β is printed with.
fn complement(beta: Printed) -> Option<Printed> {
    let places = i32::from(beta.places) - i32::from(beta.exponent);
    let places = u8::try_from(places).ok().filter(|&p| p <= 6)?;
    let one = 10u64.pow(u32::from(places));
    (beta.digits < one).then_some(Printed { negative: false, digits: one - beta.digits, places, exponent: 0 })
}
