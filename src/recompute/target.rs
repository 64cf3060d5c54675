//! What a printed figure stands for, and what a recomputed range is held against.

use crate::distribution;
use crate::printed::{Printed, Range};
use crate::reading::{PValue, Relation};
use crate::text::Span;

/// A printed figure as ranges of values.
#[derive(Clone, Debug)]
pub(crate) struct Target {
    /// The values that round to the figure, or satisfy the relation.
    pub range: Range,
    /// The values that it is cut from.
    pub cut: Range,
    /// Values within one unit of the last printed place.
    pub near: Range,
    /// What the figure would stand for after a tenfold change against it.
    against: Against,
    /// One unit of the last place (1 for a p without a figure).
    pub unit: f64,
    pub is_p: bool,
    pub figure: Span,
}

#[derive(Clone, Debug)]
enum Against {
    /// Printed with `=`: moved one decimal place either way (upwards only while it remains possible).
    Moved(Option<Range>, Option<Range>),
    /// `< v`, or a p printed as zero: the figure speaks against everything above, so that all computed values
    /// must lie at or below this.
    Above(f64),
    /// `> v` or `NS`: all computed values must lie at or above this.
    Below(f64),
}

/// How well a computed range fits a printed figure, best first.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub(crate) enum Fit {
    Full,
    Cut,
    LastPlace,
    Off,
}

impl Target {
    /// A p-value. `alpha` is what `NS` stands against. `None` where the figure is no probability.
    pub fn p(p: &PValue, alpha: f64) -> Option<Target> {
        let at = |range: Range, cut, near, against, unit| {
            Some(Target { range, cut, near, against, unit, is_p: true, figure: p.span })
        };
        let Some(printed) = p.value else {
            let above = Range::new(alpha, 1.0);
            return (p.relation == Relation::NotSignificant)
                .then(|| at(above, above, above, Against::Below(alpha), 1.0))
                .flatten();
        };
        let (v, unit) = (printed.value(), printed.unit());
        if !(0.0..=1.0).contains(&v) {
            return None;
        }
        let unit_range = |lo: f64, hi: f64| Range::new(lo.clamp(0.0, 1.0), hi.clamp(0.0, 1.0));
        match p.relation {
            // `0.000` and `< 0.000` both say that it rounds to nothing.
            Relation::Equal | Relation::Less | Relation::AtMost if printed.digits == 0 => {
                let range = unit_range(0.0, unit / 2.0);
                let wide = unit_range(0.0, unit);
                at(range, wide, wide, Against::Above(unit), unit)
            }
            Relation::Equal => {
                let rounded = printed.rounded();
                let up = (rounded.lo * 10.0 <= 1.0).then(|| unit_range(rounded.lo * 10.0, rounded.hi * 10.0));
                let down = Some(unit_range(rounded.lo / 10.0, rounded.hi / 10.0));
                at(
                    unit_range(rounded.lo, rounded.hi),
                    unit_range(v, v + unit),
                    // One unit is more than a near miss where the figure itself is a unit or two.
                    unit_range((v - unit).max(v / 1.5), (v + unit).min(v * 1.5)),
                    Against::Moved(up, down),
                    unit,
                )
            }
            // A computed 0.00104 prints as 0.001 and is often called `< 0.001`: a near miss, not a difference.
            Relation::Less | Relation::AtMost => {
                let near = unit_range(0.0, v * 1.05);
                at(unit_range(0.0, v), near, near, Against::Above(v), unit)
            }
            Relation::Greater | Relation::AtLeast => {
                let near = unit_range(v / 1.05, 1.0);
                at(unit_range(v, 1.0), near, near, Against::Below(v), unit)
            }
            Relation::NotSignificant => None,
        }
    }

    /// Any other figure, with its digits.
    pub fn figure(printed: Printed, figure: Span) -> Target {
        let (v, unit) = (printed.value(), printed.unit());
        let rounded = printed.rounded();
        Target {
            range: rounded,
            cut: printed.cut(),
            near: Range::new(v - unit, v + unit),
            against: Against::Moved(Some(printed.shifted(1).rounded()), Some(printed.shifted(-1).rounded())),
            unit,
            is_p: false,
            figure,
        }
    }

    /// The same figure without regard to its sign, where two groups may be subtracted either way.
    pub fn unsigned(printed: Printed, figure: Span) -> Target {
        Target::figure(Printed { negative: false, ..printed }, figure)
    }

    pub fn fit(&self, computed: Range) -> Fit {
        // One part in 10^12 keeps decimal fractions that fall on an end of the interval from missing it.
        let computed = computed.widened(1e-12);
        if computed.meets(self.range) {
            Fit::Full
        } else if computed.meets(self.cut) {
            Fit::Cut
        } else if computed.meets(self.near) {
            Fit::LastPlace
        } else {
            Fit::Off
        }
    }

