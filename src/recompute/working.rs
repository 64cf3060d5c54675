//! Numbers and ranges for the working line: "n = 24 and 25; Welch; t = 2.31, df 45.8; P 0.023–0.028".

use crate::printed::Range;

/// `v` with `digits` significant digits, without trailing exponent down to 1e-4, a real minus sign.
pub(crate) fn number(v: f64, digits: usize) -> String {
    if !v.is_finite() {
        return if v > 0.0 { "∞".into() } else { "−∞".into() };
    }
    if v == 0.0 {
        return "0".into();
    }
    let size = v.abs().log10().floor() as i32;
    let text = if size < -5 {
        let text = format!("{:.*e}", digits - 1, v);
        let (mantissa, power) = text.split_once('e').unwrap_or((&text, "0"));
        format!("{mantissa} × 10^{power}").replace("^-", "^−")
    } else {
        format!("{:.*}", (digits as i32 - 1 - size).clamp(0, 9) as usize, v)
    };
    match text.strip_prefix('-') {
        Some(rest) => format!("−{rest}"),
        None => text,
    }
}

/// A range as `0.023–0.028`, as one number where both ends print alike; "to" where a minus sign is involved.
pub(crate) fn range(r: Range, digits: usize) -> String {
    let (lo, hi) = (number(r.lo, digits), number(r.hi, digits));
    if lo == hi {
        lo
    } else if r.lo < 0.0 {
        format!("{lo} to {hi}")
    } else {
        format!("{lo}–{hi}")
    }
}

/// A p-value range with two significant digits, three above 0.1; very small ones as a bound.
pub(crate) fn p(r: Range) -> String {
    if r.hi < 1e-6 {
        return "P < 0.000001".into();
    }
    let low = if r.lo < 1e-6 { "<0.000001".into() } else { number(r.lo, 2 + usize::from(r.lo >= 0.1)) };
    let high = number(r.hi, 2 + usize::from(r.hi >= 0.1));
    if low == high { format!("P {low}") } else { format!("P {low}–{high}") }
}

/// "24 and 25", "24, 25 and 30".
pub(crate) fn list(items: &[String]) -> String {
    match items {
        [] => String::new(),
        [one] => one.clone(),
        [start @ .., last] => format!("{} and {last}", start.join(", ")),
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn prints_as_a_person_would() {
        assert_eq!(number(-2.3051, 3), "−2.31");
        assert_eq!(number(1.2e-7, 2), "1.2 × 10^−7");
        assert_eq!(range(Range::new(0.0231, 0.0279), 2), "0.023–0.028");
        assert_eq!(p(Range::new(0.0, 1e-9)), "P < 0.000001");
        assert_eq!(list(&["24".into(), "25".into()]), "24 and 25");
    }
}
