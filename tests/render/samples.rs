//! Documents with formulas of the size that real reports have.

use crate::reader::formula;
use mainspring::algebra::formula::Formula;
use mainspring::render::document::*;
use mainspring::render::expression::{Expression, Mark, Object};

/// x_good(p, m)
pub fn demand(good: &str) -> Object {
    Object::new("x").at(good).of(vec![Expression::symbol("p"), Expression::symbol("m")])
}

fn expenditure() -> Object {
    Object::new("e").of(vec![Expression::symbol("p"), Expression::symbol("u")])
}

fn joined(terms: impl Iterator<Item = String>, sign: &str) -> String {
    terms.collect::<Vec<_>>().join(sign)
}

/// CES demand for `goods` goods: the sum below the bar grows with the number.
pub fn ces(goods: usize) -> Document {
    let below = joined((1..=goods).map(|j| format!("a_{j}*p_{j}^(1 - s)")), " + ");
    let demand_of = |i: usize| {
        let right = formula(&format!("a_{i}*m*p_{i}^(-s)/({below})"));
        Equation::equal(demand(&i.to_string()), right)
    };
    let spent = formula(&format!("u*({below})^(1/(1 - s))"));
    let own = formula(&format!("-s*a_1*m*p_1^(-s)/(p_1*({below})) - (1 - s)*a_1^2*m*p_1^(-2*s)/({below})^2"));
    let slope = Expression::partial(Object::new("x").at("1"), Expression::symbol("p_1"));
    let effect = Expression::partial(Object::new("x").at("1"), Expression::symbol("m"));
    let income_effect = Expression::Product(vec![Object::new("x").at("1").into(), effect]);
    let slutsky = Expression::Sum(vec![slope.clone(), income_effect]);
    Document {
        title: Some(format!("Constant elasticity of substitution, {goods} goods")),
        blocks: vec![
            heading(1, "The system"),
            Block::Paragraph(vec![
                Inline::text("Demand is homothetic, with "),
                Inline::equation(Equation::new(formula("s"), Relation::Greater, formula("0"))),
                Inline::text(" and "),
                Inline::equation(Equation::new(formula("1 - s"), Relation::NotEqual, formula("0"))),
                Inline::text(":"),
            ]),
            Block::Display((1..=goods).map(demand_of).collect()),
            heading(1, "Slutsky terms"),
            Block::Display(vec![
                Equation::equal(Object::new("S").at("1").at("1"), slutsky),
                Equation::next(Relation::Equal, own.clone()),
            ]),
            Block::Display(vec![Equation::equal(slope, own)]),
            heading(1, "Expenditure"),
            Block::Display(vec![Equation::equal(expenditure(), spent)]),
        ],
    }
}

fn heading(level: u8, text: &str) -> Block {
    Block::Heading { level, text: vec![Inline::text(text)] }
}

/// ln P of the almost ideal system.
pub fn translog_index(goods: usize) -> Formula {
    let mut terms = vec!["a_0".to_string()];
    terms.extend((1..=goods).map(|i| format!("a_{i}*ln(p_{i})")));
    for i in 1..=goods {
        terms.push(format!("1/2*g[{i},{i}]*ln(p_{i})^2"));
        terms.extend((i + 1..=goods).map(|j| format!("g[{i},{j}]*ln(p_{i})*ln(p_{j})")));
    }
    formula(&terms.join(" + "))
}

/// The almost ideal system, with its Slutsky matrix in shares and the recovered expenditure function.
pub fn almost_ideal(goods: usize) -> Document {
    let index = Object::new("P").of(vec![Expression::symbol("p")]);
    let log_index = Expression::Call(mainspring::algebra::formula::Function::Ln, Box::new(index.clone().into()));
    let share = |i: usize| {
        let prices = joined((1..=goods).map(|j| format!("g[{i},{j}]*ln(p_{j})")), " + ");
        let right = formula(&format!("a_{i} + {prices} + b_{i}*ln(m/P)"));
        Equation::equal(Object::new("w").at(i.to_string()), right)
    };
    let product = joined((1..=goods).map(|i| format!("p_{i}^b_{i}")), "*");
    let spent = Formula::call(
        mainspring::algebra::formula::Function::Exp,
        Formula::sum(vec![translog_index(goods), formula(&format!("u*{product}"))]),
    );
    let entry = |i: usize, j: usize| {
        let own = if i == j { format!(" - w_{i}") } else { String::new() };
        Expression::from(formula(&format!("g[{i},{j}] + b_{i}*b_{j}*ln(m/P) + w_{i}*w_{j}{own}")))
    };
    let names: Vec<String> = (1..=goods).map(|i| i.to_string()).collect();
    let matrix = Matrix {
        name: Object::new("K"),
        rows: names.clone(),
        columns: names,
        entries: (1..=goods).map(|i| (1..=goods).map(|j| entry(i, j)).collect()).collect(),
        symmetric: true,
    };
    Document {
        title: Some(format!("An almost ideal system, {goods} goods")),
        blocks: vec![
            Block::Display(vec![Equation::equal(log_index, translog_index(goods))]),
            Block::Display((1..=goods).map(share).collect()),
            Block::Matrix(matrix),
            Block::Display(vec![Equation::equal(expenditure(), spent)]),
            Block::Paragraph(vec![
                Inline::text("Within a line, the index is "),
                Inline::math(translog_index(2)),
                Inline::text(", which is wide, and "),
                Inline::math(formula("m/P")),
                Inline::text(" is not."),
            ]),
        ],
    }
}

