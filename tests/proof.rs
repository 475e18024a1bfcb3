//! The rules of proof, on systems put together by hand: what they accept, what they refuse, and that a certificate
//! altered anywhere is refused when it is read back.

use std::cell::RefCell;
use std::rc::Rc;

use mainspring::algebra::evaluation::Point;
use mainspring::algebra::field::{Field, Relation};
use mainspring::algebra::generator::{Element, Role};
use mainspring::algebra::monomial::Var;
use mainspring::algebra::number::rational;
use mainspring::algebra::polynomial::Poly;
use mainspring::proof::{
    Combination, Decomposition, Equation, Expression, Factor, FunctionId, Label, Matrix, Prover, StoredDerivation,
    Value, replay, store,
};

/// Two prices, income, a taste parameter a in (0, 1), and the outlays a·m and (1 − a)·m.
struct Household {
    field: Field,
    prices: [Var; 2],
    income: Var,
    taste: Var,
}

impl Household {
    fn new() -> Household {
        let field = Field::new();
        let prices = [field.symbol("p", Role::Price), field.symbol("q", Role::Price)];
        let income = field.symbol("m", Role::Income);
        let taste = field.symbol("a", Role::Parameter);
        field.assume(&Poly::var(taste), Relation::Positive);
        field.assume(&(&Poly::one() - &Poly::var(taste)), Relation::Positive);
        Household { field, prices, income, taste }
    }

    fn outlays(&self) -> [Element; 2] {
        let (a, m) = (Poly::var(self.taste), Poly::var(self.income));
        [&a * &m, &(&Poly::one() - &a) * &m]
    }

    /// p_i p_j S_ij = θ_j y_i − δ_ij y_i + y_j ∂y_i/∂m.
    fn slutsky(&self, outlays: [FunctionId; 2]) -> Matrix {
        Matrix::new(2, |i, j| {
            let entry = Expression::from(Factor::LogSlope(outlays[i], self.prices[j]))
                .plus(1, vec![Factor::Function(outlays[j]), Factor::Slope(outlays[i], self.income)]);
            if i == j { entry.plus(-1, vec![Factor::Function(outlays[i])]) } else { entry }
        })
    }

    fn point(&self, values: [(i64, i64); 4]) -> Point {
        let names = [self.prices[0], self.prices[1], self.income, self.taste];
        names.into_iter().zip(values).map(|(v, (n, d))| (v, rational(n, d))).collect()
    }
}

fn adding_up(outlays: &[FunctionId], income: Var) -> Equation {
    let left = outlays.iter().fold(Expression::zero(), |sum, y| sum.plus(1, vec![Factor::Function(*y)]));
    Equation { label: Label::Whole, left, right: Expression::element(Poly::var(income)) }
}

#[test]
fn fixed_budget_shares_satisfy_the_budget_identity_and_are_negative_semidefinite() {
    let home = Household::new();
    let mut prover = Prover::new(&home.field);
    let [first, second] = home.outlays();
    let outlays = [prover.define("y_1", &first), prover.define("y_2", &second)];
    assert!(prover.identities("adding-up", vec![adding_up(&outlays, home.income)], &[]).is_ok());
    let matrix = Rc::new(home.slutsky(outlays));
    let balance = prover.balanced("curvature", &matrix, &[]).expect("rows and columns sum to zero");
    assert!(prover.laplacian("curvature", &balance).is_some());
    assert!(prover.characteristic("curvature", &matrix, Some((&balance, 1))).is_some());
    assert!(prover.zero_matrix("curvature", &matrix).is_none());
    let point = home.point([(1, 1), (2, 1), (10, 1), (1, 3)]);
    assert!(prover.semidefinite_at("curvature", &matrix, Some(&balance), &point).is_some());
    assert!(prover.refute_semidefinite("curvature", &matrix, &[rational(1, 1), rational(0, 1)], &point).is_none());
}

