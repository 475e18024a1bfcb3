//! Values that the command line puts in for parameters: `s=1/2,g[1,2]=-0.25`.

use std::str::FromStr;

use num_bigint::BigInt;
use num_traits::{One, Zero};

use mainspring::algebra::number::Rational;

/// The most digits that a value may have.
const MOST_DIGITS: usize = 400;

/// Reads lists of `NAME=VALUE`; commas inside brackets belong to a name.
///
/// # Errors
/// A message for the first entry that cannot be read.
pub fn read(lists: &[String]) -> Result<Vec<(String, Rational)>, String> {
    let mut values: Vec<(String, Rational)> = Vec::new();
    for entry in lists.iter().flat_map(|list| entries(list)) {
        let fault = || format!("--with: `{entry}` is not NAME=VALUE with an exact number, like s=1/2 or g[1,2]=-0.25");
        let (name, value) = named(entry).ok_or_else(fault)?;
        let value = rational(value).ok_or_else(fault)?;
        if values.iter().any(|(known, _)| *known == name) {
            return Err(format!("--with: `{name}` is given a value twice"));
        }
        values.push((name, value));
    }
    Ok(values)
}

/// A straight line: each name with its value at the start and at the end.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Line(pub Vec<(String, Rational, Rational)>);

impl FromStr for Line {
    type Err = String;

    fn from_str(text: &str) -> Result<Line, String> {
        let mut line: Vec<(String, Rational, Rational)> = Vec::new();
        for entry in entries(text) {
            let fault = || format!("`{entry}` is not NAME=VALUE or NAME=FROM..TO with exact numbers, like p=1..5/4");
            let (name, value) = named(entry).ok_or_else(fault)?;
            let (from, to) = value.split_once("..").unwrap_or((value, value));
            let (from, to) = (rational(from.trim()).ok_or_else(fault)?, rational(to.trim()).ok_or_else(fault)?);
            if line.iter().any(|(known, ..)| *known == name) {
                return Err(format!("`{name}` is given a value twice"));
            }
            line.push((name, from, to));
        }
        Ok(Line(line))
    }
}

/// A name without its blanks, and what is behind the equality sign.
fn named(entry: &str) -> Option<(String, &str)> {
    let (name, value) = entry.split_once('=')?;
    let name: String = name.chars().filter(|c| !c.is_whitespace()).collect();
    (!name.is_empty()).then_some((name, value.trim()))
}

fn entries(list: &str) -> Vec<&str> {
    let mut depth = 0i32;
    let between = |c: char| {
        match c {
            '[' => depth += 1,
            ']' => depth -= 1,
            _ => {}
        }
        c == ',' && depth <= 0
    };
    list.split(between).collect()
}

/// An integer, a decimal or a ratio of two of them, exactly.
fn rational(text: &str) -> Option<Rational> {
    let (text, negative) = text.strip_prefix('-').map_or((text, false), |rest| (rest, true));
    let value = match text.split_once('/') {
        Some((above, below)) => {
            let below = decimal(below.trim())?;
            if below.is_zero() {
                return None;
            }
            decimal(above.trim())? / below
        }
        None => decimal(text)?,
    };
    Some(if negative { -value } else { value })
}

fn decimal(text: &str) -> Option<Rational> {
    let (whole, part) = text.split_once('.').unwrap_or((text, ""));
    let digits = format!("{whole}{part}");
    let plain = digits.chars().all(|c| c.is_ascii_digit());
    if whole.is_empty() || !plain || digits.len() > MOST_DIGITS || text.ends_with('.') {
        return None;
    }
    let scale = (0..part.len()).fold(BigInt::one(), |scale, _| scale * 10);
    Some(Rational::new(digits.parse().ok()?, scale))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn values_are_exact_and_names_may_have_indices() {
        let list = ["s=1/2,g[1,2]=-0.25".to_string(), " t = 3 ".to_string()];
        let ratio = |n: i64, d: i64| Rational::new(n.into(), d.into());
        let expected = [("s", ratio(1, 2)), ("g[1,2]", ratio(-1, 4)), ("t", ratio(3, 1))];
        let expected: Vec<_> = expected.into_iter().map(|(name, value)| (name.to_string(), value)).collect();
        assert_eq!(read(&list), Ok(expected));
        let line: Line = "p[1]=1..5/4, m = 100".parse().unwrap();
        assert_eq!(line.0[0], ("p[1]".to_string(), ratio(1, 1), ratio(5, 4)));
        assert_eq!(line.0[1], ("m".to_string(), ratio(100, 1), ratio(100, 1)));
        assert!("p=1..".parse::<Line>().is_err() && "p=1..2,p=3".parse::<Line>().is_err());
        for wrong in ["s", "s=", "=1", "s=x", "s=1/0", "s=1e3", "s=.5", "s=1,s=2", "s=1,,t=2"] {
            assert!(read(&[wrong.to_string()]).is_err(), "{wrong}");
        }
    }
}
