//! Claims: what the sentences conclude.
//!
//! A sentence is read without its parentheses and cut into clauses; in each clause a cue (a word of
//! significance, of likeness, of difference …) and what denies or weakens it give the kind of claim.

mod clause;
mod cue;
mod difference;
mod sameness;
mod significance;
// Word lists are easier to read in full lines.
#[rustfmt::skip]
mod words;

use self::clause::{Clause, Flat, Lead, clauses};
use self::cue::{Facts, Found, find};
use self::words::{CIRCUMSTANCES, OPENERS};
use super::claim_words::{CHANGED, COMPARATIVE, DIFFER, EXTREME, FINITE, FIT, HEDGE};
use super::lexicon::Classes;
use super::p::PExpression;
use super::sentence::SentenceView;
use super::{Attribution, Claim, ClaimKind, Relation};

/// Only a sentence with one of these words can make a claim.
const CUES: Classes = Classes(
    Classes::SIGNIFICANCE.0
        | Classes::DIFFERENCE.0
        | Classes::SIMILAR.0
        | Classes::ASSOCIATION.0
        | Classes::EQUIVALENT.0
        | Classes::TREND.0
        | COMPARATIVE.0
        | CHANGED.0
        | DIFFER.0
        | EXTREME.0
        | HEDGE.0,
);

/// Appends the claims of one sentence.
pub fn read(view: &SentenceView, p: &[PExpression], out: &mut Vec<Claim>) {
    let union = view.tokens.iter().fold(0, |all, t| all | t.classes.0);
    if union & CUES.0 == 0 {
        if union & Classes::P.0 != 0 || view.len() > 4 {
            misreading(view, out);
        }
        return;
    }
    if misreading(view, out) {
        return;
    }
    let start = out.len();
    let flat = Flat::new(view);
    let facts = Facts::of(&flat, p, Classes(union));
    for clause in clauses(&flat) {
        if clause.planned || clause.introduces {
            continue;
        }
        let found = find(&flat, &clause, &facts).or_else(|| elliptical(&flat, &clause, out[start..].last()));
        let Some(found) = found else { continue };
        let (first, last) = extent(&flat, &clause, &found);
        let span = view.span(flat.token(first), flat.token(last));
        out.push(Claim {
            span,
            sentence: view.id,
            kind: found.kind,
            attribution: attribution(&flat, &clause, &facts),
            direction: found.direction,
            says_significant: found.says_significant,
        });
    }
    contrast(view, p, start, out);
}

/// "…, nor did the weight of the brood": what the clause before denied, said of something else.
fn elliptical(flat: &Flat, clause: &Clause, before: Option<&Claim>) -> Option<Found> {
    let nor = clause.first + usize::from(flat.is(clause.first, Classes::AND));
    let between = flat.any(nor + 1, &["between", "among"])
        && flat.find(nor + 2..(nor + 6).min(clause.end), Classes::GROUP).is_some();
    let verb = flat.any(nor, &["nor", "neither"]) && (between || flat.is(nor + 1, FINITE));
    let before = before.filter(|_| verb && nor + 2 < clause.end)?;
    let kind = before.kind;
    matches!(kind, ClaimKind::NoDifference | ClaimKind::NotSignificant).then_some(Found {
        kind,
        first: nor,
        last: nor + 1,
        direction: None,
        says_significant: before.says_significant,
    })
}

/// "improved in A (P = 0.03) but not in B (P = 0.12)": what the two p's say is read as a difference between arms.
fn contrast(view: &SentenceView, p: &[PExpression], start: usize, out: &mut [Claim]) {
    // The usual level, as common practice has it: a stated one is not known here.
    const ALPHA: f64 = 0.05;
    for pair in p.windows(2) {
        let (a, b) = (&pair[0], &pair[1]);
        let value = |x: &PExpression| x.value.map_or(1.0, |v| v.value());
        let low = value(a) < ALPHA && matches!(a.relation, Relation::Equal | Relation::Less | Relation::AtMost)
            || value(a) == ALPHA && a.relation == Relation::Less;
        let high = matches!(b.relation, Relation::NotSignificant | Relation::Greater | Relation::AtLeast)
            || b.relation == Relation::Equal && value(b) > ALPHA;
        let between = a.last + 1..b.first;
        let not_so = between.len() <= 16
            && between.clone().any(|k| {
                view.any(k, &["but", "whereas", "while"])
                    && view.eq(k + 1, "not")
                    && view.any(k + 2, &["in", "for", "with", "within"])
            });
        let Some(claim) = out[start..].iter_mut().find(|c| c.kind == ClaimKind::Difference && not_so) else { continue };
        if low && high && claim.span.end <= view.tokens[a.first].start {
            claim.kind = ClaimKind::WithinGroupContrast;
            let bracket = view.signs(b.first - 1, &['(', '[', ',']) && b.first >= 2;
            claim.span.end = view.tokens[b.first - 1 - usize::from(bracket)].end;
        }
    }
}

