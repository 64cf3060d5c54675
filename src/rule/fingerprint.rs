//! Fingerprints: the same query after an edit elsewhere has the same one.

/// FNV-1a, 64 bits: the standard library's hasher promises no stable values between releases.
fn fnv(parts: &[&str]) -> u64 {
    let mut hash = 0xcbf2_9ce4_8422_2325u64;
    // 0x1f cannot stand in a folded part, so ["ab", "c"] and ["a", "bc"] differ.
    for byte in parts.iter().flat_map(|p| p.bytes().chain([0x1f])) {
        hash = (hash ^ u64::from(byte)).wrapping_mul(0x0100_0000_01b3);
    }
    hash
}

/// From the rule's oldest id, the figures as printed, the folded labels, and the ordinal among equals.
pub fn fingerprint(rule: &str, figures: &[&str], labels: &[String], ordinal: usize) -> String {
    let figures: Vec<String> = figures.iter().map(|f| fold_figure(f)).collect();
    let labels: Vec<String> = labels.iter().map(|l| fold(l)).collect();
    let ordinal = ordinal.to_string();
    let mut parts = vec![rule];
    parts.extend(figures.iter().map(String::as_str));
    parts.push("|");
    parts.extend(labels.iter().map(String::as_str));
    parts.push(&ordinal);
    format!("{:016x}", fnv(&parts))
}

/// A label without case, punctuation and spacing.
pub fn fold(text: &str) -> String {
    let words = text.split(|c: char| !c.is_alphanumeric()).filter(|w| !w.is_empty());
    words.map(str::to_lowercase).collect::<Vec<_>>().join(" ")
}

/// A figure as printed: its spacing may change, its digits and signs may not.
fn fold_figure(text: &str) -> String {
    text.chars().filter(|c| !c.is_whitespace() && !c.is_control()).flat_map(char::to_lowercase).collect()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn spacing_and_case_do_not_matter_but_digits_do() {
        let of = |figure: &str, label: &str| fingerprint("form/x", &[figure], &[label.into()], 0);
        assert_eq!(of("P = 0.03", "Placebo group"), of("p=0.03", "placebo  Group,"));
        assert_ne!(of("P = 0.03", ""), of("P = 0.030", ""));
        assert_ne!(of("P = 0.03", "a"), of("P = 0.03", "b"));
        // Pinned: accepted queries must stay quiet in later versions.
        assert_eq!(fingerprint("form/x", &["P = 0.03"], &[], 0), "44f8d12aafb40d0a");
    }
}
