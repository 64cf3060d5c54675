//! Tail probabilities over ranges of a statistic and its degrees of freedom.
//!
//! Each function returns a range that encloses the p-value at every point of the box of its inputs. The
//! monotonicity it leans on is stated; the distribution's own relative error is added at both ends.

use crate::distribution::{self, RELATIVE_ERROR};
use crate::printed::Range;

/// Two-sided p of `t` with `df`; an infinite `df` means the normal distribution. `None` outside the domain.
pub(crate) fn two_sided(t: f64, df: f64) -> Option<f64> {
    let t = t.abs();
    if t.is_nan() || df.is_nan() || df <= 0.0 {
        None
    } else if t == f64::INFINITY {
        Some(0.0)
    } else if df == f64::INFINITY {
        Some((2.0 * distribution::normal(t).upper).min(1.0))
    } else {
        distribution::student_two_sided(t, df).ok()
    }
}

/// The critical value with `upper` above it, `df` as in [`two_sided`].
pub(crate) fn critical(upper: f64, df: f64) -> Option<f64> {
    if df == f64::INFINITY {
        distribution::normal_quantile(upper).ok()
    } else {
        distribution::student_quantile(upper, df).ok()
    }
}

fn enclosed(a: f64, b: f64) -> Range {
    Range::new(a, b).widened(RELATIVE_ERROR).clamped(0.0, 1.0)
}

/// Two-sided p of Student's t: falls as |t| or df grows, so two corners enclose it.
pub(crate) fn student(t: Range, df: Range) -> Option<Range> {
    let t = t.abs();
    Some(enclosed(two_sided(t.hi, df.hi)?, two_sided(t.lo, df.lo)?))
}

/// Two-sided p of a normal deviate: falls as |z| grows.
pub(crate) fn normal(z: Range) -> Option<Range> {
    student(z, Range::point(f64::INFINITY))
}

/// Upper tail of F: falls as F grows. The degrees of freedom are searched at the ends and the middle of their
/// ranges, which are at most a unit wide (a rounding interval), where the tail is monotone in each.
pub(crate) fn f(x: Range, df1: Range, df2: Range) -> Option<Range> {
    let x = x.clamped(0.0, f64::MAX);
    let mut all: Option<Range> = None;
    for d1 in points(df1) {
        for d2 in points(df2) {
            let high = distribution::f(x.lo, d1, d2).ok()?.upper;
            let low = distribution::f(x.hi, d1, d2).ok()?.upper;
            let both = enclosed(low, high);
            all = Some(all.map_or(both, |r| r.hull(both)));
        }
    }
    all
}

/// Upper tail of χ²: falls as the statistic grows, rises with df.
pub(crate) fn chi_squared(x: Range, df: f64) -> Option<Range> {
    let x = x.clamped(0.0, f64::MAX);
    let high = distribution::chi_squared(x.lo, df).ok()?.upper;
    let low = distribution::chi_squared(x.hi, df).ok()?.upper;
    Some(enclosed(low, high))
}

fn points(r: Range) -> impl Iterator<Item = f64> {
    let n = if r.lo == r.hi { 1 } else { 3 };
    [r.lo, r.hi, r.middle()].into_iter().take(n)
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    proptest! {
        #[test]
        fn student_encloses_the_box_and_its_ends_are_attained(
            lo in -6.0..6.0f64, w in 0.0..0.5f64, df in 1.0..200.0f64, dw in 0.0..1.0f64, u in 0.0..1.0f64, v in 0.0..1.0f64,
        ) {
            let (t, d) = (Range::new(lo, lo + w), Range::new(df, df + dw));
            let p = student(t, d).unwrap();
            let inside = two_sided(lo + u * w, df + v * dw).unwrap();
            prop_assert!(p.contains(inside));
            let corner = two_sided(t.abs().hi, d.hi).unwrap();
            prop_assert!((p.lo - corner).abs() <= 2.0 * RELATIVE_ERROR * corner);
        }

        #[test]
        fn f_encloses_the_box(x in 0.0..20.0f64, w in 0.0..0.1f64, d1 in 1.0..8.0f64, d2 in 2.0..300.0f64,
            dw in 0.0..1.0f64, u in 0.0..1.0f64, v in 0.0..1.0f64) {
            let p = f(Range::new(x, x + w), Range::point(d1), Range::new(d2, d2 + dw)).unwrap();
            let inside = distribution::f(x + u * w, d1, d2 + v * dw).unwrap().upper;
            prop_assert!(p.lo * (1.0 - 1e-6) <= inside && inside <= p.hi * (1.0 + 1e-6));
        }

        #[test]
        fn chi_squared_encloses_the_box(x in 0.0..40.0f64, w in 0.0..0.5f64, df in 1u32..12, u in 0.0..1.0f64) {
            let p = chi_squared(Range::new(x, x + w), f64::from(df)).unwrap();
            prop_assert!(p.contains(distribution::chi_squared(x + u * w, f64::from(df)).unwrap().upper));
        }
    }
}
