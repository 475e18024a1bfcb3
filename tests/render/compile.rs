//! LaTeX output compiles without complaint, where there is a LaTeX to ask.

use crate::samples;
use crate::scrambled::scrambled;
use mainspring::render::document::Document;
use mainspring::render::latex::{fragment, whole};
use mainspring::render::latex_setting::Setting;
use std::fs;
use std::path::{Path, PathBuf};
use std::process::Command;

/// A directory of its own, removed at the end.
struct Scratch(PathBuf);

impl Scratch {
    fn new(name: &str) -> Scratch {
        let path = std::env::temp_dir().join(format!("{name}-{}", std::process::id()));
        fs::create_dir_all(&path).expect("a directory for LaTeX");
        Scratch(path)
    }
}

impl Drop for Scratch {
    fn drop(&mut self) {
        let _ = fs::remove_dir_all(&self.0);
    }
}

/// Runs LaTeX and returns its log.
fn compile(directory: &Path, name: &str) -> String {
    let run = Command::new("pdflatex")
        .args(["-interaction=nonstopmode", "-halt-on-error", &format!("{name}.tex")])
        .current_dir(directory)
        .output()
        .expect("LaTeX runs");
    let log = String::from_utf8_lossy(&run.stdout).into_owned();
    assert!(run.status.success(), "{name} does not compile:\n{log}");
    log
}

/// No line may stick out by 5 points or more.
fn assert_fits(log: &str) {
    for line in log.lines().filter(|line| line.starts_with("Overfull \\hbox (")) {
        let excess = line.trim_start_matches("Overfull \\hbox (").split("pt").next().unwrap_or_default();
        assert!(excess.parse::<f64>().is_ok_and(|points| points < 5.0), "{line}");
    }
}

fn documents() -> Vec<Document> {
    let mut documents: Vec<Document> = [2, 4, 12].map(samples::ces).into();
    documents.extend([2, 4, 10].map(samples::almost_ideal));
    documents.extend([samples::nested(), samples::verdicts()]);
    documents.extend([1, 2, 3].map(scrambled));
    documents
}

#[test]
fn documents_and_fragments_compile_and_fit() {
    if Command::new("pdflatex").arg("--version").output().is_err() {
        println!("skipped: no pdflatex on this machine");
        return;
    }
    let scratch = Scratch::new("mainspring-latex");
    let write = |name: &str, tex: &str| fs::write(scratch.0.join(format!("{name}.tex")), tex).expect("written");
    let mut paper = "\\documentclass{article}\\usepackage{amsmath}\n\\begin{document}\n".to_string();
    for (number, document) in documents().iter().enumerate() {
        let name = format!("fragment{number}");
        write(&name, &fragment(document, &[], &Setting::default()));
        paper.push_str(&format!("Before.\\input{{{name}}}After.\n"));
    }
    write("paper", &format!("{paper}\\end{{document}}\n"));
    assert_fits(&compile(&scratch.0, "paper"));
    for document in [samples::verdicts(), samples::almost_ideal(4)] {
        write("whole", &whole(&document, &[], &Setting::default()));
        assert_fits(&compile(&scratch.0, "whole"));
    }
}
