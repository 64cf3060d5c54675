//! What single words mean to the recognisers: one table, one look-up per word during the scan.

use std::collections::HashMap;
use std::hash::{BuildHasherDefault, Hasher};
use std::sync::OnceLock;

/// A set of word classes.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub struct Classes(pub u64);

impl Classes {
    pub const NONE: Classes = Classes(0);
    /// p, P
    pub const P: Classes = Classes(1 << 0);
    /// value, values (after p)
    pub const VALUE: Classes = Classes(1 << 1);
    /// is, was, were, equals, of …
    pub const COPULA: Classes = Classes(1 << 2);
    /// and, or, but, versus …: parts of lists
    pub const AND: Classes = Classes(1 << 3);
    pub const VERSUS: Classes = Classes(1 << 4);
    pub const CI: Classes = Classes(1 << 5);
    pub const CONFIDENCE: Classes = Classes(1 << 6);
    pub const SD: Classes = Classes(1 << 7);
    pub const SE: Classes = Classes(1 << 8);
    pub const IQR: Classes = Classes(1 << 9);
    pub const RANGE: Classes = Classes(1 << 10);
    pub const MEAN: Classes = Classes(1 << 11);
    pub const MEDIAN: Classes = Classes(1 << 12);
    pub const PERCENT: Classes = Classes(1 << 13);
    pub const NUMBER_WORD: Classes = Classes(1 << 14);
    pub const NEGATION: Classes = Classes(1 << 15);
    pub const SIGNIFICANCE: Classes = Classes(1 << 16);
    /// difference, change, effect, improvement …
    pub const DIFFERENCE: Classes = Classes(1 << 17);
    /// similar, comparable, equal …
    pub const SIMILAR: Classes = Classes(1 << 18);
    /// higher, increased, greater …
    pub const UP: Classes = Classes(1 << 19);
    /// lower, reduced, fewer …
    pub const DOWN: Classes = Classes(1 << 20);
    /// group, arm, controls, placebo, patients …: words that name groups or their members
    pub const GROUP: Classes = Classes(1 << 21);
    /// years, mg, mmHg …: units that may follow a figure
    pub const UNIT: Classes = Classes(1 << 22);
    /// hazard, odds, risk, ratio, HR, OR, RR …
    pub const RATIO: Classes = Classes(1 << 23);
    /// paired, baseline, within …
    pub const WITHIN: Classes = Classes(1 << 24);
    /// adjusted, ANCOVA, mixed, regression …
    pub const ADJUSTED: Classes = Classes(1 << 25);
    /// respectively
    pub const RESPECTIVELY: Classes = Classes(1 << 26);
    /// all, both, each, every, any
    pub const ALL: Classes = Classes(1 << 27);
    /// table, figure, fig, ref, supplementary, page, chapter, version …: numbers after them are labels
    pub const LABEL: Classes = Classes(1 << 28);
    pub const BASELINE: Classes = Classes(1 << 29);
    pub const INTERACTION: Classes = Classes(1 << 30);
    pub const TREND: Classes = Classes(1 << 31);
    pub const TEST: Classes = Classes(1 << 32);
    pub const ALPHA: Classes = Classes(1 << 33);
    pub const POWER: Classes = Classes(1 << 34);
    pub const SIDED: Classes = Classes(1 << 35);
    pub const SAMPLE: Classes = Classes(1 << 36);
    pub const CONSIDERED: Classes = Classes(1 << 37);
    pub const CHANGE: Classes = Classes(1 << 38);
    /// association, related, correlated …
    pub const ASSOCIATION: Classes = Classes(1 << 39);
    pub const EQUIVALENT: Classes = Classes(1 << 40);
    pub const MONTH: Classes = Classes(1 << 41);
    pub const N: Classes = Classes(1 << 42);
    pub const OF: Classes = Classes(1 << 43);
    pub const TO: Classes = Classes(1 << 44);
    /// Words with which the name of an effect's measure begins.
    pub const MEASURE: Classes = Classes(1 << 45);
    /// Words that show what a plain recomputation must respect, alone or as the first of a phrase.
    pub const FEATURE: Classes = Classes(1 << 46);
    /// Words that few sentences hold and that are looked for in all: one bit spares comparing every word with them.
    pub const RARE: Classes = Classes(1 << 47);
    // Bits from 48 on belong to the claims recogniser.

    pub const fn or(self, other: Classes) -> Classes {
        Classes(self.0 | other.0)
    }

    pub fn meets(self, other: Classes) -> bool {
        self.0 & other.0 != 0
    }
}

type Entry = (&'static [&'static str], Classes);

