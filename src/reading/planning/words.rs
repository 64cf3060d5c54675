//! Word lists of the planning recogniser.

/// Verbs that make a p a limit: "was considered significant".
pub(super) const DECLARES: &[&str] = &[
    "considered", "regarded", "deemed", "defined", "set", "taken", "accepted", "declared", "judged", "assumed",
    "established", "chosen", "used", "specified", "determined", "by", "fixed", "interpreted", "threshold", "cutoff",
    "criterion", "adopted", "selected", "viewed", "treated", "classified", "designated", "stipulated", "thresholds",
    "cut", "level", "levels", "limit", "applied", "rejected", "admitted", "assigned",
    "recognized", "recognised", "acknowledged", "held", "labelled", "labeled", "termed", "called", "required",
];

/// Verbs that make a p the subject of a definition: "P < 0.05 indicates …".
pub(super) const STANDS_FOR: &[&str] = &[
    "indicated", "indicates", "indicate", "denotes", "denoted", "denote", "represents", "represented", "represent",
    "indicating", "as", "means", "signifies", "signified", "reflects",
    "denoting", "representing", "signify", "signifying", "reflect", "reflecting", "constituted", "indicative",
    "mean", "meant",
];

/// Words between a mark and its p.
pub(super) const LEGEND_WORDS: &[&str] = &[
    "indicates", "indicate", "denotes", "represents", "significant", "significantly", "at", "statistically",
    "means", "difference", "for", "the", "with", "signifies",
    "different", "from", "than", "vs", "versus", "control", "controls", "baseline", "placebo", "level",
    "levels", "statistical", "significance", "of", "in", "to", "compared", "between", "group", "groups",
    "denote", "represent", "denoting", "indicating", "higher", "lower", "value", "values", "is",
];

/// Words that may stand between "was set at" and the p.
pub(super) const THRESHOLD_LINKS: &[&str] = &[
    "at", "as", "to", "be", "if", "when", "the", "a", "an", "of", "for", "with", "was", "were", "is", "by", "p",
    "value", "values", "level", "difference", "differences", "statistically", "than", "probability", "less", "on",
    "all", "tests", "in", "statistical", "where", "analyses", "and", "below", "it", "corresponding", "under",
    "their", "its", "two", "alpha", "any", "resulting", "associated", "highly", "only",
    "priori", "will", "are", "being", "using", "this", "these", "study", "threshold", "results", "result",
    "test", "comparisons", "comparison", "analysis", "throughout", "every", "each", "both", "conventional",
    "nominal", "criterion", "cutoff", "cut", "off", "had", "have", "that", "corrected", "adjusted", "obtained",
    "calculated", "from", "then", "there", "greater", "equal", "or", "set", "error", "chance",
];

/// What an interval does to the null value.
pub(super) const EXCLUDES_NULL: &[&str] = &[
    "contain", "include", "exclude", "excluded", "excludes", "cross", "contained", "overlap", "crossed",
    "overlapped",
];

/// Words between "alpha" and its figure.
pub(super) const ALPHA_LINKS: &[&str] = &[
    "level", "levels", "error", "rate", "was", "were", "is", "of", "at", "set", "the", "a", "an", "to", "as", "be",
    "and", "value", "probability", "significance", "fixed", "equal", "chosen", "2", "1", "α", "β", "alpha", "used",
    "being", "risk", "taken", "for", "assumed", "established", "accepted", "i", "type", "defined", "than", "less",
    "statistical", "overall", "specified", "determined", "by", "adjusted", "assuming", "with",
    "threshold", "priori", "will", "conventional", "critical", "nominal", "standard", "limit", "both", "this",
];

/// Words between "power" and its figure.
pub(super) const POWER_LINKS: &[&str] = &[
    "of", "at", "was", "is", "set", "to", "β", "beta", "least", "level", "the", "be", "a", "approximately", "about",
    "and", "equal", "greater", "than", "over", "fixed", "analysis", "desired",
    "higher", "in", "excess", "were", "between", "would", "will", "study", "statistical", "minimum", "more",
    "calculated", "estimated", "assumed", "around", "from", "have", "having", "test", "powers", "powered",
    "reduced", "remained", "but", "still", "only", "exceeded", "exceeding", "above", "fixed", "chosen", "had",
    "increased", "thus", "therefore", "given", "being", "β",
];

