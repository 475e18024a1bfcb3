//! Identities between powers, logarithms and exponentials of positive reals, decided by the normal form.

use mainspring::algebra::field::{Field, Relation};
use mainspring::algebra::generator::{Element, Role};
use mainspring::algebra::monomial::Var;
use mainspring::algebra::number::rational;
use mainspring::algebra::polynomial::Poly;
use mainspring::algebra::sign::Sign;

/// A field with a few positive symbols and a few real ones, and a small reader for the formulas of these tests.
struct Ground {
    field: Field,
    vars: Vec<(String, Var)>,
}

impl Ground {
    fn new(positive: &str, real: &str) -> Ground {
        let field = Field::new();
        let mut vars = Vec::new();
        for name in positive.split_whitespace() {
            let var = field.symbol(name, Role::Parameter);
            field.assume(&Poly::var(var), Relation::Positive);
            vars.push((name.to_string(), var));
        }
        for name in real.split_whitespace() {
            vars.push((name.to_string(), field.symbol(name, Role::Parameter)));
        }
        Ground { field, vars }
    }

    fn var(&self, name: &str) -> Var {
        self.vars.iter().find(|(n, _)| n == name).map(|(_, v)| *v).expect("declared")
    }

    fn read(&self, text: &str) -> Element {
        let tokens = tokens(text);
        let mut at = 0;
        let e = self.sum(&tokens, &mut at);
        assert_eq!(at, tokens.len(), "{text}");
        e
    }

    fn sum(&self, t: &[String], at: &mut usize) -> Element {
        let mut total = self.product(t, at);
        while *at < t.len() && (t[*at] == "+" || t[*at] == "-") {
            let minus = t[*at] == "-";
            *at += 1;
            let next = self.product(t, at);
            total = &self.field.current(&total) + &(if minus { next.neg() } else { next });
        }
        total
    }

    fn product(&self, t: &[String], at: &mut usize) -> Element {
        if t[*at] == "-" {
            *at += 1;
            return self.product(t, at).neg();
        }
        let mut total = self.power(t, at);
        while *at < t.len() && (t[*at] == "*" || t[*at] == "/") {
            let over = t[*at] == "/";
            *at += 1;
            let next = self.power(t, at);
            total = match over {
                true => self.field.quotient(&total, &next).expect("a divisor"),
                false => self.field.product(&total, &next),
            };
        }
        total
    }

    fn power(&self, t: &[String], at: &mut usize) -> Element {
        let base = self.atom(t, at);
        if *at < t.len() && t[*at] == "^" {
            *at += 1;
            let minus = t[*at] == "-";
            *at += usize::from(minus);
            let exponent = self.power(t, at);
            let exponent = if minus { exponent.neg() } else { exponent };
            return self.field.power(&base, &exponent).expect("a power");
        }
        base
    }

    fn atom(&self, t: &[String], at: &mut usize) -> Element {
        let word = t[*at].clone();
        *at += 1;
        if word == "(" {
            let inner = self.sum(t, at);
            *at += 1;
            return inner;
        }
        if let Ok(n) = word.parse::<i64>() {
            return Poly::int(n);
        }
        if matches!(word.as_str(), "ln" | "exp" | "sqrt") {
            *at += 1;
            let inner = self.sum(t, at);
            *at += 1;
            return match word.as_str() {
                "ln" => self.field.ln(&inner).expect("a logarithm"),
                "exp" => self.field.exp(&inner).expect("an exponential"),
                _ => self.field.sqrt(&inner).expect("a root"),
            };
        }
        Poly::var(self.var(&word))
    }
}

fn tokens(text: &str) -> Vec<String> {
    let mut all = Vec::new();
    let mut word = String::new();
    for c in text.chars().chain([' ']) {
        if c.is_alphanumeric() || c == '_' {
            word.push(c);
            continue;
        }
        if !word.is_empty() {
            all.push(std::mem::take(&mut word));
        }
        if !c.is_whitespace() {
            all.push(c.to_string());
        }
    }
    all
}

fn holds(positive: &str, real: &str, left: &str, right: &str) -> bool {
    let ground = Ground::new(positive, real);
    let (a, b) = (ground.read(left), ground.read(right));
    ground.field.is_zero(&(&ground.field.current(&a) - &ground.field.current(&b)))
}

