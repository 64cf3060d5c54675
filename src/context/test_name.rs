//! Names of statistical tests and models, as they are printed.

use crate::reading::SentenceView;

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

/// The tests that a sentence names, with the tokens (first and last, included) of each name.
pub fn tests_in(_view: &SentenceView) -> Vec<(Test, usize, usize)> {
    Vec::new()
}
