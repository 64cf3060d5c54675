//! Percentages that stand alone: shares of a group, told apart from levels, goals, changes and doses.

use super::super::lexicon::Classes;
use super::super::sentence::SentenceView;
use super::super::token::TokenKind;
use super::{Draft, Setting, empty};
use crate::manuscript::SectionKind;
use crate::printed::Printed;

/// Words before or after a percentage that show that it is no share of a group.
const NOT_SHARE_BEFORE: &[&str] = &[
    "by",
    "than",
    "least",
    "power",
    "ci",
    "level",
    "of",
    "additional",
    "relative",
    "absolute",
    "difference",
    "within",
    "below",
    "under",
    "exceeding",
    "exceeded",
    "minus",
    "plus",
    "up",
    "a",
    "an",
    "another",
    "further",
    "reduction",
    "increase",
    "decrease",
    "attrition",
    "dose",
    "solution",
    "assuming",
    "expected",
    "anticipated",
    "target",
    "goal",
    "receiving",
    "given",
    "between",
    "confidence",
];
const NOT_SHARE_AFTER: &[&str] = &[
    "ci",
    "confidence",
    "power",
    "significance",
    "level",
    "reduction",
    "increase",
    "decrease",
    "improvement",
    "difference",
    "lower",
    "higher",
    "greater",
    "less",
    "more",
    "larger",
    "smaller",
    "reductions",
    "increases",
    "chance",
    "probability",
    "limits",
    "credible",
    "interval",
    "alcohol",
    "formalin",
    "concentration",
    "w",
    "v",
    "point",
    "points",
    "drop",
    "dropout",
    "attrition",
    "relative",
    "absolute",
    "change",
    "decline",
    "loss",
    "gain",
    "sensitivity",
    "specificity",
    "accuracy",
    "likelihood",
    "variance",
    "threshold",
    "goal",
    "target",
    "oxygen",
    "nacl",
    "procaine",
    "peroxide",
    "fluoride",
    "sucrose",
    "albumin",
    "paraformaldehyde",
    "formaldehyde",
    "acid",
    "acetic",
    "sodium",
    "potassium",
    "chloride",
    "emulsion",
    "lotion",
    "mouthwash",
    "mouthrinse",
    "varnish",
    "gargle",
    "humidity",
    "air",
    "ammonium",
    "trypsin",
    "agarose",
    "bovine",
    "fetal",
];

/// What a percentage right before or behind is the strength of.
#[rustfmt::skip]
const STRENGTH_OF: &[&str] = &[
    "lidocaine", "lignocaine", "bupivacaine", "levobupivacaine", "ropivacaine", "chlorhexidine", "hypochlorite", "naocl",
    "saline", "dextrose", "glucose", "ethanol", "sevoflurane", "isoflurane", "desflurane", "atropine", "tropicamide",
    "timolol", "articaine", "mepivacaine", "povidone", "iodine", "cream", "gel", "ointment", "solution",
];

/// Words that say that a percentage is about so much; what stands before them decides.
const ABOUT: &[&str] =
    &["about", "approximately", "around", "nearly", "almost", "roughly", "over", "above", "only", "just"];

/// What a percentage may be of that is no group: "60% of the maximum", "75% of the time".
const NO_GROUP: &[&str] = &[
    "time",
    "maximum",
    "max",
    "maximal",
    "predicted",
    "normal",
    "vo",
    "baseline",
    "dose",
    "doses",
    "variance",
    "variation",
    "energy",
    "body",
    "weight",
    "total",
    "peak",
    "recommended",
    "heart",
    "initial",
    "power",
    "calories",
    "intake",
];

/// A percentage alone, with its sign in the token before `next`.
pub(super) fn read(
    view: &SentenceView,
    i: usize,
    percent: Printed,
    next: usize,
    setting: &Setting,
    taken: &[bool],
) -> Option<Draft> {
    if percent.value() > 100.0 || !told(view, i, next, setting, taken) {
        return None;
    }
    let mut group = empty(view, i, next - 1);
    group.percent = Some(percent);
    Some(Draft { first: i, last: next - 1, group })
}

