//! Potentials of closed one-forms: a function is differentiated, the gradient expanded, and the function found again.

mod recovery_ground;

use mainspring::algebra::generator::Element;
use mainspring::algebra::polynomial::Poly;
use mainspring::recovery::fractions::Moving;
use mainspring::recovery::potential::potential;
use recovery_ground::Ground;

/// Differentiates `function`, reduces each derivative to one fraction, and integrates again.
fn comes_back(ground: &Ground, prices: &str, function: &str) {
    let field = &ground.field;
    let f = ground.read(function);
    let moving = Moving::new(field, &ground.vars(prices));
    let gradient: Vec<Element> = moving.symbols.iter().map(|p| field.reduce(&field.derivative(&f, *p))).collect();
    let started = std::time::Instant::now();
    let found = potential(&moving, &gradient).unwrap_or_else(|| panic!("no potential for the gradient of {function}"));
    let value = found.value(field).unwrap_or_else(|b| panic!("{b:?}: {function}"));
    println!("{:>6} us  {function}  =>  {}", started.elapsed().as_micros(), ground.show(&value));
    for p in &moving.symbols {
        let slope = field.derivative(&(&field.current(&value) - &field.current(&f)), *p);
        assert!(field.is_zero(&slope), "{function}: {}", ground.show(&slope));
    }
}

#[test]
fn powers_and_logarithms() {
    let g = Ground::new("p q r", "", "s +a +b c k");
    for f in [
        "p^(1-s)/(1-s)",
        "p^a*q^b*ln(p)^2*ln(q)",
        "a*ln(p)*ln(q) + ln(p)^3 + c*ln(r)",
        "p^2*ln(q) + q^(-s)*ln(p)*p^k",
        "p/q + ln(p) + c*q^(-3)*r^(-a)",
        "sqrt(p*q) + 2*sqrt(q*r) - p^(1/3)",
    ] {
        comes_back(&g, "p q r", f);
    }
}

#[test]
fn logarithms_of_price_indices() {
    let g = Ground::new("p q r", "", "s t +a +b +c");
    for f in [
        "ln(a*p^(1-s) + b*q^(1-s) + c*r^(1-s))/(1-s)",
        "ln(a*(b*p^(1-s) + c*q^(1-s))^((1-t)/(1-s)) + r^(1-t))/(1-t)",
        "ln(a*p + 2*b*sqrt(p*q) + c*q) - ln(p + r)/2",
        "ln(p^2+3*p*q+q^2) - ln(p+q)",
        "ln(p + q)*ln(r) + ln(p+q)^2",
        "ln(p) - ln(p+1) + ln(q)*r",
    ] {
        comes_back(&g, "p q r", f);
    }
}

#[test]
fn rational_functions_and_roots() {
    let g = Ground::new("p q r", "", "s t +a +b +k");
    for f in [
        "1/(1+p)",
        "p*q/(p+q)",
        "(p+a)/(p+q)^2 + r/(q+r)",
        "k*sqrt(p^2+p*r)/sqrt(q*r)",
        "(a*p+b*q)^k",
        "(a*p+b*q)^k*r/(q + r)",
        "(a*p^(1-s)+b*q^(1-s))^(t/(1-s))*r^t",
        "sqrt(p + sqrt(p*q + r^2))",
        "p*ln(1+r/p)*(p+q)/(p*q + r*sqrt(p*q))",
        "(p+q)/(p^2+3*p*q+q^2)*ln(p)",
        "(p+2*q)/(a*q + b*q + 3*q^a)",
    ] {
        comes_back(&g, "p q r", f);
    }
}

#[test]
fn exponentials() {
    let g = Ground::new("p q r", "", "s t +a +b +k");
    for f in [
        "exp(-k*p)",
        "exp(-k*p)*(p^3 + q*p - 1)",
        "exp(p/q)*(p + q^2)",
        "exp(a*p+b*q)*(r + p*q)",
        "p*exp(-k*q)*ln(r)",
        "1/(1+exp(p-q))",
        "exp(sqrt(p*q))*r",
        "exp(-r/p)*(r^3/p^3+3*r^2/p^2+6*r/p+6+q/p)",
    ] {
        comes_back(&g, "p q r", f);
    }
}

#[test]
fn many_prices() {
    let names: Vec<String> = (0..24).map(|k| format!("p{k}")).collect();
    let g = Ground::new(&names.join(" "), "", "s");
    let ces: Vec<String> = names.iter().map(|p| format!("{p}^(1-s)")).collect();
    comes_back(&g, &names.join(" "), &format!("ln({})/(1-s)", ces.join("+")));
    let squares: Vec<String> = names.windows(2).map(|w| format!("ln({})*ln({})", w[0], w[1])).collect();
    comes_back(&g, &names.join(" "), &squares.join("+"));
}

#[test]
fn a_form_that_is_not_closed_has_no_potential() {
    let g = Ground::new("p q", "", "");
    let moving = Moving::new(&g.field, &g.vars("p q"));
    assert!(potential(&moving, &[g.read("q"), Poly::zero()]).is_none());
    assert!(potential(&moving, &[g.read("1/(p+q)"), g.read("2/(p+q)")]).is_none());
}
