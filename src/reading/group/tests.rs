//! Sentences of an invented trial with beehives.

use super::*;
use crate::manuscript::testing::paragraphs;
use crate::reading::{Origin, read as read_all, scan};

/// The groups of one paragraph of results.
fn groups(text: &str) -> Vec<Group> {
    let manuscript = paragraphs(&[("Results", text)]);
    read_all(&manuscript, &scan(&manuscript)).groups
}

/// Each group as `mean median [spread] events/total percent n label`, what is missing left out.
fn told(text: &str) -> Vec<String> {
    let show = |g: Group| {
        let mut parts: Vec<String> = Vec::new();
        let mut add = |name: &str, value: Option<Printed>| parts.extend(value.map(|v| format!("{name} {v}")));
        add("mean", g.mean);
        add("median", g.median);
        g.spread.iter().for_each(|&s| add("±", Some(s)));
        add("events", g.events.map(|f| f.printed));
        add("percent", g.percent);
        add("n", g.n.map(|f| f.printed));
        if !g.has_figure() {
            parts.push(format!("of {}", g.label));
        }
        parts.join(", ")
    };
    groups(text).into_iter().map(show).collect()
}

#[test]
fn lists_share_a_sign_or_a_name() {
    assert_eq!(
        told("Stings were seen in 12.1, 14.8 and 8.2% of the hives."),
        ["percent 12.1", "percent 14.8", "percent 8.2"]
    );
    assert_eq!(
        told("Queens were lost in 6 and 3 colonies (12.5% and 7.1%), respectively."),
        ["events 6, percent 12.5", "events 3, percent 7.1"]
    );
    assert_eq!(told("The median yield was 8.4, 3.1 and 1.2 kg for each."), ["median 8.4", "median 3.1", "median 1.2"]);
    // Doses, ranges and changes are none.
    assert_eq!(told("It rose in the 20 and 40 mg groups (38.2% and 41.7%)."), ["percent 38.2", "percent 41.7"]);
    assert!(told("Swarming fell by 31 and 36%, respectively.").is_empty());
    assert!(told("Moisture was held between 16.2 and 18.1% in all.").is_empty());
}

#[test]
fn names_and_values_in_brackets() {
    assert_eq!(
        told("We saw 66 volunteers (median age = 58 years; beginners = 64 %)."),
        ["median 58, n 66", "percent 64, n 66"]
    );
    assert_eq!(told("The mean moisture was 17.5% in spring."), ["mean 17.5"]);
    assert_eq!(
        told("The mean yield was 3.41 kg for the syrup arm and 3.28 kg for the water arm."),
        ["mean 3.41", "mean 3.28"]
    );
    assert!(told("The mean difference was 2.3 kg.").is_empty());
}

#[test]
fn spreads_in_other_dress() {
    assert_eq!(
        told("The median (IQR) load for syrup was 36 (19 – 55) and for the whole of the other hives 41 (25 – 50)."),
        ["median 36, ± 19, ± 55", "median 41, ± 25, ± 50"]
    );
    assert_eq!(
        told("It began at a mean of 5.2 mm (95% CI 4.1 to 6.3) and 4.8 mm (95% CI 3.9 to 5.7)."),
        ["mean 5.2, ± 4.1, ± 6.3", "mean 4.8, ± 3.9, ± 5.7"]
    );
    assert!(told("The mean difference was 5.2 mm (95% CI 4.1 to 6.3).").is_empty());
    // A plus is a lost ± only where the paragraph prints the sign.
    assert_eq!(told("Age was 4.1 ± 0.9. Flights took 7.3 +1.8 hours.")[1], "mean 7.3, ± 1.8");
    assert!(told("Flights took 7.3 +1.8 hours.").is_empty());
}

#[test]
fn counts_in_words() {
    assert_eq!(
        told("Swarms were seen in two of eleven and three of forty hives."),
        ["events 2, n 11", "events 3, n 40"]
    );
    assert_eq!(told("Of these, 9 of the 12 still flew."), ["events 9, n 12"]);
    assert_eq!(
        told("A queen was lost in 12% of the syrup group and none in the control group."),
        ["percent 12", "events 0"]
    );
    assert!(told("It was one of the three diets, and they drew one of two groups.").is_empty());
}

