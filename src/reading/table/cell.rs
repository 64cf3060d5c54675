//! The forms of one cell of results: `12.4 (3.1)`, `5.2 ± 1.1`, `12/40 (30)`, `8 (7–10)`, `0.03`.
//!
//! A cell is read whole or not at all: what stands in it besides the form and footnote marks makes it another thing.

use super::super::lexicon::Classes;
use super::super::sentence::SentenceView;
use super::super::token::{Style, TokenKind};
use super::super::{Relation, SpreadKind};
use crate::printed::Printed;

/// The figures of a cell, before it is known what they mean.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) enum Form {
    /// `5.2 ± 1.1`, `5.2 (±1.1)`
    PlusMinus { centre: Printed, spread: Printed },
    /// `12.4 (3.1)`, `12 (30%)`, `12.4 (SD 3.1)`
    Bracket { centre: At, inner: Printed, percent: bool, named: Option<SpreadKind> },
    /// `12/40`, `12/40 (30)`, `30% (12/40)`
    Fraction { events: At, total: At, percent: Option<Printed> },
    /// `30% (12)`
    PercentFirst { percent: Printed, events: At },
    /// `8 (7–10)`
    Pair { centre: At, lower: Printed, upper: Printed },
    /// `12.4`, `30%`
    Single { value: At, percent: bool },
}

/// A number with its token.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) struct At {
    pub printed: Printed,
    /// First and last token.
    pub first: usize,
    pub last: usize,
}

/// A cell that is a form and nothing else.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) struct Read {
    pub form: Form,
    /// First and last token of the form.
    pub first: usize,
    pub last: usize,
    /// A size of its own behind the form: `12.4 (3.1) (n = 20)`.
    pub n: Option<At>,
}

/// The tokens of a cell without footnote marks.
struct Line<'a> {
    view: &'a SentenceView<'a>,
    kept: Vec<usize>,
}

impl<'a> Line<'a> {
    fn of(view: &'a SentenceView<'a>) -> Line<'a> {
        let kept = (0..view.len())
            .filter(|&i| {
                view.style(i) != Style::Superscript && !view.signs(i, &['*', '†', '‡', '§', '¶', '#', '$', '∗'])
            })
            .collect();
        Line { view, kept }
    }

    /// The token behind position `k`; past the end it is past the view's end.
    fn at(&self, k: usize) -> usize {
        self.kept.get(k).copied().unwrap_or(self.view.len())
    }

    fn sign(&self, k: usize, signs: &[char]) -> bool {
        self.view.signs(self.at(k), signs)
    }

    /// A number with its sign; gives the position after it.
    fn number(&self, k: usize) -> Option<(At, usize)> {
        let first = self.at(k);
        if let Some(printed) = self.view.number(first) {
            return Some((At { printed, first, last: first }, k + 1));
        }
        let negative = self.sign(k, &['-']);
        if !negative && !self.sign(k, &['+']) {
            return None;
        }
        let last = self.at(k + 1);
        let printed = self.view.number(last)?;
        Some((At { printed: if negative { printed.negated() } else { printed }, first, last }, k + 2))
    }

    /// A percent sign may stand at `k`; gives whether it does and the position after it.
    fn percent(&self, k: usize) -> (bool, usize) {
        let there = self.sign(k, &['%']);
        (there, k + usize::from(there))
    }
}

/// The forms of a cell, where it is nothing but forms: `5.2 ± 1.1/4.8 ± 0.9`, `8 (7–10) 8.4 (SD 2.2)`; empty otherwise.
pub(super) fn read(view: &SentenceView) -> Vec<Read> {
    /// More forms than a cell holds side by side.
    const MOST: usize = 4;
    let line = Line::of(view);
    let mut found = Vec::new();
    let mut k = 0;
    while let Some((form, end)) = form(&line, k).filter(|_| found.len() < MOST) {
        let behind = own_size(&line, end).or_else(|| bare_size(&line, &form, end));
        let (n, after) = match behind {
            Some((n, after)) => (Some(n), after),
            // `59.3 ± 10.3 (37–75)`: the range beside the mean.
            None => (None, range_behind(&line, &form, end).unwrap_or(end)),
        };
        found.push(Read { form, first: line.at(k), last: line.at(end - 1), n });
        let rest = skip_marks(&line, after);
        if rest >= line.kept.len() {
            return found;
        }
        // `T1/T2/T3/T4` in counts.
        let counts = matches!(form, Form::Fraction { percent: None, .. });
        if counts && line.sign(rest, &['/']) {
            return Vec::new();
        }
        // Another form behind a sign, or right behind brackets.
        let apart = line.sign(rest, &['/', ';']) || line.sign(rest, &[',']) && line.sign(rest - 1, &[')', ']']);
        let glued = rest == after && line.sign(rest - 1, &[')', ']']) && line.number(rest).is_some();
        if !apart && !glued {
            return Vec::new();
        }
        k = rest + usize::from(apart);
    }
    Vec::new()
}

