//! Formulas and equations in LaTeX: what is read, how it is settled by the declarations, and what is refused.

use mainspring::language::*;
use proptest::prelude::*;

/// Names that the formulas below are written in.
const DECLARED: &str = "goods 1..3
prices p[i]
income m
quantities x[i]
group food = 1, 2
parameters a, b, c, alpha[i], beta_0, g[i,j] as \\gamma, s as \\sigma, gamma_AB, varepsilon, tax, mu, B as \\bar{b}^{*}, varphi
let P = a
let lnQ = b
";

fn examine_text(text: &str) -> (Reading, Source) {
    let source = Source::new("model.demand", text);
    (examine(&source), source)
}

/// The right-hand side in the signs of model files, with the warnings.
fn formula(latex: &str) -> (String, Vec<String>) {
    let text = format!("{DECLARED}let y = ${latex}$\n");
    let (reading, source) = examine_text(&text);
    let mistakes: Vec<String> = reading.mistakes.iter().map(|mistake| mistake.render(&source)).collect();
    assert!(mistakes.is_empty(), "{latex}\n{}", mistakes.join("\n"));
    let warnings = reading.model.warnings.iter().map(|warning| warning.message.clone()).collect();
    match reading.model.statements.last().map(|located| &located.statement) {
        Some(Statement::Let { value, .. }) => (wording(value), warnings),
        other => panic!("{other:?}"),
    }
}

fn refused(latex: &str) -> String {
    let (reading, source) = examine_text(&format!("{DECLARED}let y = ${latex}$\n"));
    assert!(!reading.mistakes.is_empty(), "{latex} should be refused");
    reading.mistakes.iter().map(|mistake| mistake.render(&source) + "\n").collect()
}

#[test]
fn the_forms_of_a_manuscript_are_read() {
    for (latex, read_as) in [
        (r"\frac{a m}{p_1}", "a*m/p[1]"),
        (r"\frac12 a", "1/2*a"),
        (r"\tfrac{1}{2}\dfrac ab", "1/2*(a/b)"),
        (r"a/b", "a/b"),
        (r"ab/c", "a*b/c"),
        (r"p_i^{\sigma}", "p[i]^s"),
        (r"p^{\sigma}_i", "p[i]^s"),
        (r"p_1^{1-\sigma}", "p[1]^(1 - s)"),
        (r"\gamma_{ij}", "g[i,j]"),
        (r"\gamma_{i,j}", "g[i,j]"),
        (r"\gamma_{12}", "g[1,2]"),
        (r"{\gamma}_{1,2}", "g[1,2]"),
        (r"\gamma_{AB}", "gamma_AB"),
        (r"\beta_0", "beta_0"),
        (r"\varepsilon\varphi", "varepsilon*varphi"),
        (r"\bar{b}^{*}", "B"),
        (r"\ln p_1", "ln(p[1])"),
        (r"\log(p_1)", "ln(p[1])"),
        (r"\ln\left(\frac{m}{P}\right)", "ln(m/P)"),
        (r"\ln \biggl[ \frac{m}{P} \biggr]", "ln(m/P)"),
        (r"\ln Q", "lnQ"),
        (r"\ln^2 a", "ln(a)^2"),
        (r"\ln^2(a+b)", "ln(a + b)^2"),
        (r"(\ln a)^2", "ln(a)^2"),
        (r"\ln p_i \ln p_j", "ln(p[i])*ln(p[j])"),
        (r"\exp(a)", "exp(a)"),
        (r"e^{a+b}", "exp(a + b)"),
        (r"a e^{-b}", "a*exp(-b)"),
        (r"ae^b", "a*exp(b)"),
        (r"\mathrm{e}^{a}", "exp(a)"),
        (r"\sqrt{a}", "sqrt(a)"),
        (r"\sqrt[3]{a}", "a^(1/3)"),
        (r"\left( a + b \right)^2", "(a + b)^2"),
        (r"\bigl[ a \{ b + c \} \bigr]", "a*(b + c)"),
        (r"a \cdot b \times c", "a*b*c"),
        (r"a \, b \; c \! a ~ b \quad c", "a*b*c*a*b*c"),
        (r"a(b-c)", "a*(b - c)"),
        (r"\sigma\left(a-b\right)", "s*(a - b)"),
        (r"\mathrm{tax} + \text{tax} + \operatorname{tax} + tax", "tax + tax + tax + tax"),
        (r"\operatorname{erf}(a) + \operatorname{W}(b)", "erf(a) + lambertw(b)"),
        (r"\pi a", "pi*a"),
        (r"-a + b", "-a + b"),
        (r"a \cdot -b", "a*(-b)"),
        (r"0.05 a", "1/20*a"),
        (r"\sum_j \gamma_{ij} \ln p_j + 1", "sum over j of (g[i,j]*ln(p[j])) + 1"),
        (r"\sum_{j=1}^{n} p_j", "sum over j of (p[j])"),
        (r"\sum_{j=1}^3 p_j", "sum over j of (p[j])"),
        (r"\sum\limits_{j \neq i} p_j", "sum over j != i of (p[j])"),
        (r"\sum_{j=1, j\neq i}^{n} p_j", "sum over j != i of (p[j])"),
        (r"\sum_{k,l} \gamma_{kl}", "sum over k, l of (g[k,l])"),
        (r"\sum_k \sum_l \gamma_{kl} \ln p_k \ln p_l", "sum over k of (sum over l of (g[k,l]*ln(p[k])*ln(p[l])))"),
        (r"\sum_{k \in \text{food}} p_k", "sum over k in food of (p[k])"),
        (r"a\prod_{k} p_k^{\alpha_k}", "a*product over k of (p[k]^alpha[k])"),
        (r"\frac{\prod_k p_k^{\alpha_k}}{a}", "product over k of (p[k]^alpha[k])/a"),
        (r"\underbrace{a m}_{\text{spent}} + b", "a*m + b"),
        ("a % the first\n  + b % $ and the second\n  ", "a + b"),
        (r"a {}+ b", "a + b"),
        (r"\mu x_1", "mu*x[1]"),
        (r"\left\{ a \right\} \boldsymbol{b}", "a*b"),
    ] {
        let (read, warnings) = formula(latex);
        assert_eq!(read, read_as, "{latex}");
        assert!(warnings.is_empty(), "{latex}: {warnings:?}");
    }
}

