//! The distribution floor against its reference tables (`tests/reference/*.csv`,
//! written by `tests/reference/make.py`), against published values, and against
//! the properties that hold whatever the numbers.

use proptest::prelude::*;
use tallyproof::distribution::{self as d, DistributionError, Tails};

/// One row of a table: inputs, truths and the relative tolerance that it states.
struct Row {
    inputs: Vec<f64>,
    truths: Vec<f64>,
    tolerance: f64,
    line: String,
}

/// Reads a table; `inputs` is the number of input columns.
fn table(name: &str, inputs: usize) -> Vec<Row> {
    let path = format!("{}/tests/reference/{name}.csv", env!("CARGO_MANIFEST_DIR"));
    let text = std::fs::read_to_string(&path).unwrap_or_else(|error| panic!("{path}: {error}"));
    let rows: Vec<Row> = text
        .lines()
        .filter(|line| !line.starts_with('#'))
        .skip(1)
        .map(|line| {
            let cells: Vec<&str> = line.split(',').collect();
            let number = |cell: &str| -> f64 {
                if cell.is_empty() {
                    return f64::NAN;
                }
                cell.parse().unwrap_or_else(|_| panic!("{path}: not a number: {cell} in {line}"))
            };
            let last = cells.len() - 2;
            Row {
                inputs: cells[..inputs].iter().map(|cell| number(cell)).collect(),
                truths: cells[inputs..last].iter().map(|cell| number(cell)).collect(),
                tolerance: number(cells[last]),
                line: line.to_owned(),
            }
        })
        .collect();
    assert!(rows.len() >= 10, "{path} is nearly empty");
    rows
}

/// Asserts every row of a table, and that no tolerance in it is a lax one.
fn check(name: &str, inputs: usize, laxest: f64, compute: impl Fn(&[f64]) -> Vec<f64>) {
    let mut failures = Vec::new();
    let rows = table(name, inputs);
    for row in &rows {
        assert!(row.tolerance <= laxest, "{name}: lax tolerance in {}", row.line);
        let got = compute(&row.inputs);
        assert_eq!(got.len(), row.truths.len(), "{name}: {}", row.line);
        for (value, truth) in got.iter().zip(&row.truths) {
            // An empty cell: this tail has no truth in the table.
            if truth.is_nan() {
                continue;
            }
            let error = (value - truth).abs();
            if error.is_nan() || error > row.tolerance * truth.abs() {
                failures.push(format!("{}: got {value:e} for {truth:e}", row.line));
            }
        }
    }
    assert!(failures.is_empty(), "{name}: {} of {} rows\n{}", failures.len(), rows.len(), failures.join("\n"));
}

fn both(tails: Result<Tails, DistributionError>) -> Vec<f64> {
    let tails = tails.expect("an answer");
    vec![tails.lower, tails.upper]
}

fn one(value: Result<f64, DistributionError>) -> Vec<f64> {
    vec![value.expect("an answer")]
}

fn limits(value: Result<(f64, f64), DistributionError>) -> Vec<f64> {
    let (lower, upper) = value.expect("an answer");
    vec![lower, upper]
}

#[test]
fn normal_agrees_with_its_tables() {
    check("normal", 1, 1e-14, |x| both(Ok(d::normal(x[0]))));
    check("normal_quantile", 1, 1e-13, |x| one(d::normal_quantile(x[0])));
}

#[test]
fn student_agrees_with_its_tables() {
    check("student", 2, 1e-11, |x| both(d::student(x[0], x[1])));
    check("student_quantile", 2, 1e-11, |x| one(d::student_quantile(x[0], x[1])));
}

#[test]
fn f_agrees_with_its_tables() {
    check("f", 3, 1e-11, |x| both(d::f(x[0], x[1], x[2])));
    check("f_quantile", 3, 1e-11, |x| one(d::f_quantile(x[0], x[1], x[2])));
}

#[test]
fn chi_squared_and_gamma_agree_with_their_tables() {
    check("chi_squared", 2, 1e-11, |x| both(d::chi_squared(x[0], x[1])));
    check("gamma", 2, 1e-11, |x| both(d::gamma(x[0], x[1])));
    check("chi_squared_quantile", 2, 1e-11, |x| one(d::chi_squared_quantile(x[0], x[1])));
}

#[test]
fn beta_agrees_with_its_tables() {
    check("beta", 4, 1e-11, |x| both(d::beta(x[0], x[1], x[2], x[3])));
    check("beta_quantile", 3, 1e-11, |x| one(d::beta_quantile(x[0], x[1], x[2])));
}

