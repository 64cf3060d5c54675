//! Names of statistical tests and models, as they are printed.

use std::collections::HashMap;
use std::sync::OnceLock;

use crate::reading::SentenceView;
use crate::reading::lexicon::Classes;

/// The tests and models that recomputation tells apart.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum Test {
    /// A t test of two independent samples, pooled or Welch not said.
    T,
    WelchT,
    PairedT,
    Anova,
    RepeatedMeasuresAnova,
    Ancova,
    MixedModel,
    MannWhitney,
    WilcoxonSignedRank,
    KruskalWallis,
    Friedman,
    ChiSquared,
    YatesChiSquared,
    FisherExact,
    McNemar,
    CochranMantelHaenszel,
    Z,
    LogRank,
    Cox,
    LogisticRegression,
    LinearRegression,
    PoissonRegression,
    Gee,
    Pearson,
    Spearman,
    /// Tukey, Bonferroni, Dunnett, Scheffé, LSD … after an omnibus test.
    PostHoc,
    /// Shapiro–Wilk, Kolmogorov–Smirnov, Levene, Hosmer–Lemeshow …
    AssumptionOrFit,
    Permutation,
}

impl Test {
    /// The name for reports and JSON.
    pub fn name(self) -> &'static str {
        match self {
            Test::T => "t test",
            Test::WelchT => "Welch t test",
            Test::PairedT => "paired t test",
            Test::Anova => "ANOVA",
            Test::RepeatedMeasuresAnova => "repeated-measures ANOVA",
            Test::Ancova => "ANCOVA",
            Test::MixedModel => "mixed model",
            Test::MannWhitney => "Mann–Whitney test",
            Test::WilcoxonSignedRank => "Wilcoxon signed-rank test",
            Test::KruskalWallis => "Kruskal–Wallis test",
            Test::Friedman => "Friedman test",
            Test::ChiSquared => "chi-squared test",
            Test::YatesChiSquared => "chi-squared test with continuity correction",
            Test::FisherExact => "Fisher's exact test",
            Test::McNemar => "McNemar test",
            Test::CochranMantelHaenszel => "Cochran–Mantel–Haenszel test",
            Test::Z => "z test",
            Test::LogRank => "log-rank test",
            Test::Cox => "Cox regression",
            Test::LogisticRegression => "logistic regression",
            Test::LinearRegression => "linear regression",
            Test::PoissonRegression => "Poisson regression",
            Test::Gee => "generalised estimating equations",
            Test::Pearson => "Pearson correlation",
            Test::Spearman => "Spearman correlation",
            Test::PostHoc => "post hoc comparison",
            Test::AssumptionOrFit => "test of an assumption or of fit",
            Test::Permutation => "permutation test",
        }
    }
}

/// One way to print a name: its words in order. A hyphen between words may stand or not, and `|` sets alternatives.
type Name = (&'static [&'static str], Test);

