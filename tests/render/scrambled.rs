//! Formulas that no author would write, from a generator of fixed seed: whatever their shape, they have to be broken.

use mainspring::algebra::formula::{Formula, Function};
use mainspring::render::document::{Block, Document, Equation, Inline};
use mainspring::render::expression::{Expression, Object};

pub struct Dice(pub u64);

impl Dice {
    fn below(&mut self, bound: usize) -> usize {
        self.0 = self.0.wrapping_mul(6_364_136_223_846_793_005).wrapping_add(1_442_695_040_888_963_407);
        ((self.0 >> 33) % bound as u64) as usize
    }

    fn name(&mut self) -> Formula {
        const NAMES: [&str; 9] = ["p_1", "p_bread", "m", "a_1", "gamma[1,2]", "sigma", "u", "alpha_fish", "P"];
        Formula::symbol(NAMES[self.below(NAMES.len())])
    }

    fn several(&mut self, most: usize, depth: usize) -> Vec<Formula> {
        (0..2 + self.below(most - 1)).map(|_| self.formula(depth)).collect()
    }

    pub fn formula(&mut self, depth: usize) -> Formula {
        if depth == 0 {
            return match self.below(5) {
                0 => Formula::integer(1 + self.below(4) as i64),
                _ => self.name(),
            };
        }
        let inner = depth - 1;
        match self.below(10) {
            0 | 1 => Formula::sum(self.several(5, inner)),
            2 => Formula::difference(self.formula(inner), self.formula(inner)),
            3..=5 => Formula::product(self.several(4, inner)),
            6 => Formula::quotient(self.formula(inner), self.formula(inner)),
            7 => Formula::power(self.formula(inner), self.formula(1)),
            8 => Formula::call([Function::Ln, Function::Exp, Function::Sqrt][self.below(3)], self.formula(inner)),
            _ => self.name(),
        }
    }
}

/// A document with forty formulas on display and in the text.
pub fn scrambled(seed: u64) -> Document {
    let mut dice = Dice(seed);
    let mut blocks = Vec::new();
    for number in 0..40 {
        let left = Object::new("x").at(number.to_string()).of(vec![Expression::symbol("p"), Expression::symbol("m")]);
        let depth = 2 + dice.below(4);
        blocks.push(Block::Display(vec![Equation::equal(left, dice.formula(depth))]));
        let words =
            [Inline::text("Within a line there is "), Inline::math(dice.formula(2)), Inline::text(", and more words.")];
        blocks.push(Block::Paragraph(words.into()));
    }
    Document { title: None, blocks }
}
