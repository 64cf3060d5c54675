//! Groups of which only the size is told: `the syrup (n = 31) or the water group (n = 29)`, `(28 control; 39 syrup)`,
//! "26 were randomised to syrup and 27 to water".

use super::super::Figure;
use super::super::lexicon::Classes;
use super::super::sentence::SentenceView;
use super::count::count_at;
use super::{Draft, empty};
use crate::printed::Printed;
use crate::text::Span;

/// A group with its size and the tokens that tell of both.
#[derive(Clone, Debug)]
struct Named {
    label: String,
    n: u64,
    /// The token of the size.
    at: usize,
    first: usize,
    last: usize,
}

impl Named {
    fn span(&self, view: &SentenceView) -> Span {
        view.span(self.first, self.last)
    }
}

/// Words at which a name going backwards from its bracket starts.
#[rustfmt::skip]
const BEFORE: &[&str] = &[
    "the", "a", "an", "to", "and", "or", "either", "of", "with", "into", "received", "receive", "receiving",
    "versus", "vs", "in", "for", "by", "were", "was", "than", "as", "from", "both", "one", "two", "three", "four",
    "between", "on", "at", "had", "group", "groups", "arms", "that", "who", "which", "included", "including",
    "completed", "given",
];

/// Labels that name no arm: `(n = 24)` after them counts something else.
#[rustfmt::skip]
pub const NO_ARM: &[&str] = &[
    "patients", "subjects", "participants", "women", "men", "children", "volunteers", "individuals", "people",
    "males", "females", "adults", "consent", "withdrawal", "violation", "events", "reasons", "infants", "animals",
    "died", "excluded", "sites", "studies", "boys", "girls", "nausea", "headache", "rats", "mice", "pigs", "trials",
    "cases", "efficacy", "lost", "missing", "follow", "analysis", "data", "female", "male", "refused", "criteria",
    "consented", "death", "deaths", "pregnancy", "illness", "injury", "reason", "refusal", "compliance", "infection",
    "interest", "time", "years", "sex", "gender", "visit",
];

/// Words that show that a sentence tells of groups.
#[rustfmt::skip]
const TELLING: &[&str] = &[
    "group", "groups", "arm", "arms", "randomised", "randomized", "randomly", "randomisation", "randomization",
    "assigned", "allocated", "divided", "placebo", "control", "controls", "received", "receive", "condition",
    "conditions", "set", "sets", "cohort", "cohorts", "intervention", "allocation",
];

/// Words of a sentence that lists why participants left or what befell them.
#[rustfmt::skip]
const LEAVING: &[&str] = &[
    "withdrew", "withdrawn", "withdrawal", "withdrawals", "dropped", "dropout", "dropouts", "excluded", "exclusion",
    "discontinued", "discontinuation", "lost", "reasons", "reason", "refused", "declined", "died", "deaths", "adverse",
];

/// Words that divide participants otherwise than by arm.
const TRAITS: &[&str] = &[
    "male", "males", "female", "females", "men", "women", "boys", "girls", "man", "woman", "left", "right", "with",
    "had",
];

/// The name of a size that each group has.
pub const EACH: &str = "each group";

/// Words for a group that end its name.
const GROUP: &[&str] = &["group", "groups", "arm", "arms", "condition", "cohort"];

/// Words for a group or for one of the usual ones.
const SAYS_GROUP: &[&str] =
    &["group", "groups", "arm", "arms", "controls", "control", "placebo", "condition", "cohort", "treatment", "set"];

/// A group that a sentence names with its size, whether or not a summary took the size over.
#[derive(Clone, Debug, PartialEq)]
pub struct SizedArm {
    /// Its name, or [`EACH`].
    pub label: String,
    pub n: u64,
    pub span: Span,
    pub sentence: u32,
    /// The sentence tells who left the study: its sizes are not those of arms.
    pub leaving: bool,
}

