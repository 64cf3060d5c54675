//! Reading: one scan to tokens, then recognisers on tokens, one file per kind of reading.
//!
//! A *figure* is one number as printed, with its origin. A *reading* is one quantity read from the
//! text, made of figures. Every reading names the sentence it stands in.

pub mod claim;
mod claim_words;
pub mod estimate;
pub mod group;
pub mod interval;
pub mod lexicon;
pub mod p;
pub mod planning;
pub mod quantity;
pub mod sentence;
pub mod statistic;
pub mod table;
pub mod token;

use crate::layout::Layout;
use crate::manuscript::{BlockKind, Manuscript, SectionKind};
use crate::printed::Printed;
use crate::text::Span;

pub use sentence::{Scan, Sentence, SentenceView, scan};
pub use token::{Style, Token, TokenKind};

/// One number with its origin.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Figure {
    pub printed: Printed,
    pub origin: Origin,
}

impl Figure {
    /// As it stands in the text.
    pub fn at(printed: Printed, span: Span) -> Figure {
        Figure { printed, origin: Origin::Printed(span) }
    }

    /// Taken from `span`, or computed from the figures there.
    pub fn inferred(printed: Printed, inference: Inference, span: Span) -> Figure {
        Figure { printed, origin: Origin::Inferred(inference, span) }
    }

    pub fn is_inferred(&self, inference: Inference) -> bool {
        matches!(self.origin, Origin::Inferred(i, _) if i == inference)
    }

    /// Where it stands or was taken from.
    pub fn place(&self) -> Option<Span> {
        match self.origin {
            Origin::Printed(span) | Origin::Inferred(_, span) => Some(span),
            Origin::Assumed(_) => None,
        }
    }
}

/// Where a figure comes from.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Origin {
    Printed(Span),
    /// Taken from another place, or computed from other figures.
    Inferred(Inference, Span),
    Assumed(Assumption),
}

#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum Inference {
    /// The group's size from the header of its column (or the row's label).
    Header,
    /// Printed elsewhere in the same sentence for the same group.
    SameSentence,
    /// Printed in another sentence that the text refers to.
    OtherSentence,
    /// The arm's size as the Methods or the flow of participants give it.
    ArmSize,
    /// The total that the other counts of the paragraph, or of a block of a table, have or make.
    Siblings,
    /// The sum of the categories that the sentence lists: their percentages fit it.
    Categories,
    /// The only count that the printed percent and events allow.
    FromPercent,
    /// Degrees of freedom that the group sizes give.
    FromGroupSizes,
}

/// What is assumed where the text is silent; printed with every recomputation that leans on it.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash, PartialOrd, Ord)]
pub enum Assumption {
    /// Tests are two-sided unless stated otherwise (common practice).
    TwoSided,
    /// An interval without a printed level is a 95 % interval (common practice).
    Level95,
    /// Alpha is 0.05 unless stated otherwise (common practice).
    Alpha05,
    /// A spread without a name may be a standard deviation or a standard error.
    SpreadUnnamed,
    /// The groups are independent and the comparison is unadjusted.
    Unadjusted,
    /// The degrees of freedom are not printed; plausible ones were tried.
    PlausibleDf,
    /// The limits were computed on the scale usual for this measure.
    UsualScale,
}

/// How a p-value stands to its figure.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum Relation {
    Equal,
    Less,
    Greater,
    AtMost,
    AtLeast,
    /// Printed as `NS`, without a figure.
    NotSignificant,
}

/// What a p-value is about. Only an effect p is set against an interval's null value.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum Role {
    Effect,
    NonInferiority,
    Interaction,
    /// A trend over ordered groups, or a joint test of several categories.
    TrendOrJoint,
    Baseline,
    WithinGroup,
    /// Normality, equal variances, heterogeneity, goodness of fit, proportional hazards.
    AssumptionOrFit,
}

#[derive(Clone, Debug, PartialEq)]
pub struct PValue {
    pub span: Span,
    pub sentence: u32,
    pub relation: Relation,
    /// `None` only for [`Relation::NotSignificant`].
    pub value: Option<Printed>,
    pub role: Role,
    /// Said to be adjusted or corrected for multiple comparisons, in its own words.
    pub corrected: bool,
    /// "all", "both", "each": one p for several results.
    pub shared: bool,
}

/// A confidence (or credible) interval. IQRs and ranges are spreads of groups.
#[derive(Clone, Debug, PartialEq)]
pub struct IntervalReading {
    pub span: Span,
    pub sentence: u32,
    /// In percent, as printed (`95`).
    pub level: Option<Figure>,
    pub lower: Printed,
    pub upper: Printed,
    /// Both limits carry a percent sign, or the interval is of percentages.
    pub percent: bool,
    pub credible: bool,
    /// Printed with the larger limit first; `lower` and `upper` are in numerical order all the same.
    pub reversed: bool,
    /// A figure printed right before the limits: `0.75 (0.60–0.93)`.
    pub estimate: Option<(Printed, Span)>,
}

