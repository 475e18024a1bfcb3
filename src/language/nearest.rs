//! The nearest known word to one that is not known.

/// The known word that a writer may have meant: the first one at the least distance, where that is small against the
/// length of the word; none otherwise. Costs O(length²) for each known word.
pub fn nearest<'a>(word: &str, known: impl IntoIterator<Item = &'a str>) -> Option<&'a str> {
    let wanted: Vec<char> = word.chars().collect();
    let mut best: Option<(usize, &'a str)> = None;
    for candidate in known {
        let letters: Vec<char> = candidate.chars().collect();
        let allowed = tolerance(wanted.len().max(letters.len()));
        if wanted.len().abs_diff(letters.len()) * STEP > allowed {
            continue;
        }
        let distance = distance(&wanted, &letters);
        if distance <= allowed && best.is_none_or(|(least, _)| distance < least) {
            best = Some((distance, candidate));
        }
    }
    best.map(|(_, candidate)| candidate)
}

/// The cost of a letter too many, too few, or another one.
const STEP: usize = 4;
/// The cost of a capital for a small letter.
const CASE: usize = 1;

/// How far off a word of this length may be: a third of its letters, and one letter from two on.
fn tolerance(length: usize) -> usize {
    match length {
        0 => 0,
        1 => CASE,
        2..=5 => STEP + CASE,
        _ => STEP * (length / 3) + CASE,
    }
}

/// The edit distance with swaps of neighbours, an underscore more or less and a change of case being cheap.
fn distance(a: &[char], b: &[char]) -> usize {
    let mut before_last: Vec<usize> = Vec::new();
    let mut last: Vec<usize> = std::iter::once(0)
        .chain(b.iter().scan(0, |sum, letter| {
            *sum += gap(*letter);
            Some(*sum)
        }))
        .collect();
    for i in 0..a.len() {
        let mut row = vec![last[0] + gap(a[i])];
        for j in 0..b.len() {
            let mut cost = last[j] + replacement(a[i], b[j]);
            cost = cost.min(last[j + 1] + gap(a[i])).min(row[j] + gap(b[j]));
            if i > 0 && j > 0 && a[i] == b[j - 1] && a[i - 1] == b[j] {
                cost = cost.min(before_last[j - 1] + STEP);
            }
            row.push(cost);
        }
        before_last = std::mem::replace(&mut last, row);
    }
    last[b.len()]
}

fn gap(letter: char) -> usize {
    if letter == '_' { CASE } else { STEP }
}

fn replacement(a: char, b: char) -> usize {
    if a == b {
        0
    } else if a.to_lowercase().eq(b.to_lowercase()) {
        CASE
    } else {
        STEP
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn finds_what_was_meant() {
        let known = ["bread", "fish", "p_bread", "p_fish", "alpha", "m"];
        for (word, meant) in
            [("braed", "bread"), ("fsh", "fish"), ("pbread", "p_bread"), ("Alpha", "alpha"), ("M", "m")]
        {
            assert_eq!(nearest(word, known), Some(meant), "{word}");
        }
        for word in ["x", "cloth", "q_wine", ""] {
            assert_eq!(nearest(word, known), None, "{word}");
        }
    }
}
