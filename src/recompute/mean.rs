//! Tests of means from group summaries: the arithmetic, over ranges.

use super::tail;
use crate::printed::Range;

/// n, mean and SD of one group.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Summary {
    pub n: f64,
    pub mean: Range,
    /// Never negative.
    pub sd: Range,
}

/// A statistic with its degrees of freedom and p.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Tested {
    pub statistic: Range,
    pub df: Range,
    pub p: Range,
}

fn square(r: Range) -> Range {
    Range::new(r.lo * r.lo, r.hi * r.hi)
}

fn root(r: Range) -> Range {
    Range::new(r.lo.max(0.0).sqrt(), r.hi.max(0.0).sqrt())
}

/// Dividing by something that is not negative.
fn over(d: Range, by: Range) -> Range {
    let divide = |a: f64, b: f64| if a == 0.0 { 0.0 } else { a / b };
    let lo = if d.lo < 0.0 { divide(d.lo, by.lo) } else { divide(d.lo, by.hi) };
    let hi = if d.hi < 0.0 { divide(d.hi, by.hi) } else { divide(d.hi, by.lo) };
    Range::new(lo, hi)
}

/// Standard error of the difference and degrees of freedom, equal variances: grows with either SD.
pub(crate) fn pooled_error(a: Summary, b: Summary) -> (Range, Range) {
    let df = a.n + b.n - 2.0;
    let pooled = (square(a.sd) * (a.n - 1.0) + square(b.sd) * (b.n - 1.0)) * (1.0 / df);
    (root(pooled * (1.0 / a.n + 1.0 / b.n)), Range::point(df))
}

/// The same, unequal variances. The degrees of freedom depend on the share of one group's variance and peak at
/// n₁ + n₂ − 2, so ends and peak enclose them.
pub(crate) fn welch_error(a: Summary, b: Summary) -> (Range, Range) {
    let (va, vb) = (square(a.sd) * (1.0 / a.n), square(b.sd) * (1.0 / b.n));
    let df = |share: f64| 1.0 / (share * share / (a.n - 1.0) + (1.0 - share) * (1.0 - share) / (b.n - 1.0));
    let share = |x: f64, y: f64| if x + y > 0.0 { x / (x + y) } else { 0.5 };
    let shares = Range::new(share(va.lo, vb.hi), share(va.hi, vb.lo));
    let mut range = Range::new(df(shares.lo), df(shares.hi));
    let most = a.n + b.n - 2.0;
    if shares.contains((a.n - 1.0) / most) {
        range = range.hull(Range::point(most));
    }
    (root(va + vb), range)
}

/// Pooled or Welch t of the difference of two means. |t| grows with the difference and falls with the SDs.
pub(crate) fn two_means(a: Summary, b: Summary, welch: bool) -> Option<Tested> {
    if a.n < 2.0 || b.n < 2.0 || a.sd.hi + b.sd.hi <= 0.0 {
        return None;
    }
    let (se, df) = if welch { welch_error(a, b) } else { pooled_error(a, b) };
    let t = over(a.mean - b.mean, se);
    Some(Tested { statistic: t, df, p: tail::student(t, df)? })
}

/// One-way ANOVA. The sum of squares between the groups is convex in the means: its greatest value lies at a
/// corner (bounded from above for more than eight groups), its least is found over the common mean; the sum
/// within grows with each SD.
pub(crate) fn anova(groups: &[Summary]) -> Option<Tested> {
    let k = groups.len();
    if k < 2 || groups.iter().any(|g| g.n < 1.0) {
        return None;
    }
    let total: f64 = groups.iter().map(|g| g.n).sum();
    let (df1, df2) = (k as f64 - 1.0, total - k as f64);
    if df2 <= 0.0 {
        return None;
    }
    let within = groups.iter().fold(Range::point(0.0), |s, g| s + square(g.sd) * (g.n - 1.0));
    let between = Range::new(least_between(groups), most_between(groups, total));
    let f = over(between * (1.0 / df1), within * (1.0 / df2));
    let p = tail::f(f, Range::point(df1), Range::point(df2))?;
    Some(Tested { statistic: f, df: Range::new(df1, df2), p })
}

fn least_between(groups: &[Summary]) -> f64 {
    let sum = |m: f64| -> f64 {
        groups
            .iter()
            .map(|g| {
                let away = (g.mean.lo - m).max(m - g.mean.hi).max(0.0);
                g.n * away * away
            })
            .sum()
    };
    let (mut lo, mut hi) =
        groups.iter().fold((f64::INFINITY, f64::NEG_INFINITY), |(lo, hi), g| (lo.min(g.mean.lo), hi.max(g.mean.hi)));
    // Convex in the common mean: thirds of the bracket are dropped.
    for _ in 0..80 {
        let (a, b) = (lo + (hi - lo) / 3.0, hi - (hi - lo) / 3.0);
        if sum(a) < sum(b) { hi = b } else { lo = a }
    }
    // What the search leaves is second order in the bracket; a hair below stays an enclosure.
    sum(lo + (hi - lo) / 2.0) * (1.0 - 1e-9)
}

