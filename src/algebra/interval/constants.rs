//! ln 2, π and Euler's γ in fixed point, kept between calls.

use super::dyadic::Dyadic;
use super::enclosure::Interval;
use crate::algebra::budget;
use num_bigint::BigInt;
use num_traits::One;
use std::cell::RefCell;

/// The constants that are kept.
#[derive(Clone, Copy)]
pub(super) enum Constant {
    Ln2,
    Pi,
    Gamma,
}

/// A value `v` at `places` binary places, with `v ≤ c·2^places ≤ v + 2`.
struct Kept {
    places: u32,
    value: BigInt,
}

thread_local! {
    static KEPT: RefCell<[Option<Kept>; 3]> = const { RefCell::new([None, None, None]) };
}

/// An integer `v` with `v ≤ c·2^places ≤ v + 2`. A kept value at more places is cut: if `w ≤ c·2^(places+s) ≤ w + 2`
/// and `v = ⌊w/2^s⌋` with `s ≥ 1`, then `c·2^places < v + 1 + 2/2^s ≤ v + 2`.
pub(super) fn fixed(constant: Constant, places: u32) -> BigInt {
    // The same charge whether or not the value is kept, so that the work does not depend on what ran before.
    budget::spend(u64::from(places / 8));
    let slot = constant as usize;
    let cut = |kept: &Kept| (kept.places >= places).then(|| &kept.value >> (kept.places - places));
    if let Some(value) = KEPT.with_borrow(|all| all[slot].as_ref().and_then(cut)) {
        return value;
    }
    let generous = places.saturating_add(64).next_multiple_of(128);
    let value = match constant {
        Constant::Ln2 => compute_ln2(generous),
        Constant::Pi => compute_pi(generous),
        Constant::Gamma => compute_gamma(generous),
    };
    let result = &value >> (generous - places);
    KEPT.with_borrow_mut(|all| all[slot] = Some(Kept { places: generous, value }));
    result
}

/// Encloses the constant with the given precision.
pub(super) fn enclosed(constant: Constant, bits: u32) -> Interval {
    let places = bits.saturating_add(4);
    let value = fixed(constant, places);
    let exponent = -i64::from(places);
    Interval::between(Dyadic::new(value.clone(), exponent), Dyadic::new(value + 2, exponent), bits)
}

impl Interval {
    /// π by Machin's formula `16·arctan(1/5) − 4·arctan(1/239)`, alternating series cut below the last place.
    pub fn pi(bits: u32) -> Interval {
        enclosed(Constant::Pi, bits)
    }

    /// ln 2 as `18·artanh(1/26) − 2·artanh(1/4801) + 8·artanh(1/8749)`.
    pub fn ln2(bits: u32) -> Interval {
        enclosed(Constant::Ln2, bits)
    }

    /// Euler's constant γ by the method of Brent and McMillan.
    pub fn euler_gamma(bits: u32) -> Interval {
        enclosed(Constant::Gamma, bits)
    }
}

/// Guard places that hold an error of a few hundred units per term of a series of at most `places` terms.
fn guarded(places: u32) -> u32 {
    places + 12 + (u32::BITS - places.leading_zeros())
}

/// `Σ ±1/((2j+1)·q^(2j+1))` in units of `2^−places`, with all signs plus (artanh 1/q) or alternating (arctan 1/q), and
/// a bound on the error in units: each of the `n` terms is cut twice, losing less than 3 units, and the first term that
/// is cut to zero bounds the remainder by 3 more.
fn inverse_series(q: u32, places: u32, alternating: bool) -> (BigInt, u64) {
    let square = u64::from(q) * u64::from(q);
    let mut power = (BigInt::one() << places) / q;
    let mut sum = BigInt::ZERO;
    let mut n = 0u64;
    while power > BigInt::ZERO {
        let term = &power / (2 * n + 1);
        if alternating && n % 2 == 1 {
            sum -= term;
        } else {
            sum += term;
        }
        power /= square;
        n += 1;
    }
    (sum, 3 * n + 3)
}

