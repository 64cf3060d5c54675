//! Sizes of groups that the text names with their size and later only by name: "pain was lower with the sling than
//! without (5.2 ± 1.1 v 6.1 ± 1.0)", where the groups were introduced as `sling (n = 24)` and `usual care (n = 25)`.

use super::super::lexicon::Classes;
use super::super::sentence::SentenceView;
use super::super::{Figure, Group, Inference, Origin};
use super::arm;
use crate::printed::Printed;
use crate::text::Span;

/// More named groups than a paragraph has.
const MOST: usize = 40;

/// A group with its size, as the text introduces it.
#[derive(Clone, Copy, Debug)]
pub struct Known<'a> {
    pub label: &'a str,
    pub n: u64,
    pub span: Span,
}

/// Fills the sizes of one sentence's groups, where it names groups of known size and the order of names and figures
/// leaves no choice. Such a size is inferred: participants may have been lost since.
pub fn assign(view: &SentenceView, groups: &mut [Group], known: &[Known], inference: Inference) {
    let open: Vec<usize> = (0..groups.len()).filter(|&g| groups[g].has_figure()).collect();
    if open.is_empty() || open.iter().any(|&g| groups[g].n.is_some() && groups[g].events.is_none()) {
        return;
    }
    if open.iter().all(|&g| groups[g].n.is_some()) {
        return;
    }
    // Who was kept, or came, is told of those randomised as often as of those analysed.
    let kept = &["retention", "attrition", "dropout", "adherence", "attendance", "compliance", "withdrawal"];
    let first = view.token_at(groups[open[0]].span.start);
    if groups[open[0]].percent.is_some() && (first.saturating_sub(14)..first).any(|k| view.any(k, kept)) {
        return;
    }
    let mut places: Vec<(usize, usize)> = Vec::new();
    for (k, x) in known.iter().enumerate() {
        let word = x.label.split(|c: char| c.is_whitespace() || c == '-').next().unwrap_or("");
        places.extend((0..view.len()).filter(|&i| view.eq(i, word) && stands_at(view, i, x.label)).map(|i| (i, k)));
    }
    if places.is_empty() {
        return;
    }
    places.sort_unstable();
    // The names in each gap: before the first figure, between two, behind the last.
    let starts: Vec<usize> = open.iter().map(|&g| view.token_at(groups[g].span.start)).collect();
    let mut gaps: Vec<Vec<usize>> = vec![Vec::new(); open.len() + 1];
    for &(at, k) in &places {
        gaps[starts.partition_point(|&s| s <= at)].push(k);
    }
    let last = open.len();
    let one = |gaps: &[Vec<usize>]| gaps.iter().all(|g| g.len() == 1);
    let none = |gaps: &[Vec<usize>]| gaps.iter().all(|g| g.is_empty());
    let order: Vec<usize> = if last >= 2 && gaps[0].len() == last && none(&gaps[1..]) {
        gaps[0].clone()
    } else if last >= 2 && gaps[last].len() == last && none(&gaps[..last]) {
        gaps[last].clone()
    } else if one(&gaps[1..]) && gaps[0].is_empty() {
        gaps[1..].concat()
    } else if one(&gaps[..last]) && gaps[last].is_empty() {
        gaps[..last].concat()
    } else {
        // At least those that have a name of their own behind them, and no other one.
        for (j, &g) in open.iter().enumerate() {
            if let [k] = gaps[j + 1][..]
                && known[k].label.eq_ignore_ascii_case(name(&groups[g].label))
            {
                give(&mut groups[g], &known[k], inference);
            }
        }
        return;
    };
    for (&g, &k) in open.iter().zip(&order) {
        give(&mut groups[g], &known[k], inference);
    }
}

fn give(group: &mut Group, known: &Known, inference: Inference) {
    if group.n.is_none() && group.events.is_none() {
        group.n = Some(Figure::inferred(Printed::whole(known.n), inference, known.span));
    }
}

