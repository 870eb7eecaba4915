use std::path::PathBuf;

use clap::{ArgGroup, Args as ClapArgs, Parser, Subcommand};
use clap_complete::Shell;

use crate::review::{CellTool, Date, Role};
use crate::units::{Length, Seconds};

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
                            Of a folder all recipes below are judged and told on a line each: files whose name ends in .toml and that \
                            have the line elbowroom-recipe. Hidden ones are left out. Where there is none the code is 2.\n\
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
    /// Write all that was found as one HTML file, as Markdown for a ticket, or both
    #[command(
        after_help = "The HTML file needs no other and no network, and prints on A4 and Letter. A report that is there is replaced, and the \
                      one before kept as NAME~; anything else that is there is left alone. The same files make the same bytes. Exit \
                      codes: 0 written, whatever the verdict, 2 not."
    )]
    Report(ReportArgs),
    /// Sign a recipe off: write a record that others can check, with reasons for what is not clear
    #[command(
        after_help = "Every doubt must be looked into, every finding that is not clear accepted with a written reason, and every datum \
                      confirmed by itself: --template prints a file of answers to fill in for --reasons. The record stands beside the \
                      recipe as NAME.signoff.toml; signatures are in the open SSHSIG format, namespace elbowroom-signoff. Exit codes: 0 \
                      signed, 1 something stands in the way, 2 the recipe could not be judged."
    )]
    Sign(SignArgs),
    /// Say whether a record still stands, and whether the cell's copy is what was signed
    #[command(
        after_help = "Exit codes: 0 the record stands and its signatures are good, 1 something changed, a signature is bad, missing or of \
                      an unknown signer, or the cell's copy differs, 2 it could not be judged."
    )]
    Verify(VerifyArgs),
    /// Tell what is different between two recipes, or between a record and a recipe
    #[command(after_help = "Exit codes: 0 nothing differs, 1 something does, 2 it could not be judged.")]
    Compare(CompareArgs),
    /// Print the page for the wall of a record: seal code, names, tightest segments, what was not checked
    Page {
        /// The record, NAME.signoff.toml
        record: PathBuf,
    },
    /// Write a starting file with comments: an arm, or a recipe for an arm
    #[command(after_help = "A file that is there already is never written over. Exit codes: 0 written, 2 not.")]
    New(NewArgs),
    /// Print what a shell needs to complete commands and options
    #[command(after_help = "For bash: elbowroom completions bash > ~/.local/share/bash-completion/completions/elbowroom")]
    Completions {
        /// The shell
        shell: Shell,
    },
    /// Print the manual page
    #[command(after_help = "To read it: elbowroom manual | man -l -")]
    Manual,
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

/// Arguments of `sign`.
#[derive(Debug, ClapArgs)]
pub(super) struct SignArgs {
    /// The recipe
    pub recipe: PathBuf,
    /// Who stands for it
    #[arg(long, value_name = "NAME")]
    pub name: Option<String>,
    /// As what: prepared or checked
    #[arg(long, value_name = "ROLE", default_value = "prepared", value_parser = role)]
    pub role: Role,
    /// When, as YYYY-MM-DD; today in UTC if left out
    #[arg(long, value_name = "DATE", value_parser = date)]
    pub date: Option<Date>,
    /// What is to be said with the name
    #[arg(long, value_name = "TEXT")]
    pub note: Option<String>,
    /// A file of answers: reasons for findings and doubts, and the data that were confirmed
    #[arg(long, value_name = "FILE")]
    pub reasons: Option<PathBuf>,
    /// Print such a file to fill in, and sign nothing
    #[arg(long)]
    pub template: bool,
    /// Sign with this OpenSSH key: Ed25519 and ECDSA P-256 here, others and public keys of agents through ssh-keygen
    #[arg(long, value_name = "FILE")]
    pub key: Option<PathBuf>,
}

