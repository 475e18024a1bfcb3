//! Formulas laid out: what stands where, before it is written in any markup.
//!
//! A [`Node`] is a piece of laid-out formula; a [`Piece`] is a node with what its neighbours have to know about it.
//! Widths are estimates in hundredths of an em of the style that a piece is set in; they decide where a display is
//! broken, never what it says.

use crate::algebra::formula::Function;
use crate::render::names::Part;

/// A laid-out formula.
#[derive(Clone, Debug, PartialEq)]
pub enum Node {
    /// Nodes side by side.
    Row(Vec<Node>),
    /// A letter, a number or a word.
    Part(Part),
    /// A name in the LaTeX that the author declared, known to be harmless.
    Declared(String),
    /// A sign or a distance.
    Sign(Sign),
    /// The name of a function.
    Function(Function),
    /// Something with scripts.
    Scripts {
        /// What stands on the line.
        base: Box<Node>,
        /// The subscript.
        below: Option<Box<Node>>,
        /// The superscript.
        above: Option<Box<Node>>,
    },
    /// A fraction with a bar.
    Fraction {
        /// The numerator.
        above: Box<Node>,
        /// The denominator.
        below: Box<Node>,
        /// Whether it is a small one even where there is room: a coefficient.
        small: bool,
    },
    /// A square root.
    Root(Box<Node>),
    /// An opening bracket.
    Open(Size),
    /// A closing bracket.
    Close(Size),
}

/// A sign or a distance within a formula.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Sign {
    /// + between terms.
    Plus,
    /// - between terms.
    Minus,
    /// + in a script.
    TightPlus,
    /// - in front, or in a script.
    TightMinus,
    /// + at the beginning of a line.
    LinePlus,
    /// - at the beginning of a line.
    LineMinus,
    /// A multiplication sign at the beginning of a line.
    LineTimes,
    /// Nothing to see between factors.
    Juxtaposed,
    /// A small distance between factors.
    Thin,
    /// A dot between factors.
    Dot,
    /// A slash.
    Slash,
    /// A comma between arguments.
    Comma,
    /// A comma between subscripts.
    TightComma,
    /// The d of a partial derivative.
    Partial,
    /// The sign of a sum.
    Sum,
    /// The sign of a product over an index.
    Product,
    /// `≠`, below a sum.
    Unequal,
    /// `∈`, below a sum.
    In,
    /// The mark of a transpose.
    Transpose,
}

/// The size of a bracket.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Size {
    /// As large as a letter.
    Normal,
    /// A little larger.
    Big,
    /// Larger.
    Bigger,
    /// As large as a fraction.
    Tall,
    /// As large as what it encloses, which must be on the same line.
    Fitting,
}

/// How much room a formula has.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Style {
    /// On a line of its own: fractions at full size.
    Display,
    /// Within a line of text or within a fraction.
    Text,
    /// In an exponent or a subscript: fractions with a slash, signs without blanks.
    Script,
}

/// How tightly a piece holds together.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum Level {
    /// A sum, or a minus in front.
    Sum,
    /// A fraction with a slash.
    Ratio,
    /// A product.
    Product,
    /// Something that needs brackets before a script is put on it.
    Scripted,
    /// A unit.
    Atom,
}

/// What stands at one end of a piece, as far as a neighbouring factor has to keep its distance.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Edge {
    /// Nothing special.
    Plain,
    /// A digit.
    Digit,
    /// The name of a function, or its argument.
    Function,
    /// A word.
    Word,
}

/// A laid-out formula with what its neighbours have to know.
#[derive(Clone, Debug)]
pub struct Piece {
    /// What is to be seen.
    pub node: Node,
    /// Its width.
    pub width: u32,
    /// How tightly it holds together.
    pub level: Level,
    /// 0 for what a bracket of normal size encloses, more for fractions.
    pub height: u8,
    /// How many brackets of growing size it holds within each other.
    pub brackets: u8,
    /// The width of a subscript at its end, over which a superscript may stand.
    pub overhang: u32,
    /// What it begins with.
    pub starts: Edge,
    /// What it ends with.
    pub ends: Edge,
}

/// The width of a minus in front.
pub const MINUS_WIDTH: u32 = 78;
/// The width of a thin space.
pub const THIN: u32 = 17;

impl Sign {
    /// The width of the sign with its blanks.
    pub fn width(self) -> u32 {
        match self {
            Sign::Plus | Sign::Minus | Sign::LinePlus | Sign::LineMinus | Sign::LineTimes => 122,
            Sign::TightPlus | Sign::TightMinus => MINUS_WIDTH,
            Sign::Juxtaposed => 0,
            Sign::Thin => THIN,
            Sign::Dot => 72,
            Sign::Slash => 50,
            Sign::Comma => 45,
            Sign::TightComma => 28,
            Sign::Partial => 58,
            Sign::Sum | Sign::Product => 161,
            Sign::Unequal | Sign::In => 100,
            Sign::Transpose => 78,
        }
    }
}

