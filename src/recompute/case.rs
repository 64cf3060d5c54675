//! One reported result with its readings looked up, and what holds an objection to it back.

use std::borrow::Cow;

use super::reason;
use crate::context::{Context, Test};
use crate::query::Ground;
use crate::reading::{
    Estimate, Figure, Group, Inference, IntervalReading, Measure, Origin, PValue, Readings, Role, Scale, Sides,
    Statistic,
};
use crate::result::{Feature, ReportedResult};

/// A result and its readings.
pub(crate) struct Case<'a> {
    pub result: &'a ReportedResult,
    pub context: &'a Context,
    pub p: Option<&'a PValue>,
    pub interval: Option<&'a IntervalReading>,
    pub statistic: Option<&'a Statistic>,
    estimate: Option<Cow<'a, Estimate>>,
    pub groups: Vec<&'a Group>,
    /// The stated significance level, else 0.05.
    pub alpha: f64,
}

/// Tests that two-group or several-group summaries give.
pub(crate) fn from_summaries(test: Test) -> bool {
    matches!(
        test,
        Test::T | Test::WelchT | Test::Anova | Test::ChiSquared | Test::YatesChiSquared | Test::FisherExact | Test::Z
    )
}

/// Why p of this test does not follow from group summaries.
fn why_not(test: Test) -> &'static str {
    match test {
        Test::PairedT | Test::RepeatedMeasuresAnova | Test::WilcoxonSignedRank | Test::Friedman | Test::McNemar => {
            reason::PAIRED
        }
        Test::MannWhitney | Test::KruskalWallis | Test::Spearman => reason::RANKED,
        Test::Ancova
        | Test::MixedModel
        | Test::Cox
        | Test::LogisticRegression
        | Test::LinearRegression
        | Test::PoissonRegression
        | Test::Gee
        | Test::CochranMantelHaenszel => reason::ADJUSTED,
        Test::LogRank => reason::TIME_TO_EVENT,
        Test::PostHoc => reason::CORRECTED,
        _ => reason::OTHER_TEST,
    }
}

fn feature_reason(feature: Feature) -> &'static str {
    match feature {
        Feature::Paired => reason::PAIRED,
        Feature::Change => reason::CHANGE,
        Feature::Adjusted => reason::ADJUSTED,
        Feature::Clustered => reason::CLUSTERED,
        Feature::Ranked => reason::RANKED,
        Feature::Transformed => reason::TRANSFORMED,
        Feature::Corrected => reason::CORRECTED,
        Feature::TimeToEvent => reason::TIME_TO_EVENT,
        Feature::OtherGroups => reason::OTHER_GROUPS,
        Feature::Imputed => reason::IMPUTED,
        Feature::Unclear => reason::UNCLEAR,
    }
}

impl<'a> Case<'a> {
    pub fn new(readings: &'a Readings, context: &'a Context, result: &'a ReportedResult) -> Case<'a> {
        let alpha = context.alpha.first().map_or(0.05, |a| a.value.value());
        Case {
            result,
            context,
            p: result.p.and_then(|i| readings.p.get(i)),
            interval: result.interval.and_then(|i| readings.intervals.get(i)),
            statistic: result.statistic.and_then(|i| readings.statistics.get(i)),
            estimate: estimate(readings, result),
            groups: result.groups.iter().filter_map(|&i| readings.groups.get(i)).collect(),
            alpha: if alpha > 0.0 && alpha < 1.0 { alpha } else { 0.05 },
        }
    }

    pub fn estimate(&self) -> Option<&Estimate> {
        self.estimate.as_deref()
    }

    /// Tests named for this very result.
    pub fn here(&self) -> impl Iterator<Item = Test> + '_ {
        self.result.tests.iter().filter(|t| t.here).map(|t| t.test.value)
    }

    /// The first test named here that group summaries give.
    pub fn stated(&self) -> Option<Test> {
        self.here().find(|&t| from_summaries(t))
    }

    /// Whether `test` decides a comparison of groups: it is named here, or nothing that summaries give is.
    pub fn decides(&self, variants: &[Test]) -> bool {
        self.stated().is_none() || self.here().any(|t| variants.contains(&t))
    }

    /// The ground of a p from group summaries.
    pub fn group_ground(&self) -> Ground {
        if self.stated().is_some() { Ground::GivenTheStatedTest } else { Ground::IfUnadjusted }
    }

