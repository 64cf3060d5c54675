//! The published methods, each with its source.

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
    T_STATISTIC = "p from t and its degrees of freedom", "Student, Biometrika 1908;6:1";
    /// Upper tail of an F statistic.
    F_STATISTIC = "p from F and its degrees of freedom", "Fisher, Statistical Methods for Research Workers, 1925";
    /// Upper tail of a χ² statistic.
    CHI_STATISTIC = "p from χ² and its degrees of freedom", "Pearson, Philosophical Magazine 1900;50:157";
    /// Two-sided p of a normal deviate.
    Z_STATISTIC = "p from z", "standard normal distribution (common practice)";
    /// Two-sided p of a correlation through t.
    R_STATISTIC = "p from a correlation and n", "Fisher, Biometrika 1915;10:507";
    /// The same for rank correlations, an approximation.
    RHO_STATISTIC = "p from a rank correlation and n (t approximation)", "Kendall, Rank Correlation Methods, 1948";
    /// Effect size of a rank test: r = z/√n.
    R_FROM_Z = "p from the effect size r = z/√n", "Rosenthal, Meta-Analytic Procedures for Social Research, 1991";
    /// Normal approximation of the Mann–Whitney test.
    MANN_WHITNEY = "p from U and the group sizes", "Mann & Whitney, Ann Math Stat 1947;18:50";
    /// χ² approximation of the Kruskal–Wallis test.
    KRUSKAL_WALLIS = "p from H", "Kruskal & Wallis, J Am Stat Assoc 1952;47:583";
    /// p from an estimate and its confidence interval.
    INTERVAL_TO_P = "p from the estimate and its interval", "Altman & Bland, BMJ 2011;343:d2304";
    /// p from an estimate and its standard error.
    SE_TO_P = "p from the estimate and its standard error", "Altman & Bland, BMJ 2011;343:d2304";
    /// The interval excludes the null value exactly when p < 1 − level.
    INTERVAL_AGAINST_P = "interval against p", "Gardner & Altman, BMJ 1986;292:746";
    /// An estimate lies inside its interval; the lower limit comes first.
    INSIDE = "the estimate lies inside its interval", "definition of a confidence interval";
    /// Two means, equal variances.
    POOLED_T = "pooled t test from means and SDs", "Student, Biometrika 1908;6:1";
    /// Two means, unequal variances.
    WELCH_T = "Welch t test from means and SDs", "Welch, Biometrika 1947;34:28";
    /// Several means.
    ANOVA = "one-way ANOVA from means and SDs", "Fisher, Statistical Methods for Research Workers, 1925";
    /// Difference of two printed means or percentages.
    DIFFERENCE = "difference of the two printed figures", "arithmetic";
    /// Interval of a difference of means.
    MEAN_INTERVAL = "interval of a difference of means", "Gardner & Altman, BMJ 1986;292:746";
    /// Interval of a single mean.
    ONE_MEAN = "interval of a mean", "Gardner & Altman, BMJ 1986;292:746";
    /// Interval of a single proportion.
    ONE_PROPORTION = "interval of a proportion (Wilson, Clopper–Pearson or Wald)", "Wilson, J Am Stat Assoc 1927;22:209; Clopper & Pearson, Biometrika 1934;26:404";
    /// Pearson's χ² test of proportions.
    PEARSON = "Pearson χ² test", "Pearson, Philosophical Magazine 1900;50:157";
    /// The same with continuity correction.
    YATES = "χ² test with continuity correction", "Yates, J R Stat Soc Suppl 1934;1:217";
    /// Fisher's exact test, two-sided by summing the tables that are not more probable.
    FISHER = "Fisher's exact test", "Fisher, J R Stat Soc 1935;98:39";
    /// z of two proportions with separate variances.
    WALD_Z = "z test of two proportions, unpooled", "Fleiss, Statistical Methods for Rates and Proportions, 1981";
    /// Log-normal interval of a risk ratio.
    KATZ = "risk ratio with log interval", "Katz et al., Biometrics 1978;34:469";
    /// Logit interval of an odds ratio.
    WOOLF = "odds ratio with logit interval", "Woolf, Ann Hum Genet 1955;19:251";
    /// Wald interval of a risk difference.
    RISK_DIFFERENCE = "risk difference with Wald interval", "Fagerland, Lydersen & Laake, Statistical Analysis of Contingency Tables, 2017";
    /// Score-based interval of a risk difference.
    NEWCOMBE = "risk difference with Newcombe interval", "Newcombe, Stat Med 1998;17:873";
    /// Reciprocal of the risk difference.
    NNT = "number needed to treat", "Altman, BMJ 1998;317:1309";
    /// 1 − risk ratio.
    EFFICACY = "relative risk reduction", "Katz et al., Biometrics 1978;34:469";
    /// η² or partial η² from F.
    ETA = "η² from F and its degrees of freedom", "Cohen, Educ Psychol Meas 1973;33:107";
    /// Interval of a correlation by Fisher's z.
    FISHER_Z = "interval of a correlation by Fisher's z", "Fisher, Metron 1921;1:3";
    /// Count, total and percent.
    PERCENT = "percent from count and total", "arithmetic";
    /// A part is not larger than its whole.
    PART_OF_WHOLE = "a count is at most its total", "arithmetic";
    /// Degrees of freedom of a two-sample t test.
    T_DF = "degrees of freedom from the group sizes", "Welch, Biometrika 1947;34:28";
}
