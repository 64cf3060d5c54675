//! What a check found, before the rule's words and the level policy make a query of it.

use super::level::Weight;
use crate::query::{Explanation, RepairKind};
use crate::text::Span;

/// How far a finding reaches.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Scope {
    /// One printed figure or phrase: it raises one query, whatever the number of rules it meets.
    Figure,
    /// A section or the whole manuscript; the place is only where to begin.
    Wide,
}

#[derive(Clone, Debug)]
pub struct Draft {
    pub kind: RepairKind,
    pub at: Span,
    pub text: String,
    pub needs_confirmation: bool,
}

#[derive(Clone, Debug)]
pub struct Finding {
    pub scope: Scope,
    /// The place; for a wide finding, all its occurrences in reading order.
    pub at: Vec<Span>,
    pub weight: Weight,
    /// What stands there and what was found, in one sentence.
    pub says: String,
    pub working: Option<String>,
    pub related: Vec<(Span, String)>,
    pub explanations: Vec<Explanation>,
    pub repair: Option<Draft>,
    pub results: Vec<usize>,
    /// Words for the placeholders of `asks`, beside `quote` and `section`, which every finding has.
    pub fills: Vec<(&'static str, String)>,
    /// What the fingerprint is made of, beside the rule: figures as printed …
    pub figures: Vec<Span>,
    /// … and labels, folded later.
    pub labels: Vec<String>,
}

impl Finding {
    /// About one figure or phrase.
    pub fn at(span: Span, weight: Weight, says: String) -> Finding {
        Finding { figures: vec![span], ..Finding::wide(vec![span], weight, says, Vec::new()) }.scoped(Scope::Figure)
    }

    /// About a section or a manuscript, told apart by `labels`.
    pub fn wide(at: Vec<Span>, weight: Weight, says: String, labels: Vec<String>) -> Finding {
        Finding {
            scope: Scope::Wide,
            at,
            weight,
            says,
            working: None,
            related: Vec::new(),
            explanations: Vec::new(),
            repair: None,
            results: Vec::new(),
            fills: Vec::new(),
            figures: Vec::new(),
            labels,
        }
    }

    fn scoped(self, scope: Scope) -> Finding {
        Finding { scope, ..self }
    }
}
