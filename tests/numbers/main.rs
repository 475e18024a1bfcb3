//! Verdicts and closed forms against an evaluation in floating point that shares only the reader with the program.

mod construction;
mod constructions;
mod mutations;
mod oracles;
mod outside;
mod true_systems;
