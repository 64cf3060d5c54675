//! Whole reports as snapshots, and what holds for every report.

use tallyproof::audit::audit;
use tallyproof::manuscript::Location;
use tallyproof::query::{Explanation, Ground, Level, Query, Related, Repair, RepairKind, Verdict};
use tallyproof::recompute::{Checked, Distance, Method, Quantity, Recomputation, Slip};
use tallyproof::report::{Account, Audited, CAUTIONS, Entry, Json, Line, Report, Terminal, Worklist};
use tallyproof::result::ReportedResult;
use tallyproof::text::Span;

const TERMINAL: Terminal = Terminal { width: 80, workings: false };

fn rendered(report: &dyn Report, entries: &[Entry]) -> String {
    let mut out = Vec::new();
    report.begin(&mut out).expect("a vector takes everything");
    for (i, entry) in entries.iter().enumerate() {
        if i > 0 {
            report.between(&mut out).expect("a vector takes everything");
        }
        report.manuscript(entry, &mut out).expect("a vector takes everything");
    }
    let lines: Vec<_> = entries.iter().map(Line::of).collect();
    report.end(&lines, &mut out).expect("a vector takes everything");
    anstream::adapter::strip_str(&String::from_utf8(out).expect("reports are UTF-8")).to_string()
}

fn fixture(name: &str) -> Audited {
    let path = format!("{}/fixtures/{name}", env!("CARGO_MANIFEST_DIR"));
    audit(&std::fs::read(path).expect("the fixture is there"), name).expect("the fixture is a manuscript")
}

fn one(report: &dyn Report, name: &str) -> String {
    let audited = fixture(name);
    rendered(report, &[Entry { path: name, outcome: Ok(&audited) }])
}

#[test]
fn terminal_report_of_the_sound_manuscript() {
    insta::assert_snapshot!(one(&TERMINAL, "sound.md"));
}

#[test]
fn terminal_report_of_the_flawed_manuscript() {
    insta::assert_snapshot!(one(&TERMINAL, "flawed.md"));
}

#[test]
fn json_report_of_the_sound_manuscript() {
    insta::assert_snapshot!(leaves_on_one_line(&one(&Json::Object, "sound.md")));
}

#[test]
fn json_report_of_the_flawed_manuscript() {
    insta::assert_snapshot!(leaves_on_one_line(&one(&Json::Object, "flawed.md")));
}

/// Each item of a list on one line, so that a change shows as a line.
fn leaves_on_one_line(json: &str) -> String {
    fn write(name: &str, value: &serde_json::Value, out: &mut String) {
        match value {
            serde_json::Value::Object(fields) if name.matches('.').count() < 2 => {
                fields.iter().for_each(|(field, value)| write(&format!("{name}.{field}"), value, out));
            }
            serde_json::Value::Array(items) => {
                items.iter().enumerate().for_each(|(i, item)| *out += &format!("{name}[{i}] {item}\n"));
            }
            other => *out += &format!("{name} {other}\n"),
        }
    }
    let mut value = serde_json::from_str(json).expect("the report is JSON");
    to_ten_digits(&mut value);
    let mut out = String::new();
    write("", &value, &mut out);
    out
}

/// The last digits of a double may change with the mathematical library of the machine.
fn to_ten_digits(value: &mut serde_json::Value) {
    match value {
        serde_json::Value::Array(items) => items.iter_mut().for_each(to_ten_digits),
        serde_json::Value::Object(fields) => fields.values_mut().for_each(to_ten_digits),
        serde_json::Value::Number(n) if n.is_f64() => {
            let rounded: f64 = format!("{:.9e}", n.as_f64().unwrap_or(0.0)).parse().expect("a number");
            *value = serde_json::json!(rounded);
        }
        _ => {}
    }
}

const MADE_UP: &str = "# Results\n\n## Sleep\n\nNights were longer with the footbath (mean difference 3.1, 95 % CI \
                       1.2 to 5.0; P = 0.34), as the keepers had hoped.\n\n| Outcome | Footbath | Habits | P |\n\
                       |---|---|---|---|\n| Dreams | 22 (37.9%) | 20 (53.1%) | 0.75 |\n";

static METHOD: Method = Method { name: "normal approximation", source: "Altman & Bland, BMJ 2011;343:d2304" };

