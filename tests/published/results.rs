//! Published results, each with where it is stated and how sure we are of it: the system, the preferences that the
//! source gives for it, and the conditions that hold.

/// How we know of a result.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Evidence {
    /// The statement was read in the source.
    ReadInSource,
    /// The source is cited from memory; the statement was checked numerically.
    FromMemory,
    /// Worked out anew by hand, because the printed tables were not at hand.
    Derived,
}

/// What a source says of curvature.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Curvature {
    Everywhere,
    SomewhereNot,
    Unstated,
}

use Curvature::{Everywhere, SomewhereNot, Unstated};
use Evidence::{Derived, FromMemory, ReadInSource};

/// A published result.
pub struct Published {
    pub source: &'static str,
    pub evidence: Evidence,
    /// The system as a model file.
    pub model: &'static str,
    /// The published v in prices and income, or e in prices and u.
    pub preferences: Preferences,
    pub curvature: Curvature,
}

/// In which function a source gives preferences.
#[derive(Clone, Copy)]
pub enum Preferences {
    Indirect(&'static str),
    Expenditure(&'static str),
}

use Preferences::{Expenditure, Indirect};

const THREE: &str = "goods x, y, z\nprices p1, p2, p3\nincome m\n";

/// The head of every three-good system here.
pub fn head(published: &Published) -> String {
    let complete = published.model.contains("goods");
    if complete { published.model.to_string() } else { format!("{THREE}{}", published.model) }
}

pub const PUBLISHED: [Published; 29] = [
    Published {
        source: "Jehle and Reny, Advanced Microeconomic Theory (2011), section 2.2: three-good Cobb-Douglas",
        evidence: FromMemory,
        model: "parameters a1, a2, a3\nassume a1 + a2 + a3 = 1, a1 > 0, a2 > 0, a3 > 0\n\
                demand x = a1*m/p1\ndemand y = a2*m/p2\ndemand z = a3*m/p3\n",
        preferences: Expenditure("u*p1^a1*p2^a2*p3^a3"),
        curvature: Everywhere,
    },
    Published {
        source: "Jehle and Reny (2011), examples 1.1 to 1.3: constant elasticity, two goods",
        evidence: ReadInSource,
        model: "goods x, y\nprices p1, p2\nincome m\nparameters r\nassume r < 1, r != 0\n\
                demand x = p1^(r-1)*m/(p1^r + p2^r)\ndemand y = p2^(r-1)*m/(p1^r + p2^r)\n",
        preferences: Indirect("m*(p1^r + p2^r)^(-1/r)"),
        curvature: Everywhere,
    },
    Published {
        source: "Mas-Colell, Whinston and Green, Microeconomic Theory (1995), exercise 3.G.6: the restrictions found",
        evidence: FromMemory,
        model: "parameters d\nassume d != 0\nlet x1 = 100 - 5*p1/p3 - 5*p2/p3 + d*m/p3\n\
                demand x = x1\ndemand y = x1\ndemand z = (m - p1*x1 - p2*x1)/p3\n",
        preferences: Expenditure("p3*(u*exp(d*(p1+p2)/p3) + 5*(p1+p2)/(d*p3) - 100/d + 5/d^2)"),
        curvature: SomewhereNot,
    },
    Published {
        source: "Mas-Colell, Whinston and Green (1995), exercise 3.G.15: u = 2 sqrt(x1) + 4 sqrt(x2)",
        evidence: FromMemory,
        model: "goods x, y\nprices p1, p2\nincome m\n\
                demand x = m*p2/(p1*(4*p1+p2))\ndemand y = 4*m*p1/(p2*(4*p1+p2))\n",
        preferences: Indirect("2*sqrt(m*(4*p1+p2)/(p1*p2))"),
        curvature: Everywhere,
    },
    Published {
        source: "Mas-Colell, Whinston and Green (1995), exercise 3.D.6: Stone-Geary",
        evidence: FromMemory,
        model: "parameters a1, a2, a3, b1, b2, b3\nassume a1 + a2 + a3 = 1, a1 > 0, a2 > 0, a3 > 0\n\
                let M = m - b1*p1 - b2*p2 - b3*p3\nassume M > 0\n\
                demand x = b1 + a1*M/p1\ndemand y = b2 + a2*M/p2\ndemand z = b3 + a3*M/p3\n",
        preferences: Indirect("M*(a1/p1)^a1*(a2/p2)^a2*(a3/p3)^a3"),
        curvature: Everywhere,
    },
    Published {
        source: "Varian, Microeconomic Analysis (1992), solution 8.5",
        evidence: ReadInSource,
        model: "goods x, y\nprices p1, p2\nincome m\ndemand x = 3*m/(5*p1)\ndemand y = 2*m/(5*p2)\n",
        preferences: Indirect("(3/2)*ln(3*m/(5*p1)) + ln(2*m/(5*p2))"),
        curvature: Everywhere,
    },
    Published {
        source: "Deaton, Demand analysis, Handbook of Econometrics III (1986), eqs (15)-(17): Working-Leser to PIGLOG",
        evidence: ReadInSource,
        model: "goods x, y\nprices p1, p2\nincome m\nparameters a, b\nassume 0 < a < 1, 0 < b < 1\n\
                let A = a*p1 + (1-a)*p2\nlet B = 2*p1^b*p2^(1-b)\nlet w = (ln(m) - ln(A))/(ln(B) - ln(A))\n\
                share x = w*b + (1-w)*a*p1/A\nshare y = w*(1-b) + (1-w)*(1-a)*p2/A\n",
        preferences: Indirect("w"),
        curvature: Unstated,
    },
    Published {
        source: "Klein and Rubin (1947), Samuelson (1947): the corner of linear expenditures, quasi-linear with logarithms",
        evidence: FromMemory,
        model: "goods x, y\nprices p1, p2\nincome m\nparameters c, d\nassume d > 0\n\
                outlay y = c*p2 + d*p1\nrest x\n",
        preferences: Expenditure("c*p2 + p1*(u + d*ln(p2/p1))"),
        curvature: Everywhere,
    },
    Published {
        source: "standard: constant elasticity, three goods",
        evidence: FromMemory,
        model: "parameters a1, a2, a3, s\nassume a1 + a2 + a3 = 1, a1 > 0, a2 > 0, a3 > 0, s > 0, s != 1\n\
                let D = a1*p1^(1-s) + a2*p2^(1-s) + a3*p3^(1-s)\n\
                demand x = a1*p1^(-s)*m/D\ndemand y = a2*p2^(-s)*m/D\ndemand z = a3*p3^(-s)*m/D\n",
        preferences: Expenditure("u*(a1*p1^(1-s) + a2*p2^(1-s) + a3*p3^(1-s))^(1/(1-s))"),
        curvature: Everywhere,
    },
    Published {
        source: "Deaton and Muellbauer, American Economic Review 70 (1980), eqs (4)-(12): almost ideal",
        evidence: ReadInSource,
        model: "parameters a0, a1, a2, a3, b1, b2, b3, g11, g12, g13, g22, g23, g33\n\
                assume a1 + a2 + a3 = 1, b1 + b2 + b3 = 0\n\
                assume g11 + g12 + g13 = 0, g12 + g22 + g23 = 0, g13 + g23 + g33 = 0\n\
                let L = a0 + a1*ln(p1) + a2*ln(p2) + a3*ln(p3) + g11*ln(p1)^2/2 + g22*ln(p2)^2/2 + g33*ln(p3)^2/2\n\
                \x20 + g12*ln(p1)*ln(p2) + g13*ln(p1)*ln(p3) + g23*ln(p2)*ln(p3)\n\
                share x = a1 + g11*ln(p1) + g12*ln(p2) + g13*ln(p3) + b1*(ln(m) - L)\n\
                share y = a2 + g12*ln(p1) + g22*ln(p2) + g23*ln(p3) + b2*(ln(m) - L)\n\
                share z = a3 + g13*ln(p1) + g23*ln(p2) + g33*ln(p3) + b3*(ln(m) - L)\n",
        preferences: Expenditure("exp(L + u*p1^b1*p2^b2*p3^b3)"),
        curvature: SomewhereNot,
    },
    Published {
        source: "Banks, Blundell and Lewbel, Review of Economics and Statistics 79 (1997), eqs (7)-(10)",
        evidence: FromMemory,
        model: "parameters a1, a2, a3, b1, b2, b3, l1, l2, l3\n\
                assume a1 + a2 + a3 = 1, b1 + b2 + b3 = 0, l1 + l2 + l3 = 0\n\
                let L = ln(m) - a1*ln(p1) - a2*ln(p2) - a3*ln(p3)\nlet B = p1^b1*p2^b2*p3^b3\n\
                share x = a1 + b1*L + l1*L^2/B\nshare y = a2 + b2*L + l2*L^2/B\nshare z = a3 + b3*L + l3*L^2/B\n",
        preferences: Indirect("-B/L - l1*ln(p1) - l2*ln(p2) - l3*ln(p3)"),
        curvature: Unstated,
    },
    Published {
        source: "Howe, Pollak and Wales, Econometrica 47 (1979): quadratic expenditure",
        evidence: ReadInSource,
        model: "parameters f1, f2, f3, g1, g2, g3, c1, c2, c3\nassume g1 + g2 + g3 = 1\n\
                let M = m - f1*p1 - f2*p2 - f3*p3\nlet G = p1^g1*p2^g2*p3^g3\nlet C = c1*p1 + c2*p2 + c3*p3\n\
                assume M > 0\n\
                demand x = f1 + g1*M/p1 + (c1 - g1*C/p1)*(M/G)^2\n\
                demand y = f2 + g2*M/p2 + (c2 - g2*C/p2)*(M/G)^2\n\
                demand z = f3 + g3*M/p3 + (c3 - g3*C/p3)*(M/G)^2\n",
        preferences: Indirect("-G/M - C/G"),
        curvature: Unstated,
    },
    Published {
        source: "Diewert, Journal of Political Economy 79 (1971): generalised Leontief",
        evidence: ReadInSource,
        model: "parameters b11, b12, b13, b22, b23, b33\n\
                assume b11 > 0, b22 > 0, b33 > 0, b12 >= 0, b13 >= 0, b23 >= 0\n\
                let E = b11*p1 + b22*p2 + b33*p3 + 2*b12*sqrt(p1*p2) + 2*b13*sqrt(p1*p3) + 2*b23*sqrt(p2*p3)\n\
                outlay x = m*(b11*p1 + b12*sqrt(p1*p2) + b13*sqrt(p1*p3))/E\n\
                outlay y = m*(b22*p2 + b12*sqrt(p1*p2) + b23*sqrt(p2*p3))/E\n\
                outlay z = m*(b33*p3 + b13*sqrt(p1*p3) + b23*sqrt(p2*p3))/E\n",
        preferences: Expenditure("u*E"),
        curvature: Everywhere,
    },
    Published {
        source: "Diewert and Wales, Journal of Business and Economic Statistics 6 (1988): normalised quadratic",
        evidence: FromMemory,
        model: "parameters b1, b2, b3, c1, c2, c3, h\n\
                let C = c1*p1 + c2*p2 + c3*p3\nlet Q = p1^2 + p2^2 + p3^2 - p1*p2 - p1*p3 - p2*p3\n\
                let E = b1*p1 + b2*p2 + b3*p3 + h*Q/C\nassume C > 0, E > 0\n\
                demand x = m/E*(b1 + h*(2*p1 - p2 - p3)/C - c1*h*Q/C^2)\n\
                demand y = m/E*(b2 + h*(2*p2 - p1 - p3)/C - c2*h*Q/C^2)\n\
                demand z = m/E*(b3 + h*(2*p3 - p1 - p2)/C - c3*h*Q/C^2)\n",
        preferences: Expenditure("u*(b1*p1 + b2*p2 + b3*p3 + h*Q/C)"),
        curvature: SomewhereNot,
    },
    Published {
        source: "Houthakker, Econometrica 28 (1960) and 33 (1965): indirect addilog",
        evidence: FromMemory,
        model: "parameters a1, a2, a3, b1, b2, b3\nassume a1 > 0, a2 > 0, a3 > 0, b1 > 0, b2 > 0, b3 > 0\n\
                let D = a1*b1*(m/p1)^b1 + a2*b2*(m/p2)^b2 + a3*b3*(m/p3)^b3\n\
                outlay x = m*a1*b1*(m/p1)^b1/D\noutlay y = m*a2*b2*(m/p2)^b2/D\noutlay z = m*a3*b3*(m/p3)^b3/D\n",
        preferences: Indirect("a1*(m/p1)^b1 + a2*(m/p2)^b2 + a3*(m/p3)^b3"),
        curvature: Everywhere,
    },
    Published {
        source: "Christensen, Jorgenson and Lau, American Economic Review 65 (1975): indirect translog",
        evidence: ReadInSource,
        model: "goods x, y\nprices p1, p2\nincome m\nparameters a1, a2, b11, b12, b22\nassume a1 + a2 = 1\n\
                let P = ln(p1/m)\nlet Q = ln(p2/m)\nlet D = 1 + (b11 + b12)*P + (b12 + b22)*Q\nassume D > 0\n\
                share x = (a1 + b11*P + b12*Q)/D\nshare y = (a2 + b12*P + b22*Q)/D\n",
        preferences: Indirect("-a1*P - a2*Q - b11*P^2/2 - b12*P*Q - b22*Q^2/2"),
        curvature: SomewhereNot,
    },
    Published {
        source: "Lau, Functional forms, Handbook of Econometrics III (1986), eqs (2.16)-(2.45): translog in two prices",
        evidence: ReadInSource,
        model: "goods x, y\nprices p1, p2\nincome m\nshare x = 1/3 + 1/18*ln(p1/p2)\nshare y = 2/3 - 1/18*ln(p1/p2)\n",
        preferences: Expenditure("u*exp(ln(p1)/3 + 2*ln(p2)/3 + (ln(p1) - ln(p2))^2/36)"),
        curvature: SomewhereNot,
    },
    Published {
        source: "algebra: demand that rises in its own price, with an expenditure function that is nowhere concave",
        evidence: Derived,
        model: "goods x, y\nprices p1, p2\nincome m\nassume m*p2 > p1^2\n\
                demand x = p1/p2\ndemand y = m/p2 - p1^2/p2^2\n",
        preferences: Expenditure("u*p2 + p1^2/(2*p2)"),
        curvature: SomewhereNot,
    },
    Published {
        source: "algebra: quasi-linear in the second good",
        evidence: Derived,
        model: "goods x, y\nprices p1, p2\nincome m\nparameters a, b\nassume b > 0\n\
                demand x = a - b*p1/p2\ndemand y = m/p2 - p1*(a - b*p1/p2)/p2\n",
        preferences: Expenditure("u*p2 + a*p1 - b*p1^2/(2*p2)"),
        curvature: Everywhere,
    },
    Published {
        source: "LaFrance and Agnew (1998): LinQuad",
        evidence: ReadInSource,
        model: "goods x, y\nprices p1, p2\nincome m\nothers deflated\nparameters a1, a2, b11, b12, b22, g1, g2\n\
                let Q = a1*p1 + a2*p2 + b11*p1^2/2 + b12*p1*p2 + b22*p2^2/2\n\
                demand x = a1 + b11*p1 + b12*p2 + g1*(m - Q)\ndemand y = a2 + b12*p1 + b22*p2 + g2*(m - Q)\n",
        preferences: Expenditure("Q + u*exp(g1*p1 + g2*p2)"),
        curvature: SomewhereNot,
    },
    Published {
        source: "LaFrance, Journal of Economic Theory 37 (1985): linear, no income effects",
        evidence: Derived,
        model: "others deflated\nparameters a1, a2, a3, b11, b12, b13, b22, b23, b33\n\
                demand x = a1 + b11*p1 + b12*p2 + b13*p3\ndemand y = a2 + b12*p1 + b22*p2 + b23*p3\n\
                demand z = a3 + b13*p1 + b23*p2 + b33*p3\n",
        preferences: Indirect(
            "m - a1*p1 - a2*p2 - a3*p3 - b11*p1^2/2 - b22*p2^2/2 - b33*p3^2/2 - b12*p1*p2 - b13*p1*p3 - b23*p2*p3",
        ),
        curvature: SomewhereNot,
    },
    Published {
        source: "LaFrance, Journal of Economic Theory 37 (1985): linear, proportional income effects",
        evidence: Derived,
        model: "goods x, y\nprices p1, p2\nincome m\nothers deflated\nparameters a1, b11, b12, g1, g2\nassume g1 != 0\n\
                demand x = a1 + b11*p1 + b12*p2 + g1*m\n\
                demand y = g2*a1/g1 + (g2*b11/g1 - b12)/g1 + g2*b11/g1*p1 + g2*b12/g1*p2 + g2*m\n",
        preferences: Indirect("(m + (a1 + b11*p1 + b12*p2 + b11/g1)/g1)*exp(-g1*p1 - g2*p2)"),
        curvature: SomewhereNot,
    },
    Published {
        source: "LaFrance, Australian Journal of Agricultural Economics 34 (1990): logarithmic in income, no price terms",
        evidence: Derived,
        model: "goods x, y\nprices p1, p2\nincome m\nothers deflated\nparameters a1, g1, g2\nassume g1 > 0\n\
                demand x = a1 + g1*ln(m)\ndemand y = g2/g1*(a1 + g1*ln(m))\n",
        preferences: Indirect("exp(-a1/g1)/g1*Ei(ln(m) + a1/g1) - p1 - g2*p2/g1"),
        curvature: SomewhereNot,
    },
    Published {
        source: "LaFrance (1990): logarithmic in prices, linear in income, no price terms",
        evidence: Derived,
        model: "goods x, y\nprices p1, p2\nincome m\nothers deflated\nparameters a1, g1, g2\nassume g1 != 0\n\
                demand x = a1 + g1*m\ndemand y = g2/g1*a1 + g2*m\n",
        preferences: Expenditure("u*exp(g1*p1 + g2*p2) - a1/g1"),
        curvature: SomewhereNot,
    },
    Published {
        source: "LaFrance (1990): logarithms of own prices, no income effects",
        evidence: Derived,
        model: "goods x, y\nprices p1, p2\nincome m\nothers deflated\nparameters a1, a2, b1, b2\nassume b1 <= 0, b2 <= 0\n\
                demand x = a1 + b1*ln(p1)\ndemand y = a2 + b2*ln(p2)\n",
        preferences: Expenditure("u + a1*p1 + b1*(p1*ln(p1) - p1) + a2*p2 + b2*(p2*ln(p2) - p2)"),
        curvature: Everywhere,
    },
    Published {
        source: "LaFrance (1990): exponential in prices and income, one cluster and a good by itself",
        evidence: Derived,
        model: "others deflated\nparameters a1, a2, a3, d, b, g\nassume a1 > 0, a2 > 0, a3 > 0, d != 0, b != 0, g != 0\n\
                demand x = a1*exp(d*a1*p1 + d*a2*p2 + g*m)\ndemand y = a2*exp(d*a1*p1 + d*a2*p2 + g*m)\n\
                demand z = a3*exp(b*p3 + g*m)\n",
        preferences: Indirect("-exp(-g*m)/g - exp(d*(a1*p1 + a2*p2))/d - a3*exp(b*p3)/b"),
        curvature: SomewhereNot,
    },
    Published {
        source: "LaFrance (1990): exponential in prices, powers of income, one cluster",
        evidence: Derived,
        model: "goods x, y\nprices p1, p2\nincome m\nothers deflated\nparameters a1, a2, d, g\n\
                assume a1 > 0, a2 > 0, d != 0, g != 1\n\
                demand x = a1*exp(d*(a1*p1 + a2*p2))*m^g\ndemand y = a2*exp(d*(a1*p1 + a2*p2))*m^g\n",
        preferences: Indirect("m^(1-g)/(1-g) - exp(d*(a1*p1 + a2*p2))/d"),
        curvature: SomewhereNot,
    },
    Published {
        source: "LaFrance, American Journal of Agricultural Economics 68 (1986): constant elasticities, one cluster",
        evidence: Derived,
        model: "goods x, y\nprices p1, p2\nincome m\nothers deflated\nparameters a1, a2, d, g\n\
                assume a1 > 0, a2 > 0, d != 0, g != 1\n\
                outlay x = a1*p1^(d*a1)*p2^(d*a2)*m^g\noutlay y = a2*p1^(d*a1)*p2^(d*a2)*m^g\n",
        preferences: Indirect("m^(1-g)/(1-g) - p1^(d*a1)*p2^(d*a2)/d"),
        curvature: SomewhereNot,
    },
    Published {
        source: "LaFrance (1986): constant elasticities, a good that takes a share of income beside one that does not",
        evidence: Derived,
        model: "goods x, y\nprices p1, p2\nincome m\nothers deflated\nparameters a1, a2, b, g\n\
                assume a1 > 0, a2 > 0, b != -1, g != 1\n\
                demand x = a1*p1^b*p2^(a2*(1-g))*m^g\ndemand y = a2*m/p2\n",
        preferences: Indirect("(m*p2^(-a2))^(1-g)/(1-g) - a1*p1^(1+b)/(1+b)"),
        curvature: Unstated,
    },
];
