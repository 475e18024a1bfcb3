//! Random preferences, from text to text: v(p, m) is drawn as a formula, differentiated here by the rules of the
//! calculus, and only the demands that follow from Roy's identity are written into a model file. What the program
//! recovers is compared with v along compensated paths; what it says of the conditions must be `proven` or open.

use std::collections::BTreeMap;
use std::time::{Duration, Instant};

use crate::construction::Formula::{self, Name, Number};
use crate::construction::{Construction, draw, exp, ln, power, product, quotient, root, sum};
use crate::outside::Outside;
use crate::outside::integrability::{points, printed, try_vetted};
use mainspring::conditions::{Condition, Verdict};
use mainspring::recovery::Recovered;
use mainspring::{Allowance, Part};

/// How a recovery ended.
#[derive(Clone, Copy, PartialEq, Eq, PartialOrd, Ord, Debug)]
enum End {
    Recovered,
    NotFound,
    Undecided,
    OutOfLimits,
    Unread,
}

/// v recovered and v drawn have the same slopes up to a factor: both give the demands by Roy's identity.
fn same_level_sets(drawn: &Construction, text: &str, vetting: &mainspring::Vetting) {
    let Some(Recovered::Found(found)) = &vetting.recovered else { return };
    let Some(v) = &found.indirect_utility else { return };
    let outside = Outside::read(text);
    let v = printed(&vetting.model, text, v);
    for values in points(&vetting.model, &outside, 3) {
        let slope = outside.formula(&v, &values).slope;
        let along = slope[slope.len() - 1];
        for (price, x) in outside.quantities(&values).iter().enumerate() {
            let roy = -slope[price] / along;
            let fine = !roy.is_finite() || (roy - x.value).abs() < 1e-5 * (1.0 + x.value.abs());
            assert!(
                fine,
                "Roy's identity fails for v recovered: {roy} for {} at {values:?}\n{drawn:?}\n{text}",
                x.value
            );
        }
    }
}

/// Draws one construction and vets its demands.
fn attempt(number: u64, allowance: Allowance) -> (Construction, End) {
    let drawn = draw(number);
    let end = vetted(&drawn, allowance);
    (drawn, end)
}

/// Vets the demands of a construction.
fn vetted(drawn: &Construction, allowance: Allowance) -> End {
    let text = drawn.model();
    let parts = [Condition::Homogeneity, Condition::AddingUp, Condition::Symmetry].map(Part::Condition);
    let parts: Vec<Part> = parts.into_iter().chain([Part::Recovery]).collect();
    let Some(vetting) = try_vetted(&text, &parts, allowance) else { return End::Unread };
    for finding in &vetting.findings {
        let wrong = !matches!(finding.verdict, Verdict::Proven | Verdict::Undecided);
        let (condition, verdict) = (finding.condition, finding.verdict);
        assert!(!wrong, "{condition:?} is called {verdict:?}, though demands come from v = {}\n{text}", drawn.v);
    }
    same_level_sets(drawn, &text, &vetting);
    let open = vetting.findings.iter().any(|finding| finding.verdict == Verdict::Undecided);
    match &vetting.recovered {
        Some(Recovered::Found(_)) if !open => End::Recovered,
        _ if !vetting.stops.is_empty() => End::OutOfLimits,
        _ if open => End::Undecided,
        _ => End::NotFound,
    }
}

/// Runs a range of constructions and counts how they end; the failures are printed.
fn run(numbers: std::ops::Range<u64>, allowance: Allowance) -> BTreeMap<End, usize> {
    let mut ends = BTreeMap::new();
    for number in numbers {
        let start = Instant::now();
        let (drawn, end) = attempt(number, allowance);
        *ends.entry(end).or_default() += 1;
        if end != End::Recovered {
            println!("{number}: {end:?} after {:?}, {drawn:?}\n{}", start.elapsed(), drawn.model());
        }
    }
    ends
}

/// `CONSTRUCTIONS=1000 cargo test --test constructions -- --nocapture` runs as many and prints the failures.
#[test]
fn random_preferences_come_back() {
    let many: Option<u64> = std::env::var("CONSTRUCTIONS").ok().and_then(|count| count.parse().ok());
    let time = Duration::from_secs(if many.is_some() { 10 } else { 3 });
    let allowance = Allowance { work: 30_000_000, time, memory_mib: 2048 };
    let count = many.unwrap_or(16);
    let ends = run(0..count, allowance);
    println!("of {count}: {ends:?}");
    let recovered = *ends.get(&End::Recovered).unwrap_or(&0) as u64;
    assert!(10 * recovered >= 6 * count, "recovered {recovered} of {count}: {ends:?}");
}

/// What once was missed, each recovered: logarithms that the demands show by their slopes alone, next to a root, an
/// exponential or a power; a logarithm times a symbolic power.
#[test]
fn logarithms_that_leave_the_demands() {
    let (m, p, q) = (Name("m"), Name("p"), Name("q"));
    let (a, b) = (Name("a"), Name("b"));
    let over = |x: &Formula, y: &Formula| quotient(x.clone(), y.clone());
    let one_and = |x: Formula| sum(Number(1), x);
    let times = |k: i64, x: Formula| product(Number(k), x);
    let p_and_q = sum(p.clone(), q.clone());
    let all = [
        sum(exp(over(&m, &q)), ln(one_and(product(b.clone(), over(&m, &p_and_q))))),
        sum(root(one_and(times(2, over(&m, &p_and_q)))), ln(one_and(quotient(m.clone(), times(2, q.clone()))))),
        sum(
            ln(one_and(times(3, quotient(product(m.clone(), p.clone()), power(q.clone(), Number(2)))))),
            product(power(over(&m, &p), quotient(Number(1), Number(3))), over(&p, &q)),
        ),
        product(power(one_and(over(&m, &q)), b), ln(one_and(power(over(&m, &p), a)))),
    ];
    let allowance = Allowance { work: 100_000_000, time: Duration::from_secs(20), memory_mib: 2048 };
    for v in all {
        let drawn = Construction { kind: "hidden logarithm", goods: 2, v, positive: Vec::new() };
        let end = vetted(&drawn, allowance);
        assert_eq!(end, End::Recovered, "{drawn:?}");
    }
}
