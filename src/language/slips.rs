//! What the grammar refuses, said so that an author knows what to write instead.
//!
//! The grammar only tells the place and what would have been right there. Each rule below looks at the place for one
//! common slip; the first that knows the slip speaks, and where none does, the message is what was expected.

use super::diagnostic::Diagnostic;
use super::grammar::Rule;
use super::keywords::{Keyword, is_keyword};
use super::letters::{begins_word, goes_on_word, leading_word};
use super::place::{Place, leading_number};
use super::syntax::Function;

/// The message for a statement that the grammar refuses.
pub fn explain(place: &Place, keyword: &Keyword) -> Diagnostic {
    SLIPS.iter().find_map(|slip| slip(place)).unwrap_or_else(|| unexpected(place, keyword))
}

const SLIPS: [fn(&Place) -> Option<Diagnostic>; 22] = [
    indented_statement,
    sign_of_another_alphabet,
    sign_of_another_language,
    latex_command,
    decimal_without_digits,
    decimal_comma,
    power_of_ten,
    function_without_parentheses,
    sum_without_its_words,
    index_that_is_a_formula,
    empty_brackets,
    word_between_relations,
    list_without_comma,
    side_by_side,
    second_argument,
    two_operators,
    relation_without_sign,
    second_equals,
    number_of_a_good,
    end_too_early,
    form_of_log,
    sign_of_no_language,
];

/// A statement that was indented with the file around it.
fn indented_statement(place: &Place) -> Option<Diagnostic> {
    let word = place.found();
    if !place.begins_line() || !is_keyword(word) || place.expects_operand() {
        return None;
    }
    let message = format!("`{word}` begins a statement, but its line goes on with the statement above");
    Some(Diagnostic::error(place.here(), message).remedy("begin it in the first column, without white space before it"))
}

/// Signs that look like those of the language, or stand for them in print.
const ALPHABET: [(char, &str); 34] = [
    ('−', "-"),
    ('–', "-"),
    ('—', "-"),
    ('‐', "-"),
    ('‑', "-"),
    ('×', "*"),
    ('·', "*"),
    ('⋅', "*"),
    ('∙', "*"),
    ('∗', "*"),
    ('÷', "/"),
    ('∕', "/"),
    ('⁄', "/"),
    ('≤', "<="),
    ('⩽', "<="),
    ('≥', ">="),
    ('⩾', ">="),
    ('≠', "!="),
    ('≡', "="),
    ('“', "\""),
    ('”', "\""),
    ('„', "\""),
    ('²', "^2"),
    ('³', "^3"),
    ('½', "1/2"),
    ('¼', "1/4"),
    ('¾', "3/4"),
    ('√', "sqrt(…)"),
    ('∑', "sum over j of (…)"),
    ('∏', "product over j of (…)"),
    ('′', "another name, such as x1"),
    ('∂', "the name of a derivative, declared with `let`"),
    ('∞', "a finite number"),
    ('…', "all the parts that are left out"),
];

fn sign_of_another_alphabet(place: &Place) -> Option<Diagnostic> {
    let letter = place.after().chars().next()?;
    let subscript = u32::from(letter).wrapping_sub(0x2080);
    if subscript <= 9 {
        let message = format!("`{letter}` (U+{:04X}) is no letter of a name", u32::from(letter));
        return Some(
            Diagnostic::error(place.here(), message).remedy(format!("write _{subscript}, as in x_{subscript}")),
        );
    }
    let (_, meant) = ALPHABET.iter().find(|(sign, _)| *sign == letter)?;
    let message = format!("`{letter}` (U+{:04X}) is not a sign of the language", u32::from(letter));
    Some(Diagnostic::error(place.here(), message).remedy(format!("write {meant}")))
}

/// Signs as programming languages and other programs write them.
fn sign_of_another_language(place: &Place) -> Option<Diagnostic> {
    let (before, after) = (place.before(), place.after());
    let two = |first: char, second: &str| before.ends_with(first) && place.is_adjacent() && after.starts_with(second);
    let (length, ahead, wrong, right) = match after.chars().next()? {
        '*' if two('*', "*") => (1, 1, "**", "^ for a power"),
        '=' if two('=', "=") => (1, 1, "==", "="),
        '<' if two('=', "<") => (1, 1, "=<", "<="),
        '>' if two('=', ">") => (1, 1, "=>", ">="),
        '>' if two('<', ">") => (1, 1, "<>", "!="),
        '=' if after.starts_with("==") => (0, 2, "==", "="),
        '=' if two(':', "=") => (1, 1, ":=", "="),
        ':' if after.starts_with(":=") => (0, 2, ":=", "="),
        '~' if after.starts_with("~=") => (0, 2, "~=", "!="),
        '&' => (0, place.found().len(), "&", "a comma between relations"),
        ';' => (0, 1, ";", "a new line for a new statement, a comma in a list"),
        '{' => (0, 1, "{", "( and ) around parts of a formula"),
        '|' => (0, 1, "|", "sqrt(x^2) for the absolute value of x"),
        '%' => (0, 1, "%", "/100 for a percentage, # before a comment"),
        '\'' if place.expects(&[Rule::string]) => (0, 1, "'", "the title in double quotes"),
        '/' if two('/', "/") => (1, 1, "//", "# before a comment"),
        _ => return None,
    };
    let span = place.around(length, ahead);
    let span = if length == 0 { place.ahead(ahead) } else { span };
    Some(Diagnostic::error(span, format!("`{wrong}` is not a sign of the language")).remedy(format!("write {right}")))
}

