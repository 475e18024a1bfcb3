//! Model files as they are read: each statement, the layout, the precedence of operators, and laws on arbitrary text.

use mainspring::language::*;
use proptest::prelude::*;

fn model(text: &str) -> Vec<Statement> {
    let source = Source::new("model.demand", text);
    match read(&source) {
        Ok(model) => model.statements.into_iter().map(|located| located.statement).collect(),
        Err(mistakes) => panic!("{}", mistakes.iter().map(|mistake| mistake.render(&source)).collect::<String>()),
    }
}

/// The right-hand side of a file of one definition, every node in brackets of its own.
fn tree(formula: &str) -> String {
    match &model(&format!("let y = {formula}"))[..] {
        [Statement::Let { value, .. }] => shape(value),
        other => panic!("{other:?}"),
    }
}

fn shape(expr: &Expr) -> String {
    let list = |parts: Vec<String>, sign: &str| format!("({})", parts.join(sign));
    match &expr.kind {
        ExprKind::Number(value) => value.to_string(),
        ExprKind::Pi => "PI".to_string(),
        ExprKind::Reference(reference) => {
            let indices = reference.indices.iter().map(|(index, _)| index_text(index)).collect::<Vec<_>>();
            if indices.is_empty() {
                reference.name.text.clone()
            } else {
                format!("{}[{}]", reference.name.text, indices.join(","))
            }
        }
        ExprKind::Negative(inner) => format!("(-{})", shape(inner)),
        ExprKind::Sum(terms) => list(terms.iter().map(shape).collect(), " + "),
        ExprKind::Product(factors) => {
            let factor =
                |factor: &Factor| format!("{}{}", if factor.inverted { "1/" } else { "" }, shape(&factor.expr));
            list(factors.iter().map(factor).collect(), " * ")
        }
        ExprKind::Power(base, exponent) => format!("({} ^ {})", shape(base), shape(exponent)),
        ExprKind::Call(function, argument) => format!("{}{}", function.word(), bracketed(&shape(argument))),
        ExprKind::Over(over) => over_text(over),
    }
}

fn bracketed(text: &str) -> String {
    if text.starts_with('(') { text.to_string() } else { format!("({text})") }
}

fn index_text(index: &Index) -> String {
    match index {
        Index::Number(number) => number.to_string(),
        Index::Name(name) => name.clone(),
    }
}

fn over_text(over: &Over) -> String {
    let binders = over.binders.iter().map(|name| name.text.as_str()).collect::<Vec<_>>().join(", ");
    let except = over.except.as_ref().map(|(index, _)| format!(" != {}", index_text(index))).unwrap_or_default();
    let group = over.group.as_ref().map(|name| format!(" in {}", name.text)).unwrap_or_default();
    let kind = if over.product { "product" } else { "sum" };
    format!("{kind} over {binders}{except}{group} of {}", bracketed(&shape(&over.body)))
}

#[test]
fn operators_bind_as_on_paper() {
    for (formula, read_as) in [
        ("a + b * c ^ d", "(a + (b * (c ^ d)))"),
        ("a - b - c", "(a + (-b) + (-c))"),
        ("a / b / c * d", "(a * 1/b * 1/c * d)"),
        ("a / b * c", "(a * 1/b * c)"),
        ("a / (b * c)", "(a * 1/(b * c))"),
        ("(a + b) + c", "((a + b) + c)"),
        ("2^3^4", "(2 ^ (3 ^ 4))"),
        ("(2^3)^4", "((2 ^ 3) ^ 4)"),
        ("-a^2", "(-(a ^ 2))"),
        ("(-a)^2", "((-a) ^ 2)"),
        ("2^-s", "(2 ^ (-s))"),
        ("a^-b^c", "(a ^ (-(b ^ c)))"),
        ("a^-b*c", "((a ^ (-b)) * c)"),
        ("a*-b", "(a * (-b))"),
        ("a*-b^2/c", "(a * (-(b ^ 2)) * 1/c)"),
        ("-a*b", "(-(a * b))"),
        ("a - -b", "(a + b)"),
        ("--a", "a"),
        ("a - b*c + d", "(a + (-(b * c)) + d)"),
        ("p^1/2", "((p ^ 1) * 1/2)"),
        ("p^(1/2)", "(p ^ (1 * 1/2))"),
        ("(((a)))", "a"),
    ] {
        assert_eq!(tree(formula), read_as, "{formula}");
    }
}

