//! Sentences that conclude more, or other things, than the figures beside them carry.

use crate::manuscript::{BlockKind, SectionKind};
use crate::query::{Explanation, RepairKind};
use crate::reading::{Attribution, Claim, ClaimKind, PValue, Role, within};
use crate::rule::check::{Backing, Claimed, Per, Says, Whose};
use crate::rule::finding::{Draft, Finding};
use crate::rule::level::Weight;
use crate::rule::look::{Look, is_effect};
use crate::rule::wording;
use crate::text::Span;
use std::collections::BTreeMap;

/// What stands behind a claim, when it is of the backing that a rule asks for.
struct Found<'a> {
    p: Vec<&'a PValue>,
    /// An interval stands in the sentence: readers can judge, so less hangs on the words.
    interval: Option<Span>,
}

/// Claims of some kinds, about some matters, on some ground.
pub fn claim(facts: &Look, kinds: &[Claimed], of: &[Whose], backing: Backing, per: Per) -> Vec<Finding> {
    let mut singles: Vec<Finding> = Vec::new();
    for claim in &facts.readings.claims {
        let wanted = kinds.iter().any(|k| k.is(kind_of(facts, claim))) && of.iter().any(|w| w.is(claim.attribution));
        // What an introduction tells is what others found, what the Methods tell is how figures were used.
        let section = facts.manuscript.section(claim.span).kind;
        let wanted = wanted
            && !matches!(section, SectionKind::Introduction | SectionKind::Methods)
            && !facts.cites_others(claim);
        if let Some(found) = wanted.then(|| backed(facts, claim, backing)).flatten() {
            singles.push(finding(facts, claim, &found));
        }
    }
    match per {
        Per::Claim => singles,
        Per::Section => by_section(facts, singles),
    }
}

/// Whether a negation stands between the beginning of a claim and its p: "a significant effect on A without significantly
/// affecting B (P > 0.05)".
fn turned(facts: &Look, claim: &Claim, p: &PValue) -> bool {
    if p.span.block != claim.span.block || p.span.start <= claim.span.start {
        return false;
    }
    let text = &facts.manuscript.block(claim.span).text[claim.span.start as usize..p.span.start as usize];
    claim.kind == ClaimKind::Difference && ["without", " nor ", "neither"].iter().any(|w| text.contains(w))
}

/// "No significant difference" and "no evidence of a difference" say that something is missing, not that there is no
/// difference.
fn kind_of(facts: &Look, claim: &Claim) -> ClaimKind {
    let careful = claim.says_significant || facts.sentence(claim).contains("evidence");
    match claim.kind {
        ClaimKind::NoDifference if careful => ClaimKind::NotSignificant,
        kind => kind,
    }
}