fn latex_command(place: &Place) -> Option<Diagnostic> {
    if !place.after().starts_with('\\') {
        return None;
    }
    let command = place.found();
    let name = command.trim_start_matches('\\');
    let remedy = match name {
        "frac" => "write (a) / (b)".to_string(),
        "sum" => "write sum over j of (…)".to_string(),
        "prod" => "write product over j of (…)".to_string(),
        "cdot" | "times" => "write *".to_string(),
        "left" | "right" => "write the bracket alone".to_string(),
        "" => "take it out; a line goes on when it begins with white space".to_string(),
        _ => format!("write {name}"),
    };
    let in_formula = !name.is_empty() && place.expects_operand() && !place.expects(&[Rule::declared]);
    let remedy = if in_formula { format!("{remedy}, or put the formula between `$` signs") } else { remedy };
    Some(Diagnostic::error(place.here(), format!("`{command}` is LaTeX")).remedy(remedy))
}

/// `.5`, `5.`
fn decimal_without_digits(place: &Place) -> Option<Diagnostic> {
    let fraction = place.after().strip_prefix('.')?;
    let digits = leading_number(fraction).split('.').next().unwrap_or("");
    let whole = place.previous();
    let after_number = place.is_adjacent() && whole.bytes().all(|byte| byte.is_ascii_digit());
    if place.expects_operand() && !digits.is_empty() {
        let span = place.ahead(1 + digits.len());
        let remedy = format!("write 0.{digits}");
        return Some(Diagnostic::error(span, format!("`.{digits}` has no digit before its point")).remedy(remedy));
    }
    if after_number && digits.is_empty() && !fraction.starts_with('.') {
        let remedy = format!("write {whole} or {whole}.0");
        let span = place.around(whole.len(), 1);
        return Some(Diagnostic::error(span, format!("`{whole}.` has no digit behind its point")).remedy(remedy));
    }
    None
}

/// `0,5`, where a comma cannot stand, or where what follows it is no relation.
fn decimal_comma(place: &Place) -> Option<Diagnostic> {
    let is_digits = |text: &str| !text.is_empty() && text.bytes().all(|byte| byte.is_ascii_digit());
    let (before, after) = (place.before(), place.after());
    let (whole, fraction, span) = if let Some(rest) = after.strip_prefix(',') {
        let fraction = leading_number(rest);
        (place.previous(), fraction, place.around(place.previous().len(), 1 + fraction.len()))
    } else if place.expects(&[Rule::comparison]) {
        let fraction = place.previous();
        let list = before[..before.len() - fraction.len()].strip_suffix(',')?;
        let whole = &list[list.trim_end_matches(|letter: char| letter.is_ascii_digit()).len()..];
        (whole, fraction, place.around(whole.len() + 1 + fraction.len(), 0))
    } else {
        return None;
    };
    if place.expects(&[Rule::close_index]) || !is_digits(whole) || !is_digits(fraction) {
        return None;
    }
    let message = format!("`{whole},{fraction}` is two numbers, with a comma between them");
    Some(Diagnostic::error(span, message).remedy(format!("write {whole}.{fraction} for a decimal")))
}

/// `1e-3`
fn power_of_ten(place: &Place) -> Option<Diagnostic> {
    let mantissa = place.previous();
    let exponent = place.after().strip_prefix(['e', 'E'])?;
    let is_number = mantissa.starts_with(|letter: char| letter.is_ascii_digit());
    if !place.expects_operator() || !is_number || !place.is_adjacent() {
        return None;
    }
    let digits = leading_number(exponent.trim_start_matches(['+', '-']));
    let signs = exponent.len() - exponent.trim_start_matches(['+', '-']).len();
    if signs > 1 || digits.is_empty() || digits.contains('.') {
        return None;
    }
    let (written, sign) =
        (&place.after()[..1 + signs + digits.len()], if exponent.starts_with('-') { '/' } else { '*' });
    let span = place.around(mantissa.len(), written.len());
    let message = format!("`{mantissa}{written}` is not how the language writes a power of ten");
    Some(Diagnostic::error(span, message).remedy(format!("write {mantissa}{sign}10^{digits}, or the decimal in full")))
}

