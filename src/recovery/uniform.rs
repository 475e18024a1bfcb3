//! Roots as coordinates: Rᴺ = αv + β gives v = (Rᴺ − β)/α, and then nothing holds R but polynomials.
//!
//! Modulo Rᴺ = αv + β one element has many polynomials, and their greatest common divisors and factors are not those of
//! the field. Written in R instead of v, an element has one. A square
//! root C of a number goes where writing Cw' for some w takes it out of every term.

use std::collections::BTreeSet;

use crate::algebra::budget;
use crate::algebra::factor::factor;
use crate::algebra::field::Field;
use crate::algebra::gcd::gcd;
use crate::algebra::generator::Kind;
use crate::algebra::monomial::{Monomial, Var};
use crate::algebra::number::Rational;
use crate::algebra::polynomial::Poly;

/// Units of work for writing a form in roots, and for its factors.
const WORK: u64 = 40_000_000;

/// Polynomials written in roots, up to a common monomial.
pub struct Uniform<'f> {
    field: &'f Field,
    polynomials: Vec<Poly>,
    /// Pairs (C, w): w stands for w/C.
    scaled: Vec<(Var, Var)>,
}

impl<'f> Uniform<'f> {
    /// The polynomials with a variable eliminated for each of the roots in them; `None` where there is no root, or where
    /// a root has no such variable.
    pub fn of(field: &'f Field, polynomials: &[Poly]) -> Option<Uniform<'f>> {
        budget::attempt(WORK, || {
            let mut current = polynomials.to_vec();
            let mut roots: Vec<(Var, Poly, u32)> = roots(field, &current);
            if roots.is_empty() {
                return None;
            }
            while let Some((root, value, order)) = roots.pop() {
                let (var, by) = eliminated(field, root, &value, order, &current)?;
                for polynomial in current.iter_mut().chain(roots.iter_mut().map(|(_, value, _)| value)) {
                    *polynomial = polynomial.try_substitute(var, &by)?;
                }
            }
            let mut uniform = Uniform { field, polynomials: without_common_monomial(&current), scaled: Vec::new() };
            uniform.scale();
            Some(uniform)
        })
        .ok()
        .flatten()
    }

    /// Takes square roots of numbers out.
    fn scale(&mut self) {
        let vars: BTreeSet<Var> = self.polynomials.iter().flat_map(Poly::vars).collect();
        let (numbers, others): (Vec<Var>, Vec<Var>) = vars.into_iter().partition(|v| self.is_root_of_number(*v));
        for number in numbers {
            let scaled = others.iter().rev().find_map(|w| Some((*w, self.without(number, *w)?)));
            if let Some((w, polynomials)) = scaled {
                self.polynomials = polynomials;
                self.scaled.push((number, w));
            }
        }
    }

    fn is_root_of_number(&self, var: Var) -> bool {
        matches!(&*self.field.kind(var), Kind::Sum { value, root: 2 } if value.is_constant())
    }

    /// The polynomials with Cw for w, up to powers of C, where no C is left.
    fn without(&self, number: Var, w: Var) -> Option<Vec<Poly>> {
        let by = Poly::monomial(Monomial::from_pairs(vec![(number, 1), (w, 1)]));
        let square = self.square(number)?;
        self.polynomials
            .iter()
            .map(|p| {
                let parts = p.try_substitute(w, &by)?.coefficients(number);
                let odd = parts.first()?.0 % 2;
                let even = |(k, part): &(i32, Poly)| (k % 2 == odd).then(|| part.scale(&square.clone().pow(k / 2)));
                Some(Poly::sum(parts.iter().map(even).collect::<Option<Vec<Poly>>>()?))
            })
            .collect()
    }

    fn square(&self, number: Var) -> Option<Rational> {
        self.field.expand(&Poly::monomial(Monomial::power(number, 2))).as_constant()
    }

    /// In the field's own form: w·C/C² put back for w.
    fn back(&self, polynomial: &Poly) -> Option<Poly> {
        let mut polynomial = polynomial.clone();
        for (number, w) in &self.scaled {
            let by = Poly::term(&self.square(*number)?.recip(), Monomial::from_pairs(vec![(*number, 1), (*w, 1)]));
            polynomial = polynomial.try_substitute(*w, &by)?;
        }
        Some(self.field.expand(&polynomial))
    }

    /// The polynomials without what they have in common, in the field's own form.
    pub fn primitive(&self) -> Option<Vec<Poly>> {
        budget::attempt(WORK, || {
            let common = self.polynomials.iter().fold(Poly::zero(), |g, c| gcd(&g, c));
            let divided: Option<Vec<Poly>> = self.polynomials.iter().map(|c| c.div_exact(&common)).collect();
            divided?.iter().map(|c| self.back(c)).collect()
        })
        .ok()
        .flatten()
    }

    /// The factors of the polynomials, in the field's own form.
    pub fn factors(&self) -> Vec<Poly> {
        let all = budget::attempt(WORK, || {
            self.polynomials.iter().flat_map(|p| factor(p).factors).filter_map(|(part, _)| self.back(&part)).collect()
        });
        all.unwrap_or_default()
    }
}

fn roots(field: &Field, polynomials: &[Poly]) -> Vec<(Var, Poly, u32)> {
    let mut vars: Vec<Var> = polynomials.iter().flat_map(Poly::vars).collect();
    let mut found: Vec<(Var, Poly, u32)> = Vec::new();
    while let Some(var) = vars.pop() {
        if let Kind::Sum { value, root: root @ 2.. } = &*field.kind(var)
            && found.iter().all(|(known, ..)| *known != var)
        {
            let value = field.expand(value);
            if value.is_constant() {
                continue;
            }
            vars.extend(value.vars());
            found.push((var, value, *root));
        }
    }
    found
}

/// A variable v with Rᴺ = αv + β for a monomial α, and (Rᴺ − β)/α.
fn eliminated(field: &Field, root: Var, value: &Poly, order: u32, polynomials: &[Poly]) -> Option<(Var, Poly)> {
    let suits = |v: &Var| {
        *v != root
            && !matches!(*field.kind(*v), Kind::Sum { .. })
            && value.degree(*v) == 1
            && value.low_degree(*v) >= 0
            && polynomials.iter().all(|p| p.low_degree(*v) >= 0)
    };
    value.vars().into_iter().rev().filter(suits).find_map(|v| {
        let parts = value.coefficients(v);
        let (slope, rest) = match &parts[..] {
            [(1, slope)] => (slope, Poly::zero()),
            [(1, slope), (0, rest)] => (slope, rest.clone()),
            _ => return None,
        };
        let (content, monomial) = slope.as_monomial()?;
        let power = Poly::monomial(Monomial::power(root, order as i32));
        Some((v, (&power - &rest).mul_term(&content.recip(), &monomial.inverse())))
    })
}

fn without_common_monomial(polynomials: &[Poly]) -> Vec<Poly> {
    let mut monomials = polynomials.iter().flat_map(|p| p.raw_terms().iter().map(|(m, _)| m));
    let Some(first) = monomials.next().cloned() else { return polynomials.to_vec() };
    let common = monomials.fold(first, |common, m| common.meet(m));
    polynomials.iter().map(|p| p.mul_monomial(&common.inverse())).collect()
}