/// P as the probability that the result is due to chance, or that the hypothesis is true.
fn misreading(view: &SentenceView, out: &mut Vec<Claim>) -> bool {
    let mut chance = None;
    for i in 0..view.len() {
        if view.is(i, Classes::RARE) && view.any(i, &["probability", "likelihood", "chance"]) {
            // "a 3 % probability that the difference arose by chance", "the probability that the null hypothesis is true"
            if let Some(end) = (i + 1..(i + 25).min(view.len())).find(|&j| {
                view.eq(j, "chance")
                    && (view.any(j - 1, &["by", "to"]) || view.phrase(j.saturating_sub(2), &["by", "random"]))
                    || view.any(j, &["true", "correct", "false"])
                        && (i..j).any(|h| view.eq(h, "hypothesis"))
                        && view.any(j - 1, &["is", "was", "being"])
            }) && !(i..end)
                .any(|j| view.any(j, &["if", "given", "assuming", "reject", "rejecting", "under", "when"]))
            {
                chance = Some((i, end));
                break;
            }
        }
    }
    let Some((first, last)) = chance else { return false };
    let p_said = (0..view.len()).any(|i| view.is(i, Classes::P) || view.sign(i, '%'));
    if !p_said {
        return false;
    }
    out.push(Claim {
        span: view.span(first, last),
        sentence: view.id,
        kind: ClaimKind::PMisread,
        attribution: Attribution::ThisStudy,
        direction: None,
        says_significant: false,
    });
    true
}

/// The clause from its subject to the end of what the cue says.
fn extent(flat: &Flat, clause: &Clause, found: &Found) -> (usize, usize) {
    let mut first = clause.first;
    if clause.lead != Lead::With {
        loop {
            if first < found.first && (flat.sign(first, ',') || flat.any(first, OPENERS)) {
                first += 1;
                continue;
            }
            if flat.any(first, CIRCUMSTANCES) {
                let verb = (first..found.first).find(|&k| flat.is(k, FINITE)).unwrap_or(found.first);
                // The comma of "At 12 months, …"; of "When X was added, Y fell" too.
                let comma = (first..verb).find(|&k| flat.sign(k, ','));
                if let Some(comma) = comma.or_else(|| (verb..found.first).find(|&k| flat.sign(k, ','))) {
                    first = comma + 1;
                    continue;
                }
            }
            break;
        }
    }
    // A long subject is left out: the claim starts with its verb.
    const LONG: usize = 24;
    if found.first > first + LONG {
        let from = found.first - LONG;
        first = (from..found.first)
            .rev()
            .find(|&k| flat.is(k, FINITE))
            .or_else(|| (from..found.first).rev().find(|&k| flat.sign(k, ',')).map(|k| k + 1))
            .unwrap_or(found.first - 6);
    }
    let mut last = found.last;
    // Up to the parenthesis with the figures, the statistic after a comma, or enough.
    let limit = clause.end.min(found.last + 26);
    while last + 1 < limit {
        if flat.figures_after(last) && flat.token(last + 1) > flat.token(last) + 1 {
            break;
        }
        let next = last + 1;
        if flat.sign(next, ',') && statistic_follows(flat, next + 1) {
            break;
        }
        if flat.signs(next, &['=', '<', '>', '≤', '≥']) && flat.is(last, Classes::P) {
            last = last.saturating_sub(1).max(found.last);
            break;
        }
        if flat.sign(next, ',')
            && flat.any(next + 1, &["as", "suggesting", "although", "respectively"])
            && !flat.any(next + 2, &["was", "were", "did"])
        {
            break;
        }
        last = next;
    }
    while last > found.last
        && (flat.signs(last, &['.', ',', ';', ':', '-', '!', '?'])
            || flat.any(last, &["and", "or", "a", "the", "with", "at"]))
    {
        last -= 1;
    }
    (first, last.max(first))
}

