//! Sparse Laurent monomials in up to 2^18 variables, with exponents from −8191 to 8191.

use std::cmp::Ordering;
use std::fmt;

use smallvec::SmallVec;

use crate::algebra::budget::{self, Stopped};

const EXPONENT_BITS: u32 = 13;
const MAX_EXPONENT: i32 = (1 << EXPONENT_BITS) - 1;
const MAX_VAR: u32 = (1 << (31 - EXPONENT_BITS)) - 1;

/// Where an absent factor stands in the order of the packed factors.
const ABSENT: u32 = 1 << 31;

/// A variable of the polynomial ring.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub struct Var(u32);

impl Var {
    /// The variable number `index`, below 2^18 (larger indices end the computation with [`Stopped::Size`]).
    pub fn new(index: u32) -> Var {
        if index > MAX_VAR {
            budget::stop(Stopped::Size);
        }
        Var(index)
    }

    /// The number of the variable.
    pub fn index(self) -> usize {
        self.0 as usize
    }
}

/// One packed factor v^e: the sign of e, 18 bits for v, 13 bits for |e|; for e < 0 the negative of the word for v^−e.
/// Words compare like the factors they stand for: the order of monomials is the plain order of their words.
#[inline]
fn pack(v: Var, e: i32) -> u32 {
    if e.unsigned_abs() > MAX_EXPONENT as u32 {
        budget::stop(Stopped::Size);
    }
    let positive = ABSENT | ((MAX_VAR - v.0) << EXPONENT_BITS) | e.unsigned_abs();
    if e < 0 { positive.wrapping_neg() } else { positive }
}

/// All ones for a positive exponent, else 0.
#[inline]
fn sign_mask(packed: u32) -> u32 {
    ((packed as i32) >> 31) as u32
}

#[inline]
fn var_bits(packed: u32) -> u32 {
    ((packed ^ sign_mask(packed)) >> EXPONENT_BITS) & MAX_VAR
}

#[inline]
fn exponent_of(packed: u32) -> i32 {
    (packed & MAX_EXPONENT as u32) as i32 - (!sign_mask(packed) & (1 << EXPONENT_BITS)) as i32
}

#[inline]
fn unpack(packed: u32) -> (Var, i32) {
    (Var(var_bits(packed)), exponent_of(packed))
}

type Factors = SmallVec<[u32; 6]>;

/// A product of variables with non-zero integer exponents.
///
/// The order is lexicographic (the variable of smallest index decides first, an absent variable has exponent 0) and
/// compatible with multiplication: a < b ⇔ a·c < b·c, also for negative exponents.
#[derive(Clone, PartialEq, Eq, Hash, Default)]
pub struct Monomial(Factors);

impl Monomial {
    /// The empty product.
    #[inline]
    pub fn one() -> Monomial {
        Monomial(Factors::new())
    }

    /// v^e.
    pub fn power(v: Var, e: i32) -> Monomial {
        let mut factors = Factors::new();
        if e != 0 {
            factors.push(pack(v, e));
        }
        Monomial(factors)
    }

    /// The product of the given powers, in any order and with repetitions.
    pub fn from_pairs(pairs: impl IntoIterator<Item = (Var, i32)>) -> Monomial {
        let mut list: SmallVec<[(Var, i32); 8]> = pairs.into_iter().collect();
        list.sort_unstable_by_key(|&(v, _)| v);
        let mut factors = Factors::with_capacity(list.len());
        let mut rest = &list[..];
        while let Some(&(v, _)) = rest.first() {
            let run = rest.iter().take_while(|&&(w, _)| w == v).count();
            let e = rest[..run].iter().fold(0i32, |sum, &(_, e)| sum.saturating_add(e));
            if e != 0 {
                factors.push(pack(v, e));
            }
            rest = &rest[run..];
        }
        Monomial(factors)
    }

    /// Whether this is the empty product.
    #[inline]
    pub fn is_one(&self) -> bool {
        self.0.is_empty()
    }

    /// The exponent of `v`, 0 when it is absent.
    pub fn exponent(&self, v: Var) -> i32 {
        let found = self.0.iter().find(|&&f| var_bits(f) >= v.0);
        found.filter(|&&f| var_bits(f) == v.0).map_or(0, |&f| exponent_of(f))
    }

