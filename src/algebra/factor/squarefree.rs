//! Squarefree decomposition (Yun 1976).

use super::linear_variable;
use crate::algebra::gcd::{content_in, gcd};
use crate::algebra::monomial::Var;
use crate::algebra::polynomial::Poly;

/// The primitive part of `p` as Π fᵢ^kᵢ with squarefree, pairwise coprime, primitive fᵢ; ascending. Monomial factors
/// and the content are left out; 0 gives no factor.
pub fn squarefree(p: &Poly) -> Vec<(Poly, u32)> {
    let mut out = Vec::new();
    decompose(p.primitive().part, &mut out);
    out.sort();
    out
}

fn decompose(p: Poly, out: &mut Vec<(Poly, u32)>) {
    if p.is_constant() {
        return;
    }
    let Some(main) = main_variable(&p) else { return };
    let content = content_in(&p, main);
    let part = if content.is_one() { p } else { quotient(&p, &content).primitive().part };
    decompose(content, out);
    if part.degree(main) == 1 {
        out.push((part, 1));
    } else {
        yun(&part, main, out);
    }
}

fn main_variable(p: &Poly) -> Option<Var> {
    linear_variable(p).or_else(|| p.vars().into_iter().min_by_key(|&v| p.degree(v)))
}

/// a / b for a known divisor b.
fn quotient(a: &Poly, b: &Poly) -> Poly {
    a.div_exact(b).unwrap_or_default()
}

/// `p` is primitive in `main`, so that all its factors contain the variable.
fn yun(p: &Poly, main: Var, out: &mut Vec<(Poly, u32)>) {
    let slope = p.formal_derivative(main);
    let repeated = gcd(p, &slope);
    if repeated.is_one() {
        out.push((p.clone(), 1));
        return;
    }
    let mut base = quotient(p, &repeated);
    let mut rest = &quotient(&slope, &repeated) - &base.formal_derivative(main);
    let mut exponent = 1;
    while !base.is_constant() {
        let part = gcd(&base, &rest);
        base = quotient(&base, &part);
        rest = &quotient(&rest, &part) - &base.formal_derivative(main);
        if !part.is_constant() {
            out.push((part, exponent));
        }
        exponent += 1;
    }
}
