use std::io::BufRead;
use std::path::Path;

use anyhow::bail;

use crate::files::OwnKey;

/// Reads a key file; asks for the passphrase of a locked one without showing it.
///
/// # Errors
/// Why it can't sign.
pub(super) fn own_key(file: &Path) -> anyhow::Result<OwnKey> {
    match OwnKey::read(file, None) {
        Err(no_key) if no_key.is_locked() => Ok(OwnKey::read(file, Some(&passphrase(file)?))?),
        read => Ok(read?),
    }
}

/// Asks for a passphrase on the terminal, which does not show it.
#[cfg(unix)]
fn passphrase(file: &Path) -> anyhow::Result<String> {
    use rustix::termios::{LocalModes, OptionalActions, tcgetattr, tcsetattr};
    let input = std::io::stdin();
    let Ok(before) = tcgetattr(&input) else {
        bail!("{} is locked, and there is no terminal to ask for its passphrase", file.display())
    };
    let mut silent = before.clone();
    silent.local_modes.remove(LocalModes::ECHO);
    tcsetattr(&input, OptionalActions::Flush, &silent)?;
    super::out::complain(&format!("Passphrase of {}:", file.display()));
    let mut line = String::new();
    let read = input.lock().read_line(&mut line);
    // Whatever was typed, the terminal shows again what is typed next.
    tcsetattr(&input, OptionalActions::Now, &before)?;
    read?;
    Ok(line.trim_end_matches(['\r', '\n']).to_owned())
}

#[cfg(not(unix))]
fn passphrase(file: &Path) -> anyhow::Result<String> {
    bail!("{} is locked; sign through ssh-keygen with its public half", file.display())
}
