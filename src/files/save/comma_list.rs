use std::ops::Range;

use super::splice::Splices;

/// What stands in a list (an array, or a table in braces) when it is put together anew.
pub(super) enum Piece {
    /// The item that stood at this place, with the comments around it.
    Keep(usize),
    /// A new one.
    New(String),
}

/// A list between brackets or braces, parted by commas. `inside` is what stands between them, `items` are its items in order.
pub(super) struct CommaList<'t> {
    pub text: &'t str,
    pub eol: &'t str,
    pub inside: Range<usize>,
    pub items: Vec<Range<usize>>,
}

/// What belongs to one item: what stands before it (comments of its own), between it and its comma, and behind that on its line.
struct Chunk {
    before: Range<usize>,
    item: Range<usize>,
    between: Range<usize>,
    comma: bool,
    after: Range<usize>,
}

impl CommaList<'_> {
    fn chunks(&self) -> (Vec<Chunk>, Range<usize>) {
        let mut chunks = Vec::with_capacity(self.items.len());
        let mut at = self.inside.start;
        for (index, item) in self.items.iter().enumerate() {
            let limit = self.items.get(index + 1).map_or(self.inside.end, |next| next.start);
            let comma = comma_in(self.text, item.end..limit);
            let end = match comma {
                Some(comma) => rest_of_line(self.text, comma + 1, limit),
                None => rest_of_line(self.text, item.end, limit),
            };
            let between = item.end..comma.unwrap_or(end);
            let after = comma.map_or(end, |comma| comma + 1)..end;
            chunks.push(Chunk { before: at..item.start, item: item.clone(), between, comma: comma.is_some(), after });
            at = end;
        }
        (chunks, at..self.inside.end)
    }

    /// The inside of the list put together anew.
    pub fn put_together(&self, splices: &Splices, plan: &[Piece]) -> String {
        let (chunks, tail) = self.chunks();
        let on_lines = self.text[self.inside.clone()].contains('\n') && !chunks.is_empty();
        let ends_with_comma = chunks.last().is_some_and(|chunk| chunk.comma);
        let indent = chunks.last().map_or("", |chunk| {
            let before = &self.text[chunk.before.clone()];
            let line = before.rfind('\n').map_or(before, |at| &before[at + 1..]);
            &line[..line.len() - line.trim_start_matches([' ', '\t']).len()]
        });
        let blank = |range: &Range<usize>| self.text[range.clone()].chars().all(|c| c == ' ' || c == '\t');
        let plain = chunks.iter().all(|chunk| blank(&chunk.before));
        let mut out = String::new();
        for (place, piece) in plan.iter().enumerate() {
            let comma = place + 1 < plan.len() || ends_with_comma;
            if on_lines {
                let starts_line = match piece {
                    Piece::Keep(index) => self.text[chunks[*index].before.clone()].contains('\n'),
                    Piece::New(_) => false,
                };
                let first_on_line = self.text[chunks[0].before.clone()].contains('\n');
                if !starts_line && !out.ends_with('\n') && (place > 0 || first_on_line) {
                    out += self.eol;
                }
            }
            match piece {
                Piece::Keep(index) => {
                    let chunk = &chunks[*index];
                    out += match (plain && !on_lines, place) {
                        (true, 0) => &self.text[chunks[0].before.clone()],
                        (true, _) => " ",
                        (false, _) => {
                            let before = &self.text[chunk.before.clone()];
                            let on_new_line = before.trim_start_matches([' ', '\t', '\r']);
                            if out.ends_with('\n') && on_new_line.starts_with('\n') { &on_new_line[1..] } else { before }
                        }
                    };
                    out += &splices.render(self.text, chunk.item.clone());
                    if comma && !chunk.comma {
                        out.push(',');
                    }
                    out += &self.text[chunk.between.clone()];
                    if comma && chunk.comma {
                        out.push(',');
                    }
                    out += &self.text[chunk.after.clone()];
                }
                Piece::New(text) => {
                    out += match (on_lines, place) {
                        (true, _) => indent,
                        (false, 0) => chunks.first().map_or("", |chunk| &self.text[chunk.before.clone()]),
                        (false, _) => " ",
                    };
                    out += text;
                    if comma {
                        out.push(',');
                    }
                }
            }
        }
        if on_lines && !out.ends_with('\n') && !self.text[tail.clone()].contains('\n') && matches!(plan.last(), Some(Piece::New(_)))
        {
            out += self.eol;
        }
        out + &self.text[tail]
    }
}

/// The comma in a gap between items, which else holds blanks, line ends and comments.
fn comma_in(text: &str, gap: Range<usize>) -> Option<usize> {
    let mut in_comment = false;
    for (at, c) in text[gap.clone()].char_indices() {
        match c {
            '\n' => in_comment = false,
            '#' => in_comment = true,
            ',' if !in_comment => return Some(gap.start + at),
            _ => {}
        }
    }
    None
}

/// Where the line ends on which only blanks and a comment follow; `from` if something else follows.
fn rest_of_line(text: &str, from: usize, limit: usize) -> usize {
    let rest = &text[from..limit];
    match rest.find('\n') {
        Some(at) if rest[..at].trim_start().is_empty() || rest.trim_start().starts_with('#') => from + at + 1,
        _ => from,
    }
}

/// Where the next key or value starts at or behind `from`: blanks, line ends, comments and one comma are passed over.
pub(super) fn next_item(text: &str, from: usize) -> usize {
    let mut in_comment = false;
    for (at, c) in text[from..].char_indices() {
        match c {
            '\n' => in_comment = false,
            '#' => in_comment = true,
            ' ' | '\t' | '\r' | ',' => {}
            _ if in_comment => {}
            _ => return from + at,
        }
    }
    text.len()
}

#[cfg(test)]
mod tests {
    use super::*;

    fn again(text: &str, plan: &[Piece]) -> String {
        let inside = 1..text.len() - 1;
        let mut items = Vec::new();
        let mut at = next_item(text, 1);
        while at < inside.end {
            let end = at + text[at..].find(|c: char| !c.is_alphanumeric()).expect("it ends");
            items.push(at..end);
            at = next_item(text, end);
        }
        CommaList { text, eol: "\n", inside, items }.put_together(&Splices::default(), plan)
    }

    #[test]
    fn a_list_on_one_line_stays_on_one_line() {
        use Piece::{Keep, New};
        assert_eq!(again("[a, b, c]", &[Keep(2), Keep(0), New("d".into())]), "c, a, d");
        assert_eq!(again("{ a, b }", &[Keep(1), New("d".into())]), " b, d ");
        assert_eq!(again("[]", &[New("d".into())]), "d");
    }

    #[test]
    fn comments_go_with_the_item_they_stand_at() {
        use Piece::{Keep, New};
        let text = "[\n  # of a\n  a, # also of a\n  b # of b\n]";
        assert_eq!(again(text, &[Keep(0), Keep(1)]), text[1..text.len() - 1]);
        assert_eq!(again(text, &[Keep(1), Keep(0)]), "\n  b, # of b\n  # of a\n  a # also of a\n");
        assert_eq!(again(text, &[Keep(0), New("n".into()), Keep(1)]), "\n  # of a\n  a, # also of a\n  n,\n  b # of b\n");
        assert_eq!(again(text, &[Keep(0), Keep(1), New("n".into())]), "\n  # of a\n  a, # also of a\n  b, # of b\n  n\n");
        assert_eq!(again(text, &[Keep(1)]), "\n  b # of b\n");
    }
}
