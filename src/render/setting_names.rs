//! Names of the model, laid out with their widths.

use crate::algebra::formula::Symbol;
use crate::render::layout::{Node, Sign};
use crate::render::names::{Part, PrintedName, greek, read_name};

/// The commands that a declared LaTeX form may use besides Greek letters.
const ALLOWED: [&str; 30] = [
    "hat",
    "widehat",
    "tilde",
    "widetilde",
    "bar",
    "overline",
    "underline",
    "dot",
    "ddot",
    "vec",
    "check",
    "acute",
    "grave",
    "breve",
    "mathbf",
    "mathrm",
    "mathit",
    "mathsf",
    "mathcal",
    "mathbb",
    "boldsymbol",
    "text",
    "operatorname",
    "ell",
    "hbar",
    "ast",
    "star",
    "prime",
    "circ",
    "bullet",
];

/// Whether a declared LaTeX form is a name and nothing else: letters, digits, scripts, accents, fonts and Greek letters, in
/// balanced braces.
pub fn is_harmless(latex: &str) -> bool {
    let mut depth = 0i32;
    let mut rest = latex.chars().peekable();
    while let Some(character) = rest.next() {
        match character {
            '{' => depth += 1,
            '}' => depth -= 1,
            '\\' => {
                let mut command = String::new();
                while let Some(letter) = rest.next_if(char::is_ascii_alphabetic) {
                    command.push(letter);
                }
                let known = ALLOWED.contains(&command.as_str()) || greek(&command).is_some();
                if !known {
                    return false;
                }
            }
            'a'..='z' | 'A'..='Z' | '0'..='9' | '_' | '^' | ',' | '\'' | '*' | '+' | '-' | '(' | ')' | ' ' => {}
            _ => return false,
        }
        if depth < 0 {
            return false;
        }
    }
    depth == 0 && !latex.trim().is_empty()
}

/// A laid-out name, base and subscript apart, with their widths in hundredths of an em.
pub struct SetName {
    /// What stands on the line.
    pub base: Node,
    /// Width of the base.
    pub base_width: u32,
    /// What stands below.
    pub below: Option<Node>,
    /// Width of the subscript, in script size.
    pub below_width: u32,
    /// Whether a further superscript would collide with one that is there.
    pub has_superscript: bool,
}

/// A name of the model, in the form that was declared for it, with its indices, or in the form that follows from its
/// spelling.
pub fn set_name(symbol: &Symbol) -> SetName {
    let Some(declared) = symbol.latex.as_deref().filter(|latex| is_harmless(latex)) else {
        return set_printed(&read_name(&symbol.plain));
    };
    let indices = match symbol.plain.find('[') {
        Some(bracket) => read_name(&format!("x{}", &symbol.plain[bracket..])),
        None => PrintedName { base: Part::Letter('x'), subscripts: Vec::new(), commas: false },
    };
    let base = match greek(declared.trim_start_matches('\\')) {
        Some(name) => Node::Part(Part::Greek(name)),
        None => Node::Declared(declared.to_string()),
    };
    let has_superscript = declared.contains(['^', '\'']);
    SetName { base, base_width: rough_width(declared), has_superscript, ..set_printed(&indices) }
}

fn set_printed(printed: &PrintedName) -> SetName {
    let (below, below_width) = set_parts(&printed.subscripts, printed.commas);
    let (base, base_width) = (Node::Part(printed.base.clone()), part_width(&printed.base));
    SetName { base, base_width, below, below_width, has_superscript: false }
}

/// What TeX puts behind every script.
const SCRIPT_SPACE: u32 = 5;

/// Subscripts in a row, if there are any, and their width.
pub fn set_parts(parts: &[Part], commas: bool) -> (Option<Node>, u32) {
    let mut nodes = Vec::new();
    let mut width = 0;
    for (position, part) in parts.iter().enumerate() {
        if position > 0 && commas {
            nodes.push(Node::Sign(Sign::TightComma));
            width += Sign::TightComma.width();
        }
        nodes.push(Node::Part(part.clone()));
        width += part_width(part);
    }
    match nodes.is_empty() {
        true => (None, 0),
        false => (Some(Node::Row(nodes)), width * 8 / 10 + SCRIPT_SPACE),
    }
}

fn part_width(part: &Part) -> u32 {
    match part {
        Part::Letter(letter) => letter_width(*letter),
        Part::Greek(name) => greek_width(name),
        Part::Number(digits) => 50 * digits.len() as u32,
        Part::Word(word) => 52 * word.chars().count() as u32,
    }
}

fn letter_width(letter: char) -> u32 {
    match letter {
        'm' => 88,
        'w' => 72,
        'M' => 97,
        'W' => 95,
        'i' | 'j' | 'l' => 38,
        'A'..='Z' => 76,
        _ => 53,
    }
}

fn greek_width(name: &str) -> u32 {
    match name {
        "alpha" | "omega" | "psi" | "varpi" => 66,
        "iota" => 36,
        _ if name.starts_with(|each: char| each.is_ascii_uppercase()) => 78,
        _ => 57,
    }
}

/// A width for a declared form: commands count as one letter.
fn rough_width(latex: &str) -> u32 {
    let mut width = 0;
    let mut rest = latex.chars().peekable();
    while let Some(character) = rest.next() {
        match character {
            '\\' => {
                while rest.next_if(char::is_ascii_alphabetic).is_some() {}
                width += 60;
            }
            '{' | '}' | '_' | '^' | ' ' => {}
            other => width += letter_width(other),
        }
    }
    width
}