#[test]
fn operands() {
    for (formula, read_as) in [
        ("0.1", "1/10"),
        ("12.50", "25/2"),
        ("007", "7"),
        ("123456789012345678901234567890", "123456789012345678901234567890"),
        ("pi * π", "(PI * PI)"),
        ("ln(a) + log(b)", "(ln(a) + ln(b))"),
        ("exp(-a) * sqrt(b + c)", "(exp(-a) * sqrt(b + c))"),
        ("Ei(a) + erf(b) + erfi(c) + lambertw(d)", "(Ei(a) + erf(b) + erfi(c) + lambertw(d))"),
        ("p[1] * g[i, bread]", "(p[1] * g[i,bread])"),
        ("σ + Γ_b + βx + e\u{301}", "(sigma + Gamma_b + beta_x + \u{e9})"),
        ("sum over j of (a[j])", "sum over j of (a[j])"),
        ("sum over j != i of (a[j]) ^ 2", "(sum over j != i of (a[j]) ^ 2)"),
        ("sum over j != 1 in food of (a[j])", "sum over j != 1 in food of (a[j])"),
        ("sum over j in food != bread of (a[j])", "sum over j != bread in food of (a[j])"),
        ("product over k, l of (a[k] * b[l])", "product over k, l of (a[k] * b[l])"),
        ("-sum over\n  j of (sum over k of (a[j,k]))", "(-sum over j of (sum over k of (a[j,k])))"),
        ("sum * product + over / of ^ in", "((sum * product) + (over * 1/(of ^ in)))"),
    ] {
        assert_eq!(tree(formula), read_as, "{formula}");
    }
}

fn declared_text(declared: &Declared) -> String {
    let indices = declared.indices.iter().map(|name| name.text.as_str()).collect::<Vec<_>>().join(",");
    let indices = if indices.is_empty() { indices } else { format!("[{indices}]") };
    let latex = declared.latex.as_ref().map(|latex| format!(" as {latex}")).unwrap_or_default();
    format!("{}{indices}{latex}", declared.name.text)
}

fn relation_text(relation: &Relation) -> String {
    let rest = relation.rest.iter().map(|(sign, side)| format!(" {} {}", sign.sign(), shape(side)));
    format!("{}{}", shape(&relation.first), rest.collect::<String>())
}

fn target_text(target: &Target) -> String {
    match target {
        Target::Good(name) => format!(" {}", name.text),
        Target::Indexed(index, _) => format!("[{}]", index_text(index)),
    }
}