/// Longer names first: the first that fits is taken.
const NAMES: &[Name] = &[
    (
        &["student|student's|students", "*s", "paired|dependent", "*samples|sample", "t", "test|tests|testing"],
        Test::PairedT,
    ),
    (
        &[
            "paired|dependent",
            "*samples|sample",
            "*two|2",
            "*tailed|sided",
            "*student|student's|students",
            "*s",
            "t",
            "test|tests|testing",
        ],
        Test::PairedT,
    ),
    (&["paired", "ttest|ttests"], Test::PairedT),
    (
        &[
            "unpaired|independent|two",
            "*samples|sample",
            "*two|2",
            "*tailed|sided",
            "*student|student's|students",
            "*s",
            "t",
            "test|tests|testing",
        ],
        Test::T,
    ),
    (&["welch|welch's", "*s", "*corrected", "*t", "*test|tests|anova|correction|method"], Test::WelchT),
    (
        &[
            "student|student's|students",
            "*s",
            "*unpaired|independent",
            "*two|2",
            "*tailed|sided",
            "*samples|sample",
            "t",
            "*test|tests|testing",
        ],
        Test::T,
    ),
    (&["t", "test|tests|testing"], Test::T),
    (&["ttest|ttests"], Test::T),
    (
        &["repeated", "measures|measure|measurement|measurements", "analysis|analyses", "of", "variance"],
        Test::RepeatedMeasuresAnova,
    ),
    (&["repeated", "measures|measure|measurement|measurements", "anova|anovas|manova"], Test::RepeatedMeasuresAnova),
    (&["rm", "anova|anovas"], Test::RepeatedMeasuresAnova),
    (
        &["anova|anovas", "*test", "for|with|of", "repeated", "measures|measurements|measure"],
        Test::RepeatedMeasuresAnova,
    ),
    (
        &[
            "analysis|analyses",
            "of",
            "variance",
            "*test",
            "*anova",
            "for|with|of",
            "repeated",
            "measures|measurements|measure",
        ],
        Test::RepeatedMeasuresAnova,
    ),
    (&["mixed", "*model|design|factorial|between|factor", "*within", "anova|anovas"], Test::RepeatedMeasuresAnova),
    (&["ancova|ancovas|mancova"], Test::Ancova),
    (&["analysis|analyses", "of", "covariance|covariances", "*ancova"], Test::Ancova),
    (&["analysis|analyses", "of", "co", "variance", "*ancova"], Test::Ancova),
    (
        &["kruskal|kruskall|kruskal's", "wallis|walis", "*one", "*way", "*h", "*anova", "*test|tests"],
        Test::KruskalWallis,
    ),
    (&["friedman|friedman's|friedmann", "*s", "*two", "*way", "*anova", "*test|tests"], Test::Friedman),
    (&["anova|anovas|manova"], Test::Anova),
    (
        &[
            "mixed",
            "*linear",
            "*effect|effects",
            "*linear",
            "*logistic",
            "*regression",
            "model|models|modelling|modeling|analysis",
        ],
        Test::MixedModel,
    ),
    (&["mixed", "*effect|effects", "model|models|regression|modelling|modeling"], Test::MixedModel),
    (&["linear", "mixed", "model|models|modelling|modeling|effects|effect", "*model|models"], Test::MixedModel),
    (&["random", "effects|effect|intercept|coefficient", "model|models|regression"], Test::MixedModel),
    (&["multilevel|hierarchical", "*linear", "model|models|modelling|modeling|regression"], Test::MixedModel),
    (&["mmrm"], Test::MixedModel),
    (&["generalized|generalised|general", "estimating|estimation", "equation|equations"], Test::Gee),
    (&["gee"], Test::Gee),
    (
        &[
            "mann|man",
            "whitney|whiteney|withney|whitney's",
            "*wilcoxon",
            "*u",
            "*rank",
            "*sum",
            "*test|tests|statistic|statistics",
        ],
        Test::MannWhitney,
    ),
    (&["wilcoxon|wilcoxon's", "*s", "mann", "whitney", "*u", "*test|tests"], Test::MannWhitney),
    (
        &[
            "wilcoxon|wilcoxon's",
            "*s",
            "*matched|paired",
            "*pair|pairs",
            "signed",
            "*rank|ranks|ranked",
            "*sum",
            "*test|tests",
        ],
        Test::WilcoxonSignedRank,
    ),
    (
        &["wilcoxon|wilcoxon's", "*s", "matched|paired", "*pair|pairs|samples", "*rank|ranks", "*test|tests"],
        Test::WilcoxonSignedRank,
    ),
    (&["signed", "rank|ranks", "*sum", "test|tests"], Test::WilcoxonSignedRank),
    (&["wilcoxon|wilcoxon's", "*s", "*two", "*sample", "rank|ranked", "*sum", "*test|tests"], Test::MannWhitney),
    (&["wilcoxon|wilcoxon's", "*s", "two", "sample", "*test|tests"], Test::MannWhitney),
    (&["rank", "sum", "test|tests"], Test::MannWhitney),
    (
        &[
            "yates|yates'|yates's",
            "*corrected",
            "*correction",
            "*continuity",
            "*chi",
            "*square|squared",
            "*test|tests|correction",
        ],
        Test::YatesChiSquared,
    ),
    (&["continuity", "corrected|adjusted", "*chi|χ", "*square|squared", "*test|tests"], Test::YatesChiSquared),
    (
        &["cochran|cochran's", "*s", "mantel", "haenszel|haenzel", "*chi", "*square|squared", "*test|tests"],
        Test::CochranMantelHaenszel,
    ),
    (&["mantel", "haenszel|haenzel", "*chi", "*square|squared", "*test|tests"], Test::CochranMantelHaenszel),
    (&["cmh", "test"], Test::CochranMantelHaenszel),
    (&["mcnemar|mcnemar's|mcnemars", "*s", "*chi", "*square|squared", "*test|tests"], Test::McNemar),
    (
        &[
            "fisher|fisher's|fishers|fischer|fischer's",
            "*s",
            "*two|2|one",
            "*tailed|sided",
            "exact",
            "*probability",
            "*test|tests",
        ],
        Test::FisherExact,
    ),
    (&["fisher|fisher's", "*s", "protected", "*least", "*significant", "*difference", "*lsd", "*test"], Test::PostHoc),
    (&["fisher|fisher's", "*s", "lsd", "*test"], Test::PostHoc),
    (&["hosmer", "lemeshow", "*goodness", "*of", "*fit", "*test"], Test::AssumptionOrFit),
    (&["chi", "square|squared|squares|sq", "goodness", "*of", "*fit", "*test"], Test::AssumptionOrFit),
    (&["shapiro", "wilk|wilks|wilk's", "*s", "*w", "*test|tests"], Test::AssumptionOrFit),
    (
        &["kolmogorov|kolmogrov|kolmogroff", "smirnov", "*goodness", "*of", "*fit", "*test|tests|z"],
        Test::AssumptionOrFit,
    ),
    (&["levene|levene's|levenes", "*s", "*test|tests"], Test::AssumptionOrFit),
    (&["bartlett|bartlett's", "*s", "test|tests"], Test::AssumptionOrFit),
    (&["mauchly|mauchly's", "*s", "*test|tests|sphericity"], Test::AssumptionOrFit),
    (&["anderson", "darling", "*test"], Test::AssumptionOrFit),
    (&["brown", "forsythe", "*test"], Test::AssumptionOrFit),
    (&["pearson|pearson's|pearsons", "*s", "chi|χ|x|x2|χ2", "*2|square|squared|sq", "*test|tests"], Test::ChiSquared),
    (
        &[
            "pearson|pearson's|pearsons",
            "*s",
            "*product",
            "*moment",
            "*linear",
            "*r",
            "correlation|correlations|coefficient|r",
            "*coefficient|coefficients|analysis|analyses|test",
        ],
        Test::Pearson,
    ),
    (
        &[
            "spearman|spearman's|spearmans|spearman’s",
            "*s",
            "*rank",
            "*order",
            "*rho",
            "*correlation|correlations|coefficient|coefficients",
            "*coefficient|coefficients|analysis|analyses|test",
        ],
        Test::Spearman,
    ),
    (
        &["chi|qui|khi", "square|squared|squares|sq|quadrat", "*test|tests|analysis|analyses|statistic"],
        Test::ChiSquared,
    ),
    (&["chi", "2", "*test|tests"], Test::ChiSquared),
    (&["chisquare|chisquared", "*test|tests"], Test::ChiSquared),
    (&["χ|x|Χ|χ2|x2", "*2", "test|tests|analysis"], Test::ChiSquared),
    (&["log", "rank|ranks", "*test|tests"], Test::LogRank),
    (&["logrank", "*test|tests"], Test::LogRank),
    (&["mantel", "cox", "*log", "*rank", "*test"], Test::LogRank),
    (
        &[
            "cox|cox's",
            "*s",
            "*multivariate|multivariable|proportional",
            "*hazard|hazards",
            "*regression|model|models|analysis",
            "*model|models|analysis|analyses",
        ],
        Test::Cox,
    ),
    (&["proportional", "hazard|hazards", "*regression", "model|models|regression|analysis"], Test::Cox),
    (
        &["logistic", "*mixed", "*regression|regressions|model|models", "*model|models|analysis|analyses"],
        Test::LogisticRegression,
    ),
    (&["poisson", "*regression|model|models|models", "*model|models|analysis"], Test::PoissonRegression),
    (&["negative", "binomial", "*regression|model", "*model|models"], Test::PoissonRegression),
    (
        &[
            "linear|multiple|multivariate|multivariable|stepwise",
            "*linear",
            "regression|regressions",
            "*model|models|analysis|analyses",
        ],
        Test::LinearRegression,
    ),
    (&["least", "squares", "regression"], Test::LinearRegression),
    (&["general|generalized|generalised", "linear", "model|models"], Test::LinearRegression),
    (&["permutation|randomization|randomisation", "test|tests"], Test::Permutation),
    (&["z", "test|tests"], Test::Z),
    (
        &[
            "tukey|tukey's|tukeys",
            "*s",
            "*kramer",
            "*honestly|honest",
            "*significant|significance",
            "*difference",
            "*hsd",
            "*post",
            "*hoc",
            "*multiple",
            "*comparison|comparisons",
            "*test|tests|procedure|method|adjustment",
        ],
        Test::PostHoc,
    ),
    (
        &[
            "bonferroni|bonferroni's|sidak|scheffe|scheffé|scheffe's|scheffé's|dunnett|dunnett's|dunn|dunn's|duncan|duncan's",
            "*s",
            "*corrected|adjusted",
            "*multiple",
            "*range",
            "*comparison|comparisons",
            "*post",
            "*hoc",
            "*test|tests|procedure|method|correction|corrections|adjustment|t",
            "*test|tests",
        ],
        Test::PostHoc,
    ),
    (&["newman|student", "keuls|newman", "*keuls", "*post", "*hoc", "*test|tests"], Test::PostHoc),
    (&["lsd|hsd", "*post", "*hoc", "test|tests"], Test::PostHoc),
    (&["least", "significant", "difference", "*lsd", "*test"], Test::PostHoc),
    (&["games", "howell", "*test"], Test::PostHoc),
    (
        &["post", "hoc", "*multiple", "*pairwise", "test|tests|testing|comparison|comparisons|analysis|analyses"],
        Test::PostHoc,
    ),
    (&["multivariate", "analysis", "of", "variance"], Test::Anova),
    (&["analysis|analyses", "of", "variance|variances", "*anova"], Test::Anova),
];

