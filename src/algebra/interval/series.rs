//! Power series with positive terms, summed twice: once rounded down, once rounded up.

use super::dyadic::{Dyadic, Toward};
use super::enclosure::Interval;
use crate::algebra::budget;
use num_bigint::BigInt;
use num_traits::One;

/// The series `Σ t_n/w(n)` with `t_0 = 1`, `t_{n+1} = t_n·u/d(n)`, where `u ≥ 0` and `d ≥ 1`, `w ≥ 1` do not decrease.
pub(super) struct PositiveSeries<'a> {
    /// The argument `u`.
    pub u: &'a Dyadic,
    /// The divisor `d(n)` between one term and the next.
    pub step: fn(u64) -> u64,
    /// The divisor `w(n)` of a summand.
    pub weight: fn(u64) -> u64,
}

/// Lower and upper bounds in units of a common power of two.
#[derive(Clone)]
struct Bounds {
    lo: BigInt,
    hi: BigInt,
}

impl Bounds {
    fn zero() -> Bounds {
        Bounds { lo: BigInt::ZERO, hi: BigInt::ZERO }
    }

    fn divided(&self, n: u64) -> Bounds {
        Bounds { lo: &self.lo / n, hi: (&self.hi + (n - 1)) / n }
    }

    fn add(&mut self, other: &Bounds) {
        self.lo += &other.lo;
        self.hi += &other.hi;
    }

    fn coarser(&mut self, places: u32) {
        self.lo >>= places;
        self.hi >>= places;
        self.hi += 1;
    }
}

impl PositiveSeries<'_> {
    /// Encloses the sums over even and over odd `n`, at relative precision about `bits` of the larger one.
    ///
    /// Terms are kept in fixed point; when they outgrow twice the places, everything moves to a coarser unit. Adding
    /// stops after a term `t` with `u ≤ d/2` from there on and `t` below the last place: what is left out is at most
    /// `t·(1/2 + 1/4 + …) = t`, which is added to both upper bounds.
    pub fn by_parity(&self, bits: u32) -> [Interval; 2] {
        let places = bits.max(16) + 16;
        let u = Bounds {
            lo: self.u.to_fixed(i64::from(places), Toward::Down),
            hi: self.u.to_fixed(i64::from(places), Toward::Up),
        };
        let one = BigInt::one() << places;
        let mut exponent = -i64::from(places);
        let mut term = Bounds { lo: one.clone(), hi: one };
        let mut sums = [Bounds::zero(), Bounds::zero()];
        let mut n = 0u64;
        loop {
            budget::spend(1);
            sums[usize::from(n % 2 == 1)].add(&term.divided((self.weight)(n)));
            let divisor = (self.step)(n);
            let settled = (&u.hi << 1) <= (BigInt::from(divisor) << places);
            let last_place = sums[0].lo.bits().saturating_sub(u64::from(places));
            if settled && term.hi.bits() <= last_place.max(1) {
                break;
            }
            let product = Bounds { lo: (&term.lo * &u.lo) >> places, hi: ((&term.hi * &u.hi) >> places) + 1 };
            term = product.divided(divisor);
            n += 1;
            if term.hi.bits() > 2 * u64::from(places) {
                term.coarser(places);
                sums.iter_mut().for_each(|sum| sum.coarser(places));
                exponent += i64::from(places);
            }
        }
        sums.map(|sum| {
            Interval::between(Dyadic::new(sum.lo, exponent), Dyadic::new(sum.hi + &term.hi, exponent), bits + 8)
        })
    }

    /// Encloses the whole sum.
    pub fn sum(&self, bits: u32) -> Interval {
        let [even, odd] = self.by_parity(bits);
        even.add(&odd)
    }
}
