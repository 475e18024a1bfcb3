//! The LaTeX form of a declared name: balanced, and of commands that only draw.

/// Checks what stands behind `as`, and brings it into form: without `$` signs, white space as single spaces.
///
/// # Errors
/// Says what may not stand there.
pub fn latex_form(written: &str) -> Result<String, String> {
    let written = written.trim();
    let bare = written.strip_prefix('$').and_then(|rest| rest.strip_suffix('$')).unwrap_or(written);
    let form = bare.split_whitespace().collect::<Vec<_>>().join(" ");
    if form.is_empty() {
        return Err("the LaTeX form is empty".to_string());
    }
    if form.len() > MAX_LENGTH {
        return Err(format!("a LaTeX form may have at most {MAX_LENGTH} characters"));
    }
    commands_are_known(&form)?;
    braces_match(&form)?;
    Ok(form)
}

/// The longest form of a name, in bytes.
const MAX_LENGTH: usize = 200;

fn commands_are_known(form: &str) -> Result<(), String> {
    let mut rest = form;
    while let Some(letter) = rest.chars().next() {
        rest = &rest[letter.len_utf8()..];
        if letter != '\\' {
            if !letter.is_ascii_alphanumeric() && !" _^{}'*+-()[]|.,/".contains(letter) {
                return Err(format!("`{letter}` may not stand in a LaTeX form"));
            }
            continue;
        }
        let length = rest.find(|letter: char| !letter.is_ascii_alphabetic()).unwrap_or(rest.len());
        let (command, after) = rest.split_at(length);
        if command.is_empty() {
            let spacing = after.starts_with([',', ';', ':', '!', ' ', '{', '}']);
            rest = after.get(1..).filter(|_| spacing).ok_or("a `\\` without a command stands in the LaTeX form")?;
        } else if COMMANDS.split_whitespace().any(|known| known == command) {
            rest = after;
        } else {
            return Err(format!("`\\{command}` may not stand in a LaTeX form"));
        }
    }
    Ok(())
}

fn braces_match(form: &str) -> Result<(), String> {
    let mut depth = 0i32;
    for letter in form.replace("\\{", "").replace("\\}", "").chars() {
        depth += i32::from(letter == '{') - i32::from(letter == '}');
        if depth < 0 {
            break;
        }
    }
    if depth == 0 { Ok(()) } else { Err("the braces of the LaTeX form do not match".to_string()) }
}

/// Greek letters, accents, alphabets and ornaments of letters that every LaTeX knows.
const COMMANDS: &str = "
    alpha beta gamma delta epsilon varepsilon zeta eta theta vartheta iota kappa lambda mu nu xi omicron pi varpi rho
    varrho sigma varsigma tau upsilon phi varphi chi psi omega
    Gamma Delta Theta Lambda Xi Pi Sigma Upsilon Phi Psi Omega
    acute bar breve check ddot dot grave hat mathring overline tilde underline vec widehat widetilde
    boldsymbol mathbb mathbf mathcal mathfrak mathit mathrm mathsf mathtt operatorname
    text textbf textit textrm textsf texttt
    aleph ast bullet circ dagger ddagger ell flat hbar imath infty jmath mp natural nabla parallel partial perp pm prime
    sharp star times wp Im Re";

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn what_draws_a_letter_is_taken_and_nothing_else() {
        for (written, form) in [
            (" \\sigma ", "\\sigma"),
            ("$\\bar{x}_{i,j}$", "\\bar{x}_{i,j}"),
            ("p^{\\mathrm{\n  wheat}}", "p^{\\mathrm{ wheat}}"),
        ] {
            assert_eq!(latex_form(written).as_deref(), Ok(form));
        }
        for written in ["", "\\input{x}", "\\write18", "a%b", "x_{1", "}{", "\\", "#1", "a&b", "$a$b$"] {
            assert!(latex_form(written).is_err(), "{written}");
        }
    }
}
