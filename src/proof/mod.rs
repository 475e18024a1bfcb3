//! What may be called proven, and the record of why.
//!
//! A [`Proved`] or [`Refuted`] value can be built here alone, by a handful of rules on the normal form of the algebra:
//!
//! - *identity*: every equation of a family has a difference whose normal form is zero ([`Prover::identities`]);
//! - *bound*: a sign that follows from the facts of the domain ([`Prover::bound`], [`Prover::bound_by`]);
//! - *balance, Laplacian, characteristic coefficients, decomposition*: negative semidefiniteness
//!   ([`Prover::laplacian`], [`Prover::characteristic`], [`Prover::decomposed`]);
//! - *witness*: a point that satisfies every fact, evaluated exactly or in intervals that exclude zero
//!   ([`Prover::refute`], [`Prover::refute_bound`], [`Prover::refute_semidefinite`], [`Prover::semidefinite_at`]).
//!
//! Other floors propose; this one computes what they propose and accepts or refuses. Every acceptance is a [`Step`] of
//! the [`Derivation`], with the positivities and non-zero divisors that it leans on; a stored derivation is not trusted
//! but made anew by [`replay`].

mod bound;
pub mod claim;
mod decomposition;
pub mod derivation;
mod identity;
mod prover;
mod semidefinite;
pub mod stored;
mod witness;

pub use bound::Combination;
pub use claim::{
    Balanced, Bounded, Equation, Expression, Factor, FunctionId, Identities, Label, Matrix, Product, Semidefinite,
    SemidefiniteAt,
};
pub use decomposition::Decomposition;
pub use derivation::{Derivation, Proved, Refuted, Residual, Rule, SideCondition, Statement, Step, StepId};
pub use prover::Prover;
pub use stored::{Rejected, StoredDerivation, replay, store};
pub use witness::{Failure, Value, exact_value};
