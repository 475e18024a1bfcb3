//! Signs of elements from what is known of the domain.
//!
//! Every answer other than `Unknown` is a consequence of the facts: of factors with known signs, of terms with one
//! sign, or of an identity f = Σ λₖ μₖ gₖ + (terms of one sign) with λₖ > 0 rational, μₖ positive monomials and gₖ facts.

use std::cmp::Ordering;
use std::rc::Rc;

use num_traits::Signed;

use super::budget;
use super::evaluation::Point;
use super::factor::factor;
use super::field::{Fact, Field, Relation};
use super::generator::{Base, Element, Kind, Role, Special};
use super::monomial::{Monomial, Var};
use super::number::Rational;
use super::polynomial::Poly;

pub use super::sign_rules::Sign;

/// How many identities are tried for one sign.
const MOST_TRIALS: u32 = 150;
/// How many facts one identity may use.
const MOST_FACTS: u32 = 5;
/// How many facts may be used as bounds for a symbol, one after the other.
const MOST_SHIFTS: u32 = 1;
/// The longest polynomial whose sign is looked for coefficient by coefficient.
const MOST_TERMS: usize = 400;

impl Field {
    /// Adds a fact about the domain. A product whose other factors have known signs becomes a fact about one factor.
    pub fn assume(&self, e: &Element, relation: Relation) {
        let (element, relation) = self.essential(e, relation);
        let mut tables = self.tables.borrow_mut();
        tables.signs.clear();
        let fact = Fact { element, relation };
        if !tables.facts.iter().any(|f| f.element == fact.element && f.relation == fact.relation) {
            tables.facts.push(Rc::new(fact));
        }
    }

    /// The facts that are known, in the order in which they were given.
    pub fn facts(&self) -> Vec<Rc<Fact>> {
        self.tables.borrow().facts.clone()
    }

    /// Runs `body` with further facts, which are forgotten afterwards, however `body` ends.
    pub fn suppose<T>(&self, further: &[(Element, Relation)], body: impl FnOnce() -> T) -> T {
        let _forget = Forget { field: self, keep: self.tables.borrow().facts.len() };
        further.iter().for_each(|(e, relation)| self.assume(e, *relation));
        body()
    }

    /// The relation without factors that do not matter for it. An even power of a factor of unknown sign says no more
    /// than that the factor is not zero, and may be left out of a strict relation only.
    fn essential(&self, e: &Element, relation: Relation) -> (Element, Relation) {
        let (content, pieces) = self.pieces(e);
        let mut rest = Poly::constant(&Rational::from_integer(content.signum().to_integer()));
        for (base, exponent) in pieces {
            if relation == Relation::NonZero {
                rest = &rest * &self.expand(&base);
                continue;
            }
            match self.sign(&base).to_power(exponent) {
                Sign::Positive => {}
                Sign::Negative => rest = rest.neg(),
                _ if exponent % 2 != 0 => rest = &rest * &self.expand(&base),
                _ if relation == Relation::Positive => {}
                _ => rest = &rest * &self.expand(&base).pow(2),
            }
        }
        (rest, relation)
    }

    /// The sign of e on the whole domain, as far as the facts give it.
    pub fn sign(&self, e: &Element) -> Sign {
        self.sign_with(e, MOST_SHIFTS)
    }

    /// The sign, by at most so many facts used as bounds one after the other.
    pub(super) fn sign_with(&self, e: &Element, shifts: u32) -> Sign {
        let e = self.current(e);
        if let Some((coefficient, monomial)) = e.as_monomial() {
            return Sign::of(&coefficient).times(self.product_sign(monomial));
        }
        if e.is_zero() {
            return Sign::Zero;
        }
        let visible = self.terms_sign(&e);
        if visible != Sign::Unknown {
            return visible;
        }
        if let Some(sign) = self.number_sign(&e) {
            return sign;
        }
        if !self.has_sums(&e) {
            return self.polynomial_or_shifted(&e, shifts);
        }
        let (numerator, denominator) = self.fraction(&e);
        let below =
            denominator.iter().fold(Sign::Positive, |s, (v, k)| s.times(self.variable_sign(*v).to_power(*k as i32)));
        if below != Sign::Unknown {
            return self.polynomial_or_shifted(&numerator, shifts).times(below);
        }
        if denominator.iter().any(|(v, k)| k % 2 == 0 && !self.variable_sign(*v).excludes_zero()) {
            return Sign::Unknown;
        }
        // a/b has the sign of ab
        let odd = denominator.iter().filter(|(_, k)| k % 2 != 0);
        let product = odd.fold(numerator, |product, (v, _)| match &*self.kind(*v) {
            Kind::Sum { value, .. } => &product * &self.expand(value),
            _ => product,
        });
        match self.polynomial_sign(&self.expand(&product)) {
            sign @ (Sign::Positive | Sign::Negative | Sign::NonZero) => sign,
            _ => Sign::Unknown,
        }
    }