/// The tests that a sentence names, with the tokens (first and last, included) of each name.
pub fn tests_in(view: &SentenceView) -> Vec<(Test, usize, usize)> {
    let mut found = Vec::new();
    // Every name holds one of these words.
    if !view.tokens.iter().any(|t| t.is(Classes::TEST)) {
        return found;
    }
    let names = by_first_word();
    let mut i = 0;
    while i < view.len() {
        if !view.tokens[i].is_word() {
            i += 1;
            continue;
        }
        let mut buffer = [0u8; LONGEST];
        let best = lower(view.word(i), &mut buffer).and_then(|word| names.get(word)).and_then(|candidates| {
            let ends = candidates.iter().filter_map(|&n| Some((NAMES[n].1, ending(view, i, NAMES[n].0)?)));
            // The longest name; of equally long ones the first.
            ends.fold(
                None,
                |best: Option<(Test, usize)>, x| if best.is_none_or(|b| x.1 > b.1) { Some(x) } else { best },
            )
        });
        match best {
            Some((test, last)) => {
                found.push((qualified(view, i, last, test), i, last));
                i = last + 1;
            }
            _ => i += 1,
        }
    }
    found
}

const LONGEST: usize = 24;

fn lower<'b>(word: &str, buffer: &'b mut [u8; LONGEST]) -> Option<&'b str> {
    if word.len() > LONGEST {
        return None;
    }
    let to = &mut buffer[..word.len()];
    to.copy_from_slice(word.as_bytes());
    to.make_ascii_lowercase();
    std::str::from_utf8(&buffer[..word.len()]).ok()
}