#[test]
fn a_wrong_sign_is_left_over_and_refuted_at_a_point() {
    let home = Household::new();
    let mut prover = Prover::new(&home.field);
    let [first, second] = home.outlays();
    let outlays = [prover.define("y_1", &first), prover.define("y_2", &second.neg())];
    let equation = adding_up(&outlays, home.income);
    let left_over = prover.identities("adding-up", vec![equation.clone()], &[]).expect_err("y_1 - y_2 is not m");
    assert_eq!(left_over[0].label, Label::Whole);
    let point = home.point([(1, 1), (2, 1), (10, 1), (1, 3)]);
    let refuted = prover.refute("adding-up", equation.clone(), &point).expect("10/3 - 20/3 is not 10");
    assert_eq!(refuted.failure().value, Value::Exact(rational(-40, 3)));
    let inadmissible = home.point([(1, 1), (2, 1), (10, 1), (3, 2)]);
    assert!(prover.refute("adding-up", equation, &inadmissible).is_none(), "a = 3/2 breaks an assumption");
}

#[test]
fn a_point_with_logarithms_refutes_by_an_interval_and_never_by_a_vanishing_value() {
    let home = Household::new();
    let mut prover = Prover::new(&home.field);
    let log = home.field.ln(&Poly::var(home.prices[0])).expect("prices are positive");
    let equation = Equation { label: Label::Whole, left: Expression::element(log), right: Expression::zero() };
    let at_two = home.point([(2, 1), (1, 1), (1, 1), (1, 2)]);
    let refuted = prover.refute("claim", equation.clone(), &at_two).expect("ln 2 is not 0");
    match &refuted.failure().value {
        Value::Enclosed { from, to, .. } => assert!(*from > rational(69, 100) && *to < rational(70, 100)),
        Value::Exact(q) => panic!("ln 2 is not {q}"),
    }
    let at_one = home.point([(1, 1), (1, 1), (1, 1), (1, 2)]);
    assert!(prover.refute("claim", equation, &at_one).is_none());
}

#[test]
fn signs_follow_from_facts_or_from_a_combination_that_is_checked() {
    let home = Household::new();
    let mut prover = Prover::new(&home.field);
    let (a, p, q) = (Poly::var(home.taste), Poly::var(home.prices[0]), Poly::var(home.prices[1]));
    let spread = Expression::element(&(&(&p * &p) - &(&p * &q).scale(&rational(2, 1))) + &(&(&q * &q) + &a));
    let square = Combination { facts: vec![], squares: vec![(rational(1, 1), &p - &q)] };
    assert!(prover.bound_by("claim", spread.clone(), Relation::Positive, square.clone(), &[]).is_some());
    let wrong = Combination { facts: vec![], squares: vec![(rational(1, 1), &p + &q)] };
    assert!(prover.bound_by("claim", spread, Relation::Positive, wrong, &[]).is_none());
    let not_a_fact = Combination { facts: vec![(rational(1, 1), Poly::one(), &a - &p)], squares: vec![] };
    assert!(prover.bound_by("claim", Expression::element(&a - &p), Relation::Positive, not_a_fact, &[]).is_none());
}

#[test]
fn what_is_supposed_is_written_into_the_step_and_forgotten_afterwards() {
    let home = Household::new();
    let mut prover = Prover::new(&home.field);
    let gap = Expression::element(&Poly::var(home.prices[0]) - &Poly::var(home.prices[1]));
    let inside = prover.supposing(&[(gap.clone(), Relation::Positive)], |prover| {
        prover.bound("claim", gap.clone(), Relation::Positive, &[])
    });
    let step = inside.expect("it was supposed").step();
    assert_eq!(prover.derivation().step(step).expect("a step of this derivation").supposing().len(), 1);
    assert!(prover.bound("claim", gap, Relation::Positive, &[]).is_none());
}