/// Appends the named groups whose size no summary of the sentence has taken over, and all of them to `arms`.
pub(super) fn read(view: &SentenceView, taken: &[bool], drafts: &mut Vec<Draft>, arms: &mut Vec<SizedArm>) {
    let own = drafts.len();
    let found = find(view);
    let leaving = !found.is_empty() && tells_of_leaving(view);
    arms.extend(found.iter().map(|a| SizedArm {
        label: a.label.clone(),
        n: a.n,
        span: a.span(view),
        sentence: view.id,
        leaving,
    }));
    for arm in found {
        let span = view.span(arm.at, arm.at);
        let used = drafts[..own].iter().any(|d| {
            let of = |f: &Option<Figure>| f.and_then(|f| f.place()).is_some_and(|s| s.overlaps(span));
            of(&d.group.n) || of(&d.group.events) || of(&d.group.total)
        });
        if used || taken[arm.at] || drafts[own..].iter().any(|d| d.first <= arm.last && arm.first <= d.last) {
            continue;
        }
        let mut group = empty(view, arm.first, arm.last);
        group.label = arm.label;
        group.n = Some(Figure::at(Printed::whole(arm.n), span));
        drafts.push(Draft { first: arm.first, last: arm.last, group });
    }
}

/// The groups that a sentence names with their sizes, in order.
fn find(view: &SentenceView) -> Vec<Named> {
    // Sizes come in twos, or with their sign.
    let (mut counts, mut signed) = (0, false);
    for (k, token) in view.tokens.iter().enumerate() {
        counts += usize::from(token.number().is_some_and(|p| p.places == 0) || token.is(Classes::NUMBER_WORD));
        signed = signed || token.is(Classes::N) && view.sign(k + 1, '=');
    }
    if counts < 2 && !signed {
        return Vec::new();
    }
    let telling = (0..view.len()).any(|k| view.tokens[k].is_word() && view.any(k, TELLING));
    let mut found = Vec::new();
    if telling {
        found = with_n(view);
        // "n = 30 per group" is as often a plan.
        let planned =
            &["power", "required", "detect", "needed", "would", "will", "calculated", "calculation", "estimated"];
        if found.iter().any(|a| a.label == EACH) && (0..view.len()).any(|k| view.any(k, planned)) {
            found.retain(|a| a.label != EACH);
        }
        // `hives (n = 60) … to syrup (n = 31) or water (n = 29)`: the whole is no arm.
        let sum: u64 = found.iter().skip(1).take(2).map(|a| a.n).sum();
        if found.len() >= 3 && found[0].n == sum {
            found.remove(0);
        }
        // One by itself is as often a subgroup or a reason; two in a sentence, or a word for a group, name arms.
        if found.len() == 1 || found.len() > 1 && tells_of_leaving(view) {
            found.retain(|a| says_group(view, a));
        }
        if found.is_empty() && counts >= 2 {
            found = members_in_brackets(view);
            if found.len() < 2 {
                found = assigned(view);
            }
        }
    }
    if found.is_empty() && counts >= 3 {
        // `60 were included (syrup, n = 31; water, n = 29)`: their sum stands before them.
        let named = with_n(view);
        let sum: u64 = named.iter().map(|a| a.n).sum();
        let whole = |k: usize| count_at(view, k).is_some_and(|c| c.0 == sum);
        if named.len() >= 2 && (0..named[0].first).any(whole) {
            return named;
        }
        found = parts(view);
    }
    if tells_of_leaving_behind(view, &found) {
        found.clear();
    }
    found
}

/// "13 (8 in the syrup group and 5 in the water group) had declined": those who left make no groups.
fn tells_of_leaving_behind(view: &SentenceView, found: &[Named]) -> bool {
    let [first, .., last] = found else { return false };
    let end = (last.last + 1..(last.last + 9).min(view.len())).find(|&k| view.number(k).is_some() || view.sign(k, ';'));
    let behind = (last.last + 1..end.unwrap_or((last.last + 9).min(view.len()))).any(|k| {
        view.any(k, LEAVING) && !view.any(k, &["adverse"]) || view.any(k, &["switched", "missing", "stopped"])
    });
    let before = (first.first.saturating_sub(8)..first.first).any(|k| {
        view.any(
            k,
            &[
                "withdrew",
                "dropped",
                "discontinued",
                "declined",
                "refused",
                "died",
                "deaths",
                "withdrawals",
                "dropouts",
            ],
        )
    });
    // "Swarming occurred in 43 hives (20 syrup, 23 water)": what befell them.
    let befell = (first.first.saturating_sub(8)..first.first)
        .any(|k| view.any(k, &["occurred", "death", "deaths", "died", "relapsed", "relapses", "experienced"]));
    behind || befell || before && first.n < 20
}

