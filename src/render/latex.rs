//! Documents as LaTeX: a fragment to be read with `\input`, or a whole document that compiles by itself.
//!
//! Only amsmath is asked for; everything is ASCII; no environment holds a blank line.

use crate::render::display::COLUMN;
use crate::render::document::{Block, Document, Equation, Inline, Table, VerdictLine};
use crate::render::expression::Expression;
use crate::render::formula_latex::tex;
use crate::render::latex_display::{Pen, display, matrix, relation_latex};
use crate::render::latex_escape::escape;
use crate::render::latex_setting::Setting;
use crate::render::layout::Style;
use crate::render::typeset::typeset;

/// Formulas in running text that are wider than this, in hundredths of an em, are displayed.
const WIDEST_INLINE: u32 = 2000;
/// The same for formulas that cannot be broken at a sign.
const WIDEST_UNBROKEN: u32 = 1000;

/// The document as a fragment, with `header` as comment lines at the top. It needs amsmath.
pub fn fragment(document: &Document, header: &[String], setting: &Setting) -> String {
    let mut out = comments(header);
    if let Some(title) = &document.title {
        out.push_str(&comments(std::slice::from_ref(title)));
    }
    out.push_str("\\begingroup\\emergencystretch=3em\\relax\n");
    out.push_str(&body(document, ["subsection*", "subsubsection*", "paragraph"], setting));
    out.push_str("\\par\\endgroup\n");
    out
}

/// The document as a LaTeX document, with `header` as comment lines at the top.
pub fn whole(document: &Document, header: &[String], setting: &Setting) -> String {
    let mut out = comments(header);
    out.push_str("\\documentclass{article}\n\\usepackage{amsmath}\n\\usepackage{amssymb}\n");
    if let Some(name) = &setting.theorems {
        let title: String = name.chars().take(1).flat_map(char::to_uppercase).chain(name.chars().skip(1)).collect();
        out.push_str(&format!("\\usepackage{{amsthm}}\n\\newtheorem{{{name}}}{{{title}}}\n"));
    }
    out.push_str("\\allowdisplaybreaks\n\\setlength{\\emergencystretch}{3em}\n");
    if let Some(title) = &document.title {
        out.push_str(&format!("\\title{{{}}}\n\\author{{}}\n\\date{{}}\n", escape(title)));
    }
    out.push_str("\\begin{document}\n");
    if document.title.is_some() {
        out.push_str("\\maketitle\n");
    }
    out.push_str(&body(document, ["section*", "subsection*", "paragraph"], setting));
    out.push_str("\\end{document}\n");
    out
}

fn comments(lines: &[String]) -> String {
    let clean = |line: &String| {
        let ascii = line.chars().map(|each| if each.is_ascii() && !each.is_control() { each } else { '?' });
        format!("% {}\n", ascii.collect::<String>().trim())
    };
    lines.iter().map(clean).collect()
}

fn body(document: &Document, headings: [&str; 3], setting: &Setting) -> String {
    let document = setting.applied(document);
    let mut pen = Pen::new(&document, setting);
    let mut out = String::new();
    for section in sections(&document.blocks) {
        let theorem = setting.theorems.as_ref().and_then(|name| Some((name, proven(section)?)));
        if !out.is_empty() {
            out.push('\n');
        }
        match theorem {
            None => out.push_str(&written(section, headings, &mut pen)),
            Some((name, (heading, said))) => {
                let heading = running(heading, false, &mut pen);
                out.push_str(&format!("\\begin{{{name}}}[{heading}]\n{}\n\\end{{{name}}}\n", escape(&said)));
                let working = written(&section[1..], headings, &mut pen);
                out.push_str(&format!("\\begin{{proof}}\n{working}\\end{{proof}}\n"));
            }
        }
    }
    setting.named(out)
}