/// Before "power" they make it a quantity of muscles, lamps and models.
pub(super) const OTHER_POWERS: &[&str] = &[
    "peak", "mean", "muscle", "aerobic", "anaerobic", "explosive", "average", "maximal", "maximum", "predictive",
    "discriminatory", "discriminative", "explanatory", "output", "optical", "refractive", "laser", "leg", "relative",
    "absolute", "spectral", "alpha", "theta", "delta", "gamma", "purchasing", "critical", "diagnostic", "resolving",
];

/// Words close before a level that a sample size is planned for.
pub(super) const PLANS_LEVEL: &[&str] = &[
    "difference", "differences", "alpha", "α", "level", "error", "significance", "with", "at", "and", "for", "using",
    "significant", "assuming", "type", "i",
];

/// Words of a calculation of sample size.
pub(super) const SIZES: &[&str] = &[
    "sample", "detect", "detection", "required", "needed", "calculated", "calculation", "powered", "detecting",
];

/// Words of a sample-size calculation.
pub(super) const CALCULATES: &[&str] = &[
    "power", "detect", "calculated", "calculation", "estimated", "alpha", "α", "assuming", "sample", "powered",
    "significance",
];

/// Units after a number that counts no people.
pub(super) const MEASURES: &[&str] = &[
    "years", "months", "weeks", "days", "mg", "kg", "mm", "cm", "points", "point", "minutes", "hours", "times",
    "mmhg", "ml", "fold", "per",
];

/// Words within the name of a correction.
pub(super) const CORRECTION_LINKS: &[&str] = &[
    "keuls", "honestly", "significant", "difference", "honest", "kramer", "range", "s", "type", "for",
    "comparisons", "and", "method",
];

/// Words.
pub(super) const ADJUSTS: &[&str] = &[
    "adjusted", "adjustment", "adjustments", "corrected", "correction", "corrections", "correct", "adjust",
    "adjusting", "correcting", "accounting", "account", "controlled", "control",
    "protect", "avoid", "inflation", "inflated", "guard", "minimize", "minimise", "compensate", "allow",
    "allowance", "allowing", "reduce", "address", "preserve", "protecting", "avoiding", "constrain", "limit",
    "maintain", "limiting", "preserving", "controlling",
];

/// Words.
pub(super) const TEST_WORDS: &[&str] = &[
    "test", "tests", "correction", "corrections", "adjustment", "adjusted", "corrected", "procedure", "method",
    "post", "hoc", "posthoc", "comparison", "comparisons", "multiple", "range", "rate", "analysis",
    "rule", "approach", "criterion", "contrasts", "contrast", "t",
];

/// Who or what is counted into a sample.
pub(super) const PEOPLE: &[&str] = &[
    "patients", "subjects", "participants", "volunteers", "women", "men", "children", "individuals", "people",
    "infants", "animals", "rats", "mice", "clusters", "eyes", "students", "practices", "adults", "persons",
    "completers", "cases", "events", "pairs", "families", "girls", "boys", "schools", "villages", "teeth", "babies",
    "mothers", "evaluable", "households", "dogs", "pigs", "residents", "respondents",
    "per", "each", "cats", "calves", "cows", "horses", "hives", "lambs", "dyads", "couples", "physicians",
    "nurses", "clinics", "sites", "centres", "centers", "hospitals", "limbs", "knees", "hips", "lesions",
    "workers",
];

/// Names of the marks that a legend explains.
pub(super) const SIGN_NAMES: &[&str] = &[
    "asterisk", "asterisks", "star", "stars", "dagger", "daggers", "letter", "letters", "superscript",
    "superscripts", "symbol", "symbols",
];

/// What marks do.
pub(super) const SIGN_VERBS: &[&str] = &[
    "indicate", "indicates", "denote", "denotes", "represent", "represents", "differ", "different", "show", "mark",
    "marks", "mean", "means", "significant", "significantly", "signify",
];

/// What a result does with significance.
pub(super) const GOT: &[&str] = &[
    "reached", "achieved", "found", "observed", "seen", "attained", "noted", "obtained", "detected", "lost", "not",
    "shown", "present", "evident",
];
