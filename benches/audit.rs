//! Time and memory of the whole audit: manuscripts of one to eight megabytes in the proportions of a
//! real paper, texts made to hurt, and the Markdown parser alone for comparison.
//!
//! `cargo bench` times. `cargo bench --bench audit -- peak` prints the peak memory instead, and
//! `-- passes` the time of each pass by size: a pass that more than doubles when the text doubles is
//! not linear.

use std::alloc::{GlobalAlloc, Layout, System};
use std::fmt::Write;
use std::sync::atomic::{AtomicUsize, Ordering};
use std::time::Instant;

use divan::counter::BytesCount;
use divan::{Bencher, black_box};
use tallyproof::audit::audit;
use tallyproof::report::{Entry, Json, Report};
use tallyproof::rule::{self, Facts};
use tallyproof::{context, intake, reading, recompute, result};

/// The system's allocator, counting what is held and the most that was.
struct Counting;

static HELD: AtomicUsize = AtomicUsize::new(0);
static PEAK: AtomicUsize = AtomicUsize::new(0);

#[global_allocator]
static ALLOCATOR: Counting = Counting;

fn grown(by: usize) {
    let held = HELD.fetch_add(by, Ordering::Relaxed) + by;
    PEAK.fetch_max(held, Ordering::Relaxed);
}

// SAFETY: every call goes to the system's allocator unchanged; the counters hold no memory.
unsafe impl GlobalAlloc for Counting {
    unsafe fn alloc(&self, layout: Layout) -> *mut u8 {
        grown(layout.size());
        // SAFETY: the caller keeps to the contract of `alloc`, which is passed on.
        unsafe { System.alloc(layout) }
    }

    unsafe fn dealloc(&self, at: *mut u8, layout: Layout) {
        HELD.fetch_sub(layout.size(), Ordering::Relaxed);
        // SAFETY: `at` came from the system's allocator with this layout.
        unsafe { System.dealloc(at, layout) }
    }

    unsafe fn realloc(&self, at: *mut u8, layout: Layout, size: usize) -> *mut u8 {
        grown(size);
        HELD.fetch_sub(layout.size(), Ordering::Relaxed);
        // SAFETY: as for `dealloc`; the new size is the caller's to answer for.
        unsafe { System.realloc(at, layout, size) }
    }
}

fn main() {
    let asked = |word: &str| std::env::args().any(|a| a == word);
    if asked("peak") {
        peak();
    } else if asked("passes") {
        passes();
    } else {
        divan::main();
    }
}

/// Milliseconds of each pass.
fn passes() {
    for megabytes in [1, 2, 4, 8] {
        let text = manuscript(megabytes << 20);
        let mut times = Vec::new();
        let mut last = Instant::now();
        let mut pass = |name: &'static str| {
            times.push(format!("{name} {}", last.elapsed().as_millis()));
            last = Instant::now();
        };
        let (manuscript, _) = intake::read(text.as_bytes(), "bench.md", None).expect("it is text");
        pass("intake");
        let scan = reading::scan(&manuscript);
        pass("scan");
        let readings = reading::read(&manuscript, &scan);
        pass("reading");
        let context = context::gather(&manuscript, &scan, &readings);
        pass("context");
        let results = result::join(&manuscript, &scan, &readings);
        pass("result");
        let checked = recompute::recompute(&readings, &context, &results);
        pass("recompute");
        let facts = Facts {
            manuscript: &manuscript,
            scan: &scan,
            readings: &readings,
            context: &context,
            results: &results,
            checked: &checked,
        };
        black_box(rule::queries(&facts));
        pass("rule");
        println!("{megabytes} MB, milliseconds: {}", times.join(", "));
    }
}

fn peak() {
    for megabytes in [1, 2, 4, 8] {
        let text = manuscript(megabytes << 20);
        let before = HELD.load(Ordering::Relaxed);
        PEAK.store(before, Ordering::Relaxed);
        let audited = audit(text.as_bytes(), "bench.md");
        let (most, kept) = (PEAK.load(Ordering::Relaxed) - before, HELD.load(Ordering::Relaxed) - before);
        drop(black_box(audited));
        println!("{megabytes} MB of text: at most {} MB held, {} MB kept", most >> 20, kept >> 20);
    }
}