/// `ln p`
fn function_without_parentheses(place: &Place) -> Option<Diagnostic> {
    let (word, argument) = (place.previous(), place.found());
    if Function::from_word(word).is_none() || !place.expects_operator() || argument.is_empty() {
        return None;
    }
    let starts_operand = argument.starts_with(begins_word) || !leading_number(argument).is_empty();
    let argument = if starts_operand { place.right_operand() } else { argument };
    let span = place.around(word.len(), argument.len());
    let shown = if starts_operand { shortened(argument) } else { "…" };
    let message = format!("the argument of `{word}` stands in parentheses");
    Some(Diagnostic::error(span, message).remedy(format!("write {word}({shown})")))
}

/// `sum j of (…)`, `sum over j (…)`, `sum over j of a[j]`
fn sum_without_its_words(place: &Place) -> Option<Diagnostic> {
    let (word, found) = (place.previous(), place.found());
    if matches!(word, "sum" | "product") && place.expects_operator() && found.starts_with(begins_word) {
        let remedy = format!("write {word} over j of (…)");
        return Some(
            Diagnostic::error(place.around(word.len(), found.len()), format!("`{word}` lacks its `over`"))
                .remedy(remedy),
        );
    }
    if place.expects(&[Rule::of_word]) && found != "," {
        let message = "before what is summed or multiplied stands `of`";
        return Some(Diagnostic::error(place.here(), message).remedy("write sum over j of (…)"));
    }
    if place.expects(&[Rule::body]) {
        let message = "what is summed or multiplied stands in parentheses";
        return Some(Diagnostic::error(place.here(), message).remedy("write sum over j of (…)"));
    }
    None
}

/// `p[i+1]`, `p[1.5]`
fn index_that_is_a_formula(place: &Place) -> Option<Diagnostic> {
    let starts_formula = place.found().starts_with(['+', '-', '*', '/', '.', '^', '(']);
    let at_index = place.expects(&[Rule::close_index, Rule::index, Rule::index_name]);
    if !at_index || !starts_formula {
        return None;
    }
    let message = "an index is the name of an index, or a good by name or number";
    Some(Diagnostic::error(place.here(), message).remedy("write p[i], p[1] or p[bread]"))
}

/// `()`, `p[]`
fn empty_brackets(place: &Place) -> Option<Diagnostic> {
    let (before, found) = (place.before(), place.found());
    let empty = matches!(found, ")" | "]") && before.ends_with(['(', '[']);
    let message = "nothing stands between the brackets";
    empty.then(|| Diagnostic::error(place.around(1, 1), message).remedy("write what belongs there, or take them out"))
}

/// `a > 0 and b > 0`
fn word_between_relations(place: &Place) -> Option<Diagnostic> {
    let word = place.found();
    if !matches!(word, "and" | "or") || !place.expects(&[Rule::comma]) {
        return None;
    }
    let remedy = match word {
        "and" => "write a comma in its place",
        _ => "write one of the two; what holds in one case or the other cannot be assumed together",
    };
    Some(Diagnostic::error(place.here(), format!("`{word}` does not join relations")).remedy(remedy))
}

/// `goods bread fish`
fn list_without_comma(place: &Place) -> Option<Diagnostic> {
    let (left, right) = (place.previous(), place.found());
    let words = left.starts_with(begins_word) && right.starts_with(begins_word);
    if !words || place.expects_operator() || !place.expects(&[Rule::comma]) {
        return None;
    }
    let message = format!("no comma stands between `{left}` and `{right}`");
    Some(Diagnostic::error(place.around(left.len(), right.len()), message).remedy(format!("write {left}, {right}")))
}

/// `a b`, `3 p`, `(a) (b)`
fn side_by_side(place: &Place) -> Option<Diagnostic> {
    let found = place.found();
    let begins_operand = found.starts_with(begins_word) || found == "(" || !leading_number(found).is_empty();
    if !place.expects_operator() || !begins_operand {
        return None;
    }
    let (left, right) = (place.left_operand(), place.right_operand());
    let span = place.around(left.len(), right.len());
    let is_word = |operand: &str| !operand.is_empty() && leading_word(operand) == operand;
    let one = if is_word(left) && is_word(right) { format!(", or {left}_{right} for one name") } else { String::new() };
    let (left, right) = (shortened(left), shortened(right));
    let message = format!("no sign stands between `{left}` and `{right}`");
    Some(Diagnostic::error(span, message).remedy(format!("write {left} * {right} for a product{one}")))
}

