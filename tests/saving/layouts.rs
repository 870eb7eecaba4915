//! Recipes laid out as people may lay them out: every form that TOML has for a table, comments everywhere.

use super::drawn::Draw;

/// A value: as TOML has it, or a table.
enum Node {
    Plain(&'static str),
    Table(&'static [(&'static str, &'static str)]),
}
use Node::{Plain, Table};

type Pairs = &'static [(&'static str, Node)];

const MOUNT: Pairs = &[("xyz", Plain("[0, 0, 250.0]")), ("rpy", Plain("[0, 0, 90]"))];
const ACCEPTANCE: Pairs = &[("rate-reserve", Plain("12.5")), ("tcp-speed", Plain("4_500")), ("stages", Plain("[10, 50, 100]"))];
const TOOLS: &[Pairs] = &[
    &[
        ("name", Plain("'gripper'")),
        ("tcp", Table(&[("xyz", "[0, 0, 165]"), ("rpy", "[0, 0, 0]")])),
        ("mass", Plain("3.4")),
        ("com", Plain("[0, 0, 60]")),
    ],
    &[("name", Plain("\"second\"")), ("tcp", Table(&[("xyz", "[0, 10, 165]"), ("quaternion", "[0.5, 0.5, 0.5, 0.5]")]))],
];
const LOADS: &[Pairs] =
    &[&[("name", Plain("\"part\"")), ("mass", Plain("6.5")), ("com", Plain("[0, 0, -15]")), ("grounds", Plain("\"guess\""))]];
const FRAMES: &[Pairs] = &[&[("name", Plain("\"bench\"")), ("in", Plain("\"world\"")), ("xyz", Plain("[900, 0, 1e2]"))]];
const WAYPOINTS: &[Pairs] = &[
    &[("name", Plain("\"ready\"")), ("joints", Plain("[0, -20, -20.5, 0, 60, 0]"))],
    &[
        ("name", Plain("\"above\"")),
        ("pose", Table(&[("xyz", "[620, -640, 260]"), ("rpy", "[180, 0, -45]"), ("frame", "\"bench\"")])),
        ("arrive", Plain("\"joint\"")),
        ("share", Plain("70")),
    ],
    &[
        ("name", Plain("\"on part\"")),
        ("pose", Table(&[("xyz", "[620, -640, 110.0]"), ("quaternion", "[0, 1, 0, 0]")])),
        ("near", Plain("\"above\"")),
        ("arrive", Plain("\"line\"")),
        ("speed", Plain("250")),
        ("accel", Plain("800.0")),
        ("dwell", Plain("0.4")),
        ("then", Table(&[("take", "\"part\"")])),
    ],
    &[
        ("name", Plain("\"half way\"")),
        ("pose", Table(&[("xyz", "[400, 100, 490]"), ("rpy", "[180, -12.5, 30]")])),
        ("arrive", Plain("\"arc\"")),
        ("via", Table(&[("xyz", "[500, -300, 490]")])),
        ("speed", Plain("400")),
        ("push", Table(&[("force", "[0, 0, 40]"), ("frame", "\"tool\"")])),
    ],
    &[
        ("name", Plain("\"end\"")),
        ("joints", Plain("[10, -20, -20, 0, 60, 0]")),
        ("shown", Table(&[("xyz", "[1, 2, 3]")])),
        ("arrive", Plain("\"joint\"")),
        ("share", Plain("80")),
        ("then", Table(&[("release", "true")])),
    ],
];

/// Writes a text while numbering its comments.
pub struct Layout<'d> {
    draw: &'d mut Draw,
    text: String,
    comments: usize,
}