/// A manuscript with one of everything that a report can show, whatever the rules find in it.
fn made_up() -> Audited {
    let mut audited = audit(MADE_UP.as_bytes(), "made-up.md").expect("it is text");
    let span = |quote: &str| {
        let found = audited
            .manuscript
            .blocks
            .iter()
            .enumerate()
            .find_map(|(b, block)| block.text.find(quote).map(|at| Span::new(b, at, at + quote.len())));
        found.expect("the quote is there")
    };
    let at = |quote: &str| -> Location { audited.manuscript.locate(span(quote)) };
    let section = vec!["Results".to_owned(), "Sleep".to_owned()];
    let first = Query {
        rule: "arithmetic/p-from-interval".to_owned(),
        level: Level::Major,
        ground: Ground::IfOneMethod,
        location: at("P = 0.34"),
        quote: "P = 0.34".to_owned(),
        section: section.clone(),
        related: vec![Related {
            location: at("95 % CI 1.2 to 5.0"),
            quote: "95 % CI 1.2 to 5.0".to_owned(),
            part: "the interval".to_owned(),
        }],
        says: "The interval leaves out 0, but P is above 0.05.".to_owned(),
        working: Some("SE = (5.0 − 1.2)/3.92 = 0.97; z = 3.1/0.97 = 3.20; P 0.0012–0.0017".to_owned()),
        asks: "Which of the two is as the analysis gave it?".to_owned(),
        explanations: vec![Explanation {
            kind: "digits-swapped".to_owned(),
            says: "a digit may have been lost when the figure was copied".to_owned(),
        }],
        repair: Some(Repair {
            kind: RepairKind::Replace,
            location: at("P = 0.34"),
            text: "P = 0.0014".to_owned(),
            needs_confirmation: true,
        }),
        fingerprint: "made-up-1".to_owned(),
        results: vec![0],
    };
    let second = Query {
        rule: "arithmetic/percent".to_owned(),
        level: Level::Minor,
        ground: Ground::Reporting,
        location: at("20 (53.1%)"),
        quote: "20 (53.1%)".to_owned(),
        related: Vec::new(),
        says: "20 of 57 is 35.1 %.".to_owned(),
        working: None,
        asks: "Is another denominator meant?".to_owned(),
        explanations: Vec::new(),
        repair: None,
        fingerprint: "made-up-2".to_owned(),
        results: Vec::new(),
        ..first.clone()
    };
    let recomputation = Recomputation {
        of: Quantity::P,
        method: &METHOD,
        ground: Ground::IfOneMethod,
        computed: Some(tallyproof::printed::Range::new(0.00121, 0.00169)),
        printed: None,
        verdict: Verdict::Differs,
        sharp: true,
        reason: None,
        working: "z = 3.20".to_owned(),
        assumptions: vec![tallyproof::reading::Assumption::TwoSided],
        distance: Some(Distance { size: 200.0, across_alpha: true }),
        slip: Some(Slip { kind: "decimal-point", says: "it agrees with a lost digit".to_owned() }),
        figure: span("P = 0.34"),
        inputs: vec![(span("95 % CI 1.2 to 5.0"), "the interval")],
    };
    audited.results = vec![ReportedResult { p: Some(0), ..ReportedResult::default() }];
    audited.checked =
        vec![Checked { result: 0, recomputations: vec![recomputation], verdict: Verdict::Differs, reason: None }];
    audited.notices = vec![tallyproof::intake::Notice("A notice about the file stands first.".to_owned())];
    audited.queries = vec![first, second];
    audited
}

#[test]
fn everything_that_a_terminal_report_can_show() {
    let audited = made_up();
    let all = Terminal { width: 80, workings: true };
    insta::assert_snapshot!(rendered(&all, &[Entry { path: "made-up.md", outcome: Ok(&audited) }]));
}

#[test]
fn a_batch_closes_with_a_worklist() {
    let (grave, quiet) = (made_up(), audit(b"Nothing to count.\n", "quiet.md").expect("it is text"));
    let entries = [
        Entry { path: "quiet.md", outcome: Ok(&quiet) },
        Entry { path: "broken.md", outcome: Err("it is not text") },
        Entry { path: "grave.md", outcome: Ok(&grave) },
    ];
    let text = rendered(&TERMINAL, &entries);
    let list = text.split("Worklist").nth(1).expect("a batch has a worklist");
    let place = |path| list.find(path).expect("each manuscript is listed");
    assert!(place("grave.md") < place("quiet.md") && place("quiet.md") < place("broken.md"), "{list}");
}

#[test]
fn no_line_is_wider_than_the_terminal() {
    let audited = made_up();
    for width in [60, 80, 100] {
        let report = Terminal { width, workings: true };
        let text = rendered(&report, &[Entry { path: "made-up.md", outcome: Ok(&audited) }]);
        let wide: Vec<_> = text.lines().filter(|l| l.chars().count() > width).collect();
        assert!(wide.is_empty(), "wider than {width}: {wide:?}");
    }
}

