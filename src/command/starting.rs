//! Model files to start from: one well-known system in each shape, with comments that say what to change.

use std::str::FromStr;

use clap::ValueEnum;

const MOST_GOODS: usize = 200;

/// The goods of a new model.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum Goods {
    /// So many, called by their numbers.
    Numbered(usize),
    /// Named.
    Named(Vec<String>),
}

impl FromStr for Goods {
    type Err = String;

    fn from_str(text: &str) -> Result<Goods, String> {
        if let Ok(count) = text.trim().parse::<usize>() {
            return match count {
                2..=MOST_GOODS => Ok(Goods::Numbered(count)),
                _ => Err(format!("a system to start from has 2 to {MOST_GOODS} goods")),
            };
        }
        let names: Vec<String> = text.split(',').map(|name| name.trim().to_string()).collect();
        let named = |name: &String| {
            name.chars().next().is_some_and(char::is_alphabetic)
                && name.chars().all(|c| c.is_alphanumeric() || c == '_')
        };
        if !names.iter().all(named) {
            return Err("the goods are a number, or names with commas between: 3, or bread,fish,cloth".to_string());
        }
        match names.iter().enumerate().find(|(at, name)| names[..*at].contains(name)) {
            Some((_, twice)) => Err(format!("`{twice}` is named twice")),
            None if (2..=MOST_GOODS).contains(&names.len()) => Ok(Goods::Named(names)),
            None => Err(format!("a system to start from has 2 to {MOST_GOODS} goods")),
        }
    }
}

/// What the author writes down.
#[derive(ValueEnum, Clone, Copy, Debug, PartialEq, Eq)]
pub enum Shape {
    /// Marshallian demands (a linear expenditure system)
    Quantities,
    /// Budget shares (an almost ideal demand system)
    Shares,
    /// Outlays p x (a linear expenditure system)
    Outlays,
    /// Logarithms of quantities, incomplete (a log-log system)
    Logarithms,
    /// Inverse demands p / m (constant elasticity of substitution)
    Inverse,
    /// A direct utility function (Stone–Geary)
    Utility,
    /// An indirect utility function (an indirect addilog)
    IndirectUtility,
    /// An expenditure function (constant elasticity of substitution)
    Expenditure,
}

/// What differs from shape to shape.
struct Template {
    title: &'static str,
    /// Declarations besides the goods.
    names: &'static [&'static str],
    assumed: &'static [&'static str],
    system: &'static [&'static str],
}

const PRICES: &str = "prices  p[i]                     # one a good; positive";
const INCOME: &str = "income  m                        # total outlay; positive";

const SUBSISTENCE: Template = Template {
    title: "A linear expenditure system",
    names: &[PRICES, INCOME, "parameters b[i], c[i]            # real numbers, unknown"],
    assumed: &[
        "assume  b[i] > 0, sum over i of (b[i]) = 1",
        "assume  c[i] > 0",
        "let     C = sum over k of (p[k]*c[k])     # an abbreviation; reports use it again",
        "assume  m > C",
    ],
    system: &["demand[i] = c[i] + b[i]*(m - C)/p[i]"],
};

const OUTLAYS: Template = Template { system: &["outlay[i] = p[i]*c[i] + b[i]*(m - C)"], ..SUBSISTENCE };

const SHARES: Template = Template {
    title: "Budget shares, linear in logarithms",
    names: &[PRICES, INCOME, "parameters a[i], b[i], g[i,j]    # real numbers, unknown"],
    assumed: &[
        "assume  sum over i of (a[i]) = 1, sum over i of (b[i]) = 0",
        "assume  sum over j of (g[i,j]) = 0",
        "assume  g[i,j] = g[j,i]",
        "let     lnP = sum over k of (a[k]*ln(p[k]))",
        "          + 1/2 * sum over k, l of (g[k,l]*ln(p[k])*ln(p[l]))",
    ],
    system: &["share[i] = a[i] + sum over j of (g[i,j]*ln(p[j])) + b[i]*(ln(m) - lnP)"],
};

