//! Non-zero elements recognised quickly: their values at points of a prime field.

use rustc_hash::FxHashMap;

use super::field::Field;
use super::generator::{Element, Kind};
use super::monomial::Var;

/// A safe prime, PRIME = 2q + 1 with q prime, modulo which 2, 3, 5, 7, 11 and 13 are squares.
const PRIME: u64 = 2_305_843_009_213_655_999;
/// How many points are looked at before it is left open.
const POINTS: u64 = 8;

impl Field {
    /// Whether the element is non-zero at some point of a prime field, its free variables chosen at will: then it is
    /// not the zero of the field. Inconclusive (`false`) where no such point is found.
    pub(super) fn is_visibly_nonzero(&self, e: &Element) -> bool {
        for salt in 0..POINTS {
            let mut point = ModularPoint { salt, values: FxHashMap::default(), has_roots: false };
            match self.residue(e, &mut point) {
                Some(value) => return value != 0,
                None if !point.has_roots => return false,
                // another point may have the roots
                None => {}
            }
        }
        false
    }

    fn residue(&self, e: &Element, point: &mut ModularPoint) -> Option<u64> {
        for var in e.vars() {
            if point.values.contains_key(&var) {
                continue;
            }
            let value = match &*self.kind(var) {
                Kind::Sum { value, root } => {
                    point.has_roots |= *root > 1;
                    let value = self.current(value);
                    principal_root(self.residue(&value, point)?, *root)?
                }
                _ => scatter(var, point.salt),
            };
            point.values.insert(var, value);
        }
        let mut missing = false;
        let result = e.eval_mod(PRIME, &mut |var| {
            point.values.get(&var).copied().unwrap_or_else(|| {
                missing = true;
                1
            })
        });
        if missing { None } else { result }
    }
}

/// Values of variables in the prime field.
struct ModularPoint {
    salt: u64,
    values: FxHashMap<Var, u64>,
    has_roots: bool,
}

/// The root that is itself a square, if the value is one. The squares other than zero are a group of the odd prime order
/// q = (PRIME − 1)/2, in which every root below q exists once.
fn principal_root(value: u64, root: u32) -> Option<u64> {
    if root == 1 {
        return Some(value);
    }
    let order = (PRIME - 1) / 2;
    let inverse = power_mod(u64::from(root), order - 2, order);
    (power_mod(value, order, PRIME) == 1).then(|| power_mod(value, inverse, PRIME))
}

fn power_mod(base: u64, mut exponent: u64, modulus: u64) -> u64 {
    let times = |a: u64, b: u64| (u128::from(a) * u128::from(b) % u128::from(modulus)) as u64;
    let (mut square, mut product) = (base % modulus, 1);
    while exponent > 0 {
        if exponent & 1 == 1 {
            product = times(product, square);
        }
        square = times(square, square);
        exponent >>= 1;
    }
    product
}

/// A fixed, well-spread residue for each variable.
fn scatter(var: Var, salt: u64) -> u64 {
    let mut x = (var.index() as u64 + 1 + (salt << 32)).wrapping_mul(0x9E37_79B9_7F4A_7C15);
    x ^= x >> 31;
    x = x.wrapping_mul(0xBF58_476D_1CE4_E5B9);
    (x ^ (x >> 29)) % (PRIME - 2) + 1
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn roots_are_roots_and_only_of_squares() {
        for root in [2u32, 3, 4, 6, 12] {
            let found: Vec<u64> = (2..40)
                .filter_map(|v| principal_root(v, root).map(|r| (v, r)))
                .map(|(v, r)| {
                    assert_eq!(power_mod(r, u64::from(root), PRIME), v);
                    v
                })
                .collect();
            assert!([2, 3, 5, 6, 7, 15].iter().all(|v| found.contains(v)), "{root}: {found:?}");
            assert!(found.len() < 38);
        }
    }
}