fn written(blocks: &[Block], headings: [&str; 3], pen: &mut Pen) -> String {
    let mut out = String::new();
    for (position, each) in blocks.iter().enumerate() {
        let tex = block(each, headings, pen);
        if position > 0 && begins_paragraph(each) {
            out.push('\n');
        } else if position > 0 && both_displays(&blocks[position - 1], each) {
            // two displays have an empty line between them
            out.push_str("\\vspace{-\\baselineskip}\n");
        }
        out.push_str(&tex);
    }
    out
}

fn both_displays(before: &Block, after: &Block) -> bool {
    let is_display = |block: &Block| matches!(block, Block::Display(equations) if !equations.is_empty());
    is_display(before) && is_display(after)
}

/// The blocks from heading to heading.
fn sections(blocks: &[Block]) -> Vec<&[Block]> {
    let begins = |at: &usize| *at == 0 || matches!(blocks[*at], Block::Heading { level: 1, .. });
    let mut starts: Vec<usize> = (0..blocks.len()).filter(begins).collect();
    starts.push(blocks.len());
    starts.windows(2).map(|pair| &blocks[pair[0]..pair[1]]).collect()
}

/// The heading of a section that ends with "Hence …", and what follows there.
fn proven(section: &[Block]) -> Option<(&[Inline], String)> {
    let (Block::Heading { level: 1, text: heading }, Block::Paragraph(last)) = (section.first()?, section.last()?)
    else {
        return None;
    };
    let [Inline::Text(words)] = last.as_slice() else { return None };
    let said = words.strip_prefix("Hence ").filter(|_| section.len() > 2)?;
    let first = said.chars().next()?.to_uppercase();
    Some((heading, first.chain(said.chars().skip(1)).collect()))
}

/// A display belongs to the paragraph in front of it; everything else begins a paragraph.
fn begins_paragraph(block: &Block) -> bool {
    !matches!(block, Block::Display(_) | Block::Where(_) | Block::Matrix(_))
}

fn block(block: &Block, headings: [&str; 3], pen: &mut Pen) -> String {
    match block {
        Block::Heading { level, text } => {
            let command = headings[usize::from(*level).clamp(1, 3) - 1];
            format!("\\{command}{{{}}}\n", running(text, false, pen))
        }
        Block::Paragraph(text) => format!("{}\n", running(text, true, pen)),
        Block::Display(equations) if equations.is_empty() => String::new(),
        Block::Display(equations) => display(equations, "", pen),
        Block::Where(equations) => format!("where\n{}", display(equations, "", pen)),
        Block::Verdicts(lines) => verdicts(lines, pen),
        Block::Table(each) => table(each, pen),
        Block::Matrix(each) => matrix(each, pen),
        Block::List { ordered, items } => {
            let items: Vec<String> = items.iter().map(|item| running(item, true, pen)).collect();
            list(if *ordered { "enumerate" } else { "itemize" }, &items)
        }
        Block::Note(text) => format!("\\emph{{Note.}} {}\n", running(text, true, pen)),
    }
}

/// Running text; a wide formula becomes a display where that `may_display`, and takes the punctuation behind it along.
fn running(inlines: &[Inline], may_display: bool, pen: &mut Pen) -> String {
    let mut out = String::new();
    let mut skip = 0;
    for (position, inline) in inlines.iter().enumerate() {
        match inline {
            Inline::Text(words) => {
                let rest = escape(&words[skip..]);
                out.push_str(if out.ends_with('\n') { rest.trim_start() } else { &rest });
            }
            Inline::Emphasis(words) => out.push_str(&format!("\\emph{{{}}}", escape(words))),
            Inline::Code(words) => out.push_str(&format!("\\texttt{{{}}}", escape(words))),
            Inline::Math(equation) => {
                let (tex, width) = inline_math(equation);
                let widest = if breaks(equation) { WIDEST_INLINE } else { WIDEST_UNBROKEN };
                if !may_display || width <= widest {
                    out.push_str(&format!("${tex}$"));
                    skip = 0;
                    continue;
                }
                let mark = punctuation(inlines.get(position + 1));
                out.truncate(out.trim_end().len());
                if !out.is_empty() {
                    out.push('\n');
                }
                out.push_str(&display(std::slice::from_ref(&**equation), mark, pen));
                skip = mark.len();
                continue;
            }
        }
        skip = 0;
    }
    out.trim_end().to_string()
}

