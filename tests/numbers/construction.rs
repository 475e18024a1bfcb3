//! Formulas of the language with their derivatives, and indirect utility functions drawn at random.

use std::fmt;
use std::rc::Rc;

/// A formula.
#[derive(Clone, PartialEq)]
pub enum Formula {
    Number(i64),
    Name(&'static str),
    Sum(Rc<Formula>, Rc<Formula>),
    Product(Rc<Formula>, Rc<Formula>),
    Quotient(Rc<Formula>, Rc<Formula>),
    /// The exponent is free of what is differentiated by.
    Power(Rc<Formula>, Rc<Formula>),
    Ln(Rc<Formula>),
    Exp(Rc<Formula>),
}

use Formula::{Exp, Ln, Name, Number, Power, Product, Quotient, Sum};

pub fn sum(a: Formula, b: Formula) -> Formula {
    match (&a, &b) {
        (Number(0), _) => b,
        (_, Number(0)) => a,
        _ => Sum(Rc::new(a), Rc::new(b)),
    }
}

pub fn product(a: Formula, b: Formula) -> Formula {
    match (&a, &b) {
        (Number(0), _) | (_, Number(0)) => Number(0),
        (Number(1), _) => b,
        (_, Number(1)) => a,
        _ => Product(Rc::new(a), Rc::new(b)),
    }
}

pub fn quotient(a: Formula, b: Formula) -> Formula {
    if a == Number(0) { a } else { Quotient(Rc::new(a), Rc::new(b)) }
}

pub fn power(a: Formula, b: Formula) -> Formula {
    Power(Rc::new(a), Rc::new(b))
}

pub fn root(a: Formula) -> Formula {
    power(a, quotient(Number(1), Number(2)))
}

pub fn ln(a: Formula) -> Formula {
    Ln(Rc::new(a))
}

pub fn exp(a: Formula) -> Formula {
    Exp(Rc::new(a))
}

fn minus(a: Formula) -> Formula {
    product(Number(-1), a)
}

impl Formula {
    /// The derivative, as it comes.
    pub fn slope(&self, x: &str) -> Formula {
        match self {
            Number(_) => Number(0),
            Name(name) => Number(i64::from(*name == x)),
            Sum(a, b) => sum(a.slope(x), b.slope(x)),
            Product(a, b) => sum(product(a.slope(x), (**b).clone()), product((**a).clone(), b.slope(x))),
            Quotient(a, b) => {
                let fall = product((**a).clone(), b.slope(x));
                let first = quotient(a.slope(x), (**b).clone());
                sum(first, minus(quotient(fall, power((**b).clone(), Number(2)))))
            }
            Power(a, b) => {
                let lower = sum((**b).clone(), Number(-1));
                product(product((**b).clone(), power((**a).clone(), lower)), a.slope(x))
            }
            Ln(a) => quotient(a.slope(x), (**a).clone()),
            Exp(a) => product(self.clone(), a.slope(x)),
        }
    }
}

impl fmt::Display for Formula {
    fn fmt(&self, out: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Number(n) if *n < 0 => write!(out, "({n})"),
            Number(n) => write!(out, "{n}"),
            Name(name) => write!(out, "{name}"),
            Sum(a, b) => write!(out, "({a} + {b})"),
            Product(a, b) => write!(out, "({a}*{b})"),
            Quotient(a, b) => write!(out, "({a}/{b})"),
            Power(a, b) => write!(out, "({a})^({b})"),
            Ln(a) => write!(out, "ln({a})"),
            Exp(a) => write!(out, "exp({a})"),
        }
    }
}

const PRICES: [&str; 4] = ["p", "q", "r", "s"];
const PARAMETERS: [&str; 3] = ["a", "b", "c"];

/// An indirect utility function, homogeneous of degree zero in prices and income.
pub struct Construction {
    pub kind: &'static str,
    pub goods: usize,
    pub v: Formula,
    /// What must be positive besides prices, income and parameters.
    pub positive: Vec<Formula>,
}

impl fmt::Debug for Construction {
    fn fmt(&self, out: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(out, "{}: v = {}", self.kind, self.v)
    }
}

impl Construction {
    /// The model file: demands by Roy's identity, and nothing that shows where they come from.
    pub fn model(&self) -> String {
        let goods: Vec<String> = (1..=self.goods).map(|k| format!("good{k}")).collect();
        let along = self.v.slope("m");
        let mut text = format!(
            "goods {}\nprices {}\nincome m\nparameters {}\nassume a > 0, b > 0, c > 0\n",
            goods.join(", "),
            PRICES[..self.goods].join(", "),
            PARAMETERS.join(", ")
        );
        self.positive.iter().for_each(|formula| text += &format!("assume {formula} > 0\n"));
        for (good, price) in goods.iter().zip(PRICES) {
            text += &format!("demand {good} = {}\n", minus(quotient(self.v.slope(price), along.clone())));
        }
        text
    }
}

