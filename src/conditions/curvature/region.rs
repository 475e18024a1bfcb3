//! Where the matrix is negative semidefinite: inequalities in the author's symbols, as short as they can be made.

use crate::algebra::budget;
use crate::algebra::factor::factor;
use crate::algebra::field::Field;
use crate::algebra::generator::{Element, Kind};
use crate::algebra::monomial::Monomial;
use crate::algebra::polynomial::Poly;
use crate::algebra::sign::Sign;
use crate::proof::{Expression, Matrix, Prover};

use super::super::coefficients::moves;
use super::super::slutsky::Compensation;
use super::squares::{Squares, blocks};
use super::{Question, RUNG_WORK, split};

/// The work that the normal form of one coefficient may take.
const REDUCED_WORK: u64 = 4_000_000;
/// Longer coefficients stay as they are, and those for other goods left out are not looked at.
const LONGEST_REDUCED: usize = 5_000;
/// The longest inequality that is looked at for factors.
const LONGEST_FACTORED: usize = 400;

/// Elements that are nonnegative where the matrix is negative semidefinite.
pub(super) struct Region {
    /// The elements.
    pub inequalities: Vec<Element>,
    /// Whether the matrix is negative semidefinite at a point exactly where they hold there.
    pub exact: bool,
    /// For elements of the parameters: whether the matrix fails somewhere in the domain unless they hold.
    pub complete: bool,
}

impl Region {
    /// Whether the inequalities speak of the parameters alone.
    pub fn of_parameters(&self, question: &Question<'_>) -> bool {
        let constant = |e: &Element| e.vars().into_iter().all(|v| !moves(&question.model.field, v));
        !self.inequalities.is_empty() && self.inequalities.iter().all(constant)
    }
}

/// What describes the region, the plainest first.
pub(super) fn describe(question: &Question<'_>, prover: &mut Prover<'_>) -> Vec<Region> {
    let mut regions = Vec::new();
    regions.extend(budget::attempt(RUNG_WORK, || by_blocks(question)).ok().flatten());
    regions.extend(budget::attempt(RUNG_WORK, || by_constant_slopes(question, prover)).ok().flatten());
    if regions.iter().any(|region| region.complete && region.of_parameters(question)) {
        return regions;
    }
    let all = budget::attempt(RUNG_WORK, || coefficients(question, prover)).unwrap_or_default();
    for each in all {
        let own = |c: Element| {
            let short = expanded_length(&question.model.field, &c) <= LONGEST_REDUCED;
            let found = budget::attempt(REDUCED_WORK, || short.then(|| essence(&question.model.field, &c)));
            found.ok().flatten().unwrap_or_else(|| Essence::whole(c))
        };
        let long = each.iter().any(|c| expanded_length(&question.model.field, c) > LONGEST_REDUCED);
        regions.push(Region::of(each.into_iter().map(own).collect()));
        if long {
            break;
        }
    }
    regions
}

impl Region {
    fn of(essential: Vec<Essence>) -> Region {
        let complete = essential.iter().all(|e| e.complete);
        let mut inequalities: Vec<Element> = Vec::new();
        for e in essential.into_iter().filter(|e| !e.factor.is_one()) {
            if !inequalities.contains(&e.factor) {
                inequalities.push(e.factor);
            }
        }
        Region { inequalities, exact: true, complete }
    }
}

/// Minus the matrix is a sum of independent blocks of squares; where all weights of a block have the sign of one element,
/// that element decides the block.
fn by_blocks(question: &Question<'_>) -> Option<Region> {
    let field = &question.model.field;
    question.balance.as_ref()?;
    let blocks = blocks(field, &question.symmetric);
    let decides = |block: &Squares| {
        let mut common: Option<Essence> = None;
        for (weight, _) in block {
            let own = essence(field, weight);
            match &common {
                Some(known) if known.factor != own.factor => return None,
                Some(_) => {}
                None => common = Some(own),
            }
        }
        Some(common.unwrap_or_else(|| Essence::whole(Poly::one())))
    };
    Some(Region::of(blocks.iter().map(decides).collect::<Option<_>>()?))
}

/// Shares that are linear in logarithms of prices and do not change with income, K = Γ − (diag w − w wᵀ): negative
/// semidefinite for all prices at which shares are positive exactly where Γ is. (Let it be so at all of them, and w be a
/// corner of the closure of the shares that occur, S the goods with wᵢ > 0. There Γ is at most zero on the vectors that
/// are constant on S; with the kernel of Γ they span everything, for else some Γl ≠ 0 would move within the corner.)
fn by_constant_slopes(question: &Question<'_>, prover: &mut Prover<'_>) -> Option<Region> {
    let (field, system) = (&question.model.field, question.system);
    let Compensation::Income(income) = system.compensation else { return None };
    if question.balance.is_none() || !system.positive.is_empty() || !is_symmetric(question) {
        return None;
    }
    let slopes = split::beyond_spread(question)?;
    let constant = |e: &Element| e.vars().into_iter().all(|v| !moves(field, v));
    let still = |w: &Element| field.is_zero(&field.log_derivative(w, income));
    // an assumption about prices would cut corners off
    let free = question.model.assumptions.iter().all(|a| constant(&field.current(&(&a.left - &a.right))));
    if !slopes.entries.iter().all(constant) || !question.shares.iter().all(still) || !free {
        return None;
    }
    let matrix = Matrix::new(slopes.n, |i, j| Expression::element(slopes.at(i, j).clone()));
    let conditions = prover.characteristic_coefficients(&matrix, Some(slopes.n - 1))?;
    let mut region = Region::of(conditions.iter().map(|c| essence(field, &field.reduce(c))).collect());
    region.exact = false;
    region.complete = true;
    Some(region)
}

