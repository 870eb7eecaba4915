use super::layout::{Section, Way};
use super::splice::Splices;

/// The order of a recipe's sections where a new one has no neighbours of its kind.
const RANK: [&str; 7] = ["mount", "acceptance", "usual", "tool", "load", "frame", "waypoint"];

/// A piece is a section as it stood, or a new one.
#[derive(Debug, Clone)]
enum Piece {
    Stood(usize),
    New { way: Way, text: String },
}

/// The order in which the sections of a text follow each other.
pub(super) struct Order {
    sections: Vec<Section>,
    pieces: Vec<Piece>,
}

impl Order {
    pub fn of(sections: Vec<Section>) -> Self {
        let pieces = (0..sections.len()).map(Piece::Stood).collect();
        Self { sections, pieces }
    }

    /// Which item of the array `key` under `way` a piece belongs to.
    fn item(&self, piece: &Piece, way: &Way, key: &str) -> Option<usize> {
        let own = match piece {
            Piece::Stood(index) => &self.sections[*index].way,
            Piece::New { way, .. } => way,
        };
        let (name, item) = own.get(way.len())?;
        (own[..way.len()] == **way && name == key).then_some(*item)
    }

    /// Removes the tables under a key, with their comments.
    pub fn remove(&mut self, way: &Way, key: &str) {
        let gone: Vec<bool> = self.pieces.iter().map(|piece| self.item(piece, way, key).is_some()).collect();
        let mut gone = gone.into_iter();
        self.pieces.retain(|_| !gone.next().unwrap_or(false));
    }

    /// Adds tables of a kind that there is none of: before those that come later in a recipe.
    pub fn add(&mut self, key: &str, texts: Vec<String>) {
        let rank = |key: &str| RANK.iter().position(|other| *other == key);
        let later = |piece: &Piece| {
            let way = match piece {
                Piece::Stood(index) => &self.sections[*index].way,
                Piece::New { way, .. } => way,
            };
            way.first().is_some_and(|(other, _)| rank(other) > rank(key))
        };
        let at = self.pieces.iter().position(later).unwrap_or(self.pieces.len());
        let new = texts.into_iter().map(|text| Piece::New { way: vec![(key.to_owned(), usize::MAX)], text });
        self.pieces.splice(at..at, new.collect::<Vec<_>>());
    }

    /// Brings the tables of an array into another order. `of` tells for each which one it was, `stays` which of them stay where they
    /// are, `new` the texts of those that are new.
    pub fn rearrange(&mut self, way: &Way, key: &str, of: &[Option<usize>], stays: &[bool], new: &[String]) {
        let items: Vec<Option<usize>> = self.pieces.iter().map(|piece| self.item(piece, way, key)).collect();
        let count = items.iter().flatten().max().map_or(0, |most| most + 1);
        let mut groups: Vec<Vec<Piece>> = vec![Vec::new(); count];
        let mut last_of: Vec<Option<usize>> = vec![None; count];
        for (at, item) in items.iter().enumerate() {
            if let Some(item) = *item {
                groups[item].push(self.pieces[at].clone());
                last_of[item] = Some(at);
            }
        }
        // What comes before the first that stays, and behind each that does.
        let mut head: Vec<Piece> = Vec::new();
        let mut behind: Vec<Vec<Piece>> = vec![Vec::new(); count];
        let mut staying: Vec<bool> = vec![false; count];
        let mut after: Option<usize> = None;
        for (k, of) in of.iter().enumerate() {
            match of {
                Some(old) if stays[k] && *old < count => {
                    staying[*old] = true;
                    after = Some(*old);
                }
                _ => {
                    let mut own = [(key.to_owned(), usize::MAX)].to_vec();
                    own.splice(0..0, way.iter().cloned());
                    let pieces = match of {
                        Some(old) => groups.get(*old).cloned().unwrap_or_default(),
                        None => vec![Piece::New { way: own, text: new[k].clone() }],
                    };
                    after.map_or(&mut head, |after| &mut behind[after]).extend(pieces);
                }
            }
        }
        let mut head = Some(head);
        let any_stays = staying.contains(&true);
        let mut pieces = Vec::with_capacity(self.pieces.len() + of.len());
        for (at, (piece, item)) in std::mem::take(&mut self.pieces).into_iter().zip(&items).enumerate() {
            let Some(item) = *item else {
                pieces.push(piece);
                continue;
            };
            if staying[item] || !any_stays {
                pieces.extend(head.take().unwrap_or_default());
            }
            if staying[item] {
                pieces.push(piece);
                if last_of[item] == Some(at) {
                    pieces.append(&mut behind[item]);
                }
            }
        }
        self.pieces = pieces;
        if let Some(head) = head.filter(|head| !head.is_empty()) {
            self.pieces.extend(head);
        }
    }

    /// The whole text in its new order. Where sections meet that did not stand together, a blank line parts them if the text had
    /// such lines.
    pub fn assemble(&self, text: &str, eol: &str, splices: &Splices) -> String {
        let is_blank_at_end = |text: &str| text.is_empty() || text.ends_with("\n\n") || text.ends_with("\n\r\n");
        let mut headed = self.sections.iter().filter(|section| section.heading.is_some_and(|at| at > 0)).peekable();
        let spaced = headed.peek().is_none() || headed.any(|section| is_blank_at_end(&text[..section.range.start]));
        let mut out = String::with_capacity(text.len());
        let mut before: Option<usize> = None;
        for (place, piece) in self.pieces.iter().enumerate() {
            let (chunk, index) = match piece {
                Piece::Stood(index) => (splices.render(text, self.sections[*index].range.clone()), Some(*index)),
                Piece::New { text, .. } => (text.clone(), None),
            };
            let follows =
                index.is_some_and(|index| index == before.map_or(0, |before| before + 1)) && (place > 0) == before.is_some();
            before = index;
            if chunk.is_empty() {
                continue;
            }
            if !follows && !out.is_empty() {
                if !out.ends_with('\n') {
                    out += eol;
                }
                if spaced && !is_blank_at_end(&out) && !chunk.starts_with(['\n', '\r']) {
                    out += eol;
                }
            }
            out += &chunk;
        }
        let last_follows = before == self.sections.len().checked_sub(1);
        if !last_follows && !is_blank_at_end(text) {
            out.truncate(out.trim_end_matches(['\n', '\r']).len());
            out += eol;
        }
        out
    }
}
