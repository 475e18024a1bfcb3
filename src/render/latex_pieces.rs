//! Pieces of LaTeX with what their neighbours have to know about them.
//!
//! Widths are estimates in hundredths of an em of the style that a piece is set in; they decide where a display is
//! broken, never what it says.

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

/// A piece of LaTeX.
#[derive(Clone, Debug)]
pub struct Piece {
    /// The LaTeX.
    pub tex: String,
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

/// The width of + or - with its blanks.
pub const SIGN_WIDTH: u32 = 122;
/// The width of a minus in front.
pub const MINUS_WIDTH: u32 = 78;
/// The width of a thin space.
pub const THIN: u32 = 17;

impl Piece {
    /// A piece of normal height with nothing special at its ends.
    pub fn new(tex: impl Into<String>, width: u32, level: Level) -> Piece {
        let (starts, ends) = (Edge::Plain, Edge::Plain);
        Piece { tex: tex.into(), width, level, height: 0, brackets: 0, overhang: 0, starts, ends }
    }

    /// The same piece with these ends.
    pub fn edged(self, starts: Edge, ends: Edge) -> Piece {
        Piece { starts, ends, ..self }
    }

    /// The same piece with this height.
    pub fn tall(self, height: u8) -> Piece {
        Piece { height, ..self }
    }

    /// The same piece, as tall and as bracketed as what it holds.
    pub fn around(self, inner: &Piece) -> Piece {
        Piece { height: inner.height, brackets: inner.brackets, ..self }
    }

    /// The piece in brackets that fit its height; brackets around brackets are larger.
    pub fn bracketed(self) -> Piece {
        let (open, close, extra) = match (self.height, self.brackets) {
            (0, 0) => ("(", ")", 78),
            (0, 1) => ("\\bigl(", "\\bigr)", 92),
            (0, 2) => ("\\Bigl(", "\\Bigr)", 120),
            _ => ("\\left(", "\\right)", 150),
        };
        let piece = Piece::new(format!("{open}{}{close}", self.tex), self.width + extra, Level::Atom);
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
        let inner = self.at_least(Level::Ratio);
        let width = inner.width + MINUS_WIDTH;
        Piece { tex: format!("-{}", inner.tex), width, level: Level::Sum, overhang: 0, starts: Edge::Plain, ..inner }
    }

    /// The width of the piece once it is set as a script.
    pub fn script_width(&self) -> u32 {
        self.width * 8 / 10 + 5
    }

    /// Puts `next` behind this piece, with `between` (of the given width) in between.
    pub fn append(&mut self, between: (&str, u32), next: &Piece) {
        if self.tex.is_empty() {
            self.starts = next.starts;
        }
        self.tex.push_str(between.0);
        if ends_in_command(&self.tex) {
            self.tex.push_str(&apart(&next.tex));
        } else {
            self.tex.push_str(&next.tex);
        }
        self.width += between.1 + next.width;
        self.height = self.height.max(next.height);
        self.brackets = self.brackets.max(next.brackets);
        self.ends = next.ends;
    }

    /// What stands between this factor and the next one, and its width.
    pub fn joint(&self, next: &Piece) -> (&'static str, u32) {
        match (self.ends, next.starts) {
            (_, Edge::Digit) => (" \\cdot ", 72),
            (_, Edge::Function) => (" ", THIN),
            (Edge::Function, _) | (Edge::Word, Edge::Word) => (" \\, ", THIN),
            _ => (" ", 0),
        }
    }
}

/// The LaTeX with a blank in front if it begins with a letter, so that it does not run into what stands before it.
pub fn apart(tex: &str) -> String {
    match tex.starts_with(|each: char| each.is_ascii_alphanumeric()) {
        true => format!(" {tex}"),
        false => tex.to_string(),
    }
}

/// Whether a letter put after `tex` would be taken for part of a command's name.
pub fn ends_in_command(tex: &str) -> bool {
    tex.rfind('\\').is_some_and(|slash| {
        let name = &tex[slash + 1..];
        !name.is_empty() && name.bytes().all(|each| each.is_ascii_alphabetic())
    })
}
