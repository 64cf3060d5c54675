//! Group summaries in running text: a mean or median with its spread, a count with its total and percent.

mod count;
mod label;
mod mean;
mod size;
pub mod total;
mod versus;

pub use mean::Declared;

use super::sentence::SentenceView;
use super::{Figure, Group, SpreadKind};
use crate::manuscript::SectionKind;
use crate::printed::Printed;

/// What a group reading needs to know besides its sentence.
#[derive(Clone, Copy, Debug)]
pub struct Setting {
    /// Bare percentages are read as groups only where results are told.
    pub section: SectionKind,
    /// What the paragraph says its figures are.
    pub declared: Declared,
}

/// A group before its size and label are known, with the tokens it takes.
#[derive(Clone, Debug)]
struct Draft {
    first: usize,
    last: usize,
    group: Group,
}

/// Appends the groups of a sentence, in order; passes over tokens that other readings took.
pub fn read(view: &SentenceView, setting: &mut Setting, taken: &mut [bool], out: &mut Vec<Group>) {
    setting.declared.note(view);
    let mut drafts: Vec<Draft> = Vec::new();
    let mut i = 0;
    while i < view.len() {
        if taken[i] {
            i += 1;
            continue;
        }
        let draft = mean::read(view, i, setting, taken).or_else(|| count::read(view, i, setting, taken));
        match draft {
            Some(d) => {
                taken[d.first..=d.last].fill(true);
                i = d.last + 1;
                drafts.push(d);
            }
            None => i += 1,
        }
    }
    versus::read(view, taken, &mut drafts);
    drafts.sort_by_key(|d| d.first);
    count::soften(view, &mut drafts);
    size::assign(view, &mut drafts);
    label::assign(view, &mut drafts);
    out.extend(drafts.into_iter().map(|d| d.group));
}

fn empty(view: &SentenceView, first: usize, last: usize) -> Group {
    Group::new(view.span(first, last), view.id)
}

fn with_spread(mut group: Group, kind: SpreadKind, spread: &[Printed]) -> Group {
    group.spread_kind = Some(kind);
    group.spread = spread.to_vec();
    group
}

fn printed(view: &SentenceView, value: Printed, first: usize, last: usize) -> Figure {
    Figure { printed: value, origin: super::Origin::Printed(view.span(first, last)) }
}