/// The form that a cell begins with, whatever is said behind a comma: `1.57 [0.49, 2.65], d = 0.66`.
pub(super) fn read_first(view: &SentenceView) -> Option<Read> {
    if let [first, ..] = read(view)[..] {
        return Some(first);
    }
    let line = Line::of(view);
    let (form, end) = form(&line, 0)?;
    let p = line.sign(end, &['(', '[']) && view.is(line.at(end + 1), Classes::P);
    let apart = p || line.sign(end, &[',', ';']);
    apart.then(|| Read { form, first: line.at(0), last: line.at(end - 1), n: None })
}

/// Passes marks that lost their raised setting (`12.4 (3.1)a`) and units.
fn skip_marks(line: &Line, after: usize) -> usize {
    let mut rest = after;
    loop {
        let at = line.at(rest);
        let token = line.view.get(at).filter(|t| t.is_word());
        let short = |at: usize| line.view.word(at).chars().count() <= 2;
        let mark = token.is_some_and(|t| {
            t.is(Classes::UNIT) || short(at) && !t.is(Classes::CI) && !line.view.any(at, &["to", "or", "n"])
        });
        let more =
            rest > after && (line.sign(rest, &[',']) && line.view.get(line.at(rest + 1)).is_some_and(|t| t.is_word()));
        if !mark && !more {
            return rest;
        }
        rest += 1;
    }
}

/// `0.62 to 0.91`, `(−4.1; −1.0)`: two limits and nothing else.
pub(super) fn limits(view: &SentenceView) -> Option<(At, At)> {
    let line = Line::of(view);
    let open = usize::from(line.sign(0, &['(', '[', '{']));
    let (lower, next) = line.number(open)?;
    let (_, next) = line.percent(next);
    if !line.sign(next, &['-', ',', ';', ':', '~', '/']) && !line.view.any(line.at(next), &["to", "and"]) {
        return None;
    }
    let (upper, next) = line.number(next + 1)?;
    let (_, next) = line.percent(next);
    let next = next + usize::from(open == 1 && line.sign(next, &[')', ']', '}']));
    (skip_marks(&line, next) >= line.kept.len()).then_some((lower, upper))
}

