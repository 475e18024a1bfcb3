//! Long sums that come again get a letter, and the letters say what they stand for.

use crate::samples;
use mainspring::render::document::{Block, Document};
use mainspring::render::expression::Expression;
use mainspring::render::shared::name_shared_sums;
use mainspring::render::text::{Layout, text};
use std::collections::BTreeMap;

/// The right sides of the displays, with every defined letter put back.
fn expanded(document: &Document) -> Vec<Expression> {
    let mut meanings = BTreeMap::new();
    for block in &document.blocks {
        let Block::Where(equations) = block else { continue };
        for equation in equations {
            if let Some(Expression::Symbol(name)) = &equation.left {
                assert!(
                    meanings.insert(name.plain.clone(), equation.right.clone()).is_none(),
                    "{name:?} is defined twice"
                );
            }
        }
    }
    let mut sides = Vec::new();
    for block in &document.blocks {
        if let Block::Display(equations) = block {
            sides.extend(equations.iter().map(|equation| put_back(&equation.right, &meanings)));
        }
    }
    sides
}

fn put_back(side: &Expression, meanings: &BTreeMap<String, Expression>) -> Expression {
    match side {
        Expression::Symbol(name) if meanings.contains_key(&name.plain) => put_back(&meanings[&name.plain], meanings),
        other => other.map_children(&mut |child| put_back(child, meanings)),
    }
}

#[test]
fn the_letters_mean_what_stood_there() {
    for document in [samples::ces(2), samples::ces(12), samples::nested(), samples::almost_ideal(4)] {
        assert_eq!(expanded(&name_shared_sums(&document)), expanded(&document));
    }
}

#[test]
fn a_price_index_is_written_out_once() {
    insta::assert_snapshot!(text(&name_shared_sums(&samples::ces(4)), Layout::default()));
}

#[test]
fn short_sums_stay() {
    let document = samples::verdicts();
    assert_eq!(name_shared_sums(&document), document);
}
