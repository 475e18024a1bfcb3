//! The picture of a region: what it shows, that its marks are exact, and that it is the same each time.

use std::path::PathBuf;
use std::process::Command;

const SYSTEM: &str = "
goods x, y
prices p, q
income m
demand x = 1 + (m - p - 2*q)/(2*p)
demand y = 2 + (m - p - 2*q)/(2*q)
";

fn drawn(name: &str, arguments: &[&str]) -> (Option<i32>, String, String) {
    let folder = std::env::temp_dir().join(format!("mainspring-figure-{}-{name}", std::process::id()));
    std::fs::create_dir_all(&folder).unwrap();
    let (model, picture): (PathBuf, PathBuf) = (folder.join("model.demand"), folder.join("region.svg"));
    std::fs::write(&model, SYSTEM).unwrap();
    let mut command = Command::new(env!("CARGO_BIN_EXE_mainspring"));
    command.args(["vet", "--only", "curvature", "--figure"]).arg(&picture).args(arguments).arg(&model);
    let output = command.output().unwrap();
    let svg = std::fs::read_to_string(&picture).unwrap_or_default();
    let _ = std::fs::remove_dir_all(&folder);
    (output.status.code(), svg, String::from_utf8_lossy(&output.stderr).into_owned())
}

#[test]
fn the_region_is_drawn_with_its_boundary_and_a_point_on_each_side() {
    let (code, svg, _) = drawn("prices", &[]);
    assert_eq!(code, Some(1), "the verdict is regional");
    for part in
        ["<circle", "fill=\"#ccc\"", "url(#hatch)", ">p (logarithmic scale)<", ">q (logarithmic scale)<", "Fixed: m = "]
    {
        assert!(svg.contains(part), "{part} is missing");
    }
    assert_eq!(svg.matches("<circle").count(), 1);
    assert!(svg.contains("l10 10m0 -10l-10 10"), "a cross where it fails");
    assert!(!svg.contains("NaN") && svg.trim_end().ends_with("</svg>"));
    assert_eq!(svg, drawn("again", &[]).1, "the same bytes each time");
}

#[test]
fn the_axes_are_those_that_are_named() {
    let (_, svg, _) = drawn("income", &["--axes", "m,q"]);
    assert!(svg.contains(">m (logarithmic scale)<") && svg.contains("Fixed: p = "));
    let (code, svg, message) = drawn("unknown", &["--axes", "m,z"]);
    assert_eq!((code, svg.as_str()), (Some(2), ""));
    assert!(message.contains("`z`"), "{message}");
}