/// Fills sizes within one paragraph from the groups that it introduces itself.
pub fn fill<'a>(groups: &mut [Group], view: impl Fn(u32) -> SentenceView<'a>) {
    let introduced: Vec<(String, u64, Span, u32)> = groups
        .iter()
        .filter(|g| !g.label.is_empty() && (!g.has_figure() || g.one_expression))
        .filter_map(|g| {
            let n = g.n?;
            let Origin::Printed(span) = n.origin else { return None };
            Some((name(&g.label).to_string(), n.printed.count()?, span, g.sentence))
        })
        .filter(|(label, ..)| label.len() > 1 && label != arm::EACH)
        .take(MOST + 1)
        .collect();
    if introduced.len() < 2 || introduced.len() > MOST {
        return carry(groups, &view);
    }
    let introduced: Vec<_> = introduced.into_iter().filter(|x| !arm::tells_of_leaving(&view(x.3))).collect();
    for here in groups.chunk_by_mut(|a, b| a.sentence == b.sentence) {
        let sentence = here[0].sentence;
        // Names that one size only has been told of, so far.
        let before = introduced.iter().filter(|x| x.3 <= sentence);
        let mut known: Vec<Known> = Vec::new();
        for (label, n, span, _) in before {
            let other = introduced.iter().any(|x| x.0.eq_ignore_ascii_case(label) && x.1 != *n);
            if !other && !known.iter().any(|k| k.label.eq_ignore_ascii_case(label)) {
                known.push(Known { label, n: *n, span: *span });
            }
        }
        if known.len() >= 2 {
            let introduces = known.iter().any(|k| here.iter().any(|g| g.span.overlaps(k.span)));
            if introduces {
                in_one_sentence(&view(sentence), here);
            } else {
                assign(&view(sentence), here, &known, Inference::ArmSize);
            }
        }
    }
    carry(groups, &view);
}

/// "31 were fed syrup and 29 water (mean weight 5.2 ± 1.1 v 6.1 ± 1.0)": as many figures behind the named groups of
/// their sentence as there are groups, joined to one list.
fn in_one_sentence(view: &SentenceView, groups: &mut [Group]) {
    let arms = groups.iter().take_while(|g| !g.has_figure()).count();
    let sizes: Vec<Option<Figure>> = groups[..arms].iter().map(|g| g.n).collect();
    let figures = &mut groups[arms..];
    let open = |g: &Group| g.has_figure() && g.n.is_none() && g.events.is_none();
    if arms < 2 || figures.is_empty() || !figures.len().is_multiple_of(arms) || !figures.iter().all(open) {
        return;
    }
    let listed = figures.chunks(arms).all(|list| {
        list.windows(2).all(|w| {
            let (a, b) = (view.token_at(w[0].span.end), view.token_at(w[1].span.start));
            b.saturating_sub(a) <= 4 && (a..b).any(|k| view.is(k, Classes::AND) || view.is(k, Classes::VERSUS))
        })
    });
    if !listed {
        return;
    }
    for (k, g) in figures.iter_mut().enumerate() {
        let Some(n) = sizes[k % arms] else { continue };
        if let Some(span) = n.place() {
            g.n = Some(Figure::inferred(n.printed, Inference::SameSentence, span));
        }
    }
}

/// "… were 8.9 and 8.8, respectively" after a sentence that told the same groups in an order of its own: figures that
/// end in that word take the sizes of the list before, where they name no group themselves.
fn carry<'a>(groups: &mut [Group], view: &impl Fn(u32) -> SentenceView<'a>) {
    // The list told last with its word: the sentence and the sizes.
    let mut told: Option<(u32, Vec<Figure>)> = None;
    for here in groups.chunk_by_mut(|a, b| a.sentence == b.sentence) {
        let sentence = here[0].sentence;
        let view = view(sentence);
        let mut start = 0;
        for word in (0..view.len()).filter(|&k| view.is(k, Classes::RESPECTIVELY)) {
            let end = here.partition_point(|g| view.token_at(g.span.start) < word);
            let list = &mut here[start..end.max(start)];
            start = end.max(start);
            let [.., last] = &*list else { continue };
            let close = word - view.token_at(last.span.end).min(word) <= 4;
            if let Some((before, sizes)) = &told
                && close
                && *before + 1 == sentence
                && list.len() == sizes.len()
                && list.iter().all(|g| g.has_figure() && g.n.is_none() && g.events.is_none())
            {
                for (g, n) in list.iter_mut().zip(sizes) {
                    let Some(span) = n.place() else { continue };
                    g.n = Some(Figure::inferred(n.printed, Inference::ArmSize, span));
                }
                continue;
            }
            let sizes: Vec<Figure> = list.iter().filter(|g| g.has_figure()).filter_map(|g| g.n).collect();
            told = (sizes.len() == list.len() && sizes.len() >= 2).then_some((sentence, sizes));
        }
    }
}

/// A label without the words that its group shares with others.
fn name(label: &str) -> &str {
    let label = label.strip_prefix("the ").unwrap_or(label);
    [" group", " arm", " patients", " participants", " subjects"]
        .iter()
        .find_map(|end| label.strip_suffix(end))
        .unwrap_or(label)
}

/// Whether the words of a label stand at token `i`.
fn stands_at(view: &SentenceView, i: usize, label: &str) -> bool {
    let mut at = i;
    for word in label.split(|c: char| c.is_whitespace() || c == '-').filter(|w| !w.is_empty()) {
        if at > i && view.sign(at, '-') {
            at += 1;
        }
        if !view.eq(at, word) {
            return false;
        }
        at += 1;
    }
    at > i
}