/// An operand as it is, or the sign for a long one.
fn shortened(operand: &str) -> &str {
    if operand.len() <= 24 && !operand.contains('\n') { operand } else { "(…)" }
}

/// `max(a, b)`
fn second_argument(place: &Place) -> Option<Diagnostic> {
    if place.found() != "," || !place.expects(&[Rule::close]) {
        return None;
    }
    let message = "a comma cannot stand in parentheses; every function has one argument";
    Some(Diagnostic::error(place.here(), message).remedy("the functions are ln, exp, sqrt, Ei, erf, erfi, lambertw"))
}

/// `a * / b`
fn two_operators(place: &Place) -> Option<Diagnostic> {
    let (left, right) = (place.previous(), place.found());
    if !place.expects_operand() || !matches!(right, "+" | "*" | "/" | "^") {
        return None;
    }
    let message = format!("`{right}` has nothing before it to join");
    let remedy = match left {
        "+" | "-" | "*" | "/" | "^" => format!("write `{left}` or `{right}`, or a formula between them"),
        _ => format!("take `{right}` out, or write a formula before it"),
    };
    Some(Diagnostic::error(place.here(), message).remedy(remedy))
}

/// `assume a`
fn relation_without_sign(place: &Place) -> Option<Diagnostic> {
    if !place.expects(&[Rule::comparison]) || !matches!(place.found(), "" | ",") {
        return None;
    }
    let left = place.left_operand();
    let message = "a relation needs a sign: `=`, `!=`, `<`, `<=`, `>` or `>=`";
    let remedy = format!("write what holds of it, as in {} > 0", if left.is_empty() { "a" } else { shortened(left) });
    Some(Diagnostic::error(place.around(left.len(), 0), message).remedy(remedy))
}

/// `demand bread = a = b`
fn second_equals(place: &Place) -> Option<Diagnostic> {
    let is_sign = matches!(place.found(), "=" | "!=" | "<" | "<=" | ">" | ">=");
    if !is_sign || !place.expects_operator() || place.expects(&[Rule::comparison]) {
        return None;
    }
    let message = format!("`{}` cannot stand in a formula", place.found());
    Some(
        Diagnostic::error(place.here(), message)
            .remedy("end the formula before it; relations belong in `assume` and `claim`"),
    )
}

/// `demand 1 = …`
fn number_of_a_good(place: &Place) -> Option<Diagnostic> {
    let number = leading_number(place.after());
    if number.is_empty() || !place.expects(&[Rule::target]) {
        return None;
    }
    let message = "the number of a good stands in square brackets";
    Some(Diagnostic::error(place.here(), message).remedy(format!("write {}[{number}]", place.before())))
}

/// `a ? b`
fn sign_of_no_language(place: &Place) -> Option<Diagnostic> {
    let sign = place.after().chars().next()?;
    let in_formula = place.expects_operand() || place.expects_operator();
    if !in_formula || goes_on_word(sign) || "+-*/^()[]=<>!,.\"$".contains(sign) {
        return None;
    }
    let remedy = "formulas have names, numbers, + - * / ^, parentheses, indices in [ ] and functions such as ln(…)";
    Some(Diagnostic::error(place.here(), format!("`{sign}` is not a sign of the language")).remedy(remedy))
}

fn end_too_early(place: &Place) -> Option<Diagnostic> {
    if !place.found().is_empty() || !place.expects_operand() {
        return None;
    }
    let message = format!("the statement ends behind `{}`, where a formula should follow", place.previous());
    let remedy = "write the formula; a line that goes on with the statement above begins with white space";
    let length = place.previous().len();
    Some(Diagnostic::error(place.around(length, 0), message).remedy(remedy))
}

/// `log share bread = …`
fn form_of_log(place: &Place) -> Option<Diagnostic> {
    let is_log = place.before().is_empty() && place.expects(&[Rule::form, Rule::demand]);
    let after = place.after().strip_prefix("log").filter(|_| is_log)?.trim_start();
    let word = leading_word(after);
    let span = place.ahead(place.after().len() - after.len() + word.len());
    Some(Diagnostic::error(span, "`log` begins a statement only as `log demand`").remedy("write log demand GOOD = …"))
}

/// What was expected, and what was found.
fn unexpected(place: &Place, keyword: &Keyword) -> Diagnostic {
    let wanted = place.wanted();
    let expected = if wanted.is_empty() { "something else".to_string() } else { wanted };
    let message = match place.found() {
        "" => format!("the statement ends where {expected} should follow"),
        found => format!("expected {expected}, found `{found}`"),
    };
    Diagnostic::error(place.here(), message).remedy(format!("the form of the statement is: {}", keyword.usage))
}
