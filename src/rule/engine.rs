//! From the catalogue and the facts to queries, in reading order.

use super::catalogue::{Catalogue, Rule};
use super::checks;
use super::finding::{Draft, Finding, Scope};
use super::fingerprint::fingerprint;
use super::look::Look;
use super::places::Places;
use super::{Facts, level, wording};
use crate::query::{Explanation, Ground, Level, Query, Related, Repair};
use crate::text::Span;
use std::collections::HashMap;

/// A finding with the rule that made it and the level that the policy gives it.
struct Raised<'a> {
    rule: &'a Rule,
    /// Number of the rule in the catalogue, the last tie-breaker.
    order: usize,
    level: Level,
    /// In a box: thousands wait here while the queries are made, and each is let go with its query.
    finding: Box<Finding>,
}

impl Raised<'_> {
    fn place(&self) -> Span {
        self.finding.at[0]
    }

    /// Smaller is stronger.
    fn strength(&self) -> (std::cmp::Reverse<Level>, Ground, usize, Span) {
        (std::cmp::Reverse(self.level), self.finding.weight.ground, self.order, self.place())
    }

    /// The same figure, or two figures of one result of which each was recomputed from the other.
    fn same_matter(&self, other: &Raised) -> bool {
        let computed = |r: &Raised| r.finding.working.is_some();
        let leans = |a: &Raised, b: &Raised| a.finding.related.iter().any(|(s, _)| s.overlaps(b.place()));
        self.place().overlaps(other.place())
            || computed(self) && computed(other) && leans(self, other) && leans(other, self)
    }
}

/// The queries of a catalogue, in reading order.
pub fn queries(facts: &Facts, catalogue: &Catalogue) -> Vec<Query> {
    let look = &Look::new(facts);
    let (mut figures, mut wide) = (Vec::new(), Vec::new());
    for (order, rule) in catalogue.rules().iter().enumerate() {
        for finding in checks::run(&rule.check, look) {
            let level = level::level(rule.level, &finding.weight);
            let raised = Raised { rule, order, level, finding: Box::new(finding) };
            match raised.finding.scope {
                _ if raised.finding.at.is_empty() => {}
                Scope::Figure => figures.push(raised),
                Scope::Wide => wide.push(raised),
            }
        }
    }
    let (mut kept, mut places) = strongest(figures);
    for mut raised in wide {
        // Begin where no figure is queried already, so that no figure carries two queries.
        let free = raised.finding.at.iter().position(|s| places.over(*s).next().is_none());
        if let Some(i) = free {
            raised.finding.at.swap(0, i);
        }
        places.add(raised.place(), kept.len());
        kept.push(raised);
    }
    kept.sort_by_key(|r| (r.place(), r.order));
    let mut seen: HashMap<(usize, Vec<&str>, Vec<String>), usize> = HashMap::new();
    kept.into_iter()
        .map(|r| {
            let figures: Vec<&str> = r.finding.figures.iter().map(|s| look.quote(*s)).collect();
            let ordinal = seen.entry((r.order, figures.clone(), r.finding.labels.clone())).or_default();
            let first_name = r.rule.formerly.first().unwrap_or(&r.rule.id);
            let mark = fingerprint(first_name, &figures, &r.finding.labels, *ordinal);
            *ordinal += 1;
            query(look, r, mark)
        })
        .collect()
}

/// One query for each figure: the strongest; what the others asked is listed with it. Gives their
/// places, too.
fn strongest(mut raised: Vec<Raised>) -> (Vec<Raised>, Places) {
    raised.sort_by_key(Raised::strength);
    let mut kept: Vec<Raised> = Vec::new();
    let mut places = Places::default();
    for r in raised {
        // Whatever is the same matter lies at the same place or at one that this finding leans on.
        let near = r.finding.related.iter().map(|&(s, _)| s).chain([r.place()]).flat_map(|s| places.over(s));
        let same = near.filter(|&i| kept[i].same_matter(&r)).min();
        match same.map(|i| &mut kept[i]) {
            None => {
                places.add(r.place(), kept.len());
                kept.push(r);
            }
            Some(k) if k.rule.id == r.rule.id && k.place() == r.place() => {}
            Some(k) => {
                let results = r.finding.results.iter().filter(|i| !k.finding.results.contains(i));
                let results: Vec<usize> = results.copied().collect();
                k.finding.related.push((r.place(), format!("also asked about: {}", lower_first(&r.rule.title))));
                k.finding.results.extend(results);
            }
        }
    }
    (kept, places)
}

fn query(facts: &Look, raised: Raised, fingerprint: String) -> Query {
    let Raised { rule, level, finding, .. } = raised;
    let finding = *finding;
    let place = finding.at[0];
    let titles = facts.titles(place);
    let mut words = finding.fills;
    words.push(("quote", facts.shown(place)));
    words.push(("section", titles.last().cloned().unwrap_or_else(|| "this text".to_owned())));
    let mut explanations = finding.explanations;
    for says in &rule.assumes {
        explanations.push(Explanation { kind: "assumption".to_owned(), says: says.clone() });
    }
    explanations.shrink_to_fit();
    let related = finding.related.into_iter().map(|(span, part)| Related {
        location: facts.manuscript.locate(span),
        quote: wording::one_line(facts.quote(span)),
        part,
    });
    let repair = finding.repair.map(|Draft { kind, at, text, needs_confirmation }| Repair {
        kind,
        location: facts.manuscript.locate(at),
        text,
        needs_confirmation,
    });
    Query {
        rule: rule.id.clone(),
        level,
        ground: finding.weight.ground,
        location: facts.manuscript.locate(place),
        quote: wording::one_line(facts.quote(place)),
        section: titles,
        related: related.collect(),
        says: finding.says,
        working: finding.working,
        asks: wording::fill(&rule.asks, &words),
        explanations,
        repair,
        fingerprint,
        results: finding.results,
    }
}

fn lower_first(text: &str) -> String {
    // "P above 1" keeps its capital: it is the symbol.
    let mut chars = text.chars();
    match (chars.next(), chars.clone().next()) {
        (Some(first), Some(second)) if second.is_lowercase() => first.to_lowercase().chain(chars).collect(),
        _ => text.to_owned(),
    }
}
