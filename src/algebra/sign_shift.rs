//! Signs around a bound: where a fact says v > a, the sign of f follows from its Taylor coefficients in v at a.

use super::budget;
use super::field::{Field, Relation};
use super::generator::{Kind, Role};
use super::monomial::{Monomial, Var};
use super::number::rational;
use super::polynomial::Poly;
use super::sign_rules::Sign;

/// The longest polynomial that is looked at, and the longest that the shift may lead to.
const MOST_TERMS: usize = 120;
/// The highest power of the variable.
const MOST_DEGREE: i32 = 8;

impl Field {
    /// The sign of f = Σ fₖ tᵏ, t > 0 the distance of a symbol from a bound that a fact gives: that of the fₖ, if they
    /// have one sign. `deep` is how many facts may be used one after the other.
    pub(super) fn shifted_sign(&self, f: &Poly, deep: u32) -> Sign {
        if deep == 0 || f.len() < 2 || f.len() > MOST_TERMS {
            return Sign::Unknown;
        }
        for fact in self.current_facts().iter().filter(|fact| fact.relation != Relation::NonZero) {
            for v in fact.element.vars() {
                let Some((bound, upper)) = self.bound_on(&fact.element, v, f) else { continue };
                let Some(coefficients) = taylor(f, v, &bound) else { continue };
                let signs = coefficients.iter().enumerate().map(|(k, c)| {
                    let own = self.sign_with(c, deep - 1);
                    if upper && k % 2 == 1 { own.negated() } else { own }
                });
                let sign = along(signs, fact.relation == Relation::Positive);
                if sign != Sign::Unknown {
                    return sign;
                }
            }
        }
        Sign::Unknown
    }

    /// a and whether it is an upper bound, where the fact g ≥ 0 reads v ≥ a or v ≤ a for a symbol v that occurs in f as
    /// itself only.
    fn bound_on(&self, g: &Poly, v: Var, f: &Poly) -> Option<(Poly, bool)> {
        // income and parameters: prices have bounds only where demands do, and there other ways are shorter
        if !matches!(*self.kind(v), Kind::Symbol(Role::Income | Role::Parameter))
            || g.degree(v) != 1
            || g.low_degree(v) != 0
        {
            return None;
        }
        let degree = f.degree(v);
        if g.len() < 2 || !(1..=MOST_DEGREE).contains(&degree) || f.low_degree(v) < 0 {
            return None;
        }
        let hidden = |e: &Poly| e.vars().into_iter().any(|w| w != v && self.depends_on(&Poly::var(w), v));
        let slope = g.coefficients(v).into_iter().find(|(k, _)| *k == 1).and_then(|(_, c)| c.as_constant())?;
        if hidden(f) || hidden(g) {
            return None;
        }
        let rest = g - &Poly::term(&slope, Monomial::power(v, 1));
        Some((rest.scale(&(-slope.recip())), slope < rational(0, 1)))
    }
}

impl Field {
    /// The coefficients in t of several elements at v = a + t, where g = c (v − a) with a rational c and t = g. `None`
    /// where v is hidden in a generator, or the elements are no polynomials in v. Cost: that of the products.
    pub fn around(&self, elements: &[Poly], v: Var, g: &Poly) -> Option<Vec<Vec<Poly>>> {
        let g = self.current(g);
        let slope = g.coefficients(v).into_iter().find(|(k, _)| *k == 1).and_then(|(_, c)| c.as_constant())?;
        let bound = (&g - &Poly::term(&slope, Monomial::power(v, 1))).scale(&(-slope.recip()));
        let mut parts: Vec<Vec<Poly>> = Vec::new();
        for (at, e) in elements.iter().enumerate() {
            let e = self.current(e);
            let hidden = e.vars().into_iter().any(|w| w != v && self.depends_on(&Poly::var(w), v));
            if hidden || e.low_degree(v) < 0 || e.degree(v) > MOST_DEGREE {
                return None;
            }
            for (k, c) in taylor(&e, v, &bound)?.into_iter().enumerate() {
                if parts.len() <= k {
                    parts.push(vec![Poly::zero(); elements.len()]);
                }
                parts[k][at] = self.reduce(&c.scale(&num_traits::Pow::pow(slope.recip(), k as i32)));
            }
        }
        Some(parts)
    }
}

/// The coefficients of f(a + t) in t, for f a polynomial in v. `None` where they grow too long.
fn taylor(f: &Poly, v: Var, a: &Poly) -> Option<Vec<Poly>> {
    let degree = usize::try_from(f.degree(v)).ok()?;
    let mut coefficients = vec![Poly::zero(); degree + 1];
    for (k, c) in f.coefficients(v) {
        *coefficients.get_mut(usize::try_from(k).ok()?)? = c;
    }
    for i in 0..degree {
        for j in (i..degree).rev() {
            budget::spend((a.len() * coefficients[j + 1].len()) as u64);
            coefficients[j] = &coefficients[j] + &(a * &coefficients[j + 1]);
            if coefficients[j].len() > MOST_TERMS {
                return None;
            }
        }
    }
    Some(coefficients)
}

/// The sign of Σ fₖ tᵏ for t > 0 (or t ≥ 0) from those of the fₖ.
fn along(signs: impl Iterator<Item = Sign>, strict: bool) -> Sign {
    let weaken = |(k, sign): (usize, Sign)| match sign {
        Sign::Positive if k > 0 && !strict => Sign::NonNegative,
        Sign::Negative if k > 0 && !strict => Sign::NonPositive,
        other => other,
    };
    signs.enumerate().map(weaken).fold(Sign::Zero, |total, sign| match (total, sign) {
        (Sign::Unknown, _) | (_, Sign::Unknown | Sign::NonZero) => Sign::Unknown,
        (total, sign) => total.plus(sign),
    })
}
