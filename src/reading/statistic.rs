//! Test statistics: `t(28) = 2.20`, `F~1,38~ = 4.35`, `χ²(1, n = 48) = 4.7`, `χ2 = 39.4, df = 2`, `Z = −2·9`,
//! `r = .45`, `t ranges from −1.49 to 1.5`.

use super::lexicon::Classes;
use super::sentence::SentenceView;
use super::token::{Style, TokenKind};
use super::{Figure, Relation, Statistic, Symbol};
use crate::printed::Printed;
use crate::text::Span;

/// Degrees of freedom and sample size as printed with a statistic.
#[derive(Clone, Copy, Debug, Default)]
struct Freedom {
    df1: Option<Figure>,
    df2: Option<Figure>,
    n: Option<Figure>,
}

/// Appends the statistics of a sentence; marks the tokens they take in `taken`.
pub fn read(view: &SentenceView, taken: &mut [bool], out: &mut Vec<Statistic>) {
    let mut i = 0;
    while i < view.len() {
        let next = if taken[i] { None } else { statistic(view, i, taken, out) };
        i = next.unwrap_or(i + 1);
    }
}

/// The symbol at token `i`, its glued degrees of freedom, and the token after it.
fn symbol(view: &SentenceView, i: usize) -> Option<(Symbol, Option<u64>, usize)> {
    let token = view.get(i)?;
    if !token.is_word() || token.style != Style::Plain {
        return None;
    }
    let word = view.word(i);
    let two = |at: usize| view.number(at) == Some(Printed::whole(2));
    let squared = |at: usize| two(at) && view.style(at) == Style::Superscript;
    let after_value_word = |mut at: usize| {
        // `χ²’s`, `t's`
        if view.signs(at, &['\'', '’']) && view.eq(at + 1, "s") {
            at += 2;
        }
        if view.sign(at, '-') && view.any(at + 1, &["value", "values", "test", "statistic", "ratio", "tests"]) {
            at += 2;
        } else if view.any(at, &["value", "statistic", "test", "statistics"]) {
            at += 1;
        }
        at
    };
    let split = word.find(|c: char| c.is_ascii_digit()).unwrap_or(word.len());
    let (letters, digits) = word.split_at(split);
    let glued: Option<u64> = if digits.is_empty() { None } else { digits.parse().ok() };
    if !digits.is_empty() && glued.is_none() {
        return None;
    }
    let symbol = match letters {
        "t" | "T" => Symbol::T,
        "F" => Symbol::F,
        "z" | "Z" => {
            let next = i + 1 + usize::from(view.sign(i + 1, '-'));
            if view.any(next, &["score", "scores"]) {
                // A z score is a measurement, unless its p stands right behind it: `z score 0.26, p = 0.79`.
                let at = next + 1 + usize::from(view.signs(next + 1, &['=', ':']));
                let tested = view
                    .signed(at)
                    .is_some_and(|(_, after)| view.signs(after, &[',', ';']) && view.is(after + 1, Classes::P));
                return tested.then_some((Symbol::Z, None, next + 1));
            }
            Symbol::Z
        }
        "U" => Symbol::U,
        "W" => Symbol::W,
        "H" | "Kw" | "KW" => Symbol::H,
        "Q" => Symbol::Q,
        "rho" | "ρ" | "Rho" | "rs" => Symbol::Rho,
        "τ" | "tau" => Symbol::Tau,
        "Λ" | "λ" => Symbol::Other,
        "r" | "R" => {
            // R² and r² are shares of variance.
            if digits == "2" || squared(i + 1) {
                return None;
            }
            if view.style(i + 1) == Style::Subscript && view.eq(i + 1, "s") {
                return Some((Symbol::Rho, None, i + 2));
            }
            Symbol::R
        }
        "χ" | "Χ" | "X" | "x" | "chi" | "Chi" | "CHI" | "ᵪ" | "𝜒" => {
            let mut at = i + 1;
            if digits == "2" {
                return Some((Symbol::ChiSquared, None, after_value_word(at)));
            }
            if !digits.is_empty() {
                return None;
            }
            if view.sign(at, '-') {
                at += 1;
            }
            if view.any(at, &["square", "squared", "sq"]) {
                return Some((Symbol::ChiSquared, None, after_value_word(at + 1)));
            }
            let greek = !matches!(letters, "X" | "x" | "chi" | "Chi" | "CHI");
            // χ~1~^2^, χ(2)
            if view.style(at) == Style::Subscript && squared(at + 1) {
                let df = view.number(at).and_then(Printed::count);
                return Some((Symbol::ChiSquared, df, at + 2));
            }
            if squared(at) || (greek && two(at) && !view.spaced(at)) {
                return Some((Symbol::ChiSquared, None, after_value_word(at + 1)));
            }
            return None;
        }
        _ => return None,
    };
    if glued.is_some() && !matches!(symbol, Symbol::T | Symbol::F) {
        return None;
    }
    let correlation = matches!(symbol, Symbol::R | Symbol::Rho | Symbol::Tau);
    let next = if correlation { i + 1 } else { after_value_word(i + 1) };
    Some((symbol, glued, next))
}

