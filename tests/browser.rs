//! Pages in a browser without a screen: the mathematics is laid out, nothing sticks out on a telephone or on a desk, every
//! step folds, and what a screen reader needs is there.
//!
//! Needs Chromium. Where it is missing the test says so; with `MAINSPRING_BROWSER` set it has to be there.

use std::path::{Path, PathBuf};
use std::process::Command;

fn browser() -> Option<&'static str> {
    let runs = |name: &&str| Command::new(name).arg("--version").output().is_ok_and(|out| out.status.success());
    ["chromium", "chromium-browser", "google-chrome"].into_iter().find(|name| runs(name))
}

/// Measures a page inside a frame of a given width, and leaves what is wrong in the body of the outer page.
const MEASURE: &str = r#"
function scrolled(e, d) { for (; e && e !== d.body; e = e.parentElement) {
  const o = d.defaultView.getComputedStyle(e).overflowX; if (o === 'auto' || o === 'scroll') return true; } return false; }
function measure(frame, width) {
  const d = frame.contentDocument, bad = [], say = (what, e) => bad.push(width + ': ' + what + ' ' + (e ? e.outerHTML.slice(0, 90) : ''));
  if (d.documentElement.scrollWidth > width) say('the page is ' + d.documentElement.scrollWidth + ' wide');
  for (const e of d.querySelectorAll('main *')) {
    const r = e.getBoundingClientRect();
    if (r.right > width + 1 && !scrolled(e.parentElement, d) && !scrolled(e, d)) say('sticks out to ' + r.right, e);
  }
  let maths = 0;
  for (const m of d.querySelectorAll('math')) {
    const r = m.getBoundingClientRect(); maths++;
    if (r.width < 4 || r.height < 6) say('a formula has no size', m);
    if (!m.getAttribute('alttext')) say('a formula has no words', m);
  }
  let fractions = 0;
  for (const f of d.querySelectorAll('mfrac')) {
    const [a, b] = [f.children[0].getBoundingClientRect(), f.children[1].getBoundingClientRect()]; fractions++;
    if (a.bottom > b.top + 2) say('a fraction is not laid out', f);
  }
  for (const s of d.querySelectorAll('msup')) {
    const [a, b] = [s.children[0].getBoundingClientRect(), s.children[1].getBoundingClientRect()];
    if (b.top > a.top + 1 || b.left < a.left) say('an exponent is not raised', s);
  }
  for (const f of d.querySelectorAll('details')) {
    const before = f.getBoundingClientRect().height; f.open = false;
    const after = f.getBoundingClientRect().height; f.open = true;
    if (!(after < before)) say('a step does not fold', f);
    if (!f.querySelector('summary')) say('a step has no summary', f);
  }
  for (const e of d.querySelectorAll('.verdicts th, .verdicts td[class]')) {
    const words = d.createRange(); words.selectNodeContents(e);
    if (new Set([...words.getClientRects()].map(r => r.top)).size > 1) say('a verdict is broken', e);
  }
  const levels = [...d.querySelectorAll('h1,h2,h3,h4')].map(h => +h.tagName[1]);
  levels.forEach((l, i) => { if (l - (i ? levels[i - 1] : 0) > 1) say('headings skip from ' + levels[i - 1] + ' to ' + l); });
  for (const s of d.querySelectorAll('[aria-labelledby]')) if (!d.getElementById(s.getAttribute('aria-labelledby'))) say('a label is missing', s);
  const ids = [...d.querySelectorAll('[id]')].map(e => e.id);
  if (new Set(ids).size !== ids.length) say('two elements have one id');
  if (!d.documentElement.lang || !d.title) say('the page has no language or no title');
  if (d.querySelector('script')) say('there is a script');
  return {bad, maths, fractions, paper: d.defaultView.getComputedStyle(d.body).backgroundColor};
}
"#;

fn attribute(text: &str) -> String {
    text.replace('&', "&amp;").replace('"', "&quot;")
}

