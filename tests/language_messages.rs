//! What an author is told about each mistake: one message a mistake, with its place and what would be right.

use mainspring::language::{Source, examine, read};

/// All messages of a file, rendered; warnings where there is no mistake.
fn messages(text: &str) -> String {
    let source = Source::new("model.demand", text);
    let diagnostics = match read(&source) {
        Ok(model) => model.warnings,
        Err(mistakes) => mistakes,
    };
    diagnostics.iter().map(|diagnostic| diagnostic.render(&source) + "\n").collect()
}

/// Each file with its messages, one after the other.
fn table(files: &[&str]) -> String {
    files.iter().map(|file| messages(file) + "\n").collect()
}

fn check(name: &str, shown: String) {
    let mut settings = insta::Settings::clone_current();
    settings.set_snapshot_path(concat!(env!("CARGO_MANIFEST_DIR"), "/snapshots"));
    settings.set_prepend_module_to_snapshot(false);
    settings.set_omit_expression(true);
    settings.bind(|| insta::assert_snapshot!(format!("language__{name}"), shown));
}

#[test]
fn slips_in_formulas() {
    let formulas = [
        "a_b m / p_b",
        "3 p",
        "3p_b + 1",
        "(a + b) (c + d)",
        "(a + b) c",
        "p[1] p[2]",
        "a * ln p",
        "log 2 * a",
        "sqrt x[1]",
        "ln ln(p)",
        "exp * 2",
        "1e-3 * a",
        "a + 2.5E6",
        ".5 * a",
        "a^.5",
        "5. * a",
        "0,5 * a",
        "(a + 0,5) * b",
        "a ** 2",
        "a == b",
        "a = b",
        "a \u{2212} b",
        "a \u{2013} b",
        "2 × a · b",
        "a² + b³",
        "√(a)",
        "x₁ + 1",
        "∑ a",
        "a^e^x * e^(-x)",
        "e(x)",
        "sqr(a)",
        "abs(a)",
        "a (b + c)",
        "f(a, b)",
        "a[i+1]",
        "a[1.5]",
        "a[]",
        "()",
        "a * / b",
        "* a",
        "a +",
        "",
        "{a + b} / c",
        "|a|",
        "a & b",
        "a; b",
        "\\frac{a}{b}",
        "\\alpha m",
        "$\\frac{a}{b}$ * c",
        "sum j of (a[j])",
        "sum over j (a[j])",
        "sum over j of a[j] * b[j]",
        "sum over of (a[j])",
        "sum over j, k != i of (a[j,k])",
        "sum over j in food in drink of (a[j])",
        "sum over j != of (a[j])",
        "pi[1] + pi(2)",
        "a < b",
        "a ? b",
        "a \" b",
        "a ' b",
    ];
    let files: Vec<String> = formulas.iter().map(|formula| format!("demand bread = {formula}")).collect();
    check("formulas", table(&files.iter().map(String::as_str).collect::<Vec<_>>()));
}

#[test]
fn brackets_and_quotes() {
    let files = [
        "let a = (b + c",
        "let a = b + c)",
        "let a = (b + c] * d",
        "let a = ln((b + c) * d\nlet f = g",
        "let a = ((b + c) * d\n  + p[1\nlet f = g",
        "title \"Three staples\ngoods a, b",
        "title Three staples",
        "title \u{201c}Three staples\u{201d}",
        "title 'Three staples'",
        "let a = $\\frac{b}{c}",
        "let a = b\u{200b} + c",
    ];
    check("brackets", table(&files));
}

#[test]
fn statements() {
    let files = [
        "god bread, fish",
        "price p_b, p_f",
        "shares bread = a",
        "bread = a * m",
        "x[i] = a[i] * m",
        "frobnicate",
        "log share bread = a",
        "log = a",
        "goods",
        "goods bread fish",
        "goods bread, fish,",
        "goods 1, 2",
        "goods 0..4",
        "goods 1..0",
        "goods 1..5000",
        "goods 1..99999999999999999999",
        "group food bread, fish",
        "group food = bread + fish",
        "group food = 3..1, 2",
        "prices p[1], p[2]",
        "prices p[i",
        "prices p[i,]",
        "income m, n",
        "income",
        "utility 3",
        "parameters a b",
        "parameters ln, pi, a",
        "parameters s as",
        "parameters s as \\input{notes}, t as \\tau",
        "parameters s as \\bar{s",
        "parameters a, b = 1",
        "assume a",
        "assume a > 0, b",
        "assume a > 0 and b > 0",
        "assume a > 0; b > 0",
        "assume a = 0,5",
        "assume a => 0, b",
        "assume a =< 0",
        "assume a <> 0",
        "assume a ≥ 0",
        "assume a >= 0 <",
        "let a",
        "let a := b",
        "let a[1] = b",
        "let a + b = c",
        "demand = a",
        "demand bread",
        "demand 1 = a",
        "demand[1,2] = a",
        "demand[] = a",
        "demand bread a * m",
        "rest",
        "rest fish, bread",
        "others",
        "claim a",
        "claim",
        "goods: bread, fish",
        "income m[i]",
        "others q, r[j]",
        "parameters g[i,i]",
        "assume a == 1, b > 0 > c,\n  c d > 0, ln e > 0, foo(a) = 1",
        "parameters a b, c, d[1], pi",
    ];
    check("statements", table(&files));
}

