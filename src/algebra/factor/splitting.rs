//! Factorisation of squarefree polynomials over a prime field (Cantor and Zassenhaus 1981).

use crate::algebra::modular::dense::{Dense, degree};
use crate::algebra::modular::{Modulus, Stream};

/// Products of the irreducible factors of equal degree, with that degree.
pub(super) type Parts = Vec<(usize, Dense)>;

/// The distinct-degree factorisation of a monic squarefree polynomial.
pub(super) fn by_degree(m: &Modulus, f: &Dense) -> Parts {
    let variable = vec![0, m.one()];
    let mut rest = f.clone();
    let mut frobenius = m.remainder(&variable, f);
    let mut out = Vec::new();
    let mut d = 0;
    while degree(&rest) > 0 {
        d += 1;
        if 2 * d > degree(&rest) {
            out.push((degree(&rest), rest));
            break;
        }
        frobenius = m.power_modulo(&frobenius, m.prime(), &rest);
        let part = m.common(&m.difference(&frobenius, &variable), &rest);
        if degree(&part) > 0 {
            rest = m.div_rem(&rest, &part).0;
            frobenius = m.remainder(&frobenius, &rest);
            out.push((d, part));
        }
    }
    out
}

/// Splits a monic product of irreducible polynomials of degree `d`.
pub(super) fn split_equal_degree(m: &Modulus, f: Dense, d: usize, stream: &mut Stream, out: &mut Vec<Dense>) {
    if degree(&f) <= d {
        out.push(f);
        return;
    }
    loop {
        let start: Dense = (0..degree(&f)).map(|_| stream.residue(m)).collect();
        // start^((p^d − 1)/2) = (start^(1 + p + … + p^(d−1)))^((p − 1)/2)
        let mut norm = start.clone();
        let mut conjugate = start;
        for _ in 1..d {
            conjugate = m.power_modulo(&conjugate, m.prime(), &f);
            norm = m.remainder(&m.product(&norm, &conjugate), &f);
        }
        let root = m.power_modulo(&norm, (m.prime() - 1) / 2, &f);
        let part = m.common(&m.difference(&root, &vec![m.one()]), &f);
        if degree(&part) > 0 && degree(&part) < degree(&f) {
            let other = m.div_rem(&f, &part).0;
            split_equal_degree(m, part, d, stream, out);
            split_equal_degree(m, m.monic(&other), d, stream, out);
            return;
        }
    }
}
