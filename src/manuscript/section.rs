//! What kind of section a heading announces.

/// The parts of a research report, by the words that head them.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum SectionKind {
    Title,
    Abstract,
    Introduction,
    Methods,
    Results,
    Discussion,
    /// Acknowledgements, funding, conflicts, appendices: nothing to audit in particular.
    Back,
    References,
    Unknown,
}

impl SectionKind {
    /// The kind that a heading names, if it names one.
    pub fn of_title(title: &str) -> Option<SectionKind> {
        let t = title.trim_start_matches(|c: char| !c.is_alphabetic()).to_lowercase();
        let starts = |words: &[&str]| words.iter().any(|w| t.starts_with(w));
        let holds = |words: &[&str]| words.iter().any(|w| t.contains(w));
        if starts(&["abstract", "summary", "synopsis"]) {
            Some(SectionKind::Abstract)
        } else if starts(&["introduction", "background", "objective", "aim", "purpose", "rationale"]) {
            Some(SectionKind::Introduction)
        } else if starts(&["references", "reference list", "bibliograph", "literature cited"])
            || t.trim_end() == "reference"
        {
            Some(SectionKind::References)
        } else if starts(&["method", "material", "patients and", "subjects and", "participants and", "experimental"])
            || holds(&["methods", "statistical analys", "sample size", "study design", "data analys", "statistics"])
        {
            Some(SectionKind::Methods)
        } else if starts(&["result", "findings", "outcomes"]) || t.ends_with("results") {
            Some(SectionKind::Results)
        } else if starts(&["discussion", "conclusion", "comment", "interpretation", "limitation", "strengths"]) {
            Some(SectionKind::Discussion)
        } else if starts(&["acknowledg", "funding", "competing", "conflict", "author", "abbreviation", "supplement"]) {
            Some(SectionKind::Back)
        } else {
            None
        }
    }
}