/// Arguments of `verify`.
#[derive(Debug, ClapArgs)]
pub(super) struct VerifyArgs {
    /// The record, NAME.signoff.toml
    pub record: PathBuf,
    /// A list of allowed signers, as ssh-keygen has it
    #[arg(long, value_name = "FILE")]
    pub signers: Option<PathBuf>,
    /// The points read back from the cell, CSV with a header: waypoint, then joints in degrees or mm, or a pose
    #[arg(long, value_name = "TABLE")]
    pub points: Option<PathBuf>,
    /// By how many degrees they may differ
    #[arg(long, value_name = "DEGREES", default_value_t = 0.01)]
    pub angle_slack: f64,
    /// By how many mm they may differ
    #[arg(long, value_name = "MM", default_value_t = 0.1)]
    pub length_slack: f64,
    /// A tool as the cell has it: NAME=KG, or NAME=KG,X,Y,Z with its TCP in mm
    #[arg(long, value_name = "TOOL", value_parser = typed)]
    pub tool: Vec<CellTool>,
    /// A load as the cell has it: NAME=KG
    #[arg(long, value_name = "LOAD", value_parser = typed)]
    pub load: Vec<CellTool>,
    /// The override that the cell is set to, %
    #[arg(long = "override", value_name = "PERCENT")]
    pub run_at: Option<f64>,
}

/// Arguments of `compare`.
#[derive(Debug, ClapArgs)]
pub(super) struct CompareArgs {
    /// The earlier recipe, or a record (NAME.signoff.toml)
    pub before: PathBuf,
    /// The later recipe
    pub after: PathBuf,
}

fn role(text: &str) -> Result<Role, String> {
    match text {
        "prepared" => Ok(Role::Prepared),
        "checked" => Ok(Role::Checked),
        _ => Err("it must be prepared or checked".to_owned()),
    }
}

fn date(text: &str) -> Result<Date, String> {
    Date::read(text).ok_or_else(|| "it must be a day such as 2026-11-30".to_owned())
}

/// A tool or load as typed from the cell.
fn typed(text: &str) -> Result<CellTool, String> {
    let says = "it must be NAME=KG, or NAME=KG,X,Y,Z with the TCP in mm";
    let (name, rest) = text.split_once('=').ok_or(says)?;
    let figures: Vec<f64> = rest.split(',').filter_map(|part| part.trim().parse().ok()).filter(|v: &f64| v.is_finite()).collect();
    let tcp = |mm: [f64; 3]| Some(mm.map(|mm| Length::mm(mm).as_m()));
    match (figures[..].to_vec().as_slice(), rest.split(',').count()) {
        ([mass], 1) => Ok(CellTool { name: name.to_owned(), mass: *mass, tcp: None }),
        ([mass, x, y, z], 4) => Ok(CellTool { name: name.to_owned(), mass: *mass, tcp: tcp([*x, *y, *z]) }),
        _ => Err(says.to_owned()),
    }
}

/// Arguments of `check`.
#[derive(Debug, ClapArgs)]
#[expect(clippy::struct_excessive_bools, reason = "each is a switch of its own on the command line")]
pub(super) struct CheckArgs {
    /// The recipes to judge, or folders that hold them
    #[arg(required_unless_present = "demo", value_name = "RECIPE")]
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
    /// Leave out recipes whose record was made of the very same recipe and arm file by this version; nothing else of it is looked at
    #[arg(long, conflicts_with = "demo")]
    pub changed: bool,
    /// Name the recipes, a line each, and judge none
    #[arg(long, conflicts_with_all = ["demo", "json", "quiet"])]
    pub list: bool,
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
    /// Print JSON, one object on one line: the findings with their remedies
    #[arg(long, conflicts_with = "tighten")]
    pub json: bool,
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

/// Arguments of `report`.
#[derive(Debug, ClapArgs)]
#[command(group(ArgGroup::new("formats").args(["html", "markdown"]).required(true).multiple(true)))]
pub(super) struct ReportArgs {
    /// The recipe
    #[arg(required_unless_present = "demo")]
    pub recipe: Option<PathBuf>,
    /// Take the built-in demonstration cell
    #[arg(long, conflicts_with = "recipe")]
    pub demo: bool,
    /// Write HTML to this file, or to standard output for -
    #[arg(long, value_name = "FILE")]
    pub html: Option<PathBuf>,
    /// Write Markdown to this file, or to standard output for -
    #[arg(long, value_name = "FILE")]
    pub markdown: Option<PathBuf>,
    /// Leave out the remedies, which take a while to try
    #[arg(long)]
    pub no_remedies: bool,
    /// A list of allowed signers, as ssh-keygen has it, for the state of the sign-off
    #[arg(long, value_name = "FILE")]
    pub signers: Option<PathBuf>,
    /// A day to put on it, as YYYY-MM-DD; none if left out
    #[arg(long, value_name = "DATE", value_parser = date)]
    pub date: Option<Date>,
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