/// `p = …`, `F(1, 20) = …`, `95 % CI …` after a comma.
fn statistic_follows(flat: &Flat, k: usize) -> bool {
    let sign = (k..k + 5).find(|&j| flat.signs(j, &['=', '<', '>', '≤', '≥']));
    let words = |end: usize| (k..end).filter(|&j| flat.word(j).len() > 4).count();
    sign.is_some_and(|end| words(end) <= 1)
        || flat.number(k) && (k..k + 4).any(|j| flat.is(j, Classes::CI.or(Classes::CONFIDENCE)))
}

/// Who says it, of what.
fn attribution(flat: &Flat, clause: &Clause, facts: &Facts) -> Attribution {
    if clause.others || facts.others {
        return Attribution::OtherAuthors;
    }
    let range = clause.first..clause.end;
    if flat.find(range.clone(), FIT).is_some() {
        return Attribution::FitOrAssumption;
    }
    let baseline = (range.start..range.end).any(|k| {
        flat.is(k, Classes::BASELINE) && !flat.any(k.wrapping_sub(1), &["from", "to", "with", "versus", "vs", "than"])
            || flat.any(k, &["characteristics", "demographics", "demographic"])
    });
    // No treatment changes age or sex.
    const AGES: &[&str] = &["chronological", "gestational", "maternal", "paternal"];
    let given = |k: usize| flat.any(k, &["age", "ages", "sex", "gender", "race", "ethnicity"]);
    let in_given = (range.start..range.end).any(|k| {
        given(k)
            && flat.any(
                k.wrapping_sub(1 + usize::from(flat.any(k.wrapping_sub(1), AGES))),
                &["in", "for", "of", "by", "regarding", "the", "mean", "median"],
            )
            && !flat.any(k + 1, &["groups", "group", "effect"])
    }) || given(range.start);
    let baseline = baseline || in_given && found_difference(flat, &range);
    if baseline {
        return Attribution::Baseline;
    }
    Attribution::ThisStudy
}

