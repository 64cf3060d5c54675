//! Names and phrases that the formats share: identifiers for machines, clauses for people.

use crate::query::Ground;
use crate::reading::{
    Assumption, Attribution, ClaimKind, Direction, Inference, Measure, Origin, PlanningKind, Relation, Role,
    SpreadKind, Symbol,
};
use crate::recompute::Quantity;

pub fn relation(relation: Relation) -> &'static str {
    match relation {
        Relation::Equal => "=",
        Relation::Less => "<",
        Relation::Greater => ">",
        Relation::AtMost => "<=",
        Relation::AtLeast => ">=",
        Relation::NotSignificant => "ns",
    }
}

pub fn role(role: Role) -> &'static str {
    match role {
        Role::Effect => "effect",
        Role::NonInferiority => "non-inferiority",
        Role::Interaction => "interaction",
        Role::TrendOrJoint => "trend",
        Role::Baseline => "baseline",
        Role::WithinGroup => "within-group",
        Role::AssumptionOrFit => "assumption",
    }
}

pub fn symbol(symbol: Symbol) -> &'static str {
    match symbol {
        Symbol::T => "t",
        Symbol::F => "F",
        Symbol::ChiSquared => "chi2",
        Symbol::Z => "z",
        Symbol::U => "U",
        Symbol::W => "W",
        Symbol::H => "H",
        Symbol::R => "r",
        Symbol::Rho => "rho",
        Symbol::Tau => "tau",
        Symbol::Q => "Q",
        Symbol::Other => "other",
    }
}

pub fn measure(measure: Measure) -> &'static str {
    match measure {
        Measure::MeanDifference => "mean difference",
        Measure::RiskRatio => "risk ratio",
        Measure::OddsRatio => "odds ratio",
        Measure::HazardRatio => "hazard ratio",
        Measure::RateRatio => "rate ratio",
        Measure::RiskDifference => "risk difference",
        Measure::PercentDifference => "percent difference",
        Measure::RegressionCoefficient => "regression coefficient",
        Measure::Correlation => "correlation",
        Measure::StandardizedDifference => "standardized difference",
        Measure::Efficacy | Measure::NumberNeededToTreat | Measure::EtaSquared | Measure::Other => "other",
    }
}

pub fn spread_kind(kind: SpreadKind) -> &'static str {
    match kind {
        SpreadKind::Sd => "sd",
        SpreadKind::Se => "se",
        SpreadKind::Iqr => "iqr",
        SpreadKind::Range => "range",
        SpreadKind::Ci => "ci",
        SpreadKind::Unstated => "unstated",
    }
}

/// A claim that misreads P, or takes significance for size, concludes a difference.
pub fn claim_kind(kind: ClaimKind) -> &'static str {
    match kind {
        ClaimKind::NoDifference => "no-difference",
        ClaimKind::NotSignificant => "not-significant",
        ClaimKind::Difference | ClaimKind::PMisread | ClaimKind::SignificanceAsSize => "difference",
        ClaimKind::Trend => "trend",
        ClaimKind::Equivalence => "equivalence",
        ClaimKind::WithinGroupContrast => "within-group-contrast",
    }
}

/// How a claim is worded, where that matters beside its kind.
pub fn claim_form(kind: ClaimKind) -> Option<&'static str> {
    match kind {
        ClaimKind::PMisread => Some("p-misread"),
        ClaimKind::SignificanceAsSize => Some("significance-as-size"),
        _ => None,
    }
}

pub fn attribution(attribution: Attribution) -> &'static str {
    match attribution {
        Attribution::ThisStudy => "this-study",
        Attribution::OtherAuthors => "other-authors",
        Attribution::Baseline => "baseline",
        Attribution::FitOrAssumption => "fit-or-assumption",
        Attribution::Plan => "plan",
    }
}

pub fn direction(direction: Direction) -> &'static str {
    match direction {
        Direction::Higher => "higher",
        Direction::Lower => "lower",
    }
}

pub fn planning_kind(kind: PlanningKind) -> &'static str {
    match kind {
        PlanningKind::Alpha => "alpha",
        PlanningKind::Power => "power",
        PlanningKind::Sided => "sided",
        PlanningKind::SampleSize => "sample-size",
        PlanningKind::Threshold => "threshold",
        PlanningKind::Legend => "legend",
        PlanningKind::Multiplicity => "multiplicity",
    }
}

pub fn quantity(quantity: Quantity) -> &'static str {
    match quantity {
        Quantity::P => "p",
        Quantity::Interval => "interval",
        Quantity::Estimate => "estimate",
        Quantity::Percent => "percent",
        Quantity::Statistic => "statistic",
        Quantity::Df => "df",
        Quantity::Events => "events",
        Quantity::Total => "total",
    }
}

/// Where a figure comes from: `printed`, what it was inferred from, or the name of the assumption.
pub fn origin(origin: Origin) -> &'static str {
    match origin {
        Origin::Printed(_) => "printed",
        Origin::Inferred(Inference::Header, _) => "header",
        Origin::Inferred(Inference::SameSentence, _) => "same sentence",
        Origin::Inferred(Inference::OtherSentence, _) => "other sentence",
        Origin::Inferred(Inference::ArmSize, _) => "arm size",
        Origin::Inferred(Inference::Siblings, _) => "other counts beside it",
        Origin::Inferred(Inference::Categories, _) => "sum of categories",
        Origin::Inferred(Inference::FromPercent, _) => "percent",
        Origin::Inferred(Inference::FromGroupSizes, _) => "group sizes",
        Origin::Assumed(assumption) => assumption_name(assumption),
    }
}

pub fn assumption_name(assumption: Assumption) -> &'static str {
    match assumption {
        Assumption::TwoSided => "two-sided",
        Assumption::Level95 => "95 % level",
        Assumption::Alpha05 => "alpha 0.05",
        Assumption::SpreadUnnamed => "spread unnamed",
        Assumption::Unadjusted => "unadjusted",
        Assumption::PlausibleDf => "plausible df",
        Assumption::UsualScale => "usual scale",
    }
}

/// The ground of a query, as a clause for people.
pub fn ground(ground: Ground) -> &'static str {
    match ground {
        Ground::ByDefinition => "by definition, whatever the analysis",
        Ground::GivenTheStatedTest => "given the test that is stated for this result",
        Ground::IfOneMethod => "if one method gave all of these figures",
        Ground::IfUnadjusted => "if the comparison is unadjusted and the groups are independent",
        Ground::Reporting => "a matter of reporting; nothing is recomputed",
    }
}

/// An assumption, as a clause for people.
pub fn assumption(assumption: Assumption) -> &'static str {
    match assumption {
        Assumption::TwoSided => "the test is two-sided, as nothing else is stated",
        Assumption::Level95 => "the interval is a 95 % interval, as no level is printed",
        Assumption::Alpha05 => "alpha is 0.05, as nothing else is stated",
        Assumption::SpreadUnnamed => "the spread, which is not named, is a standard deviation or a standard error",
        Assumption::Unadjusted => "the groups are independent and the comparison is unadjusted",
        Assumption::PlausibleDf => "the degrees of freedom are not printed; plausible ones were tried",
        Assumption::UsualScale => "the limits were computed on the scale that is usual for this measure",
    }
}

/// Whether an explanation of a query says what was taken for granted, not what may have slipped.
pub fn is_assumption(kind: &str) -> bool {
    let named = ["two-sided", "level-95", "alpha-05", "spread-unnamed", "unadjusted", "plausible-df", "usual-scale"];
    kind == "assumption" || named.contains(&kind)
}
