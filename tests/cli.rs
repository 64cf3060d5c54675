//! The program as people start it: arguments, outputs, exit status, sentences about bad input.

use std::io::Write;
use std::path::Path;
use std::process::{Command, Output, Stdio};

fn tallyproof(arguments: &[&str]) -> Output {
    command(arguments).output().expect("the program starts")
}

fn command(arguments: &[&str]) -> Command {
    let mut command = Command::new(env!("CARGO_BIN_EXE_tallyproof"));
    command.args(arguments).current_dir(env!("CARGO_MANIFEST_DIR")).env_remove("CLICOLOR_FORCE");
    command
}

fn out(output: &Output) -> String {
    String::from_utf8(output.stdout.clone()).expect("reports are UTF-8")
}

fn err(output: &Output) -> String {
    String::from_utf8(output.stderr.clone()).expect("sentences are UTF-8")
}

fn json(output: &Output) -> serde_json::Value {
    serde_json::from_str(&out(output)).expect("the report is JSON")
}

const SNIPPET: &str = "The difference was 3.1 (95% CI 1.2 to 5.0; P = 0.002).\n";

#[test]
fn one_file_gives_one_object_and_several_an_array() {
    let one = json(&tallyproof(&["audit", "--as", "json", "fixtures/sound.md"]));
    assert_eq!(one["source"]["path"], "fixtures/sound.md");
    assert_eq!(one["tool"]["name"], "tallyproof");
    let two = json(&tallyproof(&["audit", "--as", "json", "fixtures/sound.md", "fixtures/empty.md"]));
    assert_eq!(two[0]["source"]["path"], "fixtures/sound.md");
    assert_eq!(two[1]["source"], "fixtures/empty.md");
    assert!(two[1]["error"].is_string());
}

#[test]
fn json_lines_gives_one_object_a_line_in_the_order_asked() {
    let names = ["fixtures/flawed.md", "fixtures/binary.md", "fixtures/sound.md"];
    let run = tallyproof(&["audit", "--as", "json-lines", names[0], names[1], names[2]]);
    let text = out(&run);
    let sources: Vec<_> = text
        .lines()
        .map(|l| serde_json::from_str::<serde_json::Value>(l).expect("each line is an object"))
        .map(|o| o["source"]["path"].as_str().or(o["source"].as_str()).expect("each has a source").to_owned())
        .collect();
    assert_eq!(sources, names);
}

#[test]
fn a_folder_is_audited_in_the_order_of_names() {
    let folder = tempfile::tempdir().expect("a scratch folder");
    for name in ["b.md", "a.txt", "c.pdf", ".hidden.md"] {
        std::fs::write(folder.path().join(name), SNIPPET).expect("a scratch file");
    }
    let run = json(&tallyproof(&["audit", "--as", "json", &folder.path().display().to_string()]));
    let paths: Vec<_> = run.as_array().expect("an array").iter().map(|o| o["source"]["path"].to_string()).collect();
    assert_eq!(paths.len(), 2, "{paths:?}");
    assert!(paths[0].contains("a.txt") && paths[1].contains("b.md"));
}

#[test]
fn bad_input_is_named_and_stops_nothing() {
    let run =
        tallyproof(&["audit", "fixtures/empty.md", "fixtures/none.md", "fixtures/binary.md", "fixtures/sound.md"]);
    assert_eq!(run.status.code(), Some(2));
    let said = err(&run);
    for name in ["fixtures/empty.md", "fixtures/none.md", "fixtures/binary.md"] {
        assert_eq!(said.lines().filter(|l| l.contains(name)).count(), 1, "{said}");
    }
    assert!(out(&run).contains("fixtures/sound.md"));
}

#[test]
fn exit_status_follows_the_asked_level() {
    let status = |arguments: &[&str]| tallyproof(arguments).status.code();
    assert_eq!(status(&["audit", "fixtures/sound.md"]), Some(0));
    assert_eq!(status(&["audit", "--ask-level", "minor", "fixtures/sound.md"]), Some(0));
    assert_eq!(status(&["audit", "fixtures/flawed.md"]), Some(1));
    assert_eq!(status(&["audit", "--ask-level", "everything", "fixtures/flawed.md"]), Some(2));
}

