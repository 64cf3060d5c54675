//! Words of claims and planning statements, for the lexicon.
//!
//! The bits from 48 on are classes of the claims recogniser alone.

use super::lexicon::Classes;

/// Auxiliaries and copulas: they make a clause finite.
pub(super) const FINITE: Classes = Classes(1 << 48);
/// higher, fewer, superior …
pub(super) const COMPARATIVE: Classes = Classes(1 << 49);
/// increased, improved, fell …: past forms of verbs of change.
pub(super) const CHANGED: Classes = Classes(1 << 50);
/// showed, found, observed, suggests …
pub(super) const REPORT: Classes = Classes(1 << 51);
/// marginally, borderline, approached, tended …
pub(super) const HEDGE: Classes = Classes(1 << 52);
/// whether, will, hypothesised …: what follows is planned or asked, not found.
pub(super) const PLAN: Classes = Classes(1 << 53);
/// but, whereas, although …: a new clause begins.
pub(super) const BREAK: Classes = Classes(1 << 54);
/// than, compared, between, among …
pub(super) const THAN: Classes = Classes(1 << 55);
/// Verbs whose denial says that nothing differs: differ, change, affect, improve …
pub(super) const DIFFER: Classes = Classes(1 << 56);
/// previous, literature, authors …: other people's findings.
pub(super) const OTHERS: Classes = Classes(1 << 57);
/// normality, goodness, fit, heterogeneity …
pub(super) const FIT: Classes = Classes(1 << 58);
/// analysed, calculated, assessed …: what was done, not what was found.
pub(super) const METHOD: Classes = Classes(1 << 59);
/// Words that only stand before a noun: articles, prepositions, conjunctions.
pub(super) const FUNCTION: Classes = Classes(1 << 60);
/// Bonferroni, Tukey, FDR …
pub(super) const MULTIPLE: Classes = Classes(1 << 61);
/// may, might, could …
pub(super) const MODAL: Classes = Classes(1 << 62);
/// highest, lowest, most, likely …
pub(super) const EXTREME: Classes = Classes(1 << 63);

type Row = (&'static [&'static str], Classes);

