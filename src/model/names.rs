//! The names of a model: one space, in which each name means one thing.

use std::cell::Cell;

use rustc_hash::FxHashMap;

use crate::algebra::generator::Role;
use crate::language::{Declared, Diagnostic, Index, Source, Span, nearest};

/// A family of symbols, by its place in [`Names::families`]; a plain name is a family with one member.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub(super) struct FamilyId(pub usize);

/// An abbreviation, by its place in [`Names::abbreviations`].
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub(super) struct AbbreviationId(pub usize);

/// Symbols that share a name, one for each tuple of goods.
pub(super) struct Family {
    pub name: String,
    pub role: Role,
    /// How many indices stand behind the name.
    pub arity: usize,
    /// The good of a plainly named price or quantity.
    pub good: Option<usize>,
    pub latex: Option<String>,
    pub span: Span,
    pub used: Cell<bool>,
}

/// An abbreviation, or a family of them.
pub(super) struct Abbreviation {
    pub name: String,
    pub arity: usize,
    pub latex: Option<String>,
    pub span: Span,
    pub used: Cell<bool>,
}

/// A named set of goods.
pub(super) struct Group {
    pub name: String,
    pub members: Vec<usize>,
    pub span: Span,
    pub used: Cell<bool>,
}

/// What a name means.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Meaning {
    Family(FamilyId),
    Abbreviation(AbbreviationId),
    Group(usize),
}

/// All declared names.
#[derive(Default)]
pub(super) struct Names {
    pub goods: Vec<String>,
    /// Whether the goods are named rather than numbered.
    pub goods_named: bool,
    pub families: Vec<Family>,
    pub abbreviations: Vec<Abbreviation>,
    pub groups: Vec<Group>,
    good_places: FxHashMap<String, (usize, Span)>,
    meanings: FxHashMap<String, (Meaning, Span)>,
    members: usize,
}

/// The most symbols and abbreviations that a model may declare, family members counted.
const MOST_NAMES: usize = 200_000;

impl Names {
    /// How many members a family with so many indices has; `None` beyond the bound.
    pub fn family_size(&self, arity: usize) -> Option<usize> {
        (0..arity).try_fold(1usize, |size, _| size.checked_mul(self.goods.len()).filter(|s| *s <= MOST_NAMES))
    }

    /// Counts the members of a new family against the bound on names.
    pub fn make_room(&mut self, arity: usize, span: Span, mistakes: &mut Vec<Diagnostic>) {
        let size = self.family_size(arity).filter(|size| self.members + size <= MOST_NAMES);
        match size {
            Some(size) => self.members += size,
            None => {
                let message = format!("with {} goods these are too many names", self.goods.len());
                let remedy = format!("a model may have at most {MOST_NAMES} names, members of families counted");
                mistakes.push(Diagnostic::error(span, message).remedy(remedy));
            }
        }
    }

    /// Declares a good; its place is its position.
    pub fn add_good(&mut self, name: &str, span: Span, source: &Source, mistakes: &mut Vec<Diagnostic>) {
        if let Some((_, first)) = self.good_places.get(name) {
            mistakes.push(twice(name, span, *first, source));
            return;
        }
        self.good_places.insert(name.to_string(), (self.goods.len(), span));
        self.goods.push(name.to_string());
    }

    /// Gives a name its meaning, unless it has one.
    pub fn add(
        &mut self,
        name: &str,
        meaning: Meaning,
        span: Span,
        source: &Source,
        mistakes: &mut Vec<Diagnostic>,
    ) -> bool {
        if let Some((_, first)) = self.meanings.get(name) {
            mistakes.push(twice(name, span, *first, source));
            return false;
        }
        if let Some((good, first)) = self.good_places.get(name).copied()
            && self.goods_named
            && !self.is_quantity_of(meaning, good)
        {
            mistakes.push(twice(name, span, first, source).remedy("only its own quantity may share a good's name"));
            return false;
        }
        self.meanings.insert(name.to_string(), (meaning, span));
        true
    }

    fn is_quantity_of(&self, meaning: Meaning, good: usize) -> bool {
        match meaning {
            Meaning::Family(FamilyId(id)) => {
                self.families.get(id).is_some_and(|f| f.role == Role::Quantity && f.good == Some(good))
            }
            _ => false,
        }
    }

