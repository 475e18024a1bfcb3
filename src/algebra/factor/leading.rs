//! Leading coefficients of the factors, predicted from one integer point (Wang 1978).

use num_bigint::BigInt;
use num_integer::Integer;
use num_traits::{One, Signed, Zero};

use super::integral::Integral;
use crate::algebra::monomial::Var;
use crate::algebra::number::Int;
use crate::algebra::polynomial::Poly;

/// The factored leading coefficient: integer content and irreducible factors (variables included).
pub(super) struct Leading {
    pub(super) content: BigInt,
    pub(super) factors: Vec<(Poly, u32)>,
}

impl Leading {
    pub(super) fn new(lead: &Poly) -> Leading {
        let split = super::factor(lead);
        let monomials = split.monomial.iter().map(|(v, e)| (Poly::var(v), e.unsigned_abs()));
        let factors = monomials.chain(split.factors.iter().cloned()).collect();
        Leading { content: split.content.to_integer(), factors }
    }
}

/// Univariate factors and leading coefficients fitted to each other, and the integer by which the polynomial itself
/// has to be multiplied so that everything agrees.
pub(super) struct Fitted {
    pub(super) images: Vec<Integral>,
    pub(super) leads: Vec<Poly>,
    pub(super) scale: BigInt,
}

/// The value of an integer polynomial at integers.
pub(super) fn value_at(p: &Poly, point: &[(Var, i64)]) -> BigInt {
    let mut sum = Int::ZERO;
    for (m, c) in p.raw_terms() {
        let mut term = c.clone();
        for (v, e) in m.iter() {
            let x = point.iter().find(|(w, _)| *w == v).map_or(0, |&(_, x)| x);
            term = term.mul(&Int::from(x).pow(e.unsigned_abs()));
        }
        sum += &term;
    }
    sum.into_bigint()
}

/// Distributes the factors of the leading coefficient over the univariate factors of the image at `point`, where
/// image = content·Π images. None when the point does not tell them apart.
pub(super) fn fit(leading: &Leading, point: &[(Var, i64)], content: &BigInt, images: &[Integral]) -> Option<Fitted> {
    let values: Vec<BigInt> = leading.factors.iter().map(|(l, _)| value_at(l, point)).collect();
    let marks = distinguishing(&(content * &leading.content), &values)?;
    let mut leads = Vec::with_capacity(images.len());
    let mut left: Vec<u32> = leading.factors.iter().map(|&(_, e)| e).collect();
    for image in images {
        let mut remaining = content * image.last()?;
        let mut lead = Poly::one();
        for (k, mark) in marks.iter().enumerate().rev() {
            while (&remaining % mark).is_zero() {
                let (quotient, rest) = remaining.div_rem(&values[k]);
                if !rest.is_zero() {
                    return None;
                }
                remaining = quotient;
                lead = &lead * &leading.factors[k].0;
                left[k] = left[k].checked_sub(1)?;
            }
        }
        leads.push(lead);
    }
    if left.iter().any(|&e| e > 0) {
        return None;
    }
    balance(leads, point, content.clone(), images)
}

/// For every value a divisor > 1 prime to `start` and to all earlier values.
fn distinguishing(start: &BigInt, values: &[BigInt]) -> Option<Vec<BigInt>> {
    let mut seen = vec![start.abs()];
    for value in values {
        let mut mark = value.abs();
        for earlier in seen.iter().rev() {
            loop {
                let common = mark.gcd(earlier);
                if common.is_one() {
                    break;
                }
                mark /= common;
            }
        }
        if mark <= BigInt::one() {
            return None;
        }
        seen.push(mark);
    }
    seen.remove(0);
    Some(seen)
}

/// Adjusts integer factors until every image has the value of its predicted leading coefficient.
fn balance(mut leads: Vec<Poly>, point: &[(Var, i64)], content: BigInt, images: &[Integral]) -> Option<Fitted> {
    let mut images = images.to_vec();
    let mut content = content;
    let times = |p: &Poly, k: &BigInt| p.scale(&num_rational::Ratio::from_integer(k.clone()));
    for (lead, image) in leads.iter_mut().zip(&mut images) {
        let (wanted, have) = (value_at(lead, point), image.last()?.clone());
        let common = wanted.gcd(&have);
        let (up, missing) = (&have / &common, &wanted / &common);
        *lead = times(lead, &up);
        image.iter_mut().for_each(|c| *c *= &missing);
        let (rest, remainder) = content.div_rem(&missing);
        if !remainder.is_zero() {
            return None;
        }
        content = rest;
    }
    // What is left of the content goes to every factor; the polynomial is multiplied to match.
    let mut scale = BigInt::one();
    if !content.is_one() {
        for (k, (lead, image)) in leads.iter_mut().zip(&mut images).enumerate() {
            *lead = times(lead, &content);
            image.iter_mut().for_each(|c| *c *= &content);
            if k > 0 {
                scale *= &content;
            }
        }
    }
    Some(Fitted { images, leads, scale })
}
