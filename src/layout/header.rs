//! What a header cell says: a group with its size, P, an estimate.

use super::{ColumnRole, Part, Size};
use crate::manuscript::{Block, Cell, MarkKind};
use crate::text::Span;

/// Lower case, without raised marks and footnote signs, one space between words.
pub(super) fn folded(block: &Block, start: u32, end: u32) -> String {
    let mut out = String::new();
    let mut at = start;
    let mut push = |piece: &str| {
        for c in piece.chars() {
            match c {
                '*' | '†' | '‡' | '§' | '¶' | '#' | '$' => {}
                c if c.is_whitespace() => {
                    if !out.is_empty() && !out.ends_with(' ') {
                        out.push(' ');
                    }
                }
                c => out.extend(c.to_lowercase()),
            }
        }
    };
    for mark in block.marks_over(start, end).filter(|m| m.kind == MarkKind::Superscript) {
        if mark.start > at {
            push(block.text.get(at as usize..mark.start as usize).unwrap_or(""));
        }
        at = at.max(mark.end);
    }
    if at < end {
        push(block.text.get(at as usize..end as usize).unwrap_or(""));
    }
    out.truncate(out.trim_end().len());
    out
}

/// The words of a folded header.
pub(super) fn words(folded: &str) -> impl Iterator<Item = &str> {
    folded.split(|c: char| !c.is_alphanumeric()).filter(|w| !w.is_empty())
}

/// The role that a header cell gives its column; [`ColumnRole::Other`] where it says nothing of it.
pub(super) fn role(block: &Block, number: usize, cell: &Cell) -> ColumnRole {
    let head = folded(block, cell.start, cell.end);
    let text = block.text_of(cell);
    match size(text) {
        Some((value, at, name)) => {
            let start = cell.start as usize + at.start;
            let n = Some(Size { value, span: Span::new(number, start, cell.start as usize + at.end) });
            let label = label(text, name);
            if is_overall(&label) { ColumnRole::Overall { label, n } } else { ColumnRole::Group { label, n } }
        }
        None if is_marked_p(block, cell) => ColumnRole::P,
        None => role_of_words(&head),
    }
}

/// `P~T~`, `*P*~time~`: a P with what it tests set low behind it. `P~CO2~` is no such thing; the column's figures show it.
fn is_marked_p(block: &Block, cell: &Cell) -> bool {
    let text = block.text_of(cell);
    let start = cell.start + (text.len() - text.trim_start().len()) as u32;
    let end = cell.start + text.trim_end().len() as u32;
    let low = || block.marks_over(start, end).filter(|m| m.kind == MarkKind::Subscript).collect::<Vec<_>>();
    text.trim_start().starts_with(['P', 'p'])
        && matches!(low()[..], [mark, ..] if mark.start == start + 1)
        && low().last().is_some_and(|m| m.end == end)
}

fn role_of_words(head: &str) -> ColumnRole {
    if is_p(head) {
        return ColumnRole::P;
    }
    if is_statistic(head) {
        return ColumnRole::Statistic;
    }
    if let Some(part) = part(head) {
        return part;
    }
    // `95% CI Lower`: a head in one line that stood in two.
    let has = |w: &str| words(head).any(|x| x == w);
    // "95% CI of difference (mmHg) Lower": what stands over both limits is joined to the first.
    let ends = |w: &str| words(head).last() == Some(w);
    let short = words(head).count() <= 5 || ends("lower") || ends("upper");
    if says_interval(head) && has("lower") != has("upper") && short {
        return if has("lower") { ColumnRole::Lower } else { ColumnRole::Upper };
    }
    if is_estimate(head) {
        return ColumnRole::Estimate;
    }
    if is_interval(head) { ColumnRole::Interval } else { ColumnRole::Other }
}

/// `P`, `P value`, `p-value (t test)`, `P for interaction`, `Sig.`, `Between-group P value`
pub(super) fn is_p(head: &str) -> bool {
    // `P (n = 24)` would be a group called P; `Wilcoxon test, P =` asks for the figure.
    let head = head.strip_suffix('=').map_or(head, str::trim_end);
    if head.contains('=') || words(head).count() > 14 {
        return false;
    }
    if matches!(words(head).next(), Some("sig" | "significance" | "probability")) {
        return words(head).skip(1).all(|w| matches!(w, "2" | "1" | "two" | "one" | "tailed" | "sided" | "level"));
    }
    let mut before = 0;
    let mut all = words(head).peekable();
    while let Some(word) = all.next() {
        let next = all.peek().copied();
        let value = matches!(next, Some("value" | "values" | "val"));
        // In front, before "value" or at the end; "vitamin P" and "P (mmol/l)" are other things.
        let stands = before == 0 && !head.contains('/') || next.is_none() && before > 0 && !head.contains("vitamin");
        if matches!(word, "pvalue" | "pvalues") || word == "p" && (value || stands) {
            return true;
        }
        before += 1;
    }
    false
}

