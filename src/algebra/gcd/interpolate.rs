//! The gcd from its images: sparse interpolation (Zippel 1979) modulo word-size primes, Chinese remaindering, and a
//! final exact division, so that the result is never a matter of probability.

use num_bigint::BigInt;

use super::skeleton::{Exponents, Images, Row, Side};
use super::{content_in, gcd};
use crate::algebra::budget;
use crate::algebra::modular::dense::{Interpolation, degree};
use crate::algebra::modular::{Modulus, Primes, Stream};
use crate::algebra::monomial::{Monomial, Var};
use crate::algebra::number::Int;
use crate::algebra::polynomial::Poly;

/// Fresh starts before giving up.
const ATTEMPTS: u64 = 6;
/// Primes combined before giving up: coefficients of about 6,000 digits.
const MAX_PRIMES: usize = 330;

/// The gcd of two polynomials that are primitive in `main`, given upper bounds for its degrees; None when the images
/// were unlucky too often.
pub(super) fn gcd_by_images(a: &Poly, b: &Poly, main: Var, limits: &[(Var, u32)]) -> Option<Poly> {
    let lead = gcd(&leading_in(a, main), &leading_in(b, main));
    // The integer gcd of the two contents belongs to the leading coefficient as well.
    let scale = integer_content(&leading_in(a, main)).gcd(&integer_content(&leading_in(b, main)));
    let monomial = monomial_content(&leading_in(a, main)).meet(&monomial_content(&leading_in(b, main)));
    let lead = lead.mul_term(&scale.to_rational(), &monomial);
    let task = Task { a, b, main, others: limits.iter().copied().filter(|&(v, _)| v != main).collect(), lead };
    (0..ATTEMPTS).find_map(|seed| task.attempt(seed))
}

fn leading_in(p: &Poly, v: Var) -> Poly {
    p.coefficients(v).into_iter().next().map_or_else(Poly::zero, |(_, c)| c)
}

fn integer_content(p: &Poly) -> Int {
    p.raw_terms().iter().fold(Int::ZERO, |g, (_, c)| g.gcd(c))
}

fn monomial_content(p: &Poly) -> Monomial {
    p.primitive().monomial
}

/// One gcd to compute: the result times a factor free of `main` has leading coefficient `lead`.
struct Task<'a> {
    a: &'a Poly,
    b: &'a Poly,
    main: Var,
    others: Vec<(Var, u32)>,
    lead: Poly,
}

impl Task<'_> {
    fn images(&self, p: u64) -> Images {
        let m = Modulus::new(p);
        let vars: Vec<Var> = self.others.iter().map(|&(v, _)| v).collect();
        let side = |p: &Poly| Side::new(&m, p, self.main, &vars);
        Images { left: side(self.a), right: side(self.b), lead: side(&self.lead), m }
    }

    fn attempt(&self, seed: u64) -> Option<Poly> {
        let mut primes = Primes::new().skip(seed as usize);
        let mut stream = Stream::new(seed.wrapping_mul(0x2545_f491_4f6c_dd1d) ^ 0x1234_5678_9abc_def1);
        let images = self.images(primes.next()?);
        let (top, rows) = self.first_image(&images, &mut stream)?;
        if top == 0 {
            return Some(Poly::one());
        }
        let mut lifted = Lifted::new(&images.m, &rows);
        if let Some(found) = self.accept(&lifted.poly(self, top), top) {
            return Some(found);
        }
        for p in primes.take(MAX_PRIMES) {
            let images = self.images(p);
            let base: Vec<u64> = self.others.iter().map(|_| stream.residue(&images.m)).collect();
            let Some(coefficients) = images.coefficients(&lifted.rows, top, &base, base.len()) else { continue };
            if !lifted.refine(&images.m, &coefficients) {
                return self.accept(&lifted.poly(self, top), top);
            }
        }
        None
    }

    /// The gcd modulo the first prime: degree in the main variable and the rows below it, variable by variable.
    fn first_image(&self, images: &Images, stream: &mut Stream) -> Option<(usize, Vec<Row>)> {
        let m = &images.m;
        let point: Vec<u64> = self.others.iter().map(|_| stream.residue(m)).collect();
        let image = images.at(&point)?;
        let top = degree(&image);
        let nonzero = image[..top].iter().enumerate().filter(|&(_, &c)| c != 0);
        let mut rows: Vec<Row> = nonzero.map(|(e, &c)| (e, vec![(Exponents::new(), c)])).collect();
        for (k, &(_, limit)) in self.others.iter().enumerate() {
            let count = (limit + images.lead.top[k]) as usize + 1;
            let mut at = vec![point[k]];
            let mut columns: Vec<Vec<Vec<u64>>> =
                vec![rows.iter().map(|(_, t)| t.iter().map(|t| t.1).collect()).collect()];
            while at.len() < count {
                let next = stream.residue(m);
                if at.contains(&next) {
                    continue;
                }
                let mut base: Vec<u64> = (0..k).map(|_| stream.residue(m)).collect();
                base.push(next);
                base.extend(&point[k + 1..]);
                columns.push(images.coefficients(&rows, top, &base, k)?);
                at.push(next);
            }
            rows = extend_rows(m, rows, at, &columns);
        }
        Some((top, rows))
    }

    /// The primitive part of a candidate if it divides both sides and has degree `top` in the main variable, the most
    /// that the first image allows: then it is the gcd.
    fn accept(&self, candidate: &Poly, top: usize) -> Option<Poly> {
        let plain = candidate.primitive().part;
        let part = if self.lead.is_constant() {
            plain
        } else {
            plain.div_exact(&content_in(&plain, self.main))?.primitive().part
        };
        let whole = part.degree(self.main) as usize == top;
        (whole && self.a.is_divisible_by(&part) && self.b.is_divisible_by(&part)).then_some(part)
    }
}