impl Size {
    /// The size for brackets around what is so high and holds so many brackets; `open` for brackets that may go over
    /// several lines.
    pub fn around(height: u8, brackets: u8, open: bool) -> Size {
        match (height, brackets, open) {
            (0, 0, false) => Size::Normal,
            (0, 0 | 1, _) => Size::Big,
            (0, 2, _) => Size::Bigger,
            (_, _, true) => Size::Tall,
            (_, _, false) => Size::Fitting,
        }
    }

    /// The width of one bracket.
    pub fn width(self) -> u32 {
        match self {
            Size::Normal => 39,
            Size::Big => 46,
            Size::Bigger => 60,
            Size::Tall | Size::Fitting => 75,
        }
    }
}

impl Node {
    /// A node with nothing to see.
    pub fn empty() -> Node {
        Node::Row(Vec::new())
    }

    /// A letter.
    pub fn letter(letter: char) -> Node {
        Node::Part(Part::Letter(letter))
    }

    /// Puts `next` behind this node.
    pub fn push(&mut self, next: Node) {
        match self {
            Node::Row(nodes) => nodes.push(next),
            other => *other = Node::Row(vec![std::mem::replace(other, Node::empty()), next]),
        }
    }

    /// Puts `first` in front of this node.
    pub fn put_before(&mut self, first: Node) {
        match self {
            Node::Row(nodes) => nodes.insert(0, first),
            other => *other = Node::Row(vec![first, std::mem::replace(other, Node::empty())]),
        }
    }

    /// Whether there is nothing to see.
    pub fn is_empty(&self) -> bool {
        matches!(self, Node::Row(nodes) if nodes.is_empty())
    }
}

impl Piece {
    /// A piece of normal height with nothing special at its ends.
    pub fn new(node: Node, width: u32, level: Level) -> Piece {
        let (starts, ends) = (Edge::Plain, Edge::Plain);
        Piece { node, width, level, height: 0, brackets: 0, overhang: 0, starts, ends }
    }

    /// A piece to append others to.
    pub fn empty(level: Level) -> Piece {
        Piece::new(Node::empty(), 0, level)
    }

    /// The same piece with these ends.
    pub fn edged(self, starts: Edge, ends: Edge) -> Piece {
        Piece { starts, ends, ..self }
    }

    /// The same piece, as tall and as bracketed as what it holds.
    pub fn around(self, inner: &Piece) -> Piece {
        Piece { height: inner.height, brackets: inner.brackets, ..self }
    }

    /// The piece in brackets that fit its height; brackets around brackets are larger.
    pub fn bracketed(self) -> Piece {
        let size = Size::around(self.height, self.brackets, false);
        let node = Node::Row(vec![Node::Open(size), self.node, Node::Close(size)]);
        let piece = Piece::new(node, self.width + 2 * size.width(), Level::Atom);
        Piece { height: self.height, brackets: self.brackets + 1, ..piece }
    }

    /// The piece, in brackets if it holds together less tightly than `least`.
    pub fn at_least(self, least: Level) -> Piece {
        match self.level < least {
            true => self.bracketed(),
            false => self,
        }
    }

    /// The piece with a minus in front.
    pub fn with_minus(self) -> Piece {
        let mut whole = Piece::empty(Level::Sum);
        whole.append(Sign::TightMinus, &self.at_least(Level::Ratio));
        Piece { starts: Edge::Plain, ..whole }
    }

    /// The width of the piece once it is set as a script.
    pub fn script_width(&self) -> u32 {
        self.width * 8 / 10 + 5
    }

    /// Puts `next` behind this piece, with a sign in between.
    pub fn append(&mut self, sign: Sign, next: &Piece) {
        if self.node.is_empty() {
            self.starts = next.starts;
        }
        if sign != Sign::Juxtaposed || !self.node.is_empty() {
            self.node.push(Node::Sign(sign));
        }
        self.node.push(next.node.clone());
        self.width += sign.width() + next.width;
        if sign == Sign::Juxtaposed && next.starts == Edge::Function {
            self.width += THIN;
        }
        self.height = self.height.max(next.height);
        self.brackets = self.brackets.max(next.brackets);
        self.ends = next.ends;
    }

    /// What stands between this factor and the next one.
    pub fn joint(&self, next: &Piece) -> Sign {
        match (self.ends, next.starts) {
            (_, Edge::Digit) => Sign::Dot,
            (_, Edge::Function) => Sign::Juxtaposed,
            (Edge::Function | Edge::Word, _) | (_, Edge::Word) => Sign::Thin,
            _ => Sign::Juxtaposed,
        }
    }
}
