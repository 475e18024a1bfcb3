//! What a model consists of: the types that the floors above read.

use crate::algebra::field::Field;
use crate::algebra::generator::Element;
use crate::algebra::monomial::Var;
use crate::language::{Comparison, Link, Preferences, Property, Span};

use crate::language::Form as WrittenForm;

/// A good.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Good {
    /// Its name; the number of a numbered good.
    pub name: String,
}

/// A parameter, or one member of a family of parameters.
#[derive(Clone, Debug)]
pub struct Parameter {
    /// The name as the author writes it: `s`, `g[1,2]`, `a[bread]`.
    pub name: String,
    /// Its symbol in the field.
    pub var: Var,
    /// The LaTeX form that the author asked for (of the family, without indices).
    pub latex: Option<String>,
    /// What the assumed equations make of it, where they eliminate it: an element free of eliminated parameters.
    pub eliminated: Option<Element>,
}

/// One assumed relation; each link of a chain and each value of free indices is one of its own.
#[derive(Clone, Debug)]
pub struct Assumption {
    /// The relation as it was written, chain and free indices included.
    pub text: String,
    /// The left side, eliminated parameters replaced.
    pub left: Element,
    /// The sign between the sides.
    pub relation: Comparison,
    /// The right side, eliminated parameters replaced.
    pub right: Element,
    /// Where it is written.
    pub span: Span,
}

/// Which goods of the consumer's budget the system covers.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum Coverage {
    /// All goods: outlays add up to income.
    Complete,
    /// Some goods; these symbols are the prices (or price indices) of the others.
    Others(Vec<Var>),
    /// Some goods; prices and income are already divided by the price index of the others.
    Deflated,
}

impl Coverage {
    /// The prices of the goods that are not written down.
    pub fn prices(&self) -> &[Var] {
        match self {
            Coverage::Others(prices) => prices,
            Coverage::Complete | Coverage::Deflated => &[],
        }
    }
}

/// In which form the demand for a good is given.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum Form {
    /// The quantity x.
    Demand,
    /// The budget share p x / m.
    Share,
    /// The spending p x.
    Outlay,
    /// ln x.
    LogDemand,
    /// What is left of income.
    Rest,
}

impl From<WrittenForm> for Form {
    fn from(form: WrittenForm) -> Form {
        match form {
            WrittenForm::Demand => Form::Demand,
            WrittenForm::Share => Form::Share,
            WrittenForm::Outlay => Form::Outlay,
            WrittenForm::LogDemand => Form::LogDemand,
        }
    }
}

/// The demand for one good, in all the forms that are in use.
#[derive(Clone, Debug)]
pub struct Demand {
    /// The form in which it is written.
    pub form: Form,
    /// The right-hand side as written, in the written form (for the rest good, the outlay that is left).
    pub formula: Element,
    /// x.
    pub quantity: Element,
    /// p x.
    pub outlay: Element,
    /// p x / m.
    pub share: Element,
}

/// Preferences that the author starts from.
#[derive(Clone, Debug)]
pub struct Given {
    /// Which function is given.
    pub kind: Preferences,
    /// The function: of quantities; of prices and income; or of prices and the utility level.
    pub value: Element,
    /// Where it is written.
    pub span: Span,
}

/// The inverse demand for a good, as a function of quantities.
#[derive(Clone, Debug)]
pub struct InverseDemand {
    /// π = p/m.
    pub formula: Element,
    /// x π.
    pub share: Element,
}

/// A function of the theory; goods are positions.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Function {
    /// U(x), v(p, m) or e(p, u).
    Preferences(Preferences),
    /// Marshallian demand in one of its forms.
    Demand(WrittenForm, usize),
    /// Hicksian demand.
    Hicksian(usize),
    /// Normalised inverse demand.
    Inverse(usize),
    /// S_ij.
    Slutsky(usize, usize),
    /// ∂ln x_i/∂ln p_j.
    PriceElasticity(usize, usize),
    /// ∂ln x_i/∂ln m.
    IncomeElasticity(usize),
    /// p_j S_ij / x_i.
    CompensatedElasticity(usize, usize),
}

/// What a claim states.
#[derive(Clone, Debug)]
pub enum Statement {
    /// An identity or an inequality; each link of a chain is one of its own.
    Relation {
        /// The left side.
        left: Element,
        /// The sign between the sides.
        relation: Comparison,
        /// The right side.
        right: Element,
    },
    /// A function of the theory is this element.
    Function {
        /// The function.
        function: Function,
        /// What it is claimed to be.
        value: Element,
    },
    /// A condition on the system holds if, only if, or exactly if, all relations hold.
    Under {
        /// The condition.
        condition: Property,
        /// How it depends on the relations.
        link: Link,
        /// The relations between elements of the parameters.
        relations: Vec<(Element, Comparison, Element)>,
    },
    /// Preferences are weakly separable in these goods, by their positions.
    Separable(Vec<usize>),
}

/// A claim of the author; each value of free indices is one of its own.
#[derive(Clone, Debug)]
pub struct Claim {
    /// The claim as it was written (one link of a chain); values of free indices are added behind it.
    pub text: String,
    /// What it states.
    pub statement: Statement,
    /// Where it is written.
    pub span: Span,
}

impl Claim {
    /// The two sides of an identity or inequality.
    pub fn sides(&self) -> Option<(&Element, &Element)> {
        match &self.statement {
            Statement::Relation { left, right, .. } => Some((left, right)),
            Statement::Function { .. } | Statement::Under { .. } | Statement::Separable(_) => None,
        }
    }

    /// Whether the claim is about a function of the theory.
    pub fn is_of_function(&self) -> bool {
        matches!(self.statement, Statement::Function { .. })
    }
}

/// What the author's own formulas need in order to be defined.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum DomainCondition {
    /// The argument of a logarithm, the base of a fractional or symbolic power.
    Positive(Element),
    /// A divisor.
    NonZero(Element),
}

impl DomainCondition {
    /// The element that the condition is about.
    pub fn element(&self) -> &Element {
        match self {
            DomainCondition::Positive(e) | DomainCondition::NonZero(e) => e,
        }
    }
}

/// A value put in for a parameter: an element of the field of another model (or of a field of its own).
#[derive(Clone, Copy)]
pub struct Value<'a> {
    /// The parameter as it is written: `s`, `g[1,2]`.
    pub parameter: &'a str,
    /// Its value.
    pub element: &'a Element,
    /// The field that the value belongs to; its symbols are found again by name.
    pub field: &'a Field,
}
