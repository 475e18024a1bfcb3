//! README.md keeps its word: every model file in it is read, and what it shows is what is printed.

use std::io::Write;
use std::process::{Command, Stdio};

const README: &str = include_str!("../README.md");

/// The fenced blocks, each with its mark.
fn blocks() -> Vec<(String, String)> {
    let mut blocks = Vec::new();
    let mut open: Option<(String, String)> = None;
    for line in README.lines() {
        match (line.strip_prefix("```"), &mut open) {
            (Some(_), Some(_)) => blocks.extend(open.take()),
            (Some(mark), None) => open = Some((mark.to_string(), String::new())),
            (None, Some((_, text))) => {
                text.push_str(line);
                text.push('\n');
            }
            (None, None) => {}
        }
    }
    blocks
}

fn vet(model: &str, further: &[&str]) -> (String, String, i32) {
    let mut child = Command::new(env!("CARGO_BIN_EXE_mainspring"))
        .args(["vet", "-"])
        .args(further)
        .stdin(Stdio::piped())
        .stdout(Stdio::piped())
        .stderr(Stdio::piped())
        .spawn()
        .unwrap();
    child.stdin.take().unwrap().write_all(model.as_bytes()).unwrap();
    let output = child.wait_with_output().unwrap();
    let text = |bytes| String::from_utf8(bytes).unwrap();
    (text(output.stdout), text(output.stderr), output.status.code().unwrap())
}

#[test]
fn every_model_file_is_read() {
    let models: Vec<String> = blocks().into_iter().filter(|(mark, _)| mark == "demand").map(|(_, text)| text).collect();
    assert!(models.len() >= 7, "the language reference has lost its examples");
    for model in models {
        let (_, messages, status) = vet(&model, &["--only", "homogeneity,adding-up,symmetry,claims"]);
        assert!([0, 1, 3].contains(&status) && messages.is_empty(), "{model}\n{messages}");
    }
}

#[test]
fn the_first_command_prints_what_is_shown() {
    let model = include_str!("../examples/three-staples.demand");
    let (printed, _, status) = vet(model, &[]);
    assert_eq!(status, 0);
    assert!(blocks().iter().any(|(mark, text)| mark == "text" && *text == printed), "README.md should show\n{printed}");
}

#[test]
fn the_two_commands_come_first() {
    let commands: Vec<String> = blocks().into_iter().filter(|(mark, _)| mark == "sh").map(|(_, text)| text).collect();
    let first = commands.first().map(String::as_str).unwrap_or_default();
    assert!(first.starts_with("cargo run --release -- vet examples/") && first.lines().count() == 1);
    assert_eq!(commands.get(1).map(String::as_str), Some("cargo test\n"));
    let model = first.trim_end().rsplit(' ').next().unwrap();
    assert!(std::path::Path::new(env!("CARGO_MANIFEST_DIR")).join(model).exists());
}