#[test]
fn where_brackets_are_missing_the_reading_is_printed_back() {
    for (latex, read_as) in [
        (r"\ln a b", "ln(a*b)"),
        (r"\ln a^2", "ln(a^2)"),
        (r"\ln(a)^2", "ln(a)^2"),
        (r"\ln \frac{m}{P} + 1", "ln(m/P) + 1"),
        (r"\ln a b \ln c", "ln(a*b)*ln(c)"),
        (r"\ln \sum_k \alpha_k p_k", "ln(sum over k of (alpha[k]*p[k]))"),
        (r"\exp a b + c", "exp(a*b) + c"),
    ] {
        let (read, warnings) = formula(latex);
        assert_eq!(read, read_as, "{latex}");
        let silent = latex.contains("\\frac");
        assert_eq!(warnings.is_empty(), silent, "{latex}: {warnings:?}");
        let part = read_as.split(" + ").next().unwrap_or("").split("*ln(c)").next().unwrap_or("");
        assert!(silent || warnings.iter().any(|warning| warning.contains(part)), "{latex}: {warnings:?}");
    }
}

#[test]
fn what_can_be_read_in_two_ways_is_refused_with_both() {
    let doubtful = [
        (r"\ln m/P", [r"\ln(m)/P", r"\ln(m/P)"]),
        (r"\ln a \cdot b", [r"\ln(a) \cdot b", r"\ln(a \cdot b)"]),
        (r"a/b c", ["(a/b) c", "a/(b c)"]),
        (r"a/b(c+1)", ["(a/b) (c+1)", "a/(b (c+1))"]),
        (r"a x_12", ["x_{12}", r"x_1 \cdot 2"]),
        (r"\prod_k p_k a", ["one product over all", "factors beside it"]),
        (r"\ln^{-1}(a)", ["a power", "the inverse function"]),
    ];
    for (latex, readings) in doubtful {
        let message = refused(latex);
        assert!(readings.iter().all(|reading| message.contains(reading)), "{latex}\n{message}");
    }
    let text = "goods 1..12\nprices p[i]\nincome m\nparameters g[i,j]\nlet y = $g_{112}$\n";
    let (reading, source) = examine_text(text);
    let message = reading.mistakes.first().map(|mistake| mistake.render(&source)).unwrap_or_default();
    assert!(message.contains("`g[1,12]` or as `g[11,2]`"), "{message}");
    let text = "parameters a, b, ab\nclaim $ab = 1$\n";
    let (reading, source) = examine_text(text);
    let message = reading.mistakes.first().map(|mistake| mistake.render(&source)).unwrap_or_default();
    assert!(message.contains("`ab` or as `a*b`"), "{message}");
}

