use std::collections::HashMap;

use toml_parser::Source;
use toml_parser::lexer::TokenKind;

/// The comments of a text, each from its sign to the end of its line.
pub(super) fn comments(text: &str) -> Vec<&str> {
    let tokens = Source::new(text).lex().filter(|token| token.kind() == TokenKind::Comment);
    tokens.map(|token| text[token.span().start()..token.span().end()].trim_end()).collect()
}

/// How many comments of a text another one does not have.
pub(super) fn gone(before: &str, now: &str) -> usize {
    let mut left: HashMap<&str, usize> = HashMap::new();
    for comment in comments(now) {
        *left.entry(comment).or_default() += 1;
    }
    let mut gone = 0;
    for comment in comments(before) {
        match left.get_mut(comment) {
            Some(count) if *count > 0 => *count -= 1,
            _ => gone += 1,
        }
    }
    gone
}

/// Whether a line is a comment that is ruled, and so heads or parts sections rather than speaking of what stands below it: it has
/// three of the same sign of ruling in a row, such as `# ---- the second half ----`.
pub(super) fn is_ruled(line: &str) -> bool {
    let Some(comment) = line.trim_start().strip_prefix('#') else { return false };
    ["---", "===", "***", "~~~", "___", "###", "───", "═══"].iter().any(|rule| comment.contains(rule))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_sign_in_quotes_begins_no_comment() {
        let text = "a = \"# no\" # yes\nb = '# no'\nc = \"\"\"\n# no\n\"\"\"\n# also\r\n";
        assert_eq!(comments(text), ["# yes", "# also"]);
        assert_eq!(gone(text, "# yes\n"), 1);
        assert_eq!(gone("# a\n# a\n", "# a\n"), 1);
    }

    #[test]
    fn a_ruled_comment_is_told_from_others() {
        assert!(is_ruled("# ---- second half ----\n") && is_ruled("#####\n") && is_ruled("  # ===\r\n"));
        assert!(!is_ruled("# slow -- the part swings\n") && !is_ruled("x = \"---\"\n") && !is_ruled("\n"));
    }
}
