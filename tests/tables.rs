//! Tables: the plain shape is read whole, its near misses only as far as a P column goes. All figures are invented.

use tallyproof::audit::audit;
use tallyproof::query::Verdict;
use tallyproof::reading::{Inference, Measure, Origin, Relation, Role, SpreadKind};
use tallyproof::report::Audited;
use tallyproof::result::{Feature, ReportedResult};

fn read(text: &str) -> Audited {
    audit(text.as_bytes(), "invented.md").expect("a text is a manuscript")
}

/// `label: centre spread/percent [n or total]` of every group, in order.
fn groups(a: &Audited) -> Vec<String> {
    a.readings
        .groups
        .iter()
        .map(|g| {
            let size = |f: Option<tallyproof::reading::Figure>| f.map_or("–".into(), |f| f.printed.to_string());
            let spread: Vec<String> = g.spread.iter().map(|s| s.to_string()).collect();
            let kind = g.spread_kind.map_or(String::new(), |k| format!("{k:?} "));
            match (g.mean.or(g.median), g.events, g.percent) {
                (Some(centre), ..) => format!("{}: {centre} {kind}{} [{}]", g.label, spread.join(" "), size(g.n)),
                (None, Some(e), Some(p)) => format!("{}: {} {p}% [{}]", g.label, e.printed, size(g.total)),
                (None, Some(e), None) => format!("{}: {} [{}]", g.label, e.printed, size(g.total)),
                (_, _, p) => format!("{}: {}%", g.label, p.map_or("?".into(), |p| p.to_string())),
            }
        })
        .collect()
}

/// The results that hold a P, in order.
fn with_p(a: &Audited) -> Vec<&ReportedResult> {
    a.results.iter().filter(|r| r.p.is_some()).collect()
}

fn verdict(a: &Audited, result: &ReportedResult) -> Verdict {
    let at = a.results.iter().position(|r| std::ptr::eq(r, result)).expect("a result of this manuscript");
    a.checked[at].verdict
}

const PLAIN: &str = "\
# Results

Table 1. Sleep and snoring after twelve weeks of evening singing

|  | Singing (n = 40) | Reading (n = 38) | All (n = 78) | Difference (95% CI) | P value |
|---|---|---|---|---|---|
| Sleep time, hours, mean (SD) | 7.2 (1.1) | 6.5 (1.2) | 6.9 (1.2) | 0.7 (0.2 to 1.2) | 0.009 |
| Snoring, n (%) | 12 (30.0) | 20 (52.6) | 32 (41.0) | −22.6 (−43.9 to −1.4) | 0.04^a^ |
| Woke at night, n/N (%) | 9/39 (23) | 15/36 (42) | 24/75 (32) |  | 0.09 |
| Naps, median (IQR) | 3 (1–5) | 4 (2–6) | 4 (1–6) |  | <0.001 |

^a^ Chi-squared test.
";

#[test]
fn the_plain_shape_is_read_whole() {
    let a = read(PLAIN);
    assert_eq!(
        groups(&a),
        [
            "Singing: 7.2 Sd 1.1 [40]",
            "Reading: 6.5 Sd 1.2 [38]",
            "All: 6.9 Sd 1.2 [78]",
            "Singing: 12 30.0% [40]",
            "Reading: 20 52.6% [38]",
            "All: 32 41.0% [78]",
            "Singing: 9 23% [39]",
            "Reading: 15 42% [36]",
            "All: 24 32% [75]",
            "Singing: 3 Iqr 1 5 [40]",
            "Reading: 4 Iqr 2 6 [38]",
            "All: 4 Iqr 1 6 [78]",
        ]
    );
    let sizes = a.readings.groups[0].n.expect("the header prints it");
    let Origin::Inferred(Inference::Header, span) = sizes.origin else { panic!("{sizes:?}") };
    assert_eq!(a.manuscript.quote(span), "40");
    let p: Vec<_> = a.readings.p.iter().map(|p| (p.relation, p.value.map(|v| v.to_string()))).collect();
    let p: Vec<_> = p.iter().map(|(r, v)| (*r, v.as_deref())).collect();
    use Relation::{Equal, Less};
    assert_eq!(p, [(Equal, Some("0.009")), (Equal, Some("0.04")), (Equal, Some("0.09")), (Less, Some("0.001"))]);
    assert!(a.readings.p.iter().all(|p| p.role == Role::Effect));
    let measures: Vec<_> = a.readings.estimates.iter().map(|e| (e.measure, e.percent)).collect();
    assert_eq!(measures, [(Measure::MeanDifference, false), (Measure::RiskDifference, true)]);
    let level = a.readings.intervals[1].level.expect("the header prints it");
    assert_eq!(a.readings.intervals[1].lower.to_string(), "−43.9");
    assert_eq!(level.printed.to_string(), "95");
}

