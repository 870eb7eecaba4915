//! The seal: hashes of what was judged, what changed between two contents, and signatures in the open SSHSIG format. It knows bytes
//! and keys; what a record says is in `review`, how it is written is in `files`.

mod changes;
mod digest;
mod item;
mod segment;
mod signature;
mod signers;

pub use changes::{Change, changes};
pub use digest::{Digest, Hashing};
pub use item::{Item, content_digest};
pub use segment::{cycle_digest, segment_digest};
pub use signature::{BadSignature, Key, KeyError, NAMESPACE, Signed, check_signature, fingerprint_of};
pub use signers::{Signer, Signers};
