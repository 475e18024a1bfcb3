//! Lines of text: words wrapped to a width, and formulas broken at their operators.

/// Stands for a blank that must not become a line break.
pub const FIRM_BLANK: char = '\u{a0}';

/// Wraps `text` to `width` characters; lines after the first begin with `indent` blanks, and the first line has
/// `taken` characters on it already. Firm blanks are printed as blanks.
pub fn wrap(text: &str, width: usize, indent: usize, taken: usize) -> String {
    let mut out = String::new();
    let mut column = taken;
    let mut fresh = true;
    for word in text.split(' ').filter(|word| !word.is_empty()) {
        let length = word.chars().count();
        if !fresh && column + 1 + length > width {
            out.push('\n');
            out.extend(std::iter::repeat_n(' ', indent));
            column = indent;
        } else if !fresh {
            out.push(' ');
            column += 1;
        }
        out.push_str(word);
        column += length;
        fresh = false;
    }
    out.replace(FIRM_BLANK, " ")
}

/// Brackets with so few characters stay whole where they can.
const SHORT_BRACKET: usize = 16;

/// A place where a printed formula may be broken: before an operator.
#[derive(Clone, Copy)]
struct Opportunity {
    /// Where the next line begins, as an index into the characters.
    position: usize,
    /// How many brackets are open there.
    depth: usize,
    /// Whether the operator is + or -.
    additive: bool,
    /// Whether one of the open brackets is that of an exponent, or holds so little that it should stay whole.
    tight: bool,
}

impl Opportunity {
    /// Outer operators are better places than inner ones, + and - better than * and /, and tight places the worst.
    fn rank(self) -> usize {
        2 * self.depth + 2 * usize::from(!self.additive) + 20 * usize::from(self.tight)
    }
}

/// Breaks a printed formula into lines that fit between column `start` and column `width`; each line comes with the
/// column at which it begins. Where that would tear a tight place apart, the lines after the first begin at column
/// `hang` instead. What has no operator to break at stays as long as it is.
pub fn break_formula(formula: &str, start: usize, hang: usize, width: usize) -> Vec<(usize, String)> {
    let characters: Vec<char> = formula.chars().collect();
    let opportunities = find_opportunities(&characters);
    let (lines, torn) = fill(&characters, &opportunities, (start, start), width);
    if torn == 0 || hang >= start {
        return lines;
    }
    let (hanging, hanging_torn) = fill(&characters, &opportunities, (start, hang), width);
    if hanging_torn < torn { hanging } else { lines }
}

/// Fills lines one after the other, and counts those that are torn in a tight place or too long.
fn fill(
    characters: &[char],
    opportunities: &[Opportunity],
    (start, hang): (usize, usize),
    width: usize,
) -> (Vec<(usize, String)>, usize) {
    let mut lines = Vec::new();
    let (mut from, mut indent, mut torn) = (0, start, 0);
    loop {
        let room = width.saturating_sub(indent).max(20);
        let next = match characters.len() - from > room {
            true => best_break(opportunities, from, room),
            false => None,
        };
        let end = next.map_or(characters.len(), |opportunity| opportunity.position);
        let line: String = characters[from..end].iter().collect();
        torn += usize::from(end - from > room || next.is_some_and(|opportunity| opportunity.tight));
        lines.push((indent, line.trim().to_string()));
        let Some(opportunity) = next else { return (lines, torn) };
        from = opportunity.position;
        indent = hang + 2 * opportunity.depth.min(4);
    }
}

fn find_opportunities(characters: &[char]) -> Vec<Opportunity> {
    let mut found = Vec::new();
    let mut open: Vec<bool> = Vec::new();
    for (position, &character) in characters.iter().enumerate() {
        let before = position.checked_sub(1).map_or(' ', |previous| characters[previous]);
        let (depth, tight) = (open.len(), open.contains(&true));
        match character {
            '(' | '[' => open.push(before == '^' || is_short(&characters[position..])),
            ')' | ']' => drop(open.pop()),
            '+' | '-' if position > 0 && before == ' ' => {
                found.push(Opportunity { position, depth, additive: true, tight });
            }
            '*' | '/' => found.push(Opportunity { position, depth, additive: false, tight }),
            _ => {}
        }
    }
    found
}

/// Whether a bracket closes again soon.
fn is_short(from_bracket: &[char]) -> bool {
    from_bracket.iter().skip(1).take(SHORT_BRACKET).find(|each| "()".contains(**each)) == Some(&')')
}

/// The outermost opportunity that leaves the line at least a third full, the last of several; failing that, the last
/// one that fits, or the first one beyond.
fn best_break(opportunities: &[Opportunity], from: usize, room: usize) -> Option<Opportunity> {
    let after = || opportunities.iter().copied().filter(move |each| each.position > from);
    let fitting = || after().filter(move |each| each.position - from <= room);
    let well_filled = fitting().filter(|each| each.position - from >= room / 3);
    let mut best: Option<Opportunity> = None;
    for each in well_filled {
        if best.is_none_or(|current| each.rank() <= current.rank()) {
            best = Some(each);
        }
    }
    best.or_else(|| fitting().next_back()).or_else(|| after().next())
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn words_wrap_and_firm_blanks_hold() {
        assert_eq!(wrap("one two three", 8, 2, 0), "one two\n  three");
        assert_eq!(wrap("one a\u{a0}+\u{a0}b", 8, 0, 0), "one\na + b");
    }

    #[test]
    fn formulas_break_before_the_outermost_sign() {
        let lines = break_formula("a*(b + c)*d + e*(f - g)*h - k", 4, 4, 24);
        assert_eq!(lines, vec![(4, "a*(b + c)*d".to_string()), (4, "+ e*(f - g)*h - k".to_string())]);
        let lines = break_formula("abcdefghijk*(mnopqrst + uvwxyz)", 0, 0, 20);
        assert_eq!(lines, vec![(0, "abcdefghijk".to_string()), (0, "*(mnopqrst + uvwxyz)".to_string())]);
    }
}