fn backed<'a>(facts: &Look<'a>, claim: &Claim, backing: Backing) -> Option<Found<'a>> {
    let r = facts.readings;
    let sentence = facts.sentence(claim);
    let p = facts.p_of(claim);
    let alpha = facts.alpha;
    let own = claim.sentence..claim.sentence + 1;
    let interval = within(&r.intervals, |i| i.sentence, own.clone()).first().map(|i| i.span);
    let elsewhere = |p: &&PValue| matches!(p.role, Role::Interaction | Role::AssumptionOrFit | Role::Baseline);
    let in_sentence = || within(&r.p, |p| p.sentence, own.clone()).iter();
    let holds = match backing {
        Backing::Any => true,
        Backing::PAboveAlpha => {
            let all = !p.is_empty() && p.iter().all(|p| is_effect(p) && alpha.below(p));
            let margin = sentence.contains("margin") || facts.context.non_inferiority.is_some();
            let judged = interval.is_some() && margin;
            all && !judged && !in_sentence().any(|p| elsewhere(&p)) && !excepted(&sentence)
        }
        Backing::NoPBelowAlpha => {
            let trend = p.iter().any(|p| matches!(p.role, Role::TrendOrJoint | Role::Interaction));
            // Without a p only the plain wording is asked about: "opposite trends" may be of another kind.
            let quote = facts.quote(claim.span).to_lowercase();
            let plain = !p.is_empty() || quote.contains("toward") || quote.contains("significan");
            plain && !trend && p.iter().all(|p| alpha.below(p))
        }
        Backing::Nothing => {
            let text = matches!(facts.manuscript.block(claim.span).kind, BlockKind::Paragraph | BlockKind::ListItem);
            let bare = text && interval.is_none() && !facts.figures_in_block(claim.span);
            // A discussion or a conclusion sums up figures that stand in the results.
            let told = facts.reports_results(claim.span) && !facts.drives_message(claim.span);
            let points = ["appendix", "supplement", "see ", "described", "previous", "elsewhere"];
            let pointed = points.iter().any(|w| sentence.contains(w)) || facts.points_to_table(claim.span);
            bare && told && !pointed && !excepted(&sentence)
        }
        Backing::NoMargin => {
            let margin = facts.context.non_inferiority.is_some()
                || facts.mentions(&["margin", "two one-sided", "tost", "equivalence limit", "equivalence bound"]);
            let methods =
                ["method", "analysis", "analyses", "model", "results from"].iter().any(|w| sentence.contains(w));
            !margin && !methods
        }
        Backing::NoBetweenGroupTest => {
            // A contrast of times within one group, or of correlations, is another matter.
            let words = [
                "interaction",
                "between group",
                "between-group",
                "between the",
                "between-arm",
                "correlat",
                "associat",
                "predict",
                "but not from",
                "but not at",
                "but not after",
                "but not during",
                "but not between",
                "but not with",
            ];
            !in_sentence().any(|p| p.role == Role::Interaction)
                && !words.iter().any(|w| sentence.contains(w))
                && contrasts_arms(facts, &sentence)
        }
    };
    holds.then_some(Found { p, interval })
}

/// What stands behind "but not", "only" or "whereas" is an arm, not another outcome, muscle or time.
fn contrasts_arms(facts: &Look, sentence: &str) -> bool {
    let turn = ["but not", "only", "whereas", "while"].iter().filter_map(|w| sentence.find(w)).min();
    // A few words on, the arm must be named.
    const NEAR: usize = 90;
    let from = turn.unwrap_or(0);
    let tail = &sentence[from..sentence.floor_char_boundary(from + NEAR)];
    let named = ["group", " arm", "control", "placebo", "usual care"].iter().any(|w| tail.contains(w));
    named || facts.context.arms.iter().any(|a| a.label.len() > 1 && tail.contains(&a.label.to_lowercase()))
}

/// The sentence makes an exception, weighs its own claim, or tells of the start; what is excepted cannot be told safely.
fn excepted(sentence: &str) -> bool {
    let start = (sentence.contains("before ") || sentence.contains("prior to ")) && !sentence.contains("after")
        || ["pre-treatment", "pretreatment", "at entry", "at the start", "no longer"]
            .iter()
            .any(|w| sentence.contains(w));
    // Agreement of centres or raters is a check of the trial, not a comparison of its arms.
    let centres =
        ["study cent", "trial cent", "sites", "raters", "observers", "heterogen"].iter().any(|w| sentence.contains(w));
    let judged = ["considered", "judged", "felt ", "opinion", "reported that"].iter().any(|w| sentence.contains(w));
    start
        || centres
        || judged
        || [
            "except",
            "other than",
            "apart from",
            "cannot be excluded",
            "could not be excluded",
            "underpowered",
            "too small",
        ]
        .iter()
        .any(|w| sentence.contains(w))
}