#[test]
fn reads_standard_input_and_snippets() {
    let mut child = command(&["audit", "--as", "json", "-"])
        .stdin(Stdio::piped())
        .stdout(Stdio::piped())
        .spawn()
        .expect("the program starts");
    child.stdin.take().expect("a pipe").write_all(SNIPPET.as_bytes()).expect("it reads");
    let piped = json(&child.wait_with_output().expect("it ends"));
    assert_eq!(piped["source"]["path"], "-");
    assert_eq!(piped["readings"]["p"][0]["value"], 0.002);
    let snippet = json(&tallyproof(&["audit", "--as", "json", "--text", SNIPPET]));
    assert_eq!(snippet["readings"], piped["readings"]);
    assert!(out(&tallyproof(&["audit", "--text", SNIPPET])).contains("What follows from the figures"));
}

#[test]
fn writes_to_a_file_but_never_over_a_manuscript() {
    let folder = tempfile::tempdir().expect("a scratch folder");
    let (manuscript, report) = (folder.path().join("m.md"), folder.path().join("report.txt"));
    std::fs::write(&manuscript, SNIPPET).expect("a scratch file");
    let name = |p: &Path| p.display().to_string();
    let run = tallyproof(&["audit", &name(&manuscript), "--out", &name(&report)]);
    assert!(out(&run).is_empty());
    let written = std::fs::read_to_string(&report).expect("the report is there");
    assert!(written.contains("m.md") && !written.contains('\u{1b}'));
    let refused = tallyproof(&["audit", &name(&manuscript), "--out", &name(&manuscript)]);
    assert_eq!(refused.status.code(), Some(2));
    assert!(err(&refused).contains("another name"));
    assert_eq!(std::fs::read_to_string(&manuscript).expect("the manuscript is there"), SNIPPET);
}

#[test]
fn colour_is_for_terminals_that_have_it() {
    let run = command(&["audit", "fixtures/flawed.md"]).env("CLICOLOR_FORCE", "1").output().expect("it starts");
    assert!(out(&run).contains("\u{1b}["));
    assert!(!out(&tallyproof(&["audit", "fixtures/flawed.md"])).contains('\u{1b}'));
    let off = command(&["audit", "fixtures/flawed.md"]).env("NO_COLOR", "1").output().expect("it starts");
    assert!(!out(&off).contains('\u{1b}'));
}

#[test]
fn the_order_of_work_does_not_show() {
    let all: Vec<String> = (0..24).map(|i| format!("fixtures/{}.md", ["sound", "flawed", "empty"][i % 3])).collect();
    let mut arguments = vec!["audit", "--as", "json"];
    arguments.extend(all.iter().map(String::as_str));
    let first = out(&tallyproof(&arguments));
    assert_eq!(first, out(&tallyproof(&arguments)));
    let alone: serde_json::Value = json(&tallyproof(&["audit", "--as", "json", "fixtures/flawed.md"]));
    let batch: serde_json::Value = serde_json::from_str(&first).expect("the report is JSON");
    assert_eq!(batch[1], alone);
}

#[test]
fn the_catalogue_is_listed_and_explained() {
    let list = out(&tallyproof(&["rules"]));
    for rule in tallyproof::rule::catalogue().rules() {
        assert!(list.contains(&rule.id), "{}", rule.id);
    }
    let one = out(&tallyproof(&["rules", "p-from-interval"]));
    assert!(one.starts_with("arithmetic/p-from-interval\n") && one.contains("raises it") && one.contains("BMJ"));
    let none = tallyproof(&["rules", "p-from-nothing"]);
    assert_eq!(none.status.code(), Some(2));
    assert!(err(&none).contains("p-from-nothing"));
}

#[test]
fn a_reader_who_has_seen_enough_is_no_fault() {
    let mut child = command(&["audit", "--as", "json-lines", "fixtures/flawed.md", "fixtures/sound.md"])
        .stdout(Stdio::piped())
        .stderr(Stdio::piped())
        .spawn()
        .expect("the program starts");
    drop(child.stdout.take());
    let ended = child.wait_with_output().expect("it ends");
    assert!(ended.stderr.is_empty(), "{}", String::from_utf8_lossy(&ended.stderr));
}
