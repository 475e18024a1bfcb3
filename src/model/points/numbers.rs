//! Numbers to try: small rationals that a reader can check by hand, then random ones, then extreme ones.

use num_traits::{One, Pow, Signed, Zero};

use crate::algebra::number::{Rational, rational};

use super::constraint::{Range, share_of};

/// Which numbers are tried for parameters that the assumptions leave open.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Spread {
    /// Halves, thirds, small integers, of both signs.
    Nice,
    /// The same, an eighth as large.
    Small,
    /// Nothing but zero.
    Zero,
    /// Random fractions.
    Random,
    /// Very small and very large ones.
    Extreme,
}

/// Which numbers are tried for prices.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Level {
    /// Small numbers, different ones for different goods.
    Nice,
    /// One for all.
    Ones,
    /// Numbers about one.
    NearOne,
    /// Random fractions.
    Random,
    /// Very small and very large ones.
    Extreme,
}

/// One way to choose a point.
#[derive(Clone, Copy, Debug)]
pub(super) struct Recipe {
    pub parameters: Spread,
    pub prices: Level,
    /// Turns the lists of numbers.
    pub round: usize,
}

const ORDINARY: [(Spread, Level); 8] = [
    (Spread::Nice, Level::Nice),
    (Spread::Small, Level::Nice),
    (Spread::Nice, Level::Ones),
    (Spread::Small, Level::NearOne),
    (Spread::Nice, Level::NearOne),
    (Spread::Zero, Level::Nice),
    (Spread::Small, Level::Ones),
    (Spread::Zero, Level::Ones),
];
const ORDINARY_ROUNDS: usize = 12;
const RANDOM_ROUNDS: usize = 200;
const EXTREME_ROUNDS: usize = 48;

impl Recipe {
    /// The recipe at a place of the sequence; `None` behind its end.
    pub fn nth(index: usize) -> Option<Recipe> {
        let ordinary = ORDINARY.len() * ORDINARY_ROUNDS;
        if index < ordinary {
            let (parameters, prices) = ORDINARY[index % ORDINARY.len()];
            return Some(Recipe { parameters, prices, round: index / ORDINARY.len() });
        }
        let round = index - ordinary;
        if round < RANDOM_ROUNDS {
            return Some(Recipe { parameters: Spread::Random, prices: Level::Random, round });
        }
        let round = round - RANDOM_ROUNDS;
        let spread = if round.is_multiple_of(2) { Spread::Nice } else { Spread::Extreme };
        (round < EXTREME_ROUNDS).then_some(Recipe { parameters: spread, prices: Level::Extreme, round })
    }
}

/// A fixed sequence of well-spread numbers.
#[derive(Clone, Debug)]
pub(super) struct Dice(u64);

impl Dice {
    pub fn new(seed: u64) -> Dice {
        Dice(seed.wrapping_mul(0x9E37_79B9_7F4A_7C15).wrapping_add(0x1234_5678_9ABC_DEF1))
    }

    /// A number below the bound.
    pub fn below(&mut self, bound: u64) -> u64 {
        self.0 = self.0.wrapping_add(0x9E37_79B9_7F4A_7C15);
        let mut x = self.0;
        x = (x ^ (x >> 30)).wrapping_mul(0xBF58_476D_1CE4_E5B9);
        x = (x ^ (x >> 27)).wrapping_mul(0x94D0_49BB_1331_11EB);
        (x ^ (x >> 31)) % bound.max(1)
    }

    fn fraction(&mut self) -> Rational {
        rational(1 + self.below(24) as i64, 1 + self.below(8) as i64)
    }
}

type Fraction = (i64, i64);

