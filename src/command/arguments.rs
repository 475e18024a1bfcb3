//! What can be asked for on the command line.

use std::path::PathBuf;

use clap::{Args, Parser, Subcommand, ValueEnum};

const EXAMPLES: &str = "\
Examples:
  mainspring vet examples/three-staples.demand
  mainspring derive paper.demand --as latex --out appendix.tex
  mainspring vet models/ --only symmetry --with s=1/2 --as json

Exit status: 0 everything asked for is proven; 1 something is refuted, regional or conditional; 2 the command line is
wrong; 3 something is undecided; 4 a model cannot be read; 5 an output cannot be written; 6 --check found a difference;
70 an internal check failed.";

/// Decides exactly whether a demand system comes from a utility-maximising consumer, and from which.
#[derive(Parser, Debug)]
#[command(name = "mainspring", version, about, after_help = EXAMPLES, max_term_width = 100)]
pub struct Arguments {
    /// What to do.
    #[command(subcommand)]
    pub command: Command,
}

/// The commands.
#[derive(Subcommand, Debug)]
pub enum Command {
    /// The verdicts, one line each, and the recovered preferences
    Vet(Options),
    /// The whole derivation, from the demand system to its preferences
    Derive(Options),
    /// The parameter restrictions under which the conditions hold, and what the system becomes under each
    Restrict(Options),
}

/// What every command takes.
#[derive(Args, Debug, Clone)]
pub struct Options {
    /// Model files, folders of them, or - for standard input
    #[arg(required = true, value_name = "MODEL")]
    pub models: Vec<PathBuf>,
    /// The form of the output
    #[arg(long = "as", value_enum, default_value_t = Form::Text, value_name = "FORM")]
    pub form: Form,
    /// Write here instead of to the terminal; a folder where several models are named
    #[arg(long, value_name = "FILE")]
    pub out: Option<PathBuf>,
    /// Write nothing; compare with what --out names, and end with status 6 where it differs
    #[arg(long, requires = "out")]
    pub check: bool,
    /// With --as latex: a whole document instead of a fragment
    #[arg(long)]
    pub document: bool,
    /// The most seconds to spend on a model
    #[arg(long, value_name = "SECONDS", default_value_t = 60, value_parser = clap::value_parser!(u64).range(1..=1_000_000))]
    pub time: u64,
    /// The most memory to use, in MiB
    #[arg(long, value_name = "MIB", default_value_t = 4096, value_parser = clap::value_parser!(u64).range(16..))]
    pub memory: u64,
    /// Values to put in for parameters: s=1/2,t=2
    #[arg(long = "with", value_name = "NAME=VALUE,…")]
    pub values: Vec<String>,
    /// Only these parts of the work
    #[arg(long, value_enum, value_delimiter = ',', value_name = "PART,…")]
    pub only: Vec<Part>,
    /// Verdicts besides `proven` that count as passed
    #[arg(long, value_enum, value_delimiter = ',', value_name = "VERDICT,…")]
    pub accept: Vec<Accepted>,
    /// Write the time that each part took to standard error
    #[arg(long)]
    pub timings: bool,
}

/// The forms of output.
#[derive(ValueEnum, Clone, Copy, Debug, PartialEq, Eq)]
pub enum Form {
    /// Plain text, 80 columns
    Text,
    /// LaTeX
    Latex,
    /// An HTML page
    Html,
    /// JSON, by the schema in src/render/schema.json
    Json,
}

/// The parts of the work.
#[derive(ValueEnum, Clone, Copy, Debug, PartialEq, Eq)]
pub enum Part {
    /// Homogeneity of degree zero
    Homogeneity,
    /// Walras' law
    AddingUp,
    /// Slutsky symmetry
    Symmetry,
    /// Negative semidefiniteness
    Curvature,
    /// The preferences
    Recovery,
    /// The author's claims
    Claims,
}

/// Verdicts that may be counted as passed.
#[derive(ValueEnum, Clone, Copy, Debug, PartialEq, Eq)]
pub enum Accepted {
    /// Holds in a region
    Regional,
    /// Holds under restrictions on the parameters
    Conditional,
    /// Could not be decided
    Undecided,
}
