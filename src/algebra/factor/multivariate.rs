//! Factorisation in several variables: an integer point, the univariate image, Hensel lifting, exact verification.

use std::collections::BTreeMap;

use num_bigint::BigInt;
use num_integer::Integer;
use num_traits::{Signed, Zero};

use super::integral::{self, Integral};
use super::leading::{Fitted, Leading, fit, value_at};
use super::lift::Lifting;
use super::univariate::{factor_integral, subset_sums};
use super::{Pieces, factor_squarefree, quadratic, residual};
use crate::algebra::budget;
use crate::algebra::gcd::content_in;
use crate::algebra::modular::dense::degree;
use crate::algebra::modular::{Modulus, Primes, Stream};
use crate::algebra::monomial::{Monomial, Var};
use crate::algebra::number::Int;
use crate::algebra::polynomial::Poly;

/// Points looked at before giving up.
const POINTS: u64 = 60;
/// Usable points compared before the first lifting.
const COMPARED: usize = 3;
/// Primes combined for one lifting.
const MAX_PRIMES: usize = 24;

/// The irreducible factors of a primitive squarefree polynomial that is linear in none of its (at least two)
/// variables.
pub(super) fn factor_multivariate(p: &Poly) -> Pieces {
    let main = main_variable(p);
    let Some(main) = main else { return Pieces::unknown(p.clone()) };
    let content = content_in(p, main);
    if !content.is_one() {
        return match p.div_exact(&content) {
            Some(rest) => factor_squarefree(&content).join(factor_squarefree(&rest.primitive().part)),
            None => Pieces::unknown(p.clone()),
        };
    }
    if let Some(pieces) = quadratic::factor_quadratic(p, main) {
        return pieces;
    }
    Search::new(p, main).run().unwrap_or_else(|| Pieces::unknown(p.clone()))
}

/// Degree 2 first, then a constant leading coefficient, then low degree and a short leading coefficient.
fn main_variable(p: &Poly) -> Option<Var> {
    p.vars().into_iter().min_by_key(|&v| {
        let lead = p.coefficients(v).into_iter().next().map_or(0, |(_, c)| if c.is_constant() { 0 } else { c.len() });
        let d = p.degree(v);
        (d > 2, lead > 0, d, lead)
    })
}

/// A usable point with the factors of the image.
struct Image {
    point: Vec<(Var, i64)>,
    fitted: Fitted,
}

enum Outcome {
    Irreducible,
    Usable(Image),
    Useless,
}

/// The search for a point whose image factors like the polynomial itself.
struct Search<'a> {
    p: &'a Poly,
    main: Var,
    others: Vec<Var>,
    leading: Leading,
    /// Degrees in `main` that a factor may still have.
    possible: Vec<bool>,
}