#[test]
fn refusals_say_where_and_what_would_be_right() {
    let wrong = [
        r"a +",
        r"\frac{a}",
        r"a^",
        r"a_{",
        r"\foo a",
        r"\alhpa_1",
        r"(a + b",
        r"a + b)",
        r"\left( a \right]",
        r"a & = b",
        r"\partial x",
        r"z + a",
        r"\alpha",
        r"\gamma_1",
        r"\sum p",
        r"\sum_{j=2}^{3} p_j",
        r"\sum_{j=1}^{4} p_j",
        r"\sum_{k \in fod} p_k",
        r"\log_{10} a",
        r"ln a",
        r"e",
        r"a 2",
        r"a^b^c",
        r"\left. a \right|",
        r"a # b",
        r"|a|",
        "",
        r"\sqrt",
        r"\ln",
        r"\ln + a",
        r"a * / b",
        r"x(a, b)",
        r"b^{*}",
        r"(a+b)_1",
        r"\int a",
    ];
    let mut settings = insta::Settings::clone_current();
    settings.set_snapshot_path(concat!(env!("CARGO_MANIFEST_DIR"), "/snapshots"));
    settings.set_prepend_module_to_snapshot(false);
    settings.set_omit_expression(true);
    settings.bind(|| insta::assert_snapshot!("language__latex", wrong.map(refused).concat()));
}

/// The statements of a file, each in the signs of model files.
fn statements(text: &str) -> Vec<String> {
    let (reading, source) = examine_text(text);
    let mistakes: Vec<String> = reading.mistakes.iter().map(|mistake| mistake.render(&source)).collect();
    assert!(mistakes.is_empty(), "{}", mistakes.join("\n"));
    reading.model.statements.iter().filter_map(|located| spelled(&located.statement)).collect()
}

fn spelled(statement: &Statement) -> Option<String> {
    Some(match statement {
        Statement::Demand(Equation { form, target, value }) => {
            format!("{form:?} {} = {}", goods(target), wording(value))
        }
        Statement::Inverse { target, value } => format!("inverse {} = {}", goods(target), wording(value)),
        Statement::Let { name, value } => {
            let indices: Vec<&str> = name.indices.iter().map(|index| index.text.as_str()).collect();
            format!("let {}{indices:?} = {}", name.name.text, wording(value))
        }
        Statement::Given { kind, value } => format!("given {kind:?} = {}", wording(value)),
        Statement::Assume(relations) => {
            format!("assume {}", relations.iter().map(relation_wording).collect::<Vec<_>>().join(", "))
        }
        Statement::Claim(Claim::Relation(relation)) => format!("claim {}", relation_wording(relation)),
        Statement::Claim(Claim::Function { function, value, .. }) => {
            let function = match function {
                Claimed::Demand(form, target) => format!("{form:?} {}", goods(target)),
                Claimed::Hicksian(target) => format!("hicksian {}", goods(target)),
                Claimed::Slutsky((index, _), _) => format!("slutsky {index:?}"),
                Claimed::Elasticity((index, _), _) => format!("elasticity {index:?}"),
                other => format!("{other:?}"),
            };
            format!("claim {function} = {}", wording(value))
        }
        _ => return None,
    })
}

fn goods(target: &Target) -> String {
    match target {
        Target::Good(name) => name.text.clone(),
        Target::Indexed(Index::Number(number), _) => number.to_string(),
        Target::Indexed(Index::Name(name), _) => format!("[{name}]"),
    }
}

