//! p-values in running text: `P = .03`, `p<0·001`, `P-values were 0.02 and 0.4`, `p = 1.2 × 10⁻⁵`,
//! `P for trend = 0.01`, `(n.s.)`.

use super::lexicon::Classes;
use super::sentence::SentenceView;
use super::token::{Style, TokenKind};
use super::{PValue, Relation, Role};
use crate::printed::Printed;

/// A printed p with its relation, before it is known whether it reports a result or defines a threshold.
#[derive(Clone, Debug, PartialEq)]
pub struct PExpression {
    /// First and last token, both included.
    pub first: usize,
    pub last: usize,
    pub relation: Relation,
    pub value: Option<Printed>,
    pub role: Role,
    pub corrected: bool,
    pub shared: bool,
}

impl PExpression {
    /// As a reading: it reports a result.
    pub fn reading(&self, view: &SentenceView) -> PValue {
        PValue {
            span: view.span(self.first, self.last),
            sentence: view.id,
            relation: self.relation,
            value: self.value,
            role: self.role,
            corrected: self.corrected,
            shared: self.shared,
        }
    }
}

/// What stands between the letter P and its relation.
#[derive(Clone, Copy, Default)]
struct Qualifiers {
    /// "P value", "P-values": the relation may then be a word or missing.
    value_word: bool,
    role: Option<Role>,
    corrected: bool,
}

/// All p expressions of a sentence, in order.
pub fn find(view: &SentenceView) -> Vec<PExpression> {
    let mut found: Vec<PExpression> = Vec::new();
    let mut i = 0;
    while i < view.len() {
        let next = if let Some((name, qualifiers)) = letter(view, i) {
            after_letter(view, i, name, qualifiers, &mut found)
        } else if let Some(last) = not_significant(view, i) {
            found.push(expression(i, last, Relation::NotSignificant, None, Qualifiers::default()));
            Some(last + 1)
        } else {
            None
        };
        i = next.unwrap_or(i + 1);
    }
    for k in 0..found.len() {
        let after = if k == 0 { 0 } else { found[k - 1].last + 1 };
        surroundings(view, after, &mut found[k]);
    }
    found
}

fn expression(first: usize, last: usize, relation: Relation, value: Option<Printed>, q: Qualifiers) -> PExpression {
    PExpression {
        first,
        last,
        relation,
        value,
        role: q.role.unwrap_or(Role::Effect),
        corrected: q.corrected,
        shared: false,
    }
}

/// Endings glued to the letter, as subscripts that lost their markup: `Ptrend`, `p_int`.
const ENDINGS: &[(&str, Option<Role>, bool)] = &[
    ("value", None, false),
    ("values", None, false),
    ("val", None, false),
    ("trend", Some(Role::TrendOrJoint), false),
    ("interaction", Some(Role::Interaction), false),
    ("int", Some(Role::Interaction), false),
    ("inter", Some(Role::Interaction), false),
    ("heterogeneity", Some(Role::AssumptionOrFit), false),
    ("het", Some(Role::AssumptionOrFit), false),
    ("noninferiority", Some(Role::NonInferiority), false),
    ("adj", None, true),
    ("adjusted", None, true),
    ("corr", None, true),
    ("corrected", None, true),
    ("fdr", None, true),
    ("fwe", None, true),
    ("bonf", None, true),
    ("tukey", None, true),
    ("unc", None, false),
    ("uncorr", None, false),
    ("rm", None, false),
    ("logrank", None, false),
];

/// The letter P (or a word that begins with it and is nothing else); gives the token after it.
fn letter(view: &SentenceView, i: usize) -> Option<(usize, Qualifiers)> {
    let token = view.get(i)?;
    if !token.is_word() || token.style != Style::Plain {
        return None;
    }
    if token.is(Classes::P) {
        // `log-p`, `e.p.`: part of something else. `-P` after a dash set apart is fine.
        let glued = i > 0 && !token.spaced && (view.sign(i - 1, '-') && i > 1 && !view.spaced(i - 1));
        return (!glued || relation(view, i + 1).is_some()).then_some((i + 1, Qualifiers::default()));
    }
    let word = view.word(i);
    let rest = word.strip_prefix(['p', 'P']).filter(|r| r.len() >= 2 && word.len() < 18)?;
    let (name, role, corrected) = ENDINGS.iter().find(|e| rest.eq_ignore_ascii_case(e.0))?;
    Some((i + 1, Qualifiers { value_word: name.starts_with("val"), role: *role, corrected: *corrected }))
}

