//! Where the grammar could not go on, and what stands around it.

use pest::error::{Error, ErrorVariant, InputLocation};

use super::grammar::Rule;
use super::letters::{begins_word, goes_on_word, leading_word};
use super::syntax::Span;

/// The place in a statement behind which no rule could read on.
#[derive(Debug)]
pub struct Place<'a> {
    text: &'a str,
    offset: usize,
    at: usize,
    expected: Vec<Rule>,
}

impl<'a> Place<'a> {
    /// The place of an error in a statement that starts at `offset` of its file.
    pub fn of(error: &Error<Rule>, text: &'a str, offset: usize) -> Place<'a> {
        let at = match error.location {
            InputLocation::Pos(at) | InputLocation::Span((at, _)) => at,
        };
        let expected = match &error.variant {
            ErrorVariant::ParsingError { positives, .. } => positives.clone(),
            ErrorVariant::CustomError { .. } => Vec::new(),
        };
        let at = at + text.get(at..).map_or(0, |rest| rest.len() - rest.trim_start().len());
        Place { text, offset, at, expected }
    }

    /// The whole statement.
    pub fn text(&self) -> &'a str {
        self.text
    }

    /// Its offset in the statement.
    pub fn at(&self) -> usize {
        self.at
    }

    /// Whether one of these would have been right here.
    pub fn expects(&self, rules: &[Rule]) -> bool {
        rules.iter().any(|rule| self.expected.contains(rule))
    }

    /// Whether a formula could begin here.
    pub fn expects_operand(&self) -> bool {
        self.expects(OPERANDS) || self.expects(&[Rule::relation])
    }

    /// Whether a formula that has been read could go on here.
    pub fn expects_operator(&self) -> bool {
        self.expects(&[Rule::operator])
    }

    /// The statement before the place, without white space at its end.
    pub fn before(&self) -> &'a str {
        self.text.get(..self.at).unwrap_or("").trim_end()
    }

    /// The statement from the place on.
    pub fn after(&self) -> &'a str {
        self.text.get(self.at..).unwrap_or("")
    }

    /// The word, number or sign at the place; empty at the end of the statement.
    pub fn found(&self) -> &'a str {
        leading_token(self.after())
    }

    /// The word or number before the place, or its last sign.
    pub fn previous(&self) -> &'a str {
        trailing_token(self.before())
    }

    /// The operand before the place, with its indices or its argument: `p[1]`, `ln(p)`, `(a + b)`.
    pub fn left_operand(&self) -> &'a str {
        let text = self.before();
        let head = if text.ends_with([')', ']']) { &text[..opening(text)] } else { text };
        let word = trailing_token(head);
        let belongs = head.len() == text.len() || word.starts_with(begins_word);
        &text[head.len() - if belongs { word.len() } else { 0 }..]
    }

    /// The operand at the place, with its indices or its argument.
    pub fn right_operand(&self) -> &'a str {
        let text = self.after();
        let head = self.found();
        let head = if head == "(" { 0 } else { head.len() };
        let tail = &text[head..];
        &text[..head + if tail.starts_with(['(', '[']) { closing(tail) } else { 0 }]
    }

    /// The stretch of the first `length` bytes from the place on.
    pub fn ahead(&self, length: usize) -> Span {
        Span::new(self.offset + self.at, self.offset + (self.at + length).min(self.text.len()))
    }

    /// The stretch of what is found; a point behind the last word at the end of the statement.
    pub fn here(&self) -> Span {
        if self.found().is_empty() {
            let end = self.offset + self.before().len();
            return Span::new(end, end);
        }
        self.ahead(self.found().len())
    }

    /// From the last `length` bytes of what is before to the first `ahead` bytes from the place on.
    pub fn around(&self, length: usize, ahead: usize) -> Span {
        let start = self.before().len().saturating_sub(length);
        Span::new(self.offset + start, self.offset + (self.at + ahead).min(self.text.len()))
    }

    /// Whether what is found is the first word of its line, and not of the statement.
    pub fn begins_line(&self) -> bool {
        self.text.get(self.before().len()..self.at).is_some_and(|gap| gap.contains('\n'))
    }

    /// Whether nothing stands between what is before and what is found.
    pub fn is_adjacent(&self) -> bool {
        self.before().len() == self.at
    }

    /// What would have been right here, in words; empty where nothing can be said.
    pub fn wanted(&self) -> String {
        let mut phrases: Vec<&str> = Vec::new();
        for (rules, phrase) in PHRASES {
            if self.expects(rules) {
                phrases.push(phrase);
            }
        }
        match phrases.split_last() {
            None => String::new(),
            Some((last, [])) => last.to_string(),
            Some((last, others)) => format!("{} or {last}", others.join(", ")),
        }
    }
}

