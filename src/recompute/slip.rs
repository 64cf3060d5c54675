//! Innocent slips, one step away: how a printed figure would look without one.

use super::Slip;
use crate::printed::{Printed, Range};

/// The figure with two neighbouring digits swapped, every way that changes it.
pub(crate) fn swapped(p: Printed) -> impl Iterator<Item = Printed> {
    let places = u32::from(p.places);
    (0..17u32).filter_map(move |i| {
        let unit = 10u64.checked_pow(i)?;
        // Leading zeros after the decimal point count as digits: 0.07 may stand for 0.70.
        if p.digits / unit < 10 && i + 1 >= places.max(1) {
            return None;
        }
        let (low, high) = (p.digits / unit % 10, p.digits / unit / 10 % 10);
        (low != high)
            .then(|| Printed { digits: p.digits - low * unit - high * unit * 10 + high * unit + low * unit * 10, ..p })
    })
}

/// The figure with its decimal point one place to the left or right (a zero lost or gained).
pub(crate) fn moved(p: Printed) -> impl Iterator<Item = Printed> {
    [p.shifted(-1), p.shifted(1)].into_iter()
}

/// A count with two neighbouring digits swapped that satisfies `fits`.
pub(crate) fn digits_swapped_count(count: u64, fits: impl Fn(u64) -> bool) -> Option<u64> {
    swapped(Printed::whole(count)).map(|x| x.digits).find(|&x| fits(x))
}

/// Digits swapped or the decimal point moved in a printed p, so that it agrees with one of the ranges.
pub(crate) fn in_p(p: Option<Printed>, computed: &[Range]) -> Option<Slip> {
    let p = p?;
    let fits = |x: &Printed| x.value() <= 1.0 && computed.iter().any(|r| r.meets(x.rounded()));
    // Only ranges about as narrow as the figure say which digits were meant.
    if computed.iter().any(|r| r.lo <= 0.0 || r.hi / r.lo > 3.0) {
        return None;
    }
    if let Some(x) = swapped(p).find(fits) {
        return Some(Slip { kind: "digits-swapped", says: format!("with two digits swapped it reads {x}") });
    }
    let moved = moved(p).find(fits)?;
    Some(Slip { kind: "decimal-point", says: format!("with its decimal point moved it reads {}", moved.value()) })
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn swaps_neighbouring_digits() {
        let all: Vec<String> = swapped(Printed::parse("0.07").unwrap()).map(|p| p.to_string()).collect();
        assert_eq!(all, ["0.70"]);
        let all: Vec<u64> = swapped(Printed::whole(499)).map(|p| p.digits).collect();
        assert_eq!(all, [949]);
    }
}
