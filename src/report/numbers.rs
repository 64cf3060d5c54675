//! Recomputed ranges in figures that can be set beside the printed ones.

use crate::printed::Range;
use crate::recompute::Quantity;

/// A range in words: "0.023 to 0.028", never narrower than it is; one figure where both ends print alike.
pub fn range(of: Quantity, range: Range) -> String {
    if of == Quantity::P && range.hi < 0.0001 {
        return "below 0.0001".to_owned();
    }
    if range.lo.is_finite() && range.hi.is_finite() && range.width() <= range.hi.abs() * 1e-6 {
        let text = end(range.middle(), places(of, Range::point(range.middle())) + 2, f64::round);
        return if text.contains('.') { text.trim_end_matches('0').trim_end_matches('.').to_owned() } else { text };
    }
    let places = places(of, range);
    let (lo, hi) = (end(range.lo, places, f64::floor), end(range.hi, places, f64::ceil));
    if lo == hi { lo } else { format!("{lo} to {hi}") }
}

/// Decimals that show two figures of the range's width, within three significant figures of a p-value
/// and four of anything else.
fn places(of: Quantity, range: Range) -> i32 {
    let finite = |x: f64| if x.is_finite() { x.abs() } else { 0.0 };
    let size = finite(range.lo).max(finite(range.hi));
    let magnitude = |x: f64| if x > 0.0 { x.log10().floor() as i32 } else { 0 };
    let most = if of == Quantity::P { 2 } else { 3 } - magnitude(size);
    let least = 1 - magnitude(size);
    let shown = if range.width().is_finite() { 1 - magnitude(range.width()) } else { most };
    shown.clamp(least, most).clamp(0, 12)
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
        let (p, other) = (Quantity::P, Quantity::Estimate);
        assert_eq!(range(p, Range::new(0.02312, 0.02796)), "0.0231 to 0.0280");
        assert_eq!(range(p, Range::new(0.022, 0.0351)), "0.022 to 0.036");
        assert_eq!(range(p, Range::new(1e-9, 3e-7)), "below 0.0001");
        assert_eq!(range(other, Range::new(-3.24999, -3.15)), "−3.250 to −3.150");
        assert_eq!(range(other, Range::new(0.5, f64::INFINITY)), "0.5000 to ∞");
    }

    #[test]
    fn one_value_is_one_figure() {
        assert_eq!(range(Quantity::Estimate, Range::point(42.0)), "42");
        assert_eq!(range(Quantity::Percent, Range::point(100.0 * 41.0 / 58.0).widened(1e-9)), "70.69");
    }
}
