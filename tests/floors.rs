//! The house as DEVELOPERS.md describes it: each module stands on a floor and imports from lower
//! floors only, never sideways into another pass, never up.

use std::fs;
use std::path::{Path, PathBuf};

const FLOORS: [(&str, u8); 16] = [
    ("text", 0),
    ("printed", 0),
    ("distribution", 1),
    ("manuscript", 1),
    ("query", 2),
    ("intake", 2),
    ("layout", 2),
    ("reading", 3),
    ("context", 4),
    ("result", 5),
    ("recompute", 6),
    ("rule", 7),
    ("report", 7),
    ("audit", 8),
    ("explain", 9),
    ("main", 9),
];

/// Crates that open sockets. None may come in, not even through another crate.
const NETWORK: [&str; 16] = [
    "async-std",
    "curl",
    "h2",
    "hyper",
    "isahc",
    "mio",
    "native-tls",
    "openssl",
    "quinn",
    "reqwest",
    "rustls",
    "socket2",
    "surf",
    "tokio",
    "tungstenite",
    "ureq",
];

fn root() -> &'static Path {
    Path::new(env!("CARGO_MANIFEST_DIR"))
}

fn sources(folder: &str) -> Vec<PathBuf> {
    fn walk(folder: &Path, found: &mut Vec<PathBuf>) {
        let Ok(entries) = fs::read_dir(folder) else { return };
        for path in entries.map(|e| e.expect("a folder of the project can be listed").path()) {
            if path.is_dir() && path.file_name().is_some_and(|n| n != "target") {
                walk(&path, found);
            } else if path.extension().is_some_and(|e| e == "rs") {
                found.push(path);
            }
        }
    }
    let mut found = Vec::new();
    walk(&root().join(folder), &mut found);
    found.sort();
    found
}

fn floor(module: &str) -> Option<u8> {
    FLOORS.iter().find(|(name, _)| *name == module).map(|(_, floor)| *floor)
}

/// The module path of a source file: `src/report/json.rs` is `["report", "json"]`.
fn module_path(file: &Path) -> Vec<String> {
    let inner = file.strip_prefix(root().join("src")).expect("a file of src").with_extension("");
    let mut path: Vec<_> = inner.iter().map(|p| p.to_string_lossy().into_owned()).collect();
    if path.last().is_some_and(|l| l == "mod" || l == "lib") {
        path.pop();
    }
    path
}

/// Code without comments, so that a document that links upward counts as no import.
fn code(text: &str) -> String {
    text.lines().map(|l| l.split("//").next().unwrap_or("")).collect::<Vec<_>>().join("\n")
}

/// The first segments of what follows `prefix`: one, or each of a group in braces.
fn heads(code: &str, prefix: &str) -> Vec<String> {
    let mut heads = Vec::new();
    for (at, _) in code.match_indices(prefix) {
        let before = code[..at].chars().next_back();
        if before.is_some_and(|c| c.is_alphanumeric() || c == '_' || c == ':') {
            continue;
        }
        let rest = &code[at + prefix.len()..];
        match rest.strip_prefix('{') {
            Some(group) => heads.extend(of_group(group)),
            None => heads.push(identifier(rest)),
        }
    }
    heads
}

fn identifier(text: &str) -> String {
    text.trim_start().chars().take_while(|c| c.is_alphanumeric() || *c == '_').collect()
}

fn of_group(group: &str) -> Vec<String> {
    let (mut depth, mut heads, mut item) = (0, Vec::new(), String::new());
    for c in group.chars() {
        match c {
            '}' if depth == 0 => break,
            ',' if depth == 0 => heads.push(identifier(&std::mem::take(&mut item))),
            _ => {
                depth += i32::from(c == '{') - i32::from(c == '}');
                item.push(c);
            }
        }
    }
    heads.push(identifier(&item));
    heads.retain(|h| !h.is_empty());
    heads
}

/// Everything of the crate that a file names, as modules of the top level.
fn imports(file: &Path) -> Vec<String> {
    let code = code(&fs::read_to_string(file).expect("a source file can be read"));
    let mut found = heads(&code, "crate::");
    found.extend(heads(&code, "tallyproof::"));
    let depth = module_path(file).len();
    found.extend(heads(&code, &"super::".repeat(depth.max(1))).into_iter().filter(|_| depth > 0));
    found.retain(|m| floor(m).is_some());
    found
}

#[test]
fn every_module_stands_on_a_floor() {
    for file in sources("src") {
        if let Some(module) = module_path(&file).first() {
            assert!(floor(module).is_some(), "{}: {module} has no floor; give it one here", file.display());
        }
    }
}

#[test]
fn no_module_imports_sideways_or_upward() {
    let mut wrong = Vec::new();
    for file in sources("src") {
        let path = module_path(&file);
        let Some(module) = path.first() else { continue };
        let own = floor(module).expect("every module stands on a floor");
        for import in imports(&file) {
            if import != *module && floor(&import).is_some_and(|other| other >= own) {
                wrong.push(format!("{} (floor {own}) imports {import}", file.display()));
            }
        }
    }
    assert!(wrong.is_empty(), "{}", wrong.join("\n"));
}

#[test]
fn the_check_itself_sees_imports() {
    let code = "use crate::{intake::{self, X}, query::Level};\nlet x = crate::rule::y; use mycrate::audit;";
    assert_eq!(heads(code, "crate::"), ["intake", "query", "rule"]);
}

#[test]
fn files_have_one_reason_to_change() {
    for file in ["src", "tests", "benches", "fuzz"].into_iter().flat_map(sources) {
        let lines = fs::read_to_string(&file).expect("a source file can be read").lines().count();
        assert!(lines <= 800, "{} has {lines} lines; split it", file.display());
    }
}

#[test]
fn no_module_opens_a_socket() {
    for file in sources("src") {
        let code = code(&fs::read_to_string(&file).expect("a source file can be read"));
        for word in ["std::net", "TcpStream", "TcpListener", "UdpSocket", "UnixStream", "std::process::Command"] {
            assert!(!code.contains(word), "{} names {word}", file.display());
        }
    }
}

#[test]
fn no_crate_brings_a_network_in() {
    let lock = fs::read_to_string(root().join("Cargo.lock")).expect("Cargo.lock is committed");
    for name in NETWORK {
        assert!(!lock.contains(&format!("name = \"{name}\"\n")), "{name} opens sockets");
    }
}

/// What stands between backquotes in a document.
fn quoted(document: &str) -> Vec<String> {
    let text = fs::read_to_string(root().join(document)).expect("the document is there");
    text.split('`').skip(1).step_by(2).map(str::to_owned).collect()
}

#[test]
fn documents_name_what_exists() {
    let code: String = ["src", "tests"]
        .into_iter()
        .flat_map(sources)
        .map(|f| fs::read_to_string(f).expect("it can be read"))
        .collect();
    for document in ["README.md", "DEVELOPERS.md"] {
        for name in quoted(document) {
            let path = ["src/", "tests/", "fixtures/", "fuzz/", "rules/", ".ci/"].iter().any(|p| name.starts_with(p));
            if path && !name.contains(['<', '*', ' ']) {
                assert!(root().join(&name).exists(), "{document} names {name}, which is not there");
            }
            let test = name.matches('_').count() >= 2 && name.chars().all(|c| c.is_ascii_lowercase() || c == '_');
            if test {
                assert!(code.contains(&format!("fn {name}(")), "{document} names the test {name}, which is not there");
            }
        }
    }
}