/// A small generator of even numbers: the same text in every run.
struct Dice(u64);

impl Dice {
    fn below(&mut self, limit: u64) -> u64 {
        self.0 = self.0.wrapping_mul(6_364_136_223_846_793_005).wrapping_add(1_442_695_040_888_963_407);
        (self.0 >> 33) % limit
    }

    fn decimal(&mut self, limit: u64, places: usize) -> String {
        let scale = 10u64.pow(places as u32);
        let value = self.below(limit * scale);
        format!("{}.{:0places$}", value / scale, value % scale)
    }
}

const PROSE: [&str; 6] = [
    "Participants kept a diary of their evenings and brought it to each visit, where it was read and copied. ",
    "The practice was taught in a quiet room by one of four teachers, none of whom saw the outcome forms. ",
    "Earlier work on the same coast had suggested that the season matters more than the hour of the day. ",
    "Visits took place in weeks 4, 8 and 12, and a letter was sent to those who had missed one of them. ",
    "We were unable to follow those who moved inland, and we cannot say whether they fared otherwise. ",
    "In 2019 the harbour was closed for 3 months, during which 2 of the 5 rooms could not be used (Fig. 2). ",
];

/// About `size` bytes: seven parts of prose to two of results and one of tables.
fn manuscript(size: usize) -> String {
    let mut dice = Dice(1);
    let mut text = String::with_capacity(size + 4096);
    text.push_str(
        "# A trial\n\n## Methods\n\nP < 0.05 was considered significant; tests were two-sided.\n\n## Results\n\n",
    );
    let mut table = 0;
    while text.len() < size {
        for _ in 0..7 + dice.below(6) {
            text.push_str(PROSE[dice.below(6) as usize]);
        }
        text.push_str("\n\n");
        for _ in 0..2 + dice.below(3) {
            sentence(&mut dice, &mut text);
        }
        text.push_str("\n\n");
        if dice.below(4) == 0 {
            table += 1;
            rows(&mut dice, &mut text, table);
        }
    }
    text
}

fn sentence(dice: &mut Dice, text: &mut String) {
    let (n, m) = (40 + dice.below(90), 40 + dice.below(90));
    let p = dice.decimal(1, 3);
    let written = match dice.below(5) {
        0 => {
            let (a, s, b, t) = (dice.decimal(90, 1), dice.decimal(20, 1), dice.decimal(90, 1), dice.decimal(20, 1));
            write!(text, "The score was {a} ± {s} with practice (n = {n}) and {b} ± {t} without (n = {m}; P = {p}). ")
        }
        1 => {
            let (a, b) = (dice.below(n), dice.below(m));
            let (x, y) = (100 * a / n, 100 * b / m);
            write!(text, "A response was seen in {a}/{n} ({x}%) and {b}/{m} ({y}%), respectively (P = {p}). ")
        }
        2 => {
            let (e, l, u) = (dice.decimal(3, 2), dice.decimal(1, 2), dice.decimal(6, 2));
            write!(text, "The hazard ratio was {e} (95% CI {l} to {u}; P = {p}). ")
        }
        3 => {
            let t = dice.decimal(4, 2);
            write!(text, "Walking improved more with practice (t({}) = {t}, P = {p}). ", n + m - 2)
        }
        _ => write!(text, "There was no significant difference between the groups in sleep (P = {p}). "),
    };
    written.expect("a string takes everything");
}

fn rows(dice: &mut Dice, text: &mut String, number: usize) {
    let (n, m) = (40 + dice.below(90), 40 + dice.below(90));
    let mut add = |line: String| text.push_str(&line);
    add(format!(
        "Table {number}. Outcomes.\n\n| Outcome | Practice (n = {n}) | Leaflet (n = {m}) | P |\n|---|---|---|---|\n"
    ));
    for row in 0..6 + dice.below(10) {
        let (a, s) = (dice.decimal(90, 1), dice.decimal(20, 1));
        let (b, t) = (dice.decimal(90, 1), dice.decimal(20, 1));
        add(format!("| Outcome {row} | {a} ± {s} | {b} ± {t} | {} |\n", dice.decimal(1, 3)));
    }
    add("\n".to_owned());
}

