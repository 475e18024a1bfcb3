//! The command line from outside: what goes in, what comes out, and how it ends.

use std::io::{BufRead, BufReader, Write};
use std::path::PathBuf;
use std::process::{Command, Output, Stdio};

const PROVEN: &str = "goods a, b\nprices p, q\nincome m\nshare a = 1/3\nshare b = 2/3\n";
const REFUTED: &str = "goods a, b\nprices p, q\nincome m\nshare a = 1/3\nshare b = 1/3\n";
const UNREADABLE: &str = "goods a, b\nprices p\nincome m\nshare a = 1/3\nshare b = zz\n";

/// A folder that is removed at the end.
struct Folder(PathBuf);

impl Folder {
    fn new(name: &str) -> Folder {
        let path = std::env::temp_dir().join(format!("mainspring-{name}-{}", std::process::id()));
        let _ = std::fs::remove_dir_all(&path);
        std::fs::create_dir_all(&path).unwrap();
        Folder(path)
    }

    fn file(&self, name: &str, text: &str) -> String {
        let path = self.0.join(name);
        std::fs::write(&path, text).unwrap();
        path.display().to_string()
    }

    fn path(&self, name: &str) -> String {
        self.0.join(name).display().to_string()
    }
}

impl Drop for Folder {
    fn drop(&mut self) {
        let _ = std::fs::remove_dir_all(&self.0);
    }
}

fn run(arguments: &[&str]) -> Output {
    run_with_input(arguments, "")
}

fn run_with_input(arguments: &[&str], input: &str) -> Output {
    let mut child = Command::new(env!("CARGO_BIN_EXE_mainspring"))
        .args(arguments)
        .stdin(Stdio::piped())
        .stdout(Stdio::piped())
        .stderr(Stdio::piped())
        .spawn()
        .unwrap();
    let _ = child.stdin.take().unwrap().write_all(input.as_bytes());
    child.wait_with_output().unwrap()
}

fn code(output: &Output) -> i32 {
    output.status.code().unwrap()
}

fn out(output: &Output) -> String {
    String::from_utf8(output.stdout.clone()).unwrap()
}

fn err(output: &Output) -> String {
    String::from_utf8(output.stderr.clone()).unwrap()
}

#[test]
fn the_status_tells_mathematics_from_mishaps() {
    let folder = Folder::new("status");
    let proven = folder.file("proven.demand", PROVEN);
    let refuted = folder.file("refuted.demand", REFUTED);
    let unreadable = folder.file("unreadable.demand", UNREADABLE);
    assert_eq!(code(&run(&["vet", &proven])), 0);
    assert_eq!(code(&run(&["vet", &refuted])), 1);
    assert_eq!(code(&run(&["vet"])), 2);
    assert_eq!(code(&run(&["vet", &proven, "--with", "s"])), 2);
    assert_eq!(code(&run(&["vet", &unreadable])), 4);
    assert_eq!(code(&run(&["vet", &folder.path("absent.demand")])), 4);
    assert_eq!(code(&run(&["vet", &proven, "--out", &folder.path("no/such/folder/x")])), 5);
    assert_eq!(code(&run(&["vet", &proven, &refuted])), 1);
    assert_eq!(code(&run(&["vet", &refuted, &unreadable])), 4);
    assert_eq!(code(&run(&["vet", &refuted, "--only", "homogeneity"])), 0);
}

#[test]
fn a_conditional_verdict_counts_as_passed_only_on_demand() {
    let folder = Folder::new("accept");
    let model = "goods a, b\nprices p, q\nincome m\nparameters s, t\nassume s > 0, t > 0\nshare a = s\nshare b = t\n";
    let file = folder.file("conditional.demand", model);
    let only = ["vet", file.as_str(), "--only", "adding-up"];
    assert_eq!(code(&run(&only)), 1);
    assert_eq!(code(&run(&[&only[..], &["--accept", "regional,conditional"]].concat())), 0);
    assert_eq!(code(&run(&[&only[..], &["--with", "s=1/2,t=0.5"]].concat())), 0);
    assert_eq!(code(&run(&[&only[..], &["--with", "s=1/2,t=1/3"]].concat())), 1);
}

#[test]
fn mistakes_are_told_with_their_place_and_all_of_them() {
    let folder = Folder::new("mistakes");
    let file = folder.file("bad.demand", UNREADABLE);
    let output = run(&["vet", &file]);
    assert_eq!(out(&output), "");
    let told = err(&output);
    assert!(told.contains(&format!("{file}:2:")) && told.contains(&format!("{file}:5:11: ")), "{told}");
}

