//! Time and memory of the whole audit: manuscripts of one to eight megabytes in the proportions of a
//! real paper, texts made to hurt, and the Markdown parser alone for comparison.
//!
//! `cargo bench` times. `cargo bench --bench audit -- peak` prints the peak memory instead, and
//! `-- passes` the time of each pass by size: a pass that more than doubles when the text doubles is
//! not linear. `-- text` prints the generated megabyte, for a profiler.

use std::alloc::{GlobalAlloc, Layout, System};
use std::fmt::Write;
use std::sync::atomic::{AtomicUsize, Ordering};
use std::time::Instant;

use divan::counter::BytesCount;
use divan::{Bencher, black_box};
use tallyproof::audit::audit;
use tallyproof::distribution::{fisher_exact, normal, student_two_sided};
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
    } else if asked("text") {
        print!("{}", manuscript(1 << 20));
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

/// About `size` bytes in the proportions of 508 open-access trial reports: 8 % of their text stands in tables, and
/// running text holds about 370 p-values a megabyte (here some more). Nearly all figures tally, as they do in print.
fn manuscript(size: usize) -> String {
    let mut dice = Dice(1);
    let mut text = String::with_capacity(size + 4096);
    text.push_str(
        "# A trial\n\n## Methods\n\nP < 0.05 was considered significant; tests were two-sided.\n\n## Results\n\n",
    );
    let mut table = 0;
    while text.len() < size {
        for _ in 0..16 {
            for _ in 0..5 + dice.below(6) {
                text.push_str(PROSE[dice.below(6) as usize]);
            }
            if dice.below(2) == 0 {
                sentence(&mut dice, &mut text);
            }
            text.push_str("\n\n");
        }
        table += 1;
        rows(&mut dice, &mut text, table);
    }
    text
}

/// A p as it would be printed, seldom (one in forty) with a slip.
fn printed_p(dice: &mut Dice, p: f64) -> String {
    let p = if dice.below(40) == 0 { (p * 7.0).min(0.99) } else { p };
    if p < 0.001 { "P < 0.001".to_owned() } else { format!("P = {p:.3}") }
}

/// Two means with SDs in tenths, and the p of the pooled t test.
fn two_means(dice: &mut Dice, n: u64, m: u64) -> ([f64; 4], f64) {
    let tenths = |x: u64| x as f64 / 10.0;
    let (a, s, t) = (300 + dice.below(300), 60 + dice.below(60), 60 + dice.below(60));
    let b = a + dice.below(80);
    let [a, s, b, t] = [a, s, b, t].map(tenths);
    let (x, y) = (n as f64, m as f64);
    let pooled = ((x - 1.0) * s * s + (y - 1.0) * t * t) / (x + y - 2.0);
    let statistic = (a - b) / (pooled * (1.0 / x + 1.0 / y)).sqrt();
    ([a, s, b, t], student_two_sided(statistic, x + y - 2.0).unwrap_or(1.0))
}

fn sentence(dice: &mut Dice, text: &mut String) {
    let (n, m) = (40 + dice.below(90), 40 + dice.below(90));
    let written = match dice.below(5) {
        0 => {
            let ([a, s, b, t], p) = two_means(dice, n, m);
            let p = printed_p(dice, p);
            write!(
                text,
                "The score was {a:.1} ± {s:.1} with practice (n = {n}) and {b:.1} ± {t:.1} without (n = {m}; {p}). "
            )
        }
        1 => {
            let (a, b) = (1 + dice.below(n - 1), 1 + dice.below(m - 1));
            let (x, y) = (100.0 * a as f64 / n as f64, 100.0 * b as f64 / m as f64);
            let p = fisher_exact(a, n - a, b, m - b).map_or(1.0, |f| f.two_sided);
            let p = printed_p(dice, p);
            write!(text, "A response was seen in {a}/{n} ({x:.1}%) and {b}/{m} ({y:.1}%), respectively ({p}). ")
        }
        2 => {
            let (log, se) = (dice.below(160) as f64 / 100.0 - 0.8, 0.1 + dice.below(30) as f64 / 100.0);
            let [e, l, u] = [log, log - 1.96 * se, log + 1.96 * se].map(f64::exp);
            let tails = normal(log / se);
            let p = printed_p(dice, 2.0 * tails.lower.min(tails.upper));
            write!(text, "The hazard ratio was {e:.2} (95% CI {l:.2} to {u:.2}; {p}). ")
        }
        3 => {
            let (t, df) = (dice.below(400) as f64 / 100.0, n + m - 2);
            let p = student_two_sided(t, df as f64).unwrap_or(1.0);
            let p = printed_p(dice, p);
            write!(text, "Walking improved more with practice (t({df}) = {t:.2}, {p}). ")
        }
        _ => {
            let p = dice.decimal(1, 3);
            write!(text, "There was no significant difference between the groups in sleep (P = {p}). ")
        }
    };
    written.expect("a string takes everything");
}

fn rows(dice: &mut Dice, text: &mut String, number: usize) {
    let (n, m) = (40 + dice.below(90), 40 + dice.below(90));
    let mut add = |line: String| text.push_str(&line);
    add(format!(
        "Table {number}. Outcomes, mean ± SD.\n\n| Outcome | Practice (n = {n}) | Leaflet (n = {m}) | P |\n|---|---|---|---|\n"
    ));
    for row in 0..14 + dice.below(16) {
        let ([a, s, b, t], p) = two_means(dice, n, m);
        let p = printed_p(dice, p).replace("P = ", "").replace("P ", "");
        add(format!("| Outcome {row} | {a:.1} ± {s:.1} | {b:.1} ± {t:.1} | {p} |\n"));
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
