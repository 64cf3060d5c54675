//! Word lists of the claims recogniser, too special for a class of the lexicon.

/// What others published
pub(super) const STUDIES: &[&str] = &[
    "study", "studies", "reports", "report", "reported", "trials", "trial", "findings", "work", "research", "data",
    "reviews", "shown",
];

/// Nouns and adjectives after "significant" that make it a word of everyday or clinical use.
pub(super) const NOT_STATISTICAL: &[&str] = &[
    "clinically", "clinical", "practically", "functionally", "biologically", "haemodynamically", "hemodynamically",
    "economically",
];

/// Nouns besides those of difference and association that significance is said of.
pub(super) const RESULT_NOUNS: &[&str] = &[
    "main", "interaction", "interactions", "trend", "trends", "results", "result", "finding", "findings", "value",
    "values", "group", "time", "treatment", "gender", "superiority", "risk", "factor", "factors", "odds",
    "contribution", "progress", "recovery", "comparisons", "outcome", "outcomes", "p",
];

/// Verbs before a predicate "significant".
pub(super) const PREDICATE_VERBS: &[&str] = &[
    "was", "were", "is", "are", "be", "been", "being", "became", "remained", "reached", "reach", "achieved",
    "achieve", "reaching", "remain", "attain", "attained", "approached", "failed", "proved",
];

/// Nouns of change in one arm.
pub(super) const GAINS: &[&str] = &[
    "improvement", "improvements", "reduction", "reductions", "increase", "increases", "decrease", "decreases",
    "decline",
];

/// Between "no" and its noun these show that another noun is denied.
pub(super) const BOUNDARY: &[&str] = &[
    "with", "in", "was", "were", "had", "who", "that", "at", "on", "during", "adverse", "side", "study", "studies",
    "trial", "trials", "report", "reports", "data",
];

/// Words that compare with other studies.
pub(super) const ELSEWHERE: &[&str] = &[
    "previous", "previously", "earlier", "studies", "literature", "reported", "ours", "published",
];

/// Words of inclusion and treatment, not of results.
pub(super) const ELIGIBILITY: &[&str] = &[
    "eligible", "excluded", "included", "inclusion", "exclusion", "enrolled", "recruited", "administered",
    "instructed", "asked", "advised", "told", "randomized", "randomised", "allocated", "assigned",
];

/// Verbs of inquiry after "to".
pub(super) const INQUIRE: &[&str] = &[
    "test", "determine", "assess", "compare", "examine", "evaluate", "investigate", "identify", "explore", "detect",
    "analyse", "analyze", "estimate", "demonstrate", "show", "find", "see", "verify", "establish", "study",
    "reveal", "quantify", "check", "achieve", "ensure", "describe", "produce", "observe",
];

/// Words after "similar" that make it a likeness to something else than the other group.
pub(super) const OTHER_LIKENESS: &[&str] = &[
    "previous", "previously", "earlier", "studies", "study", "those", "that", "other", "literature", "manner",
    "way", "fashion", "method", "methods", "procedure", "procedures", "pattern", "patterns", "design", "approach",
    "protocol", "reported", "ours", "findings", "conditions", "age", "trial", "trials", "appearance", "packaging",
    "trends", "described", "capsules", "tablets",
];

/// Nouns whose likeness is a claim of no difference.
pub(super) const LIKE_NOUNS: &[&str] = &[
    "proportions", "proportion", "rates", "rate", "levels", "level", "scores", "score", "values", "efficacy",
    "safety", "tolerability", "effectiveness", "incidence", "frequency", "frequencies", "outcomes", "outcome",
    "numbers", "number", "percentages", "percentage", "mean", "means", "baseline", "results", "weeks",
    "characteristics", "impact", "profile", "profiles", "survival", "response", "responses", "risk", "duration",
    "degree", "extent", "amount", "amounts", "time", "times", "performance",
];

/// Words that open a sentence and add nothing to its claim.
pub(super) const OPENERS: &[&str] = &[
    "and", "or", "so", "however", "moreover", "furthermore", "additionally", "meanwhile", "finally", "overall",
    "thus", "therefore", "interestingly", "similarly", "consequently", "also", "then", "hence", "likewise",
    "nevertheless", "nonetheless", "again", "accordingly", "importantly", "notably", "respectively", "that",
    "conversely", "surprisingly", "indeed", "generally", "specifically", "further", "besides", "lastly", "firstly",
    "secondly",
];

