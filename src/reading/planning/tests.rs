use super::*;
use crate::manuscript::testing::paragraphs;
use crate::reading::{p, scan};

type Statement = (PlanningKind, String, Option<f64>);

/// The planning statements of one paragraph as kind, quote and value, and which p's define.
fn planning(text: &str) -> (Vec<Statement>, Vec<bool>) {
    let manuscript = paragraphs(&[("", text)]);
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

#[test]
fn sample_sizes_in_further_words() {
    use PlanningKind::{Alpha, Multiplicity, Power, SampleSize, Sided, Threshold};
    for (text, kind, value) in [
        ("This indicated that n = 180 per group (total 360) were required.", SampleSize, Some(180.0)),
        ("Approximately 90 hives will be needed in each of the two groups.", SampleSize, Some(90.0)),
        ("A total sample of 120 hives is targeted for recruitment.", SampleSize, Some(120.0)),
        ("Allowing for losses, we will recruit a total of 40 hives.", SampleSize, Some(40.0)),
        ("Our recruitment target of n = 64 allowed for losses.", SampleSize, Some(64.0)),
        ("Assuming 10% losses, 80 hives (40 per group) should be sufficient.", SampleSize, Some(80.0)),
        ("With 60 hives per group there was an 80% chance to detect a gain of 4 kg.", SampleSize, Some(60.0)),
        ("With 60 hives per group there was an 80% chance to detect a gain of 4 kg.", Power, Some(80.0)),
        ("We had 80% power to show a gain with 107 hives in either group.", SampleSize, Some(107.0)),
        ("Sample size calculations were done with a program for bees to detect a gain of 30%.", SampleSize, None),
        ("We calculated that we needed 77 hives per arm to detect a gain of 4 kg.", SampleSize, Some(77.0)),
        ("Statistical power was reduced, but remained over 80%.", Power, Some(80.0)),
        ("We set alpha to 5% and beta to 80%.", Power, Some(0.8)),
        ("With p = 0.05 and a power of 90%, 30 hives per group were needed.", Alpha, Some(0.05)),
        ("Using a power of 95%, detection of a difference (p < 0.05) required 24 hives.", Alpha, Some(0.05)),
        ("The sample size allowed 80% power with a bilateral test.", Sided, None),
        ("Statistical significance was declared at the 0.05 level.", Alpha, Some(0.05)),
        ("Statistical significance was conferred at p < 0.05.", Threshold, Some(0.05)),
        ("The threshold was set at p < 0.01, with a family-wise correction.", Threshold, Some(0.01)),
        (
            "Gains were considered statistically significant when the probability of error was 0.05 or less.",
            Threshold,
            Some(0.05),
        ),
        ("Means were compared with the Newman-Keuls test.", Multiplicity, None),
    ] {
        let (found, _) = planning(text);
        assert!(found.iter().any(|x| x.0 == kind && x.2 == value), "{text}: {found:?}");
    }
    for text in [
        "This trial had a very small sample size (19 hives).",
        "A convenience sample of 40 hives was weighed.",
        "The sample size in the 6th month was lower.",
        "The correlation of peak power was 0.96.",
        "All keepers were required to weigh 12 hives.",
        "Statistical significance was reached at 12 weeks (p < 0.05).",
        "Bilateral tests of hearing were done in 12 keepers.",
        "The sample size calculation was based on repeated weights.",
    ] {
        let (found, defines) = planning(text);
        assert!(found.iter().all(|x| x.0 == Sided) && !defines.contains(&true), "{text}: {found:?}");
    }
    // One level, printed once, is told once.
    let (found, _) = planning("Two endpoints were controlled at the \u{3b1} = 0.05 type I error rate.");
    assert_eq!(found.iter().filter(|x| x.0 == Alpha).count(), 1, "{found:?}");
}
