use ssh_key::{Algorithm, EcdsaCurve, HashAlg, LineEnding, PrivateKey, PublicKey, SshSig};

/// The namespace of the signatures under sign-off records (PROTOCOL.sshsig): a signature that was made for anything else does not
/// count here, and one that was made here counts nowhere else.
pub const NAMESPACE: &str = "elbowroom-signoff";

/// A key is a private OpenSSH key of a kind that signs in this program: Ed25519, or ECDSA on P-256.
#[derive(Debug)]
pub struct Key(PrivateKey);

/// Why a key file can't sign here.
#[derive(Debug, Clone, PartialEq, Eq, thiserror::Error)]
pub enum KeyError {
    /// It is no OpenSSH private key.
    #[error("this is no private key in OpenSSH's format: {0}")]
    NotAKey(String),
    /// It is locked, and no passphrase was given.
    #[error("the key is locked by a passphrase")]
    Locked,
    /// The passphrase does not fit.
    #[error("the passphrase does not unlock the key")]
    WrongPassphrase,
    /// It is of a kind that this program leaves to `ssh-keygen`.
    #[error("a key of the kind {0} signs through ssh-keygen, not here")]
    OtherKind(String),
    /// The signature could not be made.
    #[error("the key did not sign: {0}")]
    Failed(String),
}

impl Key {
    /// Reads a private key; one that is locked needs its passphrase.
    ///
    /// # Errors
    /// [`KeyError`], which never holds any part of the key.
    pub fn read(text: &str, passphrase: Option<&str>) -> Result<Self, KeyError> {
        let key = PrivateKey::from_openssh(text).map_err(|error| KeyError::NotAKey(error.to_string()))?;
        match key.public_key().algorithm() {
            Algorithm::Ed25519 | Algorithm::Ecdsa { curve: EcdsaCurve::NistP256 } => {}
            other => return Err(KeyError::OtherKind(other.to_string())),
        }
        if !key.is_encrypted() {
            return Ok(Self(key));
        }
        let passphrase = passphrase.ok_or(KeyError::Locked)?;
        key.decrypt(passphrase).map(Self).map_err(|_| KeyError::WrongPassphrase)
    }

    /// The fingerprint of its public half, such as `SHA256:...`.
    pub fn fingerprint(&self) -> String {
        self.0.fingerprint(HashAlg::Sha256).to_string()
    }

    /// Signs bytes; the result is an armoured SSHSIG, as `ssh-keygen -Y sign` writes it.
    ///
    /// # Errors
    /// [`KeyError::Failed`].
    pub fn sign(&self, bytes: &[u8]) -> Result<String, KeyError> {
        let failed = |error: ssh_key::Error| KeyError::Failed(error.to_string());
        let signature = self.0.sign(NAMESPACE, HashAlg::Sha512, bytes).map_err(failed)?;
        signature.to_pem(LineEnding::LF).map_err(failed)
    }
}

/// Who signed, by key alone: whose key it is, a list of signers says.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Signed {
    /// The fingerprint of the key, `SHA256:...`.
    pub fingerprint: String,
    /// The public key in OpenSSH's one-line form, without a comment.
    pub public: String,
}

/// Why a signature does not count.
#[derive(Debug, Clone, PartialEq, Eq, thiserror::Error)]
pub enum BadSignature {
    /// The file is none.
    #[error("the signature file holds no SSH signature: {0}")]
    NotOne(String),
    /// It was made for something else.
    #[error("the signature was made for \"{0}\", not for \"{NAMESPACE}\"")]
    OtherNamespace(String),
    /// It is not of these bytes by that key.
    #[error("the signature does not fit what it stands under: one of the two was changed")]
    DoesNotFit,
}

/// Checks an armoured SSHSIG over bytes, with the key that it carries.
///
/// # Errors
/// [`BadSignature`].
pub fn check_signature(armoured: &str, bytes: &[u8]) -> Result<Signed, BadSignature> {
    let signature = SshSig::from_pem(armoured.trim_end()).map_err(|error| BadSignature::NotOne(error.to_string()))?;
    if signature.namespace() != NAMESPACE {
        return Err(BadSignature::OtherNamespace(signature.namespace().escape_debug().to_string()));
    }
    let key = PublicKey::from(signature.public_key().clone());
    key.verify(NAMESPACE, bytes, &signature).map_err(|_| BadSignature::DoesNotFit)?;
    let public = key.to_openssh().map_err(|error| BadSignature::NotOne(error.to_string()))?;
    Ok(Signed { fingerprint: key.fingerprint(HashAlg::Sha256).to_string(), public: public.trim_end().to_owned() })
}

/// The fingerprint of a public key in OpenSSH's one-line form; `None` if it is none.
pub fn fingerprint_of(line: &str) -> Option<String> {
    PublicKey::from_openssh(line).ok().map(|key| key.fingerprint(HashAlg::Sha256).to_string())
}
