//! Coprime bases by factor refinement.

use super::gcd;
use crate::algebra::polynomial::Poly;

/// Pairwise coprime primitive non-constant polynomials such that every given polynomial other than 0 is a product of
/// their powers, a constant and a monomial; ascending. (Bach, Driscoll, Shallit 1993.)
pub fn coprime_base(list: &[Poly]) -> Vec<Poly> {
    let mut base: Vec<Poly> = Vec::new();
    let mut waiting: Vec<Poly> = list.iter().map(|p| p.primitive().part).collect();
    while let Some(p) = waiting.pop() {
        if p.is_constant() || base.contains(&p) {
            continue;
        }
        let clash = base.iter().enumerate().find_map(|(k, b)| {
            let common = gcd(&p, b);
            (!common.is_one()).then_some((k, common))
        });
        let Some((k, common)) = clash else {
            base.push(p);
            continue;
        };
        let old = base.swap_remove(k);
        waiting.extend([old, p].iter().filter_map(|q| q.div_exact(&common)).map(|q| q.primitive().part));
        waiting.push(common);
    }
    base.sort();
    base
}
