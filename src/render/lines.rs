//! Long formulas: where they may be broken, and the best way to do it.
//!
//! A formula that is wider than its room is opened at its outermost sums, and only where a term is too wide by itself
//! inside that term's brackets. Brackets that are opened have a fixed size, since those that fit themselves to what they
//! enclose cannot cross lines.

use crate::algebra::formula::Function;
use crate::render::expression::Expression;
use crate::render::layout::{Level, MINUS_WIDTH, Node, Piece, Sign, Size, Style, THIN};
use crate::render::typeset::{factor_piece, function_width, raise, signed, typeset};
use num_traits::One;

/// How a chunk hangs together with the one before it.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
enum Join {
    /// It begins the formula.
    Start,
    /// A term of a sum; a line may begin here.
    Plus,
    /// A term of a sum with a minus; a line may begin here.
    Minus,
    /// A factor of a product; a line may begin here, if it must.
    Times(Sign),
}

/// A part of a formula that stays on one line.
#[derive(Clone, Debug)]
struct Chunk {
    node: Node,
    width: u32,
    height: u8,
    brackets: u8,
    join: Join,
    depth: u32,
}

/// A line of a display after the first, or the first.
pub struct Line {
    /// What is to be seen, with the sign that a continued line begins with.
    pub node: Node,
    /// How many brackets are open where the line begins.
    pub depth: u32,
}

/// Sets an expression on as many lines as it needs: the first has `first` hundredths of an em of room, the others
/// `rest`, less one em for each open bracket.
pub fn lines(expression: &Expression, first: u32, rest: u32) -> Vec<Line> {
    let whole = typeset(expression, Style::Display);
    if whole.width <= first {
        return vec![Line { node: whole.node, depth: 0 }];
    }
    let mut chunks = Vec::new();
    flow(expression, rest, 0, &mut chunks);
    fill(&chunks, first, rest)
}

/// Takes an expression apart into chunks no wider than `room`, as far as it can be opened.
fn flow(expression: &Expression, room: u32, depth: u32, out: &mut Vec<Chunk>) {
    let piece = typeset(expression, Style::Display);
    if let Expression::Sum(terms) = expression {
        return flow_sum(terms, room, depth, out);
    }
    if piece.width <= room {
        return out.push(chunk(piece, depth));
    }
    match expression {
        Expression::Negative(inner) => {
            let start = out.len();
            flow_factor(inner, None, room, depth, out);
            put_before(&mut out[start..], Node::Sign(Sign::TightMinus), MINUS_WIDTH);
        }
        Expression::Product(factors) => flow_factors(factors, None, room, depth, out),
        Expression::Quotient(above, below) => flow_quotient(above, below, room, depth, out),
        _ => flow_factor(expression, None, room, depth, out),
    }
}

fn chunk(piece: Piece, depth: u32) -> Chunk {
    let Piece { node, width, height, brackets, .. } = piece;
    Chunk { node, width, height, brackets, join: Join::Start, depth }
}

fn flow_sum(terms: &[Expression], room: u32, depth: u32, out: &mut Vec<Chunk>) {
    for (position, term) in terms.iter().enumerate() {
        let (minus, positive) = signed(term);
        let start = out.len();
        let piece = typeset(&positive, Style::Display).at_least(Level::Ratio);
        let left = room.saturating_sub(Sign::Plus.width());
        match positive {
            _ if piece.width <= left => out.push(chunk(piece, depth)),
            Expression::Sum(_) => flow_factor(&positive, None, left, depth, out),
            _ => flow(&positive, left, depth, out),
        }
        match (position, minus) {
            (0, true) => put_before(&mut out[start..], Node::Sign(Sign::TightMinus), MINUS_WIDTH),
            (0, false) => {}
            (_, true) => join_at(out, start, Join::Minus),
            (_, false) => join_at(out, start, Join::Plus),
        }
    }
}

fn join_at(chunks: &mut [Chunk], position: usize, join: Join) {
    if let Some(chunk) = chunks.get_mut(position) {
        chunk.join = join;
    }
}

