//! The syntax tree: what an author wrote, before anyone asks whether it makes sense.
//!
//! Names are compared as they stand here: in normal form NFC with Greek letters spelled out, so that `σ` and `sigma`
//! are one name. Every part that a later message may point at carries its [`Span`]. Sums and products are n-ary, so
//! that the depth of a tree is bounded by the nesting of its brackets and never by its length.

use std::fmt;

use num_bigint::BigInt;

/// The exact rational number that a decimal or an integer of the file denotes.
pub type Rational = num_rational::Ratio<BigInt>;

/// A stretch of the source: byte offsets, the end not included.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub struct Span {
    /// Offset of the first byte.
    pub start: usize,
    /// Offset behind the last byte.
    pub end: usize,
}

impl Span {
    /// The stretch from `start` up to `end`.
    pub fn new(start: usize, end: usize) -> Span {
        Span { start, end }
    }

    /// The smallest stretch that holds both.
    pub fn join(self, other: Span) -> Span {
        Span { start: self.start.min(other.start), end: self.end.max(other.end) }
    }

    /// Whether the two have a place in common.
    pub fn meets(self, other: Span) -> bool {
        self.start < other.end && other.start < self.end
    }
}

/// A name, where it stands: `p_b`, `σ` (kept as `sigma`).
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Name {
    /// The name in normal form, Greek letters spelled out.
    pub text: String,
    /// Where it is written.
    pub span: Span,
}

/// How tightly a formula holds together, by its outermost operator.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum Level {
    /// `a + b`
    Sum,
    /// `-a`
    Negative,
    /// `a*b`, `a/b`
    Product,
    /// `a^b`
    Power,
    /// A name, a number, a call, or what stands in brackets.
    Atom,
}

/// What stands between square brackets: a good by its number, or a name (of a good, or of a free or bound index).
#[derive(Clone, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum Index {
    /// `p[1]`
    Number(u32),
    /// `p[bread]`, `a[i]`
    Name(String),
}

impl fmt::Display for Index {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Index::Number(number) => write!(f, "{number}"),
            Index::Name(name) => f.write_str(name),
        }
    }
}

/// A name in a formula, with the indices behind it: `p_b`, `g[i,j]`.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Reference {
    /// The name.
    pub name: Name,
    /// The indices, none for a plain name.
    pub indices: Vec<(Index, Span)>,
    /// The whole of it.
    pub span: Span,
}

/// A formula, with the stretch that it was read from.
#[derive(Clone, Debug, PartialEq)]
pub struct Expr {
    /// What it is.
    pub kind: ExprKind,
    /// Where it is written; brackets around it are not part of it.
    pub span: Span,
}

/// The kinds of formula.
#[derive(Clone, Debug, PartialEq)]
pub enum ExprKind {
    /// A number, exact: `0.1` is 1/10. Never negative.
    Number(Rational),
    /// The constant `pi`.
    Pi,
    /// A name, with or without indices.
    Reference(Reference),
    /// `-a`
    Negative(Box<Expr>),
    /// `a + b - c`: at least two terms, a subtracted one as [`ExprKind::Negative`].
    Sum(Vec<Expr>),
    /// `a * b / c`: at least two factors.
    Product(Vec<Factor>),
    /// `base ^ exponent`
    Power(Box<Expr>, Box<Expr>),
    /// `ln(a)`
    Call(Function, Box<Expr>),
    /// `sum over j of (…)`, `product over j of (…)`
    Over(Box<Over>),
}

/// One factor of a product.
#[derive(Clone, Debug, PartialEq)]
pub struct Factor {
    /// The formula multiplied by.
    pub expr: Expr,
    /// Whether it stands behind a `/`.
    pub inverted: bool,
}

/// The functions of the language; `log` is read as [`Function::Ln`].
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum Function {
    /// Natural logarithm.
    Ln,
    /// Exponential function.
    Exp,
    /// Square root.
    Sqrt,
    /// Exponential integral.
    Ei,
    /// Error function.
    Erf,
    /// Imaginary error function.
    Erfi,
    /// Lambert W, principal branch.
    LambertW,
}

