//! Words of claims and planning statements, for the lexicon.

use super::lexicon::Classes;

pub(super) const WORDS: &[(&[&str], Classes)] = &[
    (
        &["no", "not", "without", "neither", "nor", "never", "none", "cannot", "lack", "lacked", "failed"],
        Classes::NEGATION,
    ),
    (&["significant", "significantly", "significance", "nonsignificant", "insignificant"], Classes::SIGNIFICANCE),
];