/// Whether the matrix is its own symmetric part.
fn is_symmetric(question: &Question<'_>) -> bool {
    let (field, n) = (&question.model.field, question.symmetric.n);
    let entry = |i: usize, j: usize| field.current(&question.entries[i * n + j]);
    (0..n).all(|i| (0..i).all(|j| field.is_zero(&(&entry(i, j) - &entry(j, i)))))
}

/// The characteristic coefficients, for each good that may be left out.
pub(super) fn coefficients(question: &Question<'_>, prover: &mut Prover<'_>) -> Vec<Vec<Element>> {
    let n = question.symmetric.n;
    let choices: Vec<Option<usize>> = match question.balance {
        Some(_) => (0..n).rev().map(Some).collect(),
        None => vec![None],
    };
    let field = prover.field();
    let matrix = Matrix::new(n, |i, j| Expression::element(question.symmetric.at(i, j).clone()));
    let all = choices.into_iter().filter_map(|without| prover.characteristic_coefficients(&matrix, without));
    let shorter = |c: &Element| {
        let short = expanded_length(field, c) <= LONGEST_REDUCED;
        let reduced = budget::attempt(REDUCED_WORK, || short.then(|| field.reduce(c))).ok().flatten();
        let reduced = reduced.filter(|r| r.len() <= 2 * c.len());
        reduced.unwrap_or_else(|| c.clone())
    };
    all.map(|each| each.iter().map(shorter).collect()).collect()
}

/// What the sign of an element hangs on.
struct Essence {
    /// The element without factors that are positive; 1 if it is nonnegative anyway.
    factor: Element,
    /// Whether nothing else can make the element vanish for some parameters.
    complete: bool,
}

impl Essence {
    fn whole(e: Element) -> Essence {
        Essence { factor: plain(e), complete: false }
    }
}

/// How many products there are once named sums are put back, before terms are collected.
fn expanded_length(field: &Field, e: &Element) -> usize {
    let length = |v| match &*field.kind(v) {
        Kind::Sum { value, root: 1 } => expanded_length(field, &field.current(value)),
        _ => 1,
    };
    let of_term = |monomial: &Monomial| {
        let powers = monomial.iter().filter(|(_, k)| *k > 0);
        powers.fold(1usize, |n, (v, k)| n.saturating_mul(length(v).max(1).saturating_pow(k.unsigned_abs())))
    };
    e.terms().fold(0usize, |n, (monomial, _)| n.saturating_add(of_term(monomial)))
}

/// Without a positive rational content.
fn plain(e: Element) -> Element {
    use num_traits::Signed;
    let content = e.primitive().content.abs();
    if e.is_zero() { e } else { e.scale(&content.recip()) }
}

fn essence(field: &Field, c: &Element) -> Essence {
    if field.sign(c).is_nonnegative() || field.is_zero(c) {
        return Essence { factor: Poly::one(), complete: true };
    }
    let (numerator, denominator) = field.fraction(c);
    if numerator.len() > LONGEST_FACTORED {
        return Essence::whole(c.clone());
    }
    let factored = factor(&numerator);
    let whole = factored.factors.len() == 1 && factored.monomial.is_one();
    if whole && 2 * c.len() < numerator.len() {
        return Essence::whole(c.clone());
    }
    let powers = factored.monomial.iter().map(|(v, k)| (Poly::var(v), k));
    let parts = factored.factors.into_iter().map(|(p, k)| (p, k as i32));
    let below = denominator.into_iter().map(|(v, k)| (Poly::var(v), -(k as i32)));
    let mut sign = field.sign(&Poly::constant(&factored.content));
    let mut essence = Essence { factor: Poly::one(), complete: true };
    for (part, exponent) in powers.chain(parts).chain(below) {
        match field.sign(&part).to_power(exponent) {
            own @ (Sign::Positive | Sign::Negative) => sign = sign.times(own),
            own @ (Sign::NonNegative | Sign::NonPositive) => {
                sign = sign.times(own);
                essence.factor = &essence.factor * &part.pow(2);
                essence.complete = false;
            }
            _ if exponent > 0 || field.sign(&part).excludes_zero() => essence.factor = &essence.factor * &part,
            _ => return Essence::whole(c.clone()),
        }
    }
    let turned = matches!(sign, Sign::Negative | Sign::NonPositive);
    let factor = if turned { essence.factor.neg() } else { essence.factor };
    essence.factor = plain(factor);
    essence
}