/// What the browser finds: the faults, line by line, how many formulas there are, and the colour of the paper.
fn look(browser: &str, folder: &Path, name: &str, page: &str, dark: bool) -> (Vec<String>, usize, String) {
    let frames: String = [400, 1200]
        .map(|width| {
            format!(
                "<iframe width=\"{width}\" height=\"900\" style=\"border:0\" srcdoc=\"{}\"></iframe>",
                attribute(page)
            )
        })
        .concat();
    let outer = format!(
        "<!DOCTYPE html><meta charset=\"utf-8\"><body>{frames}<pre id=\"found\"></pre><script>{MEASURE}
         addEventListener('load', () => {{
           const found = [...document.querySelectorAll('iframe')].map(f => measure(f, +f.width));
           const lines = found.flatMap(f => f.bad).map(l => 'BAD ' + l.replace(/\\s+/g, ' '));
           lines.push('MATHS ' + found[0].maths, 'PAPER ' + found[0].paper);
           document.querySelectorAll('iframe').forEach(f => f.remove());
           document.getElementById('found').textContent = lines.join('\\n');
         }});</script></body>"
    );
    let file = folder.join(format!("{name}.html"));
    std::fs::write(&file, outer).unwrap();
    let scheme = format!("--blink-settings=preferredColorScheme={}", if dark { 0 } else { 1 });
    let profile = format!("--user-data-dir={}", folder.join("profile").display());
    let out = Command::new(browser)
        .args([
            "--headless",
            "--no-sandbox",
            "--disable-gpu",
            "--disable-dev-shm-usage",
            "--dump-dom",
            &scheme,
            &profile,
        ])
        .arg("--virtual-time-budget=20000")
        .arg(format!("file://{}", file.display()))
        .output()
        .unwrap();
    let dom = String::from_utf8_lossy(&out.stdout).into_owned();
    let found = dom.split("<pre id=\"found\">").nth(1).and_then(|rest| rest.split("</pre>").next()).unwrap_or("");
    let line = |mark: &str| found.lines().find_map(|line| line.strip_prefix(mark)).unwrap_or("").trim().to_string();
    let bad = found.lines().filter(|line| line.starts_with("BAD ")).map(str::to_string).collect();
    (bad, line("MATHS ").parse().unwrap_or(0), line("PAPER "))
}

fn derived(model: &str) -> String {
    let model = Path::new(env!("CARGO_MANIFEST_DIR")).join(format!("examples/{model}.demand"));
    let mut command = Command::new(env!("CARGO_BIN_EXE_mainspring"));
    let out = command.args(["derive", "--as", "html"]).arg(model).output().unwrap();
    String::from_utf8(out.stdout).unwrap()
}

fn folder() -> PathBuf {
    let folder = std::env::temp_dir().join(format!("mainspring-pages-{}", std::process::id()));
    std::fs::create_dir_all(&folder).unwrap();
    folder
}

#[test]
fn pages_are_laid_out_and_nothing_sticks_out() {
    let Some(browser) = browser() else {
        assert!(std::env::var_os("MAINSPRING_BROWSER").is_none(), "a browser was to be there");
        println!("not checked: that pages are laid out (there is no Chromium)");
        return;
    };
    let folder = folder();
    for model in ["three-staples", "quay-market", "canal-town", "harbour-cafe", "lemmas", "lopsided-shares"] {
        let page = derived(model);
        let (bad, formulas, light) = look(browser, &folder, model, &page, false);
        assert_eq!(bad, Vec::<String>::new(), "{model}");
        assert!(formulas >= 10, "{model} has {formulas} formulas");
        if model == "three-staples" {
            let (bad, _, dark) = look(browser, &folder, model, &page, true);
            assert_eq!(bad, Vec::<String>::new(), "{model} in the dark");
            assert!(!light.is_empty() && light != dark, "light {light}, dark {dark}");
        }
    }
    let _ = std::fs::remove_dir_all(&folder);
}