/// The names by each of their first words.
fn by_first_word() -> &'static HashMap<String, Vec<usize>> {
    static INDEX: OnceLock<HashMap<String, Vec<usize>>> = OnceLock::new();
    INDEX.get_or_init(|| {
        let mut index: HashMap<String, Vec<usize>> = HashMap::new();
        for (n, (words, _)) in NAMES.iter().enumerate() {
            for word in words[0].split('|') {
                index.entry(word.to_string()).or_default().push(n);
                if word.contains('\'') {
                    index.entry(word.replace('\'', "’")).or_default().push(n);
                }
            }
        }
        index
    })
}

/// Where a name that starts at `i` ends.
fn ending(view: &SentenceView, first: usize, words: &[&str]) -> Option<usize> {
    let mut at = first;
    let mut last = first;
    for (k, word) in words.iter().enumerate() {
        let (optional, word) = match word.strip_prefix('*') {
            Some(word) => (true, word),
            None => (false, *word),
        };
        let here = skip(view, at, k == 0);
        if word.split('|').any(|w| same(view.word(here), w)) {
            last = here;
            at = here + 1;
        } else if !optional {
            return None;
        }
    }
    Some(last)
}

/// Over a hyphen, an apostrophe, a raised mark or an opening bracket between the words of a name.
fn skip(view: &SentenceView, mut at: usize, first: bool) -> usize {
    if first {
        return at;
    }
    while view.signs(at, &['-', '\'', '/']) && at + 1 < view.len() {
        at += 1;
    }
    at
}