fn statement_text(statement: &Statement) -> String {
    let list = |list: &[Declared]| list.iter().map(declared_text).collect::<Vec<_>>().join(", ");
    match statement {
        Statement::Title(title) => format!("title {title}"),
        Statement::Goods(Goods::Named(names)) => {
            format!("goods {}", names.iter().map(|name| name.text.as_str()).collect::<Vec<_>>().join(", "))
        }
        Statement::Goods(Goods::Numbered { last, .. }) => format!("goods to {last}"),
        Statement::Group { name, members } => {
            let members = members.iter().map(|(index, _)| index_text(index)).collect::<Vec<_>>();
            format!("group {} = {}", name.text, members.join(", "))
        }
        Statement::Prices(names) => format!("prices {}", list(names)),
        Statement::Income(name) => format!("income {}", declared_text(name)),
        Statement::Quantities(names) => format!("quantities {}", list(names)),
        Statement::Utility(name) => format!("utility {}", declared_text(name)),
        Statement::Parameters(names) => format!("parameters {}", list(names)),
        Statement::Assume(relations) => {
            format!("assume {}", relations.iter().map(relation_text).collect::<Vec<_>>().join(", "))
        }
        Statement::Let { name, value } => format!("let {} = {}", declared_text(name), shape(value)),
        Statement::Demand(Equation { form, target, value }) => {
            format!("{form:?}{} = {}", target_text(target), shape(value))
        }
        Statement::Rest(target) => format!("rest{}", target_text(target)),
        Statement::Others(Others::Prices(names)) => format!("others {}", list(names)),
        Statement::Others(Others::Deflated) => "others are deflated".to_string(),
        Statement::Given { kind, value } => format!("given {kind:?} = {}", shape(value)),
        Statement::Inverse { target, value } => format!("inverse{} = {}", target_text(target), shape(value)),
        Statement::Claim(Claim::Relation(relation)) => format!("claim {}", relation_text(relation)),
        Statement::Claim(Claim::Function { function, value, .. }) => {
            format!("claim {} = {}", function_text(function), shape(value))
        }
        Statement::Claim(Claim::Under { condition, link, relations, .. }) => {
            let relations: Vec<String> = relations.iter().map(relation_text).collect();
            format!("claim {condition:?} {link:?} {}", relations.join(", "))
        }
        Statement::Claim(Claim::Separable { group, .. }) => format!("claim separable {}", group.text),
    }
}

fn mover_text(mover: &Mover) -> String {
    match mover {
        Mover::Number(number, _) => number.to_string(),
        Mover::Named(reference) => {
            let indices = reference.indices.iter().map(|(index, _)| format!("[{}]", index_text(index)));
            format!("{}{}", reference.name.text, indices.collect::<String>())
        }
    }
}

fn function_text(function: &Claimed) -> String {
    let of = |good: &Index, mover: &Mover| format!("[{}, {}]", index_text(good), mover_text(mover));
    match function {
        Claimed::Preferences(kind) => format!("{kind:?}"),
        Claimed::Demand(form, target) => format!("{form:?}{}", target_text(target)),
        Claimed::Hicksian(target) => format!("Hicksian{}", target_text(target)),
        Claimed::Inverse(target) => format!("Inverse{}", target_text(target)),
        Claimed::Slutsky((good, _), mover) => format!("Slutsky{}", of(good, mover)),
        Claimed::Elasticity((good, _), mover) => format!("Elasticity{}", of(good, mover)),
        Claimed::CompensatedElasticity((good, _), mover) => format!("CompensatedElasticity{}", of(good, mover)),
    }
}

#[test]
fn functions_of_the_theory() {
    for (text, read_as) in [
        ("given utility = x^a", "given Utility = (x ^ a)"),
        ("claim symmetry iff g12 = g21, 0 < b", "claim Symmetry Iff g12 = g21, 0 < b"),
        ("claim adding-up only  if a = 1", "claim AddingUp OnlyIf a = 1"),
        ("claim curvature if a >= 0", "claim Curvature If a >= 0"),
        ("given indirect  utility = v", "given IndirectUtility = v"),
        ("given expenditure = e", "given Expenditure = e"),
        ("inverse bread = a", "inverse bread = a"),
        ("inverse[i] = a[i]", "inverse[i] = a[i]"),
        ("claim demand bread = a", "claim Demand bread = a"),
        ("claim log demand[i] = a", "claim LogDemand[i] = a"),
        ("claim share[1] = a", "claim Share[1] = a"),
        ("claim hicksian bread = a", "claim Hicksian bread = a"),
        ("claim inverse[2] = a", "claim Inverse[2] = a"),
        ("claim expenditure = u", "claim Expenditure = u"),
        ("claim indirect utility = m", "claim IndirectUtility = m"),
        ("claim utility = x", "claim Utility = x"),
        ("claim separable food", "claim separable food"),
        ("claim separable = food", "claim separable = food"),
        ("claim slutsky[bread, fish] = 0", "claim Slutsky[bread, fish] = 0"),
        ("claim elasticity[1, p[2]] = a", "claim Elasticity[1, p[2]] = a"),
        ("claim elasticity[bread, income] = 1", "claim Elasticity[bread, income] = 1"),
        ("claim compensated elasticity[i, 2] = a", "claim CompensatedElasticity[i, 2] = a"),
        ("claim expenditure_of_all = u", "claim expenditure_of_all = u"),
        ("claim demand = 3", "claim demand = 3"),
    ] {
        assert_eq!(statement_text(&model(text)[0]), read_as);
    }
}