    /// Declares a family of symbols.
    pub fn add_family(
        &mut self,
        declared: &Declared,
        role: Role,
        good: Option<usize>,
        source: &Source,
        mistakes: &mut Vec<Diagnostic>,
    ) -> FamilyId {
        let id = FamilyId(self.families.len());
        let arity = declared.indices.len();
        self.families.push(Family {
            name: declared.name.text.clone(),
            role,
            arity,
            good,
            latex: declared.latex.clone(),
            span: declared.span,
            used: Cell::new(false),
        });
        self.add(&declared.name.text, Meaning::Family(id), declared.name.span, source, mistakes);
        self.check_placeholders(declared, mistakes);
        self.make_room(arity, declared.span, mistakes);
        id
    }

    /// Declares an abbreviation.
    pub fn add_abbreviation(&mut self, declared: &Declared, source: &Source, mistakes: &mut Vec<Diagnostic>) {
        let id = AbbreviationId(self.abbreviations.len());
        let arity = declared.indices.len();
        self.abbreviations.push(Abbreviation {
            name: declared.name.text.clone(),
            arity,
            latex: declared.latex.clone(),
            span: declared.name.span,
            used: Cell::new(false),
        });
        self.add(&declared.name.text, Meaning::Abbreviation(id), declared.name.span, source, mistakes);
        self.check_placeholders(declared, mistakes);
        self.make_room(arity, declared.span, mistakes);
    }

    /// The index names of a declaration stand for every good: they are new names, and different ones.
    fn check_placeholders(&self, declared: &Declared, mistakes: &mut Vec<Diagnostic>) {
        if !declared.indices.is_empty() && self.goods.is_empty() {
            let message = format!("`{}` is indexed by goods, and there are none", declared.name.text);
            mistakes.push(Diagnostic::error(declared.span, message).remedy("declare them before: `goods 1..4`"));
        }
        for (position, index) in declared.indices.iter().enumerate() {
            if self.good(&index.text).is_some() {
                let message = format!("`{}` is a good; an index in a declaration stands for every good", index.text);
                mistakes.push(Diagnostic::error(index.span, message).remedy("write `i`"));
            } else if declared.indices[..position].iter().any(|earlier| earlier.text == index.text) {
                let message = format!("the index `{}` stands here twice", index.text);
                mistakes.push(Diagnostic::error(index.span, message).remedy("give each index a name of its own"));
            }
        }
    }

    /// The place of a good with this name (numbered goods have their numbers as names).
    pub fn good(&self, name: &str) -> Option<usize> {
        self.good_places.get(name).map(|(place, _)| *place)
    }

    /// The good that a written index stands for, if it is one by itself.
    pub fn good_of(&self, index: &Index) -> Option<usize> {
        match index {
            Index::Number(number) => (*number as usize).checked_sub(1).filter(|place| *place < self.goods.len()),
            Index::Name(name) => self.good(name),
        }
    }

    /// What the name means.
    pub fn meaning(&self, name: &str) -> Option<Meaning> {
        self.meanings.get(name).map(|(meaning, _)| *meaning)
    }

    /// The group of this name.
    pub fn group(&self, name: &str) -> Option<&Group> {
        match self.meaning(name) {
            Some(Meaning::Group(place)) => self.groups.get(place),
            _ => None,
        }
    }

    /// The declared name nearest to one that is not known, as it would be written.
    pub fn nearest_name(&self, name: &str) -> Option<String> {
        if let Some(member) = self.as_member(name) {
            return Some(member);
        }
        let mut known: Vec<&str> = self
            .meanings
            .iter()
            .filter(|(_, (meaning, _))| !matches!(meaning, Meaning::Group(_)))
            .map(|(name, _)| name.as_str())
            .collect();
        known.sort_unstable();
        nearest(name, known).map(|near| self.written(near))
    }

    /// `p_1` where the family `p[i]` is declared.
    fn as_member(&self, name: &str) -> Option<String> {
        let (base, index) = split_off_index(name)?;
        let Some(Meaning::Family(FamilyId(id))) = self.meaning(base) else { return None };
        let fits = self.families.get(id).is_some_and(|f| f.arity == 1) && self.good(index).is_some();
        fits.then(|| format!("{base}[{index}]"))
    }

    fn written(&self, name: &str) -> String {
        let arity = match self.meaning(name) {
            Some(Meaning::Family(FamilyId(id))) => self.families[id].arity,
            Some(Meaning::Abbreviation(AbbreviationId(id))) => self.abbreviations[id].arity,
            _ => 0,
        };
        format!("{name}{}", brackets(arity))
    }

