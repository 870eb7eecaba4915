use std::io::{BufRead, Write};
use std::path::{Path, PathBuf};
use std::process::{Command, Stdio};

use anyhow::{Context, bail, ensure};

use crate::files::read_text;
use crate::seal::{Key, KeyError, NAMESPACE, fingerprint_of};

/// A person's own key, ready to sign: in this process, or through `ssh-keygen` for keys of agents, hardware and RSA.
pub(super) enum Signing {
    /// In this process.
    Here(Box<Key>),
    /// Through `ssh-keygen -Y sign`.
    Keygen {
        /// The key file, private or public.
        file: PathBuf,
        /// The fingerprint of its public half.
        fingerprint: String,
    },
}

impl Signing {
    /// Reads a key file; asks for the passphrase of a locked one without showing it.
    ///
    /// # Errors
    /// Why it can't sign.
    pub(super) fn of(file: &Path) -> anyhow::Result<Self> {
        let text = read_text(file)?.text;
        let says = || format!("{}", file.display());
        // A public key: its private half is in an agent or in hardware.
        if let Some(fingerprint) = fingerprint_of(text.trim()) {
            return Ok(Self::Keygen { file: file.to_owned(), fingerprint });
        }
        match Key::read(&text, None) {
            Ok(key) => Ok(Self::Here(Box::new(key))),
            Err(KeyError::Locked) => {
                let passphrase = passphrase(file)?;
                Ok(Self::Here(Box::new(Key::read(&text, Some(&passphrase)).with_context(says)?)))
            }
            Err(KeyError::OtherKind(kind)) => {
                let public = PathBuf::from(format!("{}.pub", file.display()));
                let line = read_text(&public)
                    .with_context(|| format!("a key of the kind {kind} signs through ssh-keygen, which needs"))?;
                let fingerprint =
                    fingerprint_of(line.text.trim()).with_context(|| format!("{} is no public key", public.display()))?;
                Ok(Self::Keygen { file: file.to_owned(), fingerprint })
            }
            Err(other) => Err(anyhow::Error::new(other).context(says())),
        }
    }

    /// The fingerprint of its public half, `SHA256:...`.
    pub(super) fn fingerprint(&self) -> String {
        match self {
            Self::Here(key) => key.fingerprint(),
            Self::Keygen { fingerprint, .. } => fingerprint.clone(),
        }
    }

    /// Signs a text; the result is an armoured SSHSIG.
    ///
    /// # Errors
    /// Why it did not.
    pub(super) fn sign(&self, text: &str) -> anyhow::Result<String> {
        match self {
            Self::Here(key) => Ok(key.sign(text.as_bytes())?),
            Self::Keygen { file, .. } => by_keygen(file, text),
        }
    }
}

fn by_keygen(file: &Path, text: &str) -> anyhow::Result<String> {
    let mut child = Command::new("ssh-keygen")
        .args(["-Y", "sign", "-n", NAMESPACE, "-f"])
        .arg(file)
        .stdin(Stdio::piped())
        .stdout(Stdio::piped())
        .spawn()
        .context("ssh-keygen can't be started")?;
    child.stdin.take().context("ssh-keygen takes no input")?.write_all(text.as_bytes())?;
    let done = child.wait_with_output()?;
    ensure!(done.status.success(), "ssh-keygen did not sign");
    let armoured = String::from_utf8(done.stdout).context("ssh-keygen wrote no text")?;
    ensure!(armoured.contains("BEGIN SSH SIGNATURE"), "ssh-keygen wrote no signature");
    Ok(armoured)
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
