//! The exponential integral Ei.

use super::dyadic::{Dyadic, Toward};
use super::enclosure::Interval;
use super::growth::{Growth, asymptotic};
use super::series::PositiveSeries;
use crate::algebra::budget;
use num_bigint::BigInt;
use num_traits::One;
use std::cmp::Ordering;

impl Interval {
    /// `Ei(x)`, the principal value of `∫_{−∞}^x e^t/t dt`, falling on `x < 0` and rising on `x > 0`; `None` when the
    /// interval contains 0 or reaches 2^20 in magnitude.
    ///
    /// Near 0, `γ + ln|x| + Σ x^k/(k·k!)`, the terms of either sign summed apart with a geometric bound on the tail. Far
    /// out on the right the asymptotic series with an elementary bound on its remainder; far out on the left the
    /// continued fraction of `E₁`, whose tails have trivial bounds. Next to the zero at 0.3725 the precision is absolute.
    pub fn ei(&self) -> Option<Interval> {
        match self.sign()? {
            Ordering::Greater => self.increasing(ei_positive),
            Ordering::Less => self.neg().increasing(|y, bits| Some(e1(y, bits)?.neg())),
            Ordering::Equal => None,
        }
    }
}

/// `Σ_{k≥1} x^k/(k·k!)` is `x` times this series.
fn ein_series(u: &Dyadic) -> PositiveSeries<'_> {
    PositiveSeries { u, step: |n| n + 2, weight: |n| n + 1 }
}

fn ei_positive(x: &Dyadic, bits: u32) -> Option<Interval> {
    if let Some(far) = asymptotic(Growth::One, x, bits) {
        return Some(far);
    }
    if x.top() > 20 {
        return None;
    }
    let working = bits.saturating_add(16);
    let series = ein_series(x).sum(working).mul(&Interval::point(x, working));
    let logarithm = Interval::point(x, working).ln()?;
    Some(Interval::euler_gamma(working).add(&logarithm).add(&series).with_bits(bits))
}

/// `E₁(y) = −Ei(−y)` for `y > 0`, a falling function.
fn e1(y: &Dyadic, bits: u32) -> Option<Interval> {
    if y.top() > 20 {
        return None;
    }
    if *y > Dyadic::from(8 + i64::from(bits / 16)) {
        return e1_fraction(y, bits);
    }
    // E₁ is about e^(−y)/y while the partial sums reach e^y/y: 2y/ln 2 < 3y bits cancel.
    let cancelled = u32::try_from(y.to_fixed(0, Toward::Up)).unwrap_or(0).saturating_mul(3);
    let working = bits.saturating_add(24).saturating_add(cancelled);
    let at = Interval::point(y, working);
    let [even, odd] = ein_series(y).by_parity(working);
    let ein = even.sub(&odd).mul(&at);
    let logarithm = at.ln()?;
    Some(ein.sub(&Interval::euler_gamma(working)).sub(&logarithm).with_bits(bits))
}

/// `E₁(y) = e^(−y)/T₁` with `T_k = y + k/(1 + k/T_{k+1})`, the Stieltjes fraction of E₁, which converges for `y > 0`.
///
/// All elements are positive, so `y ≤ T_k ≤ y + k`; and `T_k = y + k·T_{k+1}/(T_{k+1} + k)` rises with `T_{k+1}`. Bounds on
/// `T_n` are carried back to `T_1`, rounded down and up; the depth doubles until they agree to the precision.
fn e1_fraction(y: &Dyadic, bits: u32) -> Option<Interval> {
    let places = bits + 16;
    let mut depth = u64::from(bits / 4 + 8);
    let tail = loop {
        let tail = tail_bounds(y, depth, places);
        if tail.width().top() <= tail.lo().top() - i64::from(bits) - 4 || depth > 1 << 20 {
            break tail;
        }
        depth *= 2;
    };
    let power = Interval::point(&y.neg(), bits + 32).exp()?;
    Some(power.div(&tail)?.with_bits(bits))
}

fn tail_bounds(y: &Dyadic, depth: u64, places: u32) -> Interval {
    let unit = i64::from(places);
    let (y_lo, y_hi) = (y.to_fixed(unit, Toward::Down), y.to_fixed(unit, Toward::Up));
    let mut lo = y_lo.clone();
    let mut hi = &y_hi + (BigInt::from(depth) << places);
    for k in (1..depth).rev() {
        let shift = BigInt::from(k) << places;
        lo = &y_lo + ((&lo * k) << places) / (&lo + &shift);
        hi = &y_hi + ((&hi * k) << places) / (&hi + &shift) + BigInt::one();
    }
    budget::spend(depth);
    Interval::between(Dyadic::new(lo, -unit), Dyadic::new(hi, -unit), places)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_tails_of_the_fraction_are_nested() {
        for i in 1i64..200 {
            let y = Dyadic::new((i * 7919).into(), -9 - i % 4);
            let [coarse, deep] = [(5, 10), (200, 120)].map(|(depth, places)| tail_bounds(&y, depth, places));
            assert!(coarse.encloses(&deep), "{coarse:?} misses {deep:?}");
            let rough = tail_bounds(&y, 200, 10);
            assert!(rough.encloses(&deep), "{rough:?} misses {deep:?}");
        }
    }
}
