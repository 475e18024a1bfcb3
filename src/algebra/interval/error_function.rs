//! The error function and the imaginary error function.

use super::dyadic::{Dyadic, Toward};
use super::enclosure::Interval;
use super::growth::{Growth, asymptotic};
use super::series::PositiveSeries;
use std::cmp::Ordering;

impl Interval {
    /// `erf(x) = (2/√π)·∫₀ˣ e^(−t²) dt`, for every argument (never `None`).
    ///
    /// `(2x/√π)·e^(−x²)·Σ (2x²)^n/(2n+1)!!`, whose terms are all positive. When `x² > bits + 2`, `1 − e^(−x²) < erf x < 1`.
    pub fn erf(&self) -> Option<Interval> {
        self.increasing(|x, bits| odd(x, bits, erf_positive))
    }

    /// `erfi(x) = (2/√π)·∫₀ˣ e^(t²) dt`; `None` when `x²` reaches 2^20.
    ///
    /// `(2x/√π)·Σ x^(2n)/(n!·(2n+1))`, whose terms are all positive; for large `x` the asymptotic series of
    /// `∫₀^(x²) e^s·s^(−1/2) ds / √π` with an elementary bound on its remainder.
    pub fn erfi(&self) -> Option<Interval> {
        let within = |x: &Dyadic| x.top() <= 11 && x.mul(x).top() <= 20;
        if !within(self.lo()) || !within(self.hi()) {
            return None;
        }
        self.increasing(|x, bits| odd(x, bits, erfi_positive))
    }
}

/// An odd function from its values at positive arguments.
fn odd(x: &Dyadic, bits: u32, positive: fn(&Dyadic, u32) -> Option<Interval>) -> Option<Interval> {
    match x.sign() {
        Ordering::Equal => Some(Interval::zero(bits)),
        Ordering::Greater => positive(x, bits),
        Ordering::Less => Some(positive(&x.neg(), bits)?.neg()),
    }
}

/// `2x/√π`.
fn scale(x: &Dyadic, bits: u32) -> Option<Interval> {
    Interval::point(&x.scaled(1), bits).div(&Interval::pi(bits).sqrt()?)
}

fn erf_positive(x: &Dyadic, bits: u32) -> Option<Interval> {
    let saturated = Dyadic::from(i64::from(bits) + 2);
    if x.mul(x) >= saturated {
        // erfc x < e^(−x²)/(x√π) < 2^(−bits − 2), as x ≥ 1.
        let gap = Dyadic::power_of_two(-i64::from(bits) - 2);
        let below = Dyadic::one().add(&gap.neg(), bits, Toward::Down);
        return Some(Interval::between(below, Dyadic::one(), bits));
    }
    let square = x.mul(x);
    let working = bits.saturating_add(24);
    let series = PositiveSeries { u: &square.scaled(1), step: |n| 2 * n + 3, weight: |_| 1 }.sum(working);
    let decay = Interval::point(&square.neg(), working.saturating_add(24)).exp()?;
    let value = scale(x, working)?.mul(&decay).mul(&series).with_bits(bits);
    value.intersection(&Interval::between(Dyadic::zero(), Dyadic::one(), bits))
}

fn erfi_positive(x: &Dyadic, bits: u32) -> Option<Interval> {
    let square = x.mul(x);
    let working = bits.saturating_add(24);
    if let Some(far) = asymptotic(Growth::Half, &square, working) {
        return Some(far.div(&Interval::pi(working).sqrt()?)?.with_bits(bits));
    }
    let series = PositiveSeries { u: &square, step: |n| n + 1, weight: |n| 2 * n + 1 }.sum(working);
    Some(scale(x, working)?.mul(&series).with_bits(bits))
}
