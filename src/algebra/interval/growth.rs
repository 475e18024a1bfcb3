//! Integrals of `e^s·s^(−α)` far out, where their power series are slow.

use super::dyadic::Dyadic;
use super::enclosure::Interval;
use crate::algebra::budget;

/// Which integral: its exponent α.
#[derive(Clone, Copy)]
pub(super) enum Growth {
    /// `G(u) = Ei(u)`, α = 1.
    One,
    /// `G(u) = ∫₀ᵘ e^s·s^(−1/2) ds`, α = 1/2.
    Half,
}

/// Encloses `G(u)` for large `u` by its asymptotic series; `None` where that does not reach the precision.
///
/// Let `F(u) = e^u·u^(−α)·Σ_{k<n} (α)_k·u^(−k)` with rising factorials `(α)_k ≤ k!`. Differentiating term by term,
/// `(G − F)' = (α)_n·e^u·u^(−α−n)`, so `G(u) = F(u) + G(1) − F(1) + (α)_n·∫₁ᵘ e^s·s^(−α−n) ds`. For n ≥ 3 the sum
/// `Σ_{k<n} k!` is at most `n!`, thus `0 ≤ F(1) ≤ e·n! < 3·n!`; and `0 < G(1) < 6` in both cases. The integrand falls, then
/// rises, so it is at most the larger of its ends: below `3 + e^u·u^(−n)` for `u ≥ 1`. Hence
/// `−3·n! ≤ G(u) − F(u) ≤ 6 + u·n!·(3 + e^u·u^(−n))`.
pub(super) fn asymptotic(growth: Growth, u: &Dyadic, bits: u32) -> Option<Interval> {
    if *u < Dyadic::from(2 * i64::from(bits) + 32) {
        return None;
    }
    let working = bits.saturating_add(16);
    let at = Interval::point(u, working);
    // An argument below 2^20 passes 20 bits of relative precision on to its exponential.
    let power = Interval::point(u, working.saturating_add(24)).exp()?;
    let target = -i64::from(bits) - 8 - 2 * u.top();
    let (mut sum, mut term) = (Interval::one(working), Interval::one(working));
    // k!/u^k, which bounds the term and scales the remainder.
    let mut ratio = Interval::one(working);
    let mut n = 0i64;
    while n < 3 || ratio.hi().top() > target {
        budget::spend(4);
        let (numerator, halves) = match growth {
            Growth::One => (n + 1, 0),
            Growth::Half => (2 * n + 1, 1),
        };
        ratio = ratio.mul(&whole(n + 1, working)).div(&at)?;
        term = term.mul(&whole(numerator, working).scaled(-halves)).div(&at)?;
        n += 1;
        if Dyadic::from(n) >= *u {
            return None;
        }
        sum = sum.add(&term);
    }
    // The term of index n was added too; F stops before it.
    let main = sum.sub(&term).mul(&power);
    let main = match growth {
        Growth::One => main.div(&at)?,
        Growth::Half => main.div(&at.sqrt()?)?,
    };
    let factorial = ratio.mul(&at.pow_int(n)?);
    let low = factorial.mul(&whole(-3, working));
    let high = whole(6, working).add(&at.mul(&factorial).mul(&whole(3, working))).add(&at.mul(&ratio).mul(&power));
    Some(main.add(&low.hull(&high)).with_bits(bits))
}

fn whole(n: i64, bits: u32) -> Interval {
    Interval::point(&Dyadic::from(n), bits)
}
