//! How a name of a model file is set in print: a base and its scripts.
//!
//! One rule for every name: what follows the first underscore, digits at the end, and indices in brackets are
//! subscripts; spelled-out Greek letters become letters; longer names are words. So `x1` and `x_1` are x with 1,
//! `p_bread` is p with the word bread, `gamma[1,2]` is γ with 12, and `gamma[1,12]` is γ with 1,12.

/// A piece of a name.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum Part {
    /// A single letter.
    Letter(char),
    /// A Greek letter by its LaTeX name.
    Greek(&'static str),
    /// Digits.
    Number(String),
    /// A word, set upright.
    Word(String),
}

/// A name taken apart.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct PrintedName {
    /// What stands on the line.
    pub base: Part,
    /// What stands below, in order.
    pub subscripts: Vec<Part>,
    /// Whether commas stand between the subscripts.
    pub commas: bool,
}

/// The Greek letters that have a LaTeX command of their own, and the characters that look like what it prints.
#[rustfmt::skip]
const GREEK: &[(&str, char)] = &[
    ("alpha", 'α'), ("beta", 'β'), ("gamma", 'γ'), ("delta", 'δ'), ("epsilon", 'ϵ'), ("varepsilon", 'ε'),
    ("zeta", 'ζ'), ("eta", 'η'), ("theta", 'θ'), ("vartheta", 'ϑ'), ("iota", 'ι'), ("kappa", 'κ'),
    ("lambda", 'λ'), ("mu", 'μ'), ("nu", 'ν'), ("xi", 'ξ'), ("pi", 'π'), ("varpi", 'ϖ'), ("rho", 'ρ'),
    ("varrho", 'ϱ'), ("sigma", 'σ'), ("varsigma", 'ς'), ("tau", 'τ'), ("upsilon", 'υ'), ("phi", 'ϕ'),
    ("varphi", 'φ'), ("chi", 'χ'), ("psi", 'ψ'), ("omega", 'ω'), ("Gamma", 'Γ'), ("Delta", 'Δ'),
    ("Theta", 'Θ'), ("Lambda", 'Λ'), ("Xi", 'Ξ'), ("Pi", 'Π'), ("Sigma", 'Σ'), ("Upsilon", 'Υ'), ("Phi", 'Φ'),
    ("Psi", 'Ψ'), ("Omega", 'Ω'),
];

/// The LaTeX name of the Greek letter that `text` spells or is.
pub fn greek(text: &str) -> Option<&'static str> {
    let spelled = match text.chars().next() {
        Some(letter) if text.chars().count() == 1 => greek_letter(letter).unwrap_or(text),
        _ => text,
    };
    GREEK.iter().map(|(name, _)| *name).find(|name| *name == spelled)
}

/// The character for the LaTeX name of a Greek letter.
pub fn greek_character(name: &str) -> char {
    GREEK.iter().find(|(known, _)| *known == name).map_or('?', |(_, character)| *character)
}

/// The name of a Greek letter, as LaTeX spells it.
pub fn greek_letter(letter: char) -> Option<&'static str> {
    const SMALL: [&str; 25] = [
        "alpha", "beta", "gamma", "delta", "epsilon", "zeta", "eta", "theta", "iota", "kappa", "lambda", "mu", "nu",
        "xi", "omicron", "pi", "rho", "varsigma", "sigma", "tau", "upsilon", "phi", "chi", "psi", "omega",
    ];
    match letter {
        'α'..='ω' => SMALL.get(letter as usize - 'α' as usize).copied(),
        'Γ' => Some("Gamma"),
        'Δ' => Some("Delta"),
        'Θ' => Some("Theta"),
        'Λ' => Some("Lambda"),
        'Ξ' => Some("Xi"),
        'Π' => Some("Pi"),
        'Σ' => Some("Sigma"),
        'Υ' => Some("Upsilon"),
        'Φ' | 'ϕ' => Some(if letter == 'ϕ' { "phi" } else { "Phi" }),
        'Ψ' => Some("Psi"),
        'Ω' => Some("Omega"),
        'ϵ' => Some("epsilon"),
        'ϑ' => Some("vartheta"),
        'ϱ' => Some("varrho"),
        _ => None,
    }
}

/// Takes a name of a model file apart.
pub fn read_name(plain: &str) -> PrintedName {
    let (head, indices) = match plain.split_once('[') {
        Some((head, rest)) => (head, rest.trim_end_matches(']')),
        None => (plain, ""),
    };
    let (base, below) = match head.split_once('_') {
        Some((base, below)) if !base.is_empty() => (base, below),
        _ => (head, ""),
    };
    let (base, digits) = split_digits(base);
    let digits: Vec<Part> = digits.map(Part::Number).into_iter().collect();
    let below = underscored(below);
    let indices: Vec<Part> = indices.split(',').map(str::trim).filter(|each| !each.is_empty()).map(part).collect();
    let kinds = [&digits, &below, &indices].iter().filter(|group| !group.is_empty()).count();
    let commas = kinds > 1 || below.len() > 1 || indices_need_commas(&indices);
    PrintedName { base: part(base), subscripts: [digits, below, indices].concat(), commas }
}

/// The subscripts of an object, set by the rule for indices.
pub fn read_subscripts(subscripts: &[String]) -> (Vec<Part>, bool) {
    let parts: Vec<Part> = subscripts.iter().map(|each| part(each)).collect();
    let commas = indices_need_commas(&parts);
    (parts, commas)
}

/// Several indices are told apart by commas as soon as one of them is longer than a character.
fn indices_need_commas(indices: &[Part]) -> bool {
    let long = |part: &Part| match part {
        Part::Number(digits) => digits.len() > 1,
        Part::Word(_) => true,
        Part::Letter(_) | Part::Greek(_) => false,
    };
    indices.len() > 1 && indices.iter().any(long)
}

/// `x12` is x and 12; a word with digits in other places stays a word.
fn split_digits(name: &str) -> (&str, Option<String>) {
    let stem = name.trim_end_matches(|each: char| each.is_ascii_digit());
    let plain_stem = !stem.is_empty() && stem.chars().all(char::is_alphabetic);
    match plain_stem && stem.len() < name.len() {
        true => (stem, Some(name[stem.len()..].to_string())),
        false => (name, None),
    }
}

/// The parts of a name after its first underscore; with a word among them they are one word.
fn underscored(text: &str) -> Vec<Part> {
    let parts: Vec<Part> = text.split('_').filter(|each| !each.is_empty()).map(part).collect();
    match parts.len() > 1 && parts.iter().any(|each| matches!(each, Part::Word(_))) {
        true => vec![Part::Word(text.to_string())],
        false => parts,
    }
}

fn part(text: &str) -> Part {
    if let Some(name) = greek(text) {
        return Part::Greek(name);
    }
    let mut letters = text.chars();
    match (letters.next(), letters.next()) {
        (Some(letter), None) if letter.is_ascii_alphabetic() => Part::Letter(letter),
        (Some(_), _) if text.bytes().all(|each| each.is_ascii_digit()) => Part::Number(text.to_string()),
        _ => Part::Word(text.to_string()),
    }
}