#[test]
fn percentages_of_no_group() {
    for text in [
        "It told them apart with 90% sensitivity.",
        "They flew at 60% of maximal speed.",
        "Losses were 66% more likely.",
        "Weight fell by 11.4 mg (5.2%).",
        "Power fell from 80% to 71%.",
        "The rates (61.4 to 72.9%) varied.",
    ] {
        let found: Vec<_> = groups(text).into_iter().filter(|g| g.percent != Printed::parse("61.4")).collect();
        assert!(found.is_empty(), "{text}: {found:?}");
    }
}

#[test]
fn groups_of_which_only_the_size_is_told() {
    for text in [
        "Hives were randomised to syrup (n = 31) or water (n = 29).",
        "Hives were randomised to syrup (31) or water (29).",
        "There were 60 hives (31 in the syrup group and 29 in the water group).",
        "Sixty volunteers (31 syrup: daily; 29 water) took part.",
        "In all, 60 were included (syrup, n = 31; water, n = 29).",
        "31 hives were randomised to syrup and 29 to water.",
        "We had 31 and 29 hives included in the syrup and water groups.",
        "They were assigned (n = 31 for syrup and n = 29 for water).",
    ] {
        assert_eq!(told(text), ["n 31, of syrup", "n 29, of water"], "{text}");
    }
    for text in [
        "Reasons were lost consent (n = 11) and wax moths (n = 3).",
        "Sites were orchards (n = 27), heaths (n = 25) and gardens (n = 3).",
        "Some hives (n = 4) swarmed.",
    ] {
        assert!(told(text).is_empty(), "{text}");
    }
    // A size that a summary of the sentence has taken over is told once.
    let both = "Yield was 5.2 ± 1.1 in the syrup group (n = 31) and 6.1 ± 1.0 in the water group (n = 29).";
    assert_eq!(told(both), ["mean 5.2, ± 1.1, n 31", "mean 6.1, ± 1.0, n 29"]);
}

#[test]
fn sizes_told_earlier_in_the_paragraph() {
    let arms = "Hives were randomised to syrup (n = 31) or water (n = 29).";
    let after = |text: &str| told(&format!("{arms} {text}"))[2..].to_vec();
    assert_eq!(
        after("Yield was 5.2 ± 1.1 with syrup and 6.1 ± 1.0 with water."),
        ["mean 5.2, ± 1.1, n 31", "mean 6.1, ± 1.0, n 29"]
    );
    assert_eq!(
        after("Yield was 6.1 ± 1.0 and 5.2 ± 1.1 in the water and syrup groups."),
        ["mean 6.1, ± 1.0, n 29", "mean 5.2, ± 1.1, n 31"]
    );
    // Which is which is open.
    assert_eq!(after("Yield was 6.1 ± 1.0 and 5.2 ± 1.1 (syrup)."), ["mean 6.1, ± 1.0", "mean 5.2, ± 1.1"]);
    // Who left is no arm.
    let left = "Of the hives lost, 3 were lost with syrup (n = 3) and water (n = 4). Yield was 5.2 ± 1.1 with syrup and \
                6.1 ± 1.0 with water.";
    assert!(groups(left).iter().filter(|g| g.mean.is_some()).all(|g| g.n.is_none()));
    // All of the paragraph, but not where it sets groups side by side.
    assert_eq!(told("We saw 42 volunteers. Their mean age was 51 ± 8 years.")[0], "mean 51, ± 8, n 42");
    assert_eq!(told("We saw 42 volunteers. Age was 51 ± 8 years in the control group.")[0], "mean 51, ± 8");
}

#[test]
fn a_total_from_elsewhere_is_one_that_fits() {
    let text = "Of 412 hives, 351 (85.2%) wintered. Of these, 247 (70.4%) swarmed, and 247 (58.0%) did not.";
    let totals: Vec<_> = groups(text).iter().map(|g| g.total.map(|t| t.printed.value())).collect();
    assert_eq!(totals, [Some(412.0), Some(351.0), None]);
    assert!(matches!(groups(text)[1].total.map(|t| t.origin), Some(Origin::Inferred(..))));
}