    /// The sign of a polynomial; where it is not seen at once, by its factors, each around the bounds that facts give.
    fn polynomial_or_shifted(&self, f: &Poly, shifts: u32) -> Sign {
        let direct = self.polynomial_sign(f);
        if shifts == 0 || f.len() > MOST_TERMS || !matches!(direct, Sign::Unknown | Sign::NonZero) {
            return direct;
        }
        let factored = factor(f);
        let outside = Sign::of(&factored.content).times(self.monomial_sign(&factored.monomial));
        let by_factors = factored.factors.iter().fold(outside, |total, (part, k)| {
            let own = match self.polynomial_sign(part) {
                Sign::Unknown | Sign::NonZero if k % 2 != 0 => self.shifted_sign(part, shifts),
                known => known,
            };
            total.times(own.to_power(*k as i32))
        });
        if by_factors == Sign::Unknown { direct } else { by_factors }
    }

    /// The sign of an element without symbols, from an enclosure.
    fn number_sign(&self, e: &Element) -> Option<Sign> {
        if !e.vars().into_iter().all(|v| self.is_number(v)) {
            return None;
        }
        [64, 192].into_iter().find_map(|bits| match self.enclose(e, &Point::new(), bits)?.sign()? {
            Ordering::Greater => Some(Sign::Positive),
            Ordering::Less => Some(Sign::Negative),
            Ordering::Equal => Some(Sign::Zero),
        })
    }

    /// Whether a variable is built from no symbol but π.
    fn is_number(&self, var: Var) -> bool {
        self.support(var).iter().all(|v| !matches!(*self.kind(*v), Kind::Symbol(role) if role != Role::Pi))
    }

    /// The sign of a product: by its factors, or by a fact about the product of those whose own signs are unknown.
    fn product_sign(&self, monomial: &Monomial) -> Sign {
        let by_factors = self.monomial_sign(monomial);
        let open = |(v, k): (Var, i32)| k % 2 != 0 && !matches!(self.variable_sign(v), Sign::Positive | Sign::Negative);
        let decided = !matches!(by_factors, Sign::Unknown | Sign::NonZero);
        if decided || monomial.iter().filter(|power| open(*power)).count() < 2 {
            return by_factors;
        }
        let odd = Monomial::from_pairs(monomial.iter().filter(|power| open(*power)).map(|(v, _)| (v, 1)));
        let settled = Monomial::from_pairs(monomial.iter().filter(|power| !open(*power)));
        match self.stated_sign(&self.expand(&Poly::monomial(odd))).times(self.monomial_sign(&settled)) {
            Sign::Unknown => by_factors,
            stated => stated,
        }
    }

    fn monomial_sign(&self, monomial: &Monomial) -> Sign {
        monomial.iter().fold(Sign::Positive, |s, (var, k)| s.times(self.variable_sign(var).to_power(k)))
    }

    fn terms_sign(&self, e: &Element) -> Sign {
        let mut total = Sign::Zero;
        for (monomial, coefficient) in e.raw_terms() {
            let own = if coefficient.is_negative() { Sign::Negative } else { Sign::Positive };
            total = total.plus(own.times(self.monomial_sign(monomial)));
            if total == Sign::Unknown {
                return total;
            }
        }
        total
    }

    /// The sign of a variable.
    pub fn variable_sign(&self, var: Var) -> Sign {
        let known = self.tables.borrow().signs.get(&var).copied();
        if let Some(known) = known {
            return known;
        }
        // while it is being found, nothing is known of it
        self.tables.borrow_mut().signs.insert(var, Sign::Unknown);
        let sign = self.find_variable_sign(var);
        if sign == Sign::Unknown {
            self.tables.borrow_mut().signs.remove(&var);
        }
        self.tables.borrow_mut().signs.insert(var, sign);
        sign
    }