const PARAMETERS: [Fraction; 14] = [
    (1, 2),
    (1, 3),
    (2, 1),
    (-1, 2),
    (1, 4),
    (3, 1),
    (-1, 3),
    (1, 5),
    (3, 2),
    (1, 1),
    (-1, 1),
    (2, 3),
    (-2, 1),
    (5, 1),
];
const PRICES: [Fraction; 11] = [(1, 1), (2, 1), (3, 1), (1, 2), (3, 2), (5, 1), (1, 3), (4, 1), (2, 3), (5, 2), (1, 4)];
const ABOUT_ONE: [Fraction; 7] = [(1, 1), (11, 10), (9, 10), (5, 4), (4, 5), (21, 20), (19, 20)];
const EXTREMES: [Fraction; 8] = [(1, 1000), (1000, 1), (1, 1), (1, 100), (100, 1), (1_000_000, 1), (1, 10), (10, 1)];
const INCOMES: [Fraction; 9] = [(1, 1), (2, 1), (10, 1), (5, 1), (1, 2), (100, 1), (1, 10), (1000, 1), (1, 100)];
/// Prices whose roots are wanted exactly are powers of these.
const ROOTS: [Fraction; 6] = [(1, 1), (2, 1), (1, 2), (3, 1), (3, 2), (2, 3)];
/// The highest power of 2 or 3 that still counts as a small number.
const MOST_POWER: u32 = 6;

fn turned(list: &[Fraction], turn: usize) -> Vec<Rational> {
    (0..list.len()).map(|k| list[(k + turn) % list.len()]).map(|(n, d)| rational(n, d)).collect()
}

/// Numbers for a parameter, best first, all inside the range; `place` tells parameters apart.
pub(super) fn for_parameter(recipe: &Recipe, place: usize, range: &Range, dice: &mut Dice) -> Vec<Rational> {
    let turn = place * 5 + recipe.round * 3;
    let plain = match recipe.parameters {
        Spread::Nice => turned(&PARAMETERS, turn),
        Spread::Small => turned(&PARAMETERS, turn).into_iter().map(|q| q / rational(8, 1)).collect(),
        Spread::Zero => vec![Rational::zero()],
        Spread::Random => (0..4).map(|_| if dice.below(2) == 0 { dice.fraction() } else { -dice.fraction() }).collect(),
        Spread::Extreme => {
            let large = turned(&EXTREMES, turn);
            large.iter().flat_map(|q| [q.clone(), -q]).collect()
        }
    };
    let shifted: Vec<Rational> = match (&range.low, &range.high) {
        (Some(low), None) if recipe.parameters != Spread::Nice || !low.is_zero() => {
            plain.iter().map(|q| low + nonzero(q.abs())).collect()
        }
        (None, Some(high)) if !high.is_zero() => plain.iter().map(|q| high - nonzero(q.abs())).collect(),
        _ => Vec::new(),
    };
    let share = range.shares > 1 && range.low.is_some() && range.high.is_some();
    let inner = between(range, turn);
    let mut all: Vec<Rational> = if share { inner.clone() } else { Vec::new() };
    all.extend(plain.into_iter().chain(shifted).filter(|q| range.holds(q)).take(6));
    all.extend(if share { Vec::new() } else { inner });
    all
}

fn nonzero(q: Rational) -> Rational {
    if q.is_zero() { rational(1, 8) } else { q }
}

/// Numbers for a price; `power` is the power that makes its roots exact.
pub(super) fn for_price(recipe: &Recipe, place: usize, power: u32, range: &Range, dice: &mut Dice) -> Vec<Rational> {
    let turn = place + recipe.round;
    let plain = match recipe.prices {
        Level::Nice if power > 1 && power <= MOST_POWER => {
            turned(&ROOTS, turn).into_iter().map(|q| Pow::pow(q, power)).collect()
        }
        Level::Nice => turned(&PRICES, turn),
        Level::Ones => vec![Rational::one()],
        Level::NearOne => turned(&ABOUT_ONE, turn),
        Level::Random => (0..4).map(|_| dice.fraction()).collect(),
        Level::Extreme => turned(&EXTREMES, place * 3 + recipe.round * 7),
    };
    let mut all: Vec<Rational> = plain.into_iter().filter(|q| range.holds(q)).collect();
    all.extend(beyond(range));
    all.extend(between(range, turn));
    all
}