#[test]
fn counts_of_a_total_told_before() {
    assert_eq!(told("Of the 45 dogs that were fed, 12 recovered.")[0], "events 12, n 45");
    assert_eq!(told("Most keepers (75%, 60 out of 80) agreed."), ["events 60, percent 75, n 80"]);
    assert_eq!(told("Sixty-four per cent (16 of 25) agreed."), ["events 16, percent 64, n 25"]);
    assert_eq!(told("In all, 31 were still flying after 9 wks (52%).")[0], "events 31, percent 52");
    assert_eq!(told("They were found in registers (33 patients, 2.4%)."), ["events 33, percent 2.4"]);
    // Places, arms and those who left are none.
    for text in [
        "Of the 9 sites that took part, only 4 sites had losses.",
        "Of the 38 patients excluded, 21 did not return and 17 were lost.",
        "Of 120 keepers, 60 were randomised to each group.",
        "In all, 13 patients (8 in the syrup arm and 5 in the water arm) had declined treatment.",
        "It was rinsed with 2.5% hypochlorite and numbed with lidocaine 0.2%.",
    ] {
        assert!(told(text).is_empty(), "{text}: {:?}", told(text));
    }
}

#[test]
fn whose_size_it_is() {
    for (text, last) in [
        // The bracket behind the participants.
        (
            "There were 16 males (mean age 31.4 ± 2.6 years) and 14 females (mean age 30.2 ± 2.9 years).",
            "mean 30.2, ± 2.9, n 14",
        ),
        ("Fifty ringers (28 men and 22 women, age 37 ± 6 years) took part.", "mean 37, ± 6, n 50"),
        // Parts of the whole leave it the only size.
        (
            "We saw 82 patients. Sites were legs (n = 44), wings (n = 36) and tails (n = 2). Mean pain was 4.1.",
            "mean 4.1, n 82",
        ),
        // Those analysed.
        (
            "Of the 96 patients, 91 were included in the analysis. Their mean age was 48.2 ± 7.1 years.",
            "mean 48.2, ± 7.1, n 91",
        ),
        // Those counted, not those of whom they are counted.
        ("In all, 9 out of 22 were responders, among whom it fell by a mean of 4.7 ± 1.2.", "mean 4.7, ± 1.2, n 9"),
        ("Of 90 keepers, 50 (55.6%) received it, with a mean of 3.6 visits.", "mean 3.6, n 50"),
        // Some stayed, some did not: of whom it is told is open.
        ("Thirty patients took part and 26 completed the study. The mean gain was 6.4 ± 1.9 mm.", "mean 6.4, ± 1.9"),
        (
            "Thirty patients took part and 26 completed the study. Their mean age was 52 ± 8 years.",
            "mean 52, ± 8, n 30",
        ),
        // Another study, and a plan.
        ("A total of 58 keepers took part. An earlier study showed a gain of 2.3 ± 0.6 mm.", "mean 2.3, ± 0.6"),
        ("With 80% power, 24 keepers per group were needed. The gain was 2.3 ± 0.6 mm.", "mean 2.3, ± 0.6"),
        (
            "Some stopped (syrup n = 5; water n = 6; P = 0.7) after a median of 10 months (IQR 7 to 15).",
            "median 10, ± 7, ± 15",
        ),
        ("Flights (n = 172) were even (91% with syrup v 87% with water).", "percent 87"),
    ] {
        assert_eq!(told(text).last().map(String::as_str), Some(last), "{text}");
    }
    let order = "Load was 7.8 ± 1.5 and 7.1 ± 1.6 with syrup (n = 28) and water (n = 13), respectively. At the start it was \
                 8.9 ± 1.7 and 8.8 ± 1.4, respectively.";
    assert_eq!(told(order)[2..], ["mean 8.9, ± 1.7, n 28", "mean 8.8, ± 1.4, n 13"]);
}

#[test]
fn members_of_a_bracket_share_what_is_said_of_them() {
    let text =
        "The changes differed in their loads over all of the weeks (A 512 ± 204; B 633 ± 251; A and B 871 ± 318 mg).";
    assert!(groups(text).iter().all(|g| g.change), "{:?}", groups(text));
    assert_eq!(
        told(
            "Clearance took 61 hours (95% CI 48 to 75) with syrup and 43 hours (95% CI 31 to 52) with water (log-rank test)."
        ),
        ["median 61, ± 48, ± 75", "median 43, ± 31, ± 52"]
    );
    assert_eq!(
        told("The median (IQR) yield was 16 kg (12, 20). On day 2 it was alike: 34 kg (26, 84) versus 21 kg (7, 63).")
            [1..],
        ["median 34, ± 26, ± 84", "median 21, ± 7, ± 63"]
    );
}
