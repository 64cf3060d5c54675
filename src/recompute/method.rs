//! The published methods, each with its source. "From memory" marks a reference whose details were not
//! looked up when it was written down here.

use super::Method;

macro_rules! methods {
    ($($(#[$doc:meta])* $id:ident = $name:literal, $source:literal;)*) => {
        $($(#[$doc])* pub const $id: Method = Method { name: $name, source: $source };)*
        /// Every method, for the catalogue and for tests.
        pub const ALL: &[&Method] = &[$(&$id),*];
    };
}

methods! {
    /// Two-sided p of a t statistic.
    T_STATISTIC = "p from t and its degrees of freedom", "Student, Biometrika 1908;6:1 (from memory)";
    /// Upper tail of an F statistic.
    F_STATISTIC = "p from F and its degrees of freedom", "Fisher, Statistical Methods for Research Workers, 1925 (from memory)";
    /// Upper tail of a χ² statistic.
    CHI_STATISTIC = "p from χ² and its degrees of freedom", "Pearson, Philosophical Magazine 1900;50:157 (from memory)";
    /// Two-sided p of a normal deviate.
    Z_STATISTIC = "p from z", "standard normal distribution (common practice)";
    /// Two-sided p of a correlation through t.
    R_STATISTIC = "p from a correlation and n", "Fisher, Biometrika 1915;10:507 (from memory)";
    /// The same for rank correlations, an approximation.
    RHO_STATISTIC = "p from a rank correlation and n (t approximation)", "Kendall, Rank Correlation Methods, 1948 (from memory)";
    /// Effect size of a rank test: r = z/√n.
    R_FROM_Z = "p from the effect size r = z/√n", "Rosenthal, Meta-Analytic Procedures for Social Research, 1991 (from memory)";
    /// Normal approximation of the Mann–Whitney test.
    MANN_WHITNEY = "p from U and the group sizes", "Mann & Whitney, Ann Math Stat 1947;18:50";
    /// χ² approximation of the Kruskal–Wallis test.
    KRUSKAL_WALLIS = "p from H", "Kruskal & Wallis, J Am Stat Assoc 1952;47:583 (from memory)";
    /// p from an estimate and its confidence interval.
    INTERVAL_TO_P = "p from the estimate and its interval", "Altman & Bland, BMJ 2011;343:d2304";
    /// p from an estimate and its standard error.
    SE_TO_P = "p from the estimate and its standard error", "Altman & Bland, BMJ 2011;343:d2304";
    /// The interval excludes the null value exactly when p < 1 − level.
    INTERVAL_AGAINST_P = "interval against p", "Gardner & Altman, BMJ 1986;292:746 (from memory)";
    /// An estimate lies inside its interval; the lower limit comes first.
    INSIDE = "the estimate lies inside its interval", "definition of a confidence interval";
    /// Two means, equal variances.
    POOLED_T = "pooled t test from means and SDs", "Student, Biometrika 1908;6:1 (from memory)";
    /// Two means, unequal variances.
    WELCH_T = "Welch t test from means and SDs", "Welch, Biometrika 1947;34:28 (from memory)";
    /// Several means.
    ANOVA = "one-way ANOVA from means and SDs", "Fisher, Statistical Methods for Research Workers, 1925 (from memory)";
    /// Difference of two printed means or percentages.
    DIFFERENCE = "difference of the two printed figures", "arithmetic";
    /// Interval of a difference of means.
    MEAN_INTERVAL = "interval of a difference of means", "Gardner & Altman, BMJ 1986;292:746 (from memory)";
    /// Interval of a single mean.
    ONE_MEAN = "interval of a mean", "Gardner & Altman, BMJ 1986;292:746 (from memory)";
    /// Interval of a single proportion.
    ONE_PROPORTION = "interval of a proportion (Wilson, Clopper–Pearson or Wald)", "Wilson, J Am Stat Assoc 1927;22:209; Clopper & Pearson, Biometrika 1934;26:404 (from memory)";
    /// Pearson's χ² test of proportions.
    PEARSON = "Pearson χ² test", "Pearson, Philosophical Magazine 1900;50:157 (from memory)";
    /// The same with continuity correction.
    YATES = "χ² test with continuity correction", "Yates, J R Stat Soc Suppl 1934;1:217 (from memory)";
    /// Fisher's exact test, two-sided by summing the tables that are not more probable.
    FISHER = "Fisher's exact test", "Fisher, J R Stat Soc 1935;98:39 (from memory)";
    /// z of two proportions with separate variances.
    WALD_Z = "z test of two proportions, unpooled", "Fleiss, Statistical Methods for Rates and Proportions, 1981 (from memory)";
    /// Log-normal interval of a risk ratio.
    KATZ = "risk ratio with log interval", "Katz et al., Biometrics 1978;34:469 (from memory)";
    /// Logit interval of an odds ratio.
    WOOLF = "odds ratio with logit interval", "Woolf, Ann Hum Genet 1955;19:251 (from memory)";
    /// Wald interval of a risk difference.
    RISK_DIFFERENCE = "risk difference with Wald interval", "Fagerland, Lydersen & Laake, Statistical Analysis of Contingency Tables, 2017 (from memory)";
    /// Score-based interval of a risk difference.
    NEWCOMBE = "risk difference with Newcombe interval", "Newcombe, Stat Med 1998;17:873 (from memory)";
    /// Reciprocal of the risk difference.
    NNT = "number needed to treat", "Altman, BMJ 1998;317:1309";
    /// 1 − risk ratio.
    EFFICACY = "relative risk reduction", "Katz et al., Biometrics 1978;34:469 (from memory)";
    /// η² or partial η² from F.
    ETA = "η² from F and its degrees of freedom", "Cohen, Educ Psychol Meas 1973;33:107 (from memory)";
    /// Interval of a correlation by Fisher's z.
    FISHER_Z = "interval of a correlation by Fisher's z", "Fisher, Metron 1921;1:3 (from memory)";
    /// Count, total and percent.
    PERCENT = "percent from count and total", "arithmetic";
    /// A part is not larger than its whole.
    PART_OF_WHOLE = "a count is at most its total", "arithmetic";
    /// Degrees of freedom of a two-sample t test.
    T_DF = "degrees of freedom from the group sizes", "Welch, Biometrika 1947;34:28 (from memory)";
}
