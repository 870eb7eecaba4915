use clap::CommandFactory;
use clap_complete::Shell;

use super::args::Args;
use super::code::Code;
use super::out;

/// Prints what a shell needs to complete arguments.
pub(super) fn completions(shell: Shell) -> anyhow::Result<Code> {
    let mut text = Vec::new();
    let mut command = Args::command();
    let name = command.get_name().to_owned();
    clap_complete::generate(shell, &mut command, name, &mut text);
    out::print(&String::from_utf8(text)?)?;
    Ok(Code::Clear)
}

/// Prints the manual page: the program, then a section on every subcommand.
pub(super) fn manual() -> anyhow::Result<Code> {
    let mut text = Vec::new();
    let command = Args::command();
    let page = clap_mangen::Man::new(command.clone());
    page.render_title(&mut text)?;
    page.render_name_section(&mut text)?;
    page.render_synopsis_section(&mut text)?;
    page.render_description_section(&mut text)?;
    page.render_options_section(&mut text)?;
    page.render_extra_section(&mut text)?;
    of_each(&command, command.get_name(), &mut text)?;
    out::print(&String::from_utf8(text)?)?;
    Ok(Code::Clear)
}

/// A section on each subcommand, and on those below it.
fn of_each(command: &clap::Command, name: &str, text: &mut Vec<u8>) -> anyhow::Result<()> {
    for below in command.get_subcommands().filter(|below| !below.is_hide_set()) {
        let name = format!("{name} {}", below.get_name());
        let page = clap_mangen::Man::new(below.clone().bin_name(&name).display_name(&name));
        text.extend(format!(".SH \"{}\"\n", name.to_uppercase()).bytes());
        let mut own = Vec::new();
        page.render_synopsis_section(&mut own)?;
        page.render_description_section(&mut own)?;
        page.render_options_section(&mut own)?;
        page.render_extra_section(&mut own)?;
        // Sections of a subcommand stand one level lower.
        text.extend(String::from_utf8(own)?.replace("\n.SH ", "\n.SS ").replacen(".SH ", ".SS ", 1).bytes());
        of_each(below, &name, text)?;
    }
    Ok(())
}
