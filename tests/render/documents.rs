//! Whole documents in each form.

use crate::samples;
use crate::scrambled::scrambled;
use mainspring::render::document::Document;
use mainspring::render::latex::{fragment, whole};
use mainspring::render::latex_setting::Setting;
use mainspring::render::text::{Layout, text};

fn header() -> Vec<String> {
    vec!["mainspring 0.1.0".to_string(), "derive staples.demand".to_string()]
}

fn all_samples() -> Vec<Document> {
    let mut samples: Vec<Document> = [2, 4, 12].map(samples::ces).into();
    samples.extend([2, 4].map(samples::almost_ideal));
    samples.extend([samples::nested(), samples::verdicts()]);
    samples.extend([1, 2, 3, 4, 5].map(scrambled));
    samples
}

#[test]
fn verdicts_as_text() {
    insta::assert_snapshot!(text(&samples::verdicts(), Layout::default()));
}

#[test]
fn verdicts_as_latex() {
    insta::assert_snapshot!(whole(&samples::verdicts(), &header(), &Setting::default()));
}

#[test]
fn nested_as_text() {
    insta::assert_snapshot!(text(&samples::nested(), Layout::default()));
}

#[test]
fn nested_as_latex() {
    insta::assert_snapshot!(fragment(&samples::nested(), &header(), &Setting::default()));
}

#[test]
fn ces_as_text() {
    insta::assert_snapshot!(text(&samples::ces(4), Layout::default()));
}

#[test]
fn ces_as_latex() {
    insta::assert_snapshot!(fragment(&samples::ces(4), &header(), &Setting::default()));
}

#[test]
fn almost_ideal_as_text() {
    insta::assert_snapshot!(text(&samples::almost_ideal(4), Layout::default()));
}

#[test]
fn almost_ideal_as_latex() {
    insta::assert_snapshot!(fragment(&samples::almost_ideal(4), &header(), &Setting::default()));
}

#[test]
fn text_fits_eighty_columns() {
    for sample in all_samples() {
        let printed = text(&sample, Layout::default());
        for line in printed.lines() {
            assert!(line.chars().count() <= 80, "{line}");
            assert_eq!(line, line.trim_end());
        }
        assert!(printed.ends_with('\n') && !printed.ends_with("\n\n"));
    }
}

#[test]
fn colour_wraps_the_verdict_and_nothing_else() {
    let plain = text(&samples::verdicts(), Layout::default());
    let coloured = text(&samples::verdicts(), Layout { colour: true, ..Layout::default() });
    let stripped = ["\u{1b}[31m", "\u{1b}[32m", "\u{1b}[33m", "\u{1b}[36m", "\u{1b}[0m"]
        .iter()
        .fold(coloured.clone(), |text, code| text.replace(code, ""));
    assert!(coloured.contains("\u{1b}[32mproven     \u{1b}[0m"));
    let same = |text: &str| text.lines().map(str::trim_end).collect::<Vec<_>>().join("\n");
    assert_eq!(same(&stripped), same(&plain));
}

#[test]
fn latex_is_ascii_and_has_no_blank_line_in_an_environment() {
    for sample in all_samples() {
        for tex in [whole(&sample, &header(), &Setting::default()), fragment(&sample, &header(), &Setting::default())] {
            assert!(tex.is_ascii());
            assert!(tex.ends_with('\n') && !tex.ends_with("\n\n"));
            let mut open = Vec::new();
            for line in tex.lines() {
                if let Some(name) = line.trim().strip_prefix("\\begin{") {
                    open.push(name.to_string());
                }
                assert!(!line.trim().is_empty() || open.iter().all(|name| name.starts_with("document")), "in {open:?}");
                if line.trim().starts_with("\\end{") {
                    open.pop();
                }
            }
            assert_eq!(open, Vec::<String>::new());
        }
    }
}