    /// The name of one member of a family: `g[1,2]`, `a[bread]`.
    pub fn member_name(&self, name: &str, indices: &[usize]) -> String {
        if indices.is_empty() {
            return name.to_string();
        }
        let goods: Vec<&str> = indices.iter().map(|place| self.goods[*place].as_str()).collect();
        format!("{name}[{}]", goods.join(","))
    }

    /// Plain names that would print like a member of a family: `p_1` beside `p[i]`.
    pub fn check_lookalikes(&self, mistakes: &mut Vec<Diagnostic>) {
        let mut plain: Vec<(&String, Span)> = self.meanings.iter().map(|(name, (_, span))| (name, *span)).collect();
        plain.sort_by_key(|(_, span)| *span);
        for (name, span) in plain {
            if let Some(member) = self.lookalike(name) {
                let message = format!("`{name}` and `{member}` would look the same in print");
                mistakes
                    .push(Diagnostic::error(span, message).remedy(format!("declare one of them, or rename `{name}`")));
            }
        }
    }

    fn lookalike(&self, name: &str) -> Option<String> {
        let places = name.char_indices().skip(1).map(|(at, _)| at);
        places.into_iter().find_map(|at| {
            let base = &name[..at];
            let arity = match self.meaning(base)? {
                Meaning::Family(FamilyId(id)) => self.families.get(id)?.arity,
                Meaning::Abbreviation(AbbreviationId(id)) => self.abbreviations.get(id)?.arity,
                Meaning::Group(_) => return None,
            };
            let tail = name[at..].trim_start_matches('_');
            let separated = name[at..].starts_with('_') || tail.starts_with(|c: char| c.is_ascii_digit());
            let goods = if separated && arity > 0 { self.split_goods(tail, arity)? } else { return None };
            Some(self.member_name(base, &goods))
        })
    }

    /// `12` as goods 1 and 2, `bread_fish` as bread and fish.
    fn split_goods(&self, tail: &str, count: usize) -> Option<Vec<usize>> {
        if count == 1 {
            return self.good(tail).map(|good| vec![good]);
        }
        (1..tail.len()).filter(|at| tail.is_char_boundary(*at)).find_map(|at| {
            let first = self.good(tail[..at].trim_end_matches('_'))?;
            let mut rest = self.split_goods(tail[at..].trim_start_matches('_'), count - 1)?;
            rest.insert(0, first);
            Some(rest)
        })
    }

    /// Whether a formula mentions a quantity.
    pub fn quantities_are_used(&self) -> bool {
        self.families.iter().any(|family| family.role == Role::Quantity && family.used.get())
    }

    /// The declared names that no formula mentions, with the statement word and the place; prices, income and
    /// quantities have their use by being declared.
    pub fn unused(&self) -> Vec<(String, Span)> {
        let families = self.families.iter().filter(|f| f.role == Role::Parameter && !f.used.get());
        let mut all: Vec<(String, Span)> = families.map(|f| (f.name.clone(), f.span)).collect();
        all.extend(self.abbreviations.iter().filter(|a| !a.used.get()).map(|a| (a.name.clone(), a.span)));
        all.extend(self.groups.iter().filter(|g| !g.used.get()).map(|g| (g.name.clone(), g.span)));
        all.sort_by_key(|(_, span)| *span);
        all
    }
}

/// `[i]`, `[i,j]` for so many indices.
pub(super) fn brackets(arity: usize) -> String {
    let letters = ["i", "j", "k", "l"];
    let shown: Vec<String> =
        (0..arity).map(|n| letters.get(n).map_or_else(|| format!("i{n}"), |letter| letter.to_string())).collect();
    if shown.is_empty() { String::new() } else { format!("[{}]", shown.join(",")) }
}

fn split_off_index(name: &str) -> Option<(&str, &str)> {
    if let Some((base, index)) = name.rsplit_once('_') {
        return (!base.is_empty()).then_some((base, index));
    }
    let at = name.find(|c: char| c.is_ascii_digit()).filter(|at| *at > 0)?;
    Some(name.split_at(at))
}

fn twice(name: &str, span: Span, first: Span, source: &Source) -> Diagnostic {
    let (line, _) = source.place(first.start);
    Diagnostic::error(span, format!("the name `{name}` is already taken in line {line}"))
        .remedy("give one of the two another name")
}