/// What the rules read, in words, in the order in which it is told; what may stand in a place and need not is left out.
const PHRASES: [(&[Rule], &str); 25] = [
    (&[Rule::preferences], "`utility`, `indirect utility`, `expenditure`"),
    (&[Rule::of_response], "`[`"),
    (&[Rule::mover], "a price or `income`"),
    (&[Rule::good, Rule::member], "the name of a good"),
    (&[Rule::target], "a good"),
    (&[Rule::good_number], "a number"),
    (&[Rule::group_name], "the name of a group"),
    (&[Rule::symbol, Rule::declared], "a name"),
    (&[Rule::index_name, Rule::binder], "the name of an index"),
    (&[Rule::index], "an index"),
    (&[Rule::string], "a text in double quotes"),
    (&[Rule::latex], "a LaTeX form"),
    (&[Rule::form], "`demand`"),
    (OPERANDS, "a formula"),
    (&[Rule::relation], "a relation"),
    (&[Rule::operator], "an operator"),
    (&[Rule::comparison], "a sign such as `=` or `<`"),
    (&[Rule::equals], "`=`"),
    (&[Rule::dots], "`..`"),
    (&[Rule::of_word], "`of`"),
    (&[Rule::body], "`(`"),
    (&[Rule::close], "`)`"),
    (&[Rule::close_index], "`]`"),
    (&[Rule::comma], "`,`"),
    (&[Rule::EOI], "the end of the statement"),
];

/// What a formula begins with.
const OPERANDS: &[Rule] =
    &[Rule::number, Rule::name, Rule::reference, Rule::parenthesis, Rule::expression, Rule::negative, Rule::aggregate];

/// The word, number, or sign at the beginning of a text.
pub fn leading_token(text: &str) -> &str {
    let word = leading_word(text);
    if !word.is_empty() {
        return word;
    }
    let number = leading_number(text);
    if !number.is_empty() {
        return number;
    }
    if let Some(sign) = SIGNS.iter().find(|sign| text.starts_with(**sign)) {
        return &text[..sign.len()];
    }
    let command = text.strip_prefix('\\').map_or(0, |rest| 1 + leading_word(rest).len());
    let length = text.chars().next().map_or(0, char::len_utf8).max(command);
    &text[..length]
}

/// The number at the beginning of a text.
pub fn leading_number(text: &str) -> &str {
    let digits = |text: &str| text.bytes().take_while(u8::is_ascii_digit).count();
    let whole = digits(text);
    let fraction = text[whole..].strip_prefix('.').map_or(0, digits);
    if whole == 0 { "" } else { &text[..whole + if fraction > 0 { fraction + 1 } else { 0 }] }
}

const SIGNS: [&str; 7] = ["!=", "<=", ">=", "==", "**", "..", "&&"];

/// The word, number, or sign at the end of a text.
fn trailing_token(text: &str) -> &str {
    let word = &text[text.trim_end_matches(goes_on_word).len()..];
    let Some(fraction) = text[..text.len() - word.len()].strip_suffix('.') else {
        return if word.is_empty() { last_letter(text) } else { word };
    };
    let whole = fraction.len() - fraction.trim_end_matches(|letter: char| letter.is_ascii_digit()).len();
    let is_number = whole > 0 && !word.is_empty() && word.bytes().all(|byte| byte.is_ascii_digit());
    match is_number {
        true => &text[fraction.len() - whole..],
        false if word.is_empty() => last_letter(text),
        false => word,
    }
}

/// Where the bracket opens that the text closes with.
fn opening(text: &str) -> usize {
    let mut depth = 0i32;
    for (at, letter) in text.char_indices().rev() {
        depth += i32::from(matches!(letter, ')' | ']')) - i32::from(matches!(letter, '(' | '['));
        if depth == 0 {
            return at;
        }
    }
    0
}

/// Behind where the bracket closes that the text opens with.
fn closing(text: &str) -> usize {
    let mut depth = 0i32;
    for (at, letter) in text.char_indices() {
        depth += i32::from(matches!(letter, '(' | '[')) - i32::from(matches!(letter, ')' | ']'));
        if depth == 0 {
            return at + letter.len_utf8();
        }
    }
    text.len()
}

fn last_letter(text: &str) -> &str {
    let length = text.chars().next_back().map_or(0, char::len_utf8);
    &text[text.len() - length..]
}