/// Whether a clause speaks of a difference or of its absence between people, not of one that goes with age.
fn found_difference(flat: &Flat, range: &std::ops::Range<usize>) -> bool {
    let range = range.clone();
    range.clone().any(|k| flat.any(k, &["difference", "differences", "differ", "differed", "similar", "comparable"]))
        && !range.clone().any(|k| flat.any(k, &["associated", "association", "correlated", "predicted", "adjusted"]))
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::manuscript::testing::paragraphs;
    use crate::reading::{Direction, p, scan};

    /// The claims of one paragraph: kind and quote.
    fn claims(text: &str) -> Vec<(ClaimKind, String, Claim)> {
        let manuscript = paragraphs(&[("", text)]);
        let scan = scan(&manuscript);
        let mut out = Vec::new();
        for id in scan.of_block(0) {
            let view = scan.view(&manuscript, id);
            read(&view, &p::find(&view), &mut out);
        }
        out.into_iter().map(|c| (c.kind, manuscript.quote(c.span).to_string(), c)).collect()
    }

    fn kinds(text: &str) -> Vec<ClaimKind> {
        claims(text).into_iter().map(|c| c.0).collect()
    }

    fn one(text: &str) -> (ClaimKind, String) {
        let all = claims(text);
        assert_eq!(all.len(), 1, "{text}: {all:?}");
        (all[0].0, all[0].1.clone())
    }

    #[test]
    fn no_difference_in_its_many_words() {
        for text in [
            "Yield of honey did not differ between the hives (p = 0.21).",
            "Brood area was similar in the two apiaries (P = 0.4).",
            "There was no difference in wing length between the groups (p = 0.62).",
            "Syrup had no effect on foraging time (p = 0.15).",
            "Hive weight was not associated with flower density (p = 0.33).",
            "No correlation between hive weight and flower density was observed.",
            "Swarming remained unchanged over the summer.",
            "Similar proportions of colonies in each group survived the winter (12/40 vs 13/41).",
            "We found no evidence that queen age affected swarming (p = 0.7).",
            "Colony losses were evenly distributed over the three groups.",
        ] {
            assert_eq!(one(text).0, ClaimKind::NoDifference, "{text}");
        }
    }

    #[test]
    fn not_significant_is_weaker_than_no_difference() {
        for text in [
            "There was no significant difference in wing length between the groups (p = 0.62).",
            "Hive weight did not differ significantly between the arms (p = 0.3).",
            "The rise in honey yield did not reach statistical significance (P = 0.08).",
            "Brood area was not significantly larger in fed hives (p = 0.2).",
            "The difference was non-significant (p = 0.4).",
            "None of the differences between hives were significant.",
            "Feeding failed to show significant effects on swarming compared with water (p = 0.5).",
        ] {
            assert_eq!(one(text).0, ClaimKind::NotSignificant, "{text}");
        }
        assert!(claims("There was no significant difference in wing length (p = 0.6).")[0].2.says_significant);
    }

    #[test]
    fn differences_with_their_direction() {
        let all = claims("Honey yield was significantly higher in fed hives than in controls (p = 0.01).");
        assert_eq!(all[0].0, ClaimKind::Difference);
        assert_eq!(all[0].1, "Honey yield was significantly higher in fed hives than in controls");
        assert_eq!(all[0].2.direction, Some(Direction::Higher));
        assert!(all[0].2.says_significant);
        let all = claims("At 12 weeks, mite counts decreased from 14.1 to 9.0 (p < 0.001).");
        assert_eq!((all[0].0, all[0].2.direction), (ClaimKind::Difference, Some(Direction::Lower)));
        assert!(all[0].1.starts_with("mite counts"), "{}", all[0].1);
        assert_eq!(one("Queen age was associated with swarming (p = 0.02).").0, ClaimKind::Difference);
    }

    #[test]
    fn trend_equivalence_and_one_arm() {
        assert_eq!(one("There was a trend towards heavier hives in the fed group (p = 0.07).").0, ClaimKind::Trend);
        assert_eq!(one("The gain was marginally significant (p = 0.06).").0, ClaimKind::Trend);
        assert_eq!(one("Fondant was as effective as syrup in preventing losses (p = 0.6).").0, ClaimKind::Equivalence);
        assert_eq!(one("Fondant was non-inferior to syrup.").0, ClaimKind::Equivalence);
        assert_eq!(
            one("Hive weight increased significantly with fondant (p = 0.01) but not water (p = 0.3).").0,
            ClaimKind::WithinGroupContrast
        );
        assert_eq!(
            one("A significant improvement in brood area was observed only in the fondant group (p = 0.02).").0,
            ClaimKind::WithinGroupContrast
        );
    }

    #[test]
    fn misreadings_of_p() {
        assert_eq!(
            one("With p = 0.03 there is only a 3% probability that this result was due to chance.").0,
            ClaimKind::PMisread
        );
        assert_eq!(
            one("Yield was highly significantly greater with syrup (p < 0.001).").0,
            ClaimKind::SignificanceAsSize
        );
        assert!(kinds("The probability that a bee returns was 3% in both hives at dusk.").is_empty());
    }

    #[test]
    fn plans_and_everyday_words_make_no_claim() {
        for text in [
            "We tested whether hive weight differed between the groups.",
            "Differences between groups were analysed with the t test.",
            "P < 0.05 was considered statistically significant.",
            "The aim was to detect a significant difference in honey yield.",
            "Hives with clinically significant disease were excluded.",
            "It was hypothesised that fed hives would be heavier than controls.",
            "The boxes were identical in appearance.",
            "Not all beekeepers improved their records.",
            "More than 50 colonies were visited.",
        ] {
            assert!(kinds(text).is_empty(), "{text}: {:?}", claims(text));
        }
    }

    #[test]
    fn clauses_make_claims_of_their_own() {
        use ClaimKind::*;
        let text = "Honey yield was higher in fed hives (p = 0.01), but there was no difference in swarming (p = 0.8).";
        assert_eq!(kinds(text), [Difference, NoDifference]);
        let text = "Mite counts fell by 12% in the fondant group (p = 0.02), whereas wing length did not differ \
                    significantly between the groups.";
        assert_eq!(kinds(text), [Difference, NotSignificant]);
        let text = "Brood area increased in both groups (p = 0.01), with no differences between groups.";
        assert_eq!(kinds(text), [Difference, NoDifference]);
    }

    #[test]
    fn sameness_in_running_text() {
        for (text, kind) in [
            ("The need for feeding was also not reduced (p = 0.4).", ClaimKind::NoDifference),
            ("If admitted, the length of stay in the apiary was not increased (p = 0.4).", ClaimKind::NoDifference),
            ("There was no evidence that fondant exerted an effect on swarming.", ClaimKind::NoDifference),
            ("There was similarity between the yields of the two apiaries.", ClaimKind::NoDifference),
            ("Yields of honey were almost equal up to the second week.", ClaimKind::NoDifference),
            ("Smoke did not attenuate the alarm of the colony.", ClaimKind::NoDifference),
            ("Fondant did not result in any reduction of swarming.", ClaimKind::NoDifference),
            ("Fondant had little effect on swarming.", ClaimKind::NoDifference),
            ("Fed hives survived at a rate comparable to the control group (23%).", ClaimKind::NoDifference),
            ("Stings were rare, mild and similar between the fed and control groups.", ClaimKind::NoDifference),
            ("The survey showed similar mite control in the two groups.", ClaimKind::NoDifference),
            ("Changes in weight were observed neither in the fed nor in the control hives.", ClaimKind::NoDifference),
            ("The objective weighing did not show significant improvements.", ClaimKind::NotSignificant),
            ("Statistical significance was not reached.", ClaimKind::NotSignificant),
            ("The gain was no longer significant after the summer.", ClaimKind::NotSignificant),
            ("Relief with fondant was similar to that of plain syrup (p = 0.4).", ClaimKind::NoDifference),
            ("There remained no effect when losses were expressed per hive.", ClaimKind::NoDifference),
            (
                "This trial, the first to test changes in wax, failed to show a significant effect.",
                ClaimKind::NotSignificant,
            ),
            ("Fondant was not inferior to syrup (p = 0.3).", ClaimKind::Equivalence),
            ("A trend was noticed for the decrease of mites.", ClaimKind::Trend),
        ] {
            assert_eq!(one(text).0, kind, "{text}");
        }
        use ClaimKind::*;
        let text = "None of the five scores changed significantly between the hives over time, nor did general vigour.";
        assert_eq!(kinds(text), [NotSignificant, NotSignificant]);
        let text = "Weight increased (p = 0.01) in fed and control hives but with no differences between the groups.";
        assert_eq!(kinds(text), [Difference, NoDifference]);
        let text = "Weight increased after feeding, but no clear dose-response was observed.";
        assert_eq!(kinds(text), [Difference, NoDifference]);
        let text = "There were no associations between feeding and vigour in any group, and no evidence for \
                    differences in swarming.";
        assert_eq!(kinds(text), [NoDifference, NoDifference]);
    }

    #[test]
    fn methods_limits_and_risks_are_no_claims() {
        for text in [
            "Smoke poses no significant risk to the keeper.",
            "The elevations were not greater than 2 times the upper limit of normal.",
            "The change was below 15%, confirming that the processed samples were stable.",
            "This result was statistically very similar to the result from the second analysis.",
            "The inclusion of the covariates did not change the results.",
            "We did not determine the benefits of syrup.",
            "Levels of mites in both groups were comparable to levels found in the Highland Study of Apiaries.",
            "No previous study has evaluated the effect of fondant on swarming.",
            "When a significant interaction was detected, hives were compared in pairs.",
            "The trial was statistically underpowered to detect worthwhile differences.",
            "There were no changes to the protocol.",
            "We did not use a veil to exclude effects of smell.",
            "This ensures that the two programmes are similar in length.",
            "It is possible that we failed to detect any change in weight.",
            "Capsules were indistinguishable from the placebo.",
        ] {
            assert!(kinds(text).is_empty(), "{text}: {:?}", claims(text));
        }
    }

    #[test]
    fn changes_need_no_p_beside_them() {
        for text in [
            "Mite counts increased after the summer.",
            "Both groups reduced their losses from spring to autumn.",
            "Fondant induced a decrease in mite counts from 15 to 12.",
        ] {
            assert_eq!(one(text).0, ClaimKind::Difference, "{text}");
        }
        for text in ["Keepers who improved from spring to autumn were thanked.", "Hives with reduced brood were fed."] {
            assert!(kinds(text).is_empty(), "{text}: {:?}", claims(text));
        }
    }

    #[test]
    fn attributions() {
        let of = |text: &str| claims(text)[0].2.attribution;
        assert_eq!(of("Hive characteristics were similar in the two groups."), Attribution::Baseline);
        assert_eq!(of("Hive weight did not differ between the groups (p = 0.4)."), Attribution::ThisStudy);
        assert_eq!(
            of("Previous studies have shown that feeding did not affect swarming (p = 0.4)."),
            Attribution::OtherAuthors
        );
    }
}