fn finding(facts: &Look, claim: &Claim, found: &Found) -> Finding {
    let quote = facts.shown(claim.span);
    let alpha = facts.alpha;
    let mut p: Vec<String> = found.p.iter().map(|p| p_words(facts, p)).collect();
    p.dedup();
    let says = match (&p[..], found.interval) {
        ([], None) => format!("“{quote}” stands without a p-value or an interval in its sentence."),
        ([], Some(i)) => format!("“{quote}” stands beside {}.", facts.shown(i)),
        (p, None) => format!("“{quote}” stands beside {}; alpha is {}.", p.join(" and "), alpha.words()),
        (p, Some(i)) => {
            let interval = facts.shown(i);
            format!("“{quote}” stands beside {interval} and {}; alpha is {}.", p.join(" and "), alpha.words())
        }
    };
    let weight = Weight {
        drives_message: facts.drives_message(claim.span) && !facts.interval_in_part(claim.span),
        // An estimate in the sentence lets readers judge something, an interval more.
        peripheral: found.interval.is_some() || facts.readings.estimates.iter().any(|e| e.sentence == claim.sentence),
        ..Weight::reporting()
    };
    let mut f = Finding::at(claim.span, weight, says);
    f.related = found.p.iter().map(|p| (p.span, "the p-value".to_owned())).collect();
    f.related.extend(found.interval.map(|i| (i, "the interval".to_owned())));
    f.figures.extend(found.p.iter().map(|p| p.span));
    f.fills = vec![("alpha", alpha.words())];
    if !p.is_empty() {
        f.fills.push(("p", p.join(" and ")));
        f.explanations.extend(alpha_assumed(facts));
    }
    f.results = results_of(facts, &found.p);
    f.repair = repair(facts, claim, found);
    f
}

fn alpha_assumed(facts: &Look) -> Option<Explanation> {
    let assumption = crate::reading::Assumption::Alpha05;
    (!facts.alpha.stated).then(|| wording::assumption(assumption))
}

/// A bare cell or `NS` gets its letter, so that the sentence around it reads.
fn p_words(facts: &Look, p: &PValue) -> String {
    let quote = facts.shown(p.span);
    if quote.contains(['p', 'P']) || p.value.is_none() { quote } else { format!("P {quote}") }
}

fn results_of(facts: &Look, p: &[&PValue]) -> Vec<usize> {
    let mut results: Vec<usize> = p.iter().flat_map(|p| facts.results_with(p.span)).collect();
    results.sort_unstable();
    results.dedup();
    results
}

/// "no difference" → "no significant difference", with blanks for what lets readers judge.
fn repair(facts: &Look, claim: &Claim, found: &Found) -> Option<Draft> {
    if kind_of(facts, claim) != ClaimKind::NoDifference {
        return None;
    }
    let quote = facts.quote(claim.span);
    // Only where the phrase is a plain one: elsewhere a new wording is the author's to find.
    let plain = [
        ("no differences", "no significant differences"),
        ("no difference", "no significant difference"),
        ("did not differ", "did not differ significantly"),
    ];
    let (phrase, careful) = plain.into_iter().find(|(phrase, _)| quote.contains(phrase))?;
    let blanks = if found.interval.is_some() { "" } else { " (difference …, 95 % CI … to …)" };
    let text = format!("{}{blanks}", quote.replacen(phrase, careful, 1));
    Some(Draft { kind: RepairKind::Replace, at: claim.span, text, needs_confirmation: true })
}

/// One finding for each part of the manuscript, beginning with its first claim.
fn by_section(facts: &Look, singles: Vec<Finding>) -> Vec<Finding> {
    let mut parts: BTreeMap<u32, Vec<Finding>> = BTreeMap::new();
    for f in singles {
        parts.entry(facts.part(f.at[0])).or_default().push(f);
    }
    let mut findings = Vec::new();
    for (part, mut all) in parts {
        let count = all.len();
        let at: Vec<Span> = all.iter().map(|f| f.at[0]).collect();
        let first = all.swap_remove(0);
        let label = facts.manuscript.sections[part as usize].title.clone();
        let more = match count {
            1 => String::new(),
            2 => " One more claim in this section stands likewise.".to_owned(),
            n => format!(" {} more claims in this section stand likewise.", n - 1),
        };
        let mut wide = Finding::wide(at.clone(), first.weight, format!("{}{more}", first.says), vec![label]);
        wide.related = at[1..].iter().map(|&s| (s, "another such claim".to_owned())).collect();
        wide.repair = first.repair;
        wide.fills = first.fills;
        wide.fills.push(("count", count.to_string()));
        findings.push(wide);
    }
    findings
}

