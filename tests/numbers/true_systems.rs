//! True systems in the words of a model file: integrable for all admissible values, complete and incomplete.

/// A system and what it is called here.
pub type System = (&'static str, &'static str);

/// Systems of two and three goods, each written as an author would.
pub const TRUE_SYSTEMS: [System; 18] = [
    (
        "linear expenditure",
        "goods x, y, z\nprices p, q, r\nincome m\nparameters a, b, c, d\nassume a > 0, b > 0, a + b < 1\n\
         let F = c*p + d*q - r\nassume m > F\n\
         demand x = c + a*(m - F)/p\ndemand y = d + b*(m - F)/q\ndemand z = (1 - a - b)*(m - F)/r - 1\n",
    ),
    (
        "constant elasticity",
        "goods x, y, z\nprices p, q, r\nincome m\nparameters a, b, s\nassume a > 0, b > 0, s > 0\n\
         let D = a*p^(1-s) + b*q^(1-s) + r^(1-s)\n\
         demand x = a*p^(-s)*m/D\ndemand y = b*q^(-s)*m/D\ndemand z = r^(-s)*m/D\n",
    ),
    (
        "nested constant elasticity",
        "goods x, y, z\nprices p, q, r\nincome m\nparameters a, s, t\nassume a > 0, s > 0, t > 0, s != 1, t != 1\n\
         let A = a*p^(1-s) + q^(1-s)\nlet D = A^((1-t)/(1-s)) + r^(1-t)\n\
         demand x = a*m*p^(-s)*A^((s-t)/(1-s))/D\ndemand y = m*q^(-s)*A^((s-t)/(1-s))/D\ndemand z = m*r^(-t)/D\n",
    ),
    (
        "almost ideal",
        "goods x, y\nprices p, q\nincome m\nparameters a, b, g\n\
         let L = a*ln(p) + (1-a)*ln(q) + g/2*(ln(p) - ln(q))^2\n\
         share x = a + g*(ln(p) - ln(q)) + b*(ln(m) - L)\nshare y = 1 - a - g*(ln(p) - ln(q)) - b*(ln(m) - L)\n",
    ),
    (
        "almost ideal, quadratic in the logarithm of income",
        "goods x, y\nprices p, q\nincome m\nparameters a, b, k\n\
         let L = ln(m) - a*ln(p) - (1-a)*ln(q)\n\
         share x = a + b*L + k*L^2*q^b/p^b\nshare y = 1 - a - b*L - k*L^2*q^b/p^b\n",
    ),
    (
        "generalised Leontief",
        "goods x, y, z\nprices p, q, r\nincome m\nparameters a, b, c\nassume a > 0, b > 0, c > 0\n\
         let E = a*p + b*q + 2*c*sqrt(p*r) + r\n\
         demand x = m*(a + c*sqrt(r/p))/E\ndemand y = m*b/E\ndemand z = m*(1 + c*sqrt(p/r))/E\n",
    ),
    (
        "Gorman polar form with a root",
        "goods x, y\nprices p, q\nincome m\nparameters c, b\nassume c > 0, 0 < b < 1\nlet A = c*sqrt(p*q)\nassume m > A\n\
         demand x = A/(2*p) + b*(m - A)/p\ndemand y = A/(2*q) + (1-b)*(m - A)/q\n",
    ),
    (
        "price-independent generalised linearity",
        "goods x, y\nprices p, q\nincome m\nparameters a, b, k\nassume k > 0\nlet A = p^a*q^(1-a)\n\
         share x = b + (a - b)*(A/m)^k\nshare y = 1 - b - (a - b)*(A/m)^k\n",
    ),
    (
        "quadratic expenditure",
        "goods x, y\nprices p, q\nincome m\nparameters f, c\nlet M = m - f*p\nassume M > 0\n\
         demand x = f + M/(2*p) + (c - c/2)*M^2/(p*q)\ndemand y = M/(2*q) - c/2*M^2/q^2\n",
    ),
    (
        "indirect addilog",
        "goods x, y\nprices p, q\nincome m\nparameters a, b, c\nassume a > 0, b > 0, c > 0\n\
         let D = a*b*(m/p)^b + c*(m/q)^c\n\
         outlay x = m*a*b*(m/p)^b/D\noutlay y = m*c*(m/q)^c/D\n",
    ),
    (
        "indirect translog",
        "goods x, y\nprices p, q\nincome m\nparameters a, b, c\nlet P = ln(p/m)\nlet Q = ln(q/m)\nlet D = 1 + (b + c)*P + (c + 1/9)*Q\n\
         assume D > 0\nshare x = (a + b*P + c*Q)/D\nshare y = (1 - a + c*P + Q/9)/D\n",
    ),
    (
        "homothetic translog",
        "goods x, y, z\nprices p, q, r\nincome m\nparameters g\n\
         share x = 1/3 + g*ln(p/q)\nshare y = 1/3 - g*ln(p/q) + g*ln(q/r)\nshare z = 1/3 - g*ln(q/r)\n",
    ),
    (
        "linear in deflated prices",
        "goods x, y\nprices p, q\nincome m\nothers deflated\nparameters a, b, c, g, h\nassume g != 0\n\
         demand x = a + b*p + (b*h/g)*q + g*m\ndemand y = h/g*a + (h*b/g - b*h/g)*1 + (h/g)*b*p + h^2*b/g^2*q + h*m\n",
    ),
    (
        "quadratic in deflated prices, linear in income",
        "goods x, y\nprices p, q\nincome m\nothers deflated\nparameters a, c, b, d, f, g, h\n\
         let Q = a*p + c*q + b*p^2/2 + d*p*q + f*q^2/2\n\
         demand x = a + b*p + d*q + g*(m - Q)\ndemand y = c + d*p + f*q + h*(m - Q)\n",
    ),
    (
        "constant elasticities, one other price",
        "goods x, y\nprices p, q\nothers r\nincome m\nparameters a, b, c, d, g\nassume a > 0, c > 0\n\
         demand x = a*(p/r)^b*(m/r)^g\ndemand y = c*(q/r)^d*(m/r)^g\n",
    ),
    (
        "semi-logarithmic",
        "goods x, y\nprices p, q\nothers deflated\nincome m\nparameters a, b, c, d, g\nassume a > 0, c > 0\n\
         log demand x = ln(a) + b*p + g*m\nlog demand y = ln(c) + d*q + g*m\n",
    ),
    (
        "a root of the real income",
        "goods x, y\nprices p, q\nincome m\nparameters c\nassume c > 0\nlet R = sqrt(m*q)\n\
         outlay x = m - c*R\noutlay y = c*R\nassume m > c*R\n",
    ),
    (
        "quasi-linear",
        "goods x, y\nprices p, q\nincome m\nparameters a, b\nassume a > 0, b > 0\nassume m > p*(a - b*p/q)\n\
         demand x = a - b*p/q\ndemand y = m/q - p/q*(a - b*p/q)\n",
    ),
];
