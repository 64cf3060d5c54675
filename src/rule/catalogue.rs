//! The catalogue: rules as data, read from TOML. The rules in `rules/` are compiled in; a user's own
//! come through the same door.

use super::check::Check;
use super::wording;
use crate::query::Level;
use include_dir::{Dir, include_dir};
use serde::{Deserialize, Deserializer};
use std::sync::OnceLock;

static FILES: Dir = include_dir!("$CARGO_MANIFEST_DIR/rules");

/// The families, in the order in which people read them.
pub const FAMILIES: [&str; 5] = ["arithmetic", "completeness", "claims", "planning", "form"];

/// One rule: all that its file says.
#[derive(Clone, Debug, PartialEq)]
pub struct Rule {
    /// `family/name`, the path of its file without the ending.
    pub id: String,
    /// What it is about, in a few words.
    pub title: String,
    /// The highest level that a query of this rule can have.
    pub level: Level,
    /// The question to the author; may hold [`wording::PLACEHOLDERS`].
    pub asks: String,
    /// Why it matters, in a sentence or two.
    pub why: String,
    /// Published guidance.
    pub sources: Vec<String>,
    /// What is taken for granted; printed with every query.
    pub assumes: Vec<String>,
    /// Former ids, oldest first. The oldest goes into fingerprints, so that a rename keeps accepted
    /// queries quiet.
    pub formerly: Vec<String>,
    pub check: Check,
    pub cases: Vec<Case>,
}

/// A text that raises the rule, or a near miss that must not.
#[derive(Clone, Debug, PartialEq, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct Case {
    /// Whether this text raises the rule.
    pub raises: bool,
    /// Markdown.
    pub text: String,
    /// What the case is there to show.
    #[serde(default)]
    pub shows: String,
}

/// A set of rules, in order of family and name.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Catalogue {
    rules: Vec<Rule>,
}

/// What is wrong with a rule file, and where.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct RuleError {
    pub file: String,
    /// From 1; 0 when it concerns the file as a whole.
    pub line: usize,
    /// What is wrong and what was expected, in one sentence.
    pub says: String,
}

impl std::fmt::Display for RuleError {
    fn fmt(&self, f: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        match self.line {
            0 => write!(f, "{}: {}", self.file, self.says),
            line => write!(f, "{}, line {line}: {}", self.file, self.says),
        }
    }
}

impl std::error::Error for RuleError {}

/// The file as it is written.
#[derive(Deserialize)]
#[serde(deny_unknown_fields)]
struct RuleFile {
    title: String,
    #[serde(deserialize_with = "level")]
    level: Level,
    asks: String,
    why: String,
    sources: Vec<String>,
    assumes: Vec<String>,
    #[serde(default)]
    formerly: Vec<String>,
    check: Check,
    #[serde(rename = "case", default)]
    cases: Vec<Case>,
}

fn level<'de, D: Deserializer<'de>>(deserializer: D) -> Result<Level, D::Error> {
    let name = String::deserialize(deserializer)?;
    let found = Level::ALL.into_iter().find(|l| l.name() == name);
    found.ok_or_else(|| serde::de::Error::custom(format!("`{name}` is no level; expected note, minor or major")))
}

/// The rules that are compiled in.
///
/// A faulty file among them is left out here; a test reads every one of them.
pub fn catalogue() -> &'static Catalogue {
    static CATALOGUE: OnceLock<Catalogue> = OnceLock::new();
    CATALOGUE.get_or_init(|| {
        let (rules, errors) = read_all(&compiled_in());
        debug_assert!(errors.is_empty(), "faulty rule files: {errors:?}");
        Catalogue { rules }
    })
}

/// Path (within `rules/`) and text of every file that is compiled in.
pub fn compiled_in() -> Vec<(String, String)> {
    let mut files = Vec::new();
    for family in FILES.dirs() {
        for file in family.files() {
            let path = file.path().to_string_lossy().replace('\\', "/");
            if path.ends_with(".toml") {
                files.push((path, file.contents_utf8().unwrap_or("").to_owned()));
            }
        }
    }
    files
}

impl Catalogue {
    /// Reads rule files: path (`family/name.toml`) and text of each. All errors at once, or a catalogue.
    pub fn from_files(files: &[(String, String)]) -> Result<Catalogue, Vec<RuleError>> {
        match read_all(files) {
            (rules, errors) if errors.is_empty() => Ok(Catalogue { rules }),
            (_, errors) => Err(errors),
        }
    }

    /// These rules and another's; where both have an id, the other's rule stands.
    pub fn extended(&self, other: &Catalogue) -> Catalogue {
        let kept = self.rules.iter().filter(|r| other.get(&r.id).is_none());
        let mut rules: Vec<Rule> = kept.chain(&other.rules).cloned().collect();
        rules.sort_by(|a, b| order(&a.id).cmp(&order(&b.id)));
        Catalogue { rules }
    }

    /// In order of family and name.
    pub fn rules(&self) -> &[Rule] {
        &self.rules
    }

    pub fn get(&self, id: &str) -> Option<&Rule> {
        self.rules.iter().find(|r| r.id == id)
    }

    /// The rule that people mean by a name: its id, a former id, or its last part where that is the only one.
    pub fn find(&self, name: &str) -> Option<&Rule> {
        let name = name.trim_end_matches(".toml");
        self.get(name).or_else(|| self.rules.iter().find(|r| r.formerly.iter().any(|f| f == name))).or_else(|| {
            let mut ends = self.rules.iter().filter(|r| r.id.split('/').next_back() == Some(name));
            ends.next().filter(|_| ends.next().is_none())
        })
    }
}

