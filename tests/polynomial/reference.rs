//! The slow and obvious Laurent polynomial: a map from exponents to coefficients. The oracle of the other tests.

use std::collections::BTreeMap;

use mainspring::algebra::number::Rational;
use mainspring::algebra::polynomial::Poly;
use num_traits::Zero;

#[derive(Clone, Debug, Default, PartialEq)]
pub struct Naive(BTreeMap<BTreeMap<usize, i32>, Rational>);

impl Naive {
    pub fn of(p: &Poly) -> Naive {
        let exponents = |m: &mainspring::algebra::monomial::Monomial| m.iter().map(|(v, e)| (v.index(), e)).collect();
        Naive(p.terms().map(|(m, c)| (exponents(m), c)).collect())
    }

    fn put(&mut self, exponents: BTreeMap<usize, i32>, c: Rational) {
        let place = self.0.entry(exponents.clone()).or_insert_with(Rational::zero);
        *place += c;
        if place.is_zero() {
            self.0.remove(&exponents);
        }
    }

    pub fn add(&self, other: &Naive) -> Naive {
        let mut out = self.clone();
        other.0.iter().for_each(|(m, c)| out.put(m.clone(), c.clone()));
        out
    }

    pub fn mul(&self, other: &Naive) -> Naive {
        let mut out = Naive::default();
        for (m, c) in &self.0 {
            for (n, d) in &other.0 {
                let mut exponents = m.clone();
                for (&v, &e) in n {
                    *exponents.entry(v).or_insert(0) += e;
                }
                exponents.retain(|_, e| *e != 0);
                out.put(exponents, c * d);
            }
        }
        out
    }

    pub fn derivative(&self, v: usize) -> Naive {
        let mut out = Naive::default();
        for (m, c) in &self.0 {
            let Some(&e) = m.get(&v) else { continue };
            let mut exponents = m.clone();
            exponents.insert(v, e - 1);
            exponents.retain(|_, e| *e != 0);
            out.put(exponents, c * Rational::from_integer(e.into()));
        }
        out
    }
}