#[test]
fn divisors_and_positivities_are_listed_beside_the_result() {
    let home = Household::new();
    let mut prover = Prover::new(&home.field);
    let free = Poly::var(home.field.symbol("s", Role::Parameter));
    let quotient = home.field.quotient(&Poly::var(home.income), &free).expect("s is not the zero element");
    let y = prover.define("y", &quotient);
    let doubled = Expression::zero().plus(2, vec![Factor::Function(y)]);
    let sum = Expression::from(Factor::Function(y)).plus(1, vec![Factor::Function(y)]);
    let proved = prover.identity("claim", sum, doubled, &[]).expect("y + y = 2y");
    let step = prover.derivation().step(proved.step()).expect("a step of this derivation");
    assert_eq!(step.sides().len(), 1);
    assert_eq!((step.sides()[0].relation, step.sides()[0].discharged), (Relation::NonZero, false));
    // what does not follow from the facts may neither be left out of the certificate nor be called discharged
    let register = Register::default();
    let stored = store(&home.field, &prover.into_derivation(), &|e| register.print(e));
    replay(&home.field, &stored, &|text| register.read(text)).expect("its own certificate");
    let text = serde_json::to_string(&stored).expect("plain data");
    let (divisor, income) = (register.print(&free), register.print(&Poly::var(home.income)));
    let side = format!("[\"{divisor}\",\"!= 0\",false]");
    let called = |formula: &str, relation: &str, discharged| format!("[\"{formula}\",\"{relation}\",{discharged}]");
    let others = [
        called(&divisor, "!= 0", true),
        called(&divisor, "> 0", false),
        called(&income, "!= 0", false),
        called(&income, "!= 0", true),
        String::new(),
    ];
    let alterations: Vec<(&str, &str)> = others.iter().map(|other| (side.as_str(), other.as_str())).collect();
    rejects(&home, &register, &text, &alterations);
}

/// A printer and reader of elements by number, so that formulas can be exchanged at will.
#[derive(Default)]
struct Register(RefCell<Vec<Element>>);

impl Register {
    fn print(&self, e: &Element) -> String {
        let mut all = self.0.borrow_mut();
        let at = all.iter().position(|known| known == e).unwrap_or_else(|| {
            all.push(e.clone());
            all.len() - 1
        });
        format!("#{at}")
    }

    fn read(&self, text: &str) -> Result<Element, String> {
        let at = text.strip_prefix('#').and_then(|k| k.parse::<usize>().ok());
        at.and_then(|k| self.0.borrow().get(k).cloned()).ok_or_else(|| format!("cannot read {text}"))
    }
}

fn certificate(home: &Household, register: &Register) -> StoredDerivation {
    let mut prover = Prover::new(&home.field);
    let [first, second] = home.outlays();
    let outlays = [prover.define("y_1", &first), prover.define("y_2", &second)];
    prover.identities("adding-up", vec![adding_up(&outlays, home.income)], &[]).expect("the budget identity");
    let matrix = Rc::new(home.slutsky(outlays));
    let balance = prover.balanced("curvature", &matrix, &[]).expect("balanced");
    prover.laplacian("curvature", &balance).expect("semidefinite");
    prover.characteristic("curvature", &matrix, Some((&balance, 0))).expect("semidefinite");
    let half = Expression::element(&Poly::var(home.taste) - &Poly::constant(&rational(1, 2)));
    let claim = mainspring::proof::Bounded { expression: half, relation: Relation::Positive };
    let point = home.point([(1, 1), (2, 1), (10, 1), (1, 3)]);
    prover.refute_bound("claim", claim, &point).expect("1/3 is below 1/2");
    store(&home.field, &prover.into_derivation(), &|e| register.print(e))
}

/// Each alteration of the certificate, made once, is rejected.
fn rejects(home: &Household, register: &Register, text: &str, alterations: &[(&str, &str)]) {
    for (from, to) in alterations {
        assert!(text.contains(from), "{from} is not in the certificate {text}");
        let altered = text.replacen(from, to, 1);
        let rejected = match serde_json::from_str::<StoredDerivation>(&altered) {
            Ok(altered) => replay(&home.field, &altered, &|text| register.read(text)).is_err(),
            Err(_) => true,
        };
        assert!(rejected, "accepted with {to} for {from}");
    }
}

