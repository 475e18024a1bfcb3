//! Nested radicals of numbers: (a + b√c)^(1/n) as u + v√c, or √(a + b√c) as √x ± √y.

use num_bigint::BigInt;
use num_traits::{One, Signed, ToPrimitive, Zero};

use super::factor::factor;
use super::field::Field;
use super::generator::{Element, Kind, Role};
use super::monomial::{Monomial, Var};
use super::number::Rational;
use super::polynomial::Poly;

/// a + b√c with rational a, b and √c a product of named square roots of numbers.
struct Quadratic {
    a: Rational,
    b: Rational,
    c: Rational,
    root: Monomial,
}

impl Field {
    /// base^q for a number a + b√c, b ≠ 0, if it is again of that form or a sum of two square roots. Whatever is found
    /// is checked by raising it back to the power; its sign by an enclosure.
    pub(super) fn radical(&self, base: &Element, q: &Rational) -> Option<Element> {
        let number = self.as_quadratic(&self.reduce(base))?;
        let n = q.denom().to_u32().filter(|n| *n <= 24)?;
        let root = self.root_in_same_field(&number, n).or_else(|| self.sum_of_roots(&number, n))?;
        let root = self.positive_side(&root, base, n)?;
        self.integer_power(&root, q.numer()).ok()
    }

    fn as_quadratic(&self, e: &Element) -> Option<Quadratic> {
        let mut irrational = e.terms().filter(|(m, _)| !m.is_one());
        let (Some((root, b)), None) = (irrational.next(), irrational.next()) else { return None };
        let mut c = Rational::one();
        for (var, exponent) in root.iter() {
            let Kind::Sum { value, root: 2 } = &*self.kind(var) else { return None };
            c *= (exponent == 1).then(|| value.as_constant()).flatten()?;
        }
        Some(Quadratic { a: e.coefficient(&Monomial::one()), b, c, root: root.clone() })
    }

    /// β = t/2 + v√c with βⁿ = a + b√c: the norm ν of β is an n-th root of the norm of the number, and its trace t a
    /// rational root of the Dickson polynomial Dₙ(t, ν) = 2a.
    fn root_in_same_field(&self, number: &Quadratic, n: u32) -> Option<Element> {
        let norm = &number.a * &number.a - &number.b * &number.b * &number.c;
        let nu = rational_root(&norm, n)?;
        let signs: &[i64] = if n.is_multiple_of(2) { &[1, -1] } else { &[1] };
        signs.iter().find_map(|s| {
            let nu = &nu * Rational::from_integer((*s).into());
            let unknown = self.symbol("t", Role::Unknown);
            let equation = &dickson(unknown, &nu, n) - &Poly::constant(&(&number.a * Rational::from_integer(2.into())));
            factor(&equation).factors.iter().find_map(|(part, _)| {
                let trace = linear_root(part, unknown)?;
                self.with_trace(number, &trace, &nu)
            })
        })
    }

    fn with_trace(&self, number: &Quadratic, trace: &Rational, nu: &Rational) -> Option<Element> {
        let half = trace / Rational::from_integer(2.into());
        let v = rational_root(&((&half * &half - nu) / &number.c), 2)?;
        Some(&Poly::constant(&half) + &Poly::term(&v, number.root.clone()))
    }

    /// √(a + b√c) = √x ± √y with x + y = a and 4xy = b²c.
    fn sum_of_roots(&self, number: &Quadratic, n: u32) -> Option<Element> {
        let norm = &number.a * &number.a - &number.b * &number.b * &number.c;
        let gap = if n == 2 { rational_root(&norm, 2)? } else { return None };
        let two = Rational::from_integer(2.into());
        let (x, y) = ((&number.a + &gap) / &two, (&number.a - &gap) / &two);
        if !x.is_positive() || !y.is_positive() {
            return None;
        }
        let (x, y) = (self.sqrt(&Poly::constant(&x)).ok()?, self.sqrt(&Poly::constant(&y)).ok()?);
        Some(if number.b.is_negative() { &x - &y } else { &x + &y })
    }

    /// The root or its negative or (for the conjugate sign of v) its mirror image: whichever is positive and has the
    /// right power.
    fn positive_side(&self, root: &Element, base: &Element, n: u32) -> Option<Element> {
        let mirrored = match self.as_quadratic(root) {
            Some(q) => &Poly::constant(&q.a) - &Poly::term(&q.b, q.root.clone()),
            None => root.clone(),
        };
        [root.clone(), root.neg(), mirrored.clone(), mirrored.neg()].into_iter().find(|candidate| {
            let positive = self.enclose(candidate, &Default::default(), 128).and_then(|i| i.sign());
            positive == Some(std::cmp::Ordering::Greater) && self.is_zero(&(&candidate.pow(n) - base))
        })
    }
}

/// Dₙ(x, ν): D₀ = 2, D₁ = x, Dₖ₊₁ = x Dₖ − ν Dₖ₋₁, so that Dₙ(β + ν/β, ν) = βⁿ + (ν/β)ⁿ.
fn dickson(x: Var, nu: &Rational, n: u32) -> Poly {
    let (mut previous, mut current) = (Poly::int(2), Poly::var(x));
    for _ in 1..n {
        let next = &(&Poly::var(x) * &current) - &previous.scale(nu);
        previous = std::mem::replace(&mut current, next);
    }
    current
}

fn linear_root(part: &Poly, x: Var) -> Option<Rational> {
    if part.degree(x) != 1 {
        return None;
    }
    let mut coefficients = part.coefficients(x).into_iter();
    let slope = coefficients.next()?.1.as_constant()?;
    let constant = coefficients.next().map_or(Some(Rational::zero()), |(_, p)| p.as_constant())?;
    Some(-constant / slope)
}

/// The rational n-th root, if there is one (for odd n also of a negative number).
pub fn rational_root(q: &Rational, n: u32) -> Option<Rational> {
    if q.is_negative() && n.is_multiple_of(2) {
        return None;
    }
    let root = |k: &BigInt| -> Option<BigInt> {
        let r = k.nth_root(n);
        (num_traits::pow(r.clone(), n as usize) == *k).then_some(r)
    };
    let (numerator, denominator) = (root(q.numer())?, root(q.denom())?);
    Some(Rational::new(numerator, if denominator.is_zero() { BigInt::one() } else { denominator }))
}