#[test]
fn counts_agree_with_their_tables() {
    check("binomial", 3, 1e-11, |x| both(d::binomial(x[0] as u64, x[1] as u64, x[2])));
    check("poisson", 2, 1e-11, |x| both(d::poisson(x[0] as u64, x[1])));
    check("hypergeometric", 4, 1e-11, |x| both(d::hypergeometric(x[0] as u64, x[1] as u64, x[2] as u64, x[3] as u64)));
}

#[test]
fn exact_tests_agree_with_their_tables() {
    check("fisher_exact", 4, 1e-12, |x| {
        let p = d::fisher_exact(x[0] as u64, x[1] as u64, x[2] as u64, x[3] as u64).unwrap();
        vec![p.less, p.greater, p.two_sided]
    });
    check("mcnemar_exact", 2, 1e-12, |x| one(d::mcnemar_exact(x[0] as u64, x[1] as u64)));
    check("mann_whitney_exact", 3, 1e-12, |x| both(d::mann_whitney_exact(x[0] as u64, x[1] as u64, x[2] as u64)));
}

#[test]
fn intervals_agree_with_their_tables() {
    check("clopper_pearson", 3, 1e-11, |x| limits(d::clopper_pearson(x[0] as u64, x[1] as u64, x[2])));
    check("wilson", 3, 1e-12, |x| limits(d::wilson(x[0] as u64, x[1] as u64, x[2])));
}

#[test]
fn integrals_agree_with_their_tables() {
    check("noncentral_student", 3, 1e-11, |x| both(d::noncentral_student(x[0], x[1], x[2])));
    check("studentized_range", 3, 1e-11, |x| both(d::studentized_range(x[0], x[1] as u64, x[2])));
}

/// Asserts a value printed with a limited number of digits.
#[track_caller]
fn printed(value: f64, text: &str) {
    let (mantissa, exponent) = text.split_once('e').unwrap_or((text, "0"));
    let places = mantissa.split_once('.').map_or(0, |(_, digits)| digits.len());
    let unit = 10f64.powi(exponent.parse::<i32>().unwrap() - places as i32);
    let truth: f64 = text.parse().unwrap();
    assert!((value - truth).abs() <= 0.5 * unit * (1.0 + 1e-6), "{value:e} is not {text} as printed");
}

#[test]
fn published_tests_of_two_by_two_tables() {
    // Tea tasting: R fisher.test (Agresti; Fisher); scipy for the two-sided value.
    let tea = d::fisher_exact(3, 1, 1, 3).unwrap();
    printed(tea.greater, "0.2429");
    printed(tea.greater, "0.2428571429");
    printed(tea.two_sided, "0.4857142857");
    // Convictions of like-sex twins: R fisher.test (Fisher 1962, 1970).
    printed(d::fisher_exact(2, 15, 10, 3).unwrap().two_sided, "0.0005367");
    // Fagerland, Lydersen & Laake, contingency-table book (authors' R package tests).
    printed(d::fisher_exact(0, 16, 15, 57).unwrap().two_sided, "0.06287");
    // The same book, McNemar (Cavo 2012): exact p 0.052479.
    printed(d::mcnemar_exact(6, 16).unwrap(), "0.052479");
    // McNemar, b = 121, c = 59: statsmodels 0.15.
    printed(d::mcnemar_exact(121, 59).unwrap(), "4.434449e-6");
}

#[test]
fn scipy_fisher_results() {
    // scipy 1.17.1 stats/tests/data/fisher_exact_results_from_r.py: two-sided p.
    for (a, b, c, dd, p) in [
        (100, 2, 1000, 5, 0.1300759363430016),
        (2, 7, 8, 2, 0.02301413756522116),
        (5, 1, 10, 10, 0.1973244147157191),
        (5, 15, 20, 20, 0.09580440012477633),
        (5, 16, 16, 25, 0.2697004098849359),
        (10, 5, 10, 1, 0.1973244147157192),
        (10, 5, 10, 0, 0.06126482213438735),
        (5, 0, 1, 4, 0.04761904761904762),
        (0, 5, 1, 4, 1.0),
        (5, 1, 0, 4, 0.04761904761904761),
        (0, 1, 3, 2, 1.0),
        (200, 7, 8, 300, 2.005657880389071e-122),
        (28, 21, 6, 1957, 5.728437460831947e-44),
        (190, 800, 200, 900, 0.574111858126088),
    ] {
        let got = d::fisher_exact(a, b, c, dd).unwrap().two_sided;
        assert!((got - p).abs() <= 1e-6 * p, "{a} {b} {c} {dd}: {got:e} {p:e}");
    }
}