fn after_letter(
    view: &SentenceView,
    first: usize,
    mut at: usize,
    mut q: Qualifiers,
    found: &mut Vec<PExpression>,
) -> Option<usize> {
    // P-value, P value, P-wave (which ends it).
    if view.sign(at, '-') && !view.spaced(at) && view.get(at + 1).is_some_and(|t| t.is_word() && !t.spaced) {
        let word = at + 1;
        q = qualified(view, word, q)?;
        at = word + 1;
    }
    if view.signs(at, &['\'', '’']) && view.eq(at + 1, "s") {
        at += 2;
    }
    // `p_adj`, `p_interaction`
    if view.sign(at, '_') {
        at += 1;
        if let Some(t) = qualified(view, at, q) {
            q = t;
        }
        at += 1;
    }
    while view.style(at) == Style::Subscript || (view.style(at) == Style::Superscript && view.signs(at, &['*'])) {
        if view.get(at)?.is_word() {
            q = qualified(view, at, q).unwrap_or(q);
        }
        at += 1;
    }
    for _ in 0..3 {
        let word = view.get(at).is_some_and(|t| t.is_word());
        if word && (view.is(at, Classes::VALUE) || view.any(at, &["trend", "interaction", "adjusted", "corrected"])) {
            q = qualified(view, at, q).unwrap_or(q);
            at += 1;
        } else if view.any(at, &["for", "of"]) && q_word_ahead(view, at + 1).is_some() {
            // P for trend, P for the interaction between A and B
            let stop = q_word_ahead(view, at + 1)?;
            for k in at + 1..stop {
                q = qualified(view, k, q).unwrap_or(q);
            }
            at = stop;
        } else if view.signs(at, &['(', '[']) {
            // P (two-tailed) = …, p [adjusted] = …
            let close = (at + 1..(at + 8).min(view.len())).find(|&k| view.signs(k, &[')', ']']))?;
            if relation(view, close + 1).is_none() {
                break;
            }
            for k in at + 1..close {
                q = qualified(view, k, q).unwrap_or(q);
            }
            at = close + 1;
        } else {
            break;
        }
    }
    let (relation, mut at) = match relation(view, at) {
        Some(r) => r,
        None => words_of_relation(view, at, q.value_word)?,
    };
    // `p = < 0.001`, `p = <.05`
    let mut relation = relation;
    if relation == Relation::Equal
        && let Some((r, next)) = self::relation(view, at)
    {
        (relation, at) = (r, next);
    }
    if relation == Relation::Equal
        && let Some(last) = ns_word(view, at)
    {
        found.push(expression(first, last, Relation::NotSignificant, None, q));
        return Some(last + 1);
    }
    let (value, last) = value(view, at)?;
    if !plausible(view, first, last, relation, value) {
        return None;
    }
    // A range of p-values: at least its lower end.
    let separator = last + 1;
    if relation == Relation::Equal
        && (view.sign(separator, '-') || view.eq(separator, "to"))
        && let Some((upper, end)) = self::value(view, separator + 1)
        && upper.value() <= 1.0
        && upper.places >= 1
        && upper.value() > value.value()
    {
        found.push(expression(first, end, Relation::AtLeast, Some(value), q));
        return Some(end + 1);
    }
    if view.any(first_word_after(view, first), &["between", "from"])
        && (view.is(separator, Classes::AND) || view.eq(separator, "to"))
        && let Some((_, end)) = self::value(view, separator + 1)
    {
        found.push(expression(first, end, Relation::AtLeast, Some(value), q));
        return Some(end + 1);
    }
    found.push(expression(first, last, relation, Some(value), q));
    Some(listed(view, last, relation, q, found))
}

