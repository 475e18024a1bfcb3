//! What an author may choose of how LaTeX is set.

use crate::samples;
use mainspring::render::document::{Block, Document, Equation, Inline};
use mainspring::render::expression::{Expression, Object};
use mainspring::render::latex::{fragment, whole};
use mainspring::render::latex_setting::{Setting, Vectors};
use std::collections::BTreeSet;

fn all() -> Setting {
    Setting {
        labels: Some("paper".into()),
        log: true,
        vectors: Vectors::Bold,
        per_display: Some(1),
        theorems: Some("claim".into()),
    }
}

#[test]
fn every_equation_has_a_label_of_its_own() {
    let text = fragment(&samples::ces(4), &[], &all());
    let labels: Vec<&str> = text.split("\\label{").skip(1).map(|rest| rest.split('}').next().unwrap()).collect();
    let different: BTreeSet<&str> = labels.iter().copied().collect();
    assert!(labels.len() >= 7 && labels.len() == different.len(), "{labels:?}");
    assert!(labels.iter().all(|label| label.starts_with("eq:paper-")), "{labels:?}");
    assert!(labels.contains(&"eq:paper-x-1") && labels.contains(&"eq:paper-e"), "{labels:?}");
    assert!(!text.contains("align*"));
}

#[test]
fn displays_are_cut_vectors_are_bold_and_logarithms_are_log() {
    let text = fragment(&samples::almost_ideal(2), &[], &all());
    assert!(text.contains("\\log") && !text.contains("\\ln"));
    assert!(text.contains("P(p)"), "the only argument of a function may be a number");
    let two = |letter: &str| Object::new(letter).of(vec![Expression::symbol("p"), Expression::symbol("m")]);
    let equation = |letter: &str| Equation::equal(two(letter), Expression::symbol("m"));
    let document = Document { title: None, blocks: vec![Block::Display(vec![equation("x"), equation("y")])] };
    let text = fragment(&document, &[], &all());
    assert_eq!(text.matches("\\begin{align}").count(), 2);
    assert!(text.contains("x(\\mathbf{p}, m)"), "{text}");
    let plain = fragment(&document, &[], &Setting::default());
    assert!(plain.contains("x(p, m)") && plain.matches("\\begin{align*}").count() == 1);
}

#[test]
fn what_is_proven_stands_in_an_environment() {
    let section = vec![
        Block::Heading { level: 1, text: vec![Inline::text("Symmetry")] },
        Block::Paragraph(vec![Inline::text("The slopes agree.")]),
        Block::Paragraph(vec![Inline::text("Hence the matrix is symmetric.")]),
    ];
    let text = whole(&Document { title: None, blocks: section }, &[], &all());
    assert!(text.contains("\\newtheorem{claim}{Claim}"));
    assert!(text.contains("\\begin{claim}[Symmetry]\nThe matrix is symmetric.\n\\end{claim}\n\\begin{proof}\n"));
}
