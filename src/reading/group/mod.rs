//! Group summaries in running text: a mean or median with its spread, a count with its total and percent.

pub mod arm;
mod bare;
mod count;
mod label;
mod limits;
mod list;
mod mean;
pub mod named;
mod share;
mod size;
pub mod total;
mod versus;

pub use mean::Declared;

use super::lexicon::Classes;
use super::sentence::SentenceView;
use super::{Estimate, Figure, Group, IntervalReading, SpreadKind};
use crate::manuscript::SectionKind;
use crate::printed::Printed;

/// What a group reading needs to know besides its sentence.
#[derive(Clone, Copy, Debug)]
pub struct Setting {
    /// Bare percentages are read as groups only where results are told.
    pub section: SectionKind,
    /// What the paragraph says its figures are.
    pub declared: Declared,
    /// The paragraph told a mean (or, if true, a median) with its interval.
    pub limits: Option<bool>,
}

/// A group before its size and label are known, with the tokens it takes.
#[derive(Clone, Debug)]
struct Draft {
    first: usize,
    last: usize,
    group: Group,
}

/// Appends the groups of a sentence, in order; passes over tokens that other readings took. `intervals` and `estimates`
/// are those of the sentence. Groups that are named with their sizes go to `arms` as well.
pub fn read(
    view: &SentenceView,
    setting: &mut Setting,
    intervals: &[IntervalReading],
    estimates: &[Estimate],
    taken: &mut [bool],
    arms: &mut Vec<arm::SizedArm>,
    out: &mut Vec<Group>,
) {
    if !view.tokens.iter().any(|t| t.number().is_some() || t.is(Classes::NUMBER_WORD)) {
        return;
    }
    setting.declared.note(view);
    let mut drafts: Vec<Draft> = Vec::new();
    list::read(view, setting, taken, &mut drafts);
    let listed = drafts.len();
    let mut i = 0;
    while i < view.len() {
        if taken[i] {
            i += 1;
            continue;
        }
        let before = drafts[listed..].last();
        let draft = mean::read(view, i, setting, taken, before).or_else(|| count::read(view, i, setting, taken));
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
    limits::read(view, setting, intervals, estimates, &mut drafts);
    limits::of_shares(view, intervals, &mut drafts);
    count::none_beside(view, taken, &mut drafts);
    drafts.sort_by_key(|d| d.first);
    count::soften(view, &mut drafts);
    size::assign(view, &mut drafts);
    label::assign(view, &mut drafts);
    arm::read(view, taken, &mut drafts, arms);
    drafts.sort_by_key(|d| d.first);
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
    Figure::at(value, view.span(first, last))
}

#[cfg(test)]
mod tests;