fn order(id: &str) -> (usize, &str) {
    let family = id.split('/').next().unwrap_or("");
    (FAMILIES.iter().position(|f| *f == family).unwrap_or(FAMILIES.len()), id)
}

fn read_all(files: &[(String, String)]) -> (Vec<Rule>, Vec<RuleError>) {
    let (mut rules, mut errors): (Vec<Rule>, Vec<RuleError>) = (Vec::new(), Vec::new());
    for (path, text) in files {
        match read(path, text) {
            Ok(rule) => rules.push(rule),
            Err(error) => errors.push(error),
        }
    }
    rules.sort_by(|a, b| order(&a.id).cmp(&order(&b.id)));
    (rules, errors)
}

fn read(path: &str, text: &str) -> Result<Rule, RuleError> {
    let error = |line: usize, says: String| RuleError { file: path.to_owned(), line, says };
    let id = path.strip_suffix(".toml").unwrap_or(path);
    let (family, name) = id.split_once('/').unwrap_or(("", id));
    if !FAMILIES.contains(&family) || name.is_empty() || name.contains('/') {
        let says = format!("a rule is expected in one of the folders {}", FAMILIES.join(", "));
        return Err(error(0, says));
    }
    let file: RuleFile = toml::from_str(text).map_err(|e| {
        let line = e.span().map_or(0, |s| text[..s.start.min(text.len())].matches('\n').count() + 1);
        error(line, e.message().replace('\n', " "))
    })?;
    let line_of = |key: &str| text.lines().position(|l| l.trim_start().starts_with(key)).map_or(0, |i| i + 1);
    if let Some(name) = wording::unknown_placeholder(&file.asks) {
        let known = wording::PLACEHOLDERS.map(|p| format!("{{{p}}}")).join(", ");
        return Err(error(line_of("asks"), format!("`{{{name}}}` is no placeholder; expected one of {known}")));
    }
    for (key, empty) in [
        ("title", file.title.trim().is_empty()),
        ("asks", file.asks.trim().is_empty()),
        ("why", file.why.trim().is_empty()),
        ("sources", file.sources.is_empty()),
    ] {
        if empty {
            return Err(error(line_of(key), format!("`{key}` is empty; every rule needs it")));
        }
    }
    for (raises, what) in [(true, "a text that raises it"), (false, "a near miss that does not")] {
        if !file.cases.iter().any(|c| c.raises == raises) {
            let says = format!("expected {what}: a `[[case]]` with `raises = {raises}`");
            return Err(error(line_of("[[case]]"), says));
        }
    }
    Ok(Rule {
        id: id.to_owned(),
        title: file.title,
        level: file.level,
        asks: file.asks,
        why: file.why,
        sources: file.sources,
        assumes: file.assumes,
        formerly: file.formerly,
        check: file.check,
        cases: file.cases,
    })
}

#[cfg(test)]
mod tests {
    use super::*;

    const GOOD: &str = r#"
title = "P printed as zero"
level = "minor"
asks = "Could {quote} be given as P < 0.001?"
why = "No p-value is zero."
sources = ["A guide"]
assumes = []
[check.printed-zero]
[[case]]
raises = true
text = "P = 0.000"
[[case]]
raises = false
text = "P < 0.001"
"#;

    fn errors(path: &str, text: &str) -> String {
        let result = Catalogue::from_files(&[(path.to_owned(), text.to_owned())]);
        result.err().map_or(String::new(), |e| e[0].to_string())
    }

    #[test]
    fn the_compiled_rules_are_all_sound() {
        let (rules, errors) = read_all(&compiled_in());
        let errors: Vec<String> = errors.iter().map(ToString::to_string).collect();
        assert!(errors.is_empty(), "{}", errors.join("\n"));
        assert!(rules.len() >= 30, "only {} rules", rules.len());
    }

    #[test]
    fn errors_name_file_line_and_what_was_expected() {
        assert_eq!(errors("form/zero.toml", GOOD), "");
        let e = errors("form/zero.toml", &GOOD.replace("\"minor\"", "\"grave\""));
        assert!(e.starts_with("form/zero.toml, line 3:") && e.contains("expected note, minor or major"), "{e}");
        let e = errors("form/zero.toml", &GOOD.replace("{quote}", "{qoute}"));
        assert!(e.starts_with("form/zero.toml, line 4:") && e.contains("{quote}"), "{e}");
        let e = errors("form/zero.toml", &GOOD.replace("check.printed-zero", "check.printed-nought"));
        assert!(e.starts_with("form/zero.toml, line 8:") && e.contains("printed-zero"), "{e}");
        let e = errors("form/zero.toml", &GOOD.replace("raises = false", "raises = true"));
        assert!(e.contains("near miss"), "{e}");
        let e = errors("forms/zero.toml", GOOD);
        assert!(e.contains("one of the folders arithmetic"), "{e}");
    }

    #[test]
    fn a_users_rule_replaces_its_namesake_and_joins_the_rest() {
        let read = |id: &str, title: &str| {
            let text = GOOD.replace("P printed as zero", title);
            Catalogue::from_files(&[(format!("{id}.toml"), text)]).unwrap()
        };
        let both = read("form/zero", "ours").extended(&read("form/zero", "theirs")).extended(&read("claims/new", "x"));
        let titles: Vec<&str> = both.rules().iter().map(|r| r.title.as_str()).collect();
        assert_eq!(titles, ["x", "theirs"]);
        assert_eq!(both.find("zero").map(|r| r.id.as_str()), Some("form/zero"));
    }
}
