//! Single equations between parameters: their factors, and how they can be solved for one parameter.

use num_traits::{One, Signed, Zero};

use crate::algebra::budget;
use crate::algebra::factor::factor;
use crate::algebra::field::Field;
use crate::algebra::generator::{Element, Kind, Role};
use crate::algebra::monomial::{Monomial, Var};
use crate::algebra::number::rational;
use crate::algebra::polynomial::Poly;
use crate::algebra::sign::Sign;

use crate::conditions::coefficients::normalised;

use super::node::numerator;

/// The distinct factors of an element that may vanish somewhere on the domain, irreducible as far as factorisation went.
pub fn parts(field: &Field, e: &Element) -> Vec<Element> {
    if e.is_constant() {
        return Vec::new();
    }
    let factored = factor(e);
    let single = factored.monomial.iter().filter(|(_, k)| *k > 0).map(|(v, _)| Poly::var(v));
    let all = single.chain(factored.factors.into_iter().map(|(part, _)| part));
    all.filter(|part| !field.sign(part).excludes_zero()).collect()
}

/// coefficient · v + rest = 0, with a coefficient that does not hold v.
#[derive(Clone, Debug)]
pub struct Linear {
    /// The parameter.
    pub v: Var,
    /// What it is multiplied by.
    pub coefficient: Element,
    /// The other terms.
    pub rest: Element,
}

impl Linear {
    /// −rest / coefficient.
    pub fn value(&self, field: &Field) -> Option<Element> {
        Some(field.reduce(&field.quotient(&self.rest.neg(), &self.coefficient).ok()?))
    }
}

/// Every way to read an equation as linear in one parameter; the last-declared parameter first.
pub fn linear_readings(field: &Field, e: &Element, kept: &[Var]) -> Vec<Linear> {
    let vars = e.vars();
    let alone = |v: Var| {
        field.role(v) == Some(Role::Parameter)
            && !kept.contains(&v)
            && vars.iter().all(|w| *w == v || !field.depends_on(&Poly::var(*w), v))
    };
    let reading = |v: Var| {
        if !alone(v) || e.degree(v) != 1 || e.low_degree(v) < 0 {
            return None;
        }
        let coefficient = e.coefficients(v).into_iter().find(|(k, _)| *k == 1).map(|(_, c)| c)?;
        let rest = e - &coefficient.mul_monomial(&Monomial::power(v, 1));
        Some(Linear { v, coefficient, rest })
    };
    vars.iter().rev().filter_map(|v| reading(*v)).collect()
}

/// Equations that hold together exactly where e = 0 does, for an e that is linear in no parameter; each alternative is a
/// list of equations. `None` where no such list is known.
pub fn rewritten(field: &Field, e: &Element, kept: &[Var]) -> Option<Vec<Vec<Element>>> {
    sum_of_signs(field, e).or_else(|| exponents(field, e)).or_else(|| quadratic(field, e, kept))
}

/// Terms of one sign that are never negative: each must vanish.
fn sum_of_signs(field: &Field, e: &Element) -> Option<Vec<Vec<Element>>> {
    let signs: Vec<Sign> = e.terms().map(|(m, c)| field.sign(&Poly::term(&c, m.clone()))).collect();
    let all = |allowed: fn(Sign) -> bool| signs.iter().all(|s| allowed(*s));
    if !all(|s| s.is_nonnegative()) && !all(|s| s.negated().is_nonnegative()) {
        return None;
    }
    let single = |(m, c): (&Monomial, crate::algebra::number::Rational)| numerator(field, &Poly::term(&c, m.clone()));
    Some(vec![e.terms().map(single).collect()])
}

/// exp a = exp b says a = b.
fn exponents(field: &Field, e: &Element) -> Option<Vec<Vec<Element>>> {
    let terms: Vec<_> = e.terms().collect();
    let [(m, a), (n, b)] = &terms[..] else { return None };
    if !(a + b).numer().eq(&0.into()) {
        return None;
    }
    let ratio = m.div(n);
    let mut whole = Vec::new();
    for (v, k) in ratio.iter() {
        let Kind::Exp(argument) = &*field.kind(v) else { return None };
        whole.push(argument.scale(&rational(i64::from(k), 1)));
    }
    let gap = numerator(field, &Poly::sum(whole));
    (!gap.is_zero()).then(|| vec![vec![gap]])
}

/// a v² + b v + c = 0 with numbers a, b, c that has real roots.
fn quadratic(field: &Field, e: &Element, kept: &[Var]) -> Option<Vec<Vec<Element>>> {
    let [v] = e.vars()[..] else { return None };
    if e.degree(v) != 2 || e.low_degree(v) < 0 || kept.contains(&v) || field.role(v) != Some(Role::Parameter) {
        return None;
    }
    let coefficient = |k: i32| e.coefficient(&Monomial::power(v, k));
    let (a, b, c) = (coefficient(2), coefficient(1), coefficient(0));
    let discriminant = &b * &b - rational(4, 1) * &a * c;
    if discriminant.is_negative() {
        return Some(Vec::new());
    }
    let root = field.sqrt(&Poly::constant(&discriminant)).ok()?;
    let half = rational(1, 2) / a;
    let value = |sign: i64| {
        let root = root.scale(&(rational(sign, 1) * &half));
        &(&Poly::var(v) + &Poly::constant(&(&b * &half))) - &root
    };
    Some(vec![vec![value(1)], vec![value(-1)]])
}

/// Whether an equation says v = value with a number for its coefficient.
pub fn is_plain(linear: &Linear) -> bool {
    linear.coefficient.as_constant().is_some_and(|c| c.abs().is_one()) || linear.coefficient.is_constant()
}

/// Equations with the same solutions, as short as combinations with numbers make them: each monomial that leads one of them
/// stands in no other. The equations as they are where that makes them longer.
pub fn interreduced(equations: &[Element]) -> Vec<Element> {
    let mut rows: Vec<(Monomial, Element)> = Vec::new();
    for e in equations {
        budget::spend(10 * (e.len() * (1 + rows.len())) as u64);
        let row = rows.iter().fold(e.clone(), |row, (leading, by)| without(&row, leading, by));
        let Some((leading, coefficient)) = row.leading().map(|(m, c)| (m.clone(), c)) else { continue };
        let row = row.scale(&coefficient.recip());
        for (_, other) in &mut rows {
            *other = without(other, &leading, &row);
        }
        rows.push((leading, row));
    }
    let length = |all: &mut dyn Iterator<Item = usize>| all.sum::<usize>();
    let longer = length(&mut rows.iter().map(|(_, row)| row.len())) > length(&mut equations.iter().map(Poly::len));
    if longer { equations.to_vec() } else { rows.into_iter().map(|(_, row)| normalised(&row)).collect() }
}

/// The row without a monomial that another row leads with coefficient one.
fn without(row: &Element, leading: &Monomial, by: &Element) -> Element {
    let coefficient = row.coefficient(leading);
    if coefficient.is_zero() { row.clone() } else { row - &by.scale(&coefficient) }
}
