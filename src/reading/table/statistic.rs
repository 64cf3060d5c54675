//! Test statistics whose symbol and degrees of freedom stand over their column or before their row.

use super::super::sentence::SentenceView;
use super::super::{Figure, Inference, Relation, Statistic, Symbol};
use super::cell::{self, Form};
use crate::printed::Printed;

/// The symbol that a head names, with the degrees of freedom that stand with it: `F(1, 146)`, `t`, `χ²`.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub(super) struct Head {
    pub symbol: Option<Symbol>,
    pub df1: Option<Figure>,
    pub df2: Option<Figure>,
    /// `t/χ²`: the symbol for rows of counts.
    pub of_counts: Option<Symbol>,
}

impl Head {
    /// The symbol for a row that holds counts, or none.
    pub fn settled(self, counts: bool) -> Head {
        Head { symbol: self.of_counts.filter(|_| counts).or(self.symbol), ..self }
    }

    /// What a head says; the last symbol counts.
    pub fn of(view: &SentenceView) -> Head {
        let mut found = Head::default();
        for i in 0..view.len() {
            let Some(symbol) = symbol(view, i) else { continue };
            // `t/χ²`, `χ²/t`: the one for means, the other for counts.
            if let Some(before) = found.symbol.filter(|_| (i.saturating_sub(2)..i).any(|k| view.sign(k, '/'))) {
                let (means, of_counts) = if before == Symbol::ChiSquared { (symbol, before) } else { (before, symbol) };
                if of_counts == Symbol::ChiSquared && means != of_counts {
                    return Head { symbol: Some(means), of_counts: Some(of_counts), ..Head::default() };
                }
            }
            found = Head { symbol: Some(symbol), ..Head::default() };
            let figure = |at: usize| {
                let printed = view.number(at)?;
                Some(Figure::inferred(printed, Inference::Header, view.span(at, at)))
            };
            let open = (i + 1..i + 4).find(|&k| view.signs(k, &['(', '[']));
            // `F(1,146)`: the comma may have been taken for that of thousands.
            let both = open.and_then(|open| {
                let (a, b) = view.word(open + 1).split_once(',')?;
                let span = view.span(open + 1, open + 1);
                let figure = |text: &str| Some(Figure::inferred(Printed::parse(text)?, Inference::Header, span));
                Some((figure(a)?, figure(b)?))
            });
            if let Some((df1, df2)) = both {
                (found.df1, found.df2) = (Some(df1), Some(df2));
            } else if let Some(open) = open
                && let Some(df1) = figure(open + 1)
            {
                found.df1 = Some(df1);
                if view.signs(open + 2, &[',', ';']) {
                    found.df2 = figure(open + 3);
                }
            }
        }
        found
    }
}

fn symbol(view: &SentenceView, i: usize) -> Option<Symbol> {
    let word = view.word(i);
    Some(match word {
        "t" | "T" => Symbol::T,
        "F" | "f" => Symbol::F,
        "z" | "Z" => Symbol::Z,
        "U" => Symbol::U,
        "H" => Symbol::H,
        "ρ" | "rho" | "Rho" | "rs" => Symbol::Rho,
        "r" if (0..i).any(|k| view.any(k, &["spearman", "spearman’s", "spearman's"])) => Symbol::Rho,
        "r" if i > 0 || view.len() == 1 => Symbol::R,
        "χ2" | "X2" | "x2" | "chi2" | "Chi2" => Symbol::ChiSquared,
        "χ" | "Χ" => Symbol::ChiSquared,
        "X" | "x" if view.number(i + 1).is_some_and(|n| n.count() == Some(2)) => Symbol::ChiSquared,
        _ if view.any(i, &["chi"]) => Symbol::ChiSquared,
        _ => return None,
    })
}

/// The statistic of a cell, and how it stands to its figure.
pub(super) fn read(view: &SentenceView, head: Head, df: (Option<Figure>, Option<Figure>)) -> Option<Statistic> {
    let symbol = head.symbol?;
    let relation = match (0..view.len()).find_map(|i| match view.get(i)?.kind {
        super::super::TokenKind::Sign(c @ ('<' | '>' | '≤' | '≥')) => Some(c),
        _ => None,
    }) {
        Some('<') => Relation::Less,
        Some('>') => Relation::Greater,
        Some('≤') => Relation::AtMost,
        Some('≥') => Relation::AtLeast,
        _ => Relation::Equal,
    };
    let bound = usize::from(relation != Relation::Equal);
    let cut = SentenceView { tokens: view.tokens.get(bound..)?, ..*view };
    let [read] = cell::read(&cut)[..] else { return None };
    let Form::Single { value, percent: false } = read.form else { return None };
    if matches!(symbol, Symbol::F | Symbol::ChiSquared | Symbol::U | Symbol::H) && value.printed.negative {
        return None;
    }
    // `693` for 0.693: no normal deviate.
    if symbol == Symbol::Z && value.printed.value().abs() > 60.0 {
        return None;
    }
    if matches!(symbol, Symbol::R | Symbol::Rho) && value.printed.value().abs() > 1.0 {
        return None;
    }
    Some(Statistic {
        span: cut.span(value.first, value.last),
        sentence: view.id,
        symbol,
        df1: df.0.or(head.df1),
        df2: df.1.or(head.df2),
        value: value.printed,
        relation,
        n: None,
    })
}
