//! What can be asked for on the command line.

use std::path::PathBuf;

use clap::{Args, Parser, Subcommand, ValueEnum};
use clap_complete::Shell;

use super::starting::{Goods, Shape};
use super::values::Line;

const EXAMPLES: &str = "\
Decides exactly whether a consumer demand system comes from a utility-maximising consumer, and from which.

Examples:
  mainspring vet examples/three-staples.demand
  mainspring derive paper.demand --as latex --out appendix.tex
  mainspring vet models/ --only symmetry --with s=1/2 --as json
  mainspring new --goods 3 --shape shares --out paper.demand";

const STATUS: &str = "\
Exit status: 0 everything asked for is proven; 1 something is refuted, regional or conditional; 2 the command line is
wrong; 3 something is undecided; 4 a model cannot be read; 5 an output cannot be written; 6 --check found a difference;
70 an internal check failed.";

const EXAMPLES_FIRST: &str = "{before-help}{usage-heading} {usage}\n\n{all-args}{after-help}";

/// Decides exactly whether a demand system comes from a utility-maximising consumer, and from which.
#[derive(Parser, Debug)]
#[command(
    name = "mainspring",
    version,
    about,
    before_help = EXAMPLES,
    help_template = EXAMPLES_FIRST,
    after_help = STATUS,
    max_term_width = 100
)]
pub struct Arguments {
    /// What to do.
    #[command(subcommand)]
    pub command: Command,
}

/// The commands.
#[derive(Subcommand, Debug)]
pub enum Command {
    /// The verdicts, one line each, and the recovered preferences
    #[command(
        before_help = "Example: mainspring vet paper.demand --watch",
        help_template = EXAMPLES_FIRST,
        after_help = STATUS
    )]
    Vet(Vet),
    /// The whole derivation, from the demand system to its preferences
    #[command(
        before_help = "Example: mainspring derive paper.demand --as latex --out appendix.tex",
        help_template = EXAMPLES_FIRST,
        after_help = STATUS
    )]
    Derive(Options),
    /// The parameter restrictions under which the conditions hold, and what the system becomes under each
    #[command(
        before_help = "Example: mainspring restrict paper.demand --only symmetry --as latex",
        help_template = EXAMPLES_FIRST,
        after_help = STATUS
    )]
    Restrict(Restrict),
    /// A commented model file to start from
    #[command(
        before_help = "Example: mainspring new --goods bread,fish,cloth --shape shares --out paper.demand",
        help_template = EXAMPLES_FIRST
    )]
    New(New),
    /// Completions of the command line for a shell
    #[command(
        before_help = "Example: mainspring completions bash > ~/.local/share/bash-completion/completions/mainspring",
        help_template = EXAMPLES_FIRST
    )]
    Completions {
        /// The shell
        #[arg(value_enum)]
        shell: Shell,
    },
    /// A page of the manual, for man
    #[command(before_help = "Example: mainspring manual vet | man -l -", help_template = EXAMPLES_FIRST)]
    Manual {
        /// The command that the page is about; the program, where it is left out
        command: Option<String>,
    },
}

/// What `vet` takes.
#[derive(Args, Debug, Clone)]
pub struct Vet {
    /// What every command takes.
    #[command(flatten)]
    pub options: Options,
    /// Vet again whenever a model is saved
    #[arg(long, conflicts_with = "check")]
    pub watch: bool,
    /// Enclose the expenditure that keeps utility while prices change: p_b=1..5/4,p_f=2,m=100
    #[arg(long, value_name = "PRICE=FROM..TO,…,INCOME=VALUE")]
    pub along: Option<Line>,
    /// A picture of the region.
    #[command(flatten)]
    pub figure: Figure,
}

/// The picture that `vet` draws.
#[derive(Args, Debug, Clone, Default)]
pub struct Figure {
    /// Draw where demand is positive and where the Slutsky matrix is negative semidefinite, as SVG; for one model
    #[arg(long, value_name = "FILE", conflicts_with_all = ["check", "watch"])]
    pub figure: Option<PathBuf>,
    /// The two variables on the axes of the figure; all others stay where they are said to be
    #[arg(long, value_name = "NAME,NAME", value_delimiter = ',', requires = "figure")]
    pub axes: Vec<String>,
}