#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum Symbol {
    T,
    F,
    ChiSquared,
    Z,
    U,
    W,
    H,
    R,
    Rho,
    Tau,
    Q,
    /// Hotelling, Wilks and the like: read, not recomputed.
    Other,
}

#[derive(Clone, Debug, PartialEq)]
pub struct Statistic {
    pub span: Span,
    pub sentence: u32,
    pub symbol: Symbol,
    /// One degree of freedom (t, χ²) stands here.
    pub df1: Option<Figure>,
    pub df2: Option<Figure>,
    pub value: Printed,
    /// Printed as `F < 1`: the value is a bound.
    pub relation: Relation,
    /// A sample size printed with the statistic: `χ²(1, n = 48)`, `r = 0.4, n = 60`.
    pub n: Option<Figure>,
}

#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum SpreadKind {
    Sd,
    Se,
    Iqr,
    Range,
    Ci,
    Unstated,
}

/// The summary of one group: a mean or median with its spread, or a count with its total and percent.
#[derive(Clone, Debug, PartialEq)]
pub struct Group {
    pub span: Span,
    pub sentence: u32,
    /// The group's name as far as the text gives it, possibly empty.
    pub label: String,
    pub n: Option<Figure>,
    pub events: Option<Figure>,
    pub total: Option<Figure>,
    pub percent: Option<Printed>,
    pub mean: Option<Printed>,
    pub median: Option<Printed>,
    pub spread_kind: Option<SpreadKind>,
    /// One figure (SD, SE) or two (IQR, range, interval).
    pub spread: Vec<Printed>,
    /// The figure is a change from baseline, not a level.
    pub change: bool,
    /// The percentage is said to be about so much ("over 60 %", "nearly half (45 %)").
    pub approximate: bool,
    /// Count, total and percent are printed in one expression (`12/40 (30%)`, `12 of 40 (30%)`).
    pub one_expression: bool,
}

impl Group {
    /// A group of which nothing is known yet but its place.
    pub fn new(span: Span, sentence: u32) -> Group {
        Group {
            span,
            sentence,
            label: String::new(),
            n: None,
            events: None,
            total: None,
            percent: None,
            mean: None,
            median: None,
            spread_kind: None,
            spread: Vec::new(),
            change: false,
            approximate: false,
            one_expression: false,
        }
    }

    /// Whether anything is told of the group besides its name and size.
    pub fn has_figure(&self) -> bool {
        self.events.is_some()
            || self.percent.is_some()
            || self.mean.is_some()
            || self.median.is_some()
            || !self.spread.is_empty()
    }
}

#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum Measure {
    MeanDifference,
    RiskRatio,
    OddsRatio,
    HazardRatio,
    RateRatio,
    RiskDifference,
    PercentDifference,
    RegressionCoefficient,
    Correlation,
    StandardizedDifference,
    /// 1 − ratio in percent (vaccine efficacy, relative risk reduction).
    Efficacy,
    NumberNeededToTreat,
    /// η² and partial η².
    EtaSquared,
    Other,
}

/// The scale on which an interval is symmetric.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum Scale {
    /// Differences: null value 0.
    Difference,
    /// Ratios: by logs, null value 1.
    Ratio,
    /// Correlations: by Fisher's z, null value 0.
    Correlation,
    /// By log(1 − efficacy), null value 0.
    Efficacy,
    /// Reciprocal of a risk difference: an interval may run through infinity.
    Reciprocal,
    /// A single proportion, mean, AUC …: no null value to test against.
    Single,
    Unknown,
}

#[derive(Clone, Debug, PartialEq)]
pub struct Estimate {
    pub span: Span,
    pub sentence: u32,
    pub measure: Measure,
    pub scale: Scale,
    pub value: Printed,
    /// A standard error printed beside it.
    pub se: Option<Printed>,
    pub percent: bool,
    pub adjusted: bool,
}

#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum ClaimKind {
    NoDifference,
    NotSignificant,
    Difference,
    Trend,
    Equivalence,
    WithinGroupContrast,
    /// P read as the probability of chance or of the hypothesis.
    PMisread,
    /// Significance in place of size ("highly significant").
    SignificanceAsSize,
}

/// Who says it of what: only claims about this study's own comparisons are asked about.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum Attribution {
    ThisStudy,
    OtherAuthors,
    /// Baseline similarity after randomisation.
    Baseline,
    /// Goodness of fit, assumptions, agreement of methods.
    FitOrAssumption,
    /// An aim, a hypothesis, a plan.
    Plan,
}

#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum Direction {
    Higher,
    Lower,
}

#[derive(Clone, Debug, PartialEq)]
pub struct Claim {
    /// The shortest phrase that makes it.
    pub span: Span,
    pub sentence: u32,
    pub kind: ClaimKind,
    pub attribution: Attribution,
    /// "higher", "reduced" …, where the claim has one.
    pub direction: Option<Direction>,
    /// It says "significant" (or the like) in so many words.
    pub says_significant: bool,
}

