//! Tables in less common shapes: symbols and sizes where readers find them all the same. All figures are invented.

use tallyproof::audit::audit;
use tallyproof::query::Verdict;
use tallyproof::reading::SpreadKind;
use tallyproof::report::Audited;

fn read(text: &str) -> Audited {
    audit(text.as_bytes(), "invented.md").expect("a text is a manuscript")
}

/// The verdicts of the results that hold a P, in order.
fn verdicts(a: &Audited) -> Vec<Verdict> {
    (0..a.results.len()).filter(|&i| a.results[i].p.is_some()).map(|i| a.checked[i].verdict).collect()
}

#[test]
fn a_symbol_at_the_end_of_a_head_is_that_of_its_column() {
    let a = read(
        "# Results\n\nTable 1. Moods before and after the choir\n\n\
         | Mood | Pre-test *z* | *p* | Post-test *z* | *p* |\n|---|---|---|---|---|\n\
         | Calm | 0.52 | 0.603 | 2.10 | 0.036 |\n| Cheer | 1.10 | 0.271 | 3.20 | 0.020 |\n",
    );
    assert_eq!(a.readings.statistics.len(), 4);
    // 2 (1 − Φ(z)): 0.6031, 0.0357, 0.2713 and 0.0014.
    assert_eq!(verdicts(&a), [Verdict::Tallies, Verdict::Tallies, Verdict::Tallies, Verdict::Differs]);
}

#[test]
fn a_p_with_a_word_set_low_and_a_test_in_its_own_cell_are_read() {
    let a = read(
        "# Results\n\nTable 1. Weight (mean, SD)\n\n|  | Oats | Rye | P~time~ | P~CO2~ |\n|---|---|---|---|---|\n\
         | Start, kg | 20.4 (4.9) | 24.6 (5.3) | <0.001 | 38.1 |\n| End, kg | 20.9 (4.8) | 24.9 (5.4) | 0.770 | 37.5 |\n",
    );
    assert_eq!(a.readings.p.len(), 2);
    let a = read(
        "# Results\n\nTable 1. Who took part\n\n\
         |  | Group Oats M | SE | Rye M | SE | Group differences |\n|---|---|---|---|---|---|\n\
         | Age | 18.9 | 0.3 | 18.8 | 0.3 | *F* = 0.36, NS |\n| Height | 171 | 1.4 | 170 | 1.5 | *F* = 0.56, NS |\n",
    );
    assert_eq!((a.readings.p.len(), a.readings.statistics.len()), (2, 2));
    assert_eq!(a.readings.groups.len(), 4);
}

#[test]
fn categories_that_make_the_group_show_the_percentage_that_is_off() {
    let a = read(
        "# Results\n\nTable 1. Where they lived, n (%)\n\n|  | Walk (n = 50) | Rest (n = 48) |\n|---|---|---|\n\
         | Dwelling |  |  |\n| House | 30 (60.0) | 24 (50.0) |\n| Flat | 14 (28.0) | 18 (35.7) |\n\
         | Boat | 6 (12.0) | 6 (12.5) |\n",
    );
    let off: Vec<String> = (0..a.results.len())
        .filter(|&i| a.checked[i].verdict == Verdict::Differs)
        .map(|i| a.readings.groups[a.results[i].groups[0]].percent.expect("a share").to_string())
        .collect();
    assert_eq!(off, ["35.7"]);
}

#[test]
fn one_standard_error_for_a_row_and_a_row_of_intervals() {
    let a = read(
        "# Results\n\nTable 1. Mean weights of the goats\n\n|  | Oats | Rye | SEM | P |\n|---|---|---|---|---|\n\
         | Weight, kg | 27.5 | 28.2 | 0.65 | 0.001 |\n| Girth, cm | 77.5 | 78.0 | 0.81 | 0.61 |\n",
    );
    assert_eq!(a.readings.groups[0].spread_kind, Some(SpreadKind::Se));
    assert_eq!(
        a.readings.groups.iter().map(|g| (g.mean.expect("a mean").to_string(), g.spread[0].to_string())).next(),
        Some(("27.5".to_string(), "0.65".to_string()))
    );
    assert!(verdicts(&a).iter().all(|&v| v != Verdict::Differs));
    let a = read(
        "# Results\n\nTable 1. Weights\n\n|  | Oats (n = 20) | Rye (n = 22) |\n|---|---|---|\n\
         | Weight, kg, mean (SD) | 61.2 (8.0) | 63.0 (9.1) |\n| 95% CI | 57.5 to 64.9 | 59.0 to 67.0 |\n",
    );
    let centres: Vec<String> =
        a.readings.intervals.iter().filter_map(|i| i.estimate.map(|e| e.0.to_string())).collect();
    assert_eq!(centres, ["61.2", "63.0"]);
}