/// The word right after the letter and its "value": for "p-values between 0.1 and 0.8".
fn first_word_after(view: &SentenceView, first: usize) -> usize {
    (first + 1..(first + 6).min(view.len())).find(|&k| view.any(k, &["between", "from"])).unwrap_or(view.len())
}

/// Further values after the first: `p = 0.02 and 0.4`, `P-values were 0.02, 0.3 and < 0.001, respectively`.
fn listed(view: &SentenceView, mut last: usize, first: Relation, q: Qualifiers, found: &mut Vec<PExpression>) -> usize {
    loop {
        let mut at = last + 1;
        let mut separated = false;
        while view.signs(at, &[',', ';', '/']) || view.is(at, Classes::AND) || view.is(at, Classes::VERSUS) {
            separated = true;
            at += 1;
        }
        if !separated || at > last + 4 {
            return last + 1;
        }
        let start = at;
        let (relation, next) = relation(view, at).unwrap_or((first, at));
        let Some((value, end)) = value(view, next) else { return last + 1 };
        let closes = match view.get(end + 1).map(|t| t.kind) {
            None => true,
            Some(TokenKind::Sign(c)) => matches!(c, ')' | ']' | ',' | ';' | '.' | '/'),
            Some(TokenKind::Word) => {
                view.is(end + 1, Classes::AND)
                    || view.any(end + 1, &["respectively", "for", "in", "at", "between", "when", "after", "with"])
            }
            Some(TokenKind::Number(_)) => false,
        };
        let digits = value.value() <= 1.0 && value.places >= 2 && value.exponent == 0;
        if !(digits && closes) {
            return last + 1;
        }
        found.push(expression(start, end, relation, Some(value), q));
        last = end;
    }
}

/// What a qualifying word says; `None` for a word that shows that no p-value is meant.
fn qualified(view: &SentenceView, i: usize, mut q: Qualifiers) -> Option<Qualifiers> {
    if view.is(i, Classes::VALUE) {
        q.value_word = true;
    } else if view.is(i, Classes::INTERACTION) || view.any(i, &["int", "inter"]) {
        q.role = Some(Role::Interaction);
    } else if view.is(i, Classes::TREND) || view.any(i, &["linear", "quadratic", "joint", "overall", "global"]) {
        q.role = Some(Role::TrendOrJoint);
    } else if view.any(i, &["noninferiority", "inferiority", "noninf"]) {
        q.role = Some(Role::NonInferiority);
    } else if view.any(i, &["heterogeneity", "het", "homogeneity", "fit", "normality"]) {
        q.role = Some(Role::AssumptionOrFit);
    } else if view.any(i, &["adjusted", "adj", "corrected", "corr", "fdr", "bonferroni", "holm", "tukey", "fwe"]) {
        q.corrected = true;
    } else if view.any(
        i,
        &[
            "two",
            "one",
            "tailed",
            "sided",
            "nominal",
            "unadjusted",
            "uncorrected",
            "exact",
            "raw",
            "log",
            "rank",
            "logrank",
        ],
    ) {
    } else {
        return None;
    }
    Some(q)
}

/// Where the words after "for" end before the relation, at most six words on.
fn q_word_ahead(view: &SentenceView, at: usize) -> Option<usize> {
    let mut k = at;
    while k < at + 7 {
        match view.get(k)?.kind {
            TokenKind::Word | TokenKind::Sign('-' | '×' | '*') => k += 1,
            TokenKind::Sign('=' | '<' | '>' | '≤' | '≥' | '~') => return (k > at).then_some(k),
            _ => return None,
        }
    }
    None
}

/// A printed relation; gives the token after it.
fn relation(view: &SentenceView, at: usize) -> Option<(Relation, usize)> {
    let TokenKind::Sign(first) = view.get(at)?.kind else { return None };
    let second = match view.get(at + 1).map(|t| (t.kind, t.spaced)) {
        Some((TokenKind::Sign(c), false)) => Some(c),
        _ => None,
    };
    let relation = match (first, second) {
        ('<', Some('=')) | ('=', Some('<')) => return Some((Relation::AtMost, at + 2)),
        ('>', Some('=')) | ('=', Some('>')) => return Some((Relation::AtLeast, at + 2)),
        ('=' | '~', _) => Relation::Equal,
        ('<', _) => Relation::Less,
        ('>', _) => Relation::Greater,
        ('≤', _) => Relation::AtMost,
        ('≥', _) => Relation::AtLeast,
        _ => return None,
    };
    // `= <` with a space is left to the caller; `<<` and `>>` are one.
    let doubled = second == Some(first) && matches!(first, '<' | '>');
    Some((relation, at + 1 + usize::from(doubled)))
}

