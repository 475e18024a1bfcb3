//! Each example, with what comes out of it: the answer for all, the appendix and the JSON for some.

use std::path::{Path, PathBuf};
use std::process::Command;

fn examples() -> Vec<PathBuf> {
    let folder = Path::new(env!("CARGO_MANIFEST_DIR")).join("examples");
    let mut found: Vec<PathBuf> = std::fs::read_dir(folder)
        .unwrap()
        .map(|entry| entry.unwrap().path())
        .filter(|path| path.extension().is_some_and(|extension| extension == "demand"))
        .collect();
    found.sort();
    found
}

fn mainspring(arguments: &[&str], model: &Path) -> (String, i32) {
    let output = Command::new(env!("CARGO_BIN_EXE_mainspring"))
        .args(arguments)
        // however slow the machine, the clock has no say
        .args(["--time", "100000"])
        .arg(model)
        .env("NO_COLOR", "1")
        .output()
        .unwrap();
    let errors = String::from_utf8(output.stderr).unwrap();
    assert_eq!(errors, "", "{}", model.display());
    (String::from_utf8(output.stdout).unwrap(), output.status.code().unwrap())
}

fn snapshot(name: &str, text: &str) {
    insta::with_settings!({ snapshot_path => "../snapshots", prepend_module_to_snapshot => false, omit_expression => true }, {
        insta::assert_snapshot!(name, text);
    });
}

fn stem(model: &Path) -> String {
    model.file_stem().unwrap().to_string_lossy().into_owned()
}

#[test]
fn answers() {
    for model in examples() {
        let (text, status) = mainspring(&["vet"], &model);
        let too_wide = text.lines().find(|line| line.chars().count() > 80);
        assert_eq!(too_wide, None, "{}", model.display());
        snapshot(&format!("vet-{}", stem(&model)), &format!("{text}\nexit status {status}\n"));
    }
}

#[test]
fn appendices() {
    for name in ["three-staples", "harbour-cafe", "canal-town", "beekeepers", "lopsided-shares", "night-trams"] {
        let model = Path::new(env!("CARGO_MANIFEST_DIR")).join(format!("examples/{name}.demand"));
        snapshot(&format!("derive-{name}"), &mainspring(&["derive"], &model).0);
        snapshot(&format!("derive-{name}-latex"), &mainspring(&["derive", "--as", "latex"], &model).0);
    }
}

#[test]
fn data() {
    for name in ["three-staples", "money-illusion", "glass-and-clay", "lemmas", "river-power", "open-air-theatre"] {
        let model = Path::new(env!("CARGO_MANIFEST_DIR")).join(format!("examples/{name}.demand"));
        snapshot(&format!("json-{name}"), &mainspring(&["vet", "--as", "json"], &model).0);
    }
}

/// LaTeX appendices compile, as documents of their own. Needs a TeX distribution.
#[test]
fn appendices_compile() {
    if Command::new("pdflatex").arg("--version").output().is_err() {
        assert!(std::env::var_os("MAINSPRING_TEX").is_none(), "pdflatex was to be there");
        println!("not checked: that LaTeX output compiles (there is no pdflatex)");
        return;
    }
    let folder = std::env::temp_dir().join(format!("mainspring-tex-{}", std::process::id()));
    std::fs::create_dir_all(&folder).unwrap();
    for model in examples().into_iter().step_by(2) {
        let file = folder.join(format!("{}.tex", stem(&model)));
        let mut words = vec!["derive", "--as", "latex", "--document"];
        if stem(&model).len().is_multiple_of(2) {
            words.extend(["--labels", "paper", "--log", "--vectors", "bold", "--per-display", "3", "--theorems"]);
        }
        std::fs::write(&file, mainspring(&words, &model).0).unwrap();
        let mut tex = Command::new("pdflatex");
        tex.args(["-interaction=nonstopmode", "-halt-on-error"]).arg(&file).current_dir(&folder);
        let log = String::from_utf8_lossy(&tex.output().unwrap().stdout).into_owned();
        assert!(folder.join(format!("{}.pdf", stem(&model))).exists(), "{}:\n{log}", model.display());
        let overfull = log.lines().find(|line| line.starts_with("Overfull \\hbox"));
        assert_eq!(overfull, None, "{}", model.display());
    }
    let _ = std::fs::remove_dir_all(&folder);
}
