//! Random preferences: v(p, m) is built from sums, products, roots, logarithms, exponentials and symbolic powers, the
//! demands follow by Roy's identity and are brought to one fraction each, and a v is recovered again.

mod recovery_ground;

use std::collections::BTreeMap;

use mainspring::algebra::budget::{self, Limits};
use mainspring::algebra::generator::{Blocked, Element};
use mainspring::algebra::number::rational;
use mainspring::algebra::polynomial::Poly;
use mainspring::proof::Prover;
use mainspring::recovery::System;
use mainspring::recovery::search::search;
use recovery_ground::Ground;

/// A deterministic source of choices.
struct Dice(u64);

impl Dice {
    fn roll(&mut self, sides: u64) -> u64 {
        self.0 = self.0.wrapping_mul(6364136223846793005).wrapping_add(1442695040888963407);
        (self.0 >> 33) % sides
    }
}

/// One construction: prices p1, …, income m, positive parameters a, b, c, s.
struct Construction {
    ground: Ground,
    goods: usize,
    kind: &'static str,
    v: Element,
}

impl Construction {
    fn new(seed: u64) -> Result<Construction, Blocked> {
        let mut dice = Dice(seed.wrapping_mul(0x9E37_79B9_7F4A_7C15));
        for _ in 0..4 {
            dice.roll(2);
        }
        let goods = 2 + dice.roll(3) as usize;
        let names: Vec<String> = (1..=goods).map(|k| format!("p{k}")).collect();
        let mut ground = Ground::new(&names.join(" "), "m", "+a +b +c +s");
        ground.declare("u", mainspring::algebra::generator::Role::Utility);
        let kinds: [(&'static str, Builder); 8] = [
            ("gorman", gorman),
            ("power gorman", power_gorman),
            ("log gorman", log_gorman),
            ("riccati", riccati),
            ("additive", additive),
            ("composite", composite),
            ("rational", quotient),
            ("product", product),
        ];
        let (kind, build) = kinds[dice.roll(8) as usize];
        let v = build(&ground, &mut dice, goods)?;
        Ok(Construction { ground, goods, kind, v })
    }

    /// The demands by Roy's identity, each reduced to one fraction.
    fn system(&self) -> Option<System<'_>> {
        let field = &self.ground.field;
        let names: Vec<String> = (1..=self.goods).map(|k| format!("p{k}")).collect();
        let (prices, income) = (self.ground.vars(&names.join(" ")), self.ground.var("m"));
        let slope = field.derivative(&self.v, income);
        if field.is_zero(&slope) {
            return None;
        }
        let demand = |p| field.quotient(&field.derivative(&self.v, p).neg(), &slope).ok().map(|x| field.reduce(&x));
        let demands: Option<Vec<Element>> = prices.iter().map(|p| demand(*p)).collect();
        demands.map(|demands| System { field, prices, income, demands })
    }
}

type Builder = fn(&Ground, &mut Dice, usize) -> Result<Element, Blocked>;

fn number(dice: &mut Dice) -> Element {
    Poly::int(1 + dice.roll(3) as i64)
}

fn parameter(g: &Ground, dice: &mut Dice) -> Element {
    g.read(["a", "b", "c", "1", "2"][dice.roll(5) as usize])
}

fn price(g: &Ground, dice: &mut Dice, goods: usize) -> Element {
    g.read(&format!("p{}", 1 + dice.roll(goods as u64)))
}

fn exponent(g: &Ground, dice: &mut Dice) -> Element {
    g.read(["1/2", "1/3", "2", "s", "1-s", "a", "3/2"][dice.roll(7) as usize])
}

/// A positive function of prices with at most `depth` generators.
fn index(g: &Ground, dice: &mut Dice, goods: usize, depth: u32) -> Result<Element, Blocked> {
    let f = &g.field;
    Ok(match if depth == 0 { dice.roll(3) } else { dice.roll(8) } {
        0 => f.product(&parameter(g, dice), &price(g, dice, goods)),
        1 => f.power(&price(g, dice, goods), &exponent(g, dice))?,
        2 | 3 => {
            let (x, y) = (price(g, dice, goods), price(g, dice, goods));
            &f.product(&parameter(g, dice), &x) + &f.product(&parameter(g, dice), &y)
        }
        4 => {
            let inner = index(g, dice, goods, depth - 1)?;
            f.power(&inner, &exponent(g, dice))?
        }
        5 => f.product(&index(g, dice, goods, depth - 1)?, &price(g, dice, goods)),
        6 => {
            let (x, y) = (index(g, dice, goods, depth - 1)?, index(g, dice, goods, 0)?);
            &f.current(&x) + &f.product(&number(dice), &y)
        }
        _ => {
            let (x, y) = (price(g, dice, goods), price(g, dice, goods));
            f.ln(&(&number(dice) + &f.quotient(&x, &y)?))?
        }
    })
}

fn gorman(g: &Ground, dice: &mut Dice, goods: usize) -> Result<Element, Blocked> {
    let (x, y) = (index(g, dice, goods, 2)?, index(g, dice, goods, 1)?);
    g.field.quotient(&(&g.read("m") - &g.field.current(&x)), &y)
}

fn power_gorman(g: &Ground, dice: &mut Dice, goods: usize) -> Result<Element, Blocked> {
    let (x, y) = (index(g, dice, goods, 1)?, index(g, dice, goods, 1)?);
    let power = g.field.power(&g.read("m"), &exponent(g, dice))?;
    g.field.quotient(&(&power - &g.field.current(&x)), &y)
}

