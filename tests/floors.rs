//! The house keeps its order: imports run down the floors, nothing goes round in circles, and no file, function or
//! word is out of bounds.

mod rust_source;

use rust_source::{RustFile, blank, source_files};
use std::collections::{BTreeMap, BTreeSet};

/// The floors from the ground up; what stands in one line stands side by side and may not import each other.
const FLOORS: [&[&str]; 13] = [
    &["language", "algebra"],
    &["proof"],
    &["model"],
    &["conditions"],
    &["recovery"],
    &["structure"],
    &["restrictions"],
    &["welfare"],
    &["vetting"],
    &["render"],
    &[""],
    &["command"],
    &["main"],
];
const LONGEST_FILE: usize = 800;
const LONGEST_FUNCTION: usize = 80;

fn height(module: &str) -> Option<usize> {
    FLOORS.iter().position(|floor| floor.contains(&module))
}

fn floor_of(path: &[String]) -> &str {
    path.first().map_or("", String::as_str)
}

/// Names of the crate's root that are no modules of their own belong to the root.
fn target_floor(path: &[String]) -> &str {
    let first = floor_of(path);
    if height(first).is_some() { first } else { "" }
}

#[test]
fn every_file_stands_on_a_floor() {
    let astray: Vec<_> =
        source_files().into_iter().filter(|f| height(floor_of(&f.module)).is_none()).map(|f| f.path).collect();
    assert!(astray.is_empty(), "not on any floor: {astray:?}");
}

#[test]
fn imports_run_down() {
    let mut up = Vec::new();
    for file in source_files() {
        let own = floor_of(&file.module);
        for path in file.named_paths() {
            let target = target_floor(&path);
            if target != own && height(target) >= height(own) {
                up.push(format!("{} imports {}", file.path.display(), path.join("::")));
            }
        }
    }
    assert!(up.is_empty(), "imports that run up or sideways:\n{}", up.join("\n"));
}

/// For each file the files it names, by longest module path; a module's own children do not count for it, since a
/// `mod.rs` has to name what it contains.
fn imports(files: &[RustFile]) -> BTreeMap<&[String], BTreeSet<&[String]>> {
    let modules: BTreeSet<&[String]> = files.iter().map(|file| file.module.as_slice()).collect();
    let holder = |path: &[String]| (0..=path.len()).rev().find_map(|n| modules.get(&path[..n]).copied());
    let mut graph = BTreeMap::new();
    for file in files {
        let own = file.module.as_slice();
        let named: Vec<_> = file.named_paths();
        let targets = named.iter().filter_map(|path| holder(path)).filter(|target| !target.starts_with(own));
        graph.insert(own, targets.collect());
    }
    graph
}

#[test]
fn the_algebra_has_no_import_cycle() {
    let files: Vec<RustFile> = source_files().into_iter().filter(|f| floor_of(&f.module) == "algebra").collect();
    let mut graph = imports(&files);
    loop {
        let named: BTreeSet<_> = graph.values().flatten().copied().collect();
        let free = |file: &&[String], needs: &BTreeSet<_>| needs.is_empty() || !named.contains(*file);
        let free: Vec<_> = graph.iter().filter(|(file, needs)| free(file, needs)).map(|(file, _)| *file).collect();
        if free.is_empty() {
            break;
        }
        graph.retain(|file, _| !free.contains(file));
        graph.values_mut().for_each(|needs| needs.retain(|file| !free.contains(file)));
    }
    let cycle: Vec<String> = graph.iter().map(|(file, needs)| format!("{} -> {needs:?}", file.join("::"))).collect();
    assert!(cycle.is_empty(), "go round in circles:\n{}", cycle.join("\n"));
}

#[test]
fn files_and_functions_are_short() {
    let files = source_files();
    let mut long = Vec::new();
    for file in &files {
        let lines = file.text.lines().count();
        if lines > LONGEST_FILE {
            long.push(format!("{}: {lines} lines", file.path.display()));
        }
        let functions = file.functions().into_iter().filter(|(_, lines)| *lines > LONGEST_FUNCTION);
        long.extend(functions.map(|(name, lines)| format!("{}: fn {name}, {lines} lines", file.path.display())));
    }
    assert!(long.is_empty(), "too long:\n{}", long.join("\n"));
}

#[test]
fn nothing_in_src_panics_on_purpose() {
    let calls = ["unwrap(", "expect(", "panic!(", "unreachable!(", "todo!(", "unimplemented!("];
    let mut found = Vec::new();
    for file in source_files() {
        for (number, line) in file.code.lines().enumerate() {
            let mut hits = calls.iter().filter(|call| mentions(line, call));
            found.extend(hits.next().map(|call| format!("{}:{}: {call}", file.path.display(), number + 1)));
        }
    }
    assert!(found.is_empty(), "may panic:\n{}", found.join("\n"));
}

/// Whether the call stands there as a word of its own (a method of the reader called `expect_comma` does not count).
fn mentions(line: &str, call: &str) -> bool {
    line.match_indices(call)
        .any(|(at, _)| line[..at].chars().next_back().is_none_or(|before| !before.is_alphanumeric() && before != '_'))
}

#[test]
fn no_word_is_out_of_place() {
    let words = [
        concat!("seed ", "document"),
        concat!("lec", "ture"),
        concat!("trans", "cript"),
        concat!("sub", "agent"),
        concat!("/wo", "rk/"),
        concat!("/ro", "ot/"),
        concat!("crates", ".io"),
        concat!("allow(", "dead_code"),
        concat!("allow(", "unused"),
    ];
    let mut found = Vec::new();
    for file in source_files() {
        let text = file.text.to_lowercase();
        found.extend(words.iter().filter(|w| text.contains(**w)).map(|w| format!("{}: {w}", file.path.display())));
    }
    assert!(found.is_empty(), "out of place:\n{}", found.join("\n"));
    let rooms = ["utils", "helpers", "misc", "common", "util", "helper"];
    let files = source_files();
    let named = files.iter().filter(|f| f.module.iter().any(|part| rooms.contains(&part.as_str())));
    assert_eq!(named.map(|f| f.path.display().to_string()).collect::<Vec<_>>(), Vec::<String>::new());
}

/// The reader that the other tests lean on sees code and nothing else.
#[test]
fn literals_and_comments_are_not_code() {
    let text =
        "let a = \"crate::x\"; // crate::y\nlet b = r#\"crate::\"z\"#; let c = '\\''; /* crate::w /* */ */ f::<'a>(d)";
    let code = blank(text);
    assert!(!code.contains("crate"), "{code}");
    assert!(code.contains("f::<'a>(d)") && code.contains("let c"), "{code}");
}

#[test]
fn use_trees_are_followed() {
    let code =
        "use crate::{algebra::{field::Field, number}, model as author};\nfn f() { super::super::super::proof::check() }"
            .to_string();
    let file = RustFile {
        module: vec!["render".into(), "text".into(), "lines".into()],
        path: "src/render/text/lines.rs".into(),
        text: code.clone(),
        code,
    };
    let paths: Vec<String> = file.named_paths().iter().map(|path| path.join("::")).collect();
    assert_eq!(paths, ["algebra::field::Field", "algebra::number", "model", "proof::check"]);
    assert_eq!(file.functions(), [("f".to_string(), 1)]);
}