#[test]
fn rows_of_the_plain_shape_become_results_without_the_column_of_all() {
    let a = read(PLAIN);
    let rows = with_p(&a);
    let members: Vec<_> = rows.iter().map(|r| (r.groups.clone(), r.interval, r.estimate)).collect();
    assert_eq!(
        members,
        [
            (vec![0, 1], Some(0), Some(0)),
            (vec![3, 4], Some(1), Some(1)),
            (vec![6, 7], None, None),
            (vec![9, 10], None, None),
        ]
    );
    assert!(rows[1].tests.iter().any(|t| t.here && t.test.value.name() == "chi-squared test"), "{:?}", rows[1].tests);
    assert!(rows[0].tests.iter().all(|t| !t.here));
    assert!(rows[3].has(Feature::Ranked));
    let verdicts: Vec<_> = rows.iter().map(|r| verdict(&a, r)).collect();
    assert_eq!(verdicts[..3], [Verdict::Tallies; 3]);
    assert_eq!(verdicts[3], Verdict::Undecided);
    // Each count with its percent stands for itself, the column of all included.
    let alone = a.results.iter().filter(|r| r.p.is_none()).collect::<Vec<_>>();
    assert_eq!(alone.len(), 6);
    assert!(alone.iter().all(|r| verdict(&a, r) == Verdict::Tallies));
}

#[test]
fn what_brackets_hold_may_stand_in_header_caption_or_notes() {
    let header = read(
        "|  | Oats (n=50) mean (SD) | Rye (N=48) mean (SD) | P |\n|---|---|---|---|\n| Weight, kg | 71.2 (9.8) | 70.1 (10.4) | .59 |\n",
    );
    assert_eq!(groups(&header), ["Oats: 71.2 Sd 9.8 [50]", "Rye: 70.1 Sd 10.4 [48]"]);
    let notes = "\
Table 2. Porridge eaters

|  | Oats (n = 50) | Rye (n = 48) | P |
|---|---|---|---|
| Weight, kg | 71.2 (9.8) | 70.1 (10.4) | .59 |
| Left-handed | 5 (10.0) | 6 (12.5) | .69 |
| Recall score | 42 (11) | 44 (12) | .39 |

Values are mean (SE) or n (%).
";
    // A whole number that is no share of the group may be either: it is left alone.
    assert_eq!(
        groups(&read(notes)),
        ["Oats: 71.2 Se 9.8 [50]", "Rye: 70.1 Se 10.4 [48]", "Oats: 5 10.0% [50]", "Rye: 6 12.5% [48]",]
    );
    let silent = notes.replace("Values are mean (SE) or n (%).", "");
    assert_eq!(groups(&read(&silent))[0], "Oats: 71.2 Unstated 9.8 [50]");
    assert_eq!(groups(&read(&silent)).len(), 4);
}

#[test]
fn plus_minus_and_sizes_in_a_row_below_the_header() {
    let a = read(
        "Table 3. Values are mean ± SEM\n\n| Outcome | Tea | Water | P |\n|---|---|---|---|\n| | n = 12 | n = 14 | |\n| Thirst | 4.2 ± 0.3 | 5.1±0.4* | NS |\n",
    );
    assert_eq!(groups(&a), ["Tea: 4.2 Se 0.3 [12]", "Water: 5.1 Se 0.4 [14]"]);
    assert_eq!(a.readings.p[0].relation, Relation::NotSignificant);
    assert_eq!(with_p(&a)[0].groups, [0, 1]);
}