#[test]
fn hostile_input_ends_in_a_message() {
    let folder = Folder::new("hostile");
    let deep = format!("parameters a\nclaim {}a{} = a\n", "(".repeat(100_000), ")".repeat(100_000));
    let high = "parameters a\nassume a > 0\nclaim 2^(10^9) > a\n";
    let long = format!("parameters a\nclaim a{} = a\n", " + a - a".repeat(1_300_000));
    let contradictory = "parameters a\nassume a > 1, a < 0\nclaim a > 0\n";
    for (name, text) in [("empty", ""), ("deep", &deep), ("high", high), ("long", &long), ("never", contradictory)] {
        let output = run(&["vet", &folder.file(name, text), "--time", "20"]);
        assert_eq!(code(&output), 4, "{name}: {}", err(&output));
        assert!(!err(&output).is_empty() && !err(&output).contains("internal error"), "{name}: {}", err(&output));
    }
    let bytes = folder.0.join("bytes");
    std::fs::write(&bytes, [0x67, 0xff, 0xfe]).unwrap();
    assert_eq!(code(&run(&["vet", bytes.to_str().unwrap()])), 4);
}

#[test]
fn standard_input_is_a_model_too() {
    let output = run_with_input(&["vet", "-"], PROVEN);
    assert_eq!(code(&output), 0, "{}", err(&output));
    assert!(out(&output).contains("symmetry"));
}

#[test]
fn files_are_replaced_whole_and_left_alone_when_nothing_changed() {
    let folder = Folder::new("files");
    let model = folder.file("m.demand", PROVEN);
    let report = folder.path("report.json");
    let arguments = ["vet", model.as_str(), "--as", "json", "--out", report.as_str()];
    let check = ["vet", model.as_str(), "--as", "json", "--check", report.as_str()];
    assert_eq!(code(&run(&check)), 6);
    assert_eq!(code(&run(&arguments)), 0);
    let first = std::fs::metadata(&report).unwrap().modified().unwrap();
    assert_eq!(code(&run(&arguments)), 0);
    assert_eq!(std::fs::metadata(&report).unwrap().modified().unwrap(), first);
    assert_eq!(code(&run(&check)), 0);
    let left: Vec<_> = std::fs::read_dir(&folder.0).unwrap().collect();
    assert_eq!(left.len(), 2, "{left:?}");
}

#[test]
fn a_folder_stands_for_its_models() {
    let folder = Folder::new("folder");
    folder.file("a.demand", PROVEN);
    folder.file("b.demand", REFUTED);
    folder.file("notes.txt", "no model");
    let output = run(&["vet", folder.0.to_str().unwrap(), "--as", "json"]);
    assert_eq!(code(&output), 1);
    let found: serde_json::Value = serde_json::from_str(&out(&output)).unwrap();
    assert_eq!(found.as_array().map(Vec::len), Some(2));
    let reports = folder.path("reports");
    assert_eq!(code(&run(&["derive", folder.0.to_str().unwrap(), "--as", "latex", "--out", &reports])), 1);
    let mut names: Vec<_> = std::fs::read_dir(&reports).unwrap().map(|e| e.unwrap().file_name()).collect();
    names.sort();
    assert_eq!(names, ["a.tex", "b.tex"]);
    assert_eq!(code(&run(&["derive", folder.0.to_str().unwrap(), "--as", "latex", "--check", &reports])), 1);
    folder.file("b.demand", PROVEN);
    assert_eq!(code(&run(&["derive", folder.0.to_str().unwrap(), "--as", "latex", "--check", &reports])), 6);
}

#[test]
fn several_models_are_reported_in_order_and_counted_however_many_run_at_a_time() {
    let folder = Folder::new("order");
    for at in 0..9 {
        folder.file(&format!("{at}.demand"), &format!("title \"Number {at}\"\n{}", [PROVEN, REFUTED][at % 2]));
    }
    folder.file("x.demand", UNREADABLE);
    let models = folder.0.to_str().unwrap();
    let (one, many) = (run(&["vet", models, "--jobs", "1"]), run(&["vet", models, "--jobs", "8"]));
    assert_eq!(out(&one), out(&many));
    assert_eq!(err(&one), err(&many));
    assert_eq!(code(&many), 4);
    let titles: Vec<String> = out(&many).lines().filter(|l| l.starts_with("Number")).map(str::to_string).collect();
    assert_eq!(titles, (0..9).map(|at| format!("Number {at}")).collect::<Vec<_>>());
    let summary = "10 models: 5 proven, 4 not proven (refuted, regional or conditional), 1 unreadable";
    assert_eq!(err(&many).lines().last(), Some(summary));
}

