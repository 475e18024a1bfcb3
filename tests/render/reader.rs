//! A reader for printed formulas that shares nothing with the program: recursive descent by the rules of the language
//! (`^` groups to the right and binds tighter than a minus in front, which binds like a term of a sum).

use mainspring::algebra::formula::{Formula, Function};

/// A printed formula as it was read.
#[derive(Clone, Debug)]
pub enum Tree {
    Integer(u64),
    Name(String),
    Add(Box<Tree>, Box<Tree>),
    Subtract(Box<Tree>, Box<Tree>),
    Multiply(Box<Tree>, Box<Tree>),
    Divide(Box<Tree>, Box<Tree>),
    Negate(Box<Tree>),
    Raise(Box<Tree>, Box<Tree>),
    Call(Function, Box<Tree>),
}

struct Reader<'a> {
    rest: &'a str,
}

/// Reads a whole formula.
pub fn read(text: &str) -> Tree {
    let mut reader = Reader { rest: text };
    let tree = reader.sum();
    assert!(reader.rest.trim().is_empty(), "left over: {:?} of {text:?}", reader.rest);
    tree
}

/// Reads a formula and tidies it by the constructors of [`Formula`].
pub fn formula(text: &str) -> Formula {
    build(&read(text))
}

fn build(tree: &Tree) -> Formula {
    match tree {
        Tree::Integer(value) => Formula::integer(*value as i64),
        Tree::Name(name) => Formula::symbol(name.as_str()),
        Tree::Add(a, b) => Formula::sum(vec![build(a), build(b)]),
        Tree::Subtract(a, b) => Formula::difference(build(a), build(b)),
        Tree::Multiply(a, b) => Formula::product(vec![build(a), build(b)]),
        Tree::Divide(a, b) => Formula::quotient(build(a), build(b)),
        Tree::Negate(a) => Formula::negative(build(a)),
        Tree::Raise(a, b) => Formula::power(build(a), build(b)),
        Tree::Call(function, a) => Formula::call(*function, build(a)),
    }
}

impl Reader<'_> {
    fn sum(&mut self) -> Tree {
        let mut tree = self.term();
        loop {
            if self.take("+") {
                tree = Tree::Add(Box::new(tree), Box::new(self.term()));
            } else if self.take("-") {
                tree = Tree::Subtract(Box::new(tree), Box::new(self.term()));
            } else {
                return tree;
            }
        }
    }

    fn term(&mut self) -> Tree {
        if self.take("-") {
            return Tree::Negate(Box::new(self.term()));
        }
        let mut tree = self.power();
        loop {
            if self.take("*") {
                tree = Tree::Multiply(Box::new(tree), Box::new(self.power()));
            } else if self.take("/") {
                tree = Tree::Divide(Box::new(tree), Box::new(self.power()));
            } else {
                return tree;
            }
        }
    }

    fn power(&mut self) -> Tree {
        let base = self.unit();
        match self.take("^") {
            true => Tree::Raise(Box::new(base), Box::new(self.power())),
            false => base,
        }
    }

    fn unit(&mut self) -> Tree {
        if self.take("(") {
            let inner = self.sum();
            assert!(self.take(")"), "a bracket is open before {:?}", self.rest);
            return inner;
        }
        let text = self.rest.trim_start();
        let is_name = |each: char| each.is_alphanumeric() || each == '_';
        let end = text.find(|each| !is_name(each)).unwrap_or(text.len());
        let (mut word, mut rest) = text.split_at(end);
        assert!(!word.is_empty(), "a number or a name should stand before {text:?}");
        if rest.starts_with('[') {
            let close = end + rest.find(']').expect("indices end") + 1;
            (word, rest) = text.split_at(close);
        }
        self.rest = rest;
        if let Ok(value) = word.parse() {
            return Tree::Integer(value);
        }
        match function(word) {
            Some(function) => {
                assert!(self.take("("), "an argument should follow {word}");
                let argument = self.sum();
                assert!(self.take(")"), "the argument of {word} ends");
                Tree::Call(function, Box::new(argument))
            }
            None => Tree::Name(word.to_string()),
        }
    }

    fn take(&mut self, token: &str) -> bool {
        match self.rest.trim_start().strip_prefix(token) {
            Some(rest) => {
                self.rest = rest;
                true
            }
            None => false,
        }
    }
}

fn function(word: &str) -> Option<Function> {
    let function = match word {
        "ln" => Function::Ln,
        "exp" => Function::Exp,
        "sqrt" => Function::Sqrt,
        "Ei" => Function::Ei,
        "erf" => Function::Erf,
        "erfi" => Function::Erfi,
        "lambertw" => Function::LambertW,
        _ => return None,
    };
    Some(function)
}