fn statistic(view: &SentenceView, i: usize, taken: &mut [bool], out: &mut Vec<Statistic>) -> Option<usize> {
    if let Some(next) = named_in_words(view, i, taken, out) {
        return Some(next);
    }
    let (symbol, glued, mut at) = symbol(view, i)?;
    // `vitamin-t`, `log-F`
    if i > 0 && view.sign(i - 1, '-') && !view.spaced(i) && !view.spaced(i - 1) && i > 1 && view.get(i - 2)?.is_word() {
        return None;
    }
    let mut freedom = Freedom::default();
    if let Some(df) = glued {
        freedom.df1 = Some(Figure::at(Printed::whole(df), view.span(i, i)));
        // F1,38 = 4.35
        if symbol == Symbol::F && view.sign(at, ',') && view.number(at + 1).is_some() {
            freedom.df2 = figure(view, at + 1);
            at += 2;
        }
    }
    if view.style(at) == Style::Subscript {
        let end = (at..view.len()).find(|&k| view.style(k) != Style::Subscript).unwrap_or(view.len());
        // Another sign than df may be set low (`t~max~`): then nothing is known of it.
        freedom = df_list(view, at, end).unwrap_or(freedom);
        at = end;
    }
    if symbol == Symbol::ChiSquared
        && view.number(at) == Some(Printed::whole(2))
        && view.style(at) == Style::Superscript
    {
        at += 1;
    }
    if view.signs(at, &['(', '[']) {
        let close = (at + 1..(at + 12).min(view.len())).find(|&k| view.signs(k, &[')', ']']))?;
        freedom = df_list(view, at + 1, close)?;
        at = close + 1;
    }
    if view.any(at, &["ranges", "ranged", "ranging", "range"])
        || view.any(at, &["values"]) && view.any(at + 1, &["ranged"])
    {
        return range_of(view, i, at, symbol, taken, out);
    }
    // `rs. = 0.46`, `chi-square for trend = 11.3`
    if symbol == Symbol::Rho && view.sign(at, '.') && !view.spaced(at) {
        at += 1;
    }
    if symbol == Symbol::ChiSquared && view.eq(at, "for") {
        at = (at..(at + 10).min(view.len())).find(|&k| view.sign(k, '='))?;
    }
    // `z score 0.26, p = 0.79`
    if symbol == Symbol::Z && view.any(at - 1, &["score", "scores"]) && view.signed(at).is_some() {
        at -= 1;
    }
    let relation = match view.get(at)?.kind {
        TokenKind::Word => Relation::Equal,
        TokenKind::Sign('=' | '~') => Relation::Equal,
        TokenKind::Sign('<') => Relation::Less,
        TokenKind::Sign('>') => Relation::Greater,
        TokenKind::Sign('≤') => Relation::AtMost,
        TokenKind::Sign('≥') => Relation::AtLeast,
        _ => return None,
    };
    let (value, next) = view.signed(at + 1)?;
    let last = next - 1;
    if !plausible(view, symbol, value, relation, &freedom, last) {
        return None;
    }
    if freedom.df1.is_none() {
        let after = freedom_after(view, next);
        freedom.df1 = after.df1;
        freedom.df2 = after.df2;
        freedom.n = freedom.n.or(after.n);
    }
    taken[i..=last].fill(true);
    out.push(Statistic {
        span: view.span(i, last),
        sentence: view.id,
        symbol,
        df1: freedom.df1,
        df2: freedom.df2,
        value,
        relation,
        n: freedom.n,
    });
    Some(next)
}

