//! Documents as one HTML page: formulas in MathML, light and dark, fit to be printed, and no script in it.

use crate::render::display::{Row, displays, matrix_cells};
use crate::render::document::{Block, Document, Equation, Inline, Matrix, Relation, Table, Tone, VerdictLine};
use crate::render::expression::Expression;
use crate::render::formula_text::plain_expression;
use crate::render::layout::{Node, Style};
use crate::render::mathml::{escape_markup, mathml};
use crate::render::naming::Namer;
use crate::render::text::equation_text;
use crate::render::typeset::typeset;

/// The look of the page.
const STYLE: &str = include_str!("page.css");

/// The document as a page of its own.
pub fn page(document: &Document) -> String {
    let mut namer = Namer::new(document);
    let title = escape_markup(document.title.as_deref().unwrap_or("Demand system"));
    let heading = document.title.as_ref().map(|_| format!("<h1>{title}</h1>\n")).unwrap_or_default();
    let body: String =
        sections(&document.blocks).into_iter().enumerate().map(|(n, blocks)| section(n, blocks, &mut namer)).collect();
    format!(
        "<!DOCTYPE html>\n<html lang=\"en\">\n<head>\n<meta charset=\"utf-8\">\n\
         <meta name=\"viewport\" content=\"width=device-width, initial-scale=1\">\n<title>{title}</title>\n\
         <style>\n{STYLE}</style>\n</head>\n<body>\n<main>\n{heading}{body}</main>\n</body>\n</html>\n"
    )
}

/// The blocks from heading to heading.
fn sections(blocks: &[Block]) -> Vec<&[Block]> {
    let begins = |at: &usize| *at == 0 || matches!(blocks[*at], Block::Heading { level: 1, .. });
    let mut starts: Vec<usize> = (0..blocks.len()).filter(begins).collect();
    starts.push(blocks.len());
    starts.windows(2).map(|pair| &blocks[pair[0]..pair[1]]).collect()
}

/// A section that can be folded at its heading; what stands before the first heading cannot.
fn section(number: usize, blocks: &[Block], namer: &mut Namer) -> String {
    let Some((Block::Heading { level: 1, text }, rest)) = blocks.split_first() else { return working(blocks, namer) };
    let (heading, body) = (running(text), working(rest, namer));
    format!(
        "<section aria-labelledby=\"s{number}\">\n<details open=\"open\">\n\
         <summary><h2 id=\"s{number}\">{heading}</h2></summary>\n{body}</details>\n</section>\n"
    )
}

/// Blocks in a row; several displays in a row, one for each equation that is worked, are a step that can be folded.
fn working(blocks: &[Block], namer: &mut Namer) -> String {
    let is_display = |block: &Block| matches!(block, Block::Display(_) | Block::Where(_));
    let mut out = String::new();
    let mut at = 0;
    while at < blocks.len() {
        let run = blocks[at..].iter().take_while(|block| is_display(block)).count();
        let step: String = blocks[at..at + run.max(1)].iter().map(|each| block(each, namer)).collect();
        if run > 1 {
            let words = format!("The working, in {run} displays");
            out.push_str(&format!(
                "<details open=\"open\" class=\"step\">\n<summary>{words}</summary>\n{step}</details>\n"
            ));
        } else {
            out.push_str(&step);
        }
        at += run.max(1);
    }
    out
}

fn block(block: &Block, namer: &mut Namer) -> String {
    match block {
        Block::Heading { level, text } => {
            let level = usize::from(*level).clamp(1, 5) + 1;
            format!("<h{level}>{}</h{level}>\n", running(text))
        }
        Block::Paragraph(text) => format!("<p>{}</p>\n", running(text)),
        Block::Display(equations) => display(equations, namer),
        Block::Where(equations) => format!("<p>where</p>\n{}", display(equations, namer)),
        Block::Verdicts(lines) => verdicts(lines),
        Block::Table(each) => table(each),
        Block::Matrix(each) => matrix(each, namer),
        Block::List { ordered, items } => {
            let name = if *ordered { "ol" } else { "ul" };
            let items: String = items.iter().map(|item| format!("<li>{}</li>\n", running(item))).collect();
            format!("<{name}>\n{items}</{name}>\n")
        }
        Block::Note(text) => format!("<p class=\"note\">{}</p>\n", running(text)),
    }
}

fn running(inlines: &[Inline]) -> String {
    let mut out = String::new();
    for inline in inlines {
        match inline {
            Inline::Text(words) => out.push_str(&escape_markup(words)),
            Inline::Emphasis(words) => out.push_str(&format!("<em>{}</em>", escape_markup(words))),
            Inline::Code(words) => out.push_str(&format!("<code>{}</code>", escape_markup(words))),
            Inline::Math(equation) => out.push_str(&inline_math(equation)),
        }
    }
    out
}