#[test]
fn every_statement() {
    for (text, read_as) in [
        ("title \"Bread, # fish & $ 5\"", "title Bread, # fish & $ 5"),
        ("goods bread, fish", "goods bread, fish"),
        ("goods 1..12", "goods to 12"),
        ("group food = bread, fish", "group food = bread, fish"),
        ("group food = 1..3, 5", "group food = 1, 2, 3, 5"),
        ("prices p_b, p_f", "prices p_b, p_f"),
        ("prices p[i]", "prices p[i]"),
        ("income m as M", "income m as M"),
        ("quantities x[i]", "quantities x[i]"),
        ("utility u", "utility u"),
        (
            "parameters a[i], g[i,j] as \\gamma_{i,j}, s as \\sigma # the slope",
            "parameters a[i], g[i,j] as \\gamma_{i,j}, s as \\sigma",
        ),
        ("parameters s as $\\bar{\\sigma}$, as, t as t", "parameters s as \\bar{\\sigma}, as, t as t"),
        ("assume g[i,j] = g[j,i], 0 < a <= 1, b != c, d >= e", "assume g[i,j] = g[j,i], 0 < a <= 1, b != c, d >= e"),
        ("assume sum over i of (a[i]) = 1", "assume sum over i of (a[i]) = 1"),
        ("let P = a", "let P = a"),
        ("let P[i] as \\Pi_i = a[i]", "let P[i] as \\Pi_i = a[i]"),
        ("demand bread = a", "Demand bread = a"),
        ("demand[1] = a", "Demand[1] = a"),
        ("demand [i] = a", "Demand[i] = a"),
        ("share[bread] = a", "Share[bread] = a"),
        ("outlay fish = a", "Outlay fish = a"),
        ("log demand fish = a", "LogDemand fish = a"),
        ("log  demand[i] = a", "LogDemand[i] = a"),
        ("rest fish", "rest fish"),
        ("rest[2]", "rest[2]"),
        ("others q, r as \\rho", "others q, r as \\rho"),
        ("others deflated", "others are deflated"),
        ("claim a + b = 1", "claim (a + b) = 1"),
        ("claim 0 < a^2 - b", "claim 0 < ((a ^ 2) + (-b))"),
        ("claim demand > share", "claim demand > share"),
        ("parameters goods, let, claim", "parameters goods, let, claim"),
    ] {
        assert_eq!(model(text).iter().map(statement_text).collect::<Vec<_>>(), [read_as], "{text}");
    }
}

#[test]
fn layout_is_free_where_it_says_nothing() {
    let plain = "goods bread,\n  fish\nincome m\nlet a = b +\n  c * d\n";
    let expected: Vec<String> = model(plain).iter().map(statement_text).collect();
    for variant in [
        "\u{feff}goods bread,\r\n  fish\r\nincome m\r\nlet a = b +\r\n  c * d\r\n",
        "# first\n\ngoods bread, # two\n\n# in between\n\tfish # goods\n \t \nincome m\nlet a =\n b\n +\n c*d",
        "goods bread,fish\nincome  m\nlet a=b+c*d",
        "goods\u{a0}bread, fish\nincome m\nlet a = b + c *\u{2009}d",
    ] {
        assert_eq!(model(variant).iter().map(statement_text).collect::<Vec<_>>(), expected, "{variant}");
    }
}