    /// The factors by increasing variable.
    #[inline]
    pub fn iter(&self) -> impl DoubleEndedIterator<Item = (Var, i32)> + ExactSizeIterator + '_ {
        self.0.iter().map(|&f| unpack(f))
    }

    /// The number of variables present.
    #[inline]
    pub fn len(&self) -> usize {
        self.0.len()
    }

    /// Whether no variable is present (the same as [`Monomial::is_one`]).
    #[inline]
    pub fn is_empty(&self) -> bool {
        self.0.is_empty()
    }

    /// self · other.
    #[inline]
    pub fn mul(&self, other: &Monomial) -> Monomial {
        self.merge(other, |b| b)
    }

    /// self / other.
    pub fn div(&self, other: &Monomial) -> Monomial {
        self.merge(other, u32::wrapping_neg)
    }

    /// self · (the factors of other passed through `map`, which keeps variables).
    #[inline]
    fn merge(&self, other: &Monomial, map: impl Fn(u32) -> u32) -> Monomial {
        const STACK: usize = 16;
        let (a, b) = (&self.0[..], &other.0[..]);
        if a.len() + b.len() <= STACK {
            let mut buffer = [0u32; STACK];
            let n = merge_into(a, b, map, &mut buffer);
            return Monomial(Factors::from_slice(&buffer[..n]));
        }
        let mut buffer = vec![0u32; a.len() + b.len()];
        let n = merge_into(a, b, map, &mut buffer);
        Monomial(Factors::from_slice(&buffer[..n]))
    }

    /// self^e.
    pub fn pow(&self, e: i32) -> Monomial {
        if e == 0 {
            return Monomial::one();
        }
        Monomial(self.iter().map(|(v, k)| pack(v, k.saturating_mul(e))).collect())
    }

    /// 1 / self.
    pub fn inverse(&self) -> Monomial {
        self.pow(-1)
    }

    /// self with the variable `v` left out.
    pub fn without(&self, v: Var) -> Monomial {
        Monomial(self.0.iter().copied().filter(|&f| var_bits(f) != v.0).collect())
    }

    /// The factors whose variable is picked, and the others.
    pub fn split(&self, mut pick: impl FnMut(Var) -> bool) -> (Monomial, Monomial) {
        let (mut picked, mut rest) = (Factors::new(), Factors::new());
        for &f in &self.0 {
            if pick(Var(var_bits(f))) { picked.push(f) } else { rest.push(f) }
        }
        (Monomial(picked), Monomial(rest))
    }

    /// The componentwise minimum of the exponents, where an absent variable counts as 0.
    pub fn meet(&self, other: &Monomial) -> Monomial {
        self.pairwise(other, i32::min)
    }

    /// The componentwise maximum of the exponents, where an absent variable counts as 0.
    pub fn join(&self, other: &Monomial) -> Monomial {
        self.pairwise(other, i32::max)
    }

    fn pairwise(&self, other: &Monomial, choose: impl Fn(i32, i32) -> i32) -> Monomial {
        let mut factors = Factors::new();
        let (mut a, mut b) = (self.0.iter().peekable(), other.0.iter().peekable());
        loop {
            let v = match (a.peek(), b.peek()) {
                (None, None) => return Monomial(factors),
                (Some(&&f), None) | (None, Some(&&f)) => var_bits(f),
                (Some(&&f), Some(&&g)) => var_bits(f).min(var_bits(g)),
            };
            let left = a.next_if(|&&f| var_bits(f) == v).map_or(0, |&f| exponent_of(f));
            let right = b.next_if(|&&g| var_bits(g) == v).map_or(0, |&g| exponent_of(g));
            let e = choose(left, right);
            if e != 0 {
                factors.push(pack(Var(v), e));
            }
        }
    }

    /// Whether no exponent is negative.
    pub fn is_polynomial(&self) -> bool {
        self.0.iter().all(|&f| f > ABSENT)
    }

    /// Whether self / other has no negative exponent.
    pub fn is_divisible_by(&self, other: &Monomial) -> bool {
        other.is_below(self)
    }

    /// Whether no exponent is greater than in `other`, where an absent variable counts as 0.
    pub(crate) fn is_below(&self, other: &Monomial) -> bool {
        let (a, b) = (&self.0[..], &other.0[..]);
        let (mut i, mut j) = (0, 0);
        while i < a.len() && j < b.len() {
            let (v, w) = (var_bits(a[i]), var_bits(b[j]));
            let (left, right) =
                (if v <= w { exponent_of(a[i]) } else { 0 }, if w <= v { exponent_of(b[j]) } else { 0 });
            if left > right {
                return false;
            }
            i += usize::from(v <= w);
            j += usize::from(w <= v);
        }
        a[i..].iter().all(|&f| f < ABSENT) && b[j..].iter().all(|&f| f > ABSENT)
    }

    /// The sum of the exponents.
    pub fn total_degree(&self) -> i64 {
        self.iter().map(|(_, e)| i64::from(e)).sum()
    }

    /// The variables present, increasing.
    pub fn vars(&self) -> Vec<Var> {
        self.iter().map(|(v, _)| v).collect()
    }

    /// The monomial with every variable renamed (two variables may fall together).
    pub fn map_vars(&self, mut rename: impl FnMut(Var) -> Var) -> Monomial {
        Monomial::from_pairs(self.iter().map(|(v, e)| (rename(v), e)))
    }

    /// The packed factors, one word each; a key for tables of powers.
    #[inline]
    pub(crate) fn packed(&self) -> &[u32] {
        &self.0
    }
}