/// "was less than", "of", "≈", ":" or nothing after "P value".
fn words_of_relation(view: &SentenceView, mut at: usize, value_word: bool) -> Option<(Relation, usize)> {
    let start = at;
    let mut copula = false;
    while at < start + 4
        && (view.is(at, Classes::COPULA)
            || view
                .any(at, &["to", "from", "between", "ranged", "ranging", "always", "all", "respectively", "at", "a"])
            || view.sign(at, ':'))
    {
        copula = true;
        at += 1;
    }
    if let Some(r) = relation(view, at) {
        return Some(r);
    }
    let compared = |at: usize| {
        if view.any(at, &["less", "lower", "smaller"]) && view.eq(at + 1, "than") {
            Some((Relation::Less, at + 2))
        } else if view.any(at, &["greater", "higher", "larger", "more"]) && view.eq(at + 1, "than") {
            Some((Relation::Greater, at + 2))
        } else if view.any(at, &["below", "under"]) {
            Some((Relation::Less, at + 1))
        } else if view.any(at, &["above", "over", "exceeding"]) {
            Some((Relation::Greater, at + 1))
        } else {
            None
        }
    };
    if let Some((relation, next)) = compared(at) {
        // "less than or equal to"
        if view.phrase(next, &["or", "equal", "to"]) {
            let relation = if relation == Relation::Less { Relation::AtMost } else { Relation::AtLeast };
            return Some((relation, next + 3));
        }
        return Some((relation, next));
    }
    let decimal = view.number(at).is_some_and(|p| p.value() <= 1.0 && p.places >= 2);
    let follows = view.get(at + 1).is_none_or(|t| !t.is_sign('%') && !t.is_sign('±'));
    ((value_word || copula || at == start) && decimal && follows).then_some((Relation::Equal, at))
}

/// A p's figure, with a power of ten where one is printed; gives its last token.
fn value(view: &SentenceView, at: usize) -> Option<(Printed, usize)> {
    let (base, next) = view.signed(at).filter(|_| !view.sign(at, '+'))?;
    // 10^−11
    if base == Printed::whole(10)
        && let Some((exponent, last)) = power(view, next)
    {
        return Some((Printed { digits: 1, exponent, ..base }, last));
    }
    // 1.2 × 10⁻⁵, 1.2 x 10-5
    if (view.signs(next, &['×', '*', '·', '∗']) || view.eq(next, "x"))
        && view.number(next + 1) == Some(Printed::whole(10))
    {
        if let Some((exponent, last)) = power(view, next + 2) {
            return Some((Printed { exponent, ..base }, last));
        }
        if view.sign(next + 2, '-')
            && !view.spaced(next + 2)
            && let Some(e) = view.number(next + 3).and_then(Printed::count).filter(|&e| e < 400)
        {
            return Some((Printed { exponent: -(e as i16), ..base }, next + 3));
        }
    }
    Some(mended(view, base, next - 1))
}