#[test]
fn identities_for_positive_arguments() {
    let mut missed = Vec::new();
    for (positive, real, left, right) in [
        ("a b", "", "ln(a^2*b)", "2*ln(a) + ln(b)"),
        ("a b", "s", "(a^(s)*b)^(2)", "a^(2*s)*b^2"),
        ("a b s", "", "(a^s*b)^(1/s)", "a*b^(1/s)"),
        ("", "s", "4^s", "2^(2*s)"),
        ("", "", "sqrt(8)", "2*sqrt(2)"),
        ("", "", "sqrt(3 + 2*sqrt(2))", "1 + sqrt(2)"),
        ("", "", "sqrt(5 + 2*sqrt(6))", "sqrt(2) + sqrt(3)"),
        ("", "", "(2 + sqrt(5))^(1/3)", "(1 + sqrt(5))/2"),
        ("x y", "r", "(x^2 + 2*x*y + y^2)^r", "(x + y)^(2*r)"),
        ("x", "r", "x^(1/(1 - r))", "x*x^(r/(1 - r))"),
        ("p q m", "", "ln((p + q)/m)", "ln(p + q) - ln(m)"),
        ("a b", "", "a^(ln(b))", "b^(ln(a))"),
        ("x y", "", "exp(ln(x) - 2*ln(y))", "x/y^2"),
        ("x", "y", "ln(x*exp(y)^2)", "ln(x) + 2*y"),
        ("p q t r", "", "((t*p)^r + (t*q)^r)^(1/r)", "t*(p^r + q^r)^(1/r)"),
        ("", "s", "12^s*18^(-s)", "2^s*3^(-s)"),
        ("p q", "", "p + 2*sqrt(p*q) + q", "(sqrt(p) + sqrt(q))^2"),
        ("p q", "", "ln(p + 2*sqrt(p*q) + q)", "2*ln(sqrt(p) + sqrt(q))"),
        ("p q", "", "1/(sqrt(p) + sqrt(q))", "(sqrt(p) - sqrt(q))/(p - q)"),
        ("p q", "", "sqrt(p^2 + p*q)", "sqrt(p)*sqrt(p + q)"),
        ("p q", "a", "p^(a)*p^(1 - a)", "p"),
        ("p q", "", "p^(1/3)*p^(1/6)", "sqrt(p)"),
        ("p q", "s", "(p^(1-s) + q^(1-s))^(1/(1-s))/(p^(1-s) + q^(1-s))", "(p^(1-s) + q^(1-s))^(s/(1-s))"),
        ("p q m", "", "p/(p + q) + q/(p + q)", "1"),
        ("p q m", "", "exp(m*p/(p + q))*exp(m*q/(p + q))", "exp(m)"),
        ("p q", "", "ln(p^2 - 2*p*q + q^2 + 4*p*q)", "2*ln(p + q)"),
    ] {
        if !holds(positive, real, left, right) {
            missed.push(format!("{left} = {right}"));
        }
    }
    assert!(missed.is_empty(), "{missed:#?}");
}

#[test]
fn what_is_not_an_identity_is_not_asserted() {
    for (positive, real, left, right) in [
        ("x a b", "", "(x^a)^b", "x^(a^b)"),
        ("x y", "", "ln(x + y)", "ln(x) + ln(y)"),
        ("x", "", "sqrt(x)*sqrt(x + 1)", "sqrt(x^2 + x + 1/1000000000000000000)"),
        ("x", "r", "x^r", "x^(r + 1)"),
        ("p q", "", "sqrt(p + q)", "sqrt(p) + sqrt(q)"),
        ("p", "", "p^(1/2)", "p^(1/3)"),
    ] {
        assert!(!holds(positive, real, left, right), "{left} ≠ {right}");
    }
}

#[test]
fn the_logarithm_of_a_square_of_unknown_sign_is_refused() {
    let ground = Ground::new("", "y");
    let y = ground.read("y");
    assert!(ground.field.ln(&(&y * &y)).is_err(), "y could be zero");
}

#[test]
fn logarithmic_derivatives_of_a_ces_index() {
    let ground = Ground::new("p q a b", "s");
    let f = &ground.field;
    let index = ground.read("(a*p^(1-s) + b*q^(1-s))^(1/(1-s))");
    let share = ground.read("a*p^(1-s)/(a*p^(1-s) + b*q^(1-s))");
    let by_hand = f.product(&index, &share);
    assert!(f.is_zero(&(&f.log_derivative(&index, ground.var("p")) - &by_hand)));
    let special = f.substitute(&index, &[(ground.var("s"), Poly::int(1))]);
    assert!(special.is_err(), "the index has no value at s = 1");
    let at_two = f.substitute(&index, &[(ground.var("s"), Poly::int(2))]).expect("defined");
    assert!(f.is_zero(&(&at_two - &ground.read("1/(a/p + b/q)"))));
}

#[test]
fn signs_follow_from_the_facts() {
    let ground = Ground::new("p q m a", "b g");
    let f = &ground.field;
    let (b, one) = (ground.read("b"), Poly::one());
    f.assume(&b, Relation::Positive);
    f.assume(&(&one - &(&ground.read("a") + &b)), Relation::Positive);
    f.assume(&ground.read("m - g*p - b*q"), Relation::Positive);
    assert_eq!(f.sign(&ground.read("1 - a")), Sign::Positive);
    assert_eq!(f.sign(&ground.read("a*b - b")), Sign::Negative);
    assert_eq!(f.sign(&ground.read("2*m - 2*g*p - b*q")), Sign::Positive);
    assert_eq!(f.sign(&ground.read("g")), Sign::Unknown);
    assert_eq!(f.sign(&ground.read("g^2 + p")), Sign::Positive);
    assert_eq!(f.sign(&ground.read("a^2 - 1")), Sign::Negative);
}

#[test]
fn a_value_at_a_point_is_exact() {
    let ground = Ground::new("p q", "s");
    let e = ground.read("(p^s + q)/ln(p)");
    let at = [("p", rational(4, 1)), ("q", rational(3, 1)), ("s", rational(1, 2))];
    let point = at.into_iter().map(|(n, q)| (ground.var(n), q)).collect();
    let value = ground.field.value_at(&e, &point).expect("defined");
    assert_eq!(value.as_rational(), None);
    let near = value.enclose(64).expect("a number");
    // 5/(2 ln 2) = 3.6067376022…
    assert!(
        near.contains(&rational(36067376022, 10000000000)) || near.lo_rational() > rational(36067376022, 10000000000)
    );
    assert!(near.hi_rational() < rational(36067376023, 10000000000));
    let whole = ground
        .field
        .value_at(
            &ground.read("p^s + q"),
            &[("p", rational(4, 1)), ("q", rational(3, 1)), ("s", rational(1, 2))]
                .into_iter()
                .map(|(n, q)| (ground.var(n), q))
                .collect(),
        )
        .expect("defined");
    assert_eq!(whole.as_rational(), Some(rational(5, 1)));
}