/// Times, weights and lengths share the letters.
fn plausible(view: &SentenceView, symbol: Symbol, v: Printed, relation: Relation, f: &Freedom, last: usize) -> bool {
    let with_df = f.df1.is_some();
    let after = last + 1;
    if view.sign(after, '%') || view.sign(after, '±') {
        return false;
    }
    let unit = view.get(after).is_some_and(|t| t.is_word())
        && view.any(
            after,
            &[
                "h", "hr", "hrs", "hours", "min", "s", "sec", "days", "weeks", "months", "years", "kg", "g", "mg",
                "cm", "mm", "w", "k", "c",
            ],
        );
    match symbol {
        Symbol::R | Symbol::Rho | Symbol::Tau => {
            v.places > 0 && v.value().abs() < 2.0 && relation == Relation::Equal && !unit
        }
        Symbol::U | Symbol::W => !unit && relation == Relation::Equal,
        _ => with_df || (!unit && (v.places > 0 || matches!(relation, Relation::Less | Relation::Greater))),
    }
}

/// `F(1,122)`: what a number scanner takes for one number with a comma is two.
fn figure(view: &SentenceView, at: usize) -> Option<Figure> {
    view.number(at).map(|printed| Figure::at(printed, view.span(at, at)))
}

fn split_pair(view: &SentenceView, at: usize) -> Option<(Figure, Figure)> {
    let text = view.word(at);
    let (a, b) = text.split_once(',')?;
    let (first, second) = (Printed::parse(a)?, Printed::parse(b)?);
    let token = view.get(at)?;
    let span = |from: usize, to: usize| Span {
        block: view.block,
        start: token.start + from as u32,
        end: token.start + to as u32,
    };
    Some((Figure::at(first, span(0, a.len())), Figure::at(second, span(a.len() + 1, text.len()))))
}

/// Degrees of freedom in brackets or set low: `28`, `1, 38`, `df = 2`, `1, n = 48`.
fn df_list(view: &SentenceView, from: usize, to: usize) -> Option<Freedom> {
    let mut f = Freedom::default();
    let mut k = from;
    let mut is_n = false;
    while k < to {
        match view.get(k)?.kind {
            TokenKind::Number(_) => {
                if is_n {
                    f.n = figure(view, k);
                    is_n = false;
                } else if let Some((a, b)) = split_pair(view, k) {
                    (f.df1, f.df2) = (Some(a), Some(b));
                } else if f.df1.is_none() {
                    f.df1 = figure(view, k);
                } else if f.df2.is_none() {
                    f.df2 = figure(view, k);
                } else {
                    return None;
                }
            }
            TokenKind::Word if view.is(k, Classes::N) => is_n = true,
            TokenKind::Word if view.any(k, &["df", "d", "f", "dfs"]) => {}
            // brackets may be set low with their figures
            TokenKind::Sign('=' | ',' | ';' | '.' | ':' | '(' | ')' | '[' | ']') => {}
            _ => return None,
        }
        k += 1;
    }
    f.df1.map(|_| f)
}

/// `, df = 28`, `(df = 1)`, `; d.f. 1`, `, 1 df`, `on 1 degree of freedom`, `, n = 60`.
fn freedom_after(view: &SentenceView, from: usize) -> Freedom {
    let mut f = Freedom::default();
    let mut k = from;
    while k < (from + 10).min(view.len()) {
        if view.signs(k, &['.']) && view.spaced(k + 1) {
            break;
        }
        let df_word = view.any(k, &["df", "dfs"]) || (view.eq(k, "d") && view.sign(k + 1, '.') && view.eq(k + 2, "f"));
        let degrees = view.any(k, &["degree", "degrees"]) && view.eq(k + 2, "freedom");
        if df_word || degrees {
            let before = k.checked_sub(1).and_then(|b| if b >= from { view.number(b).map(|_| b) } else { None });
            let mut at = k + if view.any(k, &["df", "dfs"]) { 1 } else { 3 };
            while view.signs(at, &['=', '.', ':', '(']) {
                at += 1;
            }
            if let Some(b) = before.filter(|_| view.number(at).is_none() || degrees) {
                f.df1 = figure(view, b);
            } else if let Some((a, b)) = split_pair(view, at) {
                (f.df1, f.df2) = (Some(a), Some(b));
            } else if view.number(at).is_some() {
                f.df1 = figure(view, at);
                if view.sign(at + 1, ',') && view.number(at + 2).is_some_and(|p| p.count().is_some()) {
                    f.df2 = figure(view, at + 2);
                }
            }
            break;
        }
        if view.is(k, Classes::N) && view.sign(k + 1, '=') && view.number(k + 2).is_some() {
            f.n = figure(view, k + 2);
        }
        // The next result's own figures begin.
        if matches!(view.word(k), "t" | "F" | "r" | "z" | "Z" | "χ") {
            break;
        }
        k += 1;
    }
    f
}