/// A P that compares the groups of the row, and says nothing else of itself than by what test.
pub(super) fn is_plain_p(head: &str, groups: usize) -> bool {
    const OTHER: &[&str] = &[
        "trend",
        "interaction",
        "vs",
        "versus",
        "v",
        "within",
        "baseline",
        "time",
        "change",
        "heterogeneity",
        "paired",
        "pre",
        "post",
        "before",
        "after",
        "and",
        "noninferiority",
        "inferiority",
        "adjusted",
        "corrected",
    ];
    // Of two groups there is only one comparison, named or not.
    !words(head).any(|w| OTHER.contains(&w) && !(groups == 2 && matches!(w, "vs" | "versus" | "v" | "and")))
}

/// A test statistic: `t`, `F(1, 146)`, `χ²`, `t value`, `Z`.
pub(super) fn is_statistic(head: &str) -> bool {
    let plain: String = head.chars().filter(|c| !c.is_whitespace()).collect();
    // `pretest f(1,146)`: a symbol with its degrees of freedom at the end.
    if let Some(open) = plain.rfind('(').filter(|_| plain.ends_with(')')) {
        let inner = &plain[open + 1..plain.len() - 1];
        let df = inner == "df" || !inner.is_empty() && inner.chars().all(|c| c.is_ascii_digit() || ",.;".contains(c));
        let before = head.trim_end().rsplit_once('(').map_or("", |b| b.0.trim_end());
        let last = before.rsplit(' ').next().unwrap_or("");
        if df && matches!(last, "f" | "t" | "χ" | "x" | "χ2" | "χ²" | "x2" | "x²" | "chi2") {
            return true;
        }
    }
    let mut symbol = plain.as_str();
    for end in ["value", "values", "test", "statistic", "statistics", "score", "-", "ratio"] {
        symbol = symbol.strip_suffix(end).unwrap_or(symbol);
    }
    for start in ["pseudo-", "pseudo", "pearson’s", "pearson's", "pearson", "spearman’s", "spearman's", "spearman"]
    {
        symbol = symbol.strip_prefix(start).unwrap_or(symbol);
    }
    // `t/χ²`: the one for means, the other for counts.
    let either = symbol.split_once('/').is_some_and(|(a, b)| {
        let of = |s: &str| matches!(s, "t" | "z" | "f" | "χ" | "x" | "χ2" | "χ²" | "x2" | "x²");
        of(a) && of(b) && a != b
    });
    either
        || symbol != plain && matches!(symbol, "r" | "rho" | "ρ" | "rs")
        || matches!(
            symbol,
            // The 2 of χ² is raised, and raised marks are left out.
            "χ" | "x"
                | "t"
                | "f"
                | "z"
                | "u"
                | "h"
                | "χ2"
                | "χ²"
                | "x2"
                | "x²"
                | "chi2"
                | "chi-square"
                | "chisquare"
                | "chi-squared"
                | "chisquared"
                | "mann-whitneyu"
        )
}

/// `Pre-test z`, `Group effect F`: the symbol ends a head that was set in several lines.
pub(super) fn ends_in_symbol(head: &str) -> bool {
    let Some((before, last)) = head.trim_end().rsplit_once(' ') else { return false };
    let letter = matches!(last, "t" | "f" | "z" | "χ2" | "χ²" | "χ" | "r" | "rho" | "ρ");
    letter && words(before).count() <= 8 && !before.contains(['=', '%'])
}

/// `SE of mean (mmHg)`, `Standard error of the mean`
fn is_se_of_mean(head: &str) -> bool {
    let rest = ["se ", "s.e. ", "standard error "].iter().find_map(|w| head.strip_prefix(w));
    rest.is_some_and(|r| r.starts_with("of mean") || r.starts_with("of the mean") || r.starts_with("mean"))
}

