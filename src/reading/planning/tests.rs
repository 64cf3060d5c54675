use super::*;
use crate::manuscript::{Block, BlockKind, Manuscript, Section, SectionKind, Source};
use crate::reading::{p, scan};
use crate::text::{LineIndex, PieceTable};

type Statement = (PlanningKind, String, Option<f64>);

/// The planning statements of one paragraph as kind, quote and value, and which p's define.
fn planning(text: &str) -> (Vec<Statement>, Vec<bool>) {
    let block = Block {
        kind: BlockKind::Paragraph,
        section: 0,
        text: text.to_string(),
        pieces: PieceTable::default(),
        marks: Vec::new(),
    };
    let section =
        Section { title: String::new(), level: 0, parent: None, kind: SectionKind::Unknown, in_abstract: false };
    let decoded = crate::text::decode(b"");
    let source = Source { format: "text", decoded, lines: LineIndex::new("") };
    let manuscript = Manuscript::new(vec![section], vec![block], source);
    let scan = scan(&manuscript);
    let (mut out, mut all) = (Vec::new(), Vec::new());
    for id in scan.of_block(0) {
        let view = scan.view(&manuscript, id);
        let found = p::find(&view);
        let mut defines = vec![false; found.len()];
        read(&view, &found, &mut defines, &mut out);
        all.extend(defines);
    }
    let out = out.into_iter().map(|x| (x.what, manuscript.quote(x.span).to_string(), x.value.map(Printed::value)));
    (out.collect(), all)
}

#[test]
fn thresholds_define_and_results_do_not() {
    for text in [
        "P < 0.05 was considered significant.",
        "Statistical significance was set at p<0.05.",
        "A P value of less than 0.05 was regarded as statistically significant.",
        "Statistical significance: P ≤ 0.05.",
        "Differences were considered significant if p < 0.05.",
        "P values < 0.05 indicated significance.",
    ] {
        let (found, defines) = planning(text);
        assert_eq!(defines, [true], "{text}");
        assert!(found.iter().any(|x| x.0 == PlanningKind::Threshold && x.2 == Some(0.05)), "{text}: {found:?}");
    }
    for text in [
        "Fed hives were heavier (P < 0.05).",
        "The difference in hive weight was significant (p < 0.05).",
        "There was a significant difference at 12 weeks (p = 0.04).",
        "Yield was significantly higher at week 8 (P < 0.01) and was similar at week 12 (P > 0.05).",
    ] {
        let (found, defines) = planning(text);
        assert!(defines.iter().all(|d| !d) && found.is_empty(), "{text}: {found:?}");
    }
}

#[test]
fn a_sample_size_with_its_parts() {
    let text = "To detect a difference of 4 kg with 80% power and a two-sided alpha of 0.05, 36 hives per group \
                were needed.";
    let (found, _) = planning(text);
    let of = |kind| found.iter().find(|x| x.0 == kind).and_then(|x| x.2);
    assert_eq!(of(PlanningKind::Power), Some(80.0));
    assert_eq!(of(PlanningKind::Alpha), Some(0.05));
    assert_eq!(of(PlanningKind::SampleSize), Some(36.0));
    assert!(found.iter().any(|x| x.0 == PlanningKind::Sided && x.1 == "two-sided"));
    let (found, _) = planning("With α = 5 % and β = 0.2 the sample size was calculated to be 60 participants.");
    assert_eq!(found.iter().map(|x| x.2).collect::<Vec<_>>(), [Some(0.05), Some(0.8), Some(60.0)], "{found:?}");
}

#[test]
fn power_and_sides_of_other_kinds() {
    for text in
        ["Peak power of 85 W was reached.", "Bees landed on one side of the frame.", "Cronbach's alpha was 0.15."]
    {
        assert!(planning(text).0.is_empty(), "{text}: {:?}", planning(text).0);
    }
}

#[test]
fn legends_and_corrections() {
    let (found, defines) = planning("* P < 0.05, ** P < 0.01 versus control.");
    assert_eq!(defines, [true, true]);
    assert!(found.iter().all(|x| x.0 == PlanningKind::Legend), "{found:?}");
    let (found, _) = planning("Pairs of hives were compared with a Bonferroni correction.");
    assert_eq!((found[0].0, found[0].1.as_str()), (PlanningKind::Multiplicity, "Bonferroni correction"));
    let (found, _) = planning("No correction for multiple comparisons was made.");
    assert_eq!(found.len(), 1);
}

#[test]
fn other_ways_to_print_a_plan() {
    use PlanningKind::{Alpha, Legend, Multiplicity, Power, SampleSize, Threshold};
    for (text, kind, value) in [
        ("We aimed to recruit 120 hives.", SampleSize, Some(120.0)),
        ("A total of 60 hives would give enough power to detect a gain of 4 kg.", SampleSize, Some(60.0)),
        ("A sample size of 48 per group was required.", SampleSize, Some(48.0)),
        ("The design required a sample size of 24.", SampleSize, Some(24.0)),
        ("The sample size was calculated to detect a gain of 4 kg.", SampleSize, None),
        ("The trial had a statistical power higher than 90%.", Power, Some(90.0)),
        ("There was a 90% chance of detecting a gain of 4 kg.", Power, Some(90.0)),
        ("Hives were compared with a type 1 error threshold of 0.05.", Alpha, Some(0.05)),
        ("All tests were considered significant at the 5% level.", Alpha, Some(0.05)),
        ("Gains were detectable at the 95% significance level.", Alpha, Some(0.05)),
        ("Gains were detectable with a two-sided significance of 5%.", Alpha, Some(0.05)),
        ("Values below 0.05 were considered statistically significant.", Threshold, Some(0.05)),
        ("Asterisks indicate p < 0.05.", Legend, Some(0.05)),
        ("Means were compared by Fisher's least significant difference.", Multiplicity, None),
        ("Outcomes followed a hierarchical testing procedure.", Multiplicity, None),
    ] {
        let (found, _) = planning(text);
        assert!(found.iter().any(|x| x.0 == kind && x.2 == value), "{text}: {found:?}");
    }
    for text in [
        "Our sample size was very small (12 hives).",
        "A hierarchical linear model was fitted.",
        "Lambs reached 5% of the significance of their dams.",
    ] {
        assert!(planning(text).0.is_empty(), "{text}: {:?}", planning(text).0);
    }
}