// Rows of words are easier to read in full lines.
#[rustfmt::skip]
pub(super) const WORDS: &[Row] = &[
    (
        &[
            "no", "not", "without", "neither", "nor", "never", "none", "cannot", "lack", "lacked", "failed", "fail",
            "fails", "absence", "didn't", "wasn't", "weren't", "nobody", "unable",
        ],
        Classes::NEGATION,
    ),
    (
        &[
            "significant", "significantly", "significance", "nonsignificant", "nonsignificantly", "insignificant",
            "insignificantly", "significative", "significances", "statistically",
        ],
        Classes::SIGNIFICANCE,
    ),
    (
        &[
            "difference", "differences", "change", "changes", "effect", "effects", "improvement", "improvements",
            "reduction", "reductions", "increase", "increases", "decrease", "decreases", "decline", "declines",
            "rise", "drop", "gain", "gains", "loss", "benefit", "benefits", "influence", "impact", "variation",
            "variations", "advantage", "superiority", "deterioration", "worsening", "alteration", "alterations",
            "discrepancy", "discrepancies", "lowering", "elevation", "elevations", "variability", "heterogeneity",
            "contrast", "gap", "fall", "prolongation", "modification", "differential", "disparity", "disparities",
            "imbalance", "imbalances", "protection", "enhancement", "inhibition",
        ],
        Classes::DIFFERENCE,
    ),
    (
        &[
            "change", "changes", "changed",
        ],
        Classes::CHANGE,
    ),
    (
        &[
            "association", "associations", "associated", "correlation", "correlations", "correlated", "correlate",
            "correlates", "relationship", "relationships", "relation", "related", "predictor", "predictors",
            "predictive", "predicted", "predict", "predicts", "interaction", "interactions", "linked", "associate",
            "link",
        ],
        Classes::ASSOCIATION,
    ),
    (
        &[
            "similar", "comparable", "identical", "unchanged", "unaffected", "unaltered", "indistinguishable",
            "equally", "evenly", "equal", "same", "stable", "constant", "balanced", "comparably", "alike",
            "matched", "homogeneous", "equivalently", "undifferentiated", "similarity", "similarities", "ineffective",
        ],
        Classes::SIMILAR,
    ),
    (
        &[
            "equivalent", "equivalence", "noninferior", "noninferiority", "inferior", "inferiority",
            "bioequivalent", "bioequivalence", "effective", "efficacious", "safe",
        ],
        Classes::EQUIVALENT,
    ),
    (
        &[
            "higher", "greater", "larger", "longer", "more", "increased", "increase", "increases", "rose", "rise",
            "elevated", "highest", "greatest", "largest", "longest", "gain", "gained", "increasing", "older",
            "heavier", "elevation", "prolonged", "doubled", "exceeded",
        ],
        Classes::UP,
    ),
    (
        &[
            "lower", "smaller", "shorter", "less", "fewer", "decreased", "decrease", "decreases", "fell", "reduced",
            "reduction", "reductions", "reduce", "reduces", "declined", "decline", "dropped", "drop", "lowered",
            "lowest", "smallest", "shortest", "diminished", "attenuated", "shortened", "decreasing", "younger",
            "lowering", "lesser", "halved", "fall", "suppressed", "inhibited",
        ],
        Classes::DOWN,
    ),
    (
        &[
            "higher", "greater", "larger", "longer", "more", "lower", "smaller", "shorter", "less", "fewer",
            "better", "worse", "superior", "inferior", "faster", "slower", "stronger", "weaker", "older", "younger",
            "heavier", "lesser", "poorer", "deeper", "thicker", "thinner", "quicker", "steeper", "milder",
        ],
        COMPARATIVE,
    ),
    (
        &[
            "increased", "decreased", "reduced", "improved", "declined", "fell", "rose", "dropped", "worsened",
            "elevated", "lowered", "diminished", "attenuated", "shortened", "prolonged", "deteriorated", "enhanced",
            "gained", "lost", "grew", "doubled", "halved", "exceeded", "outperformed", "suppressed", "inhibited",
            "augmented", "impaired", "changed",
        ],
        CHANGED,
    ),
    (
        &[
            "was", "were", "is", "are", "has", "have", "had", "did", "does", "do", "remained", "seemed", "appeared",
            "became", "didn't", "wasn't", "weren't", "remains", "tended", "reached", "failed", "occurred",
            "received", "led", "gave", "gives", "scored", "reported", "performed", "achieved", "experienced",
            "required",
        ],
        FINITE,
    ),
    (
        &[
            "showed", "shown", "shows", "show", "revealed", "reveal", "reveals", "found", "find", "observed",
            "observe", "noted", "demonstrated", "demonstrate", "demonstrates", "detected", "seen", "indicated",
            "indicate", "indicates", "suggest", "suggests", "suggested", "confirmed", "confirm", "yielded",
            "produced", "exhibited", "resulted", "displayed", "obtained", "identified", "detect", "reported", "saw",
            "experienced", "conclude", "concluded", "concludes", "reports", "gave", "caused", "induced", "had",
            "reach", "reached", "evident", "apparent", "emerged", "obtain", "provided", "afforded", "led", "exist",
            "existed", "occurred", "documented", "appeared", "presented", "reveale", "have", "achieved",
        ],
        REPORT,
    ),
    (
        &[
            "marginally", "marginal", "borderline", "nearly", "almost", "approached", "approaching", "approaches",
            "tended", "tendency", "tendencies", "tends", "close", "near", "trend", "trends", "trending", "trended",
        ],
        HEDGE,
    ),
    (
        &[
            "whether", "if", "would", "will", "hypothesized", "hypothesised", "hypothesize", "hypothesise",
            "hypothesis", "hypotheses", "aim", "aimed", "aims", "assuming", "assumed", "assumption", "should",
            "powered", "anticipated", "objective", "shall", "assume", "predicted", "underpowered",
        ],
        PLAN,
    ),
    (
        &[
            "but", "while", "whereas", "although", "though", "whilst", "however", "yet", "because", "since", "even",
            "except", "despite",
        ],
        BREAK,
    ),
    (
        &[
            "than", "compared", "versus", "vs", "between", "among", "relative", "against", "comparison", "amongst",
            "across", "comparing",
        ],
        THAN,
    ),
    (
        &[
            "differ", "differed", "differs", "different", "differing", "differently", "affect", "affected",
            "affects", "influence", "influenced", "influences", "alter", "altered", "alters", "change", "changed",
            "vary", "varied", "improve", "improved", "improves", "increase", "increased", "increases", "decrease",
            "decreased", "reduce", "reduced", "reduces", "correlate", "correlated", "associated", "related",
            "modify", "modified", "enhance", "enhanced", "impair", "impaired", "impact", "impacted", "predict",
            "predicted", "interact", "interacted", "benefit", "benefited", "prolong", "lower", "separate",
            "decline", "worsen", "distinguish", "distinguishable", "predictive", "attenuate", "attenuated", "ameliorate",
            "ameliorated", "alleviate", "alleviated", "prevent", "prevented", "modulate", "modulated", "potentiate",
            "potentiated", "suppress", "suppressed", "inhibit", "inhibited", "promote", "promoted", "delay", "delayed",
            "shorten", "shortened", "elevate", "elevated", "exceed", "exceeded", "augment", "augmented", "accelerate",
            "accelerated", "diminish", "diminished", "lowered", "raise", "raised", "worsened", "deteriorate",
            "deteriorated", "declined", "compromise", "compromised", "mitigate", "mitigated", "outperform", "outperformed", "prolonged",
        ],
        DIFFER,
    ),
    (
        &[
            "previous", "previously", "earlier", "literature", "authors", "colleagues", "al", "investigators",
            "researchers", "studies", "trials", "others", "reviews", "published", "recent", "recently",
        ],
        OTHERS,
    ),
    (
        &[
            "normality", "normally", "goodness", "fit", "heterogeneity", "homogeneity", "homoscedasticity",
            "sphericity", "assumption", "assumptions", "collinearity", "agreement", "consistent", "carryover",
            "reproducibility", "reliability",
        ],
        FIT,
    ),
    (
        &[
            "analysed", "analyzed", "assessed", "calculated", "tested", "evaluated", "determined", "computed",
            "performed", "considered", "defined", "examined", "estimated", "used", "employed", "applied", "set",
            "accepted", "deemed", "regarded", "taken", "investigated", "explored", "conducted", "adjusted",
            "expressed", "presented", "recorded", "measured", "declared", "judged", "established", "selected",
        ],
        METHOD,
    ),
    (
        &[
            "considered", "regarded", "deemed", "defined", "set", "taken", "accepted", "declared", "judged",
            "assumed", "established", "chosen", "used", "specified", "fixed", "interpreted", "threshold", "cutoff",
            "criterion", "indicated", "indicates", "indicate", "denotes", "denoted", "represents", "represented",
            "denote", "represent", "adopted", "selected", "viewed", "treated", "classified", "designated",
            "indicating", "stipulated", "thresholds", "attributed", "applied", "admitted",
        ],
        Classes::CONSIDERED,
    ),
    (
        &[
            "a", "an", "the", "of", "with", "and", "by", "for", "in", "to", "or", "no", "any", "this", "these",
            "at", "on", "from", "some", "their", "its", "our", "both", "as", "that", "into", "through", "due",
            "such", "other", "under", "via", "more", "those", "his", "her",
        ],
        FUNCTION,
    ),
    (
        &[
            "bonferroni", "holm", "tukey", "tukey's", "scheffe", "scheffe's", "dunnett", "dunnett's", "sidak",
            "hochberg", "benjamini", "fdr", "newman", "multiplicity", "hommel", "duncan", "duncan's", "multiple",
            "discovery", "dunn", "dunn's", "hsd", "lsd", "familywise", "scheffé", "šidák", "sidák", "gatekeeping",
            "hierarchical", "closed", "sequential", "howell", "keuls", "bonferroni's", "holm's",
        ],
        MULTIPLE,
    ),
    (
        &[
            "may", "might", "could", "can", "should", "would", "must", "possibly", "potentially",
        ],
        MODAL,
    ),
    (
        &[
            "highest", "lowest", "greatest", "largest", "smallest", "longest", "shortest", "best", "worst",
            "likely", "fewest",
        ],
        EXTREME,
    ),
    (
        &[
            "alpha", "significance", "α",
        ],
        Classes::ALPHA,
    ),
    (
        &[
            "study", "trial", "review",
        ],
        Classes::RARE,
    ),
    (
        &[
            "power", "powered", "beta", "powers", "chance",
        ],
        Classes::POWER,
    ),
    (
        &[
            "sided", "tailed", "tail", "side", "bilateral", "unilateral",
        ],
        Classes::SIDED,
    ),
    (
        &[
            "sample", "required", "needed", "necessary", "sufficient", "recruit", "need", "needs", "enrolled",
            "recruited", "enroll", "enrol", "aimed", "planned", "intended", "target", "require", "requires", "randomise",
            "randomize", "include", "goal", "randomised", "randomized", "included", "adequate", "targeted",
        ],
        Classes::SAMPLE,
    ),
    (
        &[
            "group", "groups", "arm", "arms", "control", "controls", "placebo", "patients", "subjects",
            "participants", "treatment", "condition", "conditions", "intervention",
        ],
        Classes::GROUP,
    ),
    (
        &[
            "test", "tests", "anova", "ancova", "manova", "regression", "model", "models", "analysis", "whitney",
            "wilcoxon", "kruskal", "mcnemar", "fisher", "fisher's", "student", "student's", "friedman", "logrank",
            "rank", "chi", "cochran", "mantel", "pearson", "pearson's", "spearman", "spearman's", "shapiro",
            "kolmogorov", "levene", "levene's", "lemeshow", "gee", "equations", "tukey", "tukey's", "bonferroni",
            "scheffe", "scheffe's", "dunnett", "dunnett's", "lsd", "welch", "welch's", "permutation", "cox",
            "hazards", "hoc", "mcnemar's", "duncan", "duncan's", "newman", "wallis", "sidak", "bartlett",
            "bartlett's", "mauchly", "mauchly's", "yates", "ttest", "unpaired", "mmrm",
        ],
        Classes::TEST,
    ),
];