fn form(line: &Line, start: usize) -> Option<(Form, usize)> {
    // `(20/10)`: the whole in brackets.
    if line.sign(start, &['(', '[']) {
        let (inside, next) = form(line, start + 1)?;
        return if matches!(inside, Form::Fraction { .. } | Form::Single { .. }) {
            closed(line, next, inside)
        } else {
            None
        };
    }
    let (centre, next) = line.number(start)?;
    let (centre_percent, next) = line.percent(next);
    if line.sign(next, &['±']) {
        let (spread, next) = line.number(next + 1)?;
        let (_, next) = line.percent(next);
        return Some((Form::PlusMinus { centre: centre.printed, spread: spread.printed }, next));
    }
    if line.sign(next, &['/']) && !centre_percent {
        let (total, after) = line.number(next + 1)?;
        let whole = centre.printed.count().is_some() && total.printed.count().is_some();
        if !whole {
            return Some((Form::Single { value: centre, percent: centre_percent }, next));
        }
        let next = after;
        if line.sign(next, &['(', '[', ',', ';']) {
            let bracket = line.sign(next, &['(', '[']);
            let (percent, next) = line.number(next + 1)?;
            let (_, next) = line.percent(next);
            let closed = line.sign(next, &[')', ']']);
            let form = Form::Fraction { events: centre, total, percent: Some(percent.printed) };
            return (closed == bracket).then_some((form, next + usize::from(closed)));
        }
        return Some((Form::Fraction { events: centre, total, percent: None }, next));
    }
    if !line.sign(next, &['(', '[', '{']) || own_size(line, next).is_some() {
        return Some((Form::Single { value: centre, percent: centre_percent }, next));
    }
    let mut at = next + 1;
    if line.sign(at, &['±']) {
        let (spread, next) = line.number(at + 1)?;
        return closed(line, next, Form::PlusMinus { centre: centre.printed, spread: spread.printed });
    }
    let named = named_spread(line, at);
    if named.is_some() {
        at += 1;
        at += usize::from(line.sign(at, &['=', ':', ',', '±']));
    }
    let (inner, next) = line.number(at)?;
    if line.sign(next, &['/']) {
        let (total, next) = line.number(next + 1)?;
        let (events, whole) = (inner.printed, total.printed);
        // `180 (120/414)` holds two quartiles, `54.1 (166/307)` a fraction: the figure in front tells.
        let counts = events.count().is_some() && whole.count().is_some() && named.is_none();
        let share = 100.0 * events.value() / whole.value();
        let near = (share - centre.printed.value()).abs() < 5.0;
        let between = events.value() <= centre.printed.value() && centre.printed.value() <= whole.value();
        let form = if counts && (near || centre_percent || !between) {
            Form::Fraction { events: inner, total, percent: Some(centre.printed) }
        } else {
            Form::Pair { centre, lower: events, upper: whole }
        };
        return closed(line, next, form);
    }
    let (inner_percent, next) = line.percent(next);
    if line.sign(next, &[')', ']', '}']) {
        // `8 (7,100)` and `3.4 (0,13)` may be two limits: the comma is no decimal mark for certain.
        if let Some((a, b)) = line.view.word(inner.last).split_once(',')
            && !line.view.word(centre.last).contains(',')
        {
            let (a, b) = (Printed::parse(a)?, Printed::parse(b)?);
            let between = a.value() <= centre.printed.value() && centre.printed.value() <= b.value();
            let form = Form::Pair { centre, lower: a, upper: b };
            return if between { closed(line, next, form) } else { None };
        }
        let form = if centre_percent && !inner_percent {
            inner.printed.count()?;
            Form::PercentFirst { percent: centre.printed, events: inner }
        } else if centre_percent {
            return None;
        } else {
            Form::Bracket { centre, inner: inner.printed, percent: inner_percent, named }
        };
        return closed(line, next, form);
    }
    let to = line.view.any(line.at(next), &["to", "and"]);
    if !to && !line.sign(next, &['-', ',', ';', ':']) {
        return None;
    }
    let (upper, next) = line.number(next + 1)?;
    let (_, next) = line.percent(next);
    let (a, b) = (inner.printed, upper.printed);
    closed(line, next, Form::Pair { centre, lower: a, upper: b })
}

fn closed(line: &Line, at: usize, form: Form) -> Option<(Form, usize)> {
    line.sign(at, &[')', ']', '}']).then_some((form, at + 1))
}

/// `SD` or `SE` before the figure in brackets.
fn named_spread(line: &Line, k: usize) -> Option<SpreadKind> {
    let at = line.at(k);
    if line.view.any(at, &["sd"]) {
        Some(SpreadKind::Sd)
    } else if line.view.any(at, &["se", "sem"]) {
        Some(SpreadKind::Se)
    } else {
        None
    }
}

/// `5.2 ± 1.1 (12)`: the size behind a whole summary.
fn bare_size(line: &Line, form: &Form, k: usize) -> Option<(At, usize)> {
    if !matches!(form, Form::PlusMinus { .. }) || !line.sign(k, &['(', '[']) {
        return None;
    }
    let (n, next) = line.number(k + 1)?;
    n.printed.count().filter(|&n| n > 0)?;
    line.sign(next, &[')', ']']).then_some((n, next + 1))
}

/// A range in brackets behind a mean with its SD; gives the position after it.
fn range_behind(line: &Line, form: &Form, k: usize) -> Option<usize> {
    let summary = matches!(form, Form::PlusMinus { .. } | Form::Bracket { percent: false, .. });
    if !summary || !line.sign(k, &['(', '[']) {
        return None;
    }
    let (_, next) = line.number(k + 1)?;
    let joins = line.sign(next, &['-', ',', ';']) || line.view.any(line.at(next), &["to"]);
    let (_, next) = if joins { line.number(next + 1)? } else { return None };
    line.sign(next, &[')', ']']).then_some(next + 1)
}

/// `(n = 20)`, `, n = 20`; gives the position after it.
fn own_size(line: &Line, k: usize) -> Option<(At, usize)> {
    let open = line.sign(k, &['(', '[']);
    let at = k + usize::from(open || line.sign(k, &[',', ';']));
    if !line.view.eq(line.at(at), "n") || !line.sign(at + 1, &['=']) {
        return None;
    }
    let (n, next) = line.number(at + 2)?;
    n.printed.count()?;
    if open { line.sign(next, &[')', ']']).then_some((n, next + 1)) } else { Some((n, next)) }
}

