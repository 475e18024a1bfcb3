//! What an author is told about a file that is well formed and makes no sense.

use mainspring::language::Source;
use mainspring::model::read;

/// All messages of a file, rendered; warnings where there is no mistake.
fn messages(text: &str) -> String {
    let source = Source::new("model.demand", text);
    let diagnostics = match read(&source, &[]) {
        Ok(model) => model.warnings,
        Err(mistakes) => mistakes,
    };
    diagnostics.iter().map(|diagnostic| diagnostic.render(&source) + "\n").collect()
}

fn table(files: &[String]) -> String {
    files.iter().map(|file| messages(file) + "\n").collect()
}

fn check(name: &str, files: &[String]) {
    let mut settings = insta::Settings::clone_current();
    settings.set_snapshot_path(concat!(env!("CARGO_MANIFEST_DIR"), "/snapshots"));
    settings.set_prepend_module_to_snapshot(false);
    settings.set_omit_expression(true);
    settings.bind(|| insta::assert_snapshot!(format!("model__{name}"), table(files)));
}

/// A file with two named goods and one line more.
fn named(line: &str) -> String {
    format!(
        "goods bread, fish\nprices p[i]\nincome m\nparameters alpha[i], s\ngroup food = bread\n{line}\nshare[i] = alpha[i] + 0*s + 0*sum over k in food of (alpha[k])\n"
    )
}

#[test]
fn unknown_names() {
    let lines = [
        "claim alpa[bread] = 1",
        "claim p_bread = 1",
        "claim alpha[bred] = 1",
        "claim alpha[3] = 1",
        "claim alpha = 1",
        "claim s[bread] = 1",
        "claim bread = 1",
        "claim food = 1",
        "claim sum over k in foot of (alpha[k]) = 1",
        "claim zebra = 1",
        "let q = sum over k of (alpha[k]*k)",
        "let q = alpha[j]",
    ];
    check("unknown_names", &lines.map(named));
}

#[test]
fn names_that_are_taken() {
    let lines = [
        "parameters s",
        "parameters alpha_bread",
        "parameters bread",
        "let m = 1",
        "parameters g[i,i]",
        "parameters g[bread]",
        "claim sum over s of (alpha[s]) = 1",
        "claim sum over k of (sum over k of (alpha[k])) = 1",
        "claim sum over fish of (alpha[fish]) = 1",
        "group meat = bread, bread",
        "group meat = beef",
        "income y",
    ];
    check("names_that_are_taken", &lines.map(named));
}

#[test]
fn demands_that_do_not_fit() {
    let files = [
        "goods bread, fish\nprices p[i]\nincome m\nshare bread = 1/2",
        "goods bread, fish\nprices p[i]\nincome m\nshare[i] = 1/2\ndemand fish = m",
        "goods bread, fish\nprices p[i]\nincome m\nshare[i] = 1/2\nrest fish",
        "goods bread, fish\nprices p[i]\nincome m\nshare bread = 1/2\nshare fihs = 1/2",
        "goods bread, fish\nprices p\nincome m\nshare[i] = 1/2",
        "goods 1..3\nprices p_1, p_2\nincome m\nshare[i] = 1/3",
        "goods 1..2\nprices p[i,j]\nincome m\nshare[i] = 1/2",
        "goods 1..2\nincome m[i]\nshare[i] = 1/2",
        "share bread = 1/2",
        "goods 1..2\nprices p[i]\nincome m\nquantities x_1, x_2\ndemand x_1 = m\ndemand[2] = m",
        "goods 1..2\nprices p[i]\nincome m\nothers q\nshare[1] = 1/2\nrest[2]",
        "goods 1..2\nprices p[i]\nincome m\nutility u\nshare[1] = u\nrest[2]",
        "title \"nothing\"",
    ];
    check("demands_that_do_not_fit", &files.map(str::to_string));
}

#[test]
fn formulas_without_a_value() {
    let lines = [
        "let q = 1/(s - s)",
        "let q = ln(-p[bread])",
        "let q = (s + 1)^s",
        "let q = sqrt(-1 - s^2)",
        "let q = Ei(0)",
        "let q = r\nlet r = 2*t\nlet t = q",
        "let q[i] = 2*q[i]",
        "assume s > 1, s < 0",
        "assume s^2 = 4",
        "assume m = 1",
    ];
    check("formulas_without_a_value", &lines.map(named));
}

#[test]
fn all_mistakes_in_one_run() {
    let file = "goods bread, fish
prices p_b, p_f
income m
parameters a, b, a
assume c > 0
demand bread = a*m/p_bb
demand fish = (b*m)/p_f +
claim d = 1
";
    check("all_mistakes_in_one_run", &[file.to_string()]);
}

#[test]
fn names_that_are_never_used() {
    let file = "goods 1..2
group both = 1, 2
prices p[i]
income m
parameters a, b[i]
let q = 2
share[i] = 1/2
";
    check("names_that_are_never_used", &[file.to_string()]);
}
