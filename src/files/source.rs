/// A source is the text of a file and where it came from.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Source {
    /// Its path as shown to a person, such as `recipes/tray-feed.toml` or `housing-transfer.toml (built in)`.
    pub path: String,
    /// Its text, as it stands in the file.
    pub text: String,
}