#[test]
fn published_intervals_of_proportions() {
    // Altman et al., Statistics with Confidence 2000 p47 (transcribed in epiR);
    // digits beyond three: statsmodels 0.15.
    let (lower, upper) = d::wilson(81, 263, 0.95).unwrap();
    printed(lower, "0.255289");
    printed(upper, "0.366210");
    // Fagerland, Lydersen & Laake (authors' R package tests).
    let (lower, upper) = d::wilson(13, 16, 0.95).unwrap();
    printed(lower, "0.5699");
    printed(upper, "0.9341");
    let (lower, upper) = d::clopper_pearson(13, 16, 0.95).unwrap();
    printed(lower, "0.5435");
    printed(upper, "0.9595");
    // statsmodels 0.15 proportion_confint(method="beta").
    let (lower, upper) = d::clopper_pearson(81, 263, 0.95).unwrap();
    printed(lower, "0.252737");
    printed(upper, "0.367622");
}

#[test]
fn published_p_values() {
    // Sleep data, Welch: R t.test / scipy ttest_ind, t and df as printed.
    printed(d::student_two_sided(-1.860813, 17.776474).unwrap(), "0.07939");
    // Sleep data, paired: R stats t.test reference output.
    printed(d::student_two_sided(-4.0621, 9.0).unwrap(), "0.002833");
    // NIST e-Handbook eda353, Welch: Boost.Math documentation, one tail 7.855e-26.
    let p = d::student(12.946, 136.87).unwrap().upper;
    assert!((p / 7.855e-26 - 1.0).abs() < 0.01, "{p:e}");
    // The same, pooled: t −12.62059, df 326; one tail 2.637e-30 (Boost.Math example).
    let p = d::student(-12.62059, 326.0).unwrap().lower;
    assert!((p / 2.637e-30 - 1.0).abs() < 1e-3, "{p:e}");
    // NAG Library g07caf example: t 1.8403, df 10, p 0.0955, from the means and SDs
    // 25.0 (0.8185), n 4 and 21.0 (4.2083), n 8.
    let pooled = (3.0 * 0.8185_f64.powi(2) + 7.0 * 4.2083_f64.powi(2)) / 10.0;
    let t = 4.0 / (pooled * (1.0 / 4.0 + 1.0 / 8.0)).sqrt();
    printed(t, "1.8403");
    let p = d::student_two_sided(t, 10.0).unwrap();
    assert!((p - 0.0955).abs() < 1e-4, "{p}");
    // R cor.test reference output: t −0.8605, 41 df, p 0.3945.
    printed(d::student_two_sided(-0.8605, 41.0).unwrap(), "0.3945");
    // PlantGrowth, R aov / scipy f_oneway: F(2, 27) 4.846088, p 0.01590996.
    printed(d::f(4.846088, 2.0, 27.0).unwrap().upper, "0.015910");
    // OpenIntro Statistics, ANOVA exercise 39: F(4, 50734) = 5.2, p 0.0003.
    printed(d::f(5.213, 4.0, 50734.0).unwrap().upper, "0.0003");
    // Fagerland et al.: chi-squared 2.000, p 0.15730; corrected 0.500, p 0.47950.
    printed(d::chi_squared(2.0, 1.0).unwrap().upper, "0.15730");
    printed(d::chi_squared(0.5, 1.0).unwrap().upper, "0.47950");
    // R mcnemar.test (Agresti 1990 p350): 16.818, p 4.115e-05.
    assert!((d::chi_squared(16.818, 1.0).unwrap().upper - 4.115e-5).abs() < 1e-8);
    // Fagerland et al.: McNemar Z −2.132, p 0.033006.
    assert!((2.0 * d::normal(-2.132).lower - 0.033006).abs() < 2e-5);
}

#[test]
fn published_rank_tests() {
    // Shier, Mann-Whitney U Test, MLSC 2004 (transcribed in the scipy documentation):
    // groups of 5 and 4, U 17 and 3, exact two-sided p .11.
    printed(2.0 * d::mann_whitney_exact(17, 5, 4).unwrap().upper, "0.1111");
    printed(2.0 * d::mann_whitney_exact(3, 5, 4).unwrap().lower, "0.1111");
    // R wilcox.test (Hollander & Wolfe): W 35, n 10 and 5, one-sided .1272.
    printed(d::mann_whitney_exact(35, 10, 5).unwrap().upper, "0.1272");
}

