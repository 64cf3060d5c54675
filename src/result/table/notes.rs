//! What the caption and notes of a table say of its analyses, and the marks that tie them to cells.

use super::super::{Feature, MOST_TESTS, feature};
use super::Table;
use crate::context::{Stated, Test, tests_in};
use crate::layout::Around;
use crate::reading::{SentenceView, Style};
use crate::text::Span;

/// What the caption and notes of a table say of its analyses.
#[derive(Default)]
pub(super) struct Notes {
    /// Tests, each with the mark that ties it to cells.
    pub tests: Vec<(Option<String>, Stated<Test>)>,
    /// Features said of the whole table, or of the cells with a mark.
    pub features: Vec<(Option<String>, Feature, Span)>,
}

impl Table<'_> {
    /// Reads the caption and the notes once.
    pub(super) fn notes(&self, around: &Around) -> Notes {
        let mut notes = Notes::default();
        for block in around.caption.clone().chain(around.notes.clone()) {
            let caption = around.caption.contains(&block);
            // A mark holds until the next one, also past the end of a sentence.
            let mut mark: Option<String> = None;
            for id in self.scan.of_block(block) {
                let view = self.scan.view(self.manuscript, id);
                let mut at = 0;
                for test in tests_in(&view).into_iter().take(MOST_TESTS.saturating_sub(notes.tests.len())) {
                    let (value, first, last) = test;
                    if !caption {
                        mark = (at..first).rev().find_map(|i| mark_at(&view, i)).or(mark);
                    }
                    at = first;
                    notes.tests.push((mark.clone(), Stated { value, span: view.span(first, last) }));
                }
                if !caption {
                    mark = (at..view.len()).rev().find_map(|i| mark_at(&view, i)).or(mark);
                }
                // A mark in the same sentence ties what follows to its cells; one further back may not.
                let tied = |i: usize| {
                    let from = (0..i).rev().take_while(|&k| !view.sign(k, ';')).find_map(|k| mark_at(&view, k));
                    from.filter(|_| !caption)
                };
                let words = feature::of_words(&view).into_iter().filter(|&(f, _)| {
                    matches!(f, Feature::Adjusted | Feature::Imputed | Feature::Transformed | Feature::Corrected)
                });
                notes.features.extend(words.map(|(f, span)| (tied(view.token_at(span.start)), f, span)));
                if let Some(i) = (0..view.len()).find(|&i| view.any(i, &["paired", "within-group", "intragroup"])) {
                    notes.features.push((tied(i), Feature::Paired, view.span(i, i)));
                }
            }
        }
        notes
    }

    /// The footnote marks of a cell.
    pub(super) fn marks(&self, view: &SentenceView) -> Vec<String> {
        let fused = |i: usize| i > 0 && view.number(i - 1).is_some() && view.word(i).len() == 1;
        (0..view.len())
            .filter_map(|i| {
                mark_at(view, i).or_else(|| {
                    (view.get(i).is_some_and(|t| t.is_word()) && fused(i)).then(|| view.word(i).to_lowercase())
                })
            })
            .collect()
    }
}

/// A footnote mark at a token: raised, or one of the signs that serve for it.
fn mark_at(view: &SentenceView, i: usize) -> Option<String> {
    let raised = view.style(i) == Style::Superscript;
    let sign = view.signs(i, &['*', '†', '‡', '§', '¶', '#', '$', '∗']);
    (raised || sign).then(|| {
        // `**` is another mark than `*`.
        let same = |k: usize| view.word(k) == view.word(i) && !view.spaced(k);
        let before = (0..i).rev().take_while(|&k| same(k + 1) && view.word(k) == view.word(i)).count();
        view.word(i).to_lowercase().repeat(before + 1)
    })
}

pub(super) fn tests_of(view: &SentenceView) -> Vec<Stated<Test>> {
    tests_in(view).into_iter().map(|(value, a, b)| Stated { value, span: view.span(a, b) }).collect()
}

/// The features that a label or header shows. "Baseline" in a label names a time, not a paired analysis.
pub(super) fn of_label(view: &SentenceView) -> Vec<(Feature, Span)> {
    let mut found: Vec<(Feature, Span)> = feature::of_words(view);
    let from_baseline =
        (0..view.len()).any(|i| view.any(i, &["from", "versus", "vs"]) && view.any(i + 1, &["baseline"]));
    let at = |span: Span| view.token_at(span.start);
    found.retain(|&(f, span)| f != Feature::Paired || from_baseline || !view.eq(at(span), "baseline"));
    found
}
