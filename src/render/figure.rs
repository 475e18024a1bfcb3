//! The region where demand is positive and the Slutsky matrix is negative semidefinite, as SVG for print: shades of grey
//! and hatching, no colour.

use std::fmt::Write;

use num_traits::ToPrimitive;

use crate::algebra::evaluation::Point;
use crate::algebra::monomial::Var;
use crate::conditions::slice::{Axis, Slice};
use crate::model::Model;

/// The drawing area: left, top, width, height; and the size of the whole.
const AREA: (f64, f64, f64, f64) = (80.0, 24.0, 400.0, 400.0);
const SIZE: (f64, f64) = (520.0, 600.0);

/// An exact point to be marked.
pub struct Mark<'p> {
    /// The point.
    pub point: &'p Point,
    /// Whether the matrix is negative semidefinite there.
    pub holds: bool,
}

/// The picture. Points are marked where they lie in the slice.
pub fn figure(model: &Model, slice: &Slice, marks: &[Mark<'_>]) -> String {
    let mut out = String::new();
    let (left, top, width, height) = AREA;
    let _ = writeln!(
        out,
        "<svg xmlns=\"http://www.w3.org/2000/svg\" width=\"{}\" height=\"{}\" viewBox=\"0 0 {} {}\" \
         font-family=\"serif\" font-size=\"13\">",
        SIZE.0, SIZE.1, SIZE.0, SIZE.1
    );
    out.push_str(
        "<defs><pattern id=\"hatch\" width=\"7\" height=\"7\" patternUnits=\"userSpaceOnUse\" \
         patternTransform=\"rotate(45)\"><rect width=\"7\" height=\"7\" fill=\"#fff\"/><line x1=\"0\" y1=\"0\" x2=\"0\" \
         y2=\"7\" stroke=\"#777\" stroke-width=\"1.2\"/></pattern></defs>\n<rect width=\"100%\" height=\"100%\" \
         fill=\"#fff\"/>\n",
    );
    out.push_str("<g shape-rendering=\"crispEdges\">\n");
    cells(&mut out, slice);
    out.push_str("</g>\n");
    contour(&mut out, slice, &|(fact, _)| fact, "stroke=\"#000\" stroke-width=\"1.2\" stroke-dasharray=\"5 3\"");
    let boundary = |(fact, rise): (f64, f64)| if fact > 0.0 { rise } else { f64::NAN };
    contour(&mut out, slice, &boundary, "stroke=\"#000\" stroke-width=\"2\"");
    let _ = writeln!(
        out,
        "<rect x=\"{left}\" y=\"{top}\" width=\"{width}\" height=\"{height}\" fill=\"none\" stroke=\"#000\"/>"
    );
    ticks(&mut out, model, slice);
    marks.iter().for_each(|mark| dot(&mut out, slice, mark));
    legend(&mut out, model, slice);
    out.push_str("</svg>\n");
    out
}

/// Where a node is drawn.
fn place(slice: &Slice, column: f64, row: f64) -> (f64, f64) {
    let (left, top, width, height) = AREA;
    let last = (slice.nodes - 1) as f64;
    (left + width * column / last, top + height * (1.0 - row / last))
}

/// Runs of cells of one kind: white outside of the domain, hatched where the matrix fails, grey where it holds.
fn cells(out: &mut String, slice: &Slice) {
    let n = slice.nodes;
    let kind = |row: usize, column: usize| {
        let corners = [(row, column), (row, column + 1), (row + 1, column), (row + 1, column + 1)];
        let mean = corners.iter().fold((0.0, 0.0), |sum, (r, c)| {
            let (fact, rise) = slice.values[r * n + c];
            (sum.0 + fact, sum.1 + rise)
        });
        match mean {
            (fact, rise) if fact > 0.0 && rise <= 0.0 => Some("#ccc"),
            (fact, rise) if fact > 0.0 && rise > 0.0 => Some("url(#hatch)"),
            _ => None,
        }
    };
    for row in 0..n - 1 {
        let mut from = 0;
        while from < n - 1 {
            let fill = kind(row, from);
            let to = (from..n - 1).take_while(|c| kind(row, *c) == fill).count() + from;
            if let Some(fill) = fill {
                let ((x, y), (right, bottom)) =
                    (place(slice, from as f64, (row + 1) as f64), place(slice, to as f64, row as f64));
                let (width, height) = (right - x + 0.2, bottom - y + 0.2);
                let _ = writeln!(
                    out,
                    "<rect x=\"{x:.2}\" y=\"{y:.2}\" width=\"{width:.2}\" height=\"{height:.2}\" fill=\"{fill}\"/>"
                );
            }
            from = to;
        }
    }
}

/// The curve on which a value is zero, cell by cell.
fn contour(out: &mut String, slice: &Slice, value: &dyn Fn((f64, f64)) -> f64, style: &str) {
    let n = slice.nodes;
    let mut path = String::new();
    for (row, column) in (0..n - 1).flat_map(|r| (0..n - 1).map(move |c| (r, c))) {
        let corners = [(row, column), (row, column + 1), (row + 1, column + 1), (row + 1, column)];
        let at = |k: usize| value(slice.values[corners[k % 4].0 * n + corners[k % 4].1]);
        let crossing = |k: usize| {
            let (a, b) = (at(k), at(k + 1));
            if !(a.is_finite() && b.is_finite() && (a > 0.0) != (b > 0.0)) {
                return None;
            }
            let part = a / (a - b);
            let ((r, c), (s, d)) = (corners[k], corners[(k + 1) % 4]);
            let between = |x: usize, y: usize| x as f64 + part * (y as f64 - x as f64);
            Some(place(slice, between(c, d), between(r, s)))
        };
        let crossings: Vec<(f64, f64)> = (0..4).filter_map(crossing).collect();
        for pair in crossings.chunks_exact(2) {
            let _ = write!(path, "M{:.2} {:.2}L{:.2} {:.2}", pair[0].0, pair[0].1, pair[1].0, pair[1].1);
        }
    }
    if !path.is_empty() {
        let _ = writeln!(out, "<path d=\"{path}\" fill=\"none\" {style}/>");
    }
}

/// Plain numbers along an axis: 1, 2 and 5 times powers of ten, or even steps.
fn plain_numbers(axis: &Axis) -> Vec<f64> {
    let (from, to) = axis.range;
    if axis.logarithmic {
        let powers = -300..300_i32;
        let all =
            powers.flat_map(|k| [1.0, 2.0, 5.0].map(|d| if k < 0 { d / 10f64.powi(-k) } else { d * 10f64.powi(k) }));
        return all.filter(|x| *x >= from && *x <= to).collect();
    }
    let rough = (to - from) / 5.0;
    let power = (-300..300_i32).map(|k| 10f64.powi(k)).take_while(|p| *p <= rough).last().unwrap_or(1.0);
    let step = [1.0, 2.0, 5.0, 10.0].map(|d| d * power).into_iter().find(|s| *s >= rough).unwrap_or(rough);
    let first = (from / step).ceil();
    (0..12).map(|k| (first + f64::from(k)) * step).filter(|x| *x <= to).collect()
}

fn number(x: f64) -> String {
    let text = format!("{x:.6}");
    text.trim_end_matches('0').trim_end_matches('.').to_string()
}

fn name(model: &Model, var: Var) -> String {
    model.field.name(var).unwrap_or_default().replace('&', "&amp;").replace('<', "&lt;")
}

fn ticks(out: &mut String, model: &Model, slice: &Slice) {
    let (left, top, width, height) = AREA;
    let bottom = top + height;
    for x in plain_numbers(&slice.axes[0]) {
        let at = left + width * slice.axes[0].part(x);
        let _ = writeln!(out, "<path d=\"M{at:.2} {bottom}v6\" stroke=\"#000\"/>");
        let _ =
            writeln!(out, "<text x=\"{at:.2}\" y=\"{}\" text-anchor=\"middle\">{}</text>", bottom + 20.0, number(x));
    }
    for y in plain_numbers(&slice.axes[1]) {
        let at = bottom - height * slice.axes[1].part(y);
        let _ = writeln!(out, "<path d=\"M{left} {at:.2}h-6\" stroke=\"#000\"/>");
        let _ =
            writeln!(out, "<text x=\"{}\" y=\"{:.2}\" text-anchor=\"end\">{}</text>", left - 9.0, at + 4.0, number(y));
    }
    let scale = |axis: &Axis| if axis.logarithmic { " (logarithmic scale)" } else { "" };
    let [across, up] = [0, 1].map(|k| format!("{}{}", name(model, slice.axes[k].var), scale(&slice.axes[k])));
    let middle = left + width / 2.0;
    let _ = writeln!(out, "<text x=\"{middle}\" y=\"{}\" text-anchor=\"middle\">{across}</text>", bottom + 42.0);
    let centre = top + height / 2.0;
    let _ = writeln!(out, "<text transform=\"translate(22 {centre}) rotate(-90)\" text-anchor=\"middle\">{up}</text>");
}

/// A filled dot where the matrix holds, a cross where it fails; nothing for a point outside of the slice.
fn dot(out: &mut String, slice: &Slice, mark: &Mark<'_>) {
    let moves = |v: &Var| slice.axes.iter().any(|axis| axis.var == *v);
    let inside = mark.point.iter().all(|(v, x)| moves(v) || slice.fixed.get(v).is_none_or(|y| x == y));
    let part = |axis: &Axis| mark.point.get(&axis.var).and_then(ToPrimitive::to_f64).map(|x| axis.part(x));
    let (Some(across), Some(up), true) = (part(&slice.axes[0]), part(&slice.axes[1]), inside) else { return };
    let last = (slice.nodes - 1) as f64;
    let (x, y) = place(slice, across * last, up * last);
    if !(0.0..=1.0).contains(&across) || !(0.0..=1.0).contains(&up) {
        return;
    }
    let _ = if mark.holds {
        writeln!(
            out,
            "<circle cx=\"{x:.2}\" cy=\"{y:.2}\" r=\"5\" fill=\"#000\" stroke=\"#fff\" stroke-width=\"1.5\"/>"
        )
    } else {
        let cross = format!("M{:.2} {:.2}l10 10m0 -10l-10 10", x - 5.0, y - 5.0);
        writeln!(
            out,
            "<path d=\"{cross}\" stroke=\"#fff\" stroke-width=\"5\"/><path d=\"{cross}\" stroke=\"#000\" stroke-width=\"2\"/>"
        )
    };
}

/// What the shades and lines mean, and where the variables stand that do not move.
fn legend(out: &mut String, model: &Model, slice: &Slice) {
    let (left, top, _, height) = AREA;
    let y = top + height + 62.0;
    let swatch = |x: f64, y: f64, fill: &str| {
        format!(
            "<rect x=\"{x}\" y=\"{y}\" width=\"22\" height=\"13\" fill=\"{fill}\" stroke=\"#000\" stroke-width=\"0.7\"/>"
        )
    };
    let entries = [("#ccc", "negative semidefinite"), ("url(#hatch)", "not"), ("#fff", "demand not positive")];
    for ((fill, words), x) in entries.iter().zip([left, left + 175.0, left + 245.0]) {
        let _ = writeln!(out, "{}<text x=\"{}\" y=\"{}\">{words}</text>", swatch(x, y, fill), x + 28.0, y + 11.0);
    }
    let text = y + 32.0;
    let _ = writeln!(
        out,
        "<text x=\"{left}\" y=\"{text}\">Solid: the boundary. Exact points: dot, holds; cross, fails.</text>"
    );
    let moves = |v: &Var| slice.axes.iter().any(|axis| axis.var == *v);
    let stated = slice.fixed.iter().filter(|(v, _)| !moves(v) && **v != model.utility);
    let fixed: Vec<String> = stated.map(|(v, q)| format!("{} = {q}", name(model, *v))).collect();
    for (line, words) in fixed.chunks(6).take(3).enumerate() {
        let lead = if line == 0 { "Fixed: " } else { "" };
        let y = text + 18.0 * (line + 1) as f64;
        let _ = writeln!(out, "<text x=\"{left}\" y=\"{y}\">{lead}{}</text>", words.join(", "));
    }
}
