//! Lists of figures that share a sign, a name or a bracket: `12.1, 14.8 and 8.2%`, `6 and 3 hives (12.5% and 7.1%)`,
//! "the median was 8.4, 3.1 and 1.2 years for each".

use super::super::lexicon::Classes;
use super::super::sentence::SentenceView;
use super::super::token::Style;
use super::count::{count_at, percent_at, whole};
use super::{Draft, Setting, bare, empty, share};
use crate::printed::Printed;

/// More members than a trial has arms.
const MOST: usize = 8;

/// Appends the members of such lists; they are read before single figures, which would break them up.
pub(super) fn read(view: &SentenceView, setting: &Setting, taken: &mut [bool], drafts: &mut Vec<Draft>) {
    let mut i = 0;
    while i < view.len() {
        if taken[i] || !(view.number(i).is_some() || view.is(i, Classes::NUMBER_WORD)) {
            i += 1;
            continue;
        }
        let found = counts_and_percents(view, i, taken).or_else(|| plain(view, i, setting, taken));
        let Some(found) = found else {
            i += 1;
            continue;
        };
        let end = found.iter().map(|d| d.last).max().unwrap_or(i);
        taken[i..=end].fill(true);
        drafts.extend(found);
        i = end + 1;
    }
}

/// The token after what joins two members of a list at `at`.
fn joint(view: &SentenceView, at: usize) -> Option<usize> {
    if view.sign(at, ',') {
        return Some(at + 1 + usize::from(view.is(at + 1, Classes::AND)));
    }
    let dot = usize::from(view.is(at, Classes::VERSUS) && view.sign(at + 1, '.'));
    (view.is(at, Classes::AND) || view.is(at, Classes::VERSUS)).then_some(at + 1 + dot)
}

/// Figures without sign or unit joined to a list, with the token of each; gives the token after the last.
fn figures(view: &SentenceView, i: usize) -> Option<(Vec<(Printed, usize)>, usize)> {
    let plain = |k: usize| view.number(k).filter(|_| view.style(k) == Style::Plain);
    let mut members = vec![(plain(i)?, i)];
    let mut next = i + 1;
    while members.len() < MOST {
        let Some(at) = joint(view, next) else { break };
        let Some(figure) = plain(at) else { break };
        members.push((figure, at));
        next = at + 1;
    }
    (members.len() >= 2).then_some((members, next))
}

/// `12.1, 14.8 and 8.2%`; "was 8.4, 3.1 and 1.2 years".
fn plain(view: &SentenceView, i: usize, setting: &Setting, taken: &[bool]) -> Option<Vec<Draft>> {
    let (members, next) = figures(view, i)?;
    let glued = i > 0 && !view.spaced(i) && view.signs(i - 1, &['-', '/', '.', '±']);
    if glued || taken[i..next].iter().any(|&t| t) {
        return None;
    }
    let (_, last) = *members.last()?;
    if let Some((_, after)) = percent_at(view, last) {
        let shares = members.iter().all(|m| m.0.value() <= 100.0)
            && members.iter().all(|m| m.0.places.abs_diff(members[0].0.places) <= 1)
            && share::told(view, i, after, setting, taken)
            && !view.is(i.wrapping_sub(1), Classes::LABEL);
        if !shares {
            return None;
        }
        let member = |&(percent, at): &(Printed, usize)| {
            let end = if at == last { after - 1 } else { at };
            let mut group = empty(view, at, end);
            group.percent = Some(percent);
            Draft { first: at, last: end, group }
        };
        return Some(members.iter().map(member).collect());
    }
    let name = bare::name(view, i)?;
    // A spread or a unit of its own behind the last member shows that the list is another one.
    let open = (next..next + 4).any(|k| {
        view.sign(k, '±') || view.signs(k, &['(', '[']) && (taken.get(k) == Some(&true) || view.signed(k + 1).is_some())
    });
    let other = open || view.signs(next, &['-', '/', '%', '±', '=']) || view.any(next, &["to", "of", "times"]);
    if other || members.iter().any(|m| m.0.places != members[0].0.places) {
        return None;
    }
    let median = view.is(name, Classes::MEDIAN);
    Some(members.iter().map(|&(value, at)| bare::draft(view, at, at, value, median)).collect())
}

/// `6 and 3 hives (12.5% and 7.1%)`: as many percentages in the bracket as counts before it.
fn counts_and_percents(view: &SentenceView, i: usize, taken: &[bool]) -> Option<Vec<Draft>> {
    let (first, mut next) = count_at(view, i)?;
    let mut counts = vec![(first, i, next)];
    while counts.len() < MOST {
        let Some(at) = joint(view, next) else { break };
        let Some((count, after)) = count_at(view, at) else { break };
        counts.push((count, at, after));
        next = after;
    }
    if counts.len() < 2 {
        return None;
    }
    let open = (next..next + 5).find(|&k| !view.get(k).is_some_and(|t| t.is_word()))?;
    // "the 20 and 40 mg groups (38.2% and 41.7%)" are doses.
    if !view.signs(open, &['(', '[']) || view.is(next, Classes::UNIT) {
        return None;
    }
    let mut percents: Vec<Printed> = Vec::new();
    let mut at = open + 1;
    let last = loop {
        let percent = view.number(at)?;
        percents.push(percent);
        let after = percent_at(view, at).map_or(at + 1, |p| p.1);
        if view.signs(after, &[')', ']']) {
            // The last one has the sign, if none else.
            percent_at(view, at)?;
            break after;
        }
        if view.sign(after, ',') && view.is(after + 1, Classes::RESPECTIVELY) {
            percent_at(view, at)?;
            break after - 1;
        }
        at = joint(view, after)?;
    };
    if percents.len() != counts.len()
        || taken[i..=last].iter().any(|&t| t)
        || percents.iter().any(|p| p.value() > 100.0)
    {
        return None;
    }
    let member = |(&(count, from, to), &percent): (&(u64, usize, usize), &Printed)| {
        let mut group = empty(view, i, last);
        group.events = Some(whole(view, count, from, to - 1));
        group.percent = Some(percent);
        Draft { first: from, last, group }
    };
    Some(counts.iter().zip(&percents).map(member).collect())
}