/// Words that open a phrase of circumstance, which ends at a comma: "At 12 months, …".
pub(super) const CIRCUMSTANCES: &[&str] = &[
    "in", "at", "after", "on", "among", "during", "for", "by", "when", "as", "compared", "using", "based",
    "regarding", "consistent", "of", "from", "within", "following", "under", "despite", "due", "to", "before",
    "with", "according", "concerning", "over", "between", "relative", "contrary", "unlike", "like", "until",
    "throughout", "once", "where", "given", "because", "since", "prior", "across", "upon", "if", "considering",
    "both",
];

/// What may be significant to a clinician without any test.
pub(super) const CLINICAL_NOUNS: &[&str] = &[
    "complications", "adverse", "bleeding", "side", "comorbidities", "comorbidity", "disease", "history", "morbidity",
    "medical", "stenosis", "toxicity", "events", "event", "problems", "illness", "infection", "pain", "complication",
    "disability", "discomfort", "symptoms", "toxicities", "reactions", "haemorrhage", "hemorrhage", "hypotension",
    "hypoglycaemia", "hypoglycemia", "psychiatric", "safety", "limitations", "abnormalities", "concerns",
    "haematoma", "hematoma", "infections", "injury", "injuries", "damage", "thrombosis", "arrhythmia", "arrhythmias",
    "regurgitation", "leak", "leakage", "deviations", "deviation", "violations", "deficits", "cytotoxicity",
];

/// Verbs of which significance is the object or the subject.
pub(super) const REACHES: &[&str] = &[
    "reach", "reached", "reaching", "achieve", "achieved", "attain", "attained", "approached", "approaching",
    "approach", "showed", "show", "failed", "lost", "gained", "found", "observed", "retained", "lacked",
];

/// Verbs that make "significant" a definition.
pub(super) const CONSIDERED: &[&str] = &[
    "considered", "regarded", "deemed", "defined", "taken", "accepted", "declared", "judged", "denotes", "indicates",
    "indicated", "denoted", "represents", "interpreted", "designated",
];

/// Verbs that link a subject with "similar".
pub(super) const LINKING: &[&str] = &["was", "were", "remained", "is", "are", "appeared", "seemed", "been", "stayed", "be"];

/// After a negation these turn it into something else: "not only", "no longer".
pub(super) const NOT_DENYING: &[&str] = &["only", "longer", "surprisingly", "just", "least", "yet", "because", "due"];

/// What was not done, rather than not found: "we did not assess changes in …".
pub(super) const NOT_DONE: &[&str] = &[
    "determine", "assess", "measure", "examine", "evaluate", "study", "investigate", "test", "compare", "collect",
    "record", "analyse", "analyze", "consider", "adjust", "control", "address", "explore", "specify", "calculate",
    "assessed", "measured", "evaluated", "attributable", "explained", "designed", "powered", "wish", "intend",
    "use", "used", "perform", "performed", "conduct", "apply", "exclude", "reflect", "mean", "imply", "represent",
    "constitute", "preclude", "expect", "expected", "estimate", "account", "include", "included", "aim", "likely",
];

/// What a further analysis leaves as it was.
pub(super) const CONCLUSIONS: &[&str] = &[
    "results", "result", "conclusions", "conclusion", "findings", "estimates", "interpretation", "inferences",
];

/// Another analysis or report that something resembles.
pub(super) const ANOTHER: &[&str] = &[
    "result", "results", "analysis", "analyses", "finding", "findings", "estimates", "literature",
];

/// Adverbs before "equal" and "identical".
pub(super) const NEARLY: &[&str] = &[
    "almost", "nearly", "approximately", "roughly", "about", "virtually", "essentially", "practically", "quite",
    "largely", "closely",
];

/// Nouns of a change with its direction.
pub(super) const MOVES: &[&str] = &[
    "increase", "decrease", "reduction", "improvement", "rise", "decline", "drop", "fall", "gain", "deterioration",
    "increases", "decreases", "reductions", "improvements",
];
