//! What a label says of the quantity that it names: whether it can lie below zero.
//!
//! Word lists only: a label that names none of these says nothing.

/// Quantities that cannot be negative, whatever they are measured in. In lower case.
const NON_NEGATIVE: &[&str] = &[
    "duration",
    "length of stay",
    "hospital stay",
    "blood loss",
    "cost",
    "costs",
    "dose",
    "doses",
    "dosage",
    "concentration",
    "concentrations",
    "volume",
    "volumes",
    "number of",
    "no. of",
    "count",
    "counts",
    "intake",
    "consumption",
    "time to",
    "time since",
    "years since",
    "years of",
    "pack years",
    "titre",
    "titer",
    "triglyceride",
    "triglycerides",
    "ferritin",
    "insulin",
    "creatinine",
    "bilirubin",
    "c-reactive protein",
    "crp",
    "hs-crp",
];

/// Units of quantities that cannot be negative, as they stand in brackets or behind a comma at a label's end.
const UNITS: &[&str] = &[
    "s", "sec", "secs", "seconds", "min", "mins", "minutes", "h", "hr", "hrs", "hours", "d", "days", "day", "weeks",
    "wk", "wks", "months", "month", "mo", "years", "yrs", "yr", "year", "mg", "g", "kg", "µg", "μg", "mcg", "ng", "ml",
    "l", "dl", "mg/d", "mg/day", "g/d", "g/day", "ml/day", "ml/h", "kcal", "kcal/d", "kcal/day", "kj", "iu", "u",
    "cm2", "cm3", "mm2", "mm3", "cc", "$", "us$", "usd", "€", "euro", "euros", "£", "gbp", "mg/dl", "mg/l", "g/dl",
    "g/l", "mmol/l", "µmol/l", "μmol/l", "umol/l", "nmol/l", "pmol/l", "ng/ml", "ng/dl", "pg/ml", "µg/ml", "μg/ml",
    "ug/ml", "µg/l", "μg/l", "ug/l", "µg/dl", "μg/dl", "iu/l", "iu/ml", "u/l", "u/ml", "miu/ml", "miu/l", "µiu/ml",
    "μiu/ml", "µu/ml", "μu/ml", "mu/l", "meq/l", "mg/g",
];

/// Words of changes and differences, which may be negative.
const CHANGES: &[&str] = &[
    "change",
    "changes",
    "changed",
    "difference",
    "differences",
    "differential",
    "delta",
    "reduction",
    "reductions",
    "increase",
    "increases",
    "increment",
    "decrease",
    "decreases",
    "decline",
    "gain",
    "gains",
    "improvement",
    "improvements",
    "minus",
    "weight loss",
    "loss of",
];

/// Words of figures that are no longer on the scale of measurement.
const TRANSFORMED: &[&str] = &[
    "log",
    "log10",
    "ln",
    "logarithm",
    "logarithms",
    "transformed",
    "geometric",
    "z",
    "z-score",
    "z-scores",
    "sds",
    "standardised",
    "standardized",
    "normalised",
    "normalized",
    "skewed",
];

/// Words of other quantities that may be negative, or that are bounded on both sides: a score of 0 to 10 has its mean
/// near an end for other reasons.
const OTHERWISE: &[&str] = &[
    "residual",
    "excess",
    "balance",
    "net",
    "slope",
    "slopes",
    "score",
    "scores",
    "scale",
    "vas",
    "nrs",
    "rating",
    "points",
    "refraction",
    "refractive",
    "sphere",
    "spherical",
    "temperature",
    "bias",
    "asymmetry",
    "deficit",
    "error",
    "errors",
    "se",
    "sem",
    "relative",
    "median",
    "medians",
    "adjusted",
    "lag",
    "delay",
    "pain",
];

/// Words of labels that say when or how a quantity was summed up, and not which.
const WHEN_OR_HOW: &[&str] = &[
    "mean",
    "m",
    "sd",
    "average",
    "baseline",
    "before",
    "after",
    "pre",
    "post",
    "pretest",
    "posttest",
    "pre-test",
    "post-test",
    "preoperative",
    "postoperative",
    "day",
    "days",
    "week",
    "weeks",
    "month",
    "months",
    "year",
    "years",
    "hour",
    "hours",
    "h",
    "follow-up",
    "followup",
    "end",
    "final",
    "initial",
    "visit",
    "all",
    "total",
];

/// Whether a label names a quantity that cannot lie below zero: by its name or by its unit.
pub fn cannot_be_negative(label: &str) -> bool {
    let label = label.to_lowercase();
    !otherwise(&label) && (holds(&label, NON_NEGATIVE) || has_unit(&label))
}

/// Whether a label tells of changes, differences, scores or transformed figures.
pub fn may_be_negative(label: &str) -> bool {
    otherwise(&label.to_lowercase())
}

/// Whether a table's caption says that its figures are changes or transformed.
pub fn is_of_changes(caption: &str) -> bool {
    let caption = caption.to_lowercase();
    holds(&caption, CHANGES) || holds(&caption, TRANSFORMED)
}

/// Whether a table's notes say that figures were transformed.
pub fn is_transformed(notes: &str) -> bool {
    holds(&notes.to_lowercase(), TRANSFORMED)
}

/// Whether a label says only when or how something was measured: "Week 4", "Mean (SD)".
pub fn says_when_or_how(label: &str) -> bool {
    holds(&label.to_lowercase(), WHEN_OR_HOW)
}

fn otherwise(label: &str) -> bool {
    label.contains(['Δ', '∆', 'δ', '−']) || [CHANGES, TRANSFORMED, OTHERWISE].iter().any(|list| holds(label, list))
}

/// A text holds one of these phrases, between ends of words.
fn holds(text: &str, phrases: &[&str]) -> bool {
    let free = |c: Option<char>| c.is_none_or(|c| !c.is_alphanumeric());
    phrases.iter().any(|phrase| {
        text.match_indices(phrase)
            .any(|(at, _)| free(text[..at].chars().next_back()) && free(text[at + phrase.len()..].chars().next()))
    })
}

/// A unit in brackets or behind the last comma: "Stay (days)", "Stay, days", but not "after 3 days".
fn has_unit(label: &str) -> bool {
    let is_unit = |text: &str| {
        let text: String = text.split_whitespace().collect::<Vec<_>>().concat();
        UNITS.contains(&text.as_str())
    };
    let bracketed = label.split(['(', '[']).skip(1).filter_map(|rest| rest.split([')', ']', ',', ';']).next());
    bracketed.chain(label.split(',').skip(1)).any(is_unit)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_quantity_is_known_by_its_name_or_its_unit() {
        for label in [
            "Length of stay",
            "Night watch (min)",
            "Time awake, min",
            "CRP",
            "Number of calls",
            "Ferritin [µg/L], mean (SD)",
            "Insulin (mU / l)",
        ] {
            assert!(cannot_be_negative(label), "{label}");
        }
        for label in [
            "After 3 months",
            "12 months",
            "Change in length of stay (days)",
            "log CRP (mg/l)",
            "Fluid balance (ml)",
            "Pain score",
            "Discount",
            "Weight",
            "Base excess (mmol/L)",
        ] {
            assert!(!cannot_be_negative(label), "{label}");
        }
        assert!(is_of_changes("Table 2. Changes from baseline") && !is_of_changes("Table 1. The keepers"));
        assert!(is_transformed("Log-transformed before the test") && may_be_negative("Mean change (days)"));
    }
}