/// Whether a sentence tells who left the study or what befell them: its sizes are not those of arms.
pub fn tells_of_leaving(view: &SentenceView) -> bool {
    tells_of_leaving_within(view, 0, view.len())
}

/// The same of some tokens of a sentence.
pub fn tells_of_leaving_within(view: &SentenceView, from: usize, to: usize) -> bool {
    (from..to).any(|k| view.any(k, LEAVING) || view.any(k, &["missing", "died", "stopped"]))
}

/// A word for a group beside the size.
fn says_group(view: &SentenceView, arm: &Named) -> bool {
    (arm.first..=arm.last).any(|k| view.any(k, SAYS_GROUP)) || view.any(arm.last + 1, GROUP)
}

/// `group I (31 hives) … group II (29 hives)`: brackets that hold a count of members.
fn members_in_brackets(view: &SentenceView) -> Vec<Named> {
    let mut found = Vec::new();
    for i in 1..view.len() {
        if !view.sign(i, '(') {
            continue;
        }
        let Some((n, after)) = count_at(view, i + 1).filter(|&(n, _)| n > 1) else { continue };
        if !view.is(after, Classes::GROUP) || !view.sign(after + 1, ')') || view.any(after, TRAITS) {
            continue;
        }
        let own = i > 1 && view.any(i - 2, &["group", "arm"]) && view.tokens[i - 1].is_word();
        let first = if own { Some(i - 1) } else { label_before(view, i) };
        let Some(first) = first else { continue };
        found.push(Named { label: label(view, first, i - 1), n, at: after - 1, first, last: after + 1 });
    }
    found
}

/// `syrup (n = 31)`, `(syrup, n = 31; water, n = 29)`, `(n = 31 for syrup and n = 29 for water)`.
fn with_n(view: &SentenceView) -> Vec<Named> {
    let mut found = Vec::new();
    for i in 1..view.len() {
        if !(view.is(i, Classes::N) && view.sign(i + 1, '=')) {
            continue;
        }
        let Some(n) = view.number(i + 2).and_then(Printed::count).filter(|&n| n > 1) else { continue };
        let after = i + 3;
        if view.signs(after, &['%', '/', '-', '+']) || view.signs(after + 1, &['/', '%']) {
            continue;
        }
        let each = after + usize::from(view.any(after, &["in", "for"]));
        let arm = if view.any(each, &["each", "per", "both"])
            && view.any(each + 1, &["group", "groups", "arm", "arms", "condition"])
        {
            Some((EACH.to_string(), i, if view.sign(each + 1, ')') { each } else { each + 1 }))
        } else if view.signs(i - 1, &['(', '['])
            && i > 2
            && view.any(i - 2, &["groups", "arms"])
            && view.sign(after, ')')
            && is_number(view, i - 3)
        {
            Some((EACH.to_string(), i - 3, after))
        } else if view.any(after, &["in", "for"]) {
            label_behind(view, after + 1).map(|(a, b)| (view.quote(a, b).to_string(), i, b))
        } else if view.sign(after, ',') && view.any(after + 1, GROUP) && view.sign(after + 3, ')') {
            // `(n = 31, Group B)`
            Some((view.quote(after + 2, after + 2).to_string(), i, after + 3))
        } else if !view.signs(after, &[')', ']', ';', ',']) {
            None
        } else if view.signs(i - 1, &['(', '[']) {
            label_before(view, i - 1).map(|a| (label(view, a, i - 2), a, after))
        } else if view.sign(i - 1, ',') && (i.saturating_sub(9)..i).any(|k| view.signs(k, &['(', '[', ';'])) {
            label_before(view, i - 1).map(|a| (label(view, a, i - 2), a, i + 2))
        } else {
            None
        };
        let Some((label, first, last)) = arm else { continue };
        let last = if view.signs(last, &[';', ',']) { last - 1 } else { last };
        found.push(Named { label, n, at: i + 2, first, last });
    }
    found
}

fn is_number(view: &SentenceView, k: usize) -> bool {
    view.number(k).is_some() || view.is(k, Classes::NUMBER_WORD)
}