/// `0 .001`, `0. 001` and `0001`: a space inside the figure, or the decimal mark lost.
fn mended(view: &SentenceView, base: Printed, last: usize) -> (Printed, usize) {
    let text = view.word(last);
    if text == "0" {
        if view.word(last + 1).starts_with(['.', '·'])
            && let Some(p) = view.number(last + 1)
        {
            return (p, last + 1);
        }
        if view.sign(last + 1, '.')
            && !view.spaced(last + 1)
            && view.word(last + 2).starts_with('0')
            && let Some(p) = view.number(last + 2)
        {
            return (Printed { places: view.word(last + 2).len() as u8, ..p }, last + 2);
        }
    }
    // `0, 0130`: a decimal comma with a space behind it
    if text == "0" && view.sign(last + 1, ',') && !view.spaced(last + 1) {
        let decimals = view.word(last + 2);
        if decimals.len() >= 3
            && decimals.bytes().all(|b| b.is_ascii_digit())
            && let Some(p) = view.number(last + 2)
        {
            return (Printed { places: decimals.len() as u8, ..p }, last + 2);
        }
    }
    if text.len() >= 3 && text.starts_with('0') && text.bytes().all(|b| b.is_ascii_digit()) {
        return (Printed { places: text.len() as u8, digits: base.digits, ..base }, last);
    }
    (base, last)
}

/// A raised exponent.
fn power(view: &SentenceView, at: usize) -> Option<(i16, usize)> {
    if view.sign(at, '^') {
        let (p, next) = view.signed(at + 1)?;
        return exponent(p).map(|e| (e, next - 1));
    }
    if view.style(at) != Style::Superscript {
        return None;
    }
    let (p, next) = view.signed(at)?;
    exponent(p).map(|e| (e, next - 1))
}

fn exponent(p: Printed) -> Option<i16> {
    let size = i16::try_from(p.digits).ok().filter(|&d| d < 400 && p.places == 0)?;
    Some(if p.negative { -size } else { size })
}

/// Phosphorus, pressures and pages are larger than 1 and carry units.
fn plausible(view: &SentenceView, first: usize, last: usize, relation: Relation, value: Printed) -> bool {
    if view.sign(last + 1, '%') || view.is(last + 1, Classes::UNIT) {
        return false;
    }
    let v = value.value();
    if (0.0..=1.0).contains(&v) {
        // `P = 1` may be a count of something; `P > 1` and `P < 1` say nothing about a p.
        return value.places > 0 || value.exponent != 0 || v < 1.0 || relation == Relation::Equal;
    }
    // A misprint such as `P = 1.3` is read only where nothing else can be meant.
    let opened = first == 0 || view.signs(first - 1, &['(', '[', ',', ';']);
    let closed = view.signs(last + 1, &[')', ']', ';']);
    relation == Relation::Equal && value.places > 0 && opened && closed && v.abs() < 10.0
}

/// `NS` and `n.s.` where they stand for a p-value: in brackets or after a comma or semicolon.
fn not_significant(view: &SentenceView, i: usize) -> Option<usize> {
    let opened = i > 0 && view.signs(i - 1, &['(', '[', ',', ';', ':']);
    if !opened {
        return None;
    }
    let last = ns_word(view, i)?;
    let closed = view.signs(last + 1, &[')', ']', ',', ';'])
        || view.any(last + 1, &["between", "for", "in", "versus", "vs", "compared"]);
    // `ns` after a number is a nanosecond; "(NS)" after a word that it abbreviates is no p.
    let abbreviates =
        view.signs(i - 1, &['(']) && i >= 3 && view.any(i - 2, &["saline", "solution", "stimulation", "score"]);
    (closed && !abbreviates).then_some(last)
}

fn ns_word(view: &SentenceView, i: usize) -> Option<usize> {
    if matches!(view.word(i), "NS" | "ns" | "Ns") {
        return Some(i);
    }
    if view.any(i, &["n"]) && view.sign(i + 1, '.') && view.any(i + 2, &["s"]) && !view.spaced(i + 1) {
        return Some(if view.sign(i + 3, '.') && !view.spaced(i + 3) { i + 3 } else { i + 2 });
    }
    if view.eq(i, "n") && view.sign(i + 1, '/') && view.eq(i + 2, "s") {
        return Some(i + 2);
    }
    None
}