#[test]
fn published_studentized_range() {
    // PlantGrowth, Tukey: p 0.390871, 0.197996, 0.012006 (scipy tukey_hsd), with
    // q = |difference|·√(n/MSE): group means 5.032, 4.661, 5.526, n = 10,
    // MSE = 0.3885959.
    let scale = (10.0 / 0.388_595_9_f64).sqrt();
    for (difference, p) in [(0.371, 0.390871), (0.494, 0.197996), (0.865, 0.012006)] {
        let got = d::studentized_range(difference * scale, 3, 27.0).unwrap().upper;
        assert!((got - p).abs() < 2e-6, "{got} {p}");
    }
}

#[test]
fn published_sample_size() {
    // d = 0.5, power 0.8, alpha 0.05 two-sided: 63.7656 per group (statsmodels 0.15;
    // R power.t.test gives the same). The power at that size is 0.8.
    let n = 63.7656;
    let df = 2.0 * n - 2.0;
    let critical = d::student_quantile(0.025, df).unwrap();
    let delta = 0.5 * (n / 2.0_f64).sqrt();
    let power = d::noncentral_student(critical, df, delta).unwrap().upper
        + d::noncentral_student(-critical, df, delta).unwrap().lower;
    assert!((power - 0.8).abs() < 1e-6, "{power}");
}

#[test]
fn larger_tables_agree_with_two_by_two() {
    let table: [&[u64]; 2] = [&[7, 27], &[1, 33]];
    let p = d::fisher_exact_table(&table).unwrap();
    assert!((p / d::fisher_exact(7, 27, 1, 33).unwrap().two_sided - 1.0).abs() < 1e-12);
    let ragged: [&[u64]; 2] = [&[1, 2], &[3]];
    assert_eq!(d::fisher_exact_table(&ragged), Err(DistributionError::OutOfDomain));
    let large: [&[u64]; 3] = [&[300, 200, 100], &[100, 300, 200], &[200, 300, 300]];
    assert_eq!(d::fisher_exact_table(&large), Err(DistributionError::TooLarge));
}

#[test]
fn what_is_not_a_number_is_refused() {
    for bad in [f64::NAN, f64::INFINITY, f64::NEG_INFINITY] {
        let refused = Err(DistributionError::NotFinite);
        assert_eq!(d::student(bad, 3.0), refused);
        assert_eq!(d::student(3.0, bad), refused);
        assert_eq!(d::f(bad, 3.0, 4.0), refused);
        assert_eq!(d::f(1.0, bad, 4.0), refused);
        assert_eq!(d::f(1.0, 3.0, bad), refused);
        assert_eq!(d::chi_squared(bad, 3.0), refused);
        assert_eq!(d::gamma(1.0, bad), refused);
        assert_eq!(d::beta(bad, 0.5, 1.0, 1.0), refused);
        assert_eq!(d::binomial(1, 2, bad), refused);
        assert_eq!(d::poisson(1, bad), refused);
        assert_eq!(d::noncentral_student(1.0, 3.0, bad), refused);
        assert_eq!(d::studentized_range(bad, 3, 3.0), refused);
        let refused = Err(DistributionError::NotFinite);
        assert_eq!(d::normal_quantile(bad), refused);
        assert_eq!(d::student_quantile(bad, 2.0), refused);
        assert_eq!(d::f_quantile(0.5, bad, 2.0), refused);
        assert_eq!(d::chi_squared_quantile(0.5, bad), refused);
        assert_eq!(d::beta_quantile(0.5, 1.0, bad), refused);
        assert_eq!(d::clopper_pearson(1, 2, bad), Err(DistributionError::NotFinite));
        assert_eq!(d::wilson(1, 2, bad), Err(DistributionError::NotFinite));
    }
}

