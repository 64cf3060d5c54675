//! Whatever the true figures were: printed with few digits and read back, the recomputed range holds the truth,
//! and a p-value printed from the truth is never objected to.

mod recompute_paper;

use proptest::prelude::*;
use recompute_paper::Paper;
use tallyproof::distribution::{chi_squared, f, normal, normal_quantile, student_two_sided};
use tallyproof::query::Verdict;
use tallyproof::reading::{Measure, Relation, Scale, SpreadKind, Symbol};

fn fixed(v: f64, places: usize) -> String {
    format!("{v:.places$}")
}

/// A p-value as a journal prints it: three decimals, `< 0.001` below.
fn printed_p(p: Paper, value: f64) -> Paper {
    if value < 0.001 { p.p(Relation::Less, "0.001") } else { p.p(Relation::Equal, &fixed(value, 3)) }
}

proptest! {
    #[test]
    fn t_statistics(t in -6.0..6.0f64, df in 2u32..300, places in 1usize..4) {
        let p = student_two_sided(t, f64::from(df)).unwrap();
        let c = printed_p(Paper::default().statistic(Symbol::T, [&df.to_string(), ""], &fixed(t, places)), p).check();
        prop_assert_eq!(c.verdict, Verdict::Tallies);
        prop_assert!(c.recomputations[0].computed.unwrap().contains(p));
    }

    #[test]
    fn f_and_chi_squared_statistics(x in 0.01..30.0f64, d1 in 1u32..8, d2 in 3u32..300) {
        let p = f(x, f64::from(d1), f64::from(d2)).unwrap().upper;
        let c = printed_p(Paper::default().statistic(Symbol::F, [&d1.to_string(), &d2.to_string()], &fixed(x, 2)), p).check();
        prop_assert!(c.recomputations[0].computed.unwrap().contains(p));
        prop_assert_eq!(c.verdict, Verdict::Tallies);
        let p = chi_squared(x, f64::from(d1)).unwrap().upper;
        let c = printed_p(Paper::default().statistic(Symbol::ChiSquared, [&d1.to_string(), ""], &fixed(x, 2)), p).check();
        prop_assert!(c.recomputations[0].computed.unwrap().contains(p));
        prop_assert_eq!(c.verdict, Verdict::Tallies);
    }

    #[test]
    fn ratios_with_intervals(log in -1.5..1.5f64, se in 0.03..0.6f64, places in 2usize..4) {
        let z = normal_quantile(0.025).unwrap();
        let p = 2.0 * normal((log / se).abs()).upper;
        let paper = Paper::default()
            .estimate(Measure::OddsRatio, Scale::Ratio, &fixed(log.exp(), places))
            .interval(&fixed((log - z * se).exp(), places), &fixed((log + z * se).exp(), places));
        let c = printed_p(paper, p).check();
        prop_assert_eq!(c.verdict, Verdict::Tallies, "{:#?}", c);
    }

    #[test]
    fn differences_with_intervals(d in -5.0..5.0f64, se in 0.2..3.0f64, places in 1usize..3) {
        let z = normal_quantile(0.025).unwrap();
        let p = 2.0 * normal((d / se).abs()).upper;
        let paper = Paper::default()
            .estimate(Measure::MeanDifference, Scale::Difference, &fixed(d, places))
            .interval(&fixed(d - z * se, places), &fixed(d + z * se, places));
        prop_assert_eq!(printed_p(paper, p).check().verdict, Verdict::Tallies);
    }

    #[test]
    fn welch_from_summaries(n1 in 3u32..90, n2 in 3u32..90, m1 in 3.0..9.0f64, m2 in 3.0..9.0f64, s1 in 0.5..3.0f64, s2 in 0.5..3.0f64, se: bool) {
        let (a, b) = (f64::from(n1), f64::from(n2));
        let (va, vb) = (s1 * s1 / a, s2 * s2 / b);
        let df = (va + vb).powi(2) / (va * va / (a - 1.0) + vb * vb / (b - 1.0));
        let p = student_two_sided((m1 - m2) / (va + vb).sqrt(), df).unwrap();
        let kind = if se { SpreadKind::Se } else { SpreadKind::Sd };
        let spread = |s: f64, n: f64| fixed(if se { s / n.sqrt() } else { s }, 2);
        let paper = Paper::default()
            .mean(&n1.to_string(), &fixed(m1, 1), &spread(s1, a), kind)
            .mean(&n2.to_string(), &fixed(m2, 1), &spread(s2, b), kind);
        let c = printed_p(paper, p).check();
        prop_assert_eq!(c.verdict, Verdict::Tallies, "{:#?}", c);
    }

    #[test]
    fn percentages(events in 0u64..500, more in 0u64..500, places in 0usize..3) {
        prop_assume!(events + more > 0);
        let total = events + more;
        let percent = fixed(100.0 * events as f64 / total as f64, places);
        let c = Paper::default().percent_of(&events.to_string(), &total.to_string(), &percent).check();
        prop_assert_eq!(c.verdict, Verdict::Tallies);
    }

    #[test]
    fn pearson_from_percentages(n1 in 8u64..300, n2 in 8u64..300, u in 0.0..1.0f64, v in 0.0..1.0f64) {
        let pick = |n: u64, u: f64| (1.0 + u * (n as f64 - 2.0)).round() as u64;
        let (a, c) = (pick(n1, u), pick(n2, v));
        let (e, all) = ((a + c) as f64, (n1 + n2) as f64);
        let (x, y) = (a as f64 * n2 as f64 - c as f64 * n1 as f64, n1 as f64 * n2 as f64);
        let p = chi_squared(x * x * all / (y * e * (all - e)), 1.0).unwrap().upper;
        let mut paper = Paper::default();
        for (e, n) in [(a, n1), (c, n2)] {
            paper = paper.percent_of(&e.to_string(), &n.to_string(), &fixed(100.0 * e as f64 / n as f64, 1));
            paper.readings.groups.last_mut().unwrap().events = None;
        }
        let checked = printed_p(paper, p).check();
        prop_assert_eq!(checked.verdict, Verdict::Tallies, "{:#?}", checked);
    }
}
