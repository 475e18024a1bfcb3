//! Letters and names: what is one name, however it is typed.

use unicode_normalization::UnicodeNormalization;

/// The name in normal form: NFC, Greek letters spelled out, so that `σ`, `sigma` and `\sigma` are one.
///
/// A spelled-out letter that would run into a letter beside it is set off by an underscore (`βx` is `beta_x`), since
/// `betax` would be another name to a reader.
pub fn normal_name(written: &str) -> String {
    if written.is_ascii() {
        return written.to_string();
    }
    let mut name = String::with_capacity(written.len() + 8);
    let mut after_greek = false;
    for letter in written.nfc() {
        let spelled = spelled(letter);
        let ends_in_letter = name.chars().next_back().is_some_and(char::is_alphabetic);
        if ends_in_letter && (spelled.is_some() || after_greek && letter.is_alphabetic()) {
            name.push('_');
        }
        match spelled {
            Some(word) => name.push_str(word),
            None => name.push(letter),
        }
        after_greek = spelled.is_some();
    }
    name
}

/// Whether a word may begin with this character.
pub fn begins_word(letter: char) -> bool {
    letter.is_alphabetic()
}

/// Whether a word may go on with this character.
pub fn goes_on_word(letter: char) -> bool {
    letter.is_alphabetic() || letter.is_ascii_digit() || letter == '_' || is_mark(letter)
}

/// Whether the character is an accent that is drawn over the one before it.
pub fn is_mark(letter: char) -> bool {
    unicode_normalization::char::is_combining_mark(letter)
}

/// Whether a terminal would act on the character, or show nothing.
pub fn unprintable(letter: char) -> bool {
    letter.is_control()
        || matches!(letter, '\u{200b}'..='\u{200f}' | '\u{2028}'..='\u{202e}' | '\u{2060}'..='\u{206f}' | '\u{feff}')
}

/// The word at the beginning of a text; empty where there is none.
pub fn leading_word(text: &str) -> &str {
    if !text.starts_with(begins_word) {
        return "";
    }
    let end = text.find(|letter| !goes_on_word(letter)).unwrap_or(text.len());
    &text[..end]
}

/// The LaTeX name of a Greek letter. Where Unicode has two shapes, the plain letter has the plain name.
fn spelled(letter: char) -> Option<&'static str> {
    GREEK.iter().find(|(known, _)| *known == letter).map(|(_, name)| *name)
}

const GREEK: [(char, &str); 57] = [
    ('α', "alpha"),
    ('β', "beta"),
    ('γ', "gamma"),
    ('δ', "delta"),
    ('ε', "epsilon"),
    ('ϵ', "varepsilon"),
    ('ζ', "zeta"),
    ('η', "eta"),
    ('θ', "theta"),
    ('ϑ', "vartheta"),
    ('ι', "iota"),
    ('κ', "kappa"),
    ('ϰ', "varkappa"),
    ('λ', "lambda"),
    ('μ', "mu"),
    ('\u{b5}', "mu"),
    ('ν', "nu"),
    ('ξ', "xi"),
    ('ο', "omicron"),
    ('π', "pi"),
    ('ϖ', "varpi"),
    ('ρ', "rho"),
    ('ϱ', "varrho"),
    ('σ', "sigma"),
    ('ς', "varsigma"),
    ('τ', "tau"),
    ('υ', "upsilon"),
    ('φ', "phi"),
    ('ϕ', "varphi"),
    ('χ', "chi"),
    ('ψ', "psi"),
    ('ω', "omega"),
    ('Α', "Alpha"),
    ('Β', "Beta"),
    ('Γ', "Gamma"),
    ('Δ', "Delta"),
    ('Ε', "Epsilon"),
    ('Ζ', "Zeta"),
    ('Η', "Eta"),
    ('Θ', "Theta"),
    ('ϴ', "varTheta"),
    ('Ι', "Iota"),
    ('Κ', "Kappa"),
    ('Λ', "Lambda"),
    ('Μ', "Mu"),
    ('Ν', "Nu"),
    ('Ξ', "Xi"),
    ('Ο', "Omicron"),
    ('Π', "Pi"),
    ('Ρ', "Rho"),
    ('Σ', "Sigma"),
    ('Τ', "Tau"),
    ('Υ', "Upsilon"),
    ('Φ', "Phi"),
    ('Χ', "Chi"),
    ('Ψ', "Psi"),
    ('Ω', "Omega"),
];

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn one_name_however_it_is_typed() {
        let names = [
            ("sigma", "sigma"),
            ("σ", "sigma"),
            ("Γ", "Gamma"),
            ("γ_b", "gamma_b"),
            ("βx", "beta_x"),
            ("aβ", "a_beta"),
            ("αβ", "alpha_beta"),
            ("β1", "beta1"),
            ("\u{2126}", "Omega"),
            ("e\u{301}t\u{e9}", "\u{e9}t\u{e9}"),
        ];
        for (written, normal) in names {
            assert_eq!(normal_name(written), normal, "{written}");
        }
    }
}
