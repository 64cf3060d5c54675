//! Tallyproof reads the results of a manuscript, recomputes what can be recomputed from the printed
//! figures, and puts queries to the author.
//!
//! The modules are floors of one house: a module imports from lower floors only (`tests/floors.rs`).

pub mod audit;
pub mod context;
pub mod distribution;
pub mod intake;
pub mod layout;
pub mod manuscript;
pub mod printed;
pub mod query;
pub mod reading;
pub mod recompute;
pub mod report;
pub mod result;
pub mod rule;
pub mod text;