/// Role and sharing from the words around, back to the previous p or semicolon and on to the closing bracket.
fn surroundings(view: &SentenceView, after: usize, p: &mut PExpression) {
    let from = clause_start(view, after, p.first);
    let to = (p.last + 1..(p.last + 8).min(view.len()))
        .find(|&k| view.signs(k, &[')', ']', ';', '.']) || view.is(k, Classes::P))
        .unwrap_or((p.last + 8).min(view.len()));
    let near = |k: usize| k < p.first || k > p.last;
    let mut baseline = None;
    for k in (from..to).filter(|&k| near(k)) {
        let Some(token) = view.get(k) else { break };
        if !token.is_word() {
            continue;
        }
        if p.role == Role::Effect {
            if view.is(k, Classes::INTERACTION) || (view.eq(k, "moderated") && !view.eq(k + 1, "by")) {
                p.role = Role::Interaction;
            } else if (view.phrase(k, &["non"]) && view.eq(k + 2, "inferiority")) || view.any(k, &["noninferiority"]) {
                p.role = Role::NonInferiority;
            } else if view.any(
                k,
                &[
                    "normality",
                    "heterogeneity",
                    "sphericity",
                    "homogeneity",
                    "shapiro",
                    "levene",
                    "hosmer",
                    "breslow",
                    "mauchly",
                    "kolmogorov",
                ],
            ) {
                p.role = Role::AssumptionOrFit;
            } else if view.is(k, Classes::TREND) && k + 1 < to && view.phrase(k.saturating_sub(1), &["linear"]) {
                p.role = Role::TrendOrJoint;
            } else if within_group(view, k) {
                p.role = Role::WithinGroup;
            } else if view.is(k, Classes::BASELINE) {
                baseline = Some(k);
            }
        }
        if view.is(k, Classes::ALL) && ((k + 1 == p.first || k + 2 == p.first) || (k > p.last && view.eq(k - 1, "for")))
        {
            p.shared = true;
        }
        if k > p.last
            && view.any(k, &["bonferroni", "tukey", "adjusted", "corrected", "holm", "fdr", "scheffe", "dunnett"])
        {
            p.corrected = true;
        }
    }
    // "The change from baseline did not differ between arms": the p compares arms all the same.
    if p.role == Role::WithinGroup && (from..to).filter(|&k| near(k)).any(|k| between_groups(view, k)) {
        p.role = Role::Effect;
    }
    if p.role == Role::Effect
        && let Some(k) = baseline
        && k > 0
        && view.any(k - 1, &["at", "in"])
    {
        p.role = Role::Baseline;
    }
}

/// "from baseline", "compared with baseline", "before and after", "pre- to post-".
fn within_group(view: &SentenceView, k: usize) -> bool {
    (view.is(k, Classes::BASELINE) && k > 0 && {
        let before = k - 1;
        view.any(before, &["from", "with", "to", "versus", "vs", "than", "over", "v"])
            || (view.any(before, &["the", "their", "its"])
                && k > 1
                && view.any(k - 2, &["from", "with", "to", "versus", "vs"]))
    }) || (view.eq(k, "before") && view.is(k + 1, Classes::AND) && view.eq(k + 2, "after"))
        || (view.eq(k, "within")
            && view.any(k + 1, &["group", "groups", "subject", "subjects", "each", "both", "the"])
            && !view.any(k + 2, &["normal", "limits"]))
        || (view.any(k, &["intragroup", "pretreatment"]) && k > 0)
        || view.any(k, &["paired"])
}

/// "between the two groups", "differed between sling and usual care".
fn between_groups(view: &SentenceView, k: usize) -> bool {
    let groups = |k: usize| view.any(k, &["groups", "arms", "treatments", "conditions", "interventions"]);
    let differs = |k: usize| view.any(k, &["differ", "differed", "different", "difference", "differences", "differs"]);
    view.any(k, &["between"])
        && ((k + 1..k + 5).any(groups) || (k.saturating_sub(3)..k).any(differs) && !view.is(k + 1, Classes::BASELINE))
        || view.any(k, &["intergroup"])
}

/// After the last semicolon of `after..before` that stands outside brackets.
fn clause_start(view: &SentenceView, after: usize, before: usize) -> usize {
    let (mut depth, mut start) = (0i32, after);
    for k in after..before {
        if view.signs(k, &['(', '[']) {
            depth += 1;
        } else if view.signs(k, &[')', ']']) {
            depth = (depth - 1).max(0);
        } else if depth == 0 && view.sign(k, ';') {
            start = k + 1;
        }
    }
    start
}
