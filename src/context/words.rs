//! Word lists of the context floor.

/// Words at which a name going backwards from its bracket starts.
pub(super) const BEFORE: &[&str] = &[
    "the", "a", "an", "to", "and", "or", "either", "of", "with", "into", "received", "receive", "receiving",
    "versus", "vs", "in", "for", "by", "were", "was", "than", "as", "from", "both", "one", "two", "three", "four",
    "between", "on", "at", "had", "group", "groups", "arms", "that", "who", "which", "included", "including",
    "completed", "given",
];

/// Labels that name no arm: `(n = 24)` after them counts something else.
pub(super) const NO_ARM: &[&str] = &[
    "patients", "subjects", "participants", "women", "men", "children", "volunteers", "individuals", "people",
    "males", "females", "adults", "consent", "withdrawal", "violation", "events", "reasons", "infants", "animals",
    "died", "excluded", "sites", "studies", "boys", "girls", "nausea", "headache", "rats", "mice", "pigs", "trials",
    "cases", "efficacy", "lost", "missing", "follow", "analysis", "data", "female", "male", "refused", "criteria",
    "consented",
];
