//! Counts and the percentages that they are of a total.

use super::Range;

/// Widens a range of percentages so that decimal fractions on its ends are not missed.
const HAIR: f64 = 1e-12;

/// Whether a count is a percentage in `percent` of a total.
pub fn is_share(count: u64, total: u64, percent: Range) -> bool {
    total > 0 && percent.widened(HAIR).contains(100.0 * count as f64 / total as f64)
}

/// The totals, least and most, of which a count above zero is a percentage in `percent`; none is below the count. The
/// most is `u64::MAX` where the percentage may be zero.
pub fn totals_that_fit(count: u64, percent: Range) -> Option<(u64, u64)> {
    if count == 0 || percent.hi <= 0.0 {
        return None;
    }
    let (percent, count) = (percent.widened(HAIR), count as f64);
    let least = (100.0 * count / percent.hi).ceil().max(count) as u64;
    let most = if percent.lo > 0.0 { (100.0 * count / percent.lo).floor() as u64 } else { u64::MAX };
    (least <= most).then_some((least, most))
}

#[cfg(test)]
mod tests {
    use super::super::Printed;
    use super::*;

    fn totals(count: u64, percent: &str) -> Option<(u64, u64)> {
        totals_that_fit(count, Printed::parse(percent).unwrap().rounded())
    }

    /// By walking all totals: 17/57 = 29.82 %, 1/8 = 12.5 % on the edge of its rounding.
    #[test]
    fn the_totals_are_those_that_a_walk_finds() {
        for (count, percent) in [(17, "29.8"), (1, "12"), (1, "13"), (3, "0.3"), (60, "100.0"), (999, "33.3")] {
            let range = Printed::parse(percent).unwrap().rounded();
            let mut walk = (count..=4000).filter(|&n| is_share(count, n, range));
            let ends = walk.next().map(|first| (first, walk.next_back().unwrap_or(first)));
            assert_eq!(totals(count, percent), ends, "{count} ({percent} %)");
        }
    }

    #[test]
    fn percentages_that_no_total_gives() {
        assert_eq!(totals(1, "97"), None, "1/1 is 100 %, 1/2 is 50 %");
        assert_eq!(totals(3, "120"), None, "a share is no more than all");
        assert_eq!(totals(0, "12"), None);
        assert_eq!(totals(4, "0"), Some((800, u64::MAX)));
    }
}