#[test]
fn what_is_out_of_range_is_refused() {
    let refused = Err(DistributionError::OutOfDomain);
    assert_eq!(d::student(1.0, 0.0), refused);
    assert_eq!(d::f(-1.0, 2.0, 2.0), refused);
    assert_eq!(d::chi_squared(-1.0, 2.0), refused);
    assert_eq!(d::beta(0.5, 0.4, 2.0, 2.0), refused);
    assert_eq!(d::binomial(1, 2, 1.1), refused);
    assert_eq!(d::hypergeometric(5, 8, 4, 4), refused);
    assert_eq!(d::mann_whitney_exact(13, 3, 4), refused);
    for p in [0.0, 1.0, -0.1, 1.1] {
        assert_eq!(d::student_quantile(p, 3.0), Err(DistributionError::OutOfDomain));
    }
    assert_eq!(d::clopper_pearson(3, 2, 0.95), Err(DistributionError::OutOfDomain));
    assert_eq!(d::mann_whitney_exact(1, 1000, 1000), Err(DistributionError::TooLarge));
    assert_eq!(d::fisher_exact(u64::MAX, 1, 1, 1), Err(DistributionError::TooLarge));
    assert_eq!(d::fisher_exact(100_000_000, 1, 1, 1), Err(DistributionError::TooLarge));
    assert_eq!(d::mcnemar_exact(u64::MAX, 1), Err(DistributionError::TooLarge));
}

/// Positive sizes spread over the orders of magnitude that manuscripts print.
fn size() -> impl Strategy<Value = f64> {
    (0.0..6.0f64).prop_map(|exponent| 10f64.powf(exponent))
}

/// Tail probabilities from 1e-30 up, evenly on the log scale.
fn tail() -> impl Strategy<Value = f64> {
    prop_oneof![(-30.0..-0.301f64).prop_map(|exponent| 10f64.powf(exponent)), 0.01..0.99f64,]
}

fn adds_up(tails: Tails) {
    assert!((0.0..=1.0).contains(&tails.lower) && (0.0..=1.0).contains(&tails.upper));
    assert!((tails.lower + tails.upper - 1.0).abs() < 1e-12, "{tails:?}");
}

fn near(value: f64, truth: f64) {
    assert!((value - truth).abs() <= 1e-10 * truth.abs(), "{value:e} {truth:e}");
}

proptest! {
    #![proptest_config(ProptestConfig { cases: 400, failure_persistence: None, ..ProptestConfig::default() })]

    #[test]
    fn tails_add_up(z in -40.0..40.0f64, df1 in size(), df2 in size(), x in 1e-6..1e3f64) {
        adds_up(d::normal(z));
        adds_up(d::student(z, df1).unwrap());
        adds_up(d::f(x, df1, df2).unwrap());
        adds_up(d::chi_squared(x * df1, df1).unwrap());
        let (p, q) = (x / (1.0 + x), 1.0 / (1.0 + x));
        adds_up(d::beta(p, q, df1, df2).unwrap());
    }

    #[test]
    fn quantiles_go_there_and_back(p in tail(), df1 in size(), df2 in size()) {
        near(d::normal(d::normal_quantile(p).unwrap()).upper, p);
        near(d::student(d::student_quantile(p, df1).unwrap(), df1).unwrap().upper, p);
        near(d::f(d::f_quantile(p, df1, df2).unwrap(), df1, df2).unwrap().upper, p);
        near(d::chi_squared(d::chi_squared_quantile(p, df1).unwrap(), df1).unwrap().upper, p);
        let x = d::beta_quantile(p, df1, df2).unwrap();
        // Where x is near 1, 1 − x is known only to 1e-16.
        if x < 0.9 {
            near(d::beta(x, 1.0 - x, df1, df2).unwrap().lower, p);
        }
    }

    #[test]
    fn tails_are_monotone(x in 0.0..50.0f64, more in 1e-6..5.0f64, df1 in size(), df2 in size()) {
        let slack = 1.0 + 1e-12;
        prop_assert!(d::normal(x + more).upper <= d::normal(x).upper);
        prop_assert!(d::student(x + more, df1).unwrap().upper <= d::student(x, df1).unwrap().upper * slack);
        prop_assert!(d::f(x + more, df1, df2).unwrap().upper <= d::f(x, df1, df2).unwrap().upper * slack);
        prop_assert!(
            d::chi_squared((x + more) * df1, df1).unwrap().upper
                <= d::chi_squared(x * df1, df1).unwrap().upper * slack
        );
        prop_assert!(d::chi_squared(x, df1).unwrap().upper <= d::chi_squared(x, df1 + more).unwrap().upper * slack);
    }

    #[test]
    fn symmetries_hold(t in -50.0..50.0f64, df1 in size(), df2 in size(), x in 1e-3..1e3f64) {
        let (one, other) = (d::student(t, df1).unwrap(), d::student(-t, df1).unwrap());
        prop_assert_eq!(one.lower, other.upper);
        // t² is F with one degree of freedom; 1/F swaps the degrees of freedom.
        near(d::f(t * t, 1.0, df1).unwrap().upper, d::student_two_sided(t, df1).unwrap());
        let small = d::f(x, df1, df2).unwrap().upper;
        if small > 1e-30 {
            near(d::f(1.0 / x, df2, df1).unwrap().lower, small);
        }
    }

    #[test]
    fn exact_tests_are_consistent(a in 0..60u64, b in 0..60u64, c in 0..60u64, e in 0..60u64) {
        let p = d::fisher_exact(a, b, c, e).unwrap();
        prop_assert!(p.two_sided <= 1.0 && p.two_sided >= p.less.min(p.greater) * (1.0 - 1e-12));
        let swapped = d::fisher_exact(b, a, e, c).unwrap();
        near(swapped.greater, p.less);
        near(swapped.two_sided, p.two_sided);
        let tails = d::hypergeometric(a, a + b + c + e, a + b, a + c).unwrap();
        near(tails.lower, p.less);
        near(tails.upper, p.greater);
        let rows: [&[u64]; 2] = [&[a, b], &[c, e]];
        if a + b + c + e > 0 {
            near(d::fisher_exact_table(&rows).unwrap(), p.two_sided);
        }
        let n = a + b;
        if n > 0 {
            let (lower, upper) = d::clopper_pearson(a, n, 0.95).unwrap();
            let (low, high) = d::wilson(a, n, 0.95).unwrap();
            let share = a as f64 / n as f64;
            prop_assert!(lower <= share && share <= upper && low <= share && share <= high);
            // The limits of Clopper and Pearson have the tail 2.5 % exactly.
            if a > 0 { near(d::binomial(a, n, lower).unwrap().upper, 0.025); }
            if b > 0 && upper < 0.9 { near(d::binomial(a, n, upper).unwrap().lower, 0.025); }
        }
    }
}