/// Whether the percentage (or list of them) in tokens `i..next` is told of a group.
pub(super) fn told(view: &SentenceView, i: usize, next: usize, setting: &Setting, taken: &[bool]) -> bool {
    use SectionKind::*;
    // Of the participants themselves the Methods tell as well, in the past tense.
    if setting.section == Methods && !described(view)
        || !matches!(setting.section, Results | Abstract | Discussion | Unknown | Methods)
    {
        return false;
    }
    if (i.saturating_sub(7)..i).any(|k| view.is(k, Classes::POWER)) {
        return false;
    }
    let mut before = i;
    while before > 0 && view.any(before - 1, ABOUT) {
        before -= 1;
    }
    if let Some(b) = before.checked_sub(1) {
        let sign = matches!(
            view.get(b).map(|t| t.kind),
            Some(TokenKind::Sign('-' | '+' | '±' | '<' | '>' | '≤' | '≥' | '~' | '/' | '×'))
        );
        let no_share = view.any(b, NOT_SHARE_BEFORE) && !(view.any(b, &["of"]) && share_of(view, b));
        let figure_before = b > 0 && view.number(b - 1).is_some();
        // The end of a range: "(61.4 to 72.9%)".
        let range = view.eq(b, "to") && figure_before && !view.eq(b.wrapping_sub(2), "from");
        // The last of a list that is none of shares: "by 31 and 36%".
        let listed = view.is(b, Classes::AND) && figure_before;
        // "between 21% and 26%"
        let between = b > 2 && view.is(b, Classes::AND) && view.sign(b - 1, '%') && view.eq(b - 3, "between");
        // "lidocaine 0.2%": the name of what it is the strength of, and no share is so small and told so.
        let strength = view.any(b, STRENGTH_OF);
        if sign
            || no_share
            || range
            || listed
            || between
            || strength
            || view.sign(b, '=') && !named_value(view, b)
            || taken[b] && view.signs(b, &['(', '['])
            || view.signs(b, &['(', '[']) && of_measured(view, b)
        {
            return false;
        }
    }
    let level = (next..next + 4)
        .take_while(|&k| !view.signs(k, &[',', ';', ')', '(']))
        .any(|k| view.is(k, Classes::CONFIDENCE) || view.is(k, Classes::CI));
    let other = level
        || view.signs(next, &['-', '/', '±', '×'])
        || (next..next + 2).any(|k| view.any(k, NOT_SHARE_AFTER) || view.any(k, STRENGTH_OF));
    let of = view.eq(next, "of") && {
        let at = next + 1 + usize::from(view.any(next + 1, &["the", "their", "its"]));
        view.any(at, NO_GROUP)
    };
    !other && !of
}

/// Whether a sentence of the Methods tells what the participants were or did, and no plan.
fn described(view: &SentenceView) -> bool {
    let mut members = false;
    let mut past = false;
    for k in 0..view.len() {
        members = members || view.is(k, Classes::GROUP);
        past = past || view.any(k, &["were", "was", "had", "completed", "used", "reported", "occurred", "received"]);
        let plan = &[
            "will",
            "would",
            "power",
            "assuming",
            "assumed",
            "expected",
            "detect",
            "calculated",
            "estimated",
            "required",
            "based",
            "set",
            "defined",
            "considered",
            "should",
            "if",
            "least",
            "criteria",
            "range",
            "ranged",
            "cv",
            "concentration",
            "solution",
            "diet",
            "energy",
            "maximum",
            "maximal",
            "max",
        ];
        if view.any(k, plan) {
            return false;
        }
    }
    members && past
}

/// `beginners = 64 %` in a list of such: a name in words before the sign, not a symbol.
fn named_value(view: &SentenceView, equals: usize) -> bool {
    let Some(name) = equals.checked_sub(1) else { return false };
    let symbol = view.word(name).len() < 3
        || view.is(name, Classes::P)
        || view.is(name, Classes::MEASURE)
        || view.is(name, Classes::VALUE)
        || view.is(name, Classes::CI)
        || view.any(name, &["power", "alpha", "beta", "error", "sensitivity", "specificity", "accuracy", "attrition"]);
    let bound = view.number(name).is_some() && view.signs(name.wrapping_sub(1), &['≥', '≤', '>', '<']);
    bound || view.get(name).is_some_and(|t| t.is_word()) && !symbol
}

/// `11.4 mg/dl (5.2%)`: the change in percent of a measured figure before the bracket.
fn of_measured(view: &SentenceView, open: usize) -> bool {
    let mut k = open;
    while k > 0 && open - k < 5 {
        k -= 1;
        if view.number(k).is_some() && view.style(k) == super::super::token::Style::Plain {
            let group = (k + 1..open).any(|j| view.is(j, Classes::GROUP));
            let by = view.any(k.wrapping_sub(1), &["by", "of"]);
            return by && k + 1 < open && view.is(k + 1, Classes::UNIT) && !group;
        }
        if !(view.tokens[k].is_word() || view.signs(k, &['/', '·'])) {
            return false;
        }
    }
    false
}

/// "rate of 12%", "proportion of 45%".
fn share_of(view: &SentenceView, of: usize) -> bool {
    of > 0
        && view.any(
            of - 1,
            &["rate", "rates", "proportion", "prevalence", "incidence", "frequency", "percentage", "total", "majority"],
        )
}
