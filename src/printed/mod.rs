//! A number as printed, and the interval of values that it stands for.

mod range;
mod share;

pub use range::Range;
pub use share::{is_share, totals_that_fit};

/// A number exactly as printed: sign, digits and decimal places. `2.20` keeps its last zero.
///
/// The value is `±digits · 10^(exponent − places)`; `exponent` is not 0 only for `1.2 × 10⁻⁵` and the like.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub struct Printed {
    pub negative: bool,
    /// All digits as one integer, at most 18 of them.
    pub digits: u64,
    /// Digits after the decimal mark.
    pub places: u8,
    /// The power of ten printed beside it, else 0.
    pub exponent: i16,
}

impl Printed {
    /// A whole number, exact.
    pub fn whole(value: u64) -> Printed {
        Printed { negative: false, digits: value, places: 0, exponent: 0 }
    }

    /// Reads plain ASCII digits with at most one `.`: `12`, `.05`, `2.20`. More than 18 digits give `None`.
    pub fn parse(text: &str) -> Option<Printed> {
        let (mut digits, mut places, mut point, mut count) = (0u64, 0u8, false, 0);
        let (negative, body) = match text.strip_prefix('-') {
            Some(rest) => (true, rest),
            None => (false, text),
        };
        for b in body.bytes() {
            match b {
                b'0'..=b'9' => {
                    count += 1;
                    if count > 18 {
                        return None;
                    }
                    digits = digits * 10 + u64::from(b - b'0');
                    places += u8::from(point);
                }
                b'.' if !point => point = true,
                _ => return None,
            }
        }
        (count > 0).then_some(Printed { negative, digits, places, exponent: 0 })
    }

    pub fn negated(self) -> Printed {
        Printed { negative: !self.negative, ..self }
    }

    /// The nearest double of the printed decimal.
    pub fn value(self) -> f64 {
        let scale = i32::from(self.exponent) - i32::from(self.places);
        let size = match scale {
            0 => self.digits as f64,
            // Powers up to 10^22 are exact doubles, so one division rounds once.
            -22..=-1 => self.digits as f64 / 10f64.powi(-scale),
            1..=22 => self.digits as f64 * 10f64.powi(scale),
            _ => format!("{}e{}", self.digits, scale).parse().unwrap_or(f64::NAN),
        };
        if self.negative { -size } else { size }
    }

    /// One unit of the last printed place.
    pub fn unit(self) -> f64 {
        Printed { negative: false, digits: 1, ..self }.value()
    }

    /// What the figure stands for when it was rounded: half a unit to either side, ends included
    /// (half up and half even are both in use).
    pub fn rounded(self) -> Range {
        let (value, half) = (self.value(), self.unit() / 2.0);
        Range::new(value - half, value + half)
    }

    /// What it stands for when digits were cut off instead: up to a unit further from zero.
    pub fn cut(self) -> Range {
        let (value, unit) = (self.value(), self.unit());
        if self.negative { Range::new(value - unit, value) } else { Range::new(value, value + unit) }
    }

    /// What it stands for when it is not known which.
    pub fn rounded_or_cut(self) -> Range {
        self.rounded().hull(self.cut())
    }

    /// The value itself: for counts.
    pub fn exact(self) -> Range {
        Range::point(self.value())
    }

    /// The number when it is a whole, non-negative one printed without decimals.
    pub fn count(self) -> Option<u64> {
        (self.places == 0 && !self.negative && self.exponent == 0).then_some(self.digits)
    }

    /// How many digits it has, zeros in front not counted.
    pub fn significant_digits(self) -> u32 {
        self.digits.checked_ilog10().map_or(0, |d| d + 1)
    }

    /// Multiplied by a power of ten, digits kept: 3.6 % is the proportion 0.036.
    pub fn shifted(self, power: i16) -> Printed {
        Printed { exponent: self.exponent + power, ..self }
    }
}

impl std::fmt::Display for Printed {
    fn fmt(&self, f: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        if self.negative {
            f.write_str("−")?;
        }
        let text = self.digits.to_string();
        let places = usize::from(self.places);
        let text = format!("{text:0>width$}", width = places + 1);
        let (whole, decimals) = text.split_at(text.len() - places);
        f.write_str(whole)?;
        if places > 0 {
            write!(f, ".{decimals}")?;
        }
        if self.exponent != 0 {
            write!(f, " × 10^{}", self.exponent)?;
        }
        Ok(())
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn keeps_digits_as_printed() {
        let p = Printed::parse("2.20").unwrap();
        assert_eq!(p.to_string(), "2.20");
        assert_eq!(p.value(), 2.2);
        let r = p.rounded();
        assert!((r.lo - 2.195).abs() < 1e-12 && (r.hi - 2.205).abs() < 1e-12);
        assert_eq!(Printed::parse(".05").unwrap().to_string(), "0.05");
        assert_eq!(Printed::parse("1.2.3"), None);
        assert_eq!(Printed::parse("."), None);
    }

    #[test]
    fn a_cut_figure_reaches_away_from_zero() {
        let r = Printed::parse("-1.2").unwrap().cut();
        assert!((r.lo + 1.3).abs() < 1e-12 && (r.hi + 1.2).abs() < 1e-12);
    }

    #[test]
    fn shifting_moves_the_interval_too() {
        let r = Printed::parse("3.6").unwrap().shifted(-2).rounded();
        assert!((r.lo - 0.0355).abs() < 1e-15 && (r.hi - 0.0365).abs() < 1e-15);
    }
}