#[test]
fn places_are_those_of_the_file() {
    let text = "# π\nparameters σ, beta\nlet y = (σ + beta) *\n  # twice\n  beta^2\n";
    let source = Source::new("model.demand", text);
    let model = read(&source).unwrap();
    let Statement::Let { value, .. } = &model.statements[1].statement else { panic!() };
    let ExprKind::Product(factors) = &value.kind else { panic!() };
    assert_eq!(source.slice(factors[0].expr.span), "σ + beta");
    assert_eq!(source.slice(factors[1].expr.span), "beta^2");
    assert_eq!(source.place(factors[0].expr.span.start), (3, 10));
    assert_eq!(source.place(factors[1].expr.span.start), (5, 3));
    assert_eq!(source.slice(model.statements[1].keyword), "let");
    assert_eq!(source.slice(model.statements[0].span), "parameters σ, beta");
}

#[test]
fn a_mistake_hides_no_other_statement() {
    let source = Source::new("model.demand", "goods a, b\nincom m\nassume a a\nlet c = a\n");
    let reading = examine(&source);
    assert_eq!(reading.model.statements.len(), 2);
    assert_eq!(reading.mistakes.len(), 2);
    assert!(reading.declarations_lost);
    assert!(!examine(&Source::new("model.demand", "goods a, b\nassume a a\n")).declarations_lost);
}

#[test]
fn long_and_deep_models_are_read() {
    let deep = format!("let y = {}a{}", "(".repeat(200), ")".repeat(200));
    assert_eq!(model(&deep).len(), 1);
    let deep = format!("let y = {}a{}", "ln(-2^".repeat(100), ")".repeat(100));
    assert_eq!(model(&deep).len(), 1);
    let long: String = (0..40_000).map(|i| format!("+ a_{i} * b ")).collect();
    let Statement::Let { value, .. } = &model(&format!("let y = c {long}"))[0] else { panic!() };
    assert!(matches!(&value.kind, ExprKind::Sum(terms) if terms.len() == 40_001));
}

#[test]
fn half_a_megabyte_is_read_whole() {
    let line =
        "share bread = a_b + g_bb * ln(p_b) + g_bf * ln(p_f) + b_b * (ln(m) - a_0 - sum over j of (a[j] * ln(p[j])))\n";
    let text = line.repeat(500_000 / line.len());
    assert_eq!(model(&text).len(), 500_000 / line.len());
}

/// A random formula, as it may be written and as it is read.
fn formulas() -> impl Strategy<Value = (String, String)> {
    let leaf = prop_oneof![
        "[a-d][a-z0-9_]{0,3}"
            .prop_filter("a word of the language", |word| Function::from_word(word).is_none())
            .prop_map(|name| (name.clone(), name)),
        (0u32..500).prop_map(|number| (number.to_string(), number.to_string())),
        (0u32..9, "[a-c]").prop_map(|(good, name)| (format!("{name}[{good}]"), format!("{name}[{good}]"))),
    ];
    leaf.prop_recursive(5, 40, 4, |inner| {
        let bracket = |(written, read): &(String, String)| (format!("({written})"), read.clone());
        prop_oneof![
            prop::collection::vec(inner.clone(), 2..5).prop_map(move |parts| {
                let parts: Vec<_> = parts.iter().map(bracket).collect();
                let (written, read): (Vec<_>, Vec<_>) = parts.into_iter().unzip();
                (written.join(" + "), format!("({})", read.join(" + ")))
            }),
            prop::collection::vec((inner.clone(), any::<bool>()), 2..5).prop_map(move |parts| {
                let mut written = bracket(&parts[0].0).0;
                let mut read = format!("({}", parts[0].0.1);
                for (part, inverted) in &parts[1..] {
                    written += &format!("{}{}", if *inverted { "/" } else { " *\n " }, bracket(part).0);
                    read += &format!(" * {}{}", if *inverted { "1/" } else { "" }, part.1);
                }
                (written, read + ")")
            }),
            (inner.clone(), inner.clone()).prop_map(move |(base, exponent)| {
                (format!("({})^({})", base.0, exponent.0), format!("({} ^ {})", base.1, exponent.1))
            }),
            inner.clone().prop_map(|part| (format!("-({})", part.0), format!("(-{})", part.1))),
            inner.clone().prop_map(|part| (format!("ln({})", part.0), format!("ln{}", bracketed(&part.1)))),
            inner.prop_map(|part| {
                (format!("sum over j of ({})", part.0), format!("sum over j of {}", bracketed(&part.1)))
            }),
        ]
    })
}