/// The comma or full stop that the text goes on with.
fn punctuation(next: Option<&Inline>) -> &str {
    match next {
        Some(Inline::Text(words)) if words.starts_with([',', '.', ';']) => &words[..1],
        _ => "",
    }
}

/// Whether a line may end inside the formula: behind its relation, or at a sign of a sum.
fn breaks(equation: &Equation) -> bool {
    let narrow = |e: &Expression| matches!(e, Expression::Sum(_)) || typeset(e, Style::Text).width <= WIDEST_UNBROKEN;
    narrow(&equation.right) && equation.left.as_ref().is_none_or(narrow)
}

fn inline_math(equation: &Equation) -> (String, u32) {
    let right = typeset(&equation.right, Style::Text);
    let left = equation.left.as_ref().map(|left| typeset(left, Style::Text));
    let mut parts: Vec<String> = left.iter().map(|left| tex(&left.node)).collect();
    parts.extend(equation.relation.map(|relation| relation_latex(relation).to_string()));
    parts.push(tex(&right.node));
    (parts.join(" "), right.width + left.map_or(0, |left| left.width) + 160)
}

fn list(environment: &str, items: &[String]) -> String {
    let lines: Vec<String> = items.iter().map(|item| format!("  \\item {item}\n")).collect();
    match items.is_empty() {
        true => String::new(),
        false => format!("\\begin{{{environment}}}\n{}\\end{{{environment}}}\n", lines.concat()),
    }
}

fn verdicts(lines: &[VerdictLine], pen: &mut Pen) -> String {
    let mut items = Vec::new();
    for line in lines {
        let note = running(&line.note, true, pen);
        let joint = if note.is_empty() { "." } else { "; " };
        items.push(format!("{}: \\emph{{{}}}{joint}{note}", escape(&line.name), escape(&line.verdict)));
    }
    list("itemize", &items)
}

fn table(table: &Table, pen: &mut Pen) -> String {
    let columns = table.columns.len();
    let rows = || std::iter::once(&table.columns).chain(&table.rows);
    let widest = |column: usize| rows().filter_map(|row| row.get(column)).map(|cell| cell_width(cell)).max();
    let width: u32 = (0..columns).map(|column| widest(column).unwrap_or(0) + 120).sum();
    if width > COLUMN {
        return table_as_list(table, pen);
    }
    let mut line = |row: &Vec<Vec<Inline>>| {
        let cells: Vec<String> = row.iter().map(|cell| running(cell, false, pen)).collect();
        format!("  {} \\\\\n", cells.join(" & "))
    };
    let head = line(&table.columns);
    let body: String = table.rows.iter().map(line).collect();
    let shape = "l".repeat(columns);
    format!(
        "\\begin{{center}}\n\\begin{{tabular}}{{{shape}}}\n  \\hline\n{head}  \\hline\n{body}  \\hline\n\\end{{tabular}}\n\\end{{center}}\n"
    )
}

/// A table that is too wide, as one item a row.
fn table_as_list(table: &Table, pen: &mut Pen) -> String {
    let heads: Vec<String> = table.columns.iter().map(|head| running(head, false, pen)).collect();
    let mut items = Vec::new();
    for row in &table.rows {
        let cells: Vec<String> = row.iter().map(|cell| running(cell, true, pen)).collect();
        let named: Vec<String> = heads.iter().zip(&cells).map(|(head, cell)| format!("{head}: {cell}")).collect();
        items.push(named.join("; "));
    }
    list("itemize", &items)
}

fn cell_width(cell: &[Inline]) -> u32 {
    let width = |inline: &Inline| match inline {
        Inline::Text(words) | Inline::Emphasis(words) | Inline::Code(words) => 48 * words.chars().count() as u32,
        Inline::Math(equation) => inline_math(equation).1,
    };
    cell.iter().map(width).sum()
}
