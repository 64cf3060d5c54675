//! Closed intervals of reals, with the little arithmetic that recomputation needs.

/// All values from `lo` to `hi`, both included. `lo <= hi`; either may be infinite, none is NaN.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Range {
    pub lo: f64,
    pub hi: f64,
}

impl Range {
    /// Orders the two ends.
    pub fn new(a: f64, b: f64) -> Range {
        debug_assert!(!a.is_nan() && !b.is_nan());
        if a <= b { Range { lo: a, hi: b } } else { Range { lo: b, hi: a } }
    }

    pub fn point(value: f64) -> Range {
        Range::new(value, value)
    }

    pub fn contains(self, value: f64) -> bool {
        self.lo <= value && value <= self.hi
    }

    pub fn meets(self, other: Range) -> bool {
        self.lo <= other.hi && other.lo <= self.hi
    }

    /// The smallest range that holds both.
    pub fn hull(self, other: Range) -> Range {
        Range { lo: self.lo.min(other.lo), hi: self.hi.max(other.hi) }
    }

    pub fn width(self) -> f64 {
        self.hi - self.lo
    }

    pub fn middle(self) -> f64 {
        self.lo + (self.hi - self.lo) / 2.0
    }

    /// Widened by a relative error at both ends, so that numerical error cannot make two ranges miss.
    pub fn widened(self, relative: f64) -> Range {
        Range { lo: self.lo - self.lo.abs() * relative, hi: self.hi + self.hi.abs() * relative }
    }

    pub fn clamped(self, lo: f64, hi: f64) -> Range {
        Range { lo: self.lo.clamp(lo, hi), hi: self.hi.clamp(lo, hi) }
    }

    /// The values' distances from zero.
    pub fn abs(self) -> Range {
        if self.lo >= 0.0 {
            self
        } else if self.hi <= 0.0 {
            Range { lo: -self.hi, hi: -self.lo }
        } else {
            Range { lo: 0.0, hi: self.hi.max(-self.lo) }
        }
    }

    /// The image under a function that never decreases.
    pub fn increasing(self, f: impl Fn(f64) -> f64) -> Range {
        Range::new(f(self.lo), f(self.hi))
    }
}

impl std::ops::Add for Range {
    type Output = Range;
    fn add(self, o: Range) -> Range {
        Range::new(self.lo + o.lo, self.hi + o.hi)
    }
}

impl std::ops::Sub for Range {
    type Output = Range;
    fn sub(self, o: Range) -> Range {
        Range::new(self.lo - o.hi, self.hi - o.lo)
    }
}

impl std::ops::Neg for Range {
    type Output = Range;
    fn neg(self) -> Range {
        Range::new(-self.hi, -self.lo)
    }
}

impl std::ops::Mul<f64> for Range {
    type Output = Range;
    fn mul(self, k: f64) -> Range {
        Range::new(self.lo * k, self.hi * k)
    }
}
