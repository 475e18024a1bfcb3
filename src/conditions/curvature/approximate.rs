//! Elements as formulas in machine numbers, to look for points worth an exact evaluation. Nothing here decides: only the
//! four operations are used, so that the same points are suggested on every machine.

use num_traits::ToPrimitive;
use rustc_hash::FxHashMap;

use crate::algebra::field::Field;
use crate::algebra::generator::{Base, Element, Kind, Role};
use crate::algebra::monomial::Var;
use crate::algebra::number::Rational;

/// Σ c Π slotᵏ.
type Sum = Vec<(f64, Vec<(usize, i32)>)>;

enum Slot {
    Symbol,
    Number(f64),
    Ln(Sum),
    Exp(Sum),
    Root(Sum, u32),
}

/// Several elements, compiled.
pub(super) struct Formulas {
    slots: Vec<Slot>,
    elements: Vec<Sum>,
    /// The symbols that occur, with their slots.
    pub symbols: Vec<(Var, usize)>,
}

impl Formulas {
    /// Compiles; `None` where an element holds a special function.
    pub fn new(field: &Field, elements: &[Element]) -> Option<Formulas> {
        let mut compiler = Compiler { field, known: FxHashMap::default(), slots: Vec::new(), symbols: Vec::new() };
        let elements = elements.iter().map(|e| compiler.sum(&field.current(e))).collect::<Option<_>>()?;
        Some(Formulas { slots: compiler.slots, elements, symbols: compiler.symbols })
    }

    /// The values of the elements, the symbols' values given in the order of [`Formulas::symbols`].
    pub fn values(&self, at: &[f64]) -> Vec<f64> {
        let mut slots = vec![0.0; self.slots.len()];
        for ((_, slot), x) in self.symbols.iter().zip(at) {
            slots[*slot] = *x;
        }
        for at in 0..slots.len() {
            slots[at] = match &self.slots[at] {
                Slot::Symbol => slots[at],
                Slot::Number(x) => *x,
                Slot::Ln(sum) => ln(total(sum, &slots)),
                Slot::Exp(sum) => exp(total(sum, &slots)),
                Slot::Root(sum, 1) => total(sum, &slots),
                Slot::Root(sum, n) => exp(ln(total(sum, &slots)) / f64::from(*n)),
            };
        }
        self.elements.iter().map(|sum| total(sum, &slots)).collect()
    }
}

fn total(sum: &Sum, slots: &[f64]) -> f64 {
    sum.iter().map(|(c, powers)| powers.iter().fold(*c, |x, (slot, k)| x * slots[*slot].powi(*k))).sum()
}

struct Compiler<'f> {
    field: &'f Field,
    known: FxHashMap<Var, usize>,
    slots: Vec<Slot>,
    symbols: Vec<(Var, usize)>,
}

impl Compiler<'_> {
    fn sum(&mut self, e: &Element) -> Option<Sum> {
        let mut sum = Sum::with_capacity(e.len());
        for (monomial, coefficient) in e.terms() {
            let powers = monomial.iter().map(|(v, k)| Some((self.slot(v)?, k))).collect::<Option<_>>()?;
            sum.push((coefficient.to_f64()?, powers));
        }
        Some(sum)
    }

    fn slot(&mut self, v: Var) -> Option<usize> {
        if let Some(known) = self.known.get(&v) {
            return Some(*known);
        }
        let slot = match &*self.field.kind(v) {
            Kind::Symbol(Role::Pi) => Slot::Number(std::f64::consts::PI),
            Kind::Symbol(_) => Slot::Symbol,
            Kind::Ln(Base::Number(n)) => Slot::Number(ln(n.to_f64()?)),
            Kind::Ln(Base::Var(base)) => Slot::Ln(vec![(1.0, vec![(self.slot(*base)?, 1)])]),
            Kind::Ln(Base::Sum(value)) => Slot::Ln(self.sum(value)?),
            Kind::Exp(argument) => Slot::Exp(self.sum(argument)?),
            Kind::Sum { value, root } => Slot::Root(self.sum(value)?, *root),
            Kind::Special(..) => return None,
        };
        let at = self.slots.len();
        if matches!(slot, Slot::Symbol) {
            self.symbols.push((v, at));
        }
        self.slots.push(slot);
        self.known.insert(v, at);
        Some(at)
    }
}

/// ln x, by halving to near 1 and the series of the inverse hyperbolic tangent; NaN unless x > 0.
pub(super) fn ln(x: f64) -> f64 {
    if !(x > 0.0 && x.is_finite()) {
        return f64::NAN;
    }
    let (mut x, mut doublings) = (x, 0.0);
    while x > 1.5 {
        x *= 0.5;
        doublings += 1.0;
    }
    while x < 0.75 {
        x *= 2.0;
        doublings -= 1.0;
    }
    let t = (x - 1.0) / (x + 1.0);
    let square = t * t;
    let series = (0..18).rev().fold(0.0, |s, k| s * square + 1.0 / f64::from(2 * k + 1));
    doublings * std::f64::consts::LN_2 + 2.0 * t * series
}

/// eˣ, by halving and squaring again.
pub(super) fn exp(x: f64) -> f64 {
    if x.is_nan() || x.abs() >= 700.0 {
        return if x < 0.0 { 0.0 } else { f64::NAN };
    }
    let whole = (x / std::f64::consts::LN_2).floor();
    let rest = x - whole * std::f64::consts::LN_2;
    let series = (1..22).rev().fold(1.0, |s, k| 1.0 + s * rest / f64::from(k));
    series * 2.0_f64.powi(whole as i32)
}