const LOGARITHMS: Template = Template {
    title: "An incomplete system in logarithms",
    names: &[
        PRICES,
        INCOME,
        "others  r                        # the price of all goods that are not written down",
        "parameters a[i], b[i], c         # real numbers, unknown",
    ],
    assumed: &["assume  b[i] > 0, c > 0"],
    system: &["log demand[i] = a[i] - b[i]*ln(p[i]/r) + c*ln(m/r)"],
};

const INVERSE: Template = Template {
    title: "Inverse demands, homothetic",
    names: &[
        "quantities x[i]                  # one a good; positive",
        "parameters a[i], r               # real numbers, unknown",
    ],
    assumed: &["assume  a[i] > 0, 0 < r < 1"],
    system: &["inverse[i] = a[i]*x[i]^(r - 1) / sum over k of (a[k]*x[k]^r)      # price over income"],
};

const UTILITY: Template = Template {
    title: "A direct utility function",
    names: &[
        PRICES,
        INCOME,
        "quantities x[i]                  # one a good; positive",
        "parameters b[i], c[i]            # real numbers, unknown",
    ],
    assumed: &[
        "assume  b[i] > 0, sum over i of (b[i]) = 1",
        "assume  c[i] > 0, x[i] > c[i]",
        "assume  m > sum over k of (p[k]*c[k])",
    ],
    system: &["given utility = sum over k of (b[k]*ln(x[k] - c[k]))"],
};

const INDIRECT: Template = Template {
    title: "An indirect utility function",
    names: &[PRICES, INCOME, "parameters a[i], b[i]            # real numbers, unknown"],
    assumed: &["assume  a[i] > 0, b[i] > 0"],
    system: &["given indirect utility = sum over k of (a[k]*(m/p[k])^b[k])"],
};

const EXPENDITURE: Template = Template {
    title: "An expenditure function",
    names: &[
        PRICES,
        INCOME,
        "utility u                        # the utility level",
        "parameters a[i], s               # real numbers, unknown",
    ],
    assumed: &["assume  a[i] > 0, s > 0, s != 1, u > 0"],
    system: &["given expenditure = u*(sum over k of (a[k]*p[k]^(1 - s)))^(1/(1 - s))"],
};

impl Shape {
    fn template(self) -> &'static Template {
        match self {
            Shape::Quantities => &SUBSISTENCE,
            Shape::Shares => &SHARES,
            Shape::Outlays => &OUTLAYS,
            Shape::Logarithms => &LOGARITHMS,
            Shape::Inverse => &INVERSE,
            Shape::Utility => &UTILITY,
            Shape::IndirectUtility => &INDIRECT,
            Shape::Expenditure => &EXPENDITURE,
        }
    }
}

/// A commented model file with these goods, in this shape.
pub fn model_file(goods: &Goods, shape: Shape) -> String {
    let template = shape.template();
    let goods = match goods {
        Goods::Numbered(count) => format!("goods   1..{count:<21} # or names: goods bread, fish, cloth"),
        Goods::Named(names) => format!("goods   {}", names.join(", ")),
    };
    let mut lines = vec![
        "# One statement a line; a line that begins with white space goes on with the one above.".to_string(),
        "# A statement with a free index holds for each of its values: [i] runs over the goods.".to_string(),
        format!("title   \"{}\"", template.title),
        goods,
    ];
    let assumed = "What is taken for granted. What is left out here, `mainspring restrict` looks for.";
    for (comment, statements) in
        [(None, template.names), (Some(assumed), template.assumed), (Some("The system."), template.system)]
    {
        lines.extend(comment.into_iter().flat_map(|comment| [String::new(), format!("# {comment}")]));
        lines.extend(statements.iter().map(|statement| (*statement).to_string()));
    }
    lines.join("\n") + "\n"
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn goods_are_a_number_or_names() {
        assert_eq!("3".parse(), Ok(Goods::Numbered(3)));
        assert_eq!("tea, cake".parse(), Ok(Goods::Named(vec!["tea".to_string(), "cake".to_string()])));
        for wrong in ["", "1", "0", "201", "tea", "tea,tea", "tea,", "2tea,cake", "tea cake,x"] {
            assert!(wrong.parse::<Goods>().is_err(), "{wrong}");
        }
    }
}
