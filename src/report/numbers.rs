//! Recomputed ranges in figures that can be set beside the printed ones.

use crate::printed::Range;
use crate::recompute::Quantity;

/// A range in words: "0.023 to 0.028", never narrower than it is; one figure where both ends print alike.
pub fn range(of: Quantity, range: Range) -> String {
    if of == Quantity::P && range.hi < 0.0001 {
        return "below 0.0001".to_owned();
    }
    let places = places(range);
    let (lo, hi) = (end(range.lo, places, f64::floor), end(range.hi, places, f64::ceil));
    if lo != hi {
        return format!("{lo} to {hi}");
    }
    if lo.contains('.') { lo.trim_end_matches('0').trim_end_matches('.').to_owned() } else { lo }
}

/// Decimals that show two figures of the range's width, within reason.
fn places(range: Range) -> i32 {
    let finite = |x: f64| if x.is_finite() { x.abs() } else { 0.0 };
    let size = finite(range.lo).max(finite(range.hi));
    let width = range.width();
    let magnitude = |x: f64| if x > 0.0 && x.is_finite() { x.log10().floor() as i32 } else { 0 };
    let of_width = if width.is_finite() && width > size * 1e-12 { 1 - magnitude(width) } else { i32::MAX };
    of_width.clamp(1 - magnitude(size), 4 - magnitude(size)).clamp(0, 12)
}

fn end(value: f64, places: i32, towards: fn(f64) -> f64) -> String {
    if value.is_infinite() {
        return if value > 0.0 { "∞" } else { "−∞" }.to_owned();
    }
    let scale = 10f64.powi(places);
    let scaled = value * scale;
    // A value that is a round figure but for the last bits stays that figure.
    let near = scaled.round();
    let scaled = if (scaled - near).abs() <= near.abs() * 1e-9 + 1e-9 { near } else { towards(scaled) };
    let text = format!("{:.*}", places as usize, scaled.abs() / scale);
    if scaled < 0.0 { format!("−{text}") } else { text }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn shows_what_tells_the_ends_apart() {
        let of = Quantity::Estimate;
        assert_eq!(range(Quantity::P, Range::new(0.02312, 0.02796)), "0.0231 to 0.0280");
        assert_eq!(range(Quantity::P, Range::new(1e-9, 3e-7)), "below 0.0001");
        assert_eq!(range(of, Range::new(-3.24999, -3.15)), "−3.250 to −3.150");
        assert_eq!(range(of, Range::point(42.0)), "42");
        assert_eq!(range(of, Range::new(0.5, f64::INFINITY)), "0.50000 to ∞");
    }
}
