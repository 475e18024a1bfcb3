//! Which declared name a letter with its scripts is.

use super::super::syntax::*;
use super::lexicon::{Known, Lexicon};
use super::names::{Key, Token, joined};

/// A name as it stands in a formula.
#[derive(Clone, Debug)]
pub struct Written<'a> {
    /// What stands on the line, in the forms that it may be declared in.
    pub bases: Vec<String>,
    /// The subscript.
    pub below: &'a [Token],
    /// The superscript, where there is one.
    pub above: &'a str,
}

/// One way to read it.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Meaning {
    /// The declared name.
    pub name: String,
    /// Its indices, with the tokens they are made of.
    pub indices: Vec<(Index, (usize, usize))>,
    /// Whether the superscript belongs to the name.
    pub takes_above: bool,
}

/// The ways to read a name under the declarations; `bound` are the indices of the sums around it.
pub fn meanings(lexicon: &Lexicon, written: &Written<'_>, bound: &[String]) -> Vec<Meaning> {
    for base in &written.bases {
        // a declared form comes before the letters of a name that has another form
        for fallback in [false, true] {
            let mut found = Vec::new();
            for known in &lexicon.names {
                let key = if fallback { known.plain.as_ref() } else { Some(&known.key) };
                let Some(key) = key.filter(|key| key.base == *base) else { continue };
                for meaning in readings(lexicon, known, key, written, bound) {
                    if !found.contains(&meaning) {
                        found.push(meaning);
                    }
                }
            }
            // a name that is declared as it stands comes before one under a letter that nothing binds
            let settled = |meaning: &Meaning| {
                meaning.indices.iter().all(|(index, _)| match index {
                    Index::Name(name) => bound.contains(name) || lexicon.goods.contains(name),
                    Index::Number(_) => true,
                })
            };
            if found.len() > 1 && found.iter().any(settled) {
                found.retain(settled);
            }
            if !found.is_empty() {
                return found;
            }
        }
    }
    Vec::new()
}

fn readings(lexicon: &Lexicon, known: &Known, key: &Key, written: &Written<'_>, bound: &[String]) -> Vec<Meaning> {
    if !key.above.is_empty() && key.above != written.above {
        return Vec::new();
    }
    let meaning = |indices| Meaning { name: known.name.clone(), indices, takes_above: !key.above.is_empty() };
    if known.arity == 0 {
        return if key.below == joined(written.below) { vec![meaning(Vec::new())] } else { Vec::new() };
    }
    let mut own = 0;
    let mut rest = key.below.as_str();
    while let Some(token) = written.below.get(own).filter(|_| !rest.is_empty()) {
        match rest.strip_prefix(token.text.as_str()) {
            Some(shorter) => rest = shorter,
            None if token.text == "," => {}
            None => return Vec::new(),
        }
        own += 1;
    }
    let mut indices = &written.below[own.min(written.below.len())..];
    if own > 0 && indices.first().is_some_and(|token| token.text == ",") {
        indices = &indices[1..];
    }
    if !rest.is_empty() {
        Vec::new()
    } else {
        splits(lexicon, indices, known.arity, bound).into_iter().map(meaning).collect()
    }
}

type Indices = Vec<(Index, (usize, usize))>;

/// The ways to take a subscript as so many indices.
pub fn splits(lexicon: &Lexicon, tokens: &[Token], count: usize, bound: &[String]) -> Vec<Indices> {
    if tokens.iter().any(|token| token.text == ",") {
        let groups: Vec<&[Token]> = tokens.split(|token| token.text == ",").collect();
        let indices = groups.iter().map(|group| index(lexicon, group, bound)).collect::<Option<Indices>>();
        return indices.filter(|indices| indices.len() == count).into_iter().collect();
    }
    if count == 1 {
        return index(lexicon, tokens, bound).map(|one| vec![one]).into_iter().collect();
    }
    let mut found = Vec::new();
    for at in 1..tokens.len().min(MOST_TOKENS) {
        let Some(first) = index(lexicon, &tokens[..at], bound) else { continue };
        for mut rest in splits(lexicon, &tokens[at..], count - 1, bound) {
            rest.insert(0, first.clone());
            found.push(rest);
        }
    }
    found
}

/// The most letters of an index.
const MOST_TOKENS: usize = 40;

/// The index that these tokens are together: one bound index, a good, or a letter.
fn index(lexicon: &Lexicon, tokens: &[Token], bound: &[String]) -> Option<(Index, (usize, usize))> {
    let place = (tokens.first()?.start, tokens.last()?.end);
    let text = joined(tokens);
    if bound.contains(&text) {
        return Some((Index::Name(text), place));
    }
    if let Some(good) = lexicon.good(&text) {
        return Some((lexicon.good_index(good), place));
    }
    if text.bytes().all(|byte| byte.is_ascii_digit()) {
        let number: u32 = text.parse().ok().filter(|number| (1..=lexicon.goods.len()).contains(&(*number as usize)))?;
        return Some((Index::Number(number), place));
    }
    (tokens.len() == 1 && text.chars().all(|letter| letter.is_alphabetic())).then_some((Index::Name(text), place))
}

impl Meaning {
    /// The reading as it is written in model files.
    pub fn text(&self) -> String {
        let indices: Vec<String> = self.indices.iter().map(|(index, _)| index.to_string()).collect();
        if indices.is_empty() { self.name.clone() } else { format!("{}[{}]", self.name, indices.join(",")) }
    }
}