#[test]
fn p_cells_in_their_many_forms() {
    let cells = [
        ("0.03", "Equal 0.03"),
        (".02", "Equal 0.02"),
        ("<0.001", "Less 0.001"),
        ("< .05*", "Less 0.05"),
        ("0.02^a^", "Equal 0.02"),
        ("0.18A", "Equal 0.18"),
        ("**0.006** B", "Equal 0.006"),
        ("=0.49", "Equal 0.49"),
        ("*P* = 0.3", "Equal 0.3"),
        ("0·04", "Equal 0.04"),
        ("0,145", "Equal 0.145"),
        ("≥ 0.10", "AtLeast 0.10"),
        ("n.s.", "NotSignificant"),
        ("1.2 × 10^−5^", "Equal 1.2 × 10^-5"),
        ("0.029/<0.001", "Equal 0.029, Less 0.001"),
        ("–", ""),
        ("", ""),
        ("12.4", ""),
        ("3 (12)", ""),
        ("see text", ""),
    ];
    for (cell, want) in cells {
        let a = read(&format!("| Thing | Score | p-value |\n|---|---|---|\n| Apples | 3 | {cell} |\n"));
        let found: Vec<String> = a
            .readings
            .p
            .iter()
            .map(|p| match p.value {
                Some(v) => format!("{:?} {v}", p.relation),
                None => format!("{:?}", p.relation),
            })
            .collect();
        assert_eq!(found.join(", "), want, "{cell}");
    }
}

#[test]
fn near_misses_give_their_p_values_and_nothing_else() {
    let tables = [
        // one group at two times
        "|  | Before (n = 30) | After (n = 30) | P |\n|---|---|---|---|\n| Mood, mean (SD) | 4.1 (1.0) | 5.2 (1.1) | 0.01 |\n",
        // two comparisons side by side
        "|  | Boys A (n = 10) | Boys B (n = 11) | P | Girls A (n = 12) | Girls B (n = 9) | P |\n|---|---|---|---|---|---|---|\n| Mood, mean (SD) | 4.1 (1.0) | 5.2 (1.1) | 0.03 | 4.1 (1.0) | 5.2 (1.1) | 0.04 |\n",
        // a column that is none of the parts
        "|  | Tea (n = 30) | Water (n = 30) | Score | P |\n|---|---|---|---|---|\n| Mood, mean (SD) | 4.1 (1.0) | 5.2 (1.1) | 3 | 0.01 |\n",
        // no sizes
        "|  | Tea | Water | P |\n|---|---|---|---|\n| Mood, mean (SD) | 4.1 (1.0) | 5.2 (1.1) | 0.01 |\n",
        // the header is repeated for other groups
        "|  | Tea (n = 30) | Water (n = 30) | P |\n|---|---|---|---|\n| Mood, mean (SD) | 4.1 (1.0) | 5.2 (1.1) | 0.01 |\n| Week 8 | Tea (n = 21) | Water (n = 22) | P |\n| Mood, mean (SD) | 4.1 (1.0) | 5.2 (1.1) | 0.01 |\n",
        // P of a trend
        "|  | Tea (n = 30) | Water (n = 30) | P for interaction |\n|---|---|---|---|\n| Mood, mean (SD) | 4.1 (1.0) | 5.2 (1.1) | 0.01 |\n",
    ];
    for table in tables {
        let a = read(table);
        assert!(!a.readings.p.is_empty(), "{table}");
        assert_eq!(groups(&a), [""; 0], "{table}");
        assert!(a.results.iter().all(|r| r.groups.is_empty() && r.interval.is_none()), "{table}");
    }
}

#[test]
fn a_row_of_p_values_under_groups_is_within_them() {
    let a = read(
        "|  | Tea (n = 30) | Water (n = 30) | P |\n|---|---|---|---|\n| Mood, mean (SD) | 4.1 (1.0) | 5.2 (1.1) | 0.01 |\n| P value | 0.2 | <0.05 | – |\n",
    );
    let roles: Vec<_> = a.readings.p.iter().map(|p| p.role).collect();
    assert_eq!(roles, [Role::Effect, Role::WithinGroup, Role::WithinGroup]);
    assert!(with_p(&a)[1..].iter().all(|r| r.groups.is_empty()));
}

