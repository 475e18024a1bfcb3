//! A field with named symbols and a small reader of formulas, for the recovery tests.

use mainspring::algebra::field::{Field, Relation};
use mainspring::algebra::formula::Formula;
use mainspring::algebra::generator::{Element, Role, Special};
use mainspring::algebra::monomial::Var;
use mainspring::algebra::number::rational;
use mainspring::algebra::polynomial::Poly;

/// Symbols by name.
pub struct Ground {
    pub field: Field,
    vars: Vec<(String, Var)>,
}

impl Ground {
    /// Prices and income are positive; parameters are positive where they are written with a plus sign before them.
    pub fn new(prices: &str, income: &str, parameters: &str) -> Ground {
        let mut ground = Ground { field: Field::new(), vars: Vec::new() };
        for name in parameters.split_whitespace() {
            let plain = name.trim_start_matches('+');
            let var = ground.declare(plain, Role::Parameter);
            if plain != name {
                ground.field.assume(&Poly::var(var), Relation::Positive);
            }
        }
        for name in prices.split_whitespace() {
            ground.declare(name, Role::Price);
        }
        for name in income.split_whitespace() {
            ground.declare(name, Role::Income);
        }
        ground
    }

    pub fn declare(&mut self, name: &str, role: Role) -> Var {
        let var = self.field.symbol(name, role);
        self.vars.push((name.to_string(), var));
        var
    }

    pub fn var(&self, name: &str) -> Var {
        self.vars.iter().find(|(n, _)| n == name).map(|(_, v)| *v).unwrap_or_else(|| panic!("{name} is not declared"))
    }

    pub fn vars(&self, names: &str) -> Vec<Var> {
        names.split_whitespace().map(|n| self.var(n)).collect()
    }

    pub fn show(&self, e: &Element) -> String {
        written(&self.field.formula(e))
    }

    pub fn read(&self, text: &str) -> Element {
        let tokens = tokens(text);
        let mut at = 0;
        let e = self.sum(&tokens, &mut at);
        assert_eq!(at, tokens.len(), "{text}");
        e
    }

    fn sum(&self, t: &[String], at: &mut usize) -> Element {
        let mut total = self.product(t, at);
        while *at < t.len() && (t[*at] == "+" || t[*at] == "-") {
            let minus = t[*at] == "-";
            *at += 1;
            let next = self.product(t, at);
            total = &self.field.current(&total) + &(if minus { next.neg() } else { next });
        }
        total
    }

    fn product(&self, t: &[String], at: &mut usize) -> Element {
        if t[*at] == "-" {
            *at += 1;
            return self.product(t, at).neg();
        }
        let mut total = self.power(t, at);
        while *at < t.len() && (t[*at] == "*" || t[*at] == "/") {
            let over = t[*at] == "/";
            *at += 1;
            let next = self.power(t, at);
            total = if over {
                self.field.quotient(&total, &next).expect("a divisor")
            } else {
                self.field.product(&total, &next)
            };
        }
        total
    }

    fn power(&self, t: &[String], at: &mut usize) -> Element {
        let base = self.atom(t, at);
        if *at >= t.len() || t[*at] != "^" {
            return base;
        }
        *at += 1;
        let minus = t[*at] == "-";
        *at += usize::from(minus);
        let exponent = self.power(t, at);
        let exponent = if minus { exponent.neg() } else { exponent };
        self.field.power(&base, &exponent).unwrap_or_else(|b| panic!("{b:?} in {t:?}"))
    }

    fn atom(&self, t: &[String], at: &mut usize) -> Element {
        let token = t[*at].clone();
        *at += 1;
        if token == "(" {
            let inner = self.sum(t, at);
            *at += 1;
            return inner;
        }
        if token.chars().next().is_some_and(|c| c.is_ascii_digit()) {
            return Poly::constant(&rational(token.parse().expect("a number"), 1));
        }
        if *at < t.len() && t[*at] == "(" {
            *at += 1;
            let inner = self.sum(t, at);
            *at += 1;
            let f = &self.field;
            return match token.as_str() {
                "ln" => f.ln(&inner),
                "exp" => f.exp(&inner),
                "sqrt" => f.sqrt(&inner),
                "Ei" => f.special(Special::Ei, &inner),
                "erf" => f.special(Special::Erf, &inner),
                other => panic!("{other} is no function"),
            }
            .unwrap_or_else(|b| panic!("{b:?} in {t:?}"));
        }
        self.field.current(&Poly::var(self.var(&token)))
    }
}

/// A formula on one line.
fn written(f: &Formula) -> String {
    let inside = |f: &Formula| match f {
        Formula::Number(_) | Formula::Symbol(_) | Formula::Call(..) => written(f),
        other => format!("({})", written(other)),
    };
    match f {
        Formula::Number(q) => q.to_string(),
        Formula::Symbol(symbol) => symbol.plain.clone(),
        Formula::Sum(terms) => terms.iter().map(written).collect::<Vec<_>>().join(" + ").replace("+ -", "- "),
        Formula::Negative(inner) => format!("-{}", inside(inner)),
        Formula::Product(factors) => factors.iter().map(inside).collect::<Vec<_>>().join("*"),
        Formula::Quotient(above, below) => format!("{}/{}", inside(above), inside(below)),
        Formula::Power(base, exponent) => format!("{}^{}", inside(base), inside(exponent)),
        Formula::Call(function, argument) => {
            format!("{}({})", format!("{function:?}").to_lowercase(), written(argument))
        }
    }
}

fn tokens(text: &str) -> Vec<String> {
    let mut out: Vec<String> = Vec::new();
    let mut word = String::new();
    for c in text.chars() {
        if c.is_alphanumeric() || c == '_' {
            word.push(c);
            continue;
        }
        if !word.is_empty() {
            out.push(std::mem::take(&mut word));
        }
        if !c.is_whitespace() {
            out.push(c.to_string());
        }
    }
    if !word.is_empty() {
        out.push(word);
    }
    out
}
