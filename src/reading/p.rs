//! p-values in running text.

use super::sentence::SentenceView;
use super::{Relation, Role};
use crate::printed::Printed;

/// A printed p with its relation, before it is known whether it reports a result or defines a threshold.
#[derive(Clone, Debug, PartialEq)]
pub struct PExpression {
    /// First and last token, both included.
    pub first: usize,
    pub last: usize,
    pub relation: Relation,
    pub value: Option<Printed>,
    pub role: Role,
    pub corrected: bool,
    pub shared: bool,
}

/// All p expressions of a sentence, in order.
pub fn find(_view: &SentenceView) -> Vec<PExpression> {
    Vec::new()
}
