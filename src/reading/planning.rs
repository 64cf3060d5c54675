//! Planning statements: alpha, power, sides, sample size, thresholds, legends, multiplicity.

use super::Planning;
use super::p::PExpression;
use super::sentence::SentenceView;

/// Appends the planning statements of one sentence. `defines[i]` is set for each p expression that
/// defines a threshold or a legend instead of reporting a result.
pub fn read(_view: &SentenceView, _p: &[PExpression], _defines: &mut [bool], _out: &mut Vec<Planning>) {}
