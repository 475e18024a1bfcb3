//! The principal branch of the Lambert W function.

use super::dyadic::{Dyadic, Toward};
use super::enclosure::Interval;
use std::cmp::Ordering;

/// Precision at which the approximation starts.
const START_BITS: u32 = 40;

/// Newton steps at one precision; more are not needed from any start used here.
const STEPS: usize = 64;

/// Widenings of a bracket before the elementary bounds are used.
const WIDENINGS: u32 = 40;

impl Interval {
    /// `W(x)` with `W·e^W = x`, `W ≥ −1`, which rises on `x ≥ −1/e`; `None` unless all members are proved to be at or
    /// above `−1/e`, or when the result reaches 2^20.
    ///
    /// Newton's method proposes a number; a bracket around it is widened until the sign of `w·e^w − x`, enclosed at both
    /// of its ends, proves it. Only this proof matters: `w·e^w` rises on `w ≥ −1`.
    pub fn lambertw(&self) -> Option<Interval> {
        self.increasing(lambertw_at)
    }
}

fn lambertw_at(x: &Dyadic, bits: u32) -> Option<Interval> {
    if x.is_zero() {
        return Some(Interval::zero(bits));
    }
    let lost = bits_lost_at_branch_point(x, bits)?;
    let working = bits.saturating_add(16).saturating_add(lost);
    let guess = approximate(x, working, lost)?;
    let place = guess.top() - i64::from(bits) - 4;
    let below = |w: &Dyadic| product(w, working).is_some_and(|p| p.hi() <= x);
    let above = |w: &Dyadic| *w >= Dyadic::from(-1) && product(w, working).is_some_and(|p| p.lo() >= x);
    // W ≥ −1, W has the sign of x, and W ≤ x, since 1 ≤ e^W for W ≥ 0 and e^W ≤ 1 for W ≤ 0.
    let floor = if x.sign() == Ordering::Less { Dyadic::from(-1) } else { Dyadic::zero() };
    let lo = away(&guess, place, working, Toward::Down).take_while(|w| *w > floor).find(below).unwrap_or(floor);
    let hi = away(&guess, place, working, Toward::Up).take_while(|w| w < x).find(above).unwrap_or_else(|| x.clone());
    Some(Interval::between(lo, hi, bits))
}

/// Numbers ever further from `w` on one side, beginning about `2^place` away.
fn away(w: &Dyadic, place: i64, bits: u32, side: Toward) -> impl Iterator<Item = Dyadic> {
    (0..WIDENINGS).map(move |i| {
        let distance = Dyadic::power_of_two(place + i64::from(i * (i + 1)));
        let step = if side == Toward::Down { distance.neg() } else { distance };
        w.add(&step, bits, side)
    })
}

/// Encloses `w·e^w`.
fn product(w: &Dyadic, bits: u32) -> Option<Interval> {
    let at = Interval::point(w, bits);
    Some(at.mul(&at.exp()?))
}

/// Close to the branch point `1 + W` is about `√(2(1 + e·x))`, the slope of `w·e^w`: so many more bits are needed there.
/// `None` unless `x ≥ −1/e` is proved.
fn bits_lost_at_branch_point(x: &Dyadic, bits: u32) -> Option<u32> {
    if x.sign() == Ordering::Greater {
        return Some(0);
    }
    let working = bits.saturating_mul(2).saturating_add(24);
    let gap = Interval::one(working).exp()?.mul(&Interval::point(x, working)).add(&Interval::one(working));
    if gap.lo().sign() == Ordering::Less {
        return None;
    }
    Some(u32::try_from(-gap.lo().top() / 2).unwrap_or(0).min(bits.saturating_add(24)))
}

/// A number close to `W(x)`, by Newton's method at doubling precision; nothing is proved of it. From
/// `ln(1 + x) ≥ W(x)` (since `e^w ≤ 1 + w·e^w`), and from `x ≥ W(x)` for tiny `x`, the iteration falls monotonically.
fn approximate(x: &Dyadic, bits: u32, lost: u32) -> Option<Dyadic> {
    let mut working = START_BITS.saturating_add(2 * lost).min(bits);
    let mut w = if x.top() < -8 {
        x.clone()
    } else {
        Interval::point(x, working).add(&Interval::one(working)).ln()?.midpoint()
    };
    loop {
        for _ in 0..STEPS {
            let Some(next) = newton_step(&w, x, working) else { break };
            let moved = next.add(&w.neg(), 8, Toward::Up);
            w = next;
            if moved.top() <= w.top() - i64::from(working / 2) {
                break;
            }
        }
        if working >= bits {
            return Some(w);
        }
        working = working.saturating_mul(2).min(bits);
    }
}

/// `w − (w − x·e^(−w))/(1 + w)`, about.
fn newton_step(w: &Dyadic, x: &Dyadic, bits: u32) -> Option<Dyadic> {
    let at = Interval::point(w, bits);
    let target = Interval::point(x, bits).mul(&at.neg().exp()?);
    let step = at.sub(&target).div(&at.add(&Interval::one(bits)))?;
    Some(at.sub(&step).midpoint())
}