/// A bare p with its tokens.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) struct BareP {
    pub relation: Relation,
    pub value: Option<Printed>,
    pub first: usize,
    pub last: usize,
}

/// The p-values of a cell under (or beside) a P: `0.03`, `<0.001`, `NS`, `0.02^a^`, `0.029/<0.001`.
pub(super) fn bare_p(view: &SentenceView) -> Vec<BareP> {
    let line = Line::of(view);
    let mut found = Vec::new();
    let mut k = 0;
    loop {
        let Some((p, next)) = one_p(&line, k) else { return Vec::new() };
        found.push(p);
        let mut at = next;
        // Marks fused to the figure or set behind it, in brackets or without: `0.18A`, `0.006 B`, `0.03 (a)`.
        while at < line.kept.len() {
            let i = line.at(at);
            let mark = line.sign(at, &['(', ')', ',', '+', '.', '‖', '|'])
                || view.get(i).is_some_and(|t| t.is_word()) && view.word(i).chars().count() <= 2;
            if !mark || at > next + 4 {
                break;
            }
            at += 1;
        }
        if at >= line.kept.len() {
            return found;
        }
        if !line.sign(at, &['/', ';']) {
            return Vec::new();
        }
        k = at + 1;
    }
}

/// `NS` behind a comma at the end of a cell.
pub(super) fn not_significant_at_end(view: &SentenceView) -> Option<BareP> {
    let line = Line::of(view);
    let k = (1..line.kept.len()).rev().find(|&k| line.sign(k - 1, &[',', ';', '(']))?;
    one_p(&line, k).map(|(p, _)| p).filter(|p| p.relation == Relation::NotSignificant)
}

fn one_p(line: &Line, k: usize) -> Option<(BareP, usize)> {
    let view = line.view;
    let first = line.at(k);
    // n.s., NS, ns
    if view.any(first, &["ns"]) {
        return Some((BareP { relation: Relation::NotSignificant, value: None, first, last: first }, k + 1));
    }
    if view.any(first, &["n"]) && line.sign(k + 1, &['.']) && view.any(line.at(k + 2), &["s"]) {
        let stop = k + 2 + usize::from(line.sign(k + 3, &['.']));
        let last = line.at(stop);
        return Some((BareP { relation: Relation::NotSignificant, value: None, first, last }, stop + 1));
    }
    // `P = 0.03` in a column that is headed P all the same
    let mut at = k;
    if view.is(first, Classes::P) {
        at += 1;
    }
    let mut relation = Relation::Equal;
    while let Some(TokenKind::Sign(c)) = view.get(line.at(at)).map(|t| t.kind) {
        relation = match (c, relation) {
            ('=', Relation::Less) => Relation::AtMost,
            ('=', Relation::Greater) => Relation::AtLeast,
            ('=' | '~', r) => r,
            ('<', _) => Relation::Less,
            ('>', _) => Relation::Greater,
            ('≤', _) => Relation::AtMost,
            ('≥', _) => Relation::AtLeast,
            _ => break,
        };
        at += 1;
        if at > k + 4 {
            return None;
        }
    }
    let (value, mut next) = {
        let i = line.at(at);
        (view.number(i)?, at + 1)
    };
    let mut value = value;
    let mut last = line.at(next - 1);
    // 1.2 × 10⁻⁵: the exponent is raised, so it is looked up among all tokens.
    if (line.sign(next, &['×', '·']) || view.any(line.at(next), &["x"]))
        && view.number(line.at(next + 1)) == Some(Printed::whole(10))
    {
        let i = line.at(next + 1) + 1;
        let (exponent, after) = view.signed(i)?;
        let size = exponent.count().or(exponent.negated().count()).filter(|&e| e < 400)? as i16;
        value.exponent = if exponent.negative { -size } else { size };
        last = after - 1;
        next = (next + 2..=line.kept.len()).find(|&j| line.at(j) >= after)?;
    }
    let plausible = value.value() <= 1.0 && (value.places > 0 || value.exponent < 0 || value.digits == 1);
    if !plausible {
        return None;
    }
    // A range of p-values is at least its lower end.
    let to = line.sign(next, &['-']) || view.any(line.at(next), &["to"]);
    if to
        && relation == Relation::Equal
        && let Some(upper) = view.number(line.at(next + 1)).filter(|u| u.value() <= 1.0 && u.places > 0)
        && upper.value() > value.value()
    {
        let last = line.at(next + 1);
        return Some((BareP { relation: Relation::AtLeast, value: Some(value), first, last }, next + 2));
    }
    Some((BareP { relation, value: Some(value), first, last }, next))
}
