//! The closed set of check kinds that a rule file may ask for, over closed vocabularies.
//!
//! A rule that none of these can express needs a new kind here, not a condition in its file.

use crate::reading::{Attribution, ClaimKind};
use crate::recompute::Quantity;
use serde::Deserialize;

/// What a rule looks for. In a rule file: one table `[check.<kind>]` with the kind's parameters.
#[derive(Clone, Debug, PartialEq, Deserialize)]
#[serde(rename_all = "kebab-case", deny_unknown_fields)]
pub enum Check {
    /// A figure that was recomputed and differs from what is printed.
    RecomputationDiffers { of: Of, from: Vec<Basis> },
    /// A figure that its own definition confines to `lowest ..= highest`.
    Outside { field: Bounded, lowest: f64, highest: f64 },
    /// Two figures printed in the order that their meaning forbids.
    Order { of: Pair },
    /// A confidence interval that does not hold the estimate printed right before it.
    EstimateOutsideInterval {},
    /// One result printed in two places, all its figures alike but one.
    SameResultDiffers {},
    /// Rows of a table whose percentages agree on a size that its header does not print; once per table.
    OtherTotal {},
    /// Means below twice their SD, of quantities that cannot be negative; once per table.
    LowMeans {},
    /// An estimate with its interval that stands in two rows of one table, for two sets of groups.
    SameEstimate {},
    /// A column of p-values that fit the rows beside their own.
    ColumnShifted {},
    /// The arms of a sentence do not add up to the number randomised that it states.
    ArmsAgainstWhole {},
    /// P printed as exactly zero.
    PrintedZero {},
    /// P printed only as above or below one of `bounds`, or as not significant; once per section.
    ThresholdOnly { bounds: Vec<f64> },
    /// A part that a result lacks; once per section that was recognised.
    Missing { what: Part },
    /// Spreads of which the manuscript never says whether they are SD or SE; once per manuscript.
    SpreadUnnamed { sign: SpreadSign },
    /// A claim, chosen by what it says, of whom, and on what ground.
    Claim {
        kinds: Vec<Claimed>,
        #[serde(default = "this_study")]
        of: Vec<Whose>,
        backing: Backing,
        #[serde(default)]
        per: Per,
    },
    /// "Significant" beside a p above alpha, or "not significant" beside one below.
    ClaimAgainstP { says: Says },
    /// "Higher" or "lower" against the two figures printed for it.
    DirectionAgainstFigures {},
    /// What the Methods do not state; once per manuscript, only where Methods were recognised.
    Unstated { what: Statement },
    /// One-sided tests without a word on their direction or reason.
    OneSidedUnexplained {},
}

/// The recomputed figure.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Deserialize)]
#[serde(rename_all = "kebab-case")]
pub enum Of {
    P,
    Interval,
    Estimate,
    Percent,
    Statistic,
    Df,
    Events,
    Total,
}

/// What a figure was recomputed from.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Deserialize)]
#[serde(rename_all = "kebab-case")]
pub enum Basis {
    /// A test statistic with its degrees of freedom.
    Statistic,
    /// An interval, with or without its estimate.
    Interval,
    /// A p-value.
    P,
    /// An estimate with its standard error, or an estimate alone.
    Estimate,
    /// Means (or medians) of groups with their spreads and sizes.
    Means,
    /// Counts or percentages of groups.
    Counts,
    /// Sizes of groups alone.
    GroupSizes,
}

#[derive(Clone, Copy, Debug, PartialEq, Eq, Deserialize)]
#[serde(rename_all = "kebab-case")]
pub enum Bounded {
    P,
    Correlation,
    EtaSquared,
}

#[derive(Clone, Copy, Debug, PartialEq, Eq, Deserialize)]
#[serde(rename_all = "kebab-case")]
pub enum Pair {
    IntervalLimits,
    /// Quartiles or the ends of a range.
    SpreadLimits,
    /// A count and the total it is a part of.
    CountInTotal,
}

#[derive(Clone, Copy, Debug, PartialEq, Eq, Deserialize)]
#[serde(rename_all = "kebab-case")]
pub enum Part {
    /// The size of the effect beside a between-group p.
    EffectEstimate,
    /// The interval of an estimate.
    Interval,
    /// The degrees of freedom of t, F or χ².
    Df,
    /// The spread of a mean.
    Spread,
}

#[derive(Clone, Copy, Debug, PartialEq, Eq, Deserialize)]
#[serde(rename_all = "kebab-case")]
pub enum SpreadSign {
    PlusMinus,
    Brackets,
}

