//! The printed form of any formula, read by rules of its own, means what the formula means: both are evaluated modulo
//! a prime, where powers and functions are arbitrary but fixed mixtures of their arguments.

use crate::reader::{Tree, read};
use mainspring::algebra::formula::{Formula, Function};
use mainspring::render::formula_text::plain;
use num_bigint::BigInt;
use num_rational::BigRational;
use num_traits::ToPrimitive;
use proptest::prelude::*;

const PRIME: u64 = (1 << 31) - 1;

fn mix(seed: u64, a: u64, b: u64) -> u64 {
    (seed * 1_000_003 + a * 69_069 + b * 31_337 + a * a % PRIME * 7) % PRIME
}

fn inverse(value: u64) -> u64 {
    let (mut power, mut base, mut exponent) = (1, value % PRIME, PRIME - 2);
    while exponent > 0 {
        if exponent % 2 == 1 {
            power = power * base % PRIME;
        }
        base = base * base % PRIME;
        exponent /= 2;
    }
    power
}

fn of_name(name: &str) -> u64 {
    name.bytes().fold(17, |hash, byte| mix(hash, u64::from(byte), 3))
}

fn negate(value: u64) -> u64 {
    (PRIME - value) % PRIME
}

fn of_formula(formula: &Formula) -> u64 {
    match formula {
        Formula::Number(value) => {
            let residue = |part: &BigInt| ((part % PRIME + PRIME) % PRIME).to_u64().expect("a residue is small");
            residue(value.numer()) * inverse(residue(value.denom())) % PRIME
        }
        Formula::Symbol(symbol) => of_name(&symbol.plain),
        Formula::Sum(terms) => terms.iter().map(of_formula).sum::<u64>() % PRIME,
        Formula::Negative(inner) => negate(of_formula(inner)),
        Formula::Product(factors) => factors.iter().map(of_formula).fold(1, |product, each| product * each % PRIME),
        Formula::Quotient(above, below) => of_formula(above) * inverse(of_formula(below)) % PRIME,
        Formula::Power(base, exponent) => mix(5, of_formula(base), of_formula(exponent)),
        Formula::Call(function, argument) => mix(*function as u64 + 11, of_formula(argument), 1),
    }
}

fn of_tree(tree: &Tree) -> u64 {
    match tree {
        Tree::Integer(value) => value % PRIME,
        Tree::Name(name) => of_name(name),
        Tree::Add(a, b) => (of_tree(a) + of_tree(b)) % PRIME,
        Tree::Subtract(a, b) => (of_tree(a) + negate(of_tree(b))) % PRIME,
        Tree::Multiply(a, b) => of_tree(a) * of_tree(b) % PRIME,
        Tree::Divide(a, b) => of_tree(a) * inverse(of_tree(b)) % PRIME,
        Tree::Negate(a) => negate(of_tree(a)),
        Tree::Raise(a, b) => mix(5, of_tree(a), of_tree(b)),
        Tree::Call(function, a) => mix(*function as u64 + 11, of_tree(a), 1),
    }
}

fn any_function() -> impl Strategy<Value = Function> {
    use Function::*;
    prop::sample::select(vec![Ln, Exp, Sqrt, Ei, Erf, Erfi, LambertW])
}

/// Formulas of any shape, also of shapes that the constructors would tidy away.
fn any_formula() -> impl Strategy<Value = Formula> {
    formulas(true)
}

fn formulas(with_powers: bool) -> impl Strategy<Value = Formula> {
    let name = prop::sample::select(vec!["x", "p_1", "g[1,2]", "a_bread"]).prop_map(Formula::symbol);
    let number = (-9i64..30, 1i64..7).prop_map(|(n, d)| Formula::Number(BigRational::new(n.into(), d.into())));
    prop_oneof![name, number].prop_recursive(6, 60, 4, move |inner| {
        let boxed = inner.clone().prop_map(Box::new);
        prop_oneof![
            prop::collection::vec(inner.clone(), 1..4).prop_map(Formula::Sum),
            prop::collection::vec(inner, 1..4).prop_map(Formula::Product),
            boxed.clone().prop_map(Formula::Negative),
            (boxed.clone(), boxed.clone()).prop_map(|(a, b)| Formula::Quotient(a, b)),
            (boxed.clone(), boxed.clone()).prop_map(move |(a, b)| match with_powers {
                true => Formula::Power(a, b),
                false => Formula::Quotient(a, b),
            }),
            (any_function(), boxed).prop_map(|(function, a)| Formula::Call(function, a)),
        ]
    })
}

/// The same formula put together by the constructors.
fn tidied(formula: &Formula) -> Formula {
    match formula {
        Formula::Number(value) => Formula::number(value.clone()),
        Formula::Symbol(symbol) => Formula::Symbol(symbol.clone()),
        Formula::Sum(terms) => Formula::sum(terms.iter().map(tidied).collect()),
        Formula::Negative(inner) => Formula::negative(tidied(inner)),
        Formula::Product(factors) => Formula::product(factors.iter().map(tidied).collect()),
        Formula::Quotient(above, below) => Formula::quotient(tidied(above), tidied(below)),
        Formula::Power(base, exponent) => Formula::power(tidied(base), tidied(exponent)),
        Formula::Call(function, argument) => Formula::call(*function, tidied(argument)),
    }
}

/// Whether anything is divided by zero; then the residues say nothing.
fn divides_by_zero(formula: &Formula) -> bool {
    match formula {
        Formula::Number(_) | Formula::Symbol(_) => false,
        Formula::Sum(parts) | Formula::Product(parts) => parts.iter().any(divides_by_zero),
        Formula::Negative(inner) | Formula::Call(_, inner) => divides_by_zero(inner),
        Formula::Quotient(a, b) => of_formula(b) == 0 || divides_by_zero(a) || divides_by_zero(b),
        Formula::Power(a, b) => divides_by_zero(a) || divides_by_zero(b),
    }
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(4000))]

    #[test]
    fn what_is_printed_reads_back_with_the_same_meaning(formula in any_formula()) {
        let printed = plain(&formula);
        prop_assert_eq!(of_tree(&read(&printed)), of_formula(&formula), "printed as {}", printed);
    }

    #[test]
    fn the_constructors_keep_the_meaning(formula in formulas(false)) {
        prop_assume!(!divides_by_zero(&formula));
        let tidy = tidied(&formula);
        prop_assert_eq!(of_formula(&tidy), of_formula(&formula), "tidied to {}", plain(&tidy));
    }
}
