//! The words that begin a statement, and how each statement is written.

use super::grammar::Rule;

/// A word that begins a statement.
#[derive(Debug)]
pub struct Keyword {
    /// The word.
    pub word: &'static str,
    /// The grammar rule of its statements; none where this version does not read them.
    pub rule: Option<Rule>,
    /// How the statement is written.
    pub usage: &'static str,
    /// Whether the statement may declare names.
    pub declares: bool,
}

const fn keyword(word: &'static str, rule: Option<Rule>, usage: &'static str, declares: bool) -> Keyword {
    Keyword { word, rule, usage, declares }
}

/// All of them.
pub const KEYWORDS: [Keyword; 20] = [
    keyword("title", Some(Rule::title), "title \"FREE TEXT\"", false),
    keyword("goods", Some(Rule::goods), "goods NAME, NAME, … or goods 1..4", true),
    keyword("group", Some(Rule::group), "group NAME = GOOD, GOOD, …", true),
    keyword("prices", Some(Rule::prices), "prices NAME, NAME, … or prices p[i]", true),
    keyword("income", Some(Rule::income), "income NAME", true),
    keyword("quantities", Some(Rule::quantities), "quantities NAME, NAME, … or quantities x[i]", true),
    keyword("utility", Some(Rule::utility), "utility NAME", true),
    keyword("parameters", Some(Rule::parameters), "parameters NAME, a[i], g[i,j], s as \\sigma, …", true),
    keyword("assume", Some(Rule::assume), "assume FORMULA > FORMULA, FORMULA = FORMULA, …", false),
    keyword("let", Some(Rule::abbreviation), "let NAME = FORMULA or let NAME[i] = FORMULA", true),
    keyword("demand", Some(Rule::demand), "demand GOOD = FORMULA or demand[i] = FORMULA", false),
    keyword("share", Some(Rule::demand), "share GOOD = FORMULA or share[i] = FORMULA", false),
    keyword("outlay", Some(Rule::demand), "outlay GOOD = FORMULA or outlay[i] = FORMULA", false),
    keyword("log", Some(Rule::demand), "log demand GOOD = FORMULA or log demand[i] = FORMULA", false),
    keyword("rest", Some(Rule::rest), "rest GOOD or rest[2]", false),
    keyword("others", Some(Rule::others), "others NAME, … or others deflated", true),
    keyword(
        "claim",
        Some(Rule::claim),
        "claim FORMULA = FORMULA, claim FORMULA > FORMULA, claim hicksian GOOD = FORMULA or claim separable GROUP",
        false,
    ),
    keyword("inverse", Some(Rule::inverse), "inverse GOOD = FORMULA or inverse[i] = FORMULA", false),
    keyword(
        "given",
        Some(Rule::given),
        "given utility = FORMULA, given indirect utility = FORMULA or given expenditure = FORMULA",
        false,
    ),
    keyword("scenario", None, "scenario \"NAME\": PRICE from 1 to 2", false),
];

/// The keyword that a word is.
pub fn find(word: &str) -> Option<&'static Keyword> {
    KEYWORDS.iter().find(|keyword| keyword.word == word)
}

/// Whether a word begins a statement.
pub fn is_keyword(word: &str) -> bool {
    find(word).is_some()
}
