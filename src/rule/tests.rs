//! The engine on facts built by hand, so that it does not lean on what the recognisers can read.

use super::*;
use crate::manuscript::testing::paragraphs;
use crate::printed::{Printed, Range};
use crate::query::{Ground, Level, Verdict};
use crate::reading::{PValue, Relation, Role};
use crate::recompute::{Distance, Method, Quantity, Recomputation};
use crate::text::Span;

static METHOD: Method = Method { name: "p from an interval", source: "Altman & Bland 2011" };

fn manuscript(text: &str) -> Manuscript {
    paragraphs(&[("Results", text)])
}

fn span(text: &str, part: &str) -> Span {
    let start = text.find(part).unwrap();
    Span::new(0, start, start + part.len())
}

fn p_value(span: Span, value: &str) -> PValue {
    let value = Printed::parse(value);
    PValue { span, sentence: 0, relation: Relation::Equal, value, role: Role::Effect, corrected: false, shared: false }
}

fn recomputation(of: Quantity, figure: Span, input: Span) -> Recomputation {
    Recomputation {
        of,
        method: &METHOD,
        ground: Ground::IfOneMethod,
        computed: Some(Range::new(0.128, 0.132)),
        printed: Some(Range::new(0.025, 0.035)),
        verdict: Verdict::Differs,
        sharp: true,
        reason: None,
        working: "SE = (ln 1.61 − ln 0.94)/3.92".to_owned(),
        assumptions: Vec::new(),
        distance: Some(Distance { size: 3.7, across_alpha: true }),
        slip: None,
        figure,
        inputs: vec![(input, "the interval")],
    }
}

/// All queries about one result with a p and an interval, recomputed from each other.
fn both_ways(text: &str) -> Vec<Query> {
    let manuscript = manuscript(text);
    let scan = crate::reading::scan(&manuscript);
    let (p, i) = (span(text, "P = 0.03"), span(text, "0.94 to 1.61"));
    let interval = crate::reading::IntervalReading {
        span: i,
        sentence: 0,
        level: None,
        lower: Printed::parse("0.94").unwrap(),
        upper: Printed::parse("1.61").unwrap(),
        percent: false,
        credible: false,
        reversed: false,
        estimate: None,
    };
    let readings = Readings { p: vec![p_value(p, "0.03")], intervals: vec![interval], ..Readings::default() };
    let result = ReportedResult { p: Some(0), interval: Some(0), ..ReportedResult::default() };
    let checked = Checked {
        result: 0,
        recomputations: vec![recomputation(Quantity::P, p, i), recomputation(Quantity::Interval, i, p)],
        verdict: Verdict::Differs,
        reason: None,
    };
    let context = Context::default();
    let facts = Facts {
        manuscript: &manuscript,
        scan: &scan,
        readings: &readings,
        context: &context,
        results: &[result],
        checked: &[checked],
    };
    queries(&facts)
}

#[test]
fn one_disagreement_raises_one_query() {
    let found = both_ways("The ratio was 1.23 (95% CI 0.94 to 1.61; P = 0.03).");
    assert_eq!(found.len(), 1, "{found:#?}");
    let query = &found[0];
    assert_eq!((query.rule.as_str(), query.level), ("arithmetic/p-from-interval", Level::Major));
    assert_eq!(query.quote, "P = 0.03");
    assert_eq!(query.says, "Printed P = 0.03; from 0.94 to 1.61 we get P = 0.13.");
    assert_eq!(query.section, ["Results"]);
    assert_eq!(query.repair.as_ref().map(|r| r.text.as_str()), Some("P = 0.13"));
    assert!(query.related.iter().any(|r| r.part == "the interval" && r.quote == "0.94 to 1.61"));
}

#[test]
fn a_fingerprint_outlives_edits_elsewhere() {
    let one = both_ways("The ratio was 1.23 (95% CI 0.94 to 1.61; P = 0.03).");
    let other = both_ways("In the end the ratio of rates was 1.23 (95% CI 0.94 to 1.61; P = 0.03).");
    assert_eq!(one[0].fingerprint, other[0].fingerprint);
    assert_ne!(one[0].location, other[0].location);
}

#[test]
fn a_name_is_explained_by_its_last_part() {
    let rule = explain("p-zero").unwrap();
    assert_eq!(rule.id, "form/p-zero");
    assert!(rule.cases.iter().any(|c| c.raises) && explain("no-such-rule").is_none());
}