fn put_before(chunks: &mut [Chunk], node: Node, width: u32) {
    if let Some(first) = chunks.first_mut() {
        first.node.put_before(node);
        first.width += width;
    }
}

fn put_behind(chunks: &mut [Chunk], node: Node, width: u32) {
    if let Some(last) = chunks.last_mut() {
        last.node.push(node);
        last.width += width;
    }
}

/// Factors, behind the factor `before` if there is one: those that are wide and can be opened are, the others stand side
/// by side.
fn flow_factors(factors: &[Expression], before: Option<Piece>, room: u32, depth: u32, out: &mut Vec<Chunk>) {
    let mut before = before;
    for (position, factor) in factors.iter().enumerate() {
        let next = factors.get(position + 1);
        let piece = factor_piece(factor, next, Style::Display);
        let joint = before.as_ref().map(|before| before.joint(&piece));
        let start = out.len();
        match piece.width > room / 2 && can_open(factor) {
            true => flow_factor(factor, next, room, depth, out),
            false => out.push(chunk(piece.clone(), depth)),
        }
        if let Some(between) = joint {
            join_at(out, start, Join::Times(between));
        }
        before = Some(piece);
    }
}

/// A fraction that is too wide loses factors of its numerator: those that can be opened, and the last ones where there
/// are many.
fn flow_quotient(above: &Expression, below: &Expression, room: u32, depth: u32, out: &mut Vec<Chunk>) {
    let factors = match above {
        Expression::Product(factors) => factors.clone(),
        other => vec![other.clone()],
    };
    let (mut kept, mut moved) = (Vec::new(), Vec::new());
    let mut left = room * 2 / 3;
    for factor in factors {
        let width = typeset(&factor, Style::Text).width;
        match width <= left && !(can_open(&factor) && width > room / 3) {
            true => {
                left -= width;
                kept.push(factor);
            }
            false => moved.push(factor),
        }
    }
    if moved.is_empty() {
        let whole = Expression::Quotient(Box::new(above.clone()), Box::new(below.clone()));
        return out.push(chunk(typeset(&whole, Style::Display), depth));
    }
    let numerator = match kept.len() {
        0 => Expression::Number(One::one()),
        1 => kept.swap_remove(0),
        _ => Expression::Product(kept),
    };
    let fraction = Expression::Quotient(Box::new(numerator), Box::new(below.clone()));
    let fraction = typeset(&fraction, Style::Display);
    out.push(chunk(fraction.clone(), depth));
    flow_factors(&moved, Some(fraction), room, depth, out);
}

/// Whether an expression can go over several lines when it stands as a factor.
fn can_open(expression: &Expression) -> bool {
    match expression {
        Expression::Sum(_) => true,
        Expression::Power(base, _) => can_open(base),
        Expression::Call(Function::Sqrt, _) => false,
        Expression::Call(_, inner) | Expression::Negative(inner) => can_open(inner),
        Expression::Product(factors) => factors.iter().any(can_open),
        Expression::Quotient(above, _) => can_open(above),
        _ => false,
    }
}

/// A factor that is opened: its brackets, what stands before and behind them, and what they enclose.
fn flow_factor(factor: &Expression, next: Option<&Expression>, room: u32, depth: u32, out: &mut Vec<Chunk>) {
    let start = out.len();
    match factor {
        Expression::Sum(terms) => {
            flow_sum(terms, room.saturating_sub(100), depth + 1, out);
            enclose(&mut out[start..], depth);
        }
        Expression::Power(base, exponent) if can_open(base) => {
            let script = raise(Piece::empty(Level::Atom), exponent);
            flow(base, room.saturating_sub(150 + script.width), depth + 1, out);
            enclose(&mut out[start..], depth);
            put_script(&mut out[start..], script);
        }
        Expression::Call(function, argument) if *function != Function::Sqrt && can_open(argument) => {
            flow(argument, room.saturating_sub(300), depth + 1, out);
            enclose(&mut out[start..], depth);
            put_before(&mut out[start..], Node::Function(*function), function_width(*function));
        }
        Expression::Product(factors) => flow_factors(factors, None, room, depth, out),
        Expression::Quotient(above, below) if can_open(above) => flow_quotient(above, below, room, depth, out),
        Expression::Negative(_) if can_open(factor) => {
            flow(factor, room.saturating_sub(100), depth + 1, out);
            enclose(&mut out[start..], depth);
        }
        _ => out.push(chunk(factor_piece(factor, next, Style::Display), depth)),
    }
}

