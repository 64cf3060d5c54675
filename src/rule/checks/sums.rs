//! Arms that do not add up to the number randomised.

use crate::context::{Stated, randomised_in};
use crate::manuscript::SectionKind;
use crate::query::Ground;
use crate::reading::SentenceView;
use crate::reading::group::arm::{self, SizedArm};
use crate::reading::lexicon::{self, Classes};
use crate::rule::finding::Finding;
use crate::rule::level::{Off, Weight};
use crate::rule::look::Look;

/// Any other count of this size in the sentence may be of an arm that was not read, or of those who left.
const COUNTS: u64 = 3;

/// One in so many may be missing from the groups.
const FEW: u64 = 10;

/// Words of a sentence that tells of others than all arms of one randomisation. Beginnings of words.
const OTHERS: [&str; 18] = [
    "complet",
    "analy",
    "evalua",
    "eligib",
    "assess",
    "follow",
    "available",
    "remain",
    "other",
    "exclu",
    "subset",
    "pilot",
    "stratum",
    "strata",
    "substudy",
    "pair",
    "cluster",
    "re-random",
];

/// Sentences that state the whole randomised with all its arms, which together are more or fewer.
pub fn arms_against_whole(facts: &Look) -> Vec<Finding> {
    use SectionKind::*;
    let own =
        |arm: &SizedArm| matches!(facts.manuscript.section(arm.span).kind, Methods | Results | Abstract | Unknown);
    let sentences = facts.readings.arms.chunk_by(|a, b| a.sentence == b.sentence).filter(|arms| own(&arms[0]));
    sentences.filter_map(|arms| of_sentence(&facts.scan.view(facts.manuscript, arms[0].sentence), arms)).collect()
}

fn of_sentence(view: &SentenceView, arms: &[SizedArm]) -> Option<Finding> {
    if !(0..view.len()).any(|i| view.is(i, Classes::RARE) && view.word(i).to_lowercase().starts_with("random")) {
        return None;
    }
    let whole = randomised_in(view).or_else(|| of_all(view))?;
    let sum: u64 = arms.iter().map(|a| a.n).sum();
    let each = arms.iter().any(|a| a.label == arm::EACH || a.n >= whole.value);
    // Of many that are missing, the sentence says by itself that not all were randomised.
    let few = sum > whole.value || FEW * (whole.value - sum) <= whole.value;
    if arms.len() < 2 || each || !few || sum == whole.value || arms[0].leaving {
        return None;
    }
    let tells = |i: usize| {
        let word = view.word(i).to_lowercase();
        OTHERS.iter().any(|w| word.starts_with(w))
    };
    let told = |n: u64| n < COUNTS || n == whole.value || arms.iter().any(|a| a.n == n);
    let untold = |i: usize| {
        let number = view.number(i).map(|p| p.count().unwrap_or(u64::MAX));
        let word = view.is(i, Classes::NUMBER_WORD).then(|| lexicon::number_word(view.word(i))).flatten();
        // "Three groups" must be three.
        let arms_told = word.or(number).filter(|_| view.any(i + 1, &["groups", "arms", "treatments", "conditions"]));
        match arms_told {
            Some(n) => n != arms.len() as u64,
            None => {
                number.is_some_and(|n| !told(n)) || word.is_some_and(|n| !told(n) && !is_whole(view, i, whole.span))
            }
        }
    };
    if (0..view.len()).any(|i| tells(i) || untold(i)) {
        return None;
    }
    let counts: Vec<String> = arms.iter().map(|a| a.n.to_string()).collect();
    let says =
        format!("Printed {} randomised and {} in the groups, which make {sum}.", whole.value, counts.join(" and "));
    let weight = Weight { ground: Ground::ByDefinition, distance: Off::Figure, ..Weight::reporting() };
    let mut f = Finding::at(whole.span, weight, says);
    f.working = Some(format!("{} = {sum}, not {}", counts.join(" + "), whole.value));
    f.fills = vec![("printed", whole.value.to_string()), ("computed", sum.to_string())];
    f.related = arms.iter().map(|a| (a.span, "a group".to_owned())).collect();
    f.figures.extend(arms.iter().map(|a| a.span));
    Some(f)
}

/// "Of 120 participants, 60 were randomised to …": the whole, where nothing tells it from those randomised.
fn of_all(view: &SentenceView) -> Option<Stated<u64>> {
    let at = if view.any(1, &["the", "these", "all"]) { 2 } else { 1 };
    let value = view.number(at).filter(|_| view.eq(0, "of"))?.count()?;
    let people = view.is(at + 1, Classes::GROUP) || view.any(at + 1, arm::NO_ARM);
    (people && view.sign(at + 2, ',')).then(|| Stated { value, span: view.span(at, at + 1) })
}

/// The word is part of the whole as it is spelled out: "Sixty-two patients".
fn is_whole(view: &SentenceView, i: usize, whole: crate::text::Span) -> bool {
    let at = view.span(i, i);
    at.overlaps(whole) || at.end <= whole.start && whole.start - at.end <= 5
}