/// Numbers for income.
pub(super) fn for_income(recipe: &Recipe, power: u32, range: &Range, dice: &mut Dice) -> Vec<Rational> {
    let plain = match recipe.prices {
        Level::Random => (0..4).map(|_| dice.fraction()).chain(turned(&INCOMES, 2)).collect(),
        Level::Extreme => turned(&EXTREMES, recipe.round),
        _ if power > 1 && power <= MOST_POWER => {
            turned(&INCOMES, recipe.round).into_iter().map(|q| Pow::pow(q, power)).collect()
        }
        _ => turned(&INCOMES, recipe.round),
    };
    let mut all: Vec<Rational> = plain.into_iter().filter(|q| range.holds(q)).collect();
    all.extend(beyond(range));
    all.extend(between(range, recipe.round));
    all
}

/// Numbers a little and a lot above the lower end of a range that is open upwards.
fn beyond(range: &Range) -> Vec<Rational> {
    match (&range.low, &range.high) {
        (Some(low), None) if low.is_positive() && is_handy(low) => [(5, 4), (2, 1), (10, 1)]
            .into_iter()
            .map(|(n, d)| low * rational(n, d))
            .filter_map(|least| simplest_between(&least, &(&least * rational(9, 8))))
            .collect(),
        _ => Vec::new(),
    }
}

/// Whether a number is short enough to look for fractions near it: e^(10⁶) is a number of a million digits.
fn is_handy(q: &Rational) -> bool {
    const MOST_BITS: u64 = 2048;
    q.numer().bits().max(q.denom().bits()) <= MOST_BITS
}

/// Simple numbers inside a range with two ends, about the share of its length that falls to one symbol.
fn between(range: &Range, turn: usize) -> Vec<Rational> {
    const PARTS: [Fraction; 4] = [(1, 1), (1, 2), (3, 2), (1, 5)];
    let (Some(low), Some(high)) = (&range.low, &range.high) else { return Vec::new() };
    if low == high && range.closed {
        return vec![low.clone()];
    }
    if !is_handy(low) || !is_handy(high) {
        return Vec::new();
    }
    let length = high - low;
    if !length.is_positive() {
        return Vec::new();
    }
    let step = &length * share_of(range);
    let parts = turned(&PARTS, if range.shares > 1 { turn % 2 } else { turn });
    let around = |part: Rational| {
        let target = &step * &part;
        simplest_between(&(low + &target * rational(7, 8)), &(low + &target * rational(9, 8)))
    };
    parts.into_iter().filter_map(around).filter(|q| range.holds(q)).collect()
}

/// The fraction with the smallest denominator in a closed interval; `None` if the interval is empty.
pub(super) fn simplest_between(low: &Rational, high: &Rational) -> Option<Rational> {
    if low > high {
        return None;
    }
    if !low.is_positive() && !high.is_negative() {
        return Some(Rational::zero());
    }
    if high.is_negative() {
        return simplest_between(&-high, &-low).map(|q| -q);
    }
    Some(simplest_positive(low, high))
}

fn simplest_positive(low: &Rational, high: &Rational) -> Rational {
    let floor = low.floor();
    if floor == *low {
        return floor;
    }
    if floor < high.floor() {
        return floor + Rational::one();
    }
    let inner = simplest_positive(&(high - &floor).recip(), &(low - &floor).recip());
    floor + inner.recip()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_simplest_fraction_of_an_interval() {
        let simplest = |a: Fraction, b: Fraction| simplest_between(&rational(a.0, a.1), &rational(b.0, b.1));
        assert_eq!(simplest((3, 10), (2, 5)), Some(rational(1, 3)));
        assert_eq!(simplest((-2, 5), (-3, 10)), Some(rational(-1, 3)));
        assert_eq!(simplest((-1, 5), (7, 1)), Some(rational(0, 1)));
        assert_eq!(simplest((22, 7), (22, 7)), Some(rational(22, 7)));
        assert_eq!(simplest((2, 1), (1, 1)), None);
    }

    #[test]
    fn the_sequence_ends() {
        let mut length = 0;
        while Recipe::nth(length).is_some() {
            length += 1;
        }
        assert_eq!(length, ORDINARY.len() * ORDINARY_ROUNDS + RANDOM_ROUNDS + EXTREME_ROUNDS);
    }
}