/// The table. A word may stand in several rows; its classes add up.
const WORDS: &[Entry] = &[
    (&["p", "ps"], Classes::P),
    (&["value", "values", "level"], Classes::VALUE),
    (&["is", "was", "were", "are", "of", "equals", "equal", "being"], Classes::COPULA),
    (
        &[
            "mg", "g", "kg", "ml", "l", "dl", "iu", "mm", "cm", "m", "km", "mmhg", "mmol", "ug", "mcg", "ng", "pg",
            "pmol", "nmol", "umol", "kcal", "kj", "hz", "khz", "mhz", "bpm", "units", "unit", "u", "kda", "ppm", "mw",
            "w", "db", "gy", "mgy", "cgy", "hours", "hour", "hrs", "hr", "h", "minutes", "minute", "min", "mins",
            "seconds", "second", "sec", "s", "days", "day", "weeks", "week", "months", "month", "years", "year", "yr",
            "yrs", "wks", "wk", "mths", "mos", "points", "kpa", "mosm", "meq", "items", "times", "fold",
        ],
        Classes::UNIT,
    ),
    (
        &[
            "group",
            "groups",
            "arm",
            "arms",
            "patients",
            "participants",
            "subjects",
            "women",
            "men",
            "children",
            "cases",
            "people",
            "individuals",
            "persons",
            "infants",
            "babies",
            "adults",
            "students",
            "girls",
            "boys",
            "females",
            "males",
            "eyes",
            "teeth",
            "samples",
            "controls",
            "respondents",
            "households",
            "clusters",
            "practices",
            "volunteers",
            "animals",
            "mice",
            "rats",
            "patient",
            "mothers",
            "newborns",
            "pregnancies",
            "female",
            "male",
            "villages",
            "schools",
            "players",
            "athletes",
            "residents",
            "families",
            "couples",
            "adolescents",
            "nurses",
            "physicians",
            "workers",
            "pairs",
            "observations",
            "knees",
            "hips",
            "lesions",
            "sites",
            "piglets",
            "pupils",
            "neonates",
            "survivors",
            "smokers",
            "veterans",
            "caregivers",
            "clients",
            "users",
            "employees",
            "dogs",
            "cats",
            "horses",
            "cows",
            "calves",
            "rabbits",
            "pigs",
            "sheep",
            "trainees",
            "teachers",
            "dentists",
            "fathers",
            "parents",
            "technicians",
        ],
        Classes::GROUP,
    ),
    (&["and", "or", "&"], Classes::AND),
    (&["vs", "versus", "v", "against"], Classes::VERSUS),
    (&["ci", "cis", "cl", "cri", "crl", "ci95"], Classes::CI),
    (&["confidence", "credible", "credibility", "fiducial"], Classes::CONFIDENCE),
    (&["sd", "sds", "s.d", "deviation", "deviations", "std", "stdev"], Classes::SD),
    (&["se", "sem", "s.e", "s.e.m", "error", "ses", "sems"], Classes::SE),
    (&["iqr", "interquartile", "quartile", "quartiles", "iqrs"], Classes::IQR),
    (&["range", "ranges", "ranging", "ranged", "minimum", "maximum", "min", "max"], Classes::RANGE),
    (&["mean", "means", "average", "averaged", "averages", "m"], Classes::MEAN),
    (&["median", "medians", "mdn"], Classes::MEDIAN),
    (&["percent", "percentage", "percentages"], Classes::PERCENT),
    (&["respectively", "resp"], Classes::RESPECTIVELY),
    (&["all", "both", "each", "every", "any", "either"], Classes::ALL),
    (&["n", "ns"], Classes::N),
    (&["of"], Classes::OF),
    (&["to", "through"], Classes::TO),
    (
        &[
            "table",
            "tables",
            "figure",
            "figures",
            "fig",
            "figs",
            "ref",
            "refs",
            "reference",
            "page",
            "pages",
            "chapter",
            "version",
            "appendix",
            "supplementary",
            "box",
            "panel",
            "grade",
            "stage",
            "class",
            "type",
            "phase",
            "protocol",
            "number",
            "no",
            "grant",
            "nct",
            "item",
            "items",
            "question",
            "section",
            "equation",
            "model",
            "step",
            "visit",
            "day",
            "week",
            "month",
            "year",
            "session",
            "trial",
            "study",
            "experiment",
        ],
        Classes::LABEL,
    ),
    (
        &["baseline", "pretreatment", "pretest", "enrolment", "enrollment", "randomisation", "randomization"],
        Classes::BASELINE,
    ),
    (&["interaction", "interactions", "interacted", "moderation"], Classes::INTERACTION),
    (&["trend", "trends"], Classes::TREND),
    (
        &[
            "hr",
            "hrs",
            "ahr",
            "or",
            "ors",
            "aor",
            "aors",
            "oradj",
            "hradj",
            "rradj",
            "adjor",
            "adjhr",
            "adjrr",
            "ahrs",
            "shr",
            "cshr",
            "sdhr",
            "cor",
            "uor",
            "chr",
            "uhr",
            "rr",
            "rrs",
            "arr",
            "arrs",
            "arrr",
            "pr",
            "irr",
            "irrs",
            "airr",
            "md",
            "wmd",
            "smd",
            "rd",
            "ard",
            "nnt",
            "nnh",
            "nntb",
            "nnth",
            "rrr",
            "ve",
            "b",
            "beta",
            "d",
            "g",
            "auc",
            "auroc",
            "eta",
            "hazard",
            "hazards",
            "odds",
            "risk",
            "relative",
            "rate",
            "prevalence",
            "absolute",
            "number",
            "efficacy",
            "effect",
            "coefficient",
            "slope",
            "difference",
            "differences",
        ],
        Classes::MEASURE,
    ),
    (
        &[
            "before",
            "pre",
            "within",
            "mixed",
            "three",
            "four",
            "five",
            "six",
            "all",
            "paired",
            "repeated",
            "crossover",
            "baseline",
            "posttest",
            "pretest",
            "intragroup",
            "adjusted",
            "adjusting",
            "adjustment",
            "ancova",
            "covariate",
            "covariates",
            "covariance",
            "regression",
            "multivariate",
            "multivariable",
            "multilevel",
            "cluster",
            "clusters",
            "clustering",
            "villages",
            "controlling",
            "controlled",
            "stratified",
            "weighted",
            "imputed",
            "imputation",
            "geometric",
            "log",
            "transformed",
            "median",
            "medians",
            "bonferroni",
            "tukey",
            "survival",
            "kaplan",
            "hazard",
            "actuarial",
        ],
        Classes::FEATURE,
    ),
    (
        &[
            "crossover",
            "cross",
            "noninferiority",
            "noninferior",
            "non",
            "randomised",
            "randomized",
            "randomly",
            "probability",
            "likelihood",
            "chance",
        ],
        Classes::RARE,
    ),
];

