//! What a cell looks like from afar: words, a summary with brackets or ±, a range, one number, something like a p.
//!
//! It tells the columns of labels from those of figures. What the figures are is read later, from tokens.

/// The look of a cell.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Look {
    /// Nothing, or a dash.
    Empty,
    Words,
    /// `12.4 (3.1)`, `5.2 ± 1.1`
    Summary,
    /// `12/40`, `0.03/0.2`
    Fraction,
    /// `8–12`, `(0.4, 1.2)`
    Range,
    /// `12`, `30%`
    Number,
    /// `<0.001`, `NS`: a bound or a sign of significance.
    Bound,
}

/// Words that may stand between figures or name a figure beside it.
const JOINS: &[&str] = &["to", "and", "n", "sd", "se", "sem", "iqr", "ci", "cl", "x", "or"];

/// The look of a text without spaces at its ends.
pub(super) fn look(text: &str) -> Look {
    let text = text.trim_matches(|c: char| c.is_whitespace() || "*†‡§¶#∗".contains(c));
    if !text.bytes().any(|b| b.is_ascii_digit()) {
        let bare: String = text.chars().filter(|c| c.is_alphabetic()).take(4).collect();
        return if bare.eq_ignore_ascii_case("ns") {
            Look::Bound
        } else if bare.is_empty() {
            Look::Empty
        } else {
            Look::Words
        };
    }
    let mut chars = text.chars();
    let Some(first) = chars.next() else { return Look::Empty };
    let bound = "<>≤≥⩽⩾‹›=".contains(first);
    if !(first.is_ascii_digit() || bound || "([{-−–+±.·".contains(first)) {
        return Look::Words;
    }
    if has_words(text) {
        return Look::Words;
    }
    if bound {
        return Look::Bound;
    }
    if text.contains('±') || text.contains("+/-") {
        return Look::Summary;
    }
    let numbers = numbers(text);
    let opens = text.starts_with(['(', '[', '{']);
    match numbers {
        0 | 1 => Look::Number,
        2 if opens && !text.contains('/') => Look::Range,
        _ if !opens && text.contains(['(', '[', '{']) => Look::Summary,
        _ if text.contains('/') => Look::Fraction,
        _ => Look::Range,
    }
}

/// `0.03`, `.03`, `1`, `1.00`: a number from 0 to 1, footnote signs aside.
pub(super) fn may_be_p(text: &str) -> bool {
    let digits = text.trim_end_matches(|c: char| !c.is_ascii_digit()).trim_start_matches('0');
    let rest = digits.strip_prefix(['.', ',', '·']);
    rest.is_some_and(|r| r.starts_with(|c: char| c.is_ascii_digit()))
        || digits.is_empty()
        || digits.strip_prefix('1').is_some_and(|r| r.chars().all(|c| matches!(c, '0' | '.' | '·')))
}

/// `F = 3.2`, `t(38) = 2.1`, `χ2 = 4.1`: a symbol of a test, then an equals sign.
pub(super) fn shows_symbol(text: &str) -> bool {
    let Some((before, _)) = text.split_once('=') else { return false };
    let before = before.trim_start();
    before.chars().count() <= 14 && before.starts_with(['F', 't', 'T', 'Z', 'z', 'χ', 'Χ', 'X', 'U', 'H', 'r'])
}

/// Words of two letters or more that no summary holds.
fn has_words(text: &str) -> bool {
    text.split(|c: char| !c.is_alphabetic()).any(|w| w.chars().count() > 1 && !known(w))
}

fn known(word: &str) -> bool {
    JOINS.iter().any(|j| j.eq_ignore_ascii_case(word))
}

/// Runs of digits, a decimal mark inside not counted.
fn numbers(text: &str) -> usize {
    let bytes = text.as_bytes();
    let (mut count, mut i) = (0, 0);
    while i < bytes.len() {
        if !bytes[i].is_ascii_digit() {
            i += 1;
            continue;
        }
        count += 1;
        while i < bytes.len() && bytes[i].is_ascii_digit() {
            i += 1;
        }
        // The mark of a decimal: one sign of one or two bytes right between digits.
        let mark = match &bytes[i..] {
            [b'.' | b',', d, ..] if d.is_ascii_digit() => 1,
            [0xC2, 0xB7, d, ..] if d.is_ascii_digit() => 2,
            _ => 0,
        };
        if mark > 0 {
            i += mark;
            while i < bytes.len() && bytes[i].is_ascii_digit() {
                i += 1;
            }
        }
    }
    count
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn looks() {
        let cases = [
            ("", Look::Empty),
            ("–", Look::Empty),
            ("Yes", Look::Words),
            ("Week 12", Look::Words),
            ("23S rRNA", Look::Words),
            ("65 and over", Look::Words),
            ("12.4 (3.1)", Look::Summary),
            ("5.2 ± 1.1*", Look::Summary),
            ("12/40 (30%)", Look::Summary),
            ("0·0 (−0.25 to 1.00)0.09 (SD 1.60)", Look::Summary),
            ("12/40", Look::Fraction),
            ("(20/10)", Look::Fraction),
            ("8–12", Look::Range),
            ("(0.4, 1.2)", Look::Range),
            ("0,145", Look::Number),
            ("30%", Look::Number),
            ("0.18A", Look::Number),
            ("(3.39)", Look::Number),
            ("<0.001", Look::Bound),
            ("NS", Look::Bound),
            ("n.s.", Look::Bound),
        ];
        for (text, want) in cases {
            assert_eq!(look(text), want, "{text}");
        }
    }
}