impl Layout<'_> {
    fn comment(&mut self, percent: usize) -> String {
        if !self.draw.chance(percent) {
            return String::new();
        }
        self.comments += 1;
        format!("# note{}, [x] = {{ \"it's\" }}", self.comments)
    }

    fn line(&mut self, line: &str) {
        let own = self.comment(15);
        if !own.is_empty() {
            self.text += &format!("{own}\n");
        }
        let behind = self.comment(25);
        self.text += line;
        if !behind.is_empty() {
            self.text += &format!("   {behind}");
        }
        self.text += "\n";
    }

    fn gap(&mut self) {
        if self.draw.chance(85) {
            self.text += "\n";
        }
        let alone = self.comment(20);
        if !alone.is_empty() {
            self.text += &format!("\n{alone}\n\n");
        }
    }

    fn pairs(&mut self, way: &str, pairs: Pairs) {
        let width = if self.draw.chance(50) { 14 } else { 0 };
        let indent = if self.draw.chance(20) { "  " } else { "" };
        let equals = if width == 0 && self.draw.chance(30) { "=" } else { " = " };
        let mut below = Vec::new();
        for (key, node) in pairs {
            match node {
                Plain(value) if value.starts_with('[') && self.draw.chance(25) => {
                    let inner = value.trim_matches(['[', ']']).replace(", ", ",\n    ");
                    let note = self.comment(60);
                    let comma = if self.draw.chance(50) { "," } else { "" };
                    self.line(&format!("{indent}{key:width$}{equals}[  {note}\n    {inner}{comma}\n]"));
                }
                Plain(value) => self.line(&format!("{indent}{key:width$}{equals}{value}")),
                Table(inner) => match self.draw.below(5) {
                    0 => below.push((*key, *inner)),
                    1 => {
                        for (name, value) in *inner {
                            self.line(&format!("{indent}{key}.{name}{equals}{value}"));
                        }
                    }
                    2 => {
                        let mut lines = String::new();
                        for (name, value) in *inner {
                            let note = self.comment(50);
                            lines += &format!("    {name} = {value}, {note}\n");
                        }
                        self.line(&format!("{indent}{key:width$}{equals}{{\n{lines}}}"));
                    }
                    _ => self.line(&format!("{indent}{key:width$}{equals}{}", braces(inner))),
                },
            }
        }
        for (key, inner) in below {
            self.line(&format!("[{way}.{key}]"));
            for (name, value) in inner {
                self.line(&format!("{name} = {value}"));
            }
        }
    }

    fn tables(&mut self, key: &str, all: &'static [Pairs]) {
        if key != "waypoint" && self.draw.chance(15) {
            return;
        }
        for pairs in all {
            self.gap();
            self.line(&format!("[[{key}]]"));
            self.pairs(key, pairs);
        }
    }

    /// The tables of one kind in one array between brackets.
    fn in_brackets(&mut self, key: &str, all: &[Pairs]) {
        let mut lines = String::new();
        let on_lines = self.draw.chance(60);
        for (index, pairs) in all.iter().enumerate() {
            let pairs: Vec<String> = pairs
                .iter()
                .map(|(key, node)| match node {
                    Plain(value) => format!("{key} = {value}"),
                    Table(inner) if self.draw.chance(30) => {
                        inner.iter().map(|(name, value)| format!("{key}.{name} = {value}")).collect::<Vec<_>>().join(", ")
                    }
                    Table(inner) => format!("{key} = {}", braces(inner)),
                })
                .collect();
            let comma = if index + 1 < all.len() || (on_lines && self.draw.chance(50)) { "," } else { "" };
            if on_lines {
                let (own, behind) = (self.comment(30), self.comment(30));
                let own = if own.is_empty() { own } else { format!("    {own}\n") };
                lines += &format!("{own}    {{ {} }}{comma} {behind}\n", pairs.join(", "));
            } else {
                lines += &format!("{{ {} }}{comma} ", pairs.join(", "));
            }
        }
        self.line(&if on_lines { format!("{key} = [\n{lines}]") } else { format!("{key} = [{}]", lines.trim_end()) });
    }
}

fn braces(inner: &[(&str, &str)]) -> String {
    let pairs: Vec<String> = inner.iter().map(|(name, value)| format!("{name} = {value}")).collect();
    format!("{{ {} }}", pairs.join(", "))
}

/// A recipe in a drawn layout, for the six-axis arm of the demonstration cell, and how many comments are in it.
pub fn layout(draw: &mut Draw) -> (String, usize) {
    let (crlf, mark, no_end, brackets) = (draw.chance(25), draw.chance(15), draw.chance(20), draw.chance(20));
    let mut layout = Layout { draw, text: String::new(), comments: 0 };
    for line in ["elbowroom-recipe = 1", "name = \"Drawn\"", "arm  = \"arm.toml\""] {
        layout.line(line);
    }
    if brackets {
        layout.in_brackets("tool", TOOLS);
        layout.in_brackets("load", LOADS);
        layout.in_brackets("frame", FRAMES);
        layout.in_brackets("waypoint", WAYPOINTS);
    }
    for (key, pairs) in [("mount", MOUNT), ("acceptance", ACCEPTANCE)] {
        if layout.draw.chance(70) {
            layout.gap();
            layout.line(&format!("[{key}]"));
            layout.pairs(key, pairs);
        }
    }
    if !brackets {
        layout.tables("frame", FRAMES);
        layout.tables("tool", TOOLS);
        layout.tables("load", LOADS);
        layout.tables("waypoint", WAYPOINTS);
    }
    layout.gap();
    let Layout { mut text, comments, .. } = layout;
    if no_end {
        text.truncate(text.trim_end().len());
    }
    if crlf {
        text = text.replace('\n', "\r\n");
    }
    if mark {
        text.insert(0, '\u{feff}');
    }
    (text, comments)
}
