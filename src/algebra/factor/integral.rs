//! Dense univariate polynomials with integer coefficients, and Hensel lifting to prime powers.

use num_bigint::BigInt;
use num_integer::Integer;
use num_traits::{One, Signed, Zero};

use crate::algebra::budget;
use crate::algebra::modular::Modulus;
use crate::algebra::modular::dense::Dense;
use crate::algebra::number::Int;

/// Coefficients by ascending exponent; the last one is not 0.
pub(super) type Integral = Vec<BigInt>;

pub(super) fn trim(a: &mut Integral) {
    while a.last().is_some_and(Zero::is_zero) {
        a.pop();
    }
}

pub(super) fn product(a: &Integral, b: &Integral) -> Integral {
    if a.is_empty() || b.is_empty() {
        return Vec::new();
    }
    let size = (1 + a[a.len() - 1].bits() / 64) * (1 + b[b.len() - 1].bits() / 64);
    budget::spend((a.len() * b.len()) as u64 * size / 2);
    let mut out = vec![BigInt::zero(); a.len() + b.len() - 1];
    for (i, x) in a.iter().enumerate() {
        for (place, y) in out[i..].iter_mut().zip(b) {
            *place += x * y;
        }
    }
    out
}

fn combination(a: &Integral, b: &Integral, minus: bool) -> Integral {
    let mut out = a.clone();
    out.resize(a.len().max(b.len()), BigInt::zero());
    for (x, y) in out.iter_mut().zip(b) {
        if minus { *x -= y } else { *x += y }
    }
    trim(&mut out);
    out
}

/// Residues of least absolute value.
pub(super) fn symmetric(a: &Integral, modulus: &BigInt) -> Integral {
    let half = modulus >> 1;
    let mut out: Integral = a
        .iter()
        .map(|c| {
            let r = c.mod_floor(modulus);
            if r > half { r - modulus } else { r }
        })
        .collect();
    trim(&mut out);
    out
}

/// Quotient and remainder by a monic polynomial, modulo an integer.
fn div_rem_monic(a: &Integral, b: &Integral, modulus: &BigInt) -> (Integral, Integral) {
    if a.len() < b.len() {
        return (Vec::new(), a.clone());
    }
    budget::spend((b.len() * (a.len() - b.len() + 1)) as u64 * (1 + modulus.bits() / 64));
    let mut rest = a.clone();
    let mut quotient = vec![BigInt::zero(); a.len() - b.len() + 1];
    for i in (0..quotient.len()).rev() {
        let q = rest[i + b.len() - 1].mod_floor(modulus);
        if !q.is_zero() {
            for (place, y) in rest[i..].iter_mut().zip(b) {
                *place -= &q * y;
            }
        }
        quotient[i] = q;
    }
    rest.truncate(b.len() - 1);
    (symmetric(&quotient, modulus), symmetric(&rest, modulus))
}

/// a / b when it is exact over the integers.
pub(super) fn exact_quotient(a: &Integral, b: &Integral) -> Option<Integral> {
    let lead = b.last()?;
    if a.len() < b.len() {
        return None;
    }
    let mut rest = a.clone();
    let mut quotient = vec![BigInt::zero(); a.len() - b.len() + 1];
    for i in (0..quotient.len()).rev() {
        budget::spend(b.len() as u64);
        let (q, r) = rest[i + b.len() - 1].div_rem(lead);
        if !r.is_zero() {
            return None;
        }
        for (place, y) in rest[i..].iter_mut().zip(b) {
            *place -= &q * y;
        }
        quotient[i] = q;
    }
    rest.iter().all(Zero::is_zero).then_some(quotient)
}

/// Divided by the gcd of the coefficients, leading coefficient positive.
pub(super) fn primitive(a: &Integral) -> Integral {
    let mut content = a.iter().fold(BigInt::zero(), |g, c| if g.is_one() { g } else { g.gcd(c) });
    if a.last().is_some_and(Signed::is_negative) {
        content = -content;
    }
    if content.is_zero() || content.is_one() { a.clone() } else { a.iter().map(|c| c / &content).collect() }
}

/// The integers of least absolute value with the given residues.
pub(super) fn from_dense(m: &Modulus, a: &Dense) -> Integral {
    a.iter().map(|&c| BigInt::from(m.symmetric(c))).collect()
}

/// The residues modulo a prime.
pub(super) fn to_dense(m: &Modulus, a: &Integral) -> Dense {
    let mut out: Dense = a.iter().map(|c| m.residue(&Int::from(c))).collect();
    crate::algebra::modular::dense::trim(&mut out);
    out
}

/// Lifts f ≡ lc(f)·Π factors (monic, pairwise coprime modulo p) to monic factors modulo `target`, a power p^(2^k).
/// None when the factors are not coprime.
pub(super) fn hensel_lift(m: &Modulus, f: &Integral, factors: &[Dense], target: &BigInt) -> Option<Vec<Integral>> {
    let Some(lead) = f.last() else { return Some(Vec::new()) };
    if factors.len() == 1 {
        let inverse = lead.modinv(target)?;
        let monic: Integral = f.iter().map(|c| c * &inverse).collect();
        return Some(vec![symmetric(&monic, target)]);
    }
    let (left, right) = factors.split_at(factors.len() / 2);
    let whole = |list: &[Dense]| list.iter().fold(vec![m.one()], |all, g| m.product(&all, g));
    let g = m.multiple(&whole(left), m.residue(&Int::from(lead)));
    let h = whole(right);
    let (s, t) = m.bezout(&g, &h)?;
    let mut pair = Pair { g: from_dense(m, &g), h: from_dense(m, &h), s: from_dense(m, &s), t: from_dense(m, &t) };
    let mut modulus = BigInt::from(m.prime());
    while &modulus < target {
        modulus = &modulus * &modulus;
        pair.step(f, &modulus);
    }
    let mut lifted = hensel_lift(m, &pair.g, left, target)?;
    lifted.extend(hensel_lift(m, &pair.h, right, target)?);
    Some(lifted)
}

/// f ≡ g·h and s·g + t·h ≡ 1, with h monic.
struct Pair {
    g: Integral,
    h: Integral,
    s: Integral,
    t: Integral,
}

impl Pair {
    /// One quadratic Hensel step to the squared modulus (von zur Gathen and Gerhard, algorithm 15.10).
    fn step(&mut self, f: &Integral, modulus: &BigInt) {
        let gap = symmetric(&combination(f, &product(&self.g, &self.h), true), modulus);
        let (q, r) = div_rem_monic(&product(&self.s, &gap), &self.h, modulus);
        let correction = combination(&product(&self.t, &gap), &product(&q, &self.g), false);
        self.g = symmetric(&combination(&self.g, &correction, false), modulus);
        self.h = symmetric(&combination(&self.h, &r, false), modulus);
        let unit = combination(&product(&self.s, &self.g), &product(&self.t, &self.h), false);
        let gap = symmetric(&combination(&unit, &vec![BigInt::one()], true), modulus);
        let (q, r) = div_rem_monic(&product(&self.s, &gap), &self.h, modulus);
        self.s = symmetric(&combination(&self.s, &r, true), modulus);
        let correction = combination(&product(&self.t, &gap), &product(&q, &self.g), false);
        self.t = symmetric(&combination(&self.t, &correction, true), modulus);
    }
}