/// A deterministic source of choices.
struct Dice(u64);

impl Dice {
    fn roll(&mut self, sides: usize) -> usize {
        self.0 = self.0.wrapping_mul(6_364_136_223_846_793_005).wrapping_add(1_442_695_040_888_963_407);
        ((self.0 >> 33) % sides as u64) as usize
    }

    fn parameter(&mut self) -> Formula {
        match self.roll(5) {
            0 => Number(2),
            1 => Number(1),
            k => Name(PARAMETERS[k - 2]),
        }
    }

    fn price(&mut self, goods: usize) -> Formula {
        Name(PRICES[self.roll(goods)])
    }

    /// A positive function of prices, homogeneous of degree one.
    fn index(&mut self, goods: usize, depth: usize) -> Formula {
        let pair = |dice: &mut Dice| (dice.index(goods, depth - 1), dice.index(goods, depth - 1));
        match self.roll(if depth == 0 { 1 } else { 6 }) {
            0 => self.price(goods),
            1 | 2 => {
                let (weight, (a, b)) = (self.parameter(), pair(self));
                sum(product(weight, a), b)
            }
            3 => {
                let (a, b) = pair(self);
                root(product(a, b))
            }
            4 => {
                let (a, b) = pair(self);
                let share = Name(PARAMETERS[self.roll(3)]);
                product(a.clone(), power(quotient(b, a), share))
            }
            _ => {
                let ((a, b), r) = (pair(self), Name(PARAMETERS[self.roll(3)]));
                power(sum(power(a, r.clone()), power(b, r.clone())), quotient(Number(1), r))
            }
        }
    }

    /// A function of prices, homogeneous of degree zero.
    fn ratio(&mut self, goods: usize) -> Formula {
        let ratio = quotient(self.index(goods, 1), self.price(goods));
        match self.roll(3) {
            0 => ln(ratio),
            1 => power(ratio, self.parameter()),
            _ => ratio,
        }
    }
}

/// The construction of a number, the same each time.
pub fn draw(number: u64) -> Construction {
    let mut dice = Dice(number.wrapping_mul(0x9e37_79b9_7f4a_7c15).wrapping_add(7));
    (0..4).for_each(|_| {
        dice.roll(2);
    });
    let goods = 2 + dice.roll(3);
    let m = Name("m");
    let mut positive = Vec::new();
    let left = |dice: &mut Dice, positive: &mut Vec<Formula>| {
        let a = dice.index(goods, 2);
        let left = sum(m.clone(), minus(a));
        positive.push(left.clone());
        left
    };
    let real = |dice: &mut Dice| quotient(Name("m"), dice.index(goods, 2));
    let (kind, v) = match dice.roll(8) {
        0 => ("homothetic", real(&mut dice)),
        1 => ("Gorman", {
            let left = left(&mut dice, &mut positive);
            quotient(left, dice.index(goods, 2))
        }),
        2 => ("real income and a ratio", sum(real(&mut dice), dice.ratio(goods))),
        3 => ("logarithm of real income", {
            let v = ln(real(&mut dice));
            let weight = dice.ratio(goods);
            let bent = sum(power(weight, Number(2)), Number(1));
            positive.push(bent.clone());
            product(v, exp(product(Name("a"), ln(bent))))
        }),
        4 => ("reciprocal", {
            let left = left(&mut dice, &mut positive);
            let bent = quotient(dice.index(goods, 1), left);
            sum(minus(bent), dice.ratio(goods))
        }),
        5 => ("power of real income", sum(power(real(&mut dice), Name("c")), dice.ratio(goods))),
        6 => ("additive", {
            let terms = (0..goods).map(|k| {
                let real = quotient(Name("m"), Name(PRICES[k]));
                match dice.roll(3) {
                    0 => power(real, Name(PARAMETERS[k % 3])),
                    1 => ln(real),
                    _ => root(real),
                }
            });
            terms.reduce(sum).unwrap_or(Number(0))
        }),
        _ => ("two real incomes", {
            let (first, second) = (real(&mut dice), real(&mut dice));
            sum(power(first, dice.parameter()), ln(second))
        }),
    };
    Construction { kind, goods, v, positive }
}