/// A column that goes on what the one before it begins, or bounds an interval.
fn part(head: &str) -> Option<ColumnRole> {
    let plain = head.trim_matches(|c: char| !c.is_alphanumeric() && c != '%' && c != '±');
    Some(match plain {
        _ if plain.starts_with("s.d") && plain.contains("c.v") || plain.starts_with("sd") && plain.contains("cv") => {
            ColumnRole::Part(Part::Sd)
        }
        "sd" | "s.d" | "±sd" | "± sd" | "standard deviation" | "std" | "std. deviation" | "std. dev" => {
            ColumnRole::Part(Part::Sd)
        }
        "se" | "s.e" | "sem" | "±se" | "±sem" | "± sem" | "standard error" | "std. error" => {
            ColumnRole::Part(Part::Se)
        }
        _ if is_se_of_mean(plain) => ColumnRole::Part(Part::Se),
        "%" | "percent" | "percentage" | "per cent" | "percent (%" | "percentage (%" | "percentages"
        | "percentages (%" | "per cent (%" | "proportion (%" | "frequency (%" | "% of total" | "% of patients"
        | "rate (%" => ColumnRole::Part(Part::Percent),
        "iqr" | "interquartile range" => ColumnRole::Part(Part::Iqr),
        "range" | "min-max" | "min–max" => ColumnRole::Part(Part::Range),
        "df" | "d.f" | "degrees of freedom" => ColumnRole::Df,
        "lower" | "lower limit" | "lower bound" | "lower 95% ci" | "lower ci" | "lower 95%" | "lcl" => {
            ColumnRole::Lower
        }
        "upper" | "upper limit" | "upper bound" | "upper 95% ci" | "upper ci" | "upper 95%" | "ucl" => {
            ColumnRole::Upper
        }
        _ => return None,
    })
}

/// Whether a cell of a second header row says what stands in its column.
pub(super) fn heads_column(head: &str) -> bool {
    role_of_words(head) != ColumnRole::Other
        || matches!(head, "mean" | "median" | "n" | "n (%)" | "no. (%)" | "no." | "mean (sd)" | "mean ± sd" | "m")
}

/// Words of the head of an interval.
pub(super) fn says_interval(head: &str) -> bool {
    let has = |w: &str| words(head).any(|x| x == w);
    let named = ["interval", "intervals", "limits"].iter().any(|w| has(w));
    has("ci") || head.contains("c.i") || head.contains("% ci") || has("confidence") && named
}

/// An interval alone: `95% CI`.
fn is_interval(head: &str) -> bool {
    const WORDS: &[&str] = &[
        "ci",
        "c",
        "i",
        "confidence",
        "interval",
        "intervals",
        "limits",
        "percent",
        "of",
        "for",
        "the",
        "wald",
        "bootstrap",
        "adjusted",
        "unadjusted",
        "crude",
        "and",
    ];
    says_interval(head) && words(head).all(|w| w.bytes().all(|b| b.is_ascii_digit()) || WORDS.contains(&w))
}

/// Names of measures that compare groups.
const MEASURES: &[&str] = &[
    "difference",
    "differences",
    "or",
    "ors",
    "rr",
    "hr",
    "ratio",
    "md",
    "aor",
    "aors",
    "ahr",
    "arr",
    "rd",
    "irr",
    "smd",
    "nnt",
    "rrr",
    "coefficient",
    "coefficients",
    "β",
    "beta",
];

/// A difference or ratio between groups.
fn is_estimate(head: &str) -> bool {
    let has = |w: &str| words(head).any(|x| x == w);
    // `H.R.` lost its points in no list of words.
    let compact: String = head.chars().filter(|c| !matches!(c, '.' | ' ')).collect();
    let measure = MEASURES.iter().any(|w| has(w))
        || head.contains('.') && MEASURES.contains(&compact.as_str())
        || ["relative risk", "effect size", "treatment effect", "risk reduction"].iter().any(|p| head.contains(p));
    let group = head.contains("n =") || head.contains("n=");
    // `or` alone is a conjunction.
    let only_or = has("or") && !MEASURES.iter().any(|w| *w != "or" && has(w));
    let alone = words(head).count() <= 6 && measure && (!only_or || words(head).count() == 1);
    let bare = matches!(
        head.trim_matches(|c: char| !c.is_alphanumeric()),
        "estimate" | "estimated effect" | "b" | "d" | "cohen's d" | "cohen’s d" | "effect" | "es" | "slope"
    );
    !group && (says_interval(head) && (measure || has("effect") || has("estimate")) || alone || bare)
}

