//! What the statements of a file declare: goods, groups, prices, income, quantities, utility, parameters.

use std::cell::Cell;

use crate::algebra::generator::Role;
use crate::language::{Declared, Diagnostic, Goods, Index, Name, Others, Preferences, Source, Span, nearest};

use super::names::{FamilyId, Group, Meaning, Names};
use super::outline::{Outline, Placed};

/// One name for each good: a family `p[i]`, or plain names in the order of the goods.
#[derive(Clone, Debug, Default)]
pub(super) enum GoodNames {
    #[default]
    None,
    Indexed(FamilyId),
    Plain(Vec<FamilyId>),
}

/// The declared names and their parts.
#[derive(Default)]
pub(super) struct Declarations {
    pub names: Names,
    pub prices: GoodNames,
    pub income: Option<FamilyId>,
    pub quantities: GoodNames,
    pub utility: Option<FamilyId>,
    pub others: Vec<FamilyId>,
}

/// A declaration that is waiting for its turn, in the order of the file.
enum Waiting<'t> {
    Prices(&'t [Declared], Span),
    Income(&'t Declared),
    Quantities(&'t [Declared], Span),
    Utility(&'t Declared),
    Others(&'t [Declared]),
    Parameter(&'t Declared),
}

/// Reads all declarations of the outline.
pub(super) fn declare(source: &Source, outline: &Outline<'_>, mistakes: &mut Vec<Diagnostic>) -> Declarations {
    let mut reader = Reader { source, declarations: Declarations::default(), mistakes };
    reader.goods(outline);
    for waiting in in_file_order(outline) {
        reader.take(waiting);
    }
    for (declared, _) in &outline.abbreviations {
        reader.declarations.names.add_abbreviation(declared, source, reader.mistakes);
    }
    reader.groups(outline);
    reader.implied_utility(outline);
    let declarations = reader.declarations;
    declarations.names.check_lookalikes(mistakes);
    declarations
}

fn in_file_order<'t>(outline: &Outline<'t>) -> Vec<Waiting<'t>> {
    let mut all: Vec<(Span, Waiting<'t>)> = Vec::new();
    all.extend(outline.prices.map(|p| (p.span, Waiting::Prices(p.content, p.span))));
    all.extend(outline.quantities.map(|q| (q.span, Waiting::Quantities(q.content, q.span))));
    all.extend(outline.income.map(|m| (m.span, Waiting::Income(m.content))));
    all.extend(outline.utility.map(|u| (u.span, Waiting::Utility(u.content))));
    if let Some(Placed { content: Others::Prices(names), span }) = outline.others {
        all.push((span, Waiting::Others(names)));
    }
    all.extend(outline.parameters.iter().map(|declared| (declared.span, Waiting::Parameter(declared))));
    all.sort_by_key(|(span, _)| *span);
    all.into_iter().map(|(_, waiting)| waiting).collect()
}

struct Reader<'a> {
    source: &'a Source,
    declarations: Declarations,
    mistakes: &'a mut Vec<Diagnostic>,
}

impl Reader<'_> {
    fn goods(&mut self, outline: &Outline<'_>) {
        let names = &mut self.declarations.names;
        match outline.goods.map(|goods| goods.content) {
            None => {}
            Some(Goods::Named(goods)) => {
                names.goods_named = true;
                for good in goods {
                    names.add_good(&good.text, good.span, self.source, self.mistakes);
                }
            }
            Some(Goods::Numbered { last, span }) => {
                for number in 1..=*last {
                    names.add_good(&number.to_string(), *span, self.source, self.mistakes);
                }
            }
        }
    }

    fn take(&mut self, waiting: Waiting<'_>) {
        match waiting {
            Waiting::Prices(names, span) => self.declarations.prices = self.one_per_good(names, Role::Price, span),
            Waiting::Quantities(names, span) => {
                self.declarations.quantities = self.one_per_good(names, Role::Quantity, span);
            }
            Waiting::Income(name) => self.declarations.income = Some(self.plain(name, Role::Income, "income")),
            Waiting::Utility(name) => self.declarations.utility = Some(self.plain(name, Role::Utility, "utility")),
            Waiting::Others(names) => {
                let ids = names.iter().map(|name| self.plain(name, Role::Others, "the price of the others"));
                self.declarations.others = ids.collect();
            }
            Waiting::Parameter(declared) => {
                self.family(declared, Role::Parameter, None);
            }
        }
    }

    /// Formulas for e and Hicksian demand speak of the utility level, declared or not.
    fn implied_utility(&mut self, outline: &Outline<'_>) {
        let spoken_of = outline.given.is_some() || outline.claims_functions();
        if self.declarations.utility.is_some() || !spoken_of {
            return;
        }
        let text = utility_default(&self.declarations.names).to_string();
        let name = Name { text, span: Span::default() };
        let declared = Declared { name, indices: Vec::new(), latex: None, span: Span::default() };
        self.declarations.utility = Some(self.family(&declared, Role::Utility, None));
    }

    fn family(&mut self, declared: &Declared, role: Role, good: Option<usize>) -> FamilyId {
        self.declarations.names.add_family(declared, role, good, self.source, self.mistakes)
    }

    fn plain(&mut self, declared: &Declared, role: Role, what: &str) -> FamilyId {
        if !declared.indices.is_empty() {
            let message = format!("{what} is one number; it has no index");
            let remedy = format!("write `{}`", declared.name.text);
            self.mistakes.push(Diagnostic::error(declared.span, message).remedy(remedy));
            let bare = Declared { indices: Vec::new(), ..declared.clone() };
            return self.family(&bare, role, None);
        }
        self.family(declared, role, None)
    }

    fn one_per_good(&mut self, names: &[Declared], role: Role, span: Span) -> GoodNames {
        let (what, letter) = if role == Role::Price { ("price", "p") } else { ("quantity", "x") };
        let goods = self.declarations.names.goods.len();
        if let [only] = names
            && only.indices.len() == 1
        {
            return GoodNames::Indexed(self.family(only, role, None));
        }
        let places = names.iter().enumerate();
        let ids = places.map(|(place, declared)| {
            if !declared.indices.is_empty() {
                let message = format!("`{}` does not give one {what} for each good", self.source.slice(declared.span));
                let remedy = format!("write one family with one index, `{letter}[i]`, or one plain name for each good");
                self.mistakes.push(Diagnostic::error(declared.span, message).remedy(remedy));
            }
            self.family(declared, role, Some(place))
        });
        let ids: Vec<FamilyId> = ids.collect();
        if goods > 0 && ids.len() != goods {
            let message = format!("{} for {}", counted(ids.len(), what), counted(goods, "good"));
            let remedy = format!("give one {what} for each good, in the order of the goods");
            self.mistakes.push(Diagnostic::error(span, message).remedy(remedy));
        }
        GoodNames::Plain(ids)
    }

    fn groups(&mut self, outline: &Outline<'_>) {
        for (name, members) in &outline.groups {
            let place = self.declarations.names.groups.len();
            let members = self.members(members);
            let names = &mut self.declarations.names;
            names.groups.push(Group { name: name.text.clone(), members, span: name.span, used: Cell::new(false) });
            names.add(&name.text, Meaning::Group(place), name.span, self.source, self.mistakes);
        }
    }

    fn members(&mut self, members: &[(Index, Span)]) -> Vec<usize> {
        let mut places = Vec::new();
        for (index, span) in members {
            match self.declarations.names.good_of(index) {
                None => self.mistakes.push(unknown_good(&self.declarations.names, index, *span)),
                Some(place) if places.contains(&place) => {
                    let message = format!("the good `{}` stands here twice", self.declarations.names.goods[place]);
                    self.mistakes.push(Diagnostic::error(*span, message).remedy("name it once"));
                }
                Some(place) => places.push(place),
            }
        }
        places
    }
}

fn counted(count: usize, what: &str) -> String {
    match (count, what) {
        (1, _) => format!("1 {what}"),
        (_, "quantity") => format!("{count} quantities"),
        _ => format!("{count} {what}s"),
    }
}

/// The message for a good that does not exist.
pub(super) fn unknown_good(names: &Names, index: &Index, span: Span) -> Diagnostic {
    let goods = names.goods.iter().map(String::as_str);
    match index {
        _ if names.goods.is_empty() => {
            Diagnostic::error(span, "there are no goods").remedy("declare them: `goods 1..4`")
        }
        Index::Number(number) => Diagnostic::error(span, format!("there is no good {number}")).remedy(format!(
            "there are {}: good 1 to good {}",
            counted(names.goods.len(), "good"),
            names.goods.len()
        )),
        Index::Name(name) => {
            let message = Diagnostic::error(span, format!("there is no good `{name}`"));
            match nearest(name, goods) {
                Some(near) => message.remedy(format!("did you mean `{near}`?")),
                None => message.remedy(format!("the goods are {}", listed(&names.goods))),
            }
        }
    }
}

/// The first few names of a list.
pub(super) fn listed(all: &[String]) -> String {
    const SHOWN: usize = 8;
    let shown: Vec<&str> = all.iter().take(SHOWN).map(String::as_str).collect();
    let more = if all.len() > SHOWN { ", …" } else { "" };
    format!("{}{more}", shown.join(", "))
}

/// Statements that demands, preferences and inverse demands need and that are not there.
pub(super) fn missing(outline: &Outline<'_>, mistakes: &mut Vec<Diagnostic>) {
    let demands = outline.equations.first().map(|e| e.span).or(outline.rest.map(|r| r.span));
    let given = outline.given.map(|given| given.span);
    let of_utility = outline.given.is_some_and(|given| given.content.0 == Preferences::Utility);
    let inverse = outline.inverse.first().map(|i| i.span);
    let goods = (outline.goods.is_some(), "goods", "goods bread, fish` or `goods 1..4");
    let prices = (outline.prices.is_some(), "prices", "prices p_b, p_f` or `prices p[i]");
    let income = (outline.income.is_some(), "income", "income m");
    let quantities = (outline.quantities.is_some(), "quantities", "quantities x_b, x_f` or `quantities x[i]");
    let cases = [
        (demands, "demands", vec![goods, prices, income]),
        (given.filter(|_| !of_utility), "preferences", vec![goods, prices, income]),
        (given.filter(|_| of_utility), "a direct utility", vec![goods, prices, income, quantities]),
        (inverse, "inverse demands", vec![goods, quantities]),
    ];
    for (span, what, needed) in cases {
        let Some(span) = span else { continue };
        let at = Span::new(span.start, span.start);
        for (_, other, remedy) in needed.into_iter().filter(|(there, _, _)| !there) {
            let what = if what == "demands" && other == "goods" { "a demand" } else { what };
            let message = format!("the file has {what}, but no {other}");
            mistakes.push(Diagnostic::error(at, message).remedy(format!("add `{remedy}`")));
        }
    }
}

/// The members of a name table that a declaration of the utility symbol would have to avoid.
pub(super) fn utility_default(names: &Names) -> &'static str {
    const CHOICES: [&str; 4] = ["u", "U", "theta", "kappa"];
    let free = |name: &&&str| names.meaning(name).is_none() && names.good(name).is_none();
    CHOICES.iter().find(free).copied().unwrap_or("utility")
}

/// Whether a written name is the one of a quantity, for messages about targets.
pub(super) fn quantity_named(declarations: &Declarations, name: &Name) -> Option<usize> {
    let Some(Meaning::Family(FamilyId(id))) = declarations.names.meaning(&name.text) else { return None };
    let family = declarations.names.families.get(id)?;
    (family.role == Role::Quantity).then_some(family.good).flatten()
}