/// The largest eigenvalue of a symmetric matrix with rows and columns scaled so that the diagonal is ±1, by Jacobi's
/// rotations; positive exactly where some direction rises. NaN where an entry is no number.
pub(super) fn rise(a: &[f64], n: usize) -> f64 {
    if a.iter().any(|x| !x.is_finite()) {
        return f64::NAN;
    }
    let size = a.iter().fold(0.0_f64, |m, x| m.max(x.abs()));
    if size == 0.0 {
        return 0.0;
    }
    let scale = |i: usize| a[i * n + i].abs().max(size * 1e-14).sqrt();
    largest((0..n * n).map(|k| a[k] / (scale(k / n) * scale(k % n))).collect(), n)
}

/// The largest eigenvalue of a symmetric matrix; 0 where rounding hides its sign.
pub(super) fn largest_eigenvalue(a: &[f64], n: usize) -> f64 {
    let size = a.iter().fold(0.0_f64, |m, x| m.max(x.abs()));
    let found = if size.is_finite() && a.iter().all(|x| x.is_finite()) { largest(a.to_vec(), n) } else { f64::NAN };
    if found.abs() <= 1e-13 * size { 0.0 } else { found }
}

fn largest(mut c: Vec<f64>, n: usize) -> f64 {
    let size: f64 = c.iter().map(|x| x * x).sum();
    for _ in 0..12 {
        let off: f64 = (0..n * n).filter(|k| k / n != k % n).map(|k| c[k] * c[k]).sum();
        if off <= 1e-26 * size {
            break;
        }
        for (p, q) in (0..n).flat_map(|p| (p + 1..n).map(move |q| (p, q))) {
            rotate(&mut c, n, p, q);
        }
    }
    (0..n).map(|i| c[i * n + i]).fold(f64::NEG_INFINITY, f64::max)
}

fn rotate(c: &mut [f64], n: usize, p: usize, q: usize) {
    let off = c[p * n + q];
    if off.abs() < 1e-300 {
        return;
    }
    let theta = (c[q * n + q] - c[p * n + p]) / (2.0 * off);
    let t = theta.signum() / (theta.abs() + (theta * theta + 1.0).sqrt());
    let cos = 1.0 / (t * t + 1.0).sqrt();
    let sin = t * cos;
    for k in 0..n {
        let (x, y) = (c[k * n + p], c[k * n + q]);
        (c[k * n + p], c[k * n + q]) = (cos * x - sin * y, sin * x + cos * y);
    }
    for k in 0..n {
        let (x, y) = (c[p * n + k], c[q * n + k]);
        (c[p * n + k], c[q * n + k]) = (cos * x - sin * y, sin * x + cos * y);
    }
}

/// The fraction with the smallest denominator within a part `slack` of x; x ≠ 0.
pub(super) fn simplest(x: f64, slack: f64) -> Option<Rational> {
    let (negative, x) = (x < 0.0, x.abs());
    if !(x > 1e-250 && x < 1e250) {
        return None;
    }
    if x < 1e-3 {
        let inverse = simplest(1.0 / x, slack)?.recip();
        return Some(if negative { -inverse } else { inverse });
    }
    let (low, high) = (x * (1.0 - slack), x * (1.0 + slack));
    // continued fractions of the two ends agree up to where the simplest number between them is found
    let (mut terms, mut a, mut b) = (Vec::new(), low, high);
    for _ in 0..40 {
        let whole = a.ceil();
        if whole <= b {
            terms.push(whole);
            break;
        }
        terms.push(a.floor());
        (a, b) = (1.0 / (b - a.floor()), 1.0 / (a - a.floor()));
    }
    let integer = |t: &f64| Rational::from_float(*t);
    let mut value = integer(terms.last()?)?;
    for term in terms.iter().rev().skip(1) {
        value = integer(term)? + value.recip();
    }
    Some(if negative { -value } else { value })
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::algebra::number::rational;

    #[test]
    fn logarithms_and_powers_are_those_of_the_library_to_twelve_digits() {
        for x in [1e-9, 0.3, 0.75, 1.0, 1.4999, 2.0, 12345.678] {
            assert!((ln(x) - x.ln()).abs() < 1e-12 * (1.0 + x.ln().abs()));
        }
        for x in [-50.0, -1.0, 0.0, 0.1, 3.0, 100.0_f64] {
            assert!((exp(x) / x.exp() - 1.0).abs() < 1e-12);
        }
    }

    #[test]
    fn the_simplest_fraction_lies_within_the_slack() {
        assert_eq!(simplest(0.3333, 0.01), Some(rational(1, 3)));
        assert_eq!(simplest(-2.02, 0.02), Some(rational(-2, 1)));
    }

    #[test]
    fn a_matrix_rises_exactly_where_an_eigenvalue_is_positive() {
        assert!(rise(&[-1.0, 2.0, 2.0, -1.0], 2) > 0.5);
        assert!(rise(&[-2.0, 1.0, 1.0, -2.0], 2) < -0.1);
        assert!(rise(&[-1.0, 1.0, 1.0, -1.0], 2).abs() < 1e-12);
    }
}