    fn find_variable_sign(&self, var: Var) -> Sign {
        match &*self.kind(var) {
            Kind::Symbol(role) if role.is_positive() => Sign::Positive,
            Kind::Exp(_) => Sign::Positive,
            Kind::Sum { root, .. } if *root > 1 => Sign::Positive,
            Kind::Sum { value, .. } => self.sign(&self.expand(value)),
            Kind::Ln(Base::Number(_)) => Sign::Positive,
            Kind::Special(Special::Erf | Special::Erfi | Special::LambertW, argument) => self.sign(argument),
            Kind::Ln(_) => {
                let excess = &self.expand(&self.base_of(var)) - &Poly::one();
                let stated = self.stated_sign(&Poly::var(var));
                if stated != Sign::Unknown { stated } else { self.stated_sign(&excess) }
            }
            _ => self.stated_sign(&Poly::var(var)),
        }
    }

    fn polynomial_sign(&self, f: &Poly) -> Sign {
        if f.is_zero() {
            return Sign::Zero;
        }
        let visible = self.terms_sign(f);
        if visible != Sign::Unknown {
            return visible;
        }
        let split = f.primitive();
        let outside = Sign::of(&split.content).times(self.monomial_sign(&split.monomial));
        let stated = self.stated_sign(&split.part);
        if stated != Sign::Unknown {
            return outside.times(stated);
        }
        let grouped = self.sign_of_groups(&split.part);
        if grouped != Sign::Unknown {
            return outside.times(grouped);
        }
        let factored = factor(&split.part);
        factored.factors.iter().fold(outside.times(Sign::of(&factored.content)), |s, (part, k)| {
            let own = match self.terms_sign(part) {
                Sign::Unknown if *part == split.part => Sign::Unknown,
                Sign::Unknown => match self.stated_sign(part) {
                    Sign::Unknown => self.sign_of_groups(part),
                    known => known,
                },
                known => known,
            };
            let own = if own == Sign::Unknown && k % 2 != 0 { self.sign_by_parameters(part) } else { own };
            s.times(own.to_power(*k as i32))
        })
    }

    /// The sign of Σ μₖ fₖ where the μₖ are monomials of the parameters and each fₖ has a visible sign once it is factored,
    /// as a square has.
    fn sign_by_parameters(&self, f: &Poly) -> Sign {
        let is_parameter = |v: Var| self.role(v) == Some(Role::Parameter);
        let vars = f.vars();
        if f.len() > MOST_TERMS || vars.iter().all(|v| is_parameter(*v)) || !vars.iter().any(|v| is_parameter(*v)) {
            return Sign::Unknown;
        }
        let mut total = Sign::Zero;
        for (monomial, coefficient) in f.collect(is_parameter) {
            let factored = factor(&coefficient);
            let own = self.monomial_sign(&monomial).times(self.monomial_sign(&factored.monomial));
            let own = factored.factors.iter().fold(own.times(Sign::of(&factored.content)), |s, (part, k)| {
                s.times(self.terms_sign(part).to_power(*k as i32))
            });
            total = total.plus(own);
            if total == Sign::Unknown {
                break;
            }
        }
        total
    }

    /// The sign from logarithms taken together, or from squares.
    fn sign_of_groups(&self, f: &Poly) -> Sign {
        match self.logarithmic_sign(f) {
            Sign::Unknown => match self.square_sign(f) {
                Sign::Unknown => self.square_sign(&f.neg()).negated(),
                known => known,
            },
            known => known,
        }
    }

    /// The sign of a polynomial as a combination of facts.
    fn stated_sign(&self, f: &Poly) -> Sign {
        let facts = self.current_facts();
        let nonzero = facts.iter().any(|g| g.relation != Relation::NonNegative && self.divides(f, &g.element));
        for (candidate, strict, weak) in
            [(f.clone(), Sign::Positive, Sign::NonNegative), (f.neg(), Sign::Negative, Sign::NonPositive)]
        {
            let mut trials = MOST_TRIALS;
            match self.combination(&candidate, &facts, MOST_FACTS, false, &mut trials) {
                Sign::Positive => return strict,
                Sign::NonNegative => return if nonzero { strict } else { weak },
                _ => {}
            }
        }
        if nonzero { Sign::NonZero } else { Sign::Unknown }
    }