#[test]
fn forms_of_later_versions() {
    let files = ["goods 1..n", "scenario \"Dear bread\": p_b from 1 to 5/4"];
    check("later_versions", table(&files));
}

#[test]
fn functions_of_the_theory() {
    let files = [
        "given something = u",
        "given demand = u",
        "given utility x = u",
        "inverse = a",
        "claim hicksian = u",
        "claim hicksian bread",
        "claim demand bread > 0",
        "claim slutsky[bread] = 0",
        "claim elasticity[bread, ] = 0",
        "claim compensated elasticity bread = 0",
        "claim indirect = m",
        "claim separable",
        "claim separable food, fuel",
    ];
    check("functions", table(&files));
}

#[test]
fn layout() {
    let files = [
        "  goods bread, fish\nincome m",
        "goods bread, fish\n  prices p_b, p_f\nincome m",
        "let a = b +\nc * d\nlet e = f f",
        "let a = b\n+ c\nlet e = f",
        "// a note\ngoods bread\n% another",
        "goods bread\n----------\nincome m",
        "1 2 3",
    ];
    check("layout", table(&files));
}

#[test]
fn all_mistakes_of_a_file_in_one_run() {
    let file = "\u{feff}title \"Three staples, one budget\"\r\ngoods bread, fish cloth\r\nprices p_b, p_f, p_c # three\r\n\
                incom m\r\nparameters α, β\r\n\r\nassume α + β == 1,\r\n        α > 0\r\ndemand bread = α * m / p_b\r\n\
                demand fish\t= (β * m / p_f\r\nrest cloth\r\nclaim α\u{301} β = 1\r\n";
    check("one_run", messages(file));
}

#[test]
fn roots_that_are_none() {
    let read_as_written = ["x^2/2", "x^s/2", "x^(1/2)", "x^1/y", "(x^1)/2", "x^4/2", "x^1/2^s", "x/2"];
    for formula in read_as_written {
        assert_eq!(messages(&format!("let a = {formula}")), "", "{formula}");
    }
    check("warnings", table(&["let a = p_b^1/2", "let a = b * (p + q)^-1/2 - 1", "let a = b^3/2 + c^1/3"]));
}

#[test]
fn long_lines_are_cut_around_the_place() {
    let many: String = (0..4000).map(|i| format!("a_{i} + ")).collect();
    let files = [
        format!("let b = {many}c d + {many}e"),
        format!("let b = ({many}c"),
        format!("let b = {many}c d"),
        format!("let b =\t\tσ + \u{65e5}\u{672c} + e\u{301} + c d + {many}e"),
    ];
    check("long_lines", table(&files.iter().map(String::as_str).collect::<Vec<_>>()));
}

#[test]
fn bounds() {
    let deep = format!("let a = {}b{}", "(".repeat(100_000), ")".repeat(100_000));
    let never_closed = format!("let a = {}b", "(".repeat(100_000));
    let tower = format!("let a = b{}", "^b".repeat(100_000));
    let name = format!("let {} = b", "a".repeat(100_000));
    let digits = format!("let a = {}", "7".repeat(1001));
    let statement = format!("let a = {}b", "b + ".repeat(300_000));
    let file = "a".repeat(10_000_000);
    let files = [
        &deep,
        &never_closed,
        &name,
        &tower,
        &digits,
        &statement,
        &file,
        &file[..10_000],
        "let a = 2^1000000",
        "let a = b^-10001",
        "let a = 2^(10^9)",
        "let a = 2^(10^5 * 3 - 1)",
        "let a = b^2^2^2^2^2",
        "let a = b^(2^1000)",
        "",
        "\n \n",
        "# nothing yet\n",
    ];
    check("bounds", table(&files));
}

#[test]
fn bytes_that_are_no_text() {
    let files: [&[u8]; 3] = [b"goods bread\nprices p\xff\n", b"\xff\xfe", b"goods \x1b[31mbread\n\x00"];
    let shown: String = files
        .iter()
        .map(|bytes| {
            let source = Source::from_bytes("model.demand", bytes);
            examine(&source).mistakes.iter().map(|mistake| mistake.render(&source) + "\n").collect::<String>() + "\n"
        })
        .collect();
    check("bytes", shown);
}

#[test]
fn mistakes_without_end_are_cut_off() {
    let source = Source::new("model.demand", format!("assume {}a", "a, ".repeat(300_000)));
    assert_eq!(examine(&source).mistakes.len(), 21);
    let source = Source::new("model.demand", "let a = b b\n".repeat(1000));
    let mistakes = examine(&source).mistakes;
    assert_eq!(mistakes.len(), 201);
    assert!(mistakes[200].message.starts_with("more than 200 mistakes"));
}

#[test]
fn many_mistakes_in_a_long_line_are_told_at_once() {
    let source = Source::new("model.demand", format!("let a = {}c", "foo(b) + ".repeat(100_000)));
    let length: usize = examine(&source).mistakes.iter().map(|mistake| mistake.render(&source).len()).sum();
    assert!(length > 10_000);
}