#[test]
fn a_watched_model_is_vetted_again_when_it_is_saved() {
    let folder = Folder::new("watch");
    let model = folder.file("m.demand", PROVEN);
    let mut child = Command::new(env!("CARGO_BIN_EXE_mainspring"))
        .args(["vet", &model, "--watch", "--only", "adding-up"])
        .stdout(Stdio::piped())
        .spawn()
        .unwrap();
    let mut lines = BufReader::new(child.stdout.take().unwrap()).lines();
    let mut verdict = || lines.find(|line| line.as_ref().unwrap().starts_with("adding-up")).unwrap().unwrap();
    assert!(verdict().contains("proven"));
    folder.file("m.demand", REFUTED);
    assert!(verdict().contains("refuted"));
    child.kill().unwrap();
    child.wait().unwrap();
    assert_eq!(code(&run(&["vet", "-", "--watch"])), 2);
}

#[test]
fn a_model_to_start_from_is_a_model() {
    let folder = Folder::new("new");
    for shape in
        ["quantities", "shares", "outlays", "logarithms", "inverse", "utility", "indirect-utility", "expenditure"]
    {
        for goods in ["2", "3", "tea,cake,jam"] {
            let new = run(&["new", "--goods", goods, "--shape", shape]);
            assert_eq!((code(&new), err(&new)), (0, String::new()), "{shape}");
            let vetted = run_with_input(&["vet", "-", "--only", "adding-up,symmetry,claims"], &out(&new));
            assert_eq!((code(&vetted), err(&vetted)), (0, String::new()), "{shape}:\n{}", out(&new));
        }
    }
    let path = folder.path("paper.demand");
    assert_eq!(code(&run(&["new", "--out", &path])), 0);
    let first = std::fs::read(&path).unwrap();
    assert_eq!(code(&run(&["new", "--shape", "shares", "--out", &path])), 5);
    assert_eq!(std::fs::read(&path).unwrap(), first);
    assert_eq!(code(&run(&["new", "--goods", "tea,tea"])), 2);
}

#[test]
fn shells_and_the_manual_know_every_command() {
    let commands = ["vet", "derive", "restrict", "new"];
    for arguments in [&["completions", "bash"][..], &["completions", "zsh"], &["completions", "fish"], &["manual"]] {
        let text = out(&run(arguments));
        assert!(commands.iter().all(|command| text.contains(command)), "{arguments:?}");
    }
    assert!(out(&run(&["manual", "vet"])).contains("watch"));
    assert_eq!(code(&run(&["manual", "veto"])), 2);
    let help = out(&run(&["--help"]));
    assert!(help.find("Examples:").unwrap() < help.find("Usage:").unwrap());
}

#[test]
fn the_same_input_gives_the_same_bytes() {
    let examples = concat!(env!("CARGO_MANIFEST_DIR"), "/examples/harbour-cafe.demand");
    for form in ["text", "latex", "json"] {
        let arguments = ["derive", examples, "--as", form];
        assert_eq!(run(&arguments).stdout, run(&arguments).stdout, "{form}");
    }
}

#[test]
fn timings_go_to_standard_error_and_leave_the_report_alone() {
    let folder = Folder::new("timings");
    let model = folder.file("m.demand", PROVEN);
    let (plain, timed) = (run(&["vet", &model]), run(&["vet", &model, "--timings"]));
    assert_eq!(plain.stdout, timed.stdout);
    for part in ["read", "homogeneity", "adding-up", "symmetry", "curvature", "recovery", "output"] {
        assert!(err(&timed).lines().any(|line| line.contains(&format!(": {part}: "))), "{part}: {}", err(&timed));
    }
}

#[test]
fn only_what_is_asked_for_is_reported() {
    let folder = Folder::new("only");
    let model = folder.file("m.demand", PROVEN);
    let output = run(&["vet", &model, "--only", "symmetry,homogeneity", "--as", "json"]);
    let found: serde_json::Value = serde_json::from_str(&out(&output)).unwrap();
    assert_eq!(found["conditions"]["symmetry"]["verdict"], "proven");
    assert_eq!(found["conditions"]["homogeneity"]["verdict"], "proven");
    assert!(found["conditions"]["adding_up"].is_null() && found["recovered"].is_null());
}

#[test]
fn running_out_of_time_is_undecided_and_keeps_what_was_decided() {
    let asked = ["vet", "-", "--only", "adding-up,curvature", "--time", "1", "--as", "json"];
    let output = run_with_input(&asked, QUADRATIC);
    let found: serde_json::Value = serde_json::from_str(&out(&output)).unwrap();
    assert_eq!(code(&output), 3, "{found:#}");
    assert_eq!(found["conditions"]["adding_up"]["verdict"], "proven");
    assert_eq!(found["conditions"]["curvature"]["verdict"], "undecided");
    assert_eq!(found["stopped"], serde_json::json!([{"part": "curvature", "limit": "time"}]));
}