#[derive(Clone, Copy, Debug, PartialEq, Eq, Deserialize)]
#[serde(rename_all = "kebab-case")]
pub enum Claimed {
    NoDifference,
    NotSignificant,
    Difference,
    Trend,
    Equivalence,
    WithinGroupContrast,
    PMisread,
    SignificanceAsSize,
}

#[derive(Clone, Copy, Debug, PartialEq, Eq, Deserialize)]
#[serde(rename_all = "kebab-case")]
pub enum Whose {
    ThisStudy,
    OtherAuthors,
    Baseline,
    FitOrAssumption,
    Plan,
}

/// What stands behind a claim in its own sentence.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Deserialize)]
#[serde(rename_all = "kebab-case")]
pub enum Backing {
    /// Every effect p of the sentence lies above alpha, and no interval is set against a margin.
    PAboveAlpha,
    /// Neither p nor interval nor group figures.
    Nothing,
    /// P above alpha, or no p at all.
    NoPBelowAlpha,
    /// No margin is stated anywhere in the manuscript.
    NoMargin,
    /// No p for a comparison between groups and no interaction test.
    NoBetweenGroupTest,
    /// Whatever stands there.
    Any,
}

#[derive(Clone, Copy, Debug, Default, PartialEq, Eq, Deserialize)]
#[serde(rename_all = "kebab-case")]
pub enum Per {
    #[default]
    Claim,
    Section,
}

#[derive(Clone, Copy, Debug, PartialEq, Eq, Deserialize)]
#[serde(rename_all = "kebab-case")]
pub enum Says {
    Significant,
    NotSignificant,
}

#[derive(Clone, Copy, Debug, PartialEq, Eq, Deserialize)]
#[serde(rename_all = "kebab-case")]
pub enum Statement {
    Alpha,
    Power,
    Sides,
    SampleSize,
}

fn this_study() -> Vec<Whose> {
    vec![Whose::ThisStudy]
}

impl Check {
    /// The kind's name in rule files.
    pub fn name(&self) -> &'static str {
        match self {
            Check::RecomputationDiffers { .. } => "recomputation-differs",
            Check::Outside { .. } => "outside",
            Check::Order { .. } => "order",
            Check::EstimateOutsideInterval {} => "estimate-outside-interval",
            Check::SameResultDiffers {} => "same-result-differs",
            Check::OtherTotal {} => "other-total",
            Check::LowMeans {} => "low-means",
            Check::SameEstimate {} => "same-estimate",
            Check::ColumnShifted {} => "column-shifted",
            Check::ArmsAgainstWhole {} => "arms-against-whole",
            Check::PrintedZero {} => "printed-zero",
            Check::ThresholdOnly { .. } => "threshold-only",
            Check::Missing { .. } => "missing",
            Check::SpreadUnnamed { .. } => "spread-unnamed",
            Check::Claim { .. } => "claim",
            Check::ClaimAgainstP { .. } => "claim-against-p",
            Check::DirectionAgainstFigures {} => "direction-against-figures",
            Check::Unstated { .. } => "unstated",
            Check::OneSidedUnexplained {} => "one-sided-unexplained",
        }
    }
}

impl Of {
    pub fn is(self, quantity: Quantity) -> bool {
        let of = match quantity {
            Quantity::P => Of::P,
            Quantity::Interval => Of::Interval,
            Quantity::Estimate => Of::Estimate,
            Quantity::Percent => Of::Percent,
            Quantity::Statistic => Of::Statistic,
            Quantity::Df => Of::Df,
            Quantity::Events => Of::Events,
            Quantity::Total => Of::Total,
        };
        self == of
    }
}

impl Claimed {
    pub fn is(self, kind: ClaimKind) -> bool {
        let claimed = match kind {
            ClaimKind::NoDifference => Claimed::NoDifference,
            ClaimKind::NotSignificant => Claimed::NotSignificant,
            ClaimKind::Difference => Claimed::Difference,
            ClaimKind::Trend => Claimed::Trend,
            ClaimKind::Equivalence => Claimed::Equivalence,
            ClaimKind::WithinGroupContrast => Claimed::WithinGroupContrast,
            ClaimKind::PMisread => Claimed::PMisread,
            ClaimKind::SignificanceAsSize => Claimed::SignificanceAsSize,
        };
        self == claimed
    }
}

impl Whose {
    pub fn is(self, attribution: Attribution) -> bool {
        let whose = match attribution {
            Attribution::ThisStudy => Whose::ThisStudy,
            Attribution::OtherAuthors => Whose::OtherAuthors,
            Attribution::Baseline => Whose::Baseline,
            Attribution::FitOrAssumption => Whose::FitOrAssumption,
            Attribution::Plan => Whose::Plan,
        };
        self == whose
    }
}