/// `t ranges from −1.49 to 1.5`: both ends.
fn range_of(
    view: &SentenceView,
    first: usize,
    mut at: usize,
    symbol: Symbol,
    taken: &mut [bool],
    out: &mut Vec<Statistic>,
) -> Option<usize> {
    while view.any(at, &["ranges", "ranged", "ranging", "range", "values", "from", "between"]) {
        at += 1;
    }
    let (a, next) = view.signed(at)?;
    if !(view.eq(next, "to") || view.is(next, Classes::AND) || view.sign(next, '-')) {
        return None;
    }
    let (b, end) = view.signed(next + 1)?;
    for (value, from, to) in [(a, first, next - 1), (b, next + 1, end - 1)] {
        taken[from..=to].fill(true);
        out.push(Statistic {
            span: view.span(from, to),
            sentence: view.id,
            symbol,
            df1: None,
            df2: None,
            value,
            relation: Relation::Equal,
            n: None,
        });
    }
    Some(end)
}

/// "the correlation coefficient was 0.40", "log rank 0.24 df 1".
fn named_in_words(view: &SentenceView, i: usize, taken: &mut [bool], out: &mut Vec<Statistic>) -> Option<usize> {
    // Both names begin with a word of a class, which is cheaper to see than the word.
    let correlation = view.is(i, Classes::ASSOCIATION) && view.any(i, &["correlation"]);
    let (symbol, mut at, limit) = if correlation && view.any(i + 1, &["coefficient", "coefficients"]) {
        (Symbol::R, i + 2, i + 26)
    } else if view.is(i, Classes::FEATURE)
        && view.eq(i, "log")
        && (view.eq(i + 1, "rank") || (view.sign(i + 1, '-') && view.eq(i + 2, "rank")))
    {
        (Symbol::ChiSquared, i + 2 + usize::from(view.sign(i + 1, '-')), i + 6)
    } else {
        return None;
    };
    let first = at;
    if symbol == Symbol::R {
        // Words up to the verb, then the figure.
        while at < limit
            && !view.any(at, &["was", "is", "of", "were"])
            && view.get(at).is_some_and(|t| t.kind != TokenKind::Sign('.'))
        {
            if view.signs(at, &['=', ':']) {
                break;
            }
            at += 1;
        }
        while at < limit && view.number(at + 1).is_none() && !view.sign(at + 1, '-') {
            if view.get(at).is_none_or(|t| matches!(t.kind, TokenKind::Sign('(' | ')'))) {
                return None;
            }
            at += 1;
        }
        at += 1;
    } else if view.any(at, &["test", "statistic"]) {
        at += 1;
    }
    if view.signs(at, &['=', ':']) {
        at += 1;
    }
    let (value, next) = view.signed(at)?;
    let good = match symbol {
        Symbol::R => value.value().abs() <= 1.0 && value.places >= 1,
        _ => value.places > 0 && freedom_after(view, next).df1.is_some(),
    };
    if !good || taken[at] || view.sign(next, '%') {
        return None;
    }
    let f = freedom_after(view, next);
    taken[first..next].fill(true);
    out.push(Statistic {
        span: view.span(at, next - 1),
        sentence: view.id,
        symbol,
        df1: f.df1,
        df2: f.df2,
        value,
        relation: Relation::Equal,
        n: f.n,
    });
    Some(next)
}