#[test]
fn every_format_carries_the_cautions_once() {
    let (audited, other) = (made_up(), made_up());
    let entries = [Entry { path: "a", outcome: Ok(&audited) }, Entry { path: "b", outcome: Ok(&other) }];
    let flat = |text: String| text.split_whitespace().collect::<Vec<_>>().join(" ");
    let text = flat(rendered(&TERMINAL, &entries)).replace("Bear in ", "").replace("mind ", "");
    let json = flat(rendered(&Json::Object, &entries[..1]));
    let worklist = rendered(&Worklist, &entries);
    for caution in CAUTIONS {
        assert_eq!(worklist.matches(caution).count(), 1, "{caution}");
        assert_eq!(text.matches(caution).count(), 1, "{caution}");
        assert_eq!(json.matches(caution).count(), 1, "{caution}");
    }
}

#[test]
fn a_worklist_ranks_what_needs_a_human() {
    let (sound, flawed) = (fixture("sound.md"), fixture("flawed.md"));
    let entries = [
        Entry { path: "sound.md", outcome: Ok(&sound) },
        Entry { path: "gone.md", outcome: Err("there is no such file") },
        Entry { path: "=1+1.md", outcome: Ok(&flawed) },
    ];
    let text = rendered(&Worklist, &entries);
    let mut table = csv::Reader::from_reader(text.as_bytes());
    let column = |name: &str, headers: &csv::StringRecord| headers.iter().position(|h| h == name).expect("a column");
    let headers = table.headers().expect("a header").clone();
    let rows: Vec<csv::StringRecord> = table.records().map(|r| r.expect("rows of one length")).collect();
    let named: Vec<&str> = rows.iter().map(|r| &r[column("manuscript", &headers)]).collect();
    // A name that a spreadsheet would compute is made plain text.
    assert_eq!(named, ["'=1+1.md", "sound.md", "gone.md", "", "", ""]);
    let count = |row: usize, level: &str| rows[row][column(level, &headers)].parse::<usize>().expect("a count");
    assert_eq!([count(0, "note"), count(0, "minor"), count(0, "major")], flawed.by_level());
    let rules = &rows[0][column("rules", &headers)];
    let sum: usize =
        rules.split("; ").map(|r| r.split(' ').next().and_then(|n| n.parse::<usize>().ok()).unwrap()).sum();
    assert_eq!(sum, flawed.queries.len());
    assert_eq!(&rows[2][column("remark", &headers)], "there is no such file");
}

#[test]
fn the_account_adds_up() {
    for audited in [made_up(), fixture("sound.md"), fixture("flawed.md")] {
        let account = Account::of(&audited);
        assert_eq!(account.read, account.checked + account.not_checked.values().sum::<usize>());
        assert!(account.sharp <= account.tallies && account.tallies + account.queried <= account.checked);
    }
    assert_eq!(Account::of(&made_up()).queried, 1);
}

#[test]
fn nothing_in_a_manuscript_steers_the_terminal() {
    let audited = audit("Sleep \u{1b}[2J was \u{202e}longer (P = 0.03).\n".as_bytes(), "\u{1b}[31m.md").expect("text");
    let entry = Entry { path: "\u{1b}[31m.md", outcome: Ok(&audited) };
    let mut out = Vec::new();
    TERMINAL.manuscript(&entry, &mut out).expect("a vector takes everything");
    let text = String::from_utf8(out).expect("reports are UTF-8");
    assert!(!text.contains("\u{1b}[2J") && !text.contains("\u{1b}[31m.md") && !text.contains('\u{202e}'));
}

#[test]
fn the_readme_shows_a_query_that_the_fixture_raises() {
    let path = format!("{}/README.md", env!("CARGO_MANIFEST_DIR"));
    let readme = std::fs::read_to_string(path).expect("the document is there");
    // The number of the query may change with the rules.
    let flat = |text: &str| text.split_whitespace().collect::<Vec<_>>().join(" ");
    let shown = readme.split("\n\n    Query ").nth(1).expect("it shows a query");
    let shown: Vec<&str> = shown.split("\n\n").take_while(|part| !part.starts_with("Then")).collect();
    let shown = flat(&shown.join("\n\n"));
    let (_, shown) = shown.split_once(' ').expect("a number stands first");
    let report = flat(&one(&TERMINAL, "flawed.md"));
    assert!(report.contains(shown), "the query in README.md is not in the report of fixtures/flawed.md: {shown}");
}
