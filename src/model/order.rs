//! The order in which abbreviations and demands are computed: what a formula refers to comes before it, so that no
//! chain of references is ever deep, however long it is.

use crate::algebra::generator::Role;
use crate::language::{Diagnostic, Span};

use super::messages;
use super::names::{AbbreviationId, FamilyId};
use super::resolve::{Node, NodeKind, Slot};
use super::script::{Defined, Script};

/// Something that is computed once.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Item {
    /// An abbreviation with all its members.
    Abbreviation(AbbreviationId),
    /// The demand for a good.
    Demand(usize),
}

/// A reference from one formula to another item.
#[derive(Clone, Copy)]
struct Edge {
    to: Item,
    span: Span,
}

/// All items, each after those that it refers to; an abbreviation that is defined by way of itself is a mistake.
/// Demands that refer to each other may still be sound, good by good: computing them tells. Linear in the formulas.
pub(super) fn computing_order(script: &Script) -> Result<Vec<Item>, Vec<Diagnostic>> {
    let abbreviations = script.abbreviations.len();
    let mut search = Search {
        script,
        states: vec![State::New; abbreviations + script.defined.len()],
        order: Vec::new(),
        mistakes: Vec::new(),
    };
    let roots = (0..abbreviations).map(|place| Item::Abbreviation(AbbreviationId(place)));
    for root in roots.chain((0..script.defined.len()).map(Item::Demand)) {
        search.visit(root);
    }
    if search.mistakes.is_empty() { Ok(search.order) } else { Err(search.mistakes) }
}

#[derive(Clone, Copy, PartialEq, Eq)]
enum State {
    New,
    Open,
    Done,
}

struct Search<'s> {
    script: &'s Script,
    states: Vec<State>,
    order: Vec<Item>,
    mistakes: Vec<Diagnostic>,
}

impl Search<'_> {
    fn place(&self, item: Item) -> usize {
        match item {
            Item::Abbreviation(id) => id.0,
            Item::Demand(good) => self.script.abbreviations.len() + good,
        }
    }

    /// Depth first, with a stack of its own.
    fn visit(&mut self, root: Item) {
        if self.states[self.place(root)] != State::New {
            return;
        }
        let mut stack = vec![(root, self.edges(root))];
        let place = self.place(root);
        self.states[place] = State::Open;
        while let Some((item, edges)) = stack.last_mut() {
            let item = *item;
            let Some(edge) = edges.pop() else {
                let place = self.place(item);
                self.states[place] = State::Done;
                self.order.push(item);
                stack.pop();
                continue;
            };
            let place = self.place(edge.to);
            match self.states[place] {
                State::Done => {}
                State::New => {
                    self.states[place] = State::Open;
                    stack.push((edge.to, self.edges(edge.to)));
                }
                State::Open => {
                    let from = stack.iter().position(|(known, _)| *known == edge.to).unwrap_or(0);
                    let circle: Vec<Item> = stack[from..].iter().map(|(known, _)| *known).collect();
                    self.circle(edge, &circle);
                }
            }
        }
    }

    fn circle(&mut self, edge: Edge, circle: &[Item]) {
        let names = &self.script.declarations.names;
        let abbreviated = circle.iter().all(|item| matches!(item, Item::Abbreviation(_)));
        if let Item::Abbreviation(id) = edge.to
            && abbreviated
        {
            self.mistakes.push(messages::circular(edge.span, &names.abbreviations[id.0].name));
        }
    }

    /// What an item refers to, the last reference first.
    fn edges(&self, item: Item) -> Vec<Edge> {
        let mut edges = Vec::new();
        match item {
            Item::Abbreviation(id) => self.references(&self.script.abbreviations[id.0], &[], &mut edges),
            Item::Demand(good) => match &self.script.defined[good] {
                Defined::By(place, environment) => {
                    self.references(&self.script.definitions[*place].node, environment, &mut edges);
                }
                Defined::Rest => {
                    let others = (0..self.script.defined.len()).filter(|other| *other != good);
                    edges.extend(others.map(|other| Edge { to: Item::Demand(other), span: Span::default() }));
                }
            },
        }
        edges.reverse();
        edges
    }

    fn references(&self, node: &Node, environment: &[usize], edges: &mut Vec<Edge>) {
        match &node.kind {
            NodeKind::Number(_) | NodeKind::Pi | NodeKind::Faulty => {}
            NodeKind::Symbol(id, slots) => self.quantities(*id, slots, node.span, environment, edges),
            NodeKind::Abbreviation(id, _) => edges.push(Edge { to: Item::Abbreviation(*id), span: node.span }),
            NodeKind::Negative(inner) | NodeKind::Call(_, inner) => self.references(inner, environment, edges),
            NodeKind::Sum(terms) => terms.iter().for_each(|term| self.references(term, environment, edges)),
            NodeKind::Product(factors) => {
                factors.iter().for_each(|(factor, _)| self.references(factor, environment, edges));
            }
            NodeKind::Power(base, exponent) => {
                self.references(base, environment, edges);
                self.references(exponent, environment, edges);
            }
            NodeKind::Over(over) => self.references(&over.body, environment, edges),
        }
    }

    /// A quantity stands for the demand for its good; under a bound index, for those for all goods.
    fn quantities(&self, id: FamilyId, slots: &[Slot], span: Span, environment: &[usize], edges: &mut Vec<Edge>) {
        let family = &self.script.declarations.names.families[id.0];
        if family.role != Role::Quantity || self.script.defined.is_empty() {
            return;
        }
        let good = family.good.or(match slots {
            [Slot::Good(good)] => Some(*good),
            [Slot::Bound(place)] => environment.get(*place).copied(),
            _ => None,
        });
        match good {
            Some(good) => edges.push(Edge { to: Item::Demand(good), span }),
            None => edges.extend((0..self.script.defined.len()).map(|good| Edge { to: Item::Demand(good), span })),
        }
    }
}