fn most_between(groups: &[Summary], total: f64) -> f64 {
    let centre = groups.iter().map(|g| g.n * g.mean.middle()).sum::<f64>() / total;
    let far = |g: &Summary| (g.mean.lo - centre).abs().max((g.mean.hi - centre).abs());
    let bound = groups.iter().map(|g| g.n * far(g) * far(g)).sum::<f64>();
    if groups.len() > 8 {
        return bound;
    }
    let corner = |bits: usize| {
        let (mut s, mut q) = (0.0, 0.0);
        for (i, g) in groups.iter().enumerate() {
            let m = if bits >> i & 1 == 1 { g.mean.hi } else { g.mean.lo } - centre;
            s += g.n * m;
            q += g.n * m * m;
        }
        q - s * s / total
    };
    (0..1usize << groups.len()).map(corner).fold(0.0, f64::max) * (1.0 + 1e-9)
}

/// The interval of the difference of two means: difference ± critical t times its standard error. The lower
/// limit is least where the difference is least and the error and critical value greatest.
pub(crate) fn difference_interval(a: Summary, b: Summary, welch: bool, level: f64) -> Option<(Range, Range)> {
    if a.n < 2.0 || b.n < 2.0 {
        return None;
    }
    let (se, df) = if welch { welch_error(a, b) } else { pooled_error(a, b) };
    let upper = (1.0 - level / 100.0) / 2.0;
    let (most, least) = (tail::critical(upper, df.lo)?, tail::critical(upper, df.hi)?);
    let half = Range::new(se.lo * least, se.hi * most);
    let d = a.mean - b.mean;
    Some((Range::new(d.lo - half.hi, d.hi - half.lo), Range::new(d.lo + half.lo, d.hi + half.hi)))
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    fn around(v: f64, half: f64) -> Range {
        Range::new(v - half, v + half)
    }

    fn at(s: Summary, u: f64, v: f64) -> Summary {
        let point = |r: Range, x: f64| Range::point(r.lo + x * r.width());
        Summary { n: s.n, mean: point(s.mean, u), sd: point(s.sd, v) }
    }

    prop_compose! {
        fn summary()(n in 2u32..80, mean in -5.0..5.0f64, sd in 0.2..4.0f64) -> Summary {
            Summary { n: f64::from(n), mean: around(mean, 0.05), sd: around(sd, 0.05) }
        }
    }

    proptest! {
        #[test]
        fn two_means_enclose_the_box(a in summary(), b in summary(), welch: bool,
            u in 0.0..1.0f64, v in 0.0..1.0f64, w in 0.0..1.0f64, x in 0.0..1.0f64) {
            let all = two_means(a, b, welch).unwrap();
            let one = two_means(at(a, u, v), at(b, w, x), welch).unwrap();
            prop_assert!(all.p.widened(1e-12).contains(one.p.middle()));
            prop_assert!(all.statistic.widened(1e-12).contains(one.statistic.middle()));
            prop_assert!(all.df.widened(1e-9).contains(one.df.middle()));
            let (lo, hi) = difference_interval(a, b, welch, 95.0).unwrap();
            let (l, h) = difference_interval(at(a, u, v), at(b, w, x), welch, 95.0).unwrap();
            prop_assert!(lo.lo - 1e-9 <= l.lo && l.hi <= lo.hi + 1e-9 && hi.lo - 1e-9 <= h.lo && h.hi <= hi.hi + 1e-9);
        }

        #[test]
        fn pooled_ends_are_attained(a in summary(), b in summary()) {
            let all = two_means(a, b, false).unwrap();
            let sign = a.mean.middle() > b.mean.middle();
            let most = two_means(at(a, f64::from(u8::from(sign)), 0.0), at(b, f64::from(u8::from(!sign)), 0.0), false).unwrap();
            prop_assert!((most.p.lo - all.p.lo).abs() <= 1e-8 * all.p.lo + 1e-300);
        }

        #[test]
        fn anova_encloses_the_box(g in proptest::collection::vec(summary(), 2..6), u in proptest::collection::vec(0.0..1.0f64, 12)) {
            let all = anova(&g).unwrap();
            let points: Vec<Summary> = g.iter().enumerate().map(|(i, &s)| at(s, u[2 * i], u[2 * i + 1])).collect();
            let one = anova(&points).unwrap();
            prop_assert!(all.statistic.widened(1e-8).contains(one.statistic.middle()));
            prop_assert!(all.p.widened(1e-8).contains(one.p.middle()));
        }
    }

    #[test]
    fn two_groups_by_anova_are_the_pooled_t_squared() {
        let a = Summary { n: 13.0, mean: Range::point(15.0), sd: Range::point(87.5f64.sqrt()) };
        let b = Summary { n: 11.0, mean: Range::point(12.0), sd: Range::point(39f64.sqrt()) };
        let (t, f) = (two_means(a, b, false).unwrap(), anova(&[a, b]).unwrap());
        assert!((t.statistic.lo.powi(2) - f.statistic.middle()).abs() < 1e-6);
    }
}
