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
    // 42 of 50 is no 11 %, and 44 of 48 no 12 %: what else is said must hold.
    assert_eq!(
        groups(&read(notes)),
        [
            "Oats: 71.2 Se 9.8 [50]",
            "Rye: 70.1 Se 10.4 [48]",
            "Oats: 5 10.0% [50]",
            "Rye: 6 12.5% [48]",
            "Oats: 42 Se 11 [50]",
            "Rye: 44 Se 12 [48]",
        ]
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
fn doubtful_comparisons_are_never_objected_to() {
    let tables = [
        // one group at two times
        "|  | Before (n = 30) | After (n = 30) | P |\n|---|---|---|---|\n| Mood, mean (SD) | 4.1 (1.0) | 5.2 (1.1) | 0.91 |\n",
        // two P for one pair of groups
        "|  | Tea (n = 30) | Water (n = 30) | P | Adjusted P |\n|---|---|---|---|---|\n| Mood, mean (SD) | 4.1 (1.0) | 5.2 (1.1) | 0.91 | 0.83 |\n",
        // two arms at two times
        "|  | Tea before (n = 30) | Tea after (n = 30) | Water before (n = 31) | Water after (n = 31) | P |\n|---|---|---|---|---|---|\n| Mood, mean (SD) | 4.1 (1.0) | 5.2 (1.1) | 4.1 (1.0) | 5.2 (1.1) | 0.91 |\n",
        // sizes from the caption alone
        "Table 1. Mood in tea drinkers (n = 30 in each group)\n\n|  | Tea | Water | P |\n|---|---|---|---|\n| Mood, mean (SD) | 4.1 (1.0) | 5.2 (1.1) | 0.91 |\n",
        // P of an interaction
        "|  | Tea (n = 30) | Water (n = 30) | P for interaction |\n|---|---|---|---|\n| Mood, mean (SD) | 4.1 (1.0) | 5.2 (1.1) | 0.91 |\n",
        // percentages that share out the row
        "|  | Tea | Water | P |\n|---|---|---|---|\n| Women, n (%) | 60 (60.0) | 40 (40.0) | 0.91 |\n",
        // a rank test marked at the P
        "|  | Tea (n = 30) | Water (n = 30) | P |\n|---|---|---|---|\n| Mood, mean (SD) | 4.1 (1.0) | 5.2 (1.1) | 0.91^b^ |\n\n^b^ Mann–Whitney test.\n",
    ];
    for table in tables {
        let a = read(table);
        assert!(!a.readings.p.is_empty(), "{table}");
        assert!(a.checked.iter().all(|c| c.verdict != Verdict::Differs), "{table}");
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
    assert_eq!((rows[0].arms, rows[1].arms), (2, 2));
    assert_eq!(rows[0].groups.len(), 4);
    assert_eq!(rows[1].groups.len(), 6);
    let verdicts: Vec<_> = rows.iter().map(|r| verdict(&a, r)).collect();
    assert_eq!(verdicts, [Verdict::Tallies; 2]);
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

/// A table in both formats. Rows are cells between `|`; `2>` in front spans columns, `2v` spans rows. Markdown has the
/// header in one line and spans in their first place only; journal XML has both as they are.
fn both(caption: &str, head: &[&str], body: &[&str], notes: &str) -> [Audited; 2] {
    let parse = |cell: &str| {
        let cell = cell.trim();
        let span = |mark: char| {
            let (n, rest) = cell.split_once(mark)?;
            Some((n.parse::<usize>().ok()?, rest.to_string()))
        };
        match (span('>'), span('v')) {
            (Some((n, rest)), _) => (n, 1, rest),
            (_, Some((n, rest))) => (1, n, rest),
            _ => (1, 1, cell.to_string()),
        }
    };
    let rows: Vec<Vec<(usize, usize, String)>> =
        head.iter().chain(body).map(|r| r.split('|').map(parse).collect()).collect();
    let width = rows[0].iter().map(|c| c.0).sum();
    // The place of each cell, with those that span down from above left out.
    let mut taken = vec![0usize; width];
    let mut grid: Vec<Vec<String>> = Vec::new();
    for row in &rows {
        let mut line = vec![String::new(); width];
        let mut next = taken.clone();
        let mut at = 0;
        for (columns, down, text) in row {
            while at < width && taken[at] > 0 {
                at += 1;
            }
            line[at] = text.clone();
            next[at..at + columns].fill(*down);
            at += columns;
        }
        next.iter_mut().for_each(|d| *d = d.saturating_sub(1));
        taken = next;
        grid.push(line);
    }
    let headed: Vec<String> = (0..width)
        .map(|k| {
            let parts = grid[..head.len()].iter().map(|r| r[k].as_str()).filter(|t| !t.is_empty());
            parts.collect::<Vec<_>>().join(" ")
        })
        .collect();
    let line = |cells: &[String]| format!("| {} |\n", cells.join(" | "));
    let mut markdown = format!("Table 1. {caption}\n\n{}{}", line(&headed), line(&vec!["---".to_string(); width]));
    grid[head.len()..].iter().for_each(|r| markdown.push_str(&line(r)));
    markdown.push_str(&format!("\n{notes}\n"));

    let escape = |t: &str| t.replace('&', "&amp;").replace('<', "&lt;");
    let tr = |row: &Vec<(usize, usize, String)>, tag: &str| {
        let cells = row.iter().map(|(c, r, t)| format!("<{tag} colspan=\"{c}\" rowspan=\"{r}\">{}</{tag}>", escape(t)));
        format!("<tr>{}</tr>", cells.collect::<String>())
    };
    let heads: String = rows[..head.len()].iter().map(|r| tr(r, "th")).collect();
    let rest: String = rows[head.len()..].iter().map(|r| tr(r, "td")).collect();
    let foot = if notes.is_empty() {
        String::new()
    } else {
        format!("<table-wrap-foot><fn><p>{}</p></fn></table-wrap-foot>", escape(notes))
    };
    let jats = format!(
        "<article><body><sec><title>Results</title><table-wrap><label>Table 1</label><caption><p>{}</p></caption><table><thead>{heads}</thead><tbody>{rest}</tbody></table>{foot}</table-wrap></sec></body></article>",
        escape(caption)
    );
    [read(&markdown), audit(jats.as_bytes(), "invented.xml").expect("an article")]
}

/// The verdicts of the results with a P, in both formats.
fn verdicts(a: &Audited) -> Vec<Verdict> {
    with_p(a).iter().map(|r| verdict(a, r)).collect()
}

#[test]
fn a_size_over_two_columns_is_that_of_both() {
    for a in both(
        "Humming minutes, mean (SD)",
        &["2vOutcome | 2>Singers (n = 18) | 2>Readers (n = 21) | 2vP", "Pre | Post | Pre | Post"],
        &["Hum, min | 20.1 (4.0) | 21.4 (4.2) | 20.2 (4.4) | 24.9 (5.1) | 0.03"],
        "",
    )
    .iter()
    {
        let n: Vec<_> = a.readings.groups.iter().map(|g| g.n.map(|f| f.printed.to_string())).collect();
        assert_eq!(n, ["18", "18", "21", "21"].map(|n| Some(n.to_string())));
        // Which of the four figures the P compares is open.
        assert_eq!(with_p(a)[0].groups.len(), 4);
        assert_eq!(verdicts(a), [Verdict::Undecided]);
    }
}

#[test]
fn comparisons_side_by_side_have_their_own_groups() {
    for a in both(
        "Calm scores by season, mean (SD)",
        &["Score | Tea in spring (n = 24) | Water in spring (n = 26) | P | Tea in autumn (n = 18) | Water in autumn (n = 21) | P"],
        &["Calm | 5.2 (1.4) | 6.3 (1.6) | 0.013 | 21.4 (4.2) | 24.9 (5.1) | 0.9"],
        "",
    )
    .iter()
    {
        let rows = with_p(a);
        assert_eq!([&rows[0].groups[..], &rows[1].groups[..]], [[0, 1], [2, 3]]);
        assert_eq!(verdicts(a), [Verdict::Tallies, Verdict::Differs]);
    }
}

#[test]
fn sizes_in_rows_hold_for_the_rows_below() {
    for a in both(
        "Hum and drum, mean (SD)",
        &["Task | Tea | Water | P"],
        &[
            "Morning | n = 24 | n = 26 | ",
            "Hum | 5.2 (1.4) | 6.3 (1.6) | 0.013",
            "Evening | n = 18 | n = 21 | ",
            "Hum | 21.4 (4.2) | 24.9 (5.1) | 0.026",
        ],
        "",
    )
    .iter()
    {
        assert_eq!(
            groups(a),
            ["Tea: 5.2 Sd 1.4 [24]", "Water: 6.3 Sd 1.6 [26]", "Tea: 21.4 Sd 4.2 [18]", "Water: 24.9 Sd 5.1 [21]"]
        );
        assert_eq!(verdicts(a), [Verdict::Tallies; 2]);
    }
}

#[test]
fn the_p_on_a_title_row_is_that_of_all_categories() {
    for a in both(
        "Instruments of the two choirs, n (%)",
        &["Instrument | Altos (n = 40) | Basses (n = 40) | P"],
        &[
            "Favourite |  |  | 0.08",
            "Drum | 12 (30.0) | 20 (50.0) | ",
            "Flute | 18 (45.0) | 9 (22.5) | ",
            "None | 10 (25.0) | 11 (27.5) | ",
            "Own instrument |  |  | 0.07",
            "Yes | 14 (35.0) | 22 (55.0) | ",
            "No | 26 (65.0) | 18 (45.0) | ",
        ],
        "",
    )
    .iter()
    {
        let rows = with_p(a);
        assert_eq!([(rows[0].arms, rows[0].groups.len()), (rows[1].arms, rows[1].groups.len())], [(2, 6), (2, 4)]);
        assert_eq!(verdicts(a), [Verdict::Tallies; 2]);
    }
}

#[test]
fn the_p_may_span_the_rows_that_it_compares() {
    for a in both(
        "Instruments of the two choirs",
        &["2>Instrument | Altos (n = 40) | Basses (n = 40) | P"],
        &[
            "3vFavourite, n (%) | Drum | 12 (30.0) | 20 (50.0) | 3v0.08",
            "Flute | 18 (45.0) | 9 (22.5)",
            "None | 10 (25.0) | 11 (27.5)",
        ],
        "",
    )
    .iter()
    {
        assert_eq!((with_p(a)[0].arms, with_p(a)[0].groups.len()), (2, 6));
        assert_eq!(verdicts(a), [Verdict::Tallies]);
    }
}

#[test]
fn groups_as_rows_with_a_column_of_sizes_and_halves_in_two_cells() {
    for a in both(
        "Calm after tea and after water",
        &["2vGroup | 2vN | 2>Calm score", "Mean | SD"],
        &["Tea group | 24 | 5.2 | 1.4", "Water group | 26 | 6.3 | 1.6", "P |  | 0.013 | "],
        "",
    )
    .iter()
    {
        let summaries: Vec<_> = a
            .readings
            .groups
            .iter()
            .map(|g| (g.mean.map(|m| m.to_string()), g.spread_kind, g.n.and_then(|n| n.printed.count())))
            .collect();
        let sd = Some(SpreadKind::Sd);
        assert_eq!(summaries, [(Some("5.2".into()), sd, Some(24)), (Some("6.3".into()), sd, Some(26))]);
        assert_eq!(with_p(a)[0].groups, [0, 1]);
        assert_eq!(a.readings.p[0].role, Role::Effect);
        assert_eq!(verdicts(a), [Verdict::Tallies]);
    }
}

#[test]
fn statistics_have_their_symbol_and_df_from_the_head() {
    for a in both(
        "Calm, pace and pitch",
        &["Outcome | F(1,46) | P | t(48) | P"],
        &["Calm | 4.35 | 0.043 | 2.31 | 0.025", "Pace | 4.35 | 0.43 | −2.31 | 0.025"],
        "",
    )
    .iter()
    {
        let df: Vec<_> = a.readings.statistics.iter().map(|s| s.df1.and_then(|f| f.printed.count())).collect();
        assert_eq!(df, [Some(1), Some(48), Some(1), Some(48)]);
        assert!(with_p(a).iter().all(|r| r.statistic.is_some()));
        use Verdict::{Differs, Tallies};
        assert_eq!(verdicts(a), [Tallies, Tallies, Differs, Tallies]);
    }
}

#[test]
fn intervals_stand_in_one_two_or_three_cells() {
    let tables: [(&[&str], &[&str]); 4] = [
        (&["Factor | Hazard ratio (95% CI) | P"], &["Tea | 1.45 (1.05–2.00) | 0.024"]),
        (&["Factor | HR | 95% CI | P"], &["Tea | 1.45 | 1.05, 2.00 | 0.024"]),
        (&["2vFactor | 2vHR | 2>95% CI | 2vP", "Lower | Upper"], &["Tea | 1.45 | 1.05 | 2.00 | 0.024"]),
        (&["Factor | HR | 3>95% CI | P"], &["Tea | 1.45 | 1.05 | to | 2.00 | 0.024"]),
    ];
    for (head, body) in tables {
        for a in both("Times to the first hum", head, body, "").iter() {
            let limits: Vec<_> =
                a.readings.intervals.iter().map(|i| (i.lower.to_string(), i.upper.to_string())).collect();
            assert_eq!(limits, [("1.05".to_string(), "2.00".to_string())], "{head:?}");
            let level = a.readings.intervals[0].level.map(|f| f.printed.to_string());
            assert_eq!(level.as_deref().or(Some("95")), Some("95"), "{head:?}");
            assert_eq!(a.readings.estimates[0].measure, Measure::HazardRatio, "{head:?}");
            let row = with_p(a)[0];
            assert_eq!((row.interval, row.estimate), (Some(0), Some(0)), "{head:?}");
            assert_eq!(verdicts(a), [Verdict::Tallies], "{head:?}");
        }
    }
}

#[test]
fn counts_may_stand_without_their_percentages_and_percentages_without_counts() {
    for a in both(
        "What the choirs reported",
        &["Complaint | Altos (n = 40) | Basses (n = 38)"],
        &[
            "Hoarse, n (%) | 12 (30.0) | 20 (52.6)",
            "Lost the note, n (%) | 0 | 3 (7.9)",
            "Late, % | 20.0 | 31.6",
            "Left early (n) | 4 | 5",
        ],
        "",
    )
    .iter()
    {
        assert_eq!(
            groups(a)[2..],
            [
                "Altos: 0 [40]",
                "Basses: 3 7.9% [38]",
                "Altos: 20.0%",
                "Basses: 31.6%",
                "Altos: 4 [40]",
                "Basses: 5 [38]"
            ]
        );
    }
}

#[test]
fn counts_with_percentages_show_a_size_that_no_header_prints() {
    for a in both(
        "What the choirs reported",
        &["Complaint | Altos | Basses | P"],
        &[
            "Hoarse, n (%) | 12 (30.8) | 20 (52.6) | 0.05",
            "Late, n (%) | 7 (17.9) | 11 (28.9) | 0.25",
            "Lost, n (%) | 31 (79.5) | 29 (76.3) | 0.74",
            "Calm score, mean (SD) | 5.2 (1.4) | 6.3 (1.6) | 0.002",
        ],
        "",
    )
    .iter()
    {
        let sizes: Vec<_> = a.readings.groups[6..].iter().map(|g| g.n.map(|n| n.printed.to_string())).collect();
        assert_eq!(sizes, [Some("39".to_string()), Some("38".to_string())]);
        assert!(matches!(a.readings.groups[6].n.expect("found").origin, Origin::Inferred(Inference::FromPercent, _)));
        assert!(a.checked.iter().all(|c| c.verdict != Verdict::Differs));
    }
}

#[test]
fn men_and_women_with_a_sign_between_make_the_group() {
    for a in both(
        "The choirs",
        &["Trait | Altos | Basses"],
        &["Sex (male/female) | 12/28 | 15/23", "Age, mean (SD) | 41.0 (9.1) | 39.8 (8.8)"],
        "",
    )
    .iter()
    {
        assert_eq!(
            groups(a),
            ["Altos: 12 [40]", "Basses: 15 [38]", "Altos: 41.0 Sd 9.1 [40]", "Basses: 39.8 Sd 8.8 [38]"]
        );
        assert!(a.checked.iter().all(|c| c.verdict != Verdict::Differs));
    }
}

#[test]
fn two_figures_in_a_cell_and_brackets_on_a_line_of_their_own() {
    for a in both(
        "Calm as median (IQR) and mean (SD)",
        &["Score | Tea (n = 24) | Water (n = 26) | P"],
        &["Calm, median (IQR) | 5 (3–7) 5.2 (SD 1.4) | 6 (4–8) 6.3 (SD 1.6) | 0.02"],
        "",
    )
    .iter()
    {
        assert_eq!(
            groups(a),
            ["Tea: 5 Iqr 3 7 [24]", "Tea: 5.2 Sd 1.4 [24]", "Water: 6 Iqr 4 8 [26]", "Water: 6.3 Sd 1.6 [26]"]
        );
        assert_eq!(with_p(a)[0].groups.len(), 4);
    }
    for a in both(
        "Calm, mean (SD)",
        &["Score | Tea (n = 24) | Water (n = 26) | P"],
        &["Calm | 5.2 | 6.3 | 0.013", " | (1.4) | (1.6) | "],
        "",
    )
    .iter()
    {
        assert_eq!(groups(a), ["Tea: 5.2 Sd 1.4 [24]", "Water: 6.3 Sd 1.6 [26]"]);
        assert_eq!(verdicts(a), [Verdict::Tallies]);
    }
}

#[test]
fn a_header_repeated_in_the_body_gives_new_sizes() {
    for a in both(
        "Calm, mean (SD)",
        &["Week 1 | Tea (n = 24) | Water (n = 26) | P"],
        &[
            "Calm | 5.2 (1.4) | 6.3 (1.6) | 0.013",
            "Week 8 | Tea (n = 18) | Water (n = 21) | P",
            "Calm | 21.4 (4.2) | 24.9 (5.1) | 0.026",
        ],
        "",
    )
    .iter()
    {
        assert_eq!(groups(a)[2..], ["Tea: 21.4 Sd 4.2 [18]", "Water: 24.9 Sd 5.1 [21]"]);
        assert_eq!(verdicts(a), [Verdict::Tallies; 2]);
    }
}

#[test]
fn quartiles_behind_a_slash_and_rates_are_no_percentages() {
    for a in both(
        "Days to the first hum, median (Q1/Q3)",
        &["Outcome | Tea (n = 24) | Water (n = 26) | Events/persons (rate)"],
        &["Hum | 180 (120/414) | 216 (88/355) | 74/1115 (2.33)"],
        "",
    )
    .iter()
    {
        assert!(a.checked.iter().all(|c| c.verdict != Verdict::Differs));
        assert_eq!(groups(a)[0], "Tea: 180 Iqr 120 414 [24]");
    }
}

#[test]
fn figures_in_no_known_shape_are_left_alone() {
    for a in both(
        "Singers enrolled",
        &["Singer | Age (years) | Voice | Years of singing"],
        &["S1 | 35 | Alto | 4", "S2 | 45 | Bass | <1"],
        "",
    )
    .iter()
    {
        assert!(a.readings.groups.is_empty() && a.readings.p.is_empty() && a.results.is_empty());
    }
}

#[test]
fn a_p_below_an_estimate_in_a_row_is_that_of_the_estimate() {
    for a in both(
        "Calm in three choirs",
        &["Outcome | Silence (n = 30) | Tea (n = 31) | Water (n = 29)"],
        &[
            "Calm, mean (SD) | 12.0 (3.1) | 14.4 (3.6) | 14.9 (3.4)",
            "Difference vs silence (95% CI) |  | 2.4 (0.5 to 4.3) | 2.9 (1.2 to 4.6)",
            "P value |  | 0.013 | 0.5",
        ],
        "",
    )
    .iter()
    {
        let rows = with_p(a);
        assert!(rows.iter().all(|r| r.estimate.is_some() && r.interval.is_some()));
        assert!(a.readings.p.iter().all(|p| p.role == Role::Effect));
        assert_eq!(verdicts(a), [Verdict::Tallies, Verdict::Differs]);
    }
}

#[test]
fn rows_under_one_p_are_what_it_compares() {
    for a in both(
        "Calm by choir",
        &["Score | Group | N | Mean | SD | P"],
        &["2vCalm | Tea group | 24 | 5.2 | 1.4 | 2v0.013", "Water group | 26 | 6.3 | 1.6"],
        "",
    )
    .iter()
    {
        assert_eq!(with_p(a)[0].groups, [0, 1]);
        assert_eq!(verdicts(a), [Verdict::Tallies]);
    }
}

#[test]
fn standard_errors_without_sizes_agree_or_say_nothing() {
    let table = "Table 1. Values are mean ± SEM\n\n|  | Tea | Water | P |\n|---|---|---|---|\n| Calm | 5.20 ± 0.30 | 6.30 ± 0.30 | 0.01 |\n| Pace | 5.20 ± 0.30 | 6.30 ± 0.30 | 0.8 |\n";
    assert_eq!(verdicts(&read(table)), [Verdict::Tallies, Verdict::Undecided]);
}

#[test]
fn what_a_marked_note_says_holds_for_the_marked_alone() {
    let a = read(
        "|  | Tea (n = 24) | Water (n = 26) | P | Difference (95% CI) | P^a^ |\n|---|---|---|---|---|---|\n| Calm, mean (SD) | 5.2 (1.4) | 6.3 (1.6) | 0.5 | 1.1 (0.3 to 1.9) | 0.008 |\n\n^a^ Adjusted for age.\n",
    );
    let rows = with_p(&a);
    assert!(!rows[0].has(Feature::Adjusted) && rows[1].has(Feature::Adjusted));
    assert_eq!(verdicts(&a), [Verdict::Differs, Verdict::Tallies]);
}