/// A system with twelve goods: its curvature is beyond a second, its adding-up is not.
const QUADRATIC: &str = "\
goods 1..12
prices p[i]
income m
parameters a0, a[i], b[i], l[i], g[i,j]
assume sum over i of (a[i]) = 1, sum over i of (b[i]) = 0, sum over i of (l[i]) = 0
assume sum over j of (g[i,j]) = 0, g[i,j] = g[j,i]
let lnP = a0 + sum over k of (a[k] * ln(p[k])) + 1/2 * sum over k, h of (g[k,h] * ln(p[k]) * ln(p[h]))
let B = product over k of (p[k]^b[k])
share[i] = a[i] + sum over j of (g[i,j] * ln(p[j])) + b[i] * (ln(m) - lnP) + l[i] / B * (ln(m) - lnP)^2
";

/// Linear demands of an incomplete system.
const LINEAR: &str = "goods x, y\nprices p, q\nincome m\nothers deflated\nparameters a, b, g[i]\n\
                      demand x = a*q + g[x]*m\ndemand y = b*p + g[y]*m\n";

fn restricted(arguments: &[&str]) -> (i32, serde_json::Value) {
    let output = run_with_input(&[&["restrict", "-", "--as", "json"], arguments].concat(), LINEAR);
    (code(&output), serde_json::from_str(&out(&output)).unwrap())
}

fn equations(found: &serde_json::Value) -> Vec<String> {
    let branches = found["branches"].as_array().unwrap().iter();
    let mut all: Vec<String> = branches
        .map(|branch| {
            let sides = branch["side_conditions"].as_array().unwrap();
            let words = branch["equations"].as_array().unwrap().iter().chain(sides);
            words.map(|word| word.as_str().unwrap()).collect::<Vec<_>>().join(", ")
        })
        .collect();
    all.sort();
    all
}

#[test]
fn restrictions_as_data() {
    let (status, found) = restricted(&["--only", "symmetry"]);
    assert_eq!((status, &found["branches_complete"]), (1, &true.into()));
    assert_eq!(equations(&found), ["a = 0, b = 0", "b = a, g[x] = 0, g[y] = 0"]);
    assert_eq!(found["branches"][0]["conditions"]["symmetry"]["verdict"], "proven");
    assert!(found["failures"]["symmetry"]["point"].is_object());
}

#[test]
fn parameters_that_must_stay_free() {
    let (_, found) = restricted(&["--only", "symmetry", "--keep", "a"]);
    assert_eq!(equations(&found), ["b = a, g[x] = 0, g[y] = 0"]);
    let (_, found) = restricted(&["--only", "symmetry", "--keep", "g"]);
    assert_eq!(equations(&found), ["a = 0, b = 0"]);
    let (_, found) = restricted(&["--only", "symmetry", "--keep", "a,g[x]"]);
    assert_eq!((equations(&found).len(), &found["branches_complete"]), (0, &true.into()));
    let output = run_with_input(&["restrict", "-", "--keep", "h"], LINEAR);
    assert_eq!(code(&output), 2);
    assert!(err(&output).contains("`h`"));
}

/// Curvature is no equation: without being named it is told of each branch, and named it cuts the list down.
#[test]
fn curvature_among_the_conditions() {
    let (_, found) = restricted(&[]);
    assert_eq!(found["only"], serde_json::json!(["symmetry"]));
    let (_, found) = restricted(&["--only", "curvature"]);
    assert_eq!(found["branches_complete"], false);
    assert!(equations(&found).iter().all(|words| !words.is_empty()));
}

/// Long products of powers of prices, which the conditions name: the preferences of the branches are printed all the same.
#[test]
fn branches_of_logistic_shares() {
    let product = |i: &str| format!("a[{i}]*m^(g[{i}])*p[1]^(b[{i},1])*p[2]^(b[{i},2])*p[3]^(b[{i},3])");
    let text = format!(
        "goods 1..3\nprices p[i]\nincome m\nparameters a[i], b[i,j], g[i]\nassume a[i] > 0\n\
         share[i] = {}/sum over k of ({})\n",
        product("i"),
        product("k")
    );
    let output = run_with_input(&["restrict", "-", "--only", "symmetry", "--as", "json"], &text);
    let found: serde_json::Value = serde_json::from_str(&out(&output)).unwrap();
    assert_eq!((code(&output), &found["branches_complete"]), (1, &true.into()));
    assert_eq!(equations(&found).len(), 4);
}
