use std::collections::BTreeMap;
use std::ops::Range;

/// Splices are places of a text that are to read otherwise. Everything else keeps its bytes, by construction.
#[derive(Default)]
pub(super) struct Splices {
    /// By start, end and order of arrival: what stands there instead.
    all: BTreeMap<(usize, usize, usize), String>,
    arrived: usize,
}

impl Splices {
    /// Other text in the place of a range; with an empty range, text behind what stands before it.
    pub fn put(&mut self, range: Range<usize>, text: String) {
        self.all.insert((range.start, range.end, self.arrived), text);
        self.arrived += 1;
    }

    /// A part of the text as it now reads. Text put into an empty range belongs to the part that ends there.
    pub fn render(&self, text: &str, range: Range<usize>) -> String {
        let mut out = String::new();
        let mut at = range.start;
        for ((start, end, _), instead) in self.all.range((range.start, 0, 0)..=(range.end, usize::MAX, usize::MAX)) {
            let inside = if start == end { *start > range.start || range.start == 0 } else { *end <= range.end };
            if inside && *start >= at {
                out += &text[at..*start];
                out += instead;
                at = *end;
            }
        }
        out + &text[at..range.end]
    }

    /// Forgets what was put inside a range, which is about to be replaced as a whole.
    pub fn forget(&mut self, range: &Range<usize>) {
        let inside: Vec<_> = self
            .all
            .range((range.start, 0, 0)..=(range.end, usize::MAX, usize::MAX))
            .map(|(place, _)| *place)
            .filter(|(start, end, _)| *start > range.start && *end < range.end)
            .collect();
        for place in inside {
            self.all.remove(&place);
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn all_but_the_spliced_places_keeps_its_bytes() {
        let text = "one two three";
        let mut splices = Splices::default();
        splices.put(4..7, "2".to_owned());
        splices.put(7..7, "!".to_owned());
        splices.put(13..13, "?".to_owned());
        assert_eq!(splices.render(text, 0..13), "one 2! three?");
        assert_eq!(splices.render(text, 0..7), "one 2!");
        assert_eq!(splices.render(text, 7..13), " three?");
        assert_eq!(splices.render(text, 0..3), "one");
        splices.forget(&(3..8));
        assert_eq!(splices.render(text, 0..13), "one two three?");
    }
}
