//! Factorisation of squarefree polynomials over a prime field (Cantor and Zassenhaus 1981).

use crate::algebra::budget;
use crate::algebra::modular::dense::{Dense, degree, trim};
use crate::algebra::modular::{Modulus, Stream};

/// A monic squarefree polynomial with the powers that make h → hᵖ a linear map (Berlekamp's matrix).
pub(super) struct Splitting {
    m: Modulus,
    f: Dense,
    /// x^(i·p) modulo f.
    rows: Vec<Dense>,
    /// Products of the irreducible factors of equal degree, with that degree.
    pub(super) parts: Vec<(usize, Dense)>,
}

impl Splitting {
    /// The distinct-degree factorisation of a monic squarefree polynomial of degree ≥ 1.
    pub(super) fn new(m: Modulus, f: Dense) -> Splitting {
        let variable = vec![0, m.one()];
        let first = m.power_modulo(&variable, m.prime(), &f);
        let mut rows = vec![vec![m.one()]];
        for i in 1..degree(&f) {
            let next = m.remainder(&m.product(&rows[i - 1], &first), &f);
            rows.push(next);
        }
        let mut splitting = Splitting { m, f, rows, parts: Vec::new() };
        splitting.parts = splitting.by_degree(first);
        splitting
    }

    fn by_degree(&self, first: Dense) -> Vec<(usize, Dense)> {
        let m = &self.m;
        let variable = vec![0, m.one()];
        let (mut rest, mut frobenius) = (self.f.clone(), first);
        let mut out = Vec::new();
        let mut d = 0;
        while degree(&rest) > 0 {
            d += 1;
            if 2 * d > degree(&rest) {
                out.push((degree(&rest), rest));
                break;
            }
            if d > 1 {
                frobenius = self.raise(&frobenius);
            }
            let part = m.common(&m.difference(&frobenius, &variable), &rest);
            if degree(&part) > 0 {
                rest = m.div_rem(&rest, &part).0;
                out.push((d, part));
            }
        }
        out
    }

    /// hᵖ modulo f.
    fn raise(&self, h: &Dense) -> Dense {
        let m = &self.m;
        budget::spend((h.len() * self.f.len() / 16) as u64);
        let mut out = vec![0; degree(&self.f)];
        for (row, &c) in self.rows.iter().zip(h) {
            for (place, &x) in out.iter_mut().zip(row) {
                *place = m.add(*place, m.mul(c, x));
            }
        }
        trim(&mut out);
        out
    }

    /// The degrees of all irreducible factors.
    pub(super) fn degrees(&self) -> Vec<usize> {
        self.parts.iter().flat_map(|(d, g)| vec![*d; degree(g) / d]).collect()
    }

    /// The modulus of this factorisation.
    pub(super) fn modulus(&self) -> Modulus {
        self.m
    }

    /// The monic irreducible factors.
    pub(super) fn factors(&self) -> Vec<Dense> {
        let mut stream = Stream::new(0x5bd1_e995);
        let mut out = Vec::new();
        for (d, part) in &self.parts {
            self.split_equal_degree(part.clone(), *d, &mut stream, &mut out);
        }
        out
    }

    /// Splits a monic product of irreducible polynomials of degree `d`.
    fn split_equal_degree(&self, g: Dense, d: usize, stream: &mut Stream, out: &mut Vec<Dense>) {
        if degree(&g) <= d {
            out.push(g);
            return;
        }
        let m = &self.m;
        loop {
            let start: Dense = (0..degree(&g)).map(|_| stream.residue(m)).collect();
            // start^((p^d − 1)/2) = (start^(1 + p + … + p^(d−1)))^((p − 1)/2)
            let mut norm = start.clone();
            let mut conjugate = start;
            for _ in 1..d {
                conjugate = self.raise(&conjugate);
                norm = m.remainder(&m.product(&norm, &conjugate), &g);
            }
            let root = m.power_modulo(&norm, (m.prime() - 1) / 2, &g);
            let part = m.common(&m.difference(&root, &vec![m.one()]), &g);
            if degree(&part) > 0 && degree(&part) < degree(&g) {
                let other = m.div_rem(&g, &part).0;
                self.split_equal_degree(part, d, stream, out);
                self.split_equal_degree(m.monic(&other), d, stream, out);
                return;
            }
        }
    }
}
