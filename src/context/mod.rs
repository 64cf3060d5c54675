//! What the manuscript states about its own methods: alpha, sides, tests named, adjustment, pairing,
//! arms and group sizes, interval level, each with its place.

mod arm;
mod size;
mod statement;
pub mod test_name;

use crate::manuscript::{BlockKind, Manuscript, SectionKind};
use crate::printed::Printed;
use crate::reading::{PlanningKind, Readings, Scan, Sides};
use crate::text::Span;

pub use arm::randomised_in;
pub use size::fill_sizes;
pub use test_name::{Test, tests_in};

/// A statement with its place.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Stated<T> {
    pub value: T,
    pub span: Span,
}

/// An arm with its size, as the text introduces it: `placebo (n = 24)`.
#[derive(Clone, Debug, PartialEq)]
pub struct Arm {
    /// The name, as printed, without "group".
    pub label: String,
    pub n: u64,
    pub span: Span,
}

#[derive(Clone, Debug, Default)]
pub struct Context {
    /// The two-sided (or stated) significance level, as a proportion. More than one when the text states several.
    pub alpha: Vec<Stated<Printed>>,
    pub sides: Option<Stated<Sides>>,
    pub power: Option<Stated<Printed>>,
    /// Tests named in a Methods section, in order.
    pub tests: Vec<Stated<Test>>,
    /// A general adjustment for multiple comparisons.
    pub multiplicity: Option<Stated<()>>,
    /// Analyses are adjusted, or by a model with covariates, as the Methods say.
    pub adjusted: Option<Stated<()>>,
    pub paired: Option<Stated<()>>,
    pub clustered: Option<Stated<()>>,
    pub crossover: Option<Stated<()>>,
    pub non_inferiority: Option<Stated<()>>,
    /// Percent, as printed.
    pub level: Option<Stated<Printed>>,
    /// What an unnamed ± stands for, where the Methods say it ("values are mean ± SD").
    pub spread: Option<Stated<crate::reading::SpreadKind>>,
    pub arms: Vec<Arm>,
    /// Sizes of all participants ("60 patients were randomised").
    pub randomised: Option<Stated<u64>>,
    /// Kinds of section that were recognised by their heading.
    pub has_methods: bool,
    pub has_results: bool,
}

/// Gathers the context of a manuscript.
pub fn gather(manuscript: &Manuscript, scan: &Scan, readings: &Readings) -> Context {
    let mut context = Context {
        has_methods: manuscript.sections.iter().any(|s| s.kind == SectionKind::Methods && s.level > 0),
        has_results: manuscript.sections.iter().any(|s| s.kind == SectionKind::Results && s.level > 0),
        ..Context::default()
    };
    planned(manuscript, readings, &mut context);
    for (number, block) in manuscript.blocks.iter().enumerate() {
        if matches!(block.kind, BlockKind::Table(_) | BlockKind::Heading) {
            continue;
        }
        let section = &manuscript.sections[block.section as usize];
        if matches!(section.kind, SectionKind::References | SectionKind::Back) {
            continue;
        }
        let methods = section.kind == SectionKind::Methods;
        // What an introduction or a discussion says of designs and spreads is as often about other studies.
        let own = matches!(
            section.kind,
            SectionKind::Methods
                | SectionKind::Results
                | SectionKind::Abstract
                | SectionKind::Title
                | SectionKind::Unknown
        );
        for id in scan.of_block(number) {
            let view = scan.view(manuscript, id);
            if methods && !section.in_abstract {
                for (test, first, last) in tests_in(&view) {
                    context.tests.push(Stated { value: test, span: view.span(first, last) });
                }
                statement::methods(&view, &mut context);
            }
            if own {
                statement::anywhere(&view, &mut context);
                arm::arms(&view, readings, &mut context);
            }
        }
    }
    context
}