#[test]
fn what_the_analysis_was_holds_the_row_back() {
    let a = read(
        "\
Table 4. Outcomes of the humming trial

| Outcome | Humming (n = 61) | Silence (n = 59) | Adjusted difference (95% CI) | P |
|---|---|---|---|---|
| Change in calm score, mean (SD) | 3.1 (4.0) | 1.2 (4.2) | 1.8 (0.3 to 3.3) | 0.02 |
| *Blood pressure, mean (SD)* |  |  |  |  |
| Systolic | 128.1 (11.0) | 131.4 (12.1) | −3.0 (−7.2 to 1.2) | 0.16 |
",
    );
    let rows = with_p(&a);
    assert!(rows[0].has(Feature::Change) && rows[0].has(Feature::Adjusted));
    assert!(rows[1].has(Feature::Adjusted) && !rows[1].has(Feature::Change));
    assert_eq!(groups(&a)[2], "Humming: 128.1 Sd 11.0 [61]");
    assert!(a.readings.estimates.iter().all(|e| e.adjusted));
}

#[test]
fn baseline_tables_have_baseline_p_values() {
    let a = read(
        "Table 1. Baseline characteristics of the two choirs\n\n|  | Altos (n = 30) | Basses (n = 30) | P |\n|---|---|---|---|\n| Age, years, mean (SD) | 44.1 (9.0) | 45.2 (8.1) | 0.62 |\n",
    );
    assert_eq!(a.readings.p[0].role, Role::Baseline);
    assert!(!with_p(&a)[0].has(Feature::Paired));
}

#[test]
fn a_percentage_of_fewer_people_is_no_objection() {
    // 29 (46.8) is of 62, not of 72: some answers are missing.
    let a = read(
        "|  | Tea (n = 72) | Water (n = 66) | P |\n|---|---|---|---|\n| Thirsty, n (%) | 29 (46.8) | 26 (41.9) | 0.59 |\n| Tired, n (%) | 12 (18) | 20 (31) | 0.11 |\n",
    );
    assert_eq!(groups(&a), ["Tea: 29 46.8% [62]", "Water: 26 41.9% [62]", "Tea: 12 18% [–]", "Water: 20 31% [–]"]);
    assert!(a.checked.iter().all(|c| c.verdict != Verdict::Differs));
    assert!(a.results.iter().all(|r| r.p.is_some()), "no arithmetic on a total that the percentage gave");
}

#[test]
fn a_p_for_several_categories_is_not_that_of_one() {
    let a = read(
        "\
|  |  | Tea (n = 30) | Water (n = 30) | P |
|---|---|---|---|---|
| Sex, n (%) | Women | 12 (40.0) | 18 (60.0) | 0.12 |
|  | Men | 18 (60.0) | 12 (40.0) |  |
| School, n (%) | Lower | 18 (60.0) | 18 (60.0) | 0.47 |
|  | Middle | 8 (26.7) | 5 (16.7) |  |
|  | Upper | 4 (13.3) | 7 (23.3) |  |
",
    );
    let rows = with_p(&a);
    assert_eq!(verdict(&a, rows[0]), Verdict::Tallies);
    assert!(rows[1].has(Feature::OtherGroups));
    assert_eq!(verdict(&a, rows[1]), Verdict::Undecided);
}

#[test]
fn a_wrong_p_is_objected_to() {
    let a = read(
        "|  | Tea (n = 50) | Water (n = 50) | P |\n|---|---|---|---|\n| Calm score, mean (SD) | 14.1 (3.0) | 10.2 (3.1) | 0.41 |\n| Slept, n (%) | 30 (60.0) | 28 (56.0) | 0.69 |\n",
    );
    let verdicts: Vec<_> = with_p(&a).iter().map(|r| verdict(&a, r)).collect();
    assert_eq!(verdicts, [Verdict::Differs, Verdict::Tallies]);
}

#[test]
fn readings_stay_in_reading_order_across_blocks() {
    let a = read(&format!("Before it, calm was better (P = 0.03).\n\n{PLAIN}\nAfter it, calm was worse (P = 0.04).\n"));
    let sentences: Vec<_> = a.readings.p.iter().map(|p| p.sentence).collect();
    assert!(sentences.is_sorted());
    assert_eq!(sentences.len(), 6);
    assert!(a.readings.groups.iter().map(|g| g.span).collect::<Vec<_>>().is_sorted());
    assert_eq!(a.readings.groups[0].spread_kind, Some(SpreadKind::Sd));
}
