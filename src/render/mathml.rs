//! Laid-out formulas written in MathML (presentation, MathML Core).

use crate::algebra::formula::Function;
use crate::render::layout::{Node, Sign, Size};
use crate::render::names::{Part, greek, greek_character};

/// A laid-out formula in MathML, without the `math` element around it.
pub fn mathml(node: &Node) -> String {
    let mut out = String::new();
    write(node, &mut out);
    out
}

/// Text in which no character can be taken for markup.
pub fn escape_markup(text: &str) -> String {
    let mut out = String::new();
    for character in text.chars() {
        match character {
            '&' => out.push_str("&amp;"),
            '<' => out.push_str("&lt;"),
            '>' => out.push_str("&gt;"),
            '"' => out.push_str("&quot;"),
            '\'' => out.push_str("&#39;"),
            _ if character.is_control() => out.push(' '),
            _ => out.push(character),
        }
    }
    out
}

fn write(node: &Node, out: &mut String) {
    match node {
        Node::Row(nodes) => write_row(nodes, out),
        Node::Part(part) => write_part(part, out),
        Node::Declared(latex) => element("mrow", &[&declared(latex)], out),
        Node::Sign(sign) => out.push_str(sign_mathml(*sign)),
        Node::Function(function) => {
            out.push_str(&format!("<mi mathvariant=\"normal\">{}</mi><mo>&#x2061;</mo>", function_name(*function)));
        }
        Node::Scripts { base, below, above } => write_scripts(base, below.as_deref(), above.as_deref(), out),
        Node::Fraction { above, below, small: false } => element("mfrac", &[&single(above), &single(below)], out),
        Node::Fraction { above, below, small: true } => {
            out.push_str("<mstyle displaystyle=\"false\">");
            element("mfrac", &[&single(above), &single(below)], out);
            out.push_str("</mstyle>");
        }
        Node::Root(inner) => element("msqrt", &[&mathml(inner)], out),
        Node::Open(size) => out.push_str(&bracket('(', "prefix", *size)),
        Node::Close(size) => out.push_str(&bracket(')', "postfix", *size)),
    }
}

fn element(name: &str, children: &[&str], out: &mut String) {
    out.push_str(&format!("<{name}>{}</{name}>", children.concat()));
}

/// The node as exactly one element.
fn single(node: &Node) -> String {
    match node {
        Node::Row(_) | Node::Function(_) => format!("<mrow>{}</mrow>", mathml(node)),
        _ => mathml(node),
    }
}

/// Names of functions keep their distance from what stands beside them without brackets.
fn write_row(nodes: &[Node], out: &mut String) {
    const DISTANCE: &str = "<mspace width=\"0.1667em\"/>";
    for (position, node) in nodes.iter().enumerate() {
        let next = nodes.get(position + 1).and_then(first_leaf);
        match node {
            Node::Row(inner) if matches!(inner.first(), Some(Node::Open(Size::Fitting))) => {
                element("mrow", &[&mathml(node)], out);
            }
            _ => write(node, out),
        }
        let is_function = matches!(node, Node::Function(_));
        let before_function = *node == Node::Sign(Sign::Juxtaposed) && matches!(next, Some(Node::Function(_)));
        if before_function || is_function && !matches!(next, Some(Node::Open(_))) {
            out.push_str(DISTANCE);
        }
    }
}

fn first_leaf(node: &Node) -> Option<&Node> {
    match node {
        Node::Row(nodes) => nodes.first().and_then(first_leaf),
        other => Some(other),
    }
}

fn write_part(part: &Part, out: &mut String) {
    match part {
        Part::Letter(letter) => element("mi", &[&letter.to_string()], out),
        Part::Greek(name) => element("mi", &[&greek_character(name).to_string()], out),
        Part::Number(digits) => element("mn", &[digits], out),
        Part::Word(word) => element("mtext", &[&escape_markup(word)], out),
    }
}

fn write_scripts(base: &Node, below: Option<&Node>, above: Option<&Node>, out: &mut String) {
    let base_markup = single(base);
    match (below, above) {
        (Some(below), None) if matches!(base, Node::Sign(Sign::Sum | Sign::Product)) => {
            element("munder", &[&base_markup, &single(below)], out)
        }
        (Some(below), Some(above)) => element("msubsup", &[&base_markup, &single(below), &single(above)], out),
        (Some(below), None) => element("msub", &[&base_markup, &single(below)], out),
        (None, Some(above)) => element("msup", &[&base_markup, &single(above)], out),
        (None, None) => out.push_str(&base_markup),
    }
}

fn bracket(character: char, form: &str, size: Size) -> String {
    let stretch = match size {
        Size::Normal => "stretchy=\"false\"",
        Size::Big => "stretchy=\"true\" symmetric=\"true\" minsize=\"1.2em\" maxsize=\"1.2em\"",
        Size::Bigger => "stretchy=\"true\" symmetric=\"true\" minsize=\"1.8em\" maxsize=\"1.8em\"",
        Size::Tall => "stretchy=\"true\" symmetric=\"true\" minsize=\"2.4em\" maxsize=\"2.4em\"",
        Size::Fitting => "stretchy=\"true\" symmetric=\"true\"",
    };
    format!("<mo form=\"{form}\" lspace=\"0\" rspace=\"0\" {stretch}>{character}</mo>")
}