/// `n = 24`: the value, where its digits stand, and where the name of the group ends (before `(n`).
/// `None` where the text gives no size or more than one.
fn size(text: &str) -> Option<(u64, std::ops::Range<usize>, std::ops::Range<usize>)> {
    let mut found = None;
    for (at, sign) in text.match_indices(['=', '＝']) {
        let before = text[..at].trim_end();
        let Some(name) = before.strip_suffix(['n', 'N']) else { continue };
        // `mean = 24`: a letter before the n makes it a word, unless a name is glued to it (`groupn = 24`).
        let glued = name.ends_with(|c: char| c.is_alphabetic()) && !glues(&name.to_lowercase());
        let rest = &text[at + sign.len()..];
        let start = at + sign.len() + (rest.len() - rest.trim_start().len());
        let digits = digits(&text[start..]);
        let after = &text[start + digits..];
        // `n = 24/25`, `n = 24–26` and `n = 24%` are no sizes.
        let mut behind = after.chars();
        let joins = behind.next().is_some_and(|c| matches!(c, '.' | '/' | '%' | '-' | '–' | '−' | '·' | '±'));
        let odd = joins && behind.next().is_some_and(|c| c.is_ascii_digit()) || after.trim_start().starts_with('%');
        if digits == 0 || glued {
            continue;
        }
        let value = text[start..start + digits].chars().filter(char::is_ascii_digit).collect::<String>().parse().ok();
        let (Some(value), None, false) = (value, &found, odd) else { return None };
        found = Some((value, start..start + digits, name.len()..start + digits));
    }
    found.filter(|&(value, ..): &(u64, _, _)| value > 0)
}

/// A name that an `n` was glued to: `groupn = 24` lost its line break.
fn glues(name: &str) -> bool {
    const NAMES: &[&str] =
        &["group", "arm", "placebo", "control", "controls", "intervention", "treatment", "total", "all"];
    NAMES.iter().any(|n| name.ends_with(n))
}

/// Bytes of a whole number at the start, thousands set apart by a comma or a narrow space.
fn digits(text: &str) -> usize {
    let run = |t: &str| t.bytes().take_while(u8::is_ascii_digit).count();
    let mut end = run(text);
    while (1..=9).contains(&end) {
        let Some(c) = text[end..].chars().next().filter(|c| matches!(c, ',' | '\u{2009}' | '\u{202F}')) else { break };
        if run(&text[end + c.len_utf8()..]) != 3 {
            break;
        }
        end += c.len_utf8() + 3;
    }
    end
}

/// The name of a group: what stands before its size, else what stands behind it.
fn label(text: &str, size: std::ops::Range<usize>) -> String {
    let before = name_only(&text[..size.start]);
    if !before.is_empty() { before } else { name_only(&text[size.end..]) }
}

/// A group's name without brackets at its ends and without what its figures are.
fn name_only(text: &str) -> String {
    let trim = |t: &str| t.trim_matches(|c: char| c.is_whitespace() || "([{)]},;:*†‡".contains(c)).to_string();
    let mut name = trim(text);
    // Offsets found in the lower-cased name hold in the name itself only where it is ASCII.
    let lower = name.to_ascii_lowercase();
    let stop = ["mean", "median", "n (%", "no. (%", "number (%"].iter().filter_map(|w| lower.find(w)).min();
    if let Some(stop) = stop {
        name = trim(&name[..stop]);
    }
    name.split_whitespace().collect::<Vec<_>>().join(" ")
}

/// The name that a header cell gives a group whose size stands elsewhere.
pub(super) fn name(block: &Block, cell: &Cell) -> String {
    let text = block.text_of(cell);
    match size(text) {
        Some((_, _, at)) => label(text, at),
        None => name_only(text),
    }
}

/// A cell that holds a size and nothing else: `n = 24`, `(n = 24)`; `24` where the row is labelled N.
pub(super) fn size_alone(block: &Block, number: usize, cell: &Cell, labelled: bool) -> Option<Size> {
    let text = block.text_of(cell);
    let at = |r: std::ops::Range<usize>| Span::new(number, cell.start as usize + r.start, cell.start as usize + r.end);
    if let Some((value, digits, whole)) = size(text) {
        let rest = format!("{}{}", &text[..whole.start], &text[whole.end..]);
        return rest.chars().all(|c| !c.is_alphanumeric()).then(|| Size { value, span: at(digits) });
    }
    let start = text.len() - text.trim_start().len();
    let end = start + digits(&text[start..]);
    let value = text[start..end].chars().filter(char::is_ascii_digit).collect::<String>().parse().ok()?;
    (labelled && value > 0 && text[end..].trim().is_empty()).then(|| Size { value, span: at(start..end) })
}

