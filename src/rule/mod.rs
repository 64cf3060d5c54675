//! The catalogue of rules, the closed set of check kinds, the level policy, and the engine that turns
//! facts into queries.
//!
//! A rule is one file `rules/<family>/<name>.toml`; see [`Rule`]. A check takes the facts by shared
//! reference and returns findings; only the engine knows levels, wording and fingerprints.

mod catalogue;
mod check;
mod checks;
mod directory;
mod engine;
mod finding;
mod fingerprint;
mod level;
mod look;
mod places;
mod shift;
mod wording;

use crate::context::Context;
use crate::manuscript::Manuscript;
use crate::query::Query;
use crate::reading::{Readings, Scan};
use crate::recompute::Checked;
use crate::result::ReportedResult;

pub use catalogue::{Case, Catalogue, FAMILIES, Rule, RuleError, catalogue, compiled_in};
pub use check::{Backing, Basis, Bounded, Check, Claimed, Of, Pair, Part, Per, Says, SpreadSign, Statement, Whose};
pub use directory::load;
pub use level::{MAJOR_FACTOR, Off, Weight, level};
pub use wording::PLACEHOLDERS;

/// What the engine looks at: the plain data of the lower floors, by shared reference.
#[derive(Clone, Copy)]
pub struct Facts<'a> {
    pub manuscript: &'a Manuscript,
    pub scan: &'a Scan,
    pub readings: &'a Readings,
    pub context: &'a Context,
    pub results: &'a [ReportedResult],
    pub checked: &'a [Checked],
}

/// The queries of all compiled-in rules, in reading order.
pub fn queries(facts: &Facts) -> Vec<Query> {
    queries_with(facts, catalogue())
}

/// The queries of a catalogue of one's own, in reading order.
pub fn queries_with(facts: &Facts, catalogue: &Catalogue) -> Vec<Query> {
    engine::queries(facts, catalogue)
}

/// The rule that a name means (its id, a former id, or its last part), to be explained to people.
pub fn explain(name: &str) -> Option<&'static Rule> {
    catalogue().find(name)
}

#[cfg(test)]
mod tests;