/// What `restrict` takes.
#[derive(Args, Debug, Clone)]
pub struct Restrict {
    /// What every command that works models takes.
    #[command(flatten)]
    pub options: Options,
    /// Parameters that must stay free: branches that would restrict them alone are left out
    #[arg(long, value_name = "NAME,…")]
    pub keep: Vec<String>,
}

/// What `new` takes.
#[derive(Args, Debug, Clone)]
pub struct New {
    /// How many goods, or their names: 3, or bread,fish,cloth
    #[arg(long, value_name = "GOODS", default_value = "3")]
    pub goods: Goods,
    /// What is written down
    #[arg(long, value_enum, default_value_t = Shape::Quantities, value_name = "SHAPE")]
    pub shape: Shape,
    /// Write here instead of to the terminal; a file that is there already is left alone
    #[arg(long, value_name = "FILE")]
    pub out: Option<PathBuf>,
}

/// What every command that works models takes.
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
    /// Write nothing; compare with this file, or folder where several models are named, and end with status 6 where it
    /// differs
    #[arg(long, value_name = "FILE", conflicts_with = "out")]
    pub check: Option<PathBuf>,
    /// With --as latex: a whole document instead of a fragment
    #[arg(long)]
    pub document: bool,
    /// With --as latex: how it is set
    #[command(flatten)]
    pub setting: Setting,
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
    /// How many models to work at a time; as many as there are processors, where it is left out
    #[arg(long, value_name = "COUNT", value_parser = clap::value_parser!(u16).range(1..=256))]
    pub jobs: Option<u16>,
    /// Colour on the terminal
    #[arg(long, value_enum, default_value_t = Colour::Auto, value_name = "WHEN", overrides_with = "colour")]
    pub colour: Colour,
    /// Write the time that each part took to standard error
    #[arg(long)]
    pub timings: bool,
}

/// How LaTeX is set.
#[derive(Args, Debug, Clone)]
pub struct Setting {
    /// With derive: the statements and the results, without the working
    #[arg(long)]
    pub short: bool,
    /// With --as latex: equations are numbered, with labels eq:PREFIX-…
    #[arg(long, value_name = "PREFIX")]
    pub labels: Option<String>,
    /// With --as latex: \log in place of \ln
    #[arg(long)]
    pub log: bool,
    /// With --as latex: how the vector of prices is set
    #[arg(long, value_enum, default_value_t = Vectors::Plain, value_name = "STYLE")]
    pub vectors: Vectors,
    /// With --as latex: the most equations of one display
    #[arg(long, value_name = "COUNT", value_parser = clap::value_parser!(u16).range(1..))]
    pub per_display: Option<u16>,
    /// With --as latex: what is proven stands in an environment of this name (proposition, where none is given), its
    /// working in a proof
    #[arg(long, value_name = "NAME", num_args = 0..=1, require_equals = true, default_missing_value = "proposition", value_parser = environment)]
    pub theorems: Option<String>,
}

/// A name that an environment of LaTeX can have.
fn environment(name: &str) -> Result<String, String> {
    match !name.is_empty() && name.bytes().all(|byte| byte.is_ascii_alphabetic()) {
        true => Ok(name.to_string()),
        false => Err("an environment is named by letters".to_string()),
    }
}

/// How vectors are set.
#[derive(ValueEnum, Clone, Copy, Debug, PartialEq, Eq)]
pub enum Vectors {
    /// p
    Plain,
    /// p in bold type
    Bold,
    /// p under an arrow
    Arrow,
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
    /// The structure of the preferences behind the demands: homothetic, additive, separable
    Structure,
    /// How demands respond to income and prices: signs and elasticities
    Responses,
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

/// When colour is used.
#[derive(ValueEnum, Clone, Copy, Debug, PartialEq, Eq)]
pub enum Colour {
    /// Where the output is a terminal that wants it
    Auto,
    /// Always
    Always,
    /// Never
    Never,
}