impl Function {
    /// The words that a file may use, with what they mean.
    pub const WORDS: [(&'static str, Function); 8] = [
        ("ln", Function::Ln),
        ("log", Function::Ln),
        ("exp", Function::Exp),
        ("sqrt", Function::Sqrt),
        ("Ei", Function::Ei),
        ("erf", Function::Erf),
        ("erfi", Function::Erfi),
        ("lambertw", Function::LambertW),
    ];

    /// The function that a word of the language stands for.
    pub fn from_word(word: &str) -> Option<Function> {
        Self::WORDS.iter().find(|(known, _)| *known == word).map(|(_, function)| *function)
    }

    /// The word that the language writes for it.
    pub fn word(self) -> &'static str {
        match self {
            Function::Ln => "ln",
            Function::Exp => "exp",
            Function::Sqrt => "sqrt",
            Function::Ei => "Ei",
            Function::Erf => "erf",
            Function::Erfi => "erfi",
            Function::LambertW => "lambertw",
        }
    }
}

/// A sum or a product over goods: `sum over j != i of (…)`, `sum over k, l of (…)`, `product over k in food of (…)`.
#[derive(Clone, Debug, PartialEq)]
pub struct Over {
    /// A product rather than a sum.
    pub product: bool,
    /// The bound indices, in the order written; at least one.
    pub binders: Vec<Name>,
    /// The good left out; only where there is one binder.
    pub except: Option<(Index, Span)>,
    /// The group summed over; all goods where absent.
    pub group: Option<Name>,
    /// What is summed.
    pub body: Expr,
}

/// The signs between the sides of a relation.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum Comparison {
    /// `=`
    Equal,
    /// `!=`
    NotEqual,
    /// `<`
    Less,
    /// `<=`
    LessEqual,
    /// `>`
    Greater,
    /// `>=`
    GreaterEqual,
}

impl Comparison {
    /// The sign as the language writes it.
    pub fn sign(self) -> &'static str {
        match self {
            Comparison::Equal => "=",
            Comparison::NotEqual => "!=",
            Comparison::Less => "<",
            Comparison::LessEqual => "<=",
            Comparison::Greater => ">",
            Comparison::GreaterEqual => ">=",
        }
    }
}

/// `a = b`, or a chain such as `0 < a < 1`.
#[derive(Clone, Debug, PartialEq)]
pub struct Relation {
    /// The leftmost side.
    pub first: Expr,
    /// Each further side with the sign before it; at least one.
    pub rest: Vec<(Comparison, Expr)>,
    /// The whole of it.
    pub span: Span,
}

/// A name as it is declared: `m`, `p[i]`, `g[i,j]`, `s as \sigma`.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Declared {
    /// The name.
    pub name: Name,
    /// The index names behind it, none for a plain name.
    pub indices: Vec<Name>,
    /// The LaTeX form the author asks for: balanced, and of harmless commands only.
    pub latex: Option<String>,
    /// The whole of it.
    pub span: Span,
}

/// The goods of a model.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum Goods {
    /// `goods bread, fish`
    Named(Vec<Name>),
    /// `goods 1..last`
    Numbered {
        /// The number of the last good, at least 1.
        last: u32,
        /// Where the range is written.
        span: Span,
    },
}

/// In which form the demand for a good is written.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum Form {
    /// `demand`: the quantity x.
    Demand,
    /// `share`: the budget share p x / m.
    Share,
    /// `outlay`: the spending p x.
    Outlay,
    /// `log demand`: ln x.
    LogDemand,
}

/// The good, or the goods, that a statement defines.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum Target {
    /// `demand bread`
    Good(Name),
    /// `demand[1]`, `demand[bread]`, `demand[i]`; whether a name is a good or a free index, the goods decide.
    Indexed(Index, Span),
}

/// `demand bread = …`
#[derive(Clone, Debug, PartialEq)]
pub struct Equation {
    /// The form of the left-hand side.
    pub form: Form,
    /// The good or goods.
    pub target: Target,
    /// The right-hand side.
    pub value: Expr,
}

/// How an incomplete system treats the goods outside it.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum Others {
    /// `others q, r`: their prices, or price indices.
    Prices(Vec<Declared>),
    /// `others deflated`: prices and income are already divided by their price index.
    Deflated,
}