/// Two nests within an outer one.
pub fn nested() -> Document {
    let nest = |names: [&str; 2], sigma: &str| {
        format!("(a_{0}*p_{0}^(1 - {sigma}) + a_{1}*p_{1}^(1 - {sigma}))", names[0], names[1])
    };
    let (food, home) = (nest(["bread", "fish"], "sigma_f"), nest(["rent", "heat"], "sigma_h"));
    let outer = format!("(a_f*{food}^((1 - s)/(1 - sigma_f)) + a_h*{home}^((1 - s)/(1 - sigma_h)))");
    let demand_bread = format!("a_bread*a_f*m*p_bread^(-sigma_f)*{food}^((sigma_f - s)/(1 - sigma_f))/{outer}");
    Document {
        title: Some("Two nests".to_string()),
        blocks: vec![
            Block::Display(vec![Equation::equal(demand("bread"), formula(&demand_bread))]),
            Block::Display(vec![Equation::equal(expenditure(), formula(&format!("u*{outer}^(1/(1 - s))")))]),
            Block::Display(vec![Equation::equal(
                Object::new("v").of(vec![Expression::symbol("p"), Expression::symbol("m")]),
                formula(&format!("ln(m) - 1/(1 - s)*ln{outer}")),
            )]),
        ],
    }
}

/// What `vet` prints: verdicts, a table, a list and a note.
pub fn verdicts() -> Document {
    let line = |name: &str, verdict: &str, tone, note: Vec<Inline>| VerdictLine {
        name: name.into(),
        verdict: verdict.into(),
        tone,
        note,
    };
    let at = vec![
        Inline::text("at "),
        Inline::equation(Equation::equal(formula("p_b"), formula("1"))),
        Inline::text(", "),
        Inline::equation(Equation::equal(formula("g[1,2]"), formula("1/2"))),
        Inline::text(", "),
        Inline::equation(Equation::equal(formula("g[2,1]"), formula("0"))),
        Inline::text(" the entry "),
        Inline::equation(Equation::equal(Object::new("S").at("bread").at("fish"), formula("3/2"))),
        Inline::text(" differs from its mirror image"),
    ];
    let quadratic = Expression::Product(vec![
        Object::new("v").marked(Mark::Transpose).into(),
        Object::new("S").into(),
        Object::new("v").into(),
    ]);
    Document {
        title: Some("Three staples & \"one\" budget: 100 % σ_0 \\input{x}".to_string()),
        blocks: vec![
            Block::Verdicts(vec![
                line("homogeneity", "proven", Tone::Holds, vec![]),
                line("adding-up", "proven", Tone::Holds, vec![]),
                line("symmetry", "conditional", Tone::Partly, at),
                line("curvature", "undecided", Tone::Open, vec![Inline::text("the sign of "), Inline::math(quadratic)]),
            ]),
            Block::Table(Table {
                columns: vec![
                    vec![Inline::text("good")],
                    vec![Inline::text("demand")],
                    vec![Inline::text("income elasticity")],
                ],
                rows: vec![
                    vec![
                        vec![Inline::text("bread")],
                        vec![Inline::math(formula("a_b*m/p_b"))],
                        vec![Inline::math(formula("1"))],
                    ],
                    vec![
                        vec![Inline::text("fish")],
                        vec![Inline::math(formula("a_f*m/p_f"))],
                        vec![Inline::math(formula("1"))],
                    ],
                ],
            }),
            Block::Matrix(Matrix {
                name: Object::new("S"),
                rows: vec!["1".into(), "2".into()],
                columns: vec!["1".into(), "2".into()],
                entries: vec![
                    vec![formula("-a*b*m/p_1^2").into(), formula("a*b*m/(p_1*p_2)").into()],
                    vec![formula("a*b*m/(p_1*p_2)").into(), formula("-a*b*m/p_2^2").into()],
                ],
                symmetric: true,
            }),
            Block::List {
                ordered: true,
                items: vec![
                    vec![Inline::text("differentiate with respect to "), Inline::math(formula("p_1"))],
                    vec![
                        Inline::text("use "),
                        Inline::equation(Equation::equal(Expression::total("i", formula("p_i*x_i")), formula("m"))),
                        Inline::text(" of "),
                        Inline::Code("staples.demand".into()),
                    ],
                ],
            },
            Block::Note(vec![
                Inline::text("the special value "),
                Inline::equation(Equation::equal(formula("s"), formula("1"))),
                Inline::text(" is worked out "),
                Inline::Emphasis("separately".into()),
                Inline::text(", because the closed form above divides by it and would otherwise not be defined there."),
            ]),
        ],
    }
}