#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum PlanningKind {
    Alpha,
    Power,
    Sided,
    SampleSize,
    Threshold,
    Legend,
    Multiplicity,
}

#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum Sides {
    One,
    Two,
}

#[derive(Clone, Debug, PartialEq)]
pub struct Planning {
    pub span: Span,
    pub sentence: u32,
    pub what: PlanningKind,
    /// Alpha or a threshold as a proportion, power as printed, the sample size.
    pub value: Option<Printed>,
    pub sides: Option<Sides>,
}

/// Everything read from one manuscript, each list in reading order.
#[derive(Clone, Debug, Default)]
pub struct Readings {
    pub p: Vec<PValue>,
    pub intervals: Vec<IntervalReading>,
    pub statistics: Vec<Statistic>,
    pub groups: Vec<Group>,
    pub estimates: Vec<Estimate>,
    pub claims: Vec<Claim>,
    pub planning: Vec<Planning>,
    /// Groups that running text names with their sizes.
    pub arms: Vec<group::arm::SizedArm>,
    /// The layout of each table by the number of its block: working it out is dear, and results need it as well.
    pub layouts: Vec<(usize, Layout)>,
}

impl Readings {
    /// The layout of the table that is block number `table`.
    pub fn layout(&self, table: usize) -> Option<&Layout> {
        let at = self.layouts.binary_search_by_key(&table, |l| l.0).ok()?;
        Some(&self.layouts[at].1)
    }
}

/// The members of a list of readings that stand in some sentences. Lists are in reading order.
pub fn within<T>(list: &[T], sentence: impl Fn(&T) -> u32, sentences: std::ops::Range<u32>) -> &[T] {
    let first = list.partition_point(|x| sentence(x) < sentences.start);
    let count = list[first..].partition_point(|x| sentence(x) < sentences.end);
    &list[first..first + count]
}

/// Reads a whole manuscript. Blocks of the reference list and of back matter are passed over.
pub fn read(manuscript: &Manuscript, scan: &Scan) -> Readings {
    let mut readings = Readings::default();
    for (number, block) in manuscript.blocks.iter().enumerate() {
        if block.kind == BlockKind::Heading {
            continue;
        }
        let section = &manuscript.sections[block.section as usize];
        if matches!(section.kind, SectionKind::References | SectionKind::Back) {
            continue;
        }
        if block.is_table() {
            table::read(manuscript, scan, number, &mut readings);
            continue;
        }
        read_paragraph(manuscript, scan, scan.of_block(number), section.kind, &mut readings);
    }
    readings.groups.shrink_to_fit();
    readings.p.shrink_to_fit();
    readings
}

fn read_paragraph(
    manuscript: &Manuscript,
    scan: &Scan,
    sentences: std::ops::Range<u32>,
    section: SectionKind,
    readings: &mut Readings,
) {
    // A paragraph's "values are mean ± SD" may stand behind the figures that it explains.
    let mut declared = group::Declared::default();
    let mut mentions = Vec::new();
    for id in sentences.clone() {
        let view = scan.view(manuscript, id);
        declared.note(&view);
        group::total::mentions(&view, &mut mentions);
    }
    let mut setting = group::Setting { section, declared, limits: None };
    let mut named = estimate::Named::default();
    let (first_p, first_group) = (readings.p.len(), readings.groups.len());
    for id in sentences {
        read_sentence(&scan.view(manuscript, id), &mut setting, &mut named, readings);
    }
    let p = &readings.p[first_p..];
    let tested = |sentence| !within(p, |p| p.sentence, sentence..sentence + 1).is_empty();
    let groups = &mut readings.groups[first_group..];
    group::named::fill(groups, |id| scan.view(manuscript, id));
    group::total::fill(groups, &mentions, tested, |id| scan.view(manuscript, id));
}

fn read_sentence(
    view: &SentenceView,
    setting: &mut group::Setting,
    named: &mut estimate::Named,
    readings: &mut Readings,
) {
    let mut taken = vec![false; view.len()];
    let p = p::find(view);
    let mut defines = vec![false; p.len()];
    planning::read(view, &p, &mut defines, &mut readings.planning);
    for (x, defines) in p.iter().zip(defines) {
        taken[x.first..=x.last].fill(true);
        if defines {
            continue;
        }
        readings.p.push(x.reading(view));
    }
    let first_interval = readings.intervals.len();
    named.level = interval::read(view, &mut taken, &mut readings.intervals).or(named.level);
    statistic::read(view, &mut taken, &mut readings.statistics);
    let first_estimate = readings.estimates.len();
    estimate::read(view, named, &mut taken, &mut readings.intervals, first_interval, &mut readings.estimates);
    let (intervals, estimates) = (&readings.intervals[first_interval..], &readings.estimates[first_estimate..]);
    group::read(view, setting, intervals, estimates, &mut taken, &mut readings.arms, &mut readings.groups);
    claim::read(view, &p, &mut readings.claims);
}