/// "Significant" beside a p above alpha, or "not significant" beside one below.
pub fn against_p(facts: &Look, says: Says) -> Vec<Finding> {
    let alpha = facts.alpha;
    let mut findings = Vec::new();
    for claim in &facts.readings.claims {
        let kind = match says {
            Says::Significant => claim.kind == ClaimKind::Difference && claim.says_significant,
            // "A, but not B, significantly reduced": B's figure is not the one that stands there.
            Says::NotSignificant => {
                kind_of(facts, claim) == ClaimKind::NotSignificant && !facts.quote(claim.span).starts_with("not ")
            }
        };
        let told = facts.manuscript.section(claim.span).kind == SectionKind::Introduction
            || matches!(claim.attribution, Attribution::Plan | Attribution::OtherAuthors);
        if !kind || told || excepted(&facts.sentence(claim)) {
            continue;
        }
        let p = facts.p_of(claim);
        // A p inside the words of the claim may belong to what they begin with, not to what they conclude.
        let inside = says == Says::NotSignificant && p.iter().any(|p| claim.span.contains(p.span));
        if inside {
            continue;
        }
        let against = |p: &&PValue| match says {
            Says::Significant => alpha.below(p),
            Says::NotSignificant => alpha.above(p),
        };
        let comparable = |p: &&PValue| is_effect(p) || matches!(p.role, Role::WithinGroup | Role::Baseline);
        let all = !p.is_empty() && p.iter().all(|p| against(p) && comparable(p) && !p.corrected);
        if !all
            || turned(facts, claim, p[0])
            || !direct(facts, claim, p[0])
            || says == Says::NotSignificant && corrects(facts, claim)
        {
            continue;
        }
        let quote = facts.shown(claim.span);
        let mut words: Vec<String> = p.iter().map(|p| p_words(facts, p)).collect();
        words.dedup();
        let side = if says == Says::Significant { "above" } else { "below" };
        let text = format!("“{quote}” stands beside {}, {side} alpha = {}.", words.join(" and "), alpha.words());
        let weight = Weight { drives_message: facts.drives_message(claim.span), ..Weight::reporting() };
        let mut f = Finding::at(claim.span, weight, text);
        f.related = p.iter().map(|p| (p.span, "the p-value".to_owned())).collect();
        f.figures.extend(p.iter().map(|p| p.span));
        f.fills = vec![("p", words.join(" and ")), ("alpha", alpha.words())];
        f.explanations.extend(alpha_assumed(facts));
        f.results = results_of(facts, &p);
        findings.push(f);
    }
    findings
}

/// Nothing between the claim and its p turns to another comparison.
fn direct(facts: &Look, claim: &Claim, p: &PValue) -> bool {
    let between = match p.span.start >= claim.span.end {
        true => facts.between(claim.span, p.span),
        false => facts.between(p.span, claim.span),
    };
    let turns =
        ["but", "except", "whereas", "while", "although", "however", "not", "nor", "only", "than", "unless", "if"];
    !between.split(|c: char| !c.is_alphabetic()).any(|w| turns.contains(&w) && w != "than")
        && !between.contains("other than")
        && !between.contains([';', ':'])
}

/// A correction for several comparisons may rightly leave a small p "not significant".
fn corrects(facts: &Look, claim: &Claim) -> bool {
    let sentence = facts.sentence(claim);
    let words = ["correct", "adjust", "bonferroni", "multiple", "holm", "threshold", "clinical", "non-inferior"];
    facts.context.multiplicity.is_some() || words.iter().any(|w| sentence.contains(w))
}