/// Spelled-out numbers, 0 to 99 in parts ("twenty", "four").
const NUMBER_WORDS: &[(&str, u64)] = &[
    ("zero", 0),
    ("none", 0),
    ("one", 1),
    ("two", 2),
    ("three", 3),
    ("four", 4),
    ("five", 5),
    ("six", 6),
    ("seven", 7),
    ("eight", 8),
    ("nine", 9),
    ("ten", 10),
    ("eleven", 11),
    ("twelve", 12),
    ("thirteen", 13),
    ("fourteen", 14),
    ("fifteen", 15),
    ("sixteen", 16),
    ("seventeen", 17),
    ("eighteen", 18),
    ("nineteen", 19),
    ("twenty", 20),
    ("thirty", 30),
    ("forty", 40),
    ("fourty", 40),
    ("fifty", 50),
    ("sixty", 60),
    ("seventy", 70),
    ("eighty", 80),
    ("ninety", 90),
    ("hundred", 100),
];

/// A quick hash for short words that nobody chooses: the keys are the table's own.
#[derive(Default)]
struct WordHasher(u64);

impl Hasher for WordHasher {
    fn write(&mut self, bytes: &[u8]) {
        // The golden ratio in 64 bits: its multiples spread over all bits (Knuth, TAOCP 3, section 6.4).
        const GOLDEN: u64 = 0x9E37_79B9_7F4A_7C15;
        for chunk in bytes.chunks(8) {
            let mut word = [0; 8];
            word[..chunk.len()].copy_from_slice(chunk);
            self.0 = (self.0.rotate_left(5) ^ u64::from_le_bytes(word)).wrapping_mul(GOLDEN);
        }
    }

    fn finish(&self) -> u64 {
        // The map takes its place from the low bits, the product is best in the high ones.
        self.0 ^ self.0 >> 32
    }
}

type Table = HashMap<&'static str, Classes, BuildHasherDefault<WordHasher>>;

fn table() -> &'static Table {
    static TABLE: OnceLock<Table> = OnceLock::new();
    TABLE.get_or_init(|| {
        let mut map = Table::default();
        for (words, classes) in WORDS.iter().chain(super::claim_words::WORDS) {
            for word in *words {
                let entry = map.entry(word).or_default();
                *entry = entry.or(*classes);
            }
        }
        for (word, _) in NUMBER_WORDS {
            let entry = map.entry(word).or_default();
            *entry = entry.or(Classes::NUMBER_WORD);
        }
        map
    })
}

/// The classes of a word, case ignored.
pub fn classes(word: &str) -> Classes {
    const LONGEST: usize = 24;
    if word.len() > LONGEST || !word.is_ascii() {
        return Classes::NONE;
    }
    let mut buffer = [0u8; LONGEST];
    for (to, from) in buffer.iter_mut().zip(word.bytes()) {
        *to = from.to_ascii_lowercase();
    }
    let lower = std::str::from_utf8(&buffer[..word.len()]).unwrap_or("");
    table().get(lower).copied().unwrap_or_default()
}

/// The value of a spelled-out number (one word of it).
pub fn number_word(word: &str) -> Option<u64> {
    NUMBER_WORDS.iter().find(|(w, _)| w.eq_ignore_ascii_case(word)).map(|&(_, v)| v)
}