/// Puts an exponent on the closing bracket.
fn put_script(chunks: &mut [Chunk], script: Piece) {
    let Node::Scripts { above, .. } = script.node else { return };
    if let Some(last) = chunks.last_mut()
        && let Node::Row(nodes) = &mut last.node
        && let Some(bracket) = nodes.pop()
    {
        nodes.push(Node::Scripts { base: Box::new(bracket), below: None, above });
        last.width += script.width;
    }
}

/// Puts brackets of a size that fits around chunks; the first one stands at `depth`, outside.
fn enclose(chunks: &mut [Chunk], depth: u32) {
    let height = chunks.iter().map(|chunk| chunk.height).max().unwrap_or(0);
    let brackets = chunks.iter().map(|chunk| chunk.brackets).max().unwrap_or(0);
    let size = Size::around(height, brackets, true);
    put_before(chunks, Node::Open(size), size.width());
    put_behind(chunks, Node::Close(size), size.width());
    chunks.iter_mut().for_each(|chunk| chunk.brackets = brackets + 1);
    if let Some(first) = chunks.first_mut() {
        first.depth = depth;
    }
}

impl Chunk {
    /// What the chunk costs as the beginning of a line: outer places are better than inner ones, sums than products.
    fn cost_of_break(&self) -> u64 {
        let kind = if matches!(self.join, Join::Times(_)) { 60 } else { 20 };
        kind + 25 * u64::from(self.depth)
    }

    fn inside_line(&self) -> Sign {
        match self.join {
            Join::Start => Sign::Juxtaposed,
            Join::Plus => Sign::Plus,
            Join::Minus => Sign::Minus,
            Join::Times(between) => between,
        }
    }

    fn at_line_start(&self) -> Option<Sign> {
        match self.join {
            Join::Start => None,
            Join::Plus => Some(Sign::LinePlus),
            Join::Minus => Some(Sign::LineMinus),
            Join::Times(_) => Some(Sign::LineTimes),
        }
    }
}

/// A line never holds more chunks than this.
const LONGEST_LINE: usize = 200;

/// The cheapest way to fill lines; of equally cheap ones, that with the fuller first lines.
fn fill(chunks: &[Chunk], first: u32, rest: u32) -> Vec<Line> {
    let count = chunks.len();
    let mut cost = vec![u64::MAX; count + 1];
    let mut next = vec![count; count + 1];
    cost[count] = 0;
    for start in (0..count).rev() {
        let chunk = &chunks[start];
        let room = if start == 0 { first } else { rest.saturating_sub(100 * chunk.depth) };
        let own = if start == 0 { 0 } else { chunk.cost_of_break() };
        let mut width = chunk.at_line_start().map_or(0, Sign::width) + chunk.width;
        for end in start + 1..=count.min(start + LONGEST_LINE) {
            let excess = u64::from(width.saturating_sub(room));
            let total = cost[end].saturating_add(own + 1000 * u64::from(excess > 0) + 10 * excess);
            if total <= cost[start] {
                cost[start] = total;
                next[start] = end;
            }
            if excess > 0 || end == count {
                break;
            }
            width += chunks[end].inside_line().width() + THIN + chunks[end].width;
        }
    }
    let mut lines = Vec::new();
    let mut start = 0;
    while start < count {
        lines.push(compose(&chunks[start..next[start]]));
        start = next[start];
    }
    lines
}

fn compose(chunks: &[Chunk]) -> Line {
    let mut nodes = Vec::new();
    for (position, chunk) in chunks.iter().enumerate() {
        let sign = if position == 0 { chunk.at_line_start() } else { Some(chunk.inside_line()) };
        nodes.extend(sign.map(Node::Sign));
        nodes.push(chunk.node.clone());
    }
    Line { node: Node::Row(nodes), depth: chunks.first().map_or(0, |chunk| chunk.depth) }
}