/// The label of a row or column of sizes: `N`, `No. of patients`, `Number of women randomised`.
pub(super) fn is_size_label(head: &str) -> bool {
    let mut all = words(head).peekable();
    let number = match all.next() {
        Some("n" | "no" | "number" | "numbers") => true,
        Some("total") => return words(head).any(|w| matches!(w, "n" | "number")) && all.all(names_people),
        Some("sample" | "group") => matches!(all.next(), Some("n" | "number" | "size")),
        Some("case") => return matches!(all.next(), Some("no" | "number")) && all.next().is_none(),
        // "Women" alone is a category.
        Some("patients" | "participants" | "subjects") => return all.all(|w| w == "n"),
        Some(_) => false,
        None => false,
    };
    number && !head.contains('%') && all.all(names_people)
}

/// People that a study counts.
const PEOPLE: &[&str] = &[
    "patients",
    "participants",
    "subjects",
    "cases",
    "women",
    "men",
    "children",
    "individuals",
    "households",
    "people",
    "persons",
    "infants",
    "students",
];

/// Words that may stand in the label of a size.
fn names_people(word: &str) -> bool {
    const OTHERS: &[&str] = &[
        "of",
        "n",
        "in",
        "per",
        "group",
        "sub",
        "subgroup",
        "arm",
        "randomized",
        "randomised",
        "analysed",
        "analyzed",
        "evaluated",
        "total",
        "each",
        "included",
        "the",
        "number",
    ];
    PEOPLE.contains(&word) || OTHERS.contains(&word)
}

/// `drug arm no. households`: a name, then the words of a size.
pub(super) fn size_words_at_end(head: &str) -> bool {
    let at = ["no. ", "no ", "number of ", "n of "].iter().filter_map(|w| head.rfind(w)).max();
    at.is_some_and(|at| is_size_label(head[at..].trim()))
}

/// Words for all participants together.
pub(super) fn is_overall(label: &str) -> bool {
    let label = label.to_lowercase();
    let mut all = words(&label);
    matches!(all.next(), Some("all" | "total" | "overall" | "combined" | "whole" | "entire"))
        && all.all(|w| {
            matches!(
                w,
                "patients"
                    | "participants"
                    | "subjects"
                    | "sample"
                    | "group"
                    | "groups"
                    | "population"
                    | "cohort"
                    | "women"
                    | "men"
                    | "children"
                    | "study"
                    | "cases"
                    | "randomised"
                    | "randomized"
            )
        })
}

/// Words that show that a column is a time of measurement, not a group of participants.
const TIMES: &[&str] = &[
    "before",
    "after",
    "baseline",
    "pre",
    "post",
    "pretest",
    "posttest",
    "pretreatment",
    "posttreatment",
    "preintervention",
    "postintervention",
    "week",
    "weeks",
    "month",
    "months",
    "day",
    "days",
    "year",
    "years",
    "visit",
    "followup",
    "follow",
    "change",
    "changes",
    "difference",
    "admission",
    "discharge",
    "endpoint",
    "t0",
    "t1",
    "t2",
    "t3",
    "time",
    "test",
    "retest",
    "basal",
    "initial",
    "final",
    "end",
    "start",
    "mo",
    "wk",
    "w",
    "h",
    "min",
    "mins",
    "hour",
    "hours",
    "minutes",
    "wave",
    "1st",
    "2nd",
    "3rd",
    "first",
    "second",
    "third",
];

/// Whether a head names a time of measurement.
pub(super) fn names_time(head: &str) -> bool {
    timeless(head).1
}

/// `tea (n = 12) pre post`: a head over two times, as in a table whose lower heads were joined to it.
pub(super) fn names_two_times(head: &str) -> bool {
    words(head).filter(|w| TIMES.contains(w)).count() >= 2
}

/// A head without the words for times, figures and what its figures are; and whether it had words for times.
pub(super) fn timeless(head: &str) -> (String, bool) {
    const FIGURES: &[&str] =
        &["n", "up", "mean", "sd", "se", "sem", "median", "iqr", "range", "m", "no", "and", "of", "at"];
    // A dose is no time: `2,000 IU/day`.
    let head = head.replace("/day", "").replace("/ day", "").replace("/week", "");
    let mut timed = false;
    let mut key = String::new();
    for word in words(&head) {
        if TIMES.contains(&word) {
            timed = true;
        } else if !FIGURES.contains(&word) && !word.bytes().all(|b| b.is_ascii_digit()) {
            key.push_str(word);
            key.push(' ');
        }
    }
    (key, timed)
}
