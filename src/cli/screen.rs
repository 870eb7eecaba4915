use std::path::Path;

use super::args::ScreenArgs;
use super::chosen::chosen;
use super::code::Code;
use super::out;

/// Opens the review of a recipe on the screen; of the built-in demonstration cell for none.
pub(super) fn run(recipe: Option<&Path>, options: ScreenArgs) -> anyhow::Result<Code> {
    let chosen = chosen(recipe)?;
    // The one place where the command line meets the screen.
    open_screen(&chosen, options)
}

/// Stands for the screen until it is joined here: `crate::tui::run::run(Started { .. }, Options { .. })`.
fn open_screen(chosen: &super::chosen::Chosen, options: ScreenArgs) -> anyhow::Result<Code> {
    let ScreenArgs { ascii: _, mono: _, light: _, mouse: _ } = options;
    out::print(&format!("{}\n", crate::review::headline(&chosen.judged)))?;
    anyhow::bail!("the screen is not part of this build; `elbowroom check` prints the result")
}