/// The words of a name without "group" behind it.
fn label(view: &SentenceView, first: usize, mut last: usize) -> String {
    while last > first && view.any(last, GROUP) {
        last -= 1;
    }
    view.quote(first, last).to_string()
}

/// The first token of the name that ends before `end`: at most six words back to an article, preposition or mark.
fn label_before(view: &SentenceView, bracket: usize) -> Option<usize> {
    let mut end = bracket;
    while end > 0 && view.any(end - 1, GROUP) {
        end -= 1;
    }
    // "Group A (n = 12)" keeps its letter, which is no article.
    if end > 1 && end == bracket && view.any(end - 1, &["a", "b", "c", "d"]) && view.any(end - 2, &["group", "arm"]) {
        return Some(end - 1);
    }
    let mut first = end;
    while first > 0 && end - first < 6 {
        let j = first - 1;
        let joins = view.signs(j, &['-', '+', '/']) && j > 0;
        if !(view.tokens[j].is_word() || view.number(j).is_some() || joins) || view.any(j, BEFORE) {
            break;
        }
        first = j;
    }
    while first < end && view.signs(first, &['-', '+', '/']) {
        first += 1;
    }
    let named = first < end
        && !(first..end).any(|j| view.any(j, NO_ARM))
        && view.tokens[first..end].iter().any(|t| t.is_word());
    named.then_some(first)
}

/// The name that starts at `at`, up to five words on: "the syrup group", "syrup".
fn label_behind(view: &SentenceView, mut at: usize) -> Option<(usize, usize)> {
    while view.any(at, &["the", "a", "an", "receive", "receiving", "their"]) {
        at += 1;
    }
    let mut end = at;
    while end < at + 5 && view.get(end).is_some_and(|t| t.is_word() || t.is_sign('-') || t.is_sign('+')) {
        let stops = view.is(end, Classes::AND)
            || view.is(end, Classes::VERSUS)
            || view.is(end, Classes::COPULA)
            || view.any(end, &["in", "for", "with", "at", "on", "who", "but", "had", "completed", "received", "from"]);
        if stops || view.any(end, GROUP) {
            break;
        }
        end += 1;
    }
    let named = end > at && view.tokens[at].is_word() && !(at..end).any(|j| view.any(j, NO_ARM) || view.any(j, TRAITS));
    named.then(|| (at, end - 1))
}

/// "26 were randomised to syrup and 27 to water", "randomised to syrup (26) or water (27)".
fn assigned(view: &SentenceView) -> Vec<Named> {
    let Some(verb) = (0..view.len()).find(|&k| {
        view.any(
            k,
            &["randomised", "randomized", "assigned", "allocated", "randomly", "received", "included", "divided"],
        )
    }) else {
        return Vec::new();
    };
    let mut found = Vec::new();
    // `syrup (26)`: bare brackets, where the sentence randomises.
    for i in verb + 1..view.len().saturating_sub(2) {
        let n = view.number(i + 1).and_then(Printed::count).filter(|&n| (2..1900).contains(&n));
        let spaced =
            view.signs(i, &['(']) && view.sign(i + 2, ')') && view.style(i + 1) == super::super::token::Style::Plain;
        if let (true, Some(n)) = (spaced, n)
            && let Some(first) = label_before(view, i)
        {
            found.push(Named { label: label(view, first, i - 1), n, at: i + 1, first, last: i + 2 });
        }
    }
    if found.len() >= 2 {
        return found;
    }
    found.clear();
    if let Some(list) = two_and_two(view, verb) {
        return list;
    }
    // counts with "to …" behind them
    let mut i = 0;
    while i < view.len() {
        let Some((n, after)) = count_at(view, i).filter(|&(n, _)| n > 1) else {
            i += 1;
            continue;
        };
        let to = (after..after + 7)
            .take_while(|&k| view.get(k).is_some_and(|t| t.is_word()))
            .find(|&k| view.any(k, &["to"]) && (found.is_empty() || k - after <= 4) || view.eq(k, "received"));
        let passive = |k: usize| {
            found.is_empty() && (after..k).any(|j| view.any(j, &["randomised", "randomized", "assigned", "allocated"]))
        };
        if let Some(k) = to.filter(|&k| passive(k) || !found.is_empty() || view.eq(k, "received"))
            && let Some((a, b)) = label_behind(view, k + 1)
        {
            found.push(Named { label: view.quote(a, b).to_string(), n, at: after - 1, first: i, last: b });
            i = b + 1;
        } else {
            i = after;
        }
    }
    if found.len() < 2 {
        found.clear();
    }
    found
}

