use std::io::{self, BufWriter, Write};

use anyhow::Context;

use crate::report::{TraceError, save, trace_csv};

use super::args::TraceArgs;
use super::chosen::chosen;
use super::code::Code;
use super::out::still_there;

/// Writes the motion over the cycle as CSV, to a file or to standard output.
pub(super) fn run(args: &TraceArgs) -> anyhow::Result<Code> {
    let judged = chosen(args.recipe.as_deref())?.judged;
    if let Some(path) = &args.output {
        save(path, |out| trace_csv(&judged, args.every, out)).with_context(|| format!("{} can't be written", path.display()))?;
        return Ok(Code::Clear);
    }
    let mut out = BufWriter::new(io::stdout().lock());
    match trace_csv(&judged, args.every, &mut out) {
        Ok(()) => still_there(out.flush())?,
        Err(TraceError::Io(error)) => still_there(Err(error))?,
        Err(error @ TraceError::TooManyRows(_)) => return Err(error.into()),
    };
    Ok(Code::Clear)
}