/// Alpha, sides, power and multiplicity, from the planning statements.
fn planned(manuscript: &Manuscript, readings: &Readings, context: &mut Context) {
    for x in &readings.planning {
        match x.what {
            PlanningKind::Alpha | PlanningKind::Threshold => {
                // A threshold for entering a model or for post hoc tests is another matter; keep what may be an alpha.
                if let Some(value) = x.value.filter(|v| v.value() > 0.0 && v.value() <= 0.1)
                    && !context.alpha.iter().any(|a| a.value.value() == value.value())
                {
                    context.alpha.push(Stated { value, span: x.span });
                }
            }
            PlanningKind::Power => {
                if let Some(value) = x.value
                    && context.power.is_none()
                {
                    context.power = Some(Stated { value, span: x.span });
                }
            }
            PlanningKind::Sided => {
                if let Some(sides) = x.sides
                    && context.sides.is_none()
                {
                    context.sides = Some(Stated { value: sides, span: x.span });
                }
            }
            // "P-values were not corrected for multiple comparisons."
            PlanningKind::Multiplicity if denied(manuscript, x.span) => {}
            PlanningKind::Multiplicity => {
                context.multiplicity.get_or_insert(Stated { value: (), span: x.span });
            }
            PlanningKind::SampleSize | PlanningKind::Legend => {}
        }
    }
}

/// Whether "not", "no" or "without" stands within the few words before a statement.
fn denied(manuscript: &Manuscript, span: Span) -> bool {
    let before = &manuscript.block(span).text[..span.start as usize];
    let sentence = before.rsplit(". ").next().unwrap_or("");
    sentence
        .rsplit(char::is_whitespace)
        .take(6)
        .any(|w| ["not", "no", "without", "nor"].contains(&w.to_lowercase().as_str()))
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::manuscript::testing::paragraphs;

    fn context(parts: &[(&str, &str)]) -> Context {
        let manuscript = paragraphs(parts);
        let scan = crate::reading::scan(&manuscript);
        let readings = crate::reading::read(&manuscript, &scan);
        gather(&manuscript, &scan, &readings)
    }

    #[test]
    fn gathers_methods() {
        let c = context(&[
            (
                "Methods",
                "Sixty participants were randomised to syrup or water. Means were compared with the paired t test and \
                 analysis of covariance. Tests were two-sided and P < 0.01 was considered significant. Values are \
                 means ± SEM. Intervals are 95% confidence intervals. Pairs were compared with a Bonferroni correction.",
            ),
            ("Results", "Hives in the syrup group (n = 31) were heavier than in the water group (n = 29)."),
        ]);
        assert!(c.has_methods && c.has_results);
        assert_eq!(c.alpha.iter().map(|a| a.value.value()).collect::<Vec<_>>(), [0.01]);
        assert_eq!(c.sides.map(|s| s.value), Some(Sides::Two));
        assert_eq!(c.spread.map(|s| s.value), Some(crate::reading::SpreadKind::Se));
        assert_eq!(c.level.map(|l| l.value.value()), Some(95.0));
        assert_eq!(c.randomised.map(|r| r.value), Some(60));
        let arms: Vec<_> = c.arms.iter().map(|a| (a.label.as_str(), a.n)).collect();
        assert_eq!(arms, [("syrup", 31), ("water", 29)]);
        let tests: Vec<_> = c.tests.iter().map(|t| t.value).collect();
        assert_eq!(tests, [Test::PairedT, Test::Ancova, Test::PostHoc]);
        assert!(c.paired.is_some() && c.adjusted.is_some() && c.multiplicity.is_some());
        assert!(c.crossover.is_none() && c.clustered.is_none() && c.non_inferiority.is_none());
    }

    #[test]
    fn stays_silent_where_nothing_is_stated() {
        let c =
            context(&[("Results", "Stings were reported by some women (n = 4). Crossing over the road took time.")]);
        assert!(!c.has_methods && c.alpha.is_empty() && c.arms.is_empty() && c.randomised.is_none());
        assert!(c.spread.is_none() && c.level.is_none() && c.crossover.is_none());
    }
}
