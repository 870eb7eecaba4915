//! The command line: arguments in, results to standard output, complaints to standard error, a code by meaning. One subcommand a
//! file.

mod args;
mod bar;
mod check;
mod chosen;
mod code;
mod columns;
mod compare;
mod explain;
mod findings_text;
mod generated;
mod key;
mod new;
mod not_checked_text;
mod out;
mod plan;
mod report;
mod screen;
mod sign;
mod standing;
mod step;
mod table;
mod trace;
mod verify;

use std::process::ExitCode;

use clap::Parser;

use args::{Args, Command};
use code::Code;

/// Runs what the arguments of the process ask for.
pub fn run() -> ExitCode {
    let args = match Args::try_parse() {
        Ok(args) => args,
        Err(asked) => {
            // Help and version go to standard output and are no failure. A closed pipe is none either.
            let _ = asked.print();
            return if asked.use_stderr() { Code::NotJudged.into() } else { ExitCode::SUCCESS };
        }
    };
    let done = match args.command {
        None => screen::run(args.recipe.as_deref(), args.screen),
        Some(Command::Check(check)) => check::run(&check),
        Some(Command::Explain(explain)) => explain::run(&explain),
        Some(Command::Plan(plan)) => plan::run(&plan),
        Some(Command::Report(report)) => report::run(&report),
        Some(Command::Trace(trace)) => trace::run(&trace),
        Some(Command::Sign(sign)) => sign::run(&sign),
        Some(Command::Verify(verify)) => verify::run(&verify),
        Some(Command::Compare(compare)) => compare::run(&compare),
        Some(Command::Page { record }) => verify::page(&record),
        Some(Command::New(new)) => new::run(&new),
        Some(Command::Completions { shell }) => generated::completions(shell),
        Some(Command::Manual) => generated::manual(),
    };
    match done {
        Ok(code) => code.into(),
        Err(error) => {
            out::complain(&format!("{error:#}"));
            Code::NotJudged.into()
        }
    }
}
