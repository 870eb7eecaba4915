use std::io::{self, Write};
use std::path::{Path, PathBuf};
use std::process::{Command, Stdio};

use thiserror::Error;

use crate::seal::{Key, KeyError, NAMESPACE, fingerprint_of};

use super::{Rejected, read_text};

/// A person's own key, ready to sign: in this process, or through `ssh-keygen` for keys of agents, hardware and RSA.
#[derive(Debug)]
pub enum OwnKey {
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

/// Whether `ssh-keygen` may ask on the terminal, for a passphrase or a touch.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Asks {
    /// It may.
    OnTheTerminal,
    /// The terminal is in other use: what would have to be asked for fails.
    Never,
}

/// Why a key does not sign.
#[derive(Debug, Error)]
pub enum NoKey {
    /// The file can't be read.
    #[error(transparent)]
    Unread(#[from] Rejected),
    /// The key in it is of no use as it is.
    #[error("{}: {why}", file.display())]
    Key {
        /// The file.
        file: PathBuf,
        /// Why.
        why: KeyError,
    },
    /// A key that signs through `ssh-keygen` needs its public half beside it.
    #[error("a key of the kind {kind} signs through ssh-keygen, which needs its public half: {why}")]
    NoPublicHalf {
        /// Its kind.
        kind: String,
        /// Why it can't be read.
        why: String,
    },
    /// `ssh-keygen` can't be started or be talked to.
    #[error("ssh-keygen can't be used: {0}")]
    NoKeygen(#[from] io::Error),
    /// It did not sign.
    #[error("ssh-keygen did not sign: {0}")]
    KeygenRefused(String),
}

impl OwnKey {
    /// Reads a key file, private or public; a locked private key needs its passphrase.
    ///
    /// # Errors
    /// Why it can't sign; [`KeyError::Locked`] within where a passphrase is missing.
    pub fn read(file: &Path, passphrase: Option<&str>) -> Result<Self, NoKey> {
        let text = read_text(file)?.text;
        // A public key: its private half is in an agent or in hardware.
        if let Some(fingerprint) = fingerprint_of(text.trim()) {
            return Ok(Self::Keygen { file: file.to_owned(), fingerprint });
        }
        match Key::read(&text, passphrase) {
            Ok(key) => Ok(Self::Here(Box::new(key))),
            Err(KeyError::OtherKind(kind)) => {
                let public = PathBuf::from(format!("{}.pub", file.display()));
                let without = |why: String| NoKey::NoPublicHalf { kind: kind.clone(), why };
                let line = read_text(&public).map_err(|rejected| without(rejected.to_string()))?;
                let fingerprint =
                    fingerprint_of(line.text.trim()).ok_or_else(|| without(format!("{} is no public key", public.display())))?;
                Ok(Self::Keygen { file: file.to_owned(), fingerprint })
            }
            Err(why) => Err(NoKey::Key { file: file.to_owned(), why }),
        }
    }

    /// The fingerprint of its public half, `SHA256:...`.
    pub fn fingerprint(&self) -> String {
        match self {
            Self::Here(key) => key.fingerprint(),
            Self::Keygen { fingerprint, .. } => fingerprint.clone(),
        }
    }

    /// Signs a text; the result is an armoured SSHSIG.
    ///
    /// # Errors
    /// Why it did not.
    pub fn sign(&self, text: &str, asks: Asks) -> Result<String, NoKey> {
        match self {
            Self::Here(key) => key.sign(text.as_bytes()).map_err(|why| NoKey::Key { file: PathBuf::from("the key"), why }),
            Self::Keygen { file, .. } => by_keygen(file, text, asks),
        }
    }
}

impl NoKey {
    /// Whether only the passphrase is missing.
    pub fn is_locked(&self) -> bool {
        matches!(self, Self::Key { why: KeyError::Locked, .. })
    }
}

fn by_keygen(file: &Path, text: &str, asks: Asks) -> Result<String, NoKey> {
    let mut command = Command::new("ssh-keygen");
    command.args(["-Y", "sign", "-n", NAMESPACE, "-f"]).arg(file).stdin(Stdio::piped()).stdout(Stdio::piped());
    if asks == Asks::Never {
        // A question goes to a program that answers nothing, and what is complained of is kept off the screen.
        command.env("SSH_ASKPASS", "false").env("SSH_ASKPASS_REQUIRE", "force").stderr(Stdio::piped());
    }
    let mut child = command.spawn()?;
    let input = child.stdin.take().ok_or_else(|| io::Error::other("it takes no input"))?;
    // What ended early says why below.
    let _ = { input }.write_all(text.as_bytes());
    let done = child.wait_with_output()?;
    let complaint = || String::from_utf8_lossy(&done.stderr).lines().next().unwrap_or("it does not say why").to_owned();
    let armoured = String::from_utf8_lossy(&done.stdout).into_owned();
    if !done.status.success() || !armoured.contains("BEGIN SSH SIGNATURE") {
        return Err(NoKey::KeygenRefused(complaint()));
    }
    Ok(armoured)
}