proptest! {
    // Fewer cases: wild arguments drive every loop to its bound.
    #![proptest_config(ProptestConfig { cases: 60, failure_persistence: None, ..ProptestConfig::default() })]

    #[test]
    fn anything_terminates(a in any::<f64>(), b in any::<f64>(), c in any::<f64>(), k in any::<u64>(), n in any::<u64>()) {
        let _ = d::normal(a);
        let _ = d::student(a, b);
        let _ = d::f(a, b, c);
        let _ = d::chi_squared(a, b);
        let _ = d::gamma(a, b);
        let _ = d::beta(a, 1.0 - a, b, c);
        let _ = d::normal_quantile(a);
        let _ = d::student_quantile(a, b);
        let _ = d::f_quantile(a, b, c);
        let _ = d::chi_squared_quantile(a, b);
        let _ = d::beta_quantile(a, b, c);
        let _ = d::binomial(k, n, a);
        let _ = d::poisson(k, a);
        let _ = d::mann_whitney_exact(k, n, 3);
        let _ = d::noncentral_student(a, b, c);
        let _ = d::studentized_range(a, k, b);
    }

    #[test]
    fn any_size_terminates(
        x in (-320.0..308.0f64).prop_map(|e| 10f64.powf(e)),
        a in (-320.0..308.0f64).prop_map(|e| 10f64.powf(e)),
        b in (-320.0..308.0f64).prop_map(|e| 10f64.powf(e)),
        p in (-300.0..-0.01f64).prop_map(|e| 10f64.powf(e)),
    ) {
        let whole = |t: Result<Tails, DistributionError>| {
            if let Ok(t) = t {
                assert!((0.0..=1.0).contains(&t.lower) && (0.0..=1.0).contains(&t.upper), "{t:?}");
            }
        };
        whole(d::student(x, a));
        whole(d::f(x, a, b));
        whole(d::chi_squared(x, a));
        whole(d::noncentral_student(x, a, b));
        whole(d::studentized_range(x, 5, a));
        whole(d::poisson(b.min(1e15) as u64, a));
        whole(d::binomial(a.min(1e15) as u64, b.min(1e15) as u64, p));
        let number = |q: Result<f64, DistributionError>| assert!(q.is_err() || q.unwrap().is_finite());
        number(d::student_quantile(p, a));
        number(d::f_quantile(p, a, b));
        number(d::chi_squared_quantile(p, a));
        number(d::beta_quantile(p, a, b));
    }
}
