//! A user's own rules directory. The only file of this floor that touches the disk.

use super::catalogue::{Catalogue, FAMILIES, RuleError};
use std::path::Path;

/// Reads `directory/family/name.toml` of every family. All errors at once, or a catalogue.
///
/// Other files and folders are passed over; a directory without any rule is an error.
pub fn load(directory: &Path) -> Result<Catalogue, Vec<RuleError>> {
    let error = |file: &Path, says: String| RuleError { file: file.display().to_string(), line: 0, says };
    if !directory.is_dir() {
        let says = "expected a directory with rules in it, such as claims/my-rule.toml".to_owned();
        return Err(vec![error(directory, says)]);
    }
    let (mut files, mut errors) = (Vec::new(), Vec::new());
    for family in FAMILIES {
        let Ok(entries) = std::fs::read_dir(directory.join(family)) else { continue };
        let mut paths: Vec<_> = entries.flatten().map(|e| e.path()).collect();
        // The file system's order must not show in the order of errors.
        paths.sort();
        for path in paths.iter().filter(|p| p.extension().is_some_and(|e| e == "toml")) {
            let name = path.file_name().map(|n| n.to_string_lossy().into_owned()).unwrap_or_default();
            match std::fs::read_to_string(path) {
                Ok(text) => files.push((format!("{family}/{name}"), text)),
                Err(e) => errors.push(error(path, format!("this rule cannot be read ({e})"))),
            }
        }
    }
    if files.is_empty() && errors.is_empty() {
        let says = format!("no rule found; expected files such as {}/my-rule.toml", FAMILIES[2]);
        return Err(vec![error(directory, says)]);
    }
    match Catalogue::from_files(&files) {
        Ok(catalogue) if errors.is_empty() => Ok(catalogue),
        Ok(_) => Err(errors),
        Err(more) => {
            errors.extend(more);
            Err(errors)
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_directory_without_rules_says_what_was_expected() {
        let empty = tempfile::tempdir().unwrap();
        assert!(load(empty.path()).unwrap_err()[0].says.contains("claims/my-rule.toml"));
        std::fs::create_dir(empty.path().join("form")).unwrap();
        std::fs::write(empty.path().join("form/x.toml"), "title = 3\n").unwrap();
        let errors = load(empty.path()).unwrap_err();
        assert_eq!((errors[0].file.as_str(), errors[0].line), ("form/x.toml", 1));
    }
}
