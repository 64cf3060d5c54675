//! What single sentences say of the design and of how figures are given.

use super::{Context, Stated};
use crate::reading::lexicon::Classes;
use crate::reading::{SentenceView, SpreadKind};
use crate::text::Span;

/// Statements that count in a Methods section only.
pub(super) fn methods(view: &SentenceView, context: &mut Context) {
    let here = |i: usize, j: usize| Some(Stated { value: (), span: span(view, i, j) });
    for i in 0..view.len() {
        if !view.tokens[i].is_word() {
            continue;
        }
        if context.adjusted.is_none() {
            let adjusted = view.any(i, &["adjusted", "adjusting", "adjustment", "controlling", "controlled"])
                && view.any(i + 1, &["for"])
                && !(i + 2..i + 5).any(|j| view.any(j, &["multiple", "multiplicity"]))
                || view.any(i, &["covariate", "covariates", "ancova", "covariance"])
                || view.any(i, &["multivariable", "multivariate"])
                    && (i + 1..i + 4).any(|j| view.any(j, &["regression", "model", "models", "analysis"]));
            if adjusted {
                context.adjusted = here(i, i + 1);
            }
        }
        if context.paired.is_none()
            && view.any(i, &["paired"])
            && !view.any(i.wrapping_sub(1), &["un", "non"])
            && (i + 1..i + 6).any(|j| view.any(j, &["test", "tests", "samples", "comparisons"]))
        {
            context.paired = here(i, i + 1);
        }
        if context.clustered.is_none() {
            let cluster = view.any(i, &["cluster", "clusters", "clustered", "intracluster"])
                && (i.saturating_sub(4)..i + 5).any(|j| {
                    view.any(
                        j,
                        &[
                            "randomised",
                            "randomized",
                            "trial",
                            "randomisation",
                            "randomization",
                            "effect",
                            "design",
                            "correlation",
                            "clustering",
                            "allocation",
                            "level",
                        ],
                    )
                });
            let within = view.any(i, &["intraclass", "intracluster"]) && view.any(i + 1, &["correlation"]);
            if cluster || within && view.any(i, &["intracluster"]) {
                context.clustered = here(i, i + 1);
            }
        }
    }
}

/// Statements that count wherever this study speaks of itself.
pub(super) fn anywhere(view: &SentenceView, context: &mut Context) {
    for i in 0..view.len() {
        let token = &view.tokens[i];
        if !token.is_word() {
            continue;
        }
        if context.crossover.is_none() && token.is(Classes::RARE) {
            let cross = view.any(i, &["crossover"])
                || view.any(i, &["cross"]) && view.sign(i + 1, '-') && view.any(i + 2, &["over"]);
            if cross
                && (i.saturating_sub(6)..i + 8)
                    .any(|j| view.any(j, &["design", "trial", "study", "randomised", "randomized", "blind"]))
            {
                context.crossover = Some(Stated { value: (), span: span(view, i, i) });
            }
        }
        if context.non_inferiority.is_none() && token.is(Classes::RARE) {
            let one = view.any(i, &["noninferiority", "noninferior"]);
            let two = view.any(i, &["non"]) && view.any(i + 2, &["inferiority", "inferior"]);
            if (one || two)
                && (i.saturating_sub(6)..i + 9)
                    .any(|j| view.any(j, &["margin", "trial", "design", "study", "test", "limit", "hypothesis"]))
            {
                context.non_inferiority = Some(Stated { value: (), span: span(view, i, if two { i + 2 } else { i }) });
            }
        }
        if context.level.is_none() && (token.is(Classes::CI) || token.is(Classes::CONFIDENCE)) {
            level(view, i, context);
        }
        if context.spread.is_none() && token.is(Classes::MEAN.or(Classes::MEDIAN)) {
            spread(view, i, context);
        }
    }
}

/// "95 % confidence intervals": the level that the study uses throughout.
fn level(view: &SentenceView, i: usize, context: &mut Context) {
    let Some(at) = i.checked_sub(2) else { return };
    // `95 % CI`, `95 % two-sided CI` is left to the interval itself.
    let (number, percent) =
        if view.sign(i - 1, '%') || view.is(i - 1, Classes::PERCENT) { (at, true) } else { (i - 1, false) };
    let Some(value) = view.number(number).filter(|x| (80.0..100.0).contains(&x.value())) else { return };
    if percent || view.sign(i - 1, '-') {
        context.level = Some(Stated { value, span: span(view, number, i) });
    }
}

/// "values are means ± SD", "expressed as mean (standard error)": what an unnamed ± stands for.
fn spread(view: &SentenceView, i: usize, context: &mut Context) {
    // A sentence of form, not one with figures of its own.
    let declares = (i.saturating_sub(14)..i).any(|j| {
        view.any(
            j,
            &[
                "values",
                "expressed",
                "presented",
                "reported",
                "given",
                "shown",
                "summarised",
                "summarized",
                "described",
                "data",
                "represent",
                "displayed",
                "results",
            ],
        )
    });
    let mut j = i + 1;
    if view.any(j, &["values", "value", "of"]) {
        j += 1;
    }
    let sign = view.sign(j, '±');
    if !(sign || view.signs(j, &['(', ',', '[']) || view.any(j, &["and", "with"])) {
        return;
    }
    while view.signs(j, &['±', '(', '[', ',']) || view.any(j, &["and", "with", "the", "1", "one", "its", "their"]) {
        j += 1;
    }
    // "standard error", "standard deviation": both end in the word that tells.
    let kind = if view.any(j, &["standard", "std"]) {
        if view.any(j + 1, &["error", "errors"]) {
            SpreadKind::Se
        } else if view.any(j + 1, &["deviation", "deviations", "dev"]) {
            SpreadKind::Sd
        } else {
            return;
        }
    } else if view.any(j, &["sd", "sds"]) || view.any(j, &["s"]) && view.any(j + 2, &["d"]) {
        SpreadKind::Sd
    } else if view.any(j, &["se", "sem", "sems", "ses"]) || view.any(j, &["s"]) && view.any(j + 2, &["e"]) {
        SpreadKind::Se
    } else {
        return;
    };
    // `5.2 (mean ± SD)` names one figure; `mean (SD) was 5` too. With the sign itself the form holds for all.
    if !(declares || sign) {
        return;
    }
    let last = if view.any(j, &["standard", "std"]) { j + 1 } else { j };
    context.spread = Some(Stated { value: kind, span: span(view, i, last) });
}

fn span(view: &SentenceView, i: usize, j: usize) -> Span {
    view.span(i, j.min(view.len() - 1))
}
