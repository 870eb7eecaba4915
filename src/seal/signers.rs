use super::signature::fingerprint_of;
use super::{NAMESPACE, Signed};

/// A signer is one line of a list of allowed signers: whose key it is.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Signer {
    /// Whose key it is, as the list says, such as `anna@plant.example`.
    pub principal: String,
    /// The fingerprint of the key, `SHA256:...`.
    pub fingerprint: String,
}

/// A list of allowed signers in the format of `ssh-keygen` (ALLOWED SIGNERS in its manual): principals, options, key.
#[derive(Debug, Clone, PartialEq, Eq, Default)]
pub struct Signers {
    /// Those whose keys count here.
    pub signers: Vec<Signer>,
    /// Lines that were left out, by number, and why.
    pub left_out: Vec<(usize, String)>,
}

/// Beginnings of the names of key kinds; what stands before one in a line is options.
const KINDS: [&str; 3] = ["ssh-", "ecdsa-", "sk-"];

impl Signers {
    /// Reads a list. A line whose options ask for something that this program does not judge (a certificate authority, a time of
    /// validity) is left out and told, so that it never lets more in than `ssh-keygen` would.
    pub fn read(text: &str) -> Self {
        let mut list = Self::default();
        for (index, line) in text.lines().enumerate() {
            let line = line.trim();
            if line.is_empty() || line.starts_with('#') {
                continue;
            }
            match signer(line) {
                Ok(Some(signer)) => list.signers.push(signer),
                Ok(None) => {}
                Err(why) => list.left_out.push((index + 1, why)),
            }
        }
        list
    }

    /// Whose key signed: by the key itself, never by its comment.
    pub fn whose(&self, signed: &Signed) -> Option<&Signer> {
        self.signers.iter().find(|signer| signer.fingerprint == signed.fingerprint)
    }
}

/// The signer of one line; none where the line counts for other namespaces only.
fn signer(line: &str) -> Result<Option<Signer>, String> {
    let words = words(line);
    let kind = words.iter().position(|word| KINDS.iter().any(|kind| word.starts_with(kind)));
    let (principal, options, key) = match kind {
        Some(at) if at > 0 && words.len() > at + 1 => (&words[0], &words[1..at], format!("{} {}", words[at], words[at + 1])),
        _ => return Err("it is not \"principal [options] kind key\"".to_owned()),
    };
    for option in options.iter().flat_map(|word| split_options(word)) {
        let (name, value) = option.split_once('=').unwrap_or((&option, ""));
        if !name.eq_ignore_ascii_case("namespaces") {
            return Err(format!("it asks for \"{name}\", which is not judged here"));
        }
        if !value.trim_matches('"').split(',').any(|namespace| namespace.trim() == NAMESPACE) {
            return Ok(None);
        }
    }
    let fingerprint = fingerprint_of(&key).ok_or("its key can't be read")?;
    Ok(Some(Signer { principal: principal.trim_matches('"').to_owned(), fingerprint }))
}

/// Words apart by blanks, but not by those in quotes.
fn words(line: &str) -> Vec<String> {
    split(line, char::is_whitespace)
}

fn split_options(word: &str) -> Vec<String> {
    split(word, |c| c == ',')
}

fn split(text: &str, apart: impl Fn(char) -> bool) -> Vec<String> {
    let (mut parts, mut part, mut quoted) = (Vec::new(), String::new(), false);
    for c in text.chars() {
        quoted ^= c == '"';
        if apart(c) && !quoted {
            parts.push(std::mem::take(&mut part));
        } else {
            part.push(c);
        }
    }
    parts.push(part);
    parts.retain(|part| !part.is_empty());
    parts
}

#[cfg(test)]
mod tests {
    use super::*;

    /// A key made by ssh-keygen for this test.
    const KEY: &str = "ssh-ed25519 AAAAC3NzaC1lZDI1NTE5AAAAIL/TDnEFOnc7PCdBuBv6EHR6hwTrXfV3Byz8vHedYFli";

    #[test]
    fn lines_count_by_key_and_namespace() {
        let text = format!(
            "# the plant\nanna@plant {KEY} comment\nbert@plant namespaces=\"git,elbowroom-signoff\" {KEY}\n\
             cora@plant namespaces=\"git\" {KEY}\ndora@plant cert-authority {KEY}\nemil@plant valid-after=\"20300101\" {KEY}\nnonsense\n"
        );
        let list = Signers::read(&text);
        let names: Vec<_> = list.signers.iter().map(|signer| signer.principal.as_str()).collect();
        assert_eq!(names, ["anna@plant", "bert@plant"]);
        assert_eq!(list.left_out.iter().map(|(line, _)| *line).collect::<Vec<_>>(), [5, 6, 7]);
    }
}