#[divan::bench(args = [1, 2, 4, 8], sample_count = 5)]
fn whole_audit(bencher: Bencher, megabytes: usize) {
    time(bencher, &manuscript(megabytes << 20));
}

#[divan::bench(sample_count = 5)]
fn json_report_of_a_megabyte(bencher: Bencher) {
    let text = manuscript(1 << 20);
    let audited = audit(text.as_bytes(), "bench.md").expect("it is text");
    bencher.counter(BytesCount::new(text.len())).bench_local(|| {
        let entry = Entry { path: "bench.md", outcome: Ok(&audited) };
        let mut out = Vec::new();
        Json::Lines.manuscript(&entry, &mut out).expect("a vector takes everything");
        black_box(out)
    });
}

/// What the parser alone needs for the same text: the floor under `whole_audit`.
#[divan::bench(args = [1, 8], sample_count = 5)]
fn markdown_parser_alone(bencher: Bencher, megabytes: usize) {
    let text = manuscript(megabytes << 20);
    bencher.counter(BytesCount::new(text.len())).bench_local(|| {
        let options = pulldown_cmark::Options::all();
        black_box(pulldown_cmark::Parser::new_ext(&text, options).into_offset_iter().count())
    });
}

#[divan::bench(sample_count = 3)]
fn one_line_of_eight_megabytes(bencher: Bencher) {
    // Without its signs, or the whole line would be one heading.
    time(bencher, &manuscript(8 << 20).replace(['\n', '#'], " "));
}

/// Without full stops, so that it is one sentence.
#[divan::bench(args = [1, 2], sample_count = 3)]
fn one_sentence(bencher: Bencher, megabytes: usize) {
    time(bencher, &"12 (30%) v 14 (35%), no difference (P = 0.03, OR 1.2 (0.8 to 1.9)), ".repeat(megabytes << 14));
}

#[divan::bench(sample_count = 3)]
fn a_test_for_every_result(bencher: Bencher) {
    let text =
        format!("# Methods\n\n{}# Results\n\n{}", "We used the t test. ".repeat(10_000), "P = 0.03. ".repeat(10_000));
    time(bencher, &text);
}

#[divan::bench(sample_count = 3)]
fn a_table_of_zeros(bencher: Bencher) {
    time(bencher, &format!("| a | P |\n|---|---|\n{}", "| x | 0.000 |\n".repeat(30_000)));
}

#[divan::bench(sample_count = 3)]
fn open_brackets(bencher: Bencher) {
    time(bencher, &"(".repeat(100_000));
}

#[divan::bench(sample_count = 3)]
fn open_square_brackets(bencher: Bencher) {
    time(bencher, &"[".repeat(100_000));
}

#[divan::bench(sample_count = 3)]
fn digits(bencher: Bencher) {
    time(bencher, &"7".repeat(100_000));
}

#[divan::bench(sample_count = 3)]
fn plus_minus(bencher: Bencher) {
    time(bencher, &"±".repeat(100_000));
}

#[divan::bench(sample_count = 3)]
fn p_without_end(bencher: Bencher) {
    time(bencher, &"P = 0.03, ".repeat(20_000));
}

#[divan::bench(sample_count = 3)]
fn one_wide_table(bencher: Bencher) {
    let row = format!("|{}\n", " 1.2 ± 0.3 |".repeat(2_000));
    let text = format!("|{}\n|{}\n{}", " a |".repeat(2_000), "---|".repeat(2_000), row.repeat(20));
    time(bencher, &text);
}

fn time(bencher: Bencher, text: &str) {
    bencher.counter(BytesCount::new(text.len())).bench_local(|| black_box(audit(text.as_bytes(), "bench.md").is_ok()));
}
