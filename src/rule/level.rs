//! The level policy: one function, the same for every rule.
//!
//! A rule names a ceiling. The level falls with the ground (why the figure must agree), the distance
//! (how far off it is) and the relevance (what hangs on it).

use crate::query::{Ground, Level};

/// How far a printed p lies from the recomputed one before that alone can be `major`.
pub const MAJOR_FACTOR: f64 = 5.0;

/// A p closer than this to the recomputed one, on the same side of alpha, changes nothing that hangs on it.
pub const NOTE_FACTOR: f64 = 1.25;

/// What the policy weighs, beside the rule's ceiling.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Weight {
    pub ground: Ground,
    pub distance: Off,
    /// A claim in the title, the abstract or the conclusions, with no interval in support.
    pub drives_message: bool,
    /// A figure on which nothing hangs: a baseline comparison, a test of an assumption.
    pub peripheral: bool,
    /// The other rows of the same table tally sharply, so the table's plain method is known.
    pub table_vouches: bool,
}

/// How far off the figure in question is.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Off {
    /// Nothing was measured: a claim, a form, an absence, a plain impossibility.
    NotMeasured,
    /// Less than one unit of the last printed place.
    BelowOneUnit,
    /// A p, by this factor; and whether both lie on two sides of alpha under every candidate.
    P { factor: f64, across_alpha: bool },
    /// Another figure, by one unit of its last place or more.
    Figure,
}

impl Weight {
    /// For questions of wording and reporting, where no figure is recomputed.
    pub fn reporting() -> Weight {
        Weight {
            ground: Ground::Reporting,
            distance: Off::NotMeasured,
            drives_message: false,
            peripheral: false,
            table_vouches: false,
        }
    }
}

/// The level of one query: at most the rule's ceiling.
pub fn level(ceiling: Level, weight: &Weight) -> Level {
    let sound = match weight.ground {
        Ground::ByDefinition | Ground::GivenTheStatedTest | Ground::IfOneMethod => true,
        Ground::IfUnadjusted => weight.table_vouches,
        Ground::Reporting => false,
    };
    let reached = match weight.distance {
        Off::BelowOneUnit => Level::Note,
        Off::P { factor, across_alpha: false } if factor < NOTE_FACTOR => Level::Note,
        Off::P { factor, across_alpha } if sound && (across_alpha || factor >= MAJOR_FACTOR) => Level::Major,
        Off::NotMeasured if weight.drives_message => Level::Major,
        Off::P { .. } | Off::Figure | Off::NotMeasured => Level::Minor,
    };
    let reached = if weight.peripheral { one_lower(reached) } else { reached };
    reached.min(ceiling)
}

fn one_lower(level: Level) -> Level {
    match level {
        Level::Major => Level::Minor,
        Level::Minor | Level::Note => Level::Note,
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn p(ground: Ground, factor: f64, across_alpha: bool) -> Weight {
        Weight { ground, distance: Off::P { factor, across_alpha }, ..Weight::reporting() }
    }

    #[test]
    fn major_needs_a_sound_ground_and_alpha_or_factor_five() {
        for ground in [Ground::ByDefinition, Ground::GivenTheStatedTest, Ground::IfOneMethod] {
            assert_eq!(level(Level::Major, &p(ground, 1.4, true)), Level::Major);
            assert_eq!(level(Level::Major, &p(ground, 5.0, false)), Level::Major);
            assert_eq!(level(Level::Major, &p(ground, 4.9, false)), Level::Minor);
            assert_eq!(level(Level::Major, &p(ground, 1.2, false)), Level::Note);
        }
        assert_eq!(level(Level::Major, &p(Ground::IfUnadjusted, 50.0, true)), Level::Minor);
    }

    #[test]
    fn a_table_that_tallies_elsewhere_lifts_the_bound_on_unadjusted() {
        let weight = Weight { table_vouches: true, ..p(Ground::IfUnadjusted, 50.0, true) };
        assert_eq!(level(Level::Major, &weight), Level::Major);
    }

    #[test]
    fn the_ceiling_holds_and_a_last_digit_is_a_note() {
        assert_eq!(level(Level::Minor, &p(Ground::ByDefinition, 50.0, true)), Level::Minor);
        let near = Weight { ground: Ground::ByDefinition, distance: Off::BelowOneUnit, ..Weight::reporting() };
        assert_eq!(level(Level::Major, &near), Level::Note);
    }

    #[test]
    fn a_claim_is_major_only_where_it_drives_the_message() {
        assert_eq!(level(Level::Major, &Weight::reporting()), Level::Minor);
        let message = Weight { drives_message: true, ..Weight::reporting() };
        assert_eq!(level(Level::Major, &message), Level::Major);
        assert_eq!(level(Level::Major, &Weight { peripheral: true, ..message }), Level::Minor);
    }
}
