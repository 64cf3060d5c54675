//! The passes wired together: a pure function of bytes to plain data that reports render.

use crate::intake::{self, Unreadable};
use crate::report::Audited;
use crate::rule::{self, Facts};
use crate::{context, reading, recompute, result};

/// Audits one manuscript. `name` is the file's name, for recognising its format.
pub fn audit(bytes: &[u8], name: &str) -> Result<Audited, Unreadable> {
    let (manuscript, notices) = intake::read(bytes, name, None)?;
    let scan = reading::scan(&manuscript);
    let readings = reading::read(&manuscript, &scan);
    let context = context::gather(&manuscript, &scan, &readings);
    let results = result::join(&manuscript, &scan, &readings, &context);
    let checked = recompute::recompute(&readings, &context, &results);
    let facts = Facts {
        manuscript: &manuscript,
        scan: &scan,
        readings: &readings,
        context: &context,
        results: &results,
        checked: &checked,
    };
    let queries = rule::queries(&facts);
    Ok(Audited { manuscript, notices, readings, results, checked, queries })
}
