//! Any bytes give a manuscript or one of the known reasons; every place is in bounds; a quote mapped
//! back is what stands there; the audit and the JSON report never fail.

#![no_main]

use libfuzzer_sys::fuzz_target;
use tallyproof::audit::audit;
use tallyproof::manuscript::Manuscript;
use tallyproof::report::{Entry, Json, Report, Terminal};
use tallyproof::text::{Span, decode};

fuzz_target!(|data: &[u8]| {
    let decoded = decode(data);
    assert!(decoded.original(decoded.text.len()) <= data.len());
    for name in ["fuzz.md", "fuzz.txt", "fuzz.xml"] {
        let Ok(audited) = audit(data, name) else { continue };
        let r = &audited.readings;
        r.p.iter().for_each(|x| check(&audited.manuscript, x.span, data));
        r.intervals.iter().for_each(|x| check(&audited.manuscript, x.span, data));
        r.statistics.iter().for_each(|x| check(&audited.manuscript, x.span, data));
        r.groups.iter().for_each(|x| check(&audited.manuscript, x.span, data));
        r.estimates.iter().for_each(|x| check(&audited.manuscript, x.span, data));
        r.claims.iter().for_each(|x| check(&audited.manuscript, x.span, data));
        r.planning.iter().for_each(|x| check(&audited.manuscript, x.span, data));
        for query in &audited.queries {
            assert!(query.location.start <= query.location.end && query.location.end <= data.len());
        }
        let entry = Entry { path: name, outcome: Ok(&audited) };
        let mut out = Vec::new();
        Json::Lines.manuscript(&entry, &mut out).expect("a vector takes everything");
        Terminal { width: 80, workings: true }.manuscript(&entry, &mut out).expect("a vector takes everything");
    }
});

/// A span is in bounds and on character boundaries, and so is the place it maps to.
fn check(manuscript: &Manuscript, span: Span, data: &[u8]) {
    let quote = manuscript.quote(span);
    let place = manuscript.locate(span);
    assert!(place.start <= place.end && place.end <= data.len() && place.line > 0 && place.column > 0);
    if place.exact && std::str::from_utf8(data).is_ok() {
        assert_eq!(&data[place.start..place.end], quote.as_bytes());
    }
}
