//! The cases of every rule, read from its own file: each text that should raise it does, and each near
//! miss does not. A case asserts its own rule only.

use std::collections::BTreeSet;
use std::path::Path;
use tallyproof::audit::audit;
use tallyproof::query::Query;
use tallyproof::rule::{FAMILIES, catalogue};

fn queries(text: &str) -> Vec<Query> {
    audit(text.as_bytes(), "case.md").map_or_else(|_| Vec::new(), |audited| audited.queries)
}

#[test]
fn every_case_of_every_rule_holds() {
    let mut failures = Vec::new();
    for rule in catalogue().rules() {
        for (number, case) in rule.cases.iter().enumerate() {
            let found = queries(&case.text);
            let raised = found.iter().any(|q| q.rule == rule.id);
            if raised == case.raises {
                continue;
            }
            let others: BTreeSet<&str> = found.iter().map(|q| q.rule.as_str()).collect();
            let expected = if case.raises { "should raise it" } else { "should not raise it" };
            failures.push(format!(
                "rules/{}.toml, case {} ({}) {expected}; raised: {:?}",
                rule.id,
                number + 1,
                case.shows,
                others
            ));
        }
    }
    assert!(failures.is_empty(), "{} cases fail:\n{}", failures.len(), failures.join("\n"));
}

#[test]
fn what_a_query_holds_fits_to_be_printed() {
    for rule in catalogue().rules() {
        for query in rule.cases.iter().flat_map(|c| queries(&c.text)) {
            let texts = [&query.says, &query.asks];
            assert!(texts.iter().all(|t| !t.is_empty() && !t.contains(['{', '}', '\n'])), "{query:#?}");
            assert!(!query.quote.is_empty() && query.fingerprint.len() == 16, "{query:#?}");
        }
    }
}

#[test]
fn the_same_text_gives_the_same_queries() {
    for case in catalogue().rules().iter().flat_map(|r| &r.cases) {
        assert_eq!(queries(&case.text), queries(&case.text));
    }
}

/// A new file is compiled in only when the crate is built anew; this says so instead of passing it over.
#[test]
fn every_file_in_rules_is_compiled_in() {
    let root = Path::new(env!("CARGO_MANIFEST_DIR")).join("rules");
    let mut missing = Vec::new();
    for family in FAMILIES {
        for entry in std::fs::read_dir(root.join(family)).into_iter().flatten().flatten() {
            let name = entry.file_name().to_string_lossy().into_owned();
            let id = format!("{family}/{}", name.trim_end_matches(".toml"));
            if name.ends_with(".toml") && catalogue().get(&id).is_none() {
                missing.push(id);
            }
        }
    }
    assert!(missing.is_empty(), "not compiled in (touch src/rule/catalogue.rs and build again): {missing:?}");
}