/// Text made of the pieces that models are made of, in any order.
fn rubble() -> impl Strategy<Value = String> {
    let pieces = prop::sample::select(vec![
        "goods",
        "demand",
        "let",
        "assume",
        "claim",
        "log",
        "parameters",
        "title",
        "given",
        "as",
        "sum",
        "over",
        "of",
        "in",
        "a",
        "σ",
        "e",
        "ln",
        "1",
        "0.5",
        "..",
        ".",
        ",",
        "=",
        "==",
        "<",
        ">=",
        "!",
        "+",
        "-",
        "*",
        "/",
        "^",
        "(",
        ")",
        "[",
        "]",
        "{",
        "}",
        "$",
        "\"",
        "#",
        "\\",
        "\n",
        "\n  ",
        " ",
        "\t",
        "\r\n",
        "\u{301}",
        "\u{2212}",
        "日",
        "\u{0}",
        "\u{200b}",
    ]);
    prop::collection::vec(pieces, 0..60).prop_map(|pieces| pieces.concat())
}

/// Reads a text, renders whatever is said of it, and checks that every place lies in the text.
fn survives(bytes: &[u8]) {
    let source = Source::from_bytes("model.demand", bytes);
    let reading = examine(&source);
    for diagnostic in reading.mistakes.iter().chain(&reading.model.warnings) {
        let rendered = diagnostic.render(&source);
        assert!(rendered.starts_with("model.demand:"), "{rendered}");
        let Span { start, end } = diagnostic.span;
        assert!(start <= end && end <= source.text.len(), "{diagnostic:?}");
        assert!(source.text.is_char_boundary(start) && source.text.is_char_boundary(end), "{diagnostic:?}");
    }
    assert_eq!(read(&source).is_ok(), reading.mistakes.is_empty());
}

proptest! {
    #![proptest_config(ProptestConfig { failure_persistence: None, ..ProptestConfig::default() })]

    #[test]
    fn formulas_are_read_as_they_are_written((written, read) in formulas()) {
        // Exponents beyond the bound are refused, which is another law.
        prop_assume!(examine(&Source::new("", format!("let y = {written}"))).mistakes.is_empty());
        prop_assert_eq!(tree(&written), read);
    }

    #[test]
    fn no_text_is_too_strange(text in ".{0,200}") {
        survives(text.as_bytes());
    }

    #[test]
    fn no_rubble_is_too_strange(text in rubble()) {
        survives(text.as_bytes());
    }

    #[test]
    fn no_bytes_are_too_strange(bytes in prop::collection::vec(any::<u8>(), 0..200)) {
        survives(&bytes);
    }

    #[test]
    fn no_beginning_of_a_model_is_too_strange(length in 0usize..600, letter in any::<char>()) {
        let text = "title \"Two\"\ngoods bread, fish\nprices p_b, p_f\nincome m\nparameters α, g[i,j], s as \\sigma\n\
                    assume 0 < α < 1, g[i,j] = g[j,i]\nlet P = sum over j != 1 in food of (α * ln(p[j]))\n\
                    demand bread = (α * m^-s) / p_b # half\n  + 0.25 * m / p_b\nlog demand fish = ln(m) - P\n";
        let cut = text.char_indices().map(|(at, _)| at).nth(length).unwrap_or(text.len());
        survives(&text.as_bytes()[..cut]);
        survives(format!("{}{letter}{}", &text[..cut], &text[cut..]).as_bytes());
    }
}