    /// Whether a tenfold change of the figure, in the direction against it, would differ from `computed`.
    ///
    /// For `=` that is a decimal point moved either way. For `< v` and `> v` the figure is already against all
    /// values on its far side: turned round it must differ, so the whole computed range has to satisfy it.
    pub fn sharp_against(&self, computed: Range) -> bool {
        match &self.against {
            Against::Moved(up, down) => ![up, down].into_iter().flatten().any(|r| r.meets(computed)),
            Against::Above(v) => computed.hi <= v * (1.0 + 1e-9),
            Against::Below(v) => computed.lo >= v * (1.0 - 1e-9),
        }
    }

    /// Ratio (p) or number of last-place units between the nearest ends; 1 or 0 where they meet.
    pub fn distance(&self, computed: Range) -> f64 {
        let (near, far) = if computed.lo > self.range.hi {
            (self.range.hi, computed.lo)
        } else if computed.hi < self.range.lo {
            (computed.hi, self.range.lo)
        } else {
            return if self.is_p { 1.0 } else { 0.0 };
        };
        if self.is_p { if near > 0.0 { (far / near).min(1e12) } else { 1e12 } } else { (far - near) / self.unit }
    }

    /// How far the nearest ends of printed and recomputed p lie apart as normal deviates, relative to the larger: a
    /// fifth fewer participants move p by a tenth on this scale, whatever its size.
    pub fn shift(&self, computed: Range) -> f64 {
        let (near, far) = if computed.lo > self.range.hi {
            (self.range.hi, computed.lo)
        } else if computed.hi < self.range.lo {
            (computed.hi, self.range.lo)
        } else {
            return 0.0;
        };
        let deviate = |p: f64| distribution::normal_quantile((p / 2.0).clamp(1e-300, 0.499_999)).unwrap_or(0.0);
        let (large, small) = (deviate(near), deviate(far));
        if large > 0.0 { (large - small) / large } else { 0.0 }
    }

    /// Printed and computed lie strictly on two sides of alpha; alpha itself is on neither.
    pub fn across(&self, computed: Range, alpha: f64) -> bool {
        if !self.is_p {
            return false;
        }
        let below = |r: Range| r.hi <= alpha && r.lo < alpha;
        let above = |r: Range| r.lo >= alpha && r.hi > alpha;
        // A figure printed as alpha has alpha inside its rounding interval and is neither.
        (below(self.range) && computed.lo > alpha) || (above(self.range) && computed.hi < alpha)
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::reading::Role;

    fn p(relation: Relation, text: &str) -> Target {
        let value = Printed::parse(text);
        let span = Span::new(0, 0, 1);
        let p = PValue { span, sentence: 0, relation, value, role: Role::Effect, corrected: false, shared: false };
        Target::p(&p, 0.05).unwrap()
    }

    #[test]
    fn equal_less_greater_and_zero() {
        let t = p(Relation::Equal, "0.03");
        assert_eq!(t.fit(Range::new(0.0349, 0.06)), Fit::Full);
        assert_eq!(t.fit(Range::new(0.036, 0.039)), Fit::Cut);
        assert_eq!(t.fit(Range::new(0.021, 0.024)), Fit::LastPlace);
        assert_eq!(t.fit(Range::new(0.046, 0.06)), Fit::Off);
        assert!(t.sharp_against(Range::new(0.028, 0.032)));
        assert!(!t.sharp_against(Range::new(0.03, 0.31)), "a wide range proves little");
        assert!(t.across(Range::new(0.06, 0.07), 0.05));
        assert!(!p(Relation::Equal, "0.05").across(Range::new(0.06, 0.07), 0.05), "alpha is on neither side");
        let t = p(Relation::Equal, "0.000");
        assert_eq!(t.fit(Range::new(1e-9, 1e-8)), Fit::Full);
        assert_eq!(t.fit(Range::new(0.002, 0.003)), Fit::Off);
        let t = p(Relation::Less, "0.001");
        assert_eq!(t.fit(Range::new(1e-9, 1e-8)), Fit::Full);
        assert!(t.sharp_against(Range::new(1e-9, 1e-8)));
        assert!(!t.sharp_against(Range::new(0.0005, 0.002)));
        assert_eq!(t.fit(Range::new(0.0011, 0.002)), Fit::Off);
        assert!(p(Relation::Greater, "0.05").across(Range::new(0.01, 0.02), 0.05));
    }

    #[test]
    fn distances() {
        assert!((p(Relation::Equal, "0.03").distance(Range::new(0.07, 0.08)) - 2.0).abs() < 1e-9);
        let t = Target::figure(Printed::parse("52").unwrap(), Span::new(0, 0, 1));
        assert!((t.distance(Range::point(54.5)) - 2.0).abs() < 1e-9);
        assert_eq!(t.fit(Range::point(52.5)), Fit::Full, "half even and half up are both in use");
    }
}