/// A function that stands for the preferences.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum Preferences {
    /// U(x).
    Utility,
    /// v(p, m).
    IndirectUtility,
    /// e(p, u).
    Expenditure,
}

/// What a demand responds to.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum Mover {
    /// `income`, a price, or a good (for its price), by name.
    Named(Reference),
    /// A good by its number, for its price.
    Number(u32, Span),
}

/// A function of the theory, on the left of a claim.
#[derive(Clone, Debug, PartialEq)]
pub enum Claimed {
    /// `claim expenditure`
    Preferences(Preferences),
    /// `claim demand bread`, `claim share[i]`
    Demand(Form, Target),
    /// `claim hicksian bread`
    Hicksian(Target),
    /// `claim inverse bread`
    Inverse(Target),
    /// `claim slutsky[bread, fish]`
    Slutsky((Index, Span), Mover),
    /// `claim elasticity[bread, p_f]`
    Elasticity((Index, Span), Mover),
    /// `claim compensated elasticity[bread, p_f]`
    CompensatedElasticity((Index, Span), Mover),
}

/// What a `claim` states.
#[derive(Clone, Debug, PartialEq)]
pub enum Claim {
    /// An identity or an inequality between the model's names.
    Relation(Relation),
    /// A function of the theory is this formula.
    Function {
        /// The function.
        function: Claimed,
        /// What it is claimed to be.
        value: Expr,
        /// The whole of it.
        span: Span,
    },
    /// A condition on the system holds if, only if, or exactly if, all relations hold.
    Under {
        /// The condition.
        condition: Property,
        /// How it depends on the relations.
        link: Link,
        /// The relations.
        relations: Vec<Relation>,
        /// The whole of it.
        span: Span,
    },
    /// `claim separable food`
    Separable {
        /// The group of goods.
        group: Name,
        /// The whole of it.
        span: Span,
    },
}

/// A condition on the system as a whole, as claims name it.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Property {
    /// `homogeneity`
    Homogeneity,
    /// `adding-up`
    AddingUp,
    /// `symmetry`
    Symmetry,
    /// `curvature`
    Curvature,
}

/// How a condition depends on relations.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Link {
    /// `if`: they are sufficient.
    If,
    /// `only if`: they are necessary.
    OnlyIf,
    /// `iff`: both.
    Iff,
}

/// One statement of a model file.
#[derive(Clone, Debug, PartialEq)]
pub enum Statement {
    /// `title "…"`
    Title(String),
    /// `goods …`
    Goods(Goods),
    /// `group food = bread, fish`; a range of numbers arrives spelled out.
    Group {
        /// The name of the group.
        name: Name,
        /// Its goods.
        members: Vec<(Index, Span)>,
    },
    /// `prices …`
    Prices(Vec<Declared>),
    /// `income m`
    Income(Declared),
    /// `quantities …`
    Quantities(Vec<Declared>),
    /// `utility u`
    Utility(Declared),
    /// `parameters …`
    Parameters(Vec<Declared>),
    /// `assume …`
    Assume(Vec<Relation>),
    /// `let P[i] = …`
    Let {
        /// The abbreviation.
        name: Declared,
        /// What it stands for.
        value: Expr,
    },
    /// `demand`, `share`, `outlay`, `log demand`
    Demand(Equation),
    /// `rest fish`, `rest[2]`
    Rest(Target),
    /// `others …`
    Others(Others),
    /// `inverse bread = …`, `inverse[i] = …`
    Inverse {
        /// The good or goods.
        target: Target,
        /// p/m for them.
        value: Expr,
    },
    /// `given expenditure = …`
    Given {
        /// Which function is given.
        kind: Preferences,
        /// What it is.
        value: Expr,
    },
    /// `claim …`
    Claim(Claim),
}

/// A statement with its place.
#[derive(Clone, Debug, PartialEq)]
pub struct Located {
    /// The statement.
    pub statement: Statement,
    /// From its keyword to its last word.
    pub span: Span,
    /// Its keyword.
    pub keyword: Span,
}