/// Cuts `sum`, known to `± error` in units of `2^−(places + guard)`, to the kept form.
fn cut_to(sum: BigInt, error: u64, guard: u32) -> BigInt {
    (sum - error) >> guard
}

fn compute_ln2(places: u32) -> BigInt {
    let working = guarded(places);
    let (a, error_a) = inverse_series(26, working, false);
    let (b, error_b) = inverse_series(4801, working, false);
    let (c, error_c) = inverse_series(8749, working, false);
    cut_to(a * 18 - b * 2 + c * 8, 18 * error_a + 2 * error_b + 8 * error_c, working - places)
}

fn compute_pi(places: u32) -> BigInt {
    let working = guarded(places);
    let (a, error_a) = inverse_series(5, working, true);
    let (b, error_b) = inverse_series(239, working, true);
    cut_to(a * 16 - b * 4, 16 * error_a + 4 * error_b, working - places)
}

/// γ = S/I − ln n − K₀(2n)/I₀(2n), where `I = I₀(2n) = Σ (n^k/k!)²` and `S = Σ H_k (n^k/k!)²` (Brent and McMillan 1980,
/// *Math. Comp.* 34). From `cosh t ≥ 1 + t²/2`, `0 < K₀(2n) ≤ e^(−2n)·√(π/4n) < e^(−2n)`; and `e^(−2n) < 2^(−2n·1.442)`.
/// With n a power of two, `ln n` is a multiple of ln 2. Both sums are formed twice, rounded down and up. The sums stop
/// after k ≥ 2n, where terms of `S` shrink at least by half, so the last term counted twice bounds what is left out.
fn compute_gamma(places: u32) -> BigInt {
    let mut guard = guarded(places) - places;
    loop {
        let (lo, hi) = gamma_bounds(places + guard);
        if hi - &lo <= BigInt::one() << guard {
            return lo >> guard;
        }
        guard *= 2;
    }
}

/// Bounds on γ in units of `2^−places`.
fn gamma_bounds(places: u32) -> (BigInt, BigInt) {
    // The correction has relative size about e^(−4n) < 2^(−5n).
    let n = u64::from(places / 5 + 1).next_power_of_two();
    let [i, s] = brent_mcmillan_sums(n, places);
    let quotient_lo = (s.0 << places) / &i.1;
    let quotient_hi = (s.1 << places) / &i.0 + 1;
    // K₀/I₀ in units, where I₀ is i.0/2^places: 2^places·2^−d·2^places/i.0.
    let correction = (BigInt::one() << (2 * places) >> (2 * n * 1442 / 1000)) / i.0 + 1;
    let ln2 = fixed(Constant::Ln2, places);
    let doublings = n.trailing_zeros();
    (quotient_lo - (&ln2 + 2) * doublings - correction, quotient_hi - ln2 * doublings)
}

/// Lower and upper bounds on `I` and `S` in units of `2^−places`.
fn brent_mcmillan_sums(n: u64, places: u32) -> [(BigInt, BigInt); 2] {
    let one = BigInt::one() << places;
    let (mut term, mut harmonic) = ((one.clone(), one.clone()), BigInt::ZERO);
    let (mut i, mut s) = ((one.clone(), one.clone()), (BigInt::ZERO, BigInt::ZERO));
    let mut k = 0u64;
    while k < 2 * n || term.1 > BigInt::one() {
        k += 1;
        term = (term.0 * (n * n) / (k * k), term.1 * (n * n) / (k * k) + 1);
        harmonic += &one / k;
        i.0 += &term.0;
        i.1 += &term.1;
        s.0 += (&term.0 * &harmonic) >> places;
        s.1 += ((&term.1 * (&harmonic + k)) >> places) + 1;
    }
    let left_out = ((&term.1 * (harmonic + k)) >> (places - 1)) + 2;
    i.1 += &left_out;
    s.1 += left_out;
    [i, s]
}
