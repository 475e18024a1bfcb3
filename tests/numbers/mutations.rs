//! A true system with one sign, index, exponent or coefficient changed: where an evaluation from outside shows that
//! the change matters, nothing is called proven; what is called refuted fails at the witness.

use std::time::Duration;

use crate::outside::Outside;
use crate::outside::integrability::{Chance, failure, in_domain, named, points, try_vetted};
use crate::true_systems::TRUE_SYSTEMS;
use mainspring::conditions::{Condition, Verdict};
use mainspring::{Allowance, Part};

const ALLOWANCE: Allowance = Allowance { work: 15_000_000, time: Duration::from_secs(4), memory_mib: 2048 };

/// The words of a line with the places where they begin.
fn words(line: &str) -> Vec<(usize, &str)> {
    let is_word = |c: char| c.is_alphanumeric() || c == '_';
    let mut found = Vec::new();
    let mut start = None;
    for (at, c) in line.char_indices().chain([(line.len(), ' ')]) {
        match (is_word(c), start) {
            (true, None) => start = Some(at),
            (false, Some(from)) => {
                found.push((from, &line[from..at]));
                start = None;
            }
            _ => {}
        }
    }
    found
}

/// What a word could have been mistaken for: another name of the same kind, a number that is one off.
fn slips_of(word: &str, names: &[Vec<String>]) -> Vec<String> {
    if let Ok(number) = word.parse::<u32>() {
        return vec![(number + 1).to_string(), (number.max(1) - 1).to_string()];
    }
    let kind = names.iter().find(|kind| kind.iter().any(|name| name == word));
    kind.into_iter().flatten().filter(|name| *name != word).cloned().collect()
}

/// The names that a statement declares.
fn declared(text: &str, keyword: &str) -> Vec<String> {
    let lines = text.lines().filter_map(|line| line.strip_prefix(keyword));
    lines.flat_map(|rest| rest.split(',')).map(|name| name.trim().to_string()).collect()
}

/// Every text that differs from this one in one word or sign behind the `=` of a formula.
fn mutations(text: &str) -> Vec<String> {
    let names = [declared(text, "parameters "), declared(text, "prices ")];
    let mut all = Vec::new();
    let mut offset = 0;
    for line in text.split_inclusive('\n') {
        let formula = ["demand", "share", "outlay", "log demand", "let"].iter().any(|word| line.starts_with(word));
        let from = line.find('=').filter(|_| formula).unwrap_or(line.len());
        let mut change = |at: usize, length: usize, to: &str| {
            all.push(format!("{}{to}{}", &text[..offset + at], &text[offset + at + length..]));
        };
        for (at, word) in words(line).into_iter().filter(|(at, _)| *at > from) {
            slips_of(word, &names).iter().for_each(|to| change(at, word.len(), to));
        }
        for (at, sign) in line.char_indices().filter(|(at, _)| *at > from) {
            match sign {
                '+' => change(at, 1, "-"),
                '-' if !line[..at].ends_with('(') => change(at, 1, "+"),
                '*' => change(at, 1, "/"),
                '/' => change(at, 1, "*"),
                _ => {}
            }
        }
        offset += line.len();
    }
    all
}

/// What a run over mutations saw.
#[derive(Default, Debug)]
struct Tally {
    read: usize,
    failing: usize,
    confirmed: usize,
    undecided: usize,
}

/// Vets a mutated text and holds every verdict against the evaluation from outside.
fn hold(text: &str, conditions: &[Condition], tally: &mut Tally) {
    let parts: Vec<Part> = conditions.iter().copied().map(Part::Condition).collect();
    let Some(vetting) = try_vetted(text, &parts, ALLOWANCE) else { return };
    tally.read += 1;
    let outside = Outside::read(text);
    let at = points(&vetting.model, &outside, 8);
    for finding in &vetting.findings {
        let condition = finding.condition;
        let failing = at.iter().find(|values| failure(condition, &outside, values) > 1e-6);
        tally.failing += usize::from(failing.is_some());
        tally.undecided += usize::from(finding.verdict == Verdict::Undecided);
        let wrong = finding.verdict == Verdict::Proven && failing.is_some();
        assert!(!wrong, "{condition:?} is called proven, and fails at {failing:?}:\n{text}");
        let Some(witness) = &finding.witness else { continue };
        let values = named(&vetting.model, &witness.point);
        let admissible = outside.violation(&values) < 1e-9;
        assert!(admissible, "{condition:?}: the witness {values:?} breaks an assumption:\n{text}");
        let fails = failure(condition, &outside, &values);
        assert!(fails.is_nan() || fails > 1e-13, "{condition:?} does not fail at {values:?}: {fails}\n{text}");
        let inside = condition != Condition::Curvature || fails.is_nan() || in_domain(&outside, &values);
        assert!(inside, "the witness {values:?} is outside of the domain:\n{text}");
        tally.confirmed += 1;
    }
}

/// A share of the mutations of every system, chosen by chance but the same each time.
fn sample(share: f64, start: u64) -> Vec<String> {
    let mut chance = Chance(start);
    let all = TRUE_SYSTEMS.iter().flat_map(|(_, text)| mutations(text));
    all.filter(|_| chance.next() < share).collect()
}

/// How many of the mutations are tried; all of them take some minutes.
fn share(usual: f64) -> f64 {
    std::env::var("MUTATIONS").ok().and_then(|share| share.parse().ok()).unwrap_or(usual)
}

#[test]
fn a_change_that_matters_is_not_proven() {
    let exact = [Condition::Homogeneity, Condition::AddingUp, Condition::Symmetry];
    let mut tally = Tally::default();
    sample(share(0.1), 0x1234_5678_9abc_def1).iter().for_each(|text| hold(text, &exact, &mut tally));
    println!("{tally:?}");
    assert!(tally.read >= 60 && tally.failing >= 60 && tally.confirmed >= 60, "too little was tried: {tally:?}");
}

#[test]
fn curvature_of_changed_systems_agrees_with_eigenvalues() {
    let mut tally = Tally::default();
    let asked = [Condition::Symmetry, Condition::Curvature];
    sample(share(0.02), 0x0fed_cba9_8765_4321).iter().for_each(|text| hold(text, &asked, &mut tally));
    println!("{tally:?}");
    assert!(tally.read >= 10 && tally.confirmed >= 10, "too little was tried: {tally:?}");
}