#[test]
fn displays_are_pasted_as_they_are() {
    let text = r"goods 1..2
prices p[i]
income m
parameters alpha[i], g[i,j] as \gamma, beta[i]
\newcommand{\lnp}[1]{\ln p_{#1}}

\begin{align}
  w_i(p,m) &= \alpha_i + \sum_{j=1}^{n} \gamma_{ij} \lnp{j} % the shares
    + \beta_i \ln \bigl( m / P(p) \bigr), \qquad i = 1, \dots, n, \label{eq:w} \\
\ln P(p) &= \sum_k \alpha_k \lnp{k} \\
  &\quad {}+ \frac12 \sum_{k}\sum_{l} \gamma_{kl} \lnp{k} \lnp{l}. \nonumber
\end{align}
";
    assert_eq!(
        statements(text),
        [
            "Share [i] = alpha[i] + sum over j of (g[i,j]*ln(p[j])) + beta[i]*ln(m/P)",
            "let P[] = exp(sum over k of (alpha[k]*ln(p[k])) + 1/2*sum over k of (sum over l of \
             (g[k,l]*ln(p[k])*ln(p[l]))))",
        ]
    );
}

#[test]
fn left_sides_are_mapped_to_goods_by_the_declarations() {
    let named = "goods tea, cake\nprices p_t, p_c\nincome m\nparameters a\n";
    for (display, read_as) in [
        ("demand $x_t(p,m) = a m/p_t$\n", "Demand [tea] = a*m/p_t"),
        ("demand $$x_{t} = \\frac{am}{p_t}$$\n", "Demand [tea] = a*m/p_t"),
        ("$$ q_{\\text{cake}} = \\frac{a m}{p_c} $$\n", "Demand [cake] = a*m/p_c"),
        ("share\n\\[ b_c = a \\]\n", "Share [cake] = a"),
        ("\\[ p_c x_c = a m. \\]\n", "Outlay [cake] = a*m"),
        ("$$ \\frac{p_t q_t}{m} = a $$\n", "Share [tea] = a"),
        ("$$ \\ln x_t = a \\ln p_t $$\n", "LogDemand [tea] = a*ln(p_t)"),
        ("$$ A = a p_t $$\n", "let A[] = a*p_t"),
        ("let $A(p) = a p_t$\n", "let A[] = a*p_t"),
        ("given $v(p,m) = \\frac{m}{p_t}$\n", "given IndirectUtility = m/p_t"),
        ("claim $h_t(p,u) = a$\n", "claim hicksian [tea] = a"),
        ("claim $x_t^h = a$\n", "claim hicksian [tea] = a"),
        ("claim $e(p,u) = u p_t$\n", "claim Preferences(Expenditure) = u*p_t"),
        ("claim $s_{tc} = a$\n", "claim slutsky Name(\"tea\") = a"),
        ("claim $a > 0$\n", "claim a > 0"),
        ("assume $a \\in (0,1]$\n", "assume 0 < a <= 1"),
        ("assume $0 < a \\leq 1$, a != 1/2\n", "assume 0 < a <= 1, a != 1/2"),
    ] {
        let with_utility = if display.contains("(p,u)") { "utility u\n" } else { "" };
        assert_eq!(statements(&format!("{named}{with_utility}{display}")), [read_as], "{display}");
    }
    let quantities = "goods tea, cake\nprices p, q\nincome m\nquantities t, c\nparameters a\n";
    assert_eq!(statements(&format!("{quantities}$$ t = \\frac{{a m}}{{p}} $$\n")), ["Demand [tea] = a*m/p"]);
    for unclear in ["$$ z_t(p,m) = a $$\n", "$$ v(p,m) = a $$\n"] {
        let (reading, _) = examine_text(&format!("{named}{unclear}"));
        assert_eq!(reading.mistakes.len(), 1, "{unclear}");
        assert!(reading.mistakes[0].message.contains(" or "), "{:?}", reading.mistakes);
    }
}

#[test]
fn a_display_that_is_broken_hides_nothing_else() {
    let text = "goods 1..2\nprices p[i]\nincome m\nparameters a\n\n$$ x_1 = \\frac{a m}{p_1 $$\n\nlet b = 1 +\n";
    let (reading, _) = examine_text(text);
    assert_eq!(reading.mistakes.len(), 2, "{:?}", reading.mistakes);
}

#[test]
fn names_print_as_they_were_read() {
    let text = "parameters tax, p_bread, k\nclaim $\\mathrm{tax} \\cdot p_{\\mathrm{bread}} = k$\n";
    let (reading, _) = examine_text(text);
    let forms: Vec<Option<String>> = match &reading.model.statements[0].statement {
        Statement::Parameters(list) => list.iter().map(|declared| declared.latex.clone()).collect(),
        other => panic!("{other:?}"),
    };
    let set = |form: &str| Some(form.to_string());
    assert_eq!(forms, [set("\\mathrm{tax}"), set("p_{\\mathrm{bread}}"), set("k")]);
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(600))]

    #[test]
    fn no_latex_is_too_strange(
        pieces in prop::collection::vec(prop::sample::select(vec![
            "\\frac", "{", "}", "a", "p_1", "^", "_", "\\ln", " ", "(", ")", "\\sum", "_{j}", "\\\\", "&", "=", "$", "$$", "%", "\n",
            "\\begin{align}", "\\end{align}", "\\left(", "\\right)", "12", "\\newcommand{\\z}[1]{#1}", "\\z", "é", "\u{2212}", "\\",
            "e^{a}", "/", "\\cdot", ",", "'", "\\text{and}", "\\sqrt[", "]", "\\mathrm{tax}", "#", "\\alpha_i", "\\prod_k",
        ]), 0..25),
        before in prop::sample::select(vec!["let y = $", "$$", "\\begin{align}", "demand $", "claim $", "assume $", ""]),
    ) {
        let (reading, source) = examine_text(&format!("{DECLARED}{before}{}", pieces.concat()));
        for message in reading.mistakes.iter().chain(&reading.model.warnings) {
            prop_assert!(message.span.start <= message.span.end && message.span.end <= source.text.len());
            prop_assert!(!message.render(&source).is_empty());
        }
    }
}
