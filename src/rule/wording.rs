//! Words and figures as queries print them.

use crate::printed::Range;
use crate::query::Explanation;
use crate::reading::Assumption;
use crate::recompute::{Quantity, Slip};

/// What `asks` may hold in braces.
///
/// `quote` is the phrase in question; `printed` and `computed` the two figures; `method` the method of
/// the recomputation; `p` the p-value beside a claim; `alpha` the significance level; `section` the
/// section's title; `count` how many times it occurs.
pub const PLACEHOLDERS: [&str; 8] = ["quote", "printed", "computed", "method", "p", "alpha", "section", "count"];

/// The first `{name}` that is none of [`PLACEHOLDERS`].
pub fn unknown_placeholder(text: &str) -> Option<&str> {
    let mut names = text.split('{').skip(1).filter_map(|rest| rest.split_once('}').map(|(name, _)| name));
    names.find(|name| !PLACEHOLDERS.contains(name))
}

/// Puts words for the placeholders; one without words becomes "the figure".
pub fn fill(text: &str, words: &[(&'static str, String)]) -> String {
    PLACEHOLDERS.iter().fold(text.to_owned(), |text, name| {
        let key = format!("{{{name}}}");
        if !text.contains(&key) {
            return text;
        }
        let word = words.iter().find(|(n, _)| n == name).map_or("the figure", |(_, w)| w.as_str());
        text.replace(&key, word)
    })
}

/// Raised text in characters that are raised by themselves, or behind `^` where there are none.
pub fn raised(text: &str) -> String {
    const PLAIN: &str = "0123456789+-−n";
    const RAISED: [char; 14] = ['⁰', '¹', '²', '³', '⁴', '⁵', '⁶', '⁷', '⁸', '⁹', '⁺', '⁻', '⁻', 'ⁿ'];
    let one = |c: char| PLAIN.chars().position(|p| p == c).map(|k| RAISED[k]);
    let text = text.trim();
    match text.chars().map(one).collect::<Option<String>>() {
        Some(raised) => raised,
        None => format!("^{text}"),
    }
}

/// Canonical text on one line, shortened in the middle of a long one.
pub fn one_line(text: &str) -> String {
    const LONGEST: usize = 160;
    let text = text.split_whitespace().collect::<Vec<_>>().join(" ");
    if text.chars().count() <= LONGEST {
        return text;
    }
    let head: String = text.chars().take(LONGEST - 1).collect();
    format!("{}…", head.trim_end())
}

/// As much of a label as can matter. Text made to hurt has endless ones, which every figure beside them would read again.
pub fn beginning(label: &str) -> &str {
    const LONGEST: usize = 300;
    &label[..label.floor_char_boundary(LONGEST)]
}

/// A p-value for people: two decimals from 0.1 on, else two digits that count, four decimals at most.
fn p_figure(p: f64) -> String {
    if p >= 0.0995 {
        return format!("{p:.2}");
    }
    // Two digits that count; log10 gives the place of the first.
    let places = (1.0 - p.log10().floor()).clamp(2.0, 4.0) as usize;
    format!("{p:.places$}")
}

/// A range of p-values: `P = 0.13`, `P = 0.12 to 0.14`, `P < 0.0001`.
pub fn p_range(range: Range) -> String {
    let range = range.clamped(0.0, 1.0);
    if range.hi < 0.0001 {
        return "P < 0.0001".to_owned();
    }
    let high = p_figure(range.hi);
    if range.lo < 0.00005 {
        return format!("P below {high}");
    }
    match p_figure(range.lo) {
        low if low == high => format!("P = {low}"),
        low => format!("P = {low} to {high}"),
    }
}

/// A range of another figure, with as many decimal places as the printed one.
pub fn figure_range(range: Range, places: usize) -> String {
    let number = |x: f64| format!("{x:.places$}").replace('-', "−");
    if range.lo.is_infinite() && range.hi.is_infinite() {
        return "no bounded value".to_owned();
    } else if range.hi.is_infinite() {
        return format!("{} or more", number(range.lo));
    } else if range.lo.is_infinite() {
        return format!("{} or less", number(range.hi));
    }
    let (low, high) = (number(range.lo), number(range.hi));
    if low == high { low } else { format!("{low} to {high}") }
}

/// How a journal would print this p, where the whole range prints alike: `= 0.13`, `= 0.004`, `< 0.001`.
pub fn journal_p(range: Range) -> Option<String> {
    let printed = |p: f64| match p {
        p if p < 0.001 => "< 0.001".to_owned(),
        // A third place where two would hide the side of 0.05.
        p if p < 0.0095 || (0.045..0.055).contains(&p) => format!("= {p:.3}"),
        p => format!("= {p:.2}"),
    };
    let low = printed(range.lo);
    (low == printed(range.hi) && range.hi < 0.995).then_some(low)
}

/// The one number of a quote that carries a percent sign: bytes, and its decimal places.
pub fn percent_number(quote: &str) -> Option<(std::ops::Range<usize>, usize)> {
    let mut signs = quote.match_indices('%');
    let (at, _) = signs.next().filter(|_| signs.next().is_none())?;
    last_number(&quote[..at])
}

/// The last number of a quote: bytes, and its decimal places.
pub fn last_number(quote: &str) -> Option<(std::ops::Range<usize>, usize)> {
    let bytes = quote.as_bytes();
    let end = bytes.iter().rposition(u8::is_ascii_digit)? + 1;
    let mark = |i: usize| matches!(quote[i..].chars().next(), Some('.' | ',' | '·'));
    let mut start = end;
    while let Some((i, c)) = quote[..start].char_indices().next_back() {
        // A mark before the first digit belongs to it (`.03`); one after a space does not.
        if !c.is_ascii_digit() && !mark(i) {
            break;
        }
        start = i;
    }
    let places = quote[start..end]
        .rfind(['.', ',', '·'])
        .map_or(0, |i| quote[start + i..end].bytes().filter(u8::is_ascii_digit).count());
    Some((start..end, places))
}

/// The name of a recomputed quantity within a sentence.
pub fn quantity(of: Quantity) -> &'static str {
    match of {
        Quantity::P => "P",
        Quantity::Interval => "the interval",
        Quantity::Estimate => "the estimate",
        Quantity::Percent => "the percentage",
        Quantity::Statistic => "the statistic",
        Quantity::Df => "the degrees of freedom",
        Quantity::Events => "the count",
        Quantity::Total => "the total",
    }
}

/// What a recomputation took for granted.
pub fn assumption(assumption: Assumption) -> Explanation {
    let (kind, says) = match assumption {
        Assumption::TwoSided => ("two-sided", "The test is taken as two-sided, since nothing else is stated."),
        Assumption::Level95 => ("level-95", "The interval is taken as a 95 % interval, since no level is printed."),
        Assumption::Alpha05 => ("alpha-05", "The significance level is taken as 0.05, since none is stated."),
        Assumption::SpreadUnnamed => {
            ("spread-unnamed", "The spread is not named; it was tried as a standard deviation and as a standard error.")
        }
        Assumption::Unadjusted => (
            "unadjusted",
            "The groups are taken as independent and the comparison as unadjusted; an adjusted, paired or clustered \
             analysis can rightly differ.",
        ),
        Assumption::PlausibleDf => {
            ("plausible-df", "The degrees of freedom are not printed; those that the sizes allow were tried.")
        }
        Assumption::UsualScale => {
            ("usual-scale", "The limits are taken as computed on the scale usual for this measure (ratios by logs).")
        }
    };
    Explanation { kind: kind.to_owned(), says: says.to_owned() }
}

/// An innocent slip that restores the printed figure.
pub fn slip(slip: &Slip) -> Explanation {
    Explanation { kind: slip.kind.to_owned(), says: sentence(&slip.says) }
}

fn sentence(clause: &str) -> String {
    let mut chars = clause.chars();
    let first: String = chars.next().into_iter().flat_map(char::to_uppercase).collect();
    let end = if clause.ends_with('.') { "" } else { "." };
    format!("{first}{}{end}", chars.as_str())
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn p_values_read_as_in_a_journal() {
        assert_eq!(p_range(Range::new(0.128, 0.133)), "P = 0.13");
        assert_eq!(p_range(Range::new(0.0231, 0.0284)), "P = 0.023 to 0.028");
        assert_eq!(p_range(Range::new(0.0, 0.00004)), "P < 0.0001");
        assert_eq!(p_range(Range::new(0.00021, 0.00046)), "P = 0.0002 to 0.0005");
        assert_eq!(p_range(Range::new(0.0, 0.0021)), "P below 0.0021");
        assert_eq!(journal_p(Range::new(0.128, 0.133)).as_deref(), Some("= 0.13"));
        assert_eq!(journal_p(Range::new(0.0478, 0.0482)).as_deref(), Some("= 0.048"));
        assert_eq!(journal_p(Range::new(0.12, 0.14)), None);
    }

    #[test]
    fn the_last_number_keeps_its_places() {
        assert_eq!(last_number("P = 0.030"), Some((4..9, 3)));
        assert_eq!(last_number("45/101 (44·6%)"), Some((8..13, 1)));
        assert_eq!(last_number("p=.03"), Some((2..5, 2)));
        assert_eq!(last_number("ns"), None);
        assert_eq!(percent_number("60% of them (100/163)"), Some((0..2, 0)));
        assert_eq!(percent_number("60%, 61%"), None);
    }

    #[test]
    fn placeholders_come_from_a_closed_set() {
        assert_eq!(unknown_placeholder("Is {quote} {right}?"), Some("right"));
        assert_eq!(unknown_placeholder("Is {quote} right?"), None);
        assert_eq!(fill("Is {p} {quote}?", &[("quote", "so".into())]), "Is the figure so?");
    }
}
