//! Words in LaTeX: escaped, in ASCII, and never able to do anything but be set.

use crate::render::names::greek_letter;
use std::fmt::Write;
use unicode_normalization::UnicodeNormalization;

/// The words as LaTeX text in ASCII; letters with accents become accent commands, a character that has no command is
/// given by its number.
pub fn escape(words: &str) -> String {
    let mut out = String::new();
    let characters: Vec<char> = words.nfc().collect();
    for &character in &characters {
        match character {
            '"' => out.push_str(if opens_quotation(&out) { "``" } else { "''" }),
            ' '..='~' => escape_ascii(character, &mut out),
            _ if character.is_control() => out.push(' '),
            _ => escape_letter(character, &mut out),
        }
    }
    out
}

/// Whether a quotation mark behind `text` opens a quotation.
fn opens_quotation(text: &str) -> bool {
    text.chars().next_back().is_none_or(|last| " ([`-".contains(last))
}

fn escape_ascii(character: char, out: &mut String) {
    match character {
        '#' | '$' | '%' | '&' | '_' | '{' | '}' => {
            out.push('\\');
            out.push(character);
        }
        '\\' => out.push_str("\\textbackslash{}"),
        '^' => out.push_str("\\textasciicircum{}"),
        '~' => out.push_str("\\textasciitilde{}"),
        '<' => out.push_str("\\textless{}"),
        '>' => out.push_str("\\textgreater{}"),
        '|' => out.push_str("\\textbar{}"),
        _ => out.push(character),
    }
}

fn escape_letter(character: char, out: &mut String) {
    if let Some(name) = greek_letter(character) {
        match name {
            "omicron" => out.push('o'),
            _ => {
                let _ = write!(out, "\\ensuremath{{\\{name}}}");
            }
        }
    } else if let Some(command) = special(character) {
        out.push_str(command);
    } else if let Some(accented) = accented(character) {
        out.push_str(&accented);
    } else {
        let _ = write!(out, "[U+{:04X}]", character as u32);
    }
}

fn special(character: char) -> Option<&'static str> {
    let command = match character {
        'ß' => "\\ss{}",
        'ø' => "\\o{}",
        'Ø' => "\\O{}",
        'æ' => "\\ae{}",
        'Æ' => "\\AE{}",
        'œ' => "\\oe{}",
        'Œ' => "\\OE{}",
        'ł' => "\\l{}",
        'Ł' => "\\L{}",
        'ı' => "\\i{}",
        '–' => "--",
        '—' => "---",
        '‘' => "`",
        '’' => "'",
        '“' => "``",
        '”' => "''",
        '…' => "\\dots{}",
        '§' => "\\S{}",
        '¶' => "\\P{}",
        '£' => "\\pounds{}",
        '\u{a0}' => "~",
        '×' => "\\ensuremath{\\times}",
        '·' => "\\ensuremath{\\cdot}",
        '−' => "\\ensuremath{-}",
        '≤' => "\\ensuremath{\\leq}",
        '≥' => "\\ensuremath{\\geq}",
        '≠' => "\\ensuremath{\\neq}",
        '∂' => "\\ensuremath{\\partial}",
        '→' => "\\ensuremath{\\to}",
        '∞' => "\\ensuremath{\\infty}",
        _ => return None,
    };
    Some(command)
}

/// A letter with one accent that plain LaTeX knows.
fn accented(character: char) -> Option<String> {
    let parts: Vec<char> = std::iter::once(character).nfd().collect();
    let [letter, accent] = parts.as_slice() else { return None };
    if !letter.is_ascii_alphabetic() {
        return None;
    }
    let command = match accent {
        '\u{300}' => "`",
        '\u{301}' => "'",
        '\u{302}' => "^",
        '\u{303}' => "~",
        '\u{304}' => "=",
        '\u{306}' => "u",
        '\u{307}' => ".",
        '\u{308}' => "\"",
        '\u{30a}' => "r",
        '\u{30b}' => "H",
        '\u{30c}' => "v",
        '\u{327}' => "c",
        _ => return None,
    };
    match letter {
        'i' | 'j' if *accent != '\u{327}' => Some(format!("\\{command}{{\\{letter}}}")),
        _ => Some(format!("\\{command}{{{letter}}}")),
    }
}