fn inline_math(equation: &Equation) -> String {
    let side = |side| mathml(&typeset(side, Style::Text).node);
    let left = equation.left.as_ref().map(side).unwrap_or_default();
    let relation = equation.relation.map(relation_mathml).unwrap_or_default();
    let spoken = escape_markup(&equation_text(equation));
    format!("<math alttext=\"{spoken}\"><mrow>{left}{relation}{}</mrow></math>", side(&equation.right))
}

fn relation_mathml(relation: Relation) -> String {
    let sign = match relation {
        Relation::Equal => "=",
        Relation::NotEqual => "&#x2260;",
        Relation::Less => "&lt;",
        Relation::LessEqual => "&#x2264;",
        Relation::Greater => "&gt;",
        Relation::GreaterEqual => "&#x2265;",
        Relation::Identical => "&#x2261;",
        Relation::Defined => "&#x2254;",
    };
    format!("<mo form=\"infix\">{sign}</mo>")
}

fn display(equations: &[Equation], namer: &mut Namer) -> String {
    let mut spoken = Some(spoken(equations));
    let environment = |rows: Vec<Row>| {
        let rows: String = rows.iter().map(row).collect();
        let words = spoken.take().unwrap_or_else(|| "definitions of the letters above".to_string());
        format!(
            "{}<math display=\"block\" alttext=\"{words}\"><mtable displaystyle=\"true\">\n{rows}</mtable></math></div>\n",
            SCROLLED
        )
    };
    displays(equations, namer).into_iter().map(environment).collect::<Vec<_>>().join("<p>where</p>\n")
}

fn row(row: &Row) -> String {
    let left = row.left.as_ref().map(mathml).unwrap_or_default();
    let space = match row.indent {
        0 => String::new(),
        indent => format!("<mspace width=\"{indent}em\"/>"),
    };
    let relation = row.relation.map(relation_mathml).unwrap_or_default();
    let body = mathml(&row.body);
    format!(
        "<mtr><mtd class=\"left\"><mrow>{left}</mrow></mtd><mtd class=\"right\"><mrow>{space}{relation}{body}</mrow></mtd></mtr>\n"
    )
}

fn matrix(matrix: &Matrix, namer: &mut Namer) -> String {
    let Some((name, cells, _)) = matrix_cells(matrix) else {
        return display(&matrix.listed(), namer);
    };
    let cell = |node: &Node| format!("<mtd>{}</mtd>", mathml(node));
    let line = |row: &Vec<Node>| format!("<mtr>{}</mtr>\n", row.iter().map(cell).collect::<String>());
    let body: String = cells.iter().map(line).collect();
    format!(
        "{SCROLLED}<math display=\"block\" alttext=\"{}\"><mrow>{}<mo form=\"infix\">=</mo><mrow><mo form=\"prefix\">(</mo>\
         <mtable class=\"matrix\" displaystyle=\"true\">\n{body}</mtable><mo form=\"postfix\">)</mo></mrow></mrow></math></div>\n",
        escape_markup(&format!("the matrix {}", plain_expression(&Expression::Object(matrix.name.clone())))),
        mathml(&name)
    )
}

/// Longer formulas are not read out to their end.
const LONGEST_SPOKEN: usize = 500;

/// Equations as they are read out.
fn spoken(equations: &[Equation]) -> String {
    let words = equations.iter().map(equation_text).collect::<Vec<_>>().join("; ");
    match words.char_indices().nth(LONGEST_SPOKEN) {
        Some((at, _)) => escape_markup(&words[..at]) + " …",
        None => escape_markup(&words),
    }
}

/// A wide formula is scrolled, by keyboard too, in a box of its own.
const SCROLLED: &str = "<div class=\"display\" role=\"group\" aria-label=\"formula\" tabindex=\"0\">";

fn verdicts(lines: &[VerdictLine]) -> String {
    let line = |line: &VerdictLine| {
        let tone = match line.tone {
            Tone::Holds => "holds",
            Tone::Fails => "fails",
            Tone::Partly => "partly",
            Tone::Open => "open",
        };
        let (name, verdict) = (escape_markup(&line.name), escape_markup(&line.verdict));
        format!(
            "<tr><th scope=\"row\">{name}</th><td class=\"{tone}\">{verdict}</td><td>{}</td></tr>\n",
            running(&line.note)
        )
    };
    format!(
        "<table class=\"verdicts\" aria-label=\"verdicts\">\n{}</table>\n",
        lines.iter().map(line).collect::<String>()
    )
}

fn table(table: &Table) -> String {
    let head: String = table.columns.iter().map(|cell| format!("<th scope=\"col\">{}</th>", running(cell))).collect();
    let line = |row: &Vec<Vec<Inline>>| {
        let cells: String = row.iter().map(|cell| format!("<td>{}</td>", running(cell))).collect();
        format!("<tr>{cells}</tr>\n")
    };
    let body: String = table.rows.iter().map(line).collect();
    format!("<table>\n<thead><tr>{head}</tr></thead>\n<tbody>\n{body}</tbody>\n</table>\n")
}