/// "31 and 29 were included in the syrup and water groups": two counts and two names in one order.
fn two_and_two(view: &SentenceView, verb: usize) -> Option<Vec<Named>> {
    for i in 0..verb {
        let Some((a, joint)) = count_at(view, i) else { continue };
        if !view.is(joint, Classes::AND) || a < 2 {
            continue;
        }
        let Some((b, after)) = count_at(view, joint + 1).filter(|&(b, _)| b > 1) else { continue };
        if verb - after.min(verb) > 4 || !(after..verb).all(|k| view.get(k).is_some_and(|t| t.is_word())) {
            continue;
        }
        let at = (verb + 1..verb + 4).find(|&k| view.any(k, &["in", "to", "into"]))? + 1;
        let at = at + usize::from(view.eq(at, "the"));
        let group = (at..at + 12).find(|&k| view.any(k, &["groups", "arms"]))?;
        let and = (at..group).find(|&k| view.is(k, Classes::AND))?;
        let second = and + 1 + usize::from(view.eq(and + 1, "the"));
        if and == at || second >= group {
            return None;
        }
        let label = |from: usize, to: usize| view.quote(from, to).to_string();
        return Some(vec![
            Named { label: label(at, and - 1), n: a, at: joint - 1, first: i, last: joint - 1 },
            Named { label: label(second, group - 1), n: b, at: after - 1, first: joint + 1, last: after - 1 },
        ]);
    }
    None
}

/// `60 hives (31 water; 29 syrup)`, "60 hives, 31 in the syrup arm and 29 in the water arm": counts with
/// names that add up to a count before them.
fn parts(view: &SentenceView) -> Vec<Named> {
    let mut i = 0;
    let mut whole: Vec<(u64, usize)> = Vec::new();
    while i < view.len() {
        let Some((n, after)) = count_at(view, i) else {
            i += 1;
            continue;
        };
        let mut list: Vec<Named> = Vec::new();
        // The parts of a whole are smaller than it, and stand behind it.
        if !whole.iter().any(|w| w.0 > n) {
            whole.push((n, after));
            i = after;
            continue;
        }
        let (mut at, mut first, mut count) = (after, i, n);
        let mut placed = false;
        loop {
            let number = at - 1;
            at += usize::from(view.is(at, Classes::GROUP) && !view.any(at, TRAITS) && !view.any(at, SAYS_GROUP));
            let preposition = view.any(at, &["in", "to", "for", "on", "received", "receiving"]);
            placed |= preposition;
            let from = at + usize::from(preposition);
            let Some((a, b)) = label_behind(view, from) else { break };
            let b = b + usize::from(view.any(b + 1, GROUP));
            let unit = !preposition && view.is(a, Classes::UNIT) || view.sign(at, '%');
            if unit {
                break;
            }
            list.push(Named { label: label(view, a, b), n: count, at: number, first, last: b });
            // `28 control: fed later; 39 …`
            let mut joint = b + 1;
            if view.sign(joint, ':') {
                joint = (joint..joint + 6).find(|&k| view.signs(k, &[';', ',', ')'])).unwrap_or(joint);
            }
            let next = if view.signs(joint, &[',', ';']) {
                joint + 1 + usize::from(view.is(joint + 1, Classes::AND))
            } else if view.is(joint, Classes::AND) {
                joint + 1
            } else {
                break;
            };
            let Some((more, end)) = count_at(view, next) else { break };
            (at, first, count) = (end, next, more);
        }
        let sum: u64 = list.iter().map(|a| a.n).sum();
        // "30 turns, 20 jumps, 10 rests" lists what was done: parts stand in brackets, behind a colon, or "in" something.
        let parted = |end: usize| placed || (end..i).any(|k| view.signs(k, &['(', '[', ':']));
        let of_whole = || whole.iter().any(|&(n, end)| n == sum && parted(end));
        if list.len() >= 2 && list.iter().all(|a| a.n > 1) && of_whole() {
            return list;
        }
        whole.push((n, after));
        i = after;
    }
    Vec::new()
}