fn sign_mathml(sign: Sign) -> &'static str {
    match sign {
        Sign::Plus | Sign::LinePlus => "<mo form=\"infix\">+</mo>",
        Sign::Minus | Sign::LineMinus => "<mo form=\"infix\">&#x2212;</mo>",
        Sign::TightPlus => "<mo lspace=\"0\" rspace=\"0\">+</mo>",
        Sign::TightMinus => "<mo lspace=\"0\" rspace=\"0\">&#x2212;</mo>",
        Sign::LineTimes => "<mo form=\"infix\">&#xd7;</mo>",
        Sign::Juxtaposed => "<mo>&#x2062;</mo>",
        Sign::Thin => "<mspace width=\"0.1667em\"/>",
        Sign::Dot => "<mo form=\"infix\">&#x22c5;</mo>",
        Sign::Slash => "<mo lspace=\"0\" rspace=\"0\" stretchy=\"false\">/</mo>",
        Sign::Comma => "<mo separator=\"true\" lspace=\"0\" rspace=\"0.1667em\">,</mo>",
        Sign::TightComma => "<mo separator=\"true\" lspace=\"0\" rspace=\"0\">,</mo>",
        Sign::Partial => "<mi>&#x2202;</mi>",
        Sign::Sum => "<mo>&#x2211;</mo>",
        Sign::Product => "<mo>&#x220F;</mo>",
        Sign::Unequal => "<mo>&#x2260;</mo>",
        Sign::In => "<mo>&#x2208;</mo>",
        Sign::Transpose => "<mi>&#x22a4;</mi>",
    }
}

fn function_name(function: Function) -> &'static str {
    match function {
        Function::Ln => "ln",
        Function::Exp => "exp",
        Function::Sqrt => "sqrt",
        Function::Ei => "Ei",
        Function::Erf => "erf",
        Function::Erfi => "erfi",
        Function::LambertW => "W",
    }
}

/// A declared LaTeX form: letters, digits, scripts, Greek letters and accents; fonts are not followed.
fn declared(latex: &str) -> String {
    let tokens: Vec<char> = latex.chars().collect();
    let mut position = 0;
    let mut parts: Vec<String> = Vec::new();
    while position < tokens.len() {
        match tokens[position] {
            mark @ ('_' | '^') => {
                position += 1;
                let script = argument(&tokens, &mut position);
                let base = parts.pop().unwrap_or_else(|| "<mrow></mrow>".to_string());
                let name = if mark == '_' { "msub" } else { "msup" };
                parts.push(format!("<{name}>{base}{script}</{name}>"));
            }
            ' ' => position += 1,
            _ => parts.push(argument(&tokens, &mut position)),
        }
    }
    parts.concat()
}

/// The next letter, command or group, as one element.
fn argument(tokens: &[char], position: &mut usize) -> String {
    let Some(&first) = tokens.get(*position) else { return "<mrow></mrow>".to_string() };
    *position += 1;
    match first {
        ' ' => argument(tokens, position),
        '{' => {
            let start = *position;
            let mut depth = 1;
            while *position < tokens.len() && depth > 0 {
                depth += i32::from(tokens[*position] == '{') - i32::from(tokens[*position] == '}');
                *position += 1;
            }
            let inner: String = tokens[start..position.saturating_sub(1)].iter().collect();
            format!("<mrow>{}</mrow>", declared(&inner))
        }
        '\\' => {
            let start = *position;
            while tokens.get(*position).is_some_and(char::is_ascii_alphabetic) {
                *position += 1;
            }
            let command: String = tokens[start..*position].iter().collect();
            command_mathml(&command, tokens, position)
        }
        '0'..='9' => format!("<mn>{first}</mn>"),
        '\'' => "<mo>&#x2032;</mo>".to_string(),
        'a'..='z' | 'A'..='Z' => format!("<mi>{first}</mi>"),
        _ => format!("<mo>{}</mo>", escape_markup(&first.to_string())),
    }
}

fn command_mathml(command: &str, tokens: &[char], position: &mut usize) -> String {
    if let Some(name) = greek(command) {
        return format!("<mi>{}</mi>", greek_character(name));
    }
    let accent = match command {
        "hat" | "widehat" => "^",
        "tilde" | "widetilde" => "~",
        "bar" | "overline" => "&#xaf;",
        "dot" => "&#x2d9;",
        "ddot" => "&#xa8;",
        "vec" => "&#x2192;",
        "check" => "&#x2c7;",
        "acute" => "&#xb4;",
        "grave" => "`",
        "breve" => "&#x2d8;",
        "ell" => return "<mi>&#x2113;</mi>".to_string(),
        "hbar" => return "<mi>&#x210f;</mi>".to_string(),
        "ast" | "star" => return "<mo>*</mo>".to_string(),
        "prime" => return "<mo>&#x2032;</mo>".to_string(),
        "circ" => return "<mo>&#x2218;</mo>".to_string(),
        "bullet" => return "<mo>&#x2022;</mo>".to_string(),
        _ => return argument(tokens, position),
    };
    let base = argument(tokens, position);
    format!("<mover accent=\"true\">{base}<mo stretchy=\"false\">{accent}</mo></mover>")
}