fn log_gorman(g: &Ground, dice: &mut Dice, goods: usize) -> Result<Element, Blocked> {
    let (x, y) = (index(g, dice, goods, 1)?, index(g, dice, goods, 1)?);
    let log = g.field.ln(&g.field.quotient(&g.read("m"), &x)?)?;
    g.field.quotient(&log, &y)
}

fn riccati(g: &Ground, dice: &mut Dice, goods: usize) -> Result<Element, Blocked> {
    let (x, y, l) = (index(g, dice, goods, 0)?, index(g, dice, goods, 1)?, index(g, dice, goods, 0)?);
    let f = &g.field;
    let z = if dice.roll(2) == 0 { g.read("m") } else { f.ln(&g.read("m"))? };
    Ok(&f.quotient(&y, &(&z - &f.current(&x)))?.neg() - &f.current(&l))
}

fn additive(g: &Ground, dice: &mut Dice, goods: usize) -> Result<Element, Blocked> {
    let f = &g.field;
    let mut total = Poly::zero();
    for k in 1..=goods {
        let ratio = f.quotient(&g.read("m"), &g.read(&format!("p{k}")))?;
        let part = match dice.roll(4) {
            0 => f.ln(&ratio)?,
            1 => f.ln(&(&Poly::one() + &ratio))?,
            _ => f.power(&ratio, &exponent(g, dice))?,
        };
        total = &f.current(&total) + &f.product(&parameter(g, dice), &part);
    }
    Ok(total)
}

fn composite(g: &Ground, dice: &mut Dice, goods: usize) -> Result<Element, Blocked> {
    let f = &g.field;
    let ratio = f.quotient(&g.read("m"), &index(g, dice, goods, 0)?)?;
    let inside = match dice.roll(3) {
        0 => &Poly::one() + &ratio,
        1 => &index(g, dice, goods, 0)? + &f.current(&g.read("m")),
        _ => &ratio + &f.quotient(&price(g, dice, goods), &price(g, dice, goods))?,
    };
    let outer = match dice.roll(4) {
        0 => f.sqrt(&inside)?,
        1 => f.ln(&inside)?,
        2 => f.power(&inside, &exponent(g, dice))?,
        _ => f.exp(&f.quotient(&g.read("m"), &price(g, dice, goods))?)?,
    };
    let y = index(g, dice, goods, 0)?;
    Ok(match dice.roll(3) {
        0 => &f.current(&outer) + &f.current(&y),
        1 => f.product(&outer, &y),
        _ => &f.product(&outer, &price(g, dice, goods)) + &f.product(&y, &ratio),
    })
}

fn quotient(g: &Ground, dice: &mut Dice, goods: usize) -> Result<Element, Blocked> {
    let f = &g.field;
    let m = g.read("m");
    let linear = |dice: &mut Dice| -> Element {
        let mut total = f.product(&parameter(g, dice), &m);
        for _ in 0..1 + dice.roll(2) {
            total = &total + &f.product(&parameter(g, dice), &price(g, dice, goods));
        }
        total
    };
    let (above, below) = (linear(dice), linear(dice));
    let above = if dice.roll(2) == 0 { f.product(&above, &price(g, dice, goods)) } else { f.product(&above, &m) };
    f.quotient(&above, &below)
}

fn product(g: &Ground, dice: &mut Dice, goods: usize) -> Result<Element, Blocked> {
    let f = &g.field;
    let m = g.read("m");
    let mut total = f.power(&m, &exponent(g, dice))?;
    for _ in 0..1 + dice.roll(2) {
        let sum = &f.product(&parameter(g, dice), &m) + &f.product(&parameter(g, dice), &price(g, dice, goods));
        total = f.product(&total, &f.power(&sum, &exponent(g, dice))?);
    }
    for _ in 0..1 + dice.roll(2) {
        total = f.quotient(&total, &f.power(&price(g, dice, goods), &exponent(g, dice))?)?;
    }
    Ok(total)
}

/// The outcome of one construction: recovered, not recovered, or out of its limits.
fn outcome(made: &Construction) -> Option<&'static str> {
    let system = made.system()?;
    let utility = made.ground.var("u");
    let limits = Limits::new(u64::MAX, std::time::Duration::from_secs(20), 2000);
    let mut prover = Prover::new(system.field);
    let result = budget::within(limits, || search(&system, utility, &mut prover));
    Some(match result {
        Ok(Ok(found)) if found.checked.roy => "recovered",
        Ok(_) => "not found",
        Err(_) => "stopped",
    })
}

#[test]
fn most_constructions_are_recovered() {
    let most: u64 = std::env::var("CONSTRUCTIONS").ok().and_then(|n| n.parse().ok()).unwrap_or(60);
    let from: u64 = std::env::var("FROM").ok().and_then(|n| n.parse().ok()).unwrap_or(0);
    let mut tally: BTreeMap<(&str, &str), usize> = BTreeMap::new();
    let (mut made, mut recovered) = (0, 0);
    for seed in from..from + most {
        let Ok(construction) = Construction::new(seed) else { continue };
        let started = std::time::Instant::now();
        let Some(outcome) = outcome(&construction) else { continue };
        made += 1;
        recovered += usize::from(outcome == "recovered");
        *tally.entry((construction.kind, outcome)).or_default() += 1;
        if outcome != "recovered" || started.elapsed().as_secs() >= 3 {
            let shown = construction.ground.show(&construction.v);
            println!("{seed} {} {outcome} {:?}: {shown}", construction.kind, started.elapsed());
        }
    }
    println!("{recovered} of {made}: {tally:?}");
    assert!(rational(recovered as i64, made as i64) >= rational(9, 10), "{recovered} of {made}");
}
