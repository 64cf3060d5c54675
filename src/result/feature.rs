//! What a sentence says about an analysis that a plain recomputation must respect.

use super::Feature;
use crate::context::Test;
use crate::reading::lexicon::Classes;
use crate::reading::{PValue, Role};
use crate::reading::{Readings, SentenceView};
use crate::text::Span;

/// Words and the feature they show, wherever they stand in the result's sentence.
const WORDS: &[(&str, Feature)] = &[
    ("paired", Feature::Paired),
    ("repeated", Feature::Paired),
    ("crossover", Feature::Paired),
    ("baseline", Feature::Paired),
    ("posttest", Feature::Paired),
    ("pretest", Feature::Paired),
    ("intragroup", Feature::Paired),
    ("adjusted", Feature::Adjusted),
    ("adjusting", Feature::Adjusted),
    ("adjustment", Feature::Adjusted),
    ("ancova", Feature::Adjusted),
    ("covariate", Feature::Adjusted),
    ("covariates", Feature::Adjusted),
    ("covariance", Feature::Adjusted),
    ("regression", Feature::Adjusted),
    ("multivariate", Feature::Adjusted),
    ("multivariable", Feature::Adjusted),
    ("multilevel", Feature::Clustered),
    ("cluster", Feature::Clustered),
    ("clusters", Feature::Clustered),
    ("clustering", Feature::Clustered),
    ("villages", Feature::Clustered),
    ("controlling", Feature::Adjusted),
    ("controlled", Feature::Unclear),
    ("stratified", Feature::Adjusted),
    ("weighted", Feature::Adjusted),
    ("imputed", Feature::Imputed),
    ("imputation", Feature::Imputed),
    ("geometric", Feature::Transformed),
    ("log", Feature::Transformed),
    ("transformed", Feature::Transformed),
    ("median", Feature::Ranked),
    ("medians", Feature::Ranked),
    ("bonferroni", Feature::Corrected),
    ("tukey", Feature::Corrected),
    ("survival", Feature::TimeToEvent),
    ("kaplan", Feature::TimeToEvent),
    ("hazard", Feature::TimeToEvent),
    ("actuarial", Feature::TimeToEvent),
];

/// The features that the words of a sentence show, each once.
pub(super) fn of_words(view: &SentenceView) -> Vec<(Feature, Span)> {
    let mut found: Vec<(Feature, Span)> = Vec::new();
    for i in 0..view.len() {
        // The numbers are those of "3 groups".
        if !view.is(i, Classes::FEATURE) && view.number(i).is_none() {
            continue;
        }
        let feature = WORDS.iter().find(|(w, _)| view.eq(i, w)).map(|&(_, f)| f).or_else(|| phrase(view, i));
        if let Some(feature) = feature
            && found.iter().all(|&(f, _)| f != feature)
        {
            found.push((feature, view.span(i, i)));
        }
    }
    found
}

fn phrase(view: &SentenceView, i: usize) -> Option<Feature> {
    let before_after = view.eq(i, "before") && view.any(i + 1, &["and", "to"]) && view.eq(i + 2, "after");
    let pre_post = view.any(i, &["pre"]) && view.any(i + 1, &["and", "to", "vs", "-", "versus"]);
    if before_after
        || pre_post
        || (view.eq(i, "within") && view.any(i + 1, &["group", "groups", "subject", "subjects", "each"]))
    {
        return Some(Feature::Paired);
    }
    if view.any(i, &["mixed"]) && view.any(i + 1, &["model", "models", "effects", "effect", "linear"]) {
        return Some(Feature::Adjusted);
    }
    let number = view.any(i, &["three", "four", "five", "six", "all", "3", "4", "5", "6"]);
    if number && view.any(i + 1, &["groups", "arms", "treatments", "conditions"]) {
        return Some(Feature::OtherGroups);
    }
    None
}

/// The features that a p-value's own reading shows.
pub(super) fn of_p(p: &PValue) -> Option<Feature> {
    if p.corrected {
        return Some(Feature::Corrected);
    }
    match p.role {
        Role::WithinGroup => Some(Feature::Paired),
        Role::Interaction | Role::TrendOrJoint => Some(Feature::OtherGroups),
        _ => None,
    }
}

/// The features that a test named for the result shows.
pub(super) fn of_test(test: Test) -> Option<Feature> {
    use Test::*;
    match test {
        PairedT | RepeatedMeasuresAnova | WilcoxonSignedRank | Friedman | McNemar => Some(Feature::Paired),
        Ancova | MixedModel | LogisticRegression | LinearRegression | PoissonRegression | CochranMantelHaenszel => {
            Some(Feature::Adjusted)
        }
        Gee => Some(Feature::Clustered),
        MannWhitney | KruskalWallis | Spearman | Permutation => Some(Feature::Ranked),
        LogRank | Cox => Some(Feature::TimeToEvent),
        PostHoc => Some(Feature::Corrected),
        AssumptionOrFit => Some(Feature::OtherGroups),
        T | WelchT | Anova | ChiSquared | YatesChiSquared | FisherExact | Z | Pearson => None,
    }
}

/// The features that the groups themselves show: changes, medians, "from 5.2 … to 4.1".
pub(super) fn of_groups(view: &SentenceView, readings: &Readings, groups: &[usize]) -> Vec<(Feature, Span)> {
    let mut found = Vec::new();
    for &g in groups {
        let group = &readings.groups[g];
        if group.change {
            found.push((Feature::Change, group.span));
        }
        if group.median.is_some() {
            found.push((Feature::Ranked, group.span));
        }
        let at = view.token_at(group.span.start);
        let after = view.token_at(group.span.end);
        if group.sentence == view.id && (at > 0 && view.eq(at - 1, "from") || view.eq(after, "to")) {
            found.push((Feature::Paired, group.span));
        }
    }
    found.dedup_by_key(|f| f.0);
    found
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::reading::lexicon::classes;

    #[test]
    fn the_lexicon_knows_every_word() {
        assert!(WORDS.iter().all(|(word, _)| classes(word).meets(Classes::FEATURE)));
    }
}