/// −K = a(1 − a)m (v₁ − v₂)²; and K again from that, where a > 1/2 and a > 1/3 are supposed one inside the other.
#[test]
fn a_decomposition_is_replayed_where_it_was_made_and_an_altered_one_is_rejected() {
    let home = Household::new();
    let register = Register::default();
    let mut prover = Prover::new(&home.field);
    let [first, second] = home.outlays();
    let matrix = Rc::new(home.slutsky([prover.define("y_1", &first), prover.define("y_2", &second)]));
    let weight = &first * &(&Poly::one() - &Poly::var(home.taste));
    let squares = vec![(weight.clone(), vec![Poly::one(), Poly::int(-1)])];
    let by_squares = Decomposition { multipliers: Vec::new(), squares };
    let wrong = vec![(weight.neg(), vec![Poly::one(), Poly::int(-1)])];
    let wrong = Decomposition { multipliers: Vec::new(), squares: wrong };
    assert!(prover.decomposed("curvature", &matrix, &[], wrong).is_none(), "a negative weight");
    let whole = prover.decomposed("curvature", &matrix, &[], by_squares.clone()).expect("a square");
    let above =
        |n, d| (Expression::element(&Poly::var(home.taste) - &Poly::constant(&rational(n, d))), Relation::Positive);
    let again = Decomposition { multipliers: vec![Poly::one()], squares: Vec::new() };
    let inside = prover.supposing(&[above(1, 2)], |prover| {
        prover.supposing(&[above(1, 3)], |prover| {
            let step = prover.bound("claim", above(2, 5).0, Relation::Positive, &[]).expect("1/2 is above 2/5").step();
            assert_eq!(prover.derivation().step(step).map(|step| step.supposing().len()), Some(2));
            prover
                .decomposed("curvature", &matrix, std::slice::from_ref(&whole), again.clone())
                .expect("the same matrix")
        })
    });
    assert!(prover.decomposed("curvature", &matrix, &[inside], again).is_none(), "what was supposed is not forgotten");
    let stored = store(&home.field, &prover.into_derivation(), &|e| register.print(e));
    let text = serde_json::to_string(&stored).expect("plain data");
    let replayed = replay(&home.field, &stored, &|text| register.read(text)).expect("its own certificate");
    assert_eq!(replayed.steps().len(), 3);
    let shown = |e: &Element| format!("\"{}\"", register.print(e));
    let (one, minus, weight) = (shown(&Poly::one()), shown(&Poly::int(-1)), shown(&weight));
    let squares = format!("[[{weight},[{one},{minus}]]]");
    rejects(
        &home,
        &register,
        &text,
        &[
            (&squares, &format!("[[{weight},[{one},{one}]]]")),
            (&squares, &format!("[[{one},[{one},{minus}]]]")),
            (&squares, "[]"),
            (&format!("[{one}],[]"), &format!("[{minus}],[]")),
            ("\"premises\":[0]", "\"premises\":[]"),
            ("\"premises\":[0]", "\"premises\":[1]"),
            ("{\"function\":1}", "{\"function\":0}"),
            // 2/5 is below 1/2, and not below 1/3
            (&supposition(&home, &register, rational(1, 2)), ""),
        ],
    );
}

/// How a > bound is written among what a step supposes, with the comma behind it.
fn supposition(home: &Household, register: &Register, bound: mainspring::algebra::number::Rational) -> String {
    let element = register.print(&(&Poly::var(home.taste) - &Poly::constant(&bound)));
    format!("[[[1,[{{\"formula\":\"{element}\"}}]]],\"> 0\"],")
}

#[test]
fn a_certificate_is_replayed_and_an_altered_one_is_rejected() {
    let home = Household::new();
    let register = Register::default();
    let stored = certificate(&home, &register);
    let text = serde_json::to_string(&stored).expect("plain data");
    let back: StoredDerivation = serde_json::from_str(&text).expect("its own text");
    let read = |text: &str| register.read(text);
    let replayed = replay(&home.field, &back, &read).expect("its own certificate");
    assert_eq!(replayed.steps().len(), stored.steps.len());
    // every way to exchange one formula, number, name or reference for another that changes the text
    let alterations = [
        ("\"#0\"", "\"#1\""),
        ("\"#1\"", "\"#0\""),
        ("[1,[{\"function\":0}", "[2,[{\"function\":0}"),
        ("{\"function\":1}", "{\"function\":0}"),
        ("{\"slope\":[0,\"m\"]}", "{\"slope\":[0,\"p\"]}"),
        ("[-1,", "[1,"),
        ("\"premises\":[1]", "\"premises\":[0]"),
        ("\"premises\":[1]", "\"premises\":[9]"),
        ("\"a\":\"1/3\"", "\"a\":\"2/3\""),
        ("\"a\":\"1/3\"", "\"a\":\"-1/3\""),
        ("\"-1/6\"", "\"1/6\""),
        ("\"size\":2", "\"size\":3"),
    ];
    rejects(&home, &register, &text, &alterations);
    assert!(serde_json::from_str::<StoredDerivation>(&text.replace("laplacian", "believe_me")).is_err());
}
