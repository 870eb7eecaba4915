/// Lines turns byte offsets into the lines and columns that people count.
pub(super) struct Lines<'a> {
    text: &'a str,
    /// Byte offsets at which lines start.
    starts: Vec<usize>,
}

impl<'a> Lines<'a> {
    pub(super) fn of(text: &'a str) -> Self {
        let starts = std::iter::once(0).chain(text.match_indices('\n').map(|(at, _)| at + 1)).collect();
        Self { text, starts }
    }

    /// Line and column of a byte offset, both from 1; columns count characters. An offset inside a character means that
    /// character, and one beyond the end means the end.
    pub(super) fn position(&self, offset: usize) -> (usize, usize) {
        let mut offset = offset.min(self.text.len());
        while !self.text.is_char_boundary(offset) {
            offset -= 1;
        }
        let line = self.starts.partition_point(|start| *start <= offset);
        let start = self.starts[line - 1];
        (line, self.text[start..offset].chars().count() + 1)
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn columns_count_characters_and_lines_end_with_either_ending() {
        let lines = Lines::of("a = 1\r\nβ = \"°\" # x\n");
        assert_eq!(lines.position(0), (1, 1));
        assert_eq!(lines.position(4), (1, 5));
        assert_eq!(lines.position(7), (2, 1));
        assert_eq!(lines.position(8), (2, 1), "inside the two bytes of the first letter");
        assert_eq!(lines.position(12), (2, 5));
        assert_eq!(lines.position(16), (2, 8));
        assert_eq!(lines.position(usize::MAX), (3, 1));
    }

    #[test]
    fn an_empty_text_has_a_first_line() {
        assert_eq!(Lines::of("").position(0), (1, 1));
    }
}
