//! Claims: what the sentences conclude.

use super::Claim;
use super::p::PExpression;
use super::sentence::SentenceView;

/// Appends the claims of one sentence.
pub fn read(_view: &SentenceView, _p: &[PExpression], _out: &mut Vec<Claim>) {}