fn same(printed: &str, word: &str) -> bool {
    printed.eq_ignore_ascii_case(word)
        || printed == "²" && word == "2"
        || !printed.is_ascii() && printed.replace(['’', '‘'], "'").to_lowercase() == word
}

/// What the words around a name make of it.
fn qualified(view: &SentenceView, first: usize, last: usize, test: Test) -> Test {
    let before = |words: &[&str]| {
        (first.saturating_sub(4)..first).any(|i| view.any(i, words) && !view.any(i + 1, &["and", "or", ","]))
    };
    let after = |words: &[&str]| (last + 1..(last + 5).min(view.len())).any(|i| view.any(i, words));
    match test {
        Test::T if before(&["paired", "dependent"]) && !before(&["unpaired"]) => Test::PairedT,
        Test::T if after(&["paired"]) && after(&["for"]) && after(&["samples", "data", "observations"]) => {
            Test::PairedT
        }
        Test::T if after(&["unequal"]) && after(&["variances", "variance"]) => Test::WelchT,
        Test::T if before(&["welch", "welch's"]) => Test::WelchT,
        Test::Anova if before(&["repeated"]) || after(&["repeated"]) => Test::RepeatedMeasuresAnova,
        Test::ChiSquared if after(&["yates", "continuity", "yates'"]) => Test::YatesChiSquared,
        Test::LinearRegression if before(&["logistic"]) => Test::LogisticRegression,
        Test::LogisticRegression if before(&["mixed", "multilevel"]) => Test::MixedModel,
        _ => test,
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::manuscript::testing::paragraphs;
    use crate::reading::scan;

    fn names(text: &str) -> Vec<Test> {
        let manuscript = paragraphs(&[("", text)]);
        let scan = scan(&manuscript);
        let blocks = 0..manuscript.blocks.len();
        let ids: Vec<u32> = blocks.flat_map(|b| scan.of_block(b)).collect();
        ids.into_iter().flat_map(|id| tests_in(&scan.view(&manuscript, id))).map(|x| x.0).collect()
    }

    #[test]
    fn printed_names() {
        for (text, test) in [
            ("Hives were compared with Student's t-test.", Test::T),
            ("Hives were compared with an unpaired t test.", Test::T),
            ("Hives were compared with the paired t-test.", Test::PairedT),
            ("Hives were compared with a paired Student’s t test.", Test::PairedT),
            ("Hives were compared with Welch's t test.", Test::WelchT),
            ("Hives were compared by the Mann–Whitney U test.", Test::MannWhitney),
            ("Hives were compared by the Wilcoxon rank-sum test.", Test::MannWhitney),
            ("Hives were compared by the Wilcoxon signed-rank test.", Test::WilcoxonSignedRank),
            ("Losses were compared with the chi-squared test.", Test::ChiSquared),
            ("Losses were compared with the χ2 test.", Test::ChiSquared),
            ("Losses were compared with the χ² test.", Test::ChiSquared),
            ("Losses were compared with Fisher's exact test.", Test::FisherExact),
            ("Weights were compared by one-way ANOVA.", Test::Anova),
            ("Weights were compared by repeated-measures ANOVA.", Test::RepeatedMeasuresAnova),
            ("Weights were compared by analysis of covariance.", Test::Ancova),
            ("Weights were compared in a linear mixed model.", Test::MixedModel),
            ("Weights were compared by generalized estimating equations.", Test::Gee),
            ("Survival was compared with the log-rank test.", Test::LogRank),
            ("Survival was modelled with Cox proportional hazards regression.", Test::Cox),
            ("Losses were modelled by logistic regression.", Test::LogisticRegression),
            ("Weights were compared by the Kruskal-Wallis test.", Test::KruskalWallis),
            ("Pairs were compared with McNemar's test.", Test::McNemar),
            ("Pairs were compared with Tukey's post hoc test.", Test::PostHoc),
            ("Normality was examined with the Shapiro–Wilk test.", Test::AssumptionOrFit),
            ("Variances were compared with Levene's test.", Test::AssumptionOrFit),
        ] {
            assert_eq!(names(text), [test], "{text}");
        }
        assert!(names("The Fisher family tested their hives; the model hive won.").is_empty());
    }
}