/// Adds one variable to the rows from its interpolated values: `columns[s]` are the coefficients at `at[s]`.
fn extend_rows(m: &Modulus, rows: Vec<Row>, at: Vec<u64>, columns: &[Vec<Vec<u64>>]) -> Vec<Row> {
    let through = Interpolation::new(m, at);
    let mut extended = Vec::with_capacity(rows.len());
    for (r, (e, terms)) in rows.into_iter().enumerate() {
        let mut list = Vec::new();
        for (t, (exponents, _)) in terms.into_iter().enumerate() {
            budget::spend(columns.len() as u64);
            let line = through.through(m, columns.iter().map(|column| column[r][t]).collect());
            for (power, &c) in line.iter().enumerate().filter(|&(_, &c)| c != 0) {
                let mut longer = exponents.clone();
                longer.push(power as u16);
                list.push((longer, c));
            }
        }
        if !list.is_empty() {
            extended.push((e, list));
        }
    }
    extended
}

/// The rows with integer coefficients known modulo a product of primes.
struct Lifted {
    rows: Vec<Row>,
    values: Vec<Vec<BigInt>>,
    modulus: BigInt,
}

impl Lifted {
    fn new(m: &Modulus, rows: &[Row]) -> Lifted {
        let values = rows.iter().map(|(_, terms)| terms.iter().map(|t| BigInt::from(m.symmetric(t.1))).collect());
        Lifted { rows: rows.to_vec(), values: values.collect(), modulus: BigInt::from(m.prime()) }
    }

    /// Takes in one more prime; false when no coefficient changes.
    fn refine(&mut self, m: &Modulus, coefficients: &[Vec<u64>]) -> bool {
        let inverse = m.inverse(m.residue(&Int::from(&self.modulus)));
        let mut changed = false;
        for (value, &c) in self.values.iter_mut().flatten().zip(coefficients.iter().flatten()) {
            budget::spend(1 + self.modulus.bits() / 64);
            let gap = m.sub(c, m.residue(&Int::from(&*value)));
            if gap != 0 {
                changed = true;
                *value += &self.modulus * m.symmetric(m.mul(gap, inverse));
            }
        }
        self.modulus *= m.prime();
        changed
    }

    fn poly(&self, task: &Task<'_>, top: usize) -> Poly {
        let mut terms = Vec::new();
        for ((e, list), values) in self.rows.iter().zip(&self.values) {
            for ((exponents, _), c) in list.iter().zip(values) {
                let pairs = task.others.iter().zip(exponents).map(|(&(v, _), &e)| (v, i32::from(e)));
                let m = Monomial::from_pairs(pairs.chain([(task.main, *e as i32)]));
                terms.push((m, Int::from(c)));
            }
        }
        let head = task.lead.mul_monomial(&Monomial::power(task.main, top as i32));
        &Poly::from_int_terms(terms) + &head
    }
}
