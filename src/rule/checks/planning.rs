//! What the Methods leave unsaid: asked once, and only of a manuscript whose Methods were recognised.

use crate::manuscript::{BlockKind, SectionKind};
use crate::reading::{PlanningKind, Sides};
use crate::rule::check::Statement;
use crate::rule::finding::Finding;
use crate::rule::level::Weight;
use crate::rule::look::{Look, is_effect};
use crate::text::Span;

/// P-values of effects below which a manuscript is a fragment, not a report.
const ENOUGH_P: usize = 3;

/// A statement that the Methods do not make.
pub fn unstated(facts: &Look, what: Statement) -> Vec<Finding> {
    let effects = facts.readings.p.iter().filter(|p| is_effect(p)).count();
    if !facts.context.has_methods || !facts.context.has_results || effects < ENOUGH_P {
        return Vec::new();
    }
    let reads = |kinds: &[PlanningKind]| facts.readings.planning.iter().any(|p| kinds.contains(&p.what));
    let context = facts.context;
    let sized = || {
        reads(&[PlanningKind::SampleSize, PlanningKind::Power])
            || facts.mentions(&["sample size", "power calculation", "power analysis", "statistical power", "% power"])
    };
    let (absent, name) = match what {
        Statement::Alpha => {
            let stated = reads(&[PlanningKind::Alpha, PlanningKind::Threshold, PlanningKind::Legend]);
            (!stated && context.alpha.is_empty() && !facts.mentions(&ALPHA_WORDS), "the level of significance")
        }
        Statement::Sides => {
            let stated = context.sides.is_some() || reads(&[PlanningKind::Sided]);
            (!stated && !facts.mentions(&SIDED_WORDS), "whether tests are one-sided or two-sided")
        }
        Statement::SampleSize => {
            let trial = facts.mentions(&["randomised", "randomized", "randomly assigned", "randomly allocated"]);
            (trial && !sized() && context.power.is_none(), "how the sample size was determined")
        }
        Statement::Power => {
            let stated = context.power.is_some() || reads(&[PlanningKind::Power]) || facts.mentions(&["power"]);
            let planned = reads(&[PlanningKind::SampleSize]) || in_methods(facts, "sample size of");
            (planned && !stated, "the power for which the sample size was planned")
        }
    };
    let at = methods(facts);
    match at.filter(|_| absent) {
        None => Vec::new(),
        Some(at) => {
            let says = format!("The Methods do not seem to state {name}.");
            vec![Finding::wide(vec![at], Weight::reporting(), says, vec![name.to_owned()])]
        }
    }
}

/// A phrase (lower case) in the Methods, the abstract's apart.
fn in_methods(facts: &Look, phrase: &str) -> bool {
    let m = facts.manuscript;
    m.blocks.iter().any(|b| {
        let section = &m.sections[b.section as usize];
        section.kind == SectionKind::Methods && !section.in_abstract && b.text.to_lowercase().contains(phrase)
    })
}

/// Words by which a level of significance may be stated in a form that was not read.
const ALPHA_WORDS: [&str; 5] = ["significance level", "level of significance", "alpha", "α", "type i error"];

const SIDED_WORDS: [&str; 10] = [
    "two-sided",
    "2-sided",
    "two sided",
    "two-tailed",
    "2-tailed",
    "two tailed",
    "one-sided",
    "one-tailed",
    "one sided",
    "one tailed",
];

/// The heading of the Methods, or their first block; "statistical analysis" within them where there is one.
fn methods(facts: &Look) -> Option<Span> {
    let m = facts.manuscript;
    let of_methods = |b: &crate::manuscript::Block| {
        let section = &m.sections[b.section as usize];
        section.kind == SectionKind::Methods && !section.in_abstract && !b.text.trim().is_empty()
    };
    let statistical =
        |b: &crate::manuscript::Block| b.kind == BlockKind::Heading && b.text.to_lowercase().contains("statistic");
    let found = m.blocks.iter().position(|b| of_methods(b) && statistical(b));
    let number = found.or_else(|| m.blocks.iter().position(of_methods))?;
    let text = &m.blocks[number].text;
    let start = text.len() - text.trim_start().len();
    // A paragraph is marked by its first words only.
    let line = text.trim();
    let end = start + line.char_indices().nth(60).map_or(line.len(), |(i, _)| i);
    Some(Span::new(number, start, end))
}

/// Words by which a sentence gives the direction or the reason of a one-sided test.
const REASONS: [&str; 22] = [
    "superior",
    "inferior",
    "margin",
    "because",
    "since ",
    "direction",
    "hypothes",
    "expect",
    "a priori",
    "pre-specified",
    "prespecified",
    "justif",
    "futility",
    "increase",
    "decrease",
    "higher",
    "lower",
    "greater",
    "better",
    "worse",
    "reduc",
    "improv",
];

/// One-sided tests of which neither the sentence nor its neighbours give the direction or the reason.
pub fn one_sided_unexplained(facts: &Look) -> Vec<Finding> {
    let context = facts.context;
    let Some(sides) = context.sides.filter(|s| s.value == Sides::One) else { return Vec::new() };
    // A non-inferiority comparison has its direction by its nature.
    if context.non_inferiority.is_some() {
        return Vec::new();
    }
    let text = facts.manuscript.block(sides.span).text.to_lowercase();
    // A sample size planned one-sided says nothing yet of the tests.
    let planned = ["calculation", "sample size", "power"].iter().any(|w| text.contains(w));
    if planned || REASONS.iter().any(|r| text.contains(r)) {
        return Vec::new();
    }
    let quote = facts.shown(sides.span);
    let says = format!("Tests are described as one-sided ({quote}), without the direction or the reason.");
    let f = Finding::at(sides.span, Weight::reporting(), says);
    vec![f]
}