impl<'a> Search<'a> {
    fn new(p: &'a Poly, main: Var) -> Search<'a> {
        let mut others: Vec<Var> = p.vars().into_iter().filter(|&v| v != main).collect();
        others.sort_by_key(|&v| p.degree(v));
        let lead = p.coefficients(main).into_iter().next().map_or_else(Poly::one, |(_, c)| c);
        let possible = vec![true; p.degree(main) as usize + 1];
        Search { p, main, others, leading: Leading::new(&lead), possible }
    }

    fn run(mut self) -> Option<Pieces> {
        let mut stream = Stream::new(0x0f1e_2d3c);
        let mut usable: Vec<Image> = Vec::new();
        for round in 0..POINTS {
            let mut coordinate = |v: Var| {
                let reach = self.reach(v, round);
                (v, stream.below(2 * reach + 1) as i64 - reach as i64)
            };
            let point: Vec<(Var, i64)> = self.others.iter().map(|&v| coordinate(v)).collect();
            match self.look_at(point) {
                Outcome::Irreducible => return Some(Pieces::irreducible(self.p.clone())),
                Outcome::Useless => continue,
                Outcome::Usable(image) => usable.push(image),
            }
            let two_left = usable.last().is_some_and(|image| image.fitted.images.len() == 2);
            if usable.len() < COMPARED && !two_left {
                continue;
            }
            // The fewest factors are the most credible; the lifting decides.
            usable.sort_by_key(|image| image.fitted.images.len());
            let best = usable.remove(0);
            if let Some(found) = self.lift(&best) {
                return Some(Pieces::of(found));
            }
        }
        None
    }

    /// The greatest coordinate tried: small, but larger where factors of the leading coefficient must be told apart.
    fn reach(&self, v: Var, round: u64) -> u64 {
        let load = self.leading.factors.iter().filter(|(l, _)| l.contains(v)).count();
        let apart = if load > 0 { 3 * self.leading.factors.len() as u64 } else { 0 };
        2 + apart * (1 + round / 8) + round / 3
    }

    /// The factors of the image at a point.
    fn look_at(&mut self, point: Vec<(Var, i64)>) -> Outcome {
        budget::spend(self.p.len() as u64);
        let Some(image) = self.image(&point) else { return Outcome::Useless };
        let mut content = image.iter().fold(BigInt::zero(), |g, c| g.gcd(c));
        if image.last().is_some_and(Signed::is_negative) {
            content = -content;
        }
        let factors = factor_integral(&integral::primitive(&image));
        let degrees: Vec<usize> = factors.iter().map(|f| f.len() - 1).collect();
        let sums = subset_sums(&degrees, image.len() - 1);
        self.possible.iter_mut().zip(&sums).for_each(|(all, &here)| *all &= here);
        if self.possible.iter().filter(|&&d| d).count() <= 2 {
            return Outcome::Irreducible;
        }
        match fit(&self.leading, &point, &content, &factors) {
            Some(fitted) => Outcome::Usable(Image { point, fitted }),
            None => Outcome::Useless,
        }
    }

    /// The polynomial at the point; None when its degree drops or it is not squarefree.
    fn image(&self, point: &[(Var, i64)]) -> Option<Integral> {
        let mut image = vec![BigInt::zero(); self.possible.len()];
        for (e, c) in self.p.coefficients(self.main) {
            *image.get_mut(usize::try_from(e).ok()?)? = value_at(&c, point);
        }
        integral::trim(&mut image);
        if image.len() != self.possible.len() {
            return None;
        }
        let m = Modulus::new(Primes::new().next()?);
        let residues = integral::to_dense(&m, &image);
        (degree(&m.common(&residues, &m.slope(&residues))) == 0).then_some(image)
    }

    /// Lifts the factors of an image, prime by prime until the integers stand; None when they do not lift.
    fn lift(&self, image: &Image) -> Option<Vec<Poly>> {
        let scaled = self.p.scale(&num_rational::Ratio::from_integer(image.fitted.scale.clone()));
        let mut combined: Option<Combined> = None;
        for p in Primes::new().take(MAX_PRIMES) {
            let m = Modulus::new(p);
            let images = &image.fitted.images;
            if images.iter().any(|u| u.last().is_none_or(|c| m.residue(&Int::from(c)) == 0)) {
                continue;
            }
            let lifting = Lifting {
                m,
                x: self.main,
                point: image.point.iter().map(|&(v, x)| (v, m.residue(&Int::from(x)))).collect(),
                leads: &image.fitted.leads,
                images: images.iter().map(|u| integral::to_dense(&m, u)).collect(),
            };
            let factors = lifting.run(&residual::reduce(&m, &scaled))?;
            let settled = match &mut combined {
                Some(known) => !known.refine(&m, &factors),
                None => {
                    combined = Some(Combined::new(&m, &factors));
                    false
                }
            };
            if let Some(found) = combined.as_ref().and_then(|known| self.verified(&known.polys())) {
                return Some(found);
            }
            if settled {
                return None;
            }
        }
        None
    }

    /// The primitive parts of the candidates when their product is the polynomial.
    fn verified(&self, candidates: &[Poly]) -> Option<Vec<Poly>> {
        let mut rest = self.p.clone();
        let mut found = Vec::with_capacity(candidates.len());
        for candidate in candidates {
            let part = candidate.primitive().part;
            rest = rest.div_exact(&part)?;
            found.push(part);
        }
        rest.is_constant().then_some(found)
    }
}

/// Factors known modulo a product of primes.
struct Combined {
    factors: Vec<BTreeMap<Monomial, BigInt>>,
    modulus: BigInt,
}

impl Combined {
    fn new(m: &Modulus, factors: &[residual::Residual]) -> Combined {
        let factors = factors.iter().map(|f| residual::lifted(m, f).into_iter().collect()).collect();
        Combined { factors, modulus: BigInt::from(m.prime()) }
    }

    /// Takes in one more prime; false when no coefficient changes.
    fn refine(&mut self, m: &Modulus, factors: &[residual::Residual]) -> bool {
        let inverse = m.inverse(m.residue(&Int::from(&self.modulus)));
        let mut changed = false;
        for (known, fresh) in self.factors.iter_mut().zip(factors) {
            for (monomial, _) in fresh {
                known.entry(monomial.clone()).or_insert_with(BigInt::zero);
            }
            let fresh: BTreeMap<&Monomial, u64> = fresh.iter().map(|(k, c)| (k, *c)).collect();
            for (monomial, value) in known.iter_mut() {
                budget::spend(1 + self.modulus.bits() / 64);
                let wanted = fresh.get(monomial).copied().unwrap_or(0);
                let gap = m.sub(wanted, m.residue(&Int::from(&*value)));
                if gap != 0 {
                    changed = true;
                    *value += &self.modulus * m.symmetric(m.mul(gap, inverse));
                }
            }
        }
        self.modulus *= m.prime();
        changed
    }

    fn polys(&self) -> Vec<Poly> {
        self.factors.iter().map(|f| residual::to_poly(f.iter().map(|(m, c)| (m.clone(), c.clone())))).collect()
    }
}