    /// The facts, written in variables that are still in use.
    pub(super) fn current_facts(&self) -> Vec<Rc<Fact>> {
        let facts = self.facts();
        if self.tables.borrow().retired.is_empty() {
            return facts;
        }
        let fresh = |fact: &Rc<Fact>| Rc::new(Fact { element: self.current(&fact.element), relation: fact.relation });
        facts.iter().map(fresh).collect()
    }

    /// Whether g is a multiple of f by something that is defined everywhere, so that f vanishes nowhere where g does not.
    fn divides(&self, f: &Poly, g: &Poly) -> bool {
        let defined =
            |v: Var| self.role(v).is_some_and(|role| role.is_positive()) || matches!(*self.kind(v), Kind::Exp(_));
        g.div_exact(f).is_some_and(|q| q.vars().into_iter().all(|v| q.low_degree(v) >= 0 || defined(v)))
    }

    /// Tries to write f as positive multiples of facts plus terms of one sign, cancelling the first doubtful term.
    fn combination(&self, f: &Poly, facts: &[Rc<Fact>], deep: u32, strict: bool, trials: &mut u32) -> Sign {
        if f.is_zero() {
            return if strict { Sign::Positive } else { Sign::NonNegative };
        }
        let mut total = if strict { Sign::Positive } else { Sign::NonNegative };
        let mut doubtful = None;
        for (monomial, coefficient) in f.raw_terms() {
            let own = if coefficient.is_negative() { Sign::Negative } else { Sign::Positive };
            let own = own.times(self.monomial_sign(monomial));
            if own.is_nonnegative() {
                total = total.plus(own);
            } else {
                doubtful.get_or_insert_with(|| monomial.clone());
            }
        }
        let Some(monomial) = doubtful else { return total };
        if deep == 0 {
            return Sign::Unknown;
        }
        // a multiple by a positive monomial keeps what is of unknown sign: a fact without it cannot help
        let unsettled = monomial.vars().into_iter().find(|v| !self.variable_sign(*v).excludes_zero());
        let helps = |g: &&Rc<Fact>| g.relation != Relation::NonZero && unsettled.is_none_or(|v| g.element.contains(v));
        // the shortest rest first: where f is a fact, the first step ends it
        let mut rests: Vec<(Poly, bool)> = Vec::new();
        for fact in facts.iter().filter(helps) {
            let strict = strict || fact.relation == Relation::Positive;
            rests.extend(self.steps(f, &monomial, &fact.element).into_iter().map(|step| (f - &step, strict)));
        }
        budget::spend(1 + rests.iter().map(|(rest, _)| rest.len() as u64).sum::<u64>());
        rests.sort_by_key(|(rest, _)| rest.len());
        for (rest, strict) in rests {
            if *trials == 0 {
                return Sign::Unknown;
            }
            *trials -= 1;
            let found = self.combination(&rest, facts, deep - 1, strict, trials);
            if found != Sign::Unknown {
                return found;
            }
        }
        Sign::Unknown
    }

    /// The positive multiples λ μ g of a fact g that cancel the given term of f.
    fn steps(&self, f: &Poly, monomial: &Monomial, g: &Poly) -> Vec<Poly> {
        let Some(target) = f.terms().find(|(m, _)| *m == monomial).map(|(_, c)| c) else { return Vec::new() };
        let mut steps = Vec::new();
        for (own, coefficient) in g.terms() {
            if target.is_positive() != coefficient.is_positive() {
                continue;
            }
            let shift = monomial.div(own);
            if self.monomial_sign(&shift) == Sign::Positive {
                steps.push(g.mul_term(&(&target / &coefficient), &shift));
            }
        }
        steps
    }
}

/// Takes the facts beyond the first `keep` away again.
struct Forget<'f> {
    field: &'f Field,
    keep: usize,
}

impl Drop for Forget<'_> {
    fn drop(&mut self) {
        let mut tables = self.field.tables.borrow_mut();
        tables.facts.truncate(self.keep);
        tables.signs.clear();
    }
}
