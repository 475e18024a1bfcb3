//! The words for what is found, the same in every form of output.

use crate::conditions::Verdict;
use crate::recovery::Method;

/// The word for a verdict.
pub fn verdict(verdict: Verdict) -> &'static str {
    match verdict {
        Verdict::Proven => "proven",
        Verdict::Refuted => "refuted",
        Verdict::Conditional => "conditional",
        Verdict::Regional => "regional",
        Verdict::Undecided => "undecided",
    }
}

/// How preferences were found.
pub fn method(method: Method) -> &'static str {
    match method {
        Method::Separable => "separable in income and prices",
        Method::Linear => "linear in a function of income",
        Method::Riccati => "quadratic in a function of income",
        Method::IntegratingFactor => "an integrating factor",
        Method::Given => "given, and differentiated",
    }
}
