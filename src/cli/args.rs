use std::path::PathBuf;

use clap::{Args as ClapArgs, Parser, Subcommand};

use crate::units::Seconds;

use super::step::step;

/// What people may type.
#[derive(Debug, Parser)]
#[command(
    name = "elbowroom",
    version,
    about = "Reviews a taught robot-arm program before its first run: what happens between the taught points, at speed, with \
             the real tool and part.",
    after_help = "Without a command the review opens on the screen; without a recipe, on the built-in demonstration cell.\n\
                  It computes from data that people typed. It moves nothing and replaces no risk assessment, no safeguard and no \
                  reduced-speed trial.",
    args_conflicts_with_subcommands = true
)]
pub(super) struct Args {
    /// The recipe to review.
    pub recipe: Option<PathBuf>,
    /// How the screen looks.
    #[command(flatten)]
    pub screen: ScreenArgs,
    /// What to do instead of opening the screen.
    #[command(subcommand)]
    pub command: Option<Command>,
}

/// How the screen looks.
#[derive(Debug, Clone, Copy, ClapArgs)]
#[expect(clippy::struct_excessive_bools, reason = "each is a switch of its own on the command line")]
pub(super) struct ScreenArgs {
    /// Draw with plain ASCII characters only
    #[arg(long)]
    pub ascii: bool,
    /// Use no colours
    #[arg(long)]
    pub mono: bool,
    /// Use colours for a light background
    #[arg(long)]
    pub light: bool,
    /// Take mouse clicks and the wheel
    #[arg(long)]
    pub mouse: bool,
}

/// What to do instead of opening the screen.
#[derive(Debug, Subcommand)]
pub(super) enum Command {
    /// Judge recipes and print what was found
    #[command(
        after_help = "Exit codes: 0 every recipe is clear, 1 something is not clear, 2 something could not be judged (a file \
                            that can't be taken, a mistake in the arguments). With several recipes the worst of them; one that can't be \
                            judged does not stop the others.\n\
                            With --json every recipe is one JSON object on one line."
    )]
    Check(CheckArgs),
    /// Tell findings at length: what, where, why, what happens if it is left alone, what the verdict rests on,
    /// what would settle it
    #[command(after_help = "Exit codes: 0 told, 2 the recipe could not be judged or has no such segment.")]
    Explain(ExplainArgs),
    /// Plan the first run: at which overrides everything is clear, stage by stage and segment by segment
    #[command(
        after_help = "Stages are those of the recipe's acceptance criteria. An override scales rates by itself and accelerations by its \
                      square. Exit codes: 0 planned, 2 the recipe could not be judged."
    )]
    Plan(PlanArgs),
    /// Write the motion over the cycle as CSV
    #[command(
        after_help = "Rows stand at every step from the start of the cycle, and at every waypoint and corner of a speed law, one \
                            for each side where values differ. Exit codes: 0 written, 2 not."
    )]
    Trace(TraceArgs),
    /// Write a starting file with comments: an arm, or a recipe for an arm
    #[command(after_help = "A file that is there already is never written over. Exit codes: 0 written, 2 not.")]
    New(NewArgs),
}

/// Arguments of `new`.
#[derive(Debug, ClapArgs)]
pub(super) struct NewArgs {
    /// What to write
    #[command(subcommand)]
    pub kind: NewKind,
}

/// What `new` writes.
#[derive(Debug, Subcommand)]
pub(super) enum NewKind {
    /// An arm file, its figures to be replaced by those of the arm's sheet
    Arm {
        /// Write to this file instead of standard output
        file: Option<PathBuf>,
    },
    /// A recipe of two waypoints for an arm
    Recipe {
        /// The arm file
        #[arg(long, value_name = "FILE")]
        arm: PathBuf,
        /// Write to this file instead of standard output
        file: Option<PathBuf>,
    },
}

/// Arguments of `check`.
#[derive(Debug, ClapArgs)]
pub(super) struct CheckArgs {
    /// The recipes to judge
    #[arg(required_unless_present = "demo")]
    pub recipes: Vec<PathBuf>,
    /// Judge the built-in demonstration cell
    #[arg(long, conflicts_with = "recipes")]
    pub demo: bool,
    /// Print JSON, one object a line for each recipe
    #[arg(long)]
    pub json: bool,
    /// Print one line a recipe
    #[arg(long, conflicts_with = "json")]
    pub quiet: bool,
    /// Columns to wrap text at
    #[arg(long, value_name = "COLUMNS", default_value_t = 100, value_parser = clap::value_parser!(u16).range(40..=400))]
    pub width: u16,
}

/// Arguments of `explain`.
#[derive(Debug, ClapArgs)]
pub(super) struct ExplainArgs {
    /// The recipe
    #[arg(required_unless_present = "demo")]
    pub recipe: Option<PathBuf>,
    /// Take the built-in demonstration cell
    #[arg(long, conflicts_with = "recipe")]
    pub demo: bool,
    /// Tell only of this segment: the number of the waypoint that it arrives at
    #[arg(long, value_name = "NUMBER")]
    pub segment: Option<usize>,
    /// Prove the bounds of that segment closer, and print what was seen and what is proved of every check
    #[arg(long, requires = "segment")]
    pub tighten: bool,
    /// Leave out the remedies, which take a while to try
    #[arg(long)]
    pub no_remedies: bool,
    /// Columns to wrap text at
    #[arg(long, value_name = "COLUMNS", default_value_t = 100, value_parser = clap::value_parser!(u16).range(40..=400))]
    pub width: u16,
}

/// Arguments of `plan`.
#[derive(Debug, ClapArgs)]
pub(super) struct PlanArgs {
    /// The recipe
    #[arg(required_unless_present = "demo")]
    pub recipe: Option<PathBuf>,
    /// Take the built-in demonstration cell
    #[arg(long, conflicts_with = "recipe")]
    pub demo: bool,
    /// Print JSON, one object on one line
    #[arg(long)]
    pub json: bool,
    /// Columns to wrap text at
    #[arg(long, value_name = "COLUMNS", default_value_t = 100, value_parser = clap::value_parser!(u16).range(40..=400))]
    pub width: u16,
}

/// Arguments of `trace`.
#[derive(Debug, ClapArgs)]
pub(super) struct TraceArgs {
    /// The recipe
    #[arg(required_unless_present = "demo")]
    pub recipe: Option<PathBuf>,
    /// Take the built-in demonstration cell
    #[arg(long, conflicts_with = "recipe")]
    pub demo: bool,
    /// Time from row to row, such as 10ms or 0.01s
    #[arg(long, value_name = "TIME", default_value = "10ms", value_parser = step)]
    pub every: Seconds,
    /// Write to this file instead of standard output
    #[arg(long, value_name = "FILE")]
    pub output: Option<PathBuf>,
}