/// Writes the product of two factor lists to `out` and returns its length.
#[inline]
fn merge_into(a: &[u32], b: &[u32], map: impl Fn(u32) -> u32, out: &mut [u32]) -> usize {
    let (mut i, mut j, mut n) = (0, 0, 0);
    while i < a.len() && j < b.len() {
        match var_bits(a[i]).cmp(&var_bits(b[j])) {
            Ordering::Less => {
                out[n] = a[i];
                i += 1;
                n += 1;
            }
            Ordering::Greater => {
                out[n] = map(b[j]);
                j += 1;
                n += 1;
            }
            Ordering::Equal => {
                let e = exponent_of(a[i]) + exponent_of(map(b[j]));
                if e != 0 {
                    out[n] = pack(Var(var_bits(a[i])), e);
                    n += 1;
                }
                i += 1;
                j += 1;
            }
        }
    }
    for &f in &a[i..] {
        out[n] = f;
        n += 1;
    }
    for &f in &b[j..] {
        out[n] = map(f);
        n += 1;
    }
    n
}

impl PartialOrd for Monomial {
    #[inline]
    fn partial_cmp(&self, other: &Monomial) -> Option<Ordering> {
        Some(self.cmp(other))
    }
}

impl Ord for Monomial {
    #[inline]
    fn cmp(&self, other: &Monomial) -> Ordering {
        let (a, b) = (&self.0[..], &other.0[..]);
        let common = a.len().min(b.len());
        for (f, g) in a[..common].iter().zip(&b[..common]) {
            if f != g {
                return f.cmp(g);
            }
        }
        let next = |words: &[u32]| words.get(common).copied().unwrap_or(ABSENT);
        next(a).cmp(&next(b))
    }
}

impl fmt::Debug for Monomial {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        if self.is_one() {
            return f.write_str("1");
        }
        for (k, (v, e)) in self.iter().enumerate() {
            let times = if k > 0 { "·" } else { "" };
            write!(f, "{times}x{}", v.0)?;
            if e != 1 {
                write!(f, "^{e}")?;
            }
        }
        Ok(())
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn m(pairs: &[(u32, i32)]) -> Monomial {
        Monomial::from_pairs(pairs.iter().map(|&(v, e)| (Var::new(v), e)))
    }

    #[test]
    fn products_cancel_and_stay_sorted() {
        let (a, b) = (m(&[(5, 2), (1, -3)]), m(&[(1, 3), (2, 1)]));
        assert_eq!(a.mul(&b), m(&[(2, 1), (5, 2)]));
        assert_eq!(a.mul(&b).div(&b), a);
        assert_eq!(a.meet(&b), m(&[(1, -3)]));
        assert_eq!(a.join(&b), m(&[(1, 3), (2, 1), (5, 2)]));
        assert_eq!(a.split(|v| v.index() == 5), (m(&[(5, 2)]), m(&[(1, -3)])));
        assert_eq!((a.exponent(Var::new(1)), a.exponent(Var::new(3))), (-3, 0));
    }

    #[test]
    fn the_smallest_variable_decides_the_order() {
        assert!(m(&[(0, 1)]) > m(&[(1, 9)]));
        assert!(m(&[(0, -1), (1, 9)]) < Monomial::one());
        assert!(m(&[(2, -1)]) > m(&[(1, -1)]));
        assert!(m(&[(0, 1), (1, 1)]) > m(&[(0, 1)]));
    }

    #[test]
    fn an_exponent_out_of_range_ends_the_computation() {
        let big = m(&[(3, 8191)]);
        assert_eq!(budget::attempt(10, || big.mul(&m(&[(3, 1)]))), Err(Stopped::Size));
        assert_eq!(budget::attempt(10, || Var::new(1 << 18)), Err(Stopped::Size));
    }
}