    /// Why a p (or statistic, interval, estimate) from group summaries may not be objected to.
    pub fn group_hold(&self) -> Option<&'static str> {
        if let Some(&(feature, _)) = self.result.features.first() {
            return Some(feature_reason(feature));
        }
        if let Some(p) = self.p {
            if p.corrected {
                return Some(reason::CORRECTED);
            }
            match p.role {
                Role::Effect | Role::Baseline => {}
                Role::WithinGroup => return Some(reason::PAIRED),
                _ => return Some(reason::ROLE),
            }
            if p.shared {
                return Some(reason::UNCLEAR);
            }
        }
        if self.estimate().is_some_and(|e| e.adjusted) {
            return Some(reason::ADJUSTED);
        }
        if let Some(other) = self.here().find(|&t| !from_summaries(t)) {
            return Some(why_not(other));
        }
        if self.groups.iter().any(|g| g.change) {
            return Some(reason::CHANGE);
        }
        // Sizes from where the arms were introduced may not be those analysed.
        let elsewhere = |g: &&Group| size(g).is_some_and(|n| n.is_inferred(Inference::ArmSize));
        if self.groups.iter().any(elsewhere) {
            return Some(reason::SIZES_DOUBTFUL);
        }
        let context = self.context;
        if context.crossover.is_some() {
            return Some(reason::PAIRED);
        }
        if context.clustered.is_some() {
            return Some(reason::CLUSTERED);
        }
        let baseline = self.p.is_some_and(|p| p.role == Role::Baseline);
        if context.adjusted.is_some() && !baseline && self.stated().is_none() {
            return Some(reason::ADJUSTED);
        }
        if context.multiplicity.is_some() && self.groups.len() > 2 {
            return Some(reason::CORRECTED);
        }
        self.only_other_tests_proposed()
    }

    /// The Methods name tests, none of which these groups' summaries give.
    fn only_other_tests_proposed(&self) -> Option<&'static str> {
        let fits = |t: Test| {
            if self.groups.iter().all(|g| g.mean.is_some()) {
                matches!(t, Test::T | Test::WelchT | Test::Anova | Test::Z)
            } else {
                matches!(t, Test::ChiSquared | Test::YatesChiSquared | Test::FisherExact | Test::Z)
            }
        };
        if self.proposed().any(fits) { None } else { self.proposed().find(|&t| !from_summaries(t)).map(why_not) }
    }

    /// All tests that may be meant: those named for this result, then those of the Methods.
    fn proposed(&self) -> impl Iterator<Item = Test> + '_ {
        let methods = self.context.tests.iter().map(|t| t.value);
        self.result.tests.iter().map(|t| t.test.value).chain(methods)
    }

    /// The Methods propose an ordinary test beside another one ("t test or Mann–Whitney as appropriate").
    pub fn rivals_proposed(&self) -> bool {
        self.stated().is_none() && self.proposed().any(|t| !from_summaries(t))
    }

    /// Why a difference between p and the estimate's own interval may not be objected to.
    pub fn interval_hold(&self) -> Option<&'static str> {
        for &(feature, _) in &self.result.features {
            match feature {
                Feature::Ranked | Feature::Corrected | Feature::OtherGroups | Feature::Unclear => {
                    return Some(feature_reason(feature));
                }
                _ => {}
            }
        }
        if let Some(p) = self.p {
            if p.corrected {
                return Some(reason::CORRECTED);
            }
            if p.shared {
                return Some(reason::UNCLEAR);
            }
            match p.role {
                // Where a margin is tested, a p may be against the margin and not against the null value.
                Role::Effect if self.context.non_inferiority.is_some() => return Some(reason::ROLE),
                Role::Effect => {}
                Role::Interaction | Role::NonInferiority | Role::TrendOrJoint => return Some(reason::ROLE),
                Role::Baseline | Role::WithinGroup => {}
                Role::AssumptionOrFit => return Some(reason::ROLE),
            }
        }
        self.here()
            .find(|t| {
                matches!(
                    t,
                    Test::LogRank
                        | Test::FisherExact
                        | Test::MannWhitney
                        | Test::WilcoxonSignedRank
                        | Test::KruskalWallis
                        | Test::Friedman
                        | Test::Permutation
                        | Test::PostHoc
                        | Test::CochranMantelHaenszel
                        | Test::McNemar
                        | Test::ChiSquared
                        | Test::YatesChiSquared
                )
            })
            .map(why_not)
    }

    pub fn one_sided(&self) -> bool {
        self.context.sides.is_some_and(|s| s.value == Sides::One)
    }

    /// The interval's level in percent, and whether it is printed with it or stated in the Methods.
    pub fn level(&self) -> (f64, bool) {
        let printed = self.interval.and_then(|i| i.level).map(|f| f.printed.value());
        let stated = self.context.level.map(|s| s.value.value());
        match printed.or(stated) {
            Some(level) if level > 50.0 && level < 100.0 => (level, true),
            Some(level) if level > 0.5 && level < 1.0 => (level * 100.0, true),
            _ => (95.0, false),
        }
    }

    pub fn has(&self, feature: Feature) -> bool {
        self.result.has(feature)
    }
}

/// The result's estimate; without one, the unnamed figure printed right before the interval's limits, whose
/// measure and scale are not known.
fn estimate<'a>(readings: &'a Readings, result: &ReportedResult) -> Option<Cow<'a, Estimate>> {
    if let Some(e) = result.estimate {
        return readings.estimates.get(e).map(Cow::Borrowed);
    }
    let interval = readings.intervals.get(result.interval?)?;
    let (value, span) = interval.estimate?;
    Some(Cow::Owned(Estimate {
        span,
        sentence: interval.sentence,
        measure: Measure::Other,
        scale: Scale::Unknown,
        value,
        se: None,
        percent: interval.percent,
        adjusted: false,
    }))
}

/// The group's size: `n`, else the total of its count.
pub(crate) fn size(group: &Group) -> Option<Figure> {
    group.n.or(group.total).filter(|f| f.printed.count().is_some_and(|n| n > 0))
}

/// Whether the figure stands with the group itself and not in a header or another sentence.
pub(crate) fn own(figure: &Figure) -> bool {
    matches!(figure.origin, Origin::Printed(_) | Origin::Inferred(Inference::SameSentence, _))
}
