//! Signs by squares: a α² − b αβ + c β² is positive where b² < 4ac and the squares are.

use num_traits::Signed;

use super::field::Field;
use super::monomial::Monomial;
use super::number::{Rational, rational};
use super::polynomial::Poly;
use super::sign_rules::Sign;

/// The longest polynomial that is looked at.
const MOST_TERMS: usize = 24;

impl Field {
    /// `Positive` where every term that may be negative is dominated by the product of two terms that are not.
    pub(super) fn square_sign(&self, f: &Poly) -> Sign {
        if f.len() < 3 || f.len() > MOST_TERMS {
            return Sign::Unknown;
        }
        let (mut certain, mut doubtful) = (Vec::new(), Vec::new());
        for (monomial, coefficient) in f.terms() {
            let sign = self.sign(&Poly::term(&coefficient, monomial.clone()));
            if sign == Sign::Positive {
                certain.push((monomial.clone(), coefficient));
            } else {
                doubtful.push((monomial.clone(), coefficient));
            }
        }
        let covered = doubtful.iter().all(|(m, b)| dominate(m, b, &mut certain));
        if covered && certain.iter().any(|(_, left)| left.is_positive()) { Sign::Positive } else { Sign::Unknown }
    }
}

/// Takes what b·m needs from two terms whose product is m²: b²/(4a) from the second for all, a, of the first.
fn dominate(m: &Monomial, b: &Rational, certain: &mut [(Monomial, Rational)]) -> bool {
    let square = m.pow(2);
    for i in 0..certain.len() {
        let other = square.div(&certain[i].0);
        let Some(j) = certain.iter().position(|(n, _)| *n == other).filter(|j| *j != i) else { continue };
        let (a, c) = (certain[i].1.clone(), certain[j].1.clone());
        if !a.is_positive() || !c.is_positive() {
            continue;
        }
        let need = b * b / (&a * rational(4, 1));
        if need <= c {
            certain[i].1 = rational(0, 1);
            certain[j].1 = c - need;
            return true;
        }
    }
    false
}
