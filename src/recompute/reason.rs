//! Why a result is undecided, or why a near miss tallies: a small closed set of phrases for the closing account.

/// "only a p-value is printed".
pub const ONLY_P: &str = "only a p-value is printed";
/// "no p-value or estimate to set against the figures".
pub const NO_P: &str = "no p-value or estimate to set against the figures";
/// "no group sizes".
pub const NO_SIZES: &str = "no group sizes";
/// "no spread".
pub const NO_SPREAD: &str = "no spread";
/// "degrees of freedom not printed".
pub const NO_DF: &str = "degrees of freedom not printed";
/// "the percentage is said to be about so much".
pub const APPROXIMATELY: &str = "the percentage is said to be about so much";
/// "no interval or standard error beside the estimate".
pub const NO_INTERVAL: &str = "no interval or standard error beside the estimate";
/// "no estimate beside the interval".
pub const NO_ESTIMATE: &str = "no estimate beside the interval";
/// "only one group is printed".
pub const ONE_GROUP: &str = "only one group is printed";
/// "no method for these figures".
pub const NO_METHOD: &str = "no method for these figures";
/// "only medians are printed".
pub const MEDIANS: &str = "only medians are printed";
/// "adjusted or model-based analysis".
pub const ADJUSTED: &str = "adjusted or model-based analysis";
/// "paired or repeated measurements".
pub const PAIRED: &str = "paired or repeated measurements";
/// "change scores".
pub const CHANGE: &str = "change scores";
/// "rank test".
pub const RANKED: &str = "rank test";
/// "clustered design".
pub const CLUSTERED: &str = "clustered design";
/// "transformed data".
pub const TRANSFORMED: &str = "transformed data";
/// "p corrected for multiple comparisons".
pub const CORRECTED: &str = "p corrected for multiple comparisons";
/// "time-to-event analysis".
pub const TIME_TO_EVENT: &str = "time-to-event analysis";
/// "p compares other groups than are printed".
pub const OTHER_GROUPS: &str = "p compares other groups than are printed";
/// "imputed data".
pub const IMPUTED: &str = "imputed data";
/// "it is unclear which figures belong together".
pub const UNCLEAR: &str = "it is unclear which figures belong together";
/// "the stated test is not one that these figures give".
pub const OTHER_TEST: &str = "the stated test is not one that these figures give";
/// "p is not about an effect between these groups".
pub const ROLE: &str = "p is not about an effect between these groups";
/// "the scale of the interval is not known".
pub const SCALE: &str = "the scale of the interval is not known";
/// "the interval is not symmetric about the estimate on its usual scale".
pub const ASYMMETRIC: &str = "the interval is not symmetric about the estimate on its usual scale";
/// "agrees at another interval level, and none is printed".
pub const LEVEL: &str = "agrees at another interval level, and none is printed";
/// "close, but outside what rounding allows".
pub const CLOSE: &str = "close, but outside what rounding allows";
/// "the printed figures leave too wide a range".
pub const ROUGH: &str = "the printed figures leave too wide a range";
/// "percent of another denominator".
pub const DENOMINATOR: &str = "percent of another denominator";
/// "an approximate percentage".
pub const ABOUT: &str = "an approximate percentage";
/// "agrees by a stronger method".
pub const STRONGER: &str = "agrees by a stronger method";
/// "agrees with a test on the groups, beside an interval by another method".
pub const OTHER_METHOD: &str = "agrees with a test on the groups, beside an interval by another method";
/// "the approximation does not decide".
pub const APPROXIMATE: &str = "the approximation does not decide";
/// "the group sizes are not printed for this result".
pub const SIZES_DOUBTFUL: &str = "the group sizes are not printed for this result";

/// "cut, not rounded".
pub const CUT: &str = "cut, not rounded";
/// "within one unit of the last place".
pub const LAST_PLACE: &str = "within one unit of the last place";
/// "limits printed in reverse order".
pub const REVERSED: &str = "limits printed in reverse order";

/// Every phrase that explains an undecided result.
pub const ALL: &[&str] = &[
    ONLY_P,
    NO_P,
    NO_SIZES,
    NO_SPREAD,
    NO_DF,
    NO_INTERVAL,
    APPROXIMATELY,
    NO_ESTIMATE,
    ONE_GROUP,
    NO_METHOD,
    MEDIANS,
    ADJUSTED,
    PAIRED,
    CHANGE,
    RANKED,
    CLUSTERED,
    TRANSFORMED,
    CORRECTED,
    TIME_TO_EVENT,
    OTHER_GROUPS,
    IMPUTED,
    UNCLEAR,
    OTHER_TEST,
    ROLE,
    SCALE,
    ASYMMETRIC,
    LEVEL,
    CLOSE,
    ROUGH,
    DENOMINATOR,
    ABOUT,
    STRONGER,
    APPROXIMATE,
    OTHER_METHOD,
    SIZES_DOUBTFUL,
];

/// The phrase of the list that `text` is.
pub(crate) fn listed(text: &str) -> Option<&'static str> {
    ALL.iter().copied().find(|r| *r == text)
}
