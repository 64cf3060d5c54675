//! The passes wired together: a pure function of bytes to plain data that reports render.

use crate::intake::{self, Unreadable};
use crate::report::Audited;
use crate::rule::{self, Facts};
use crate::{context, reading, recompute, result};

/// Endings of the files that are taken from a folder.
pub const EXTENSIONS: [&str; 6] = [".md", ".markdown", ".txt", ".text", ".xml", ".nxml"];

/// Whether a file of a folder is taken for a manuscript, by the ending of its name.
pub fn is_manuscript(name: &str) -> bool {
    let name = name.to_lowercase();
    EXTENSIONS.iter().any(|ending| name.ends_with(ending))
}

/// Audits one manuscript. `name` is the file's name, for recognising its format.
pub fn audit(bytes: &[u8], name: &str) -> Result<Audited, Unreadable> {
    let (manuscript, notices) = intake::read(bytes, name, None)?;
    let scan = reading::scan(&manuscript);
    let mut readings = reading::read(&manuscript, &scan);
    let context = context::gather(&manuscript, &scan, &readings);
    context::fill_sizes(&manuscript, &scan, &mut readings, &context);
    let results = result::join(&manuscript, &scan, &readings);
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
    Ok(Audited { manuscript, notices, scan, readings, results, checked, queries })
}
