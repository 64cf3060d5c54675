//! The fixture manuscripts: what must be asked about, and what must not.

use std::collections::BTreeSet;

use tallyproof::audit::audit;
use tallyproof::intake::Unreadable;
use tallyproof::query::Level;
use tallyproof::report::{Audited, Report};
use tallyproof::text::Span;

fn bytes(name: &str) -> Vec<u8> {
    std::fs::read(format!("{}/fixtures/{name}", env!("CARGO_MANIFEST_DIR"))).expect("the fixture is there")
}

fn audited(name: &str) -> Audited {
    audit(&bytes(name), name).expect("the fixture is a manuscript")
}

#[test]
fn the_sound_manuscript_raises_nothing_that_matters() {
    let audited = audited("sound.md");
    let raised = audited.queries.iter().filter(|q| q.level >= Level::Minor);
    let raised: Vec<_> =
        raised.map(|q| format!("{}:{} {} “{}”", q.location.line, q.level.name(), q.rule, q.quote)).collect();
    assert!(raised.is_empty(), "{}", raised.join("\n"));
}

#[test]
fn the_flawed_manuscript_has_something_from_every_family() {
    let audited = audited("flawed.md");
    let families: BTreeSet<_> = audited.queries.iter().filter_map(|q| q.rule.split('/').next()).collect();
    assert_eq!(families, BTreeSet::from(["arithmetic", "claims", "completeness", "form", "planning"]));
    assert!(audited.queries.iter().any(|q| q.level == Level::Major));
}

#[test]
fn queries_stand_in_reading_order() {
    let audited = audited("flawed.md");
    assert!(audited.queries.is_sorted_by_key(|q| q.location.start));
}

#[test]
fn a_place_that_is_exact_holds_the_quote() {
    for name in ["sound.md", "flawed.md"] {
        let (bytes, audited) = (bytes(name), audited(name));
        for q in audited.queries.iter().filter(|q| q.location.exact) {
            assert_eq!(&bytes[q.location.start..q.location.end], q.quote.as_bytes(), "{name} {}", q.rule);
        }
        let r = &audited.readings;
        let spans: Vec<Span> =
            r.p.iter()
                .map(|x| x.span)
                .chain(r.groups.iter().map(|x| x.span))
                .chain(r.claims.iter().map(|x| x.span))
                .collect();
        for span in spans {
            let at = audited.manuscript.locate(span);
            if at.exact {
                assert_eq!(&bytes[at.start..at.end], audited.manuscript.quote(span).as_bytes(), "{name}");
            }
        }
    }
}

#[test]
fn files_without_a_manuscript_are_told_apart() {
    assert_eq!(audit(&bytes("empty.md"), "empty.md").err(), Some(Unreadable::Empty));
    assert_eq!(audit(&bytes("binary.md"), "binary.md").err(), Some(Unreadable::Binary));
    assert_eq!(audit(b"<?xml version='1.0'?><svg/>", "drawing.xml").err(), Some(Unreadable::OtherXml));
}

#[test]
fn old_and_broken_encodings_are_read_as_far_as_they_go() {
    let old = audited("windows-1252.txt");
    let text: String = old.manuscript.blocks.iter().map(|b| b.text.as_str()).collect();
    assert!(text.contains("6.31 ± 1.04") && text.contains("“0.42”") && text.contains("0.05–0.79"), "{text}");
    let raw = bytes("windows-1252.txt");
    for p in &old.readings.p {
        let at = old.manuscript.locate(p.span);
        assert_eq!(&raw[at.start..at.end], b"P = 0.28", "places are bytes of the file as given");
    }
    let cut = audited("truncated-utf16.md");
    assert!(cut.manuscript.blocks.iter().any(|b| b.text.contains("6.31 ± 1.04")));
    assert!(!cut.notices.is_empty(), "a file that breaks off is worth a notice");
}

#[test]
fn the_same_bytes_give_the_same_report() {
    let report = |audited: &Audited| {
        let mut out = Vec::new();
        let entry = tallyproof::report::Entry { path: "flawed.md", outcome: Ok(audited) };
        tallyproof::report::Json::Object.manuscript(&entry, &mut out).expect("a vector takes everything");
        out
    };
    assert!(report(&audited("flawed.md")) == report(&audited("flawed.md")));
}

/// What a manuscript says and is asked, places apart.
fn told(audited: &Audited) -> (Vec<String>, Vec<String>) {
    let quote = |span| audited.manuscript.quote(span).to_owned();
    let r = &audited.readings;
    let mut readings: Vec<String> = r.p.iter().map(|x| format!("p {}", quote(x.span))).collect();
    readings.extend(r.intervals.iter().map(|x| format!("interval {}", quote(x.span))));
    readings.extend(r.statistics.iter().map(|x| format!("statistic {}", quote(x.span))));
    readings.extend(r.groups.iter().map(|x| format!("group {} of {}", quote(x.span), x.label)));
    readings.extend(r.estimates.iter().map(|x| format!("estimate {}", quote(x.span))));
    readings.extend(r.claims.iter().map(|x| format!("claim {}", quote(x.span))));
    readings.extend(r.planning.iter().map(|x| format!("planning {}", quote(x.span))));
    let queries = &audited.queries;
    let queries =
        queries.iter().map(|q| format!("{} {} {} {}", q.rule, q.level.name(), q.says, q.fingerprint)).collect();
    (readings, queries)
}

/// The JATS forms are written from the Markdown by `fixtures/jats.py`.
#[test]
fn one_manuscript_in_two_formats_is_told_and_asked_the_same() {
    for name in ["sound", "flawed"] {
        let (markdown, jats) = (audited(&format!("{name}.md")), audited(&format!("{name}.xml")));
        assert_eq!(told(&markdown), told(&jats), "{name}");
        assert!(jats.notices.is_empty());
    }
}
