//! A source file as the rules read it.

use std::path::Path;

/// One file of the source.
pub struct Source {
    /// Its path below the directory that was read, with slashes.
    pub path: String,
    /// All of it.
    pub text: String,
    /// Its code: comments and what stands in strings taken out, blanks around `::` too.
    pub code: String,
}

/// All `.rs` files below a directory of the project.
pub fn tree(dir: &str) -> Vec<Source> {
    let top = Path::new(env!("CARGO_MANIFEST_DIR")).join(dir);
    let mut open = vec![top.clone()];
    let mut sources = Vec::new();
    while let Some(dir) = open.pop() {
        for entry in std::fs::read_dir(&dir).expect("a directory that can be read") {
            let path = entry.expect("an entry that can be read").path();
            if path.is_dir() {
                open.push(path);
            } else if path.extension().is_some_and(|extension| extension == "rs") {
                let below = path.strip_prefix(&top).expect("below the top");
                let name = below.components().map(|part| part.as_os_str().to_string_lossy()).collect::<Vec<_>>().join("/");
                sources.push(Source::of(name, std::fs::read_to_string(&path).expect("a file in UTF-8")));
            }
        }
    }
    sources.sort_by(|a, b| a.path.cmp(&b.path));
    sources
}

impl Source {
    /// A file from its path below `src` and its text.
    pub fn of(path: String, text: String) -> Self {
        let code = code_of(&text);
        Self { path, text, code }
    }

    /// The top module that it belongs to; `None` for `lib.rs` and `main.rs`, which may name everything.
    pub fn module(&self) -> Option<&str> {
        let first = self.path.split('/').next()?.trim_end_matches(".rs");
        (!["lib", "main"].contains(&first)).then_some(first)
    }

    /// The crate's top modules that its code names, its own left out, each once.
    pub fn modules_named(&self, known: &[&str]) -> Vec<String> {
        let mut named: Vec<String> = after(&self.code, "crate::").flat_map(heads).collect();
        if self.path.matches('/').count() == 1 && self.path.ends_with("/mod.rs") {
            // From here `super` is the crate's top.
            named.extend(after(&self.code, "super::").flat_map(heads).filter(|head| known.contains(&head.as_str())));
        }
        named.retain(|name| Some(name.as_str()) != self.module() && !name.is_empty());
        named.sort();
        named.dedup();
        named
    }

    /// Whether its code names a crate (`name::` or `use name;`), a macro (`name!`), or a module of `std` (`std::name`).
    pub fn names(&self, name: &str) -> bool {
        if let Some(module) = name.strip_prefix("std::") {
            return after(&self.code, "std::").flat_map(heads).any(|head| head == module);
        }
        let used = [format!("use {name};"), format!("use {name} as ")].iter().any(|line| self.code.contains(line));
        used || after(&self.code, name).any(|rest| rest.starts_with("::") || rest.starts_with('!'))
    }
}

/// What follows each place where `name` stands as a whole word that no `::` leads to.
fn after<'a>(code: &'a str, name: &'a str) -> impl Iterator<Item = &'a str> {
    code.match_indices(name).filter_map(move |(at, _)| {
        let before = code[..at].chars().next_back();
        let whole = before.is_none_or(|c| !(c.is_alphanumeric() || c == '_' || c == ':'));
        whole.then(|| &code[at + name.len()..])
    })
}

/// The first names of what a path goes on with: `a::b` yields a, `{a::b, c::{d, e}}` yields a and c.
fn heads(rest: &str) -> Vec<String> {
    let word = |text: &str| text.trim_start().chars().take_while(|c| c.is_alphanumeric() || *c == '_').collect::<String>();
    let Some(inside) = rest.strip_prefix('{') else { return vec![word(rest)] };
    let mut heads = vec![word(inside)];
    let mut depth = 0;
    for (at, c) in inside.char_indices() {
        match c {
            '{' => depth += 1,
            '}' if depth == 0 => break,
            '}' => depth -= 1,
            ',' if depth == 0 => heads.push(word(&inside[at + 1..])),
            _ => {}
        }
    }
    heads
}

/// The text without comments, strings and character literals.
fn code_of(text: &str) -> String {
    let chars: Vec<char> = text.chars().collect();
    let starts = |at: usize, with: &str| with.chars().enumerate().all(|(k, c)| chars.get(at + k) == Some(&c));
    let mut code = String::new();
    let mut at = 0;
    while at < chars.len() {
        if starts(at, "//") {
            while at < chars.len() && chars[at] != '\n' {
                at += 1;
            }
        } else if starts(at, "/*") {
            let mut depth = 0;
            loop {
                if starts(at, "/*") {
                    depth += 1;
                    at += 2;
                } else if starts(at, "*/") {
                    depth -= 1;
                    at += 2;
                } else {
                    at += 1;
                }
                if depth == 0 || at >= chars.len() {
                    break;
                }
            }
        } else if chars[at] == 'r' && (starts(at, "r\"") || starts(at, "r#\"")) {
            let hashes = chars[at + 1..].iter().take_while(|c| **c == '#').count();
            let end: String = std::iter::once('"').chain(std::iter::repeat_n('#', hashes)).collect();
            at += 2 + hashes;
            while at < chars.len() && !starts(at, &end) {
                at += 1;
            }
            at += end.len();
        } else if chars[at] == '"' {
            at += 1;
            while at < chars.len() && chars[at] != '"' {
                at += if chars[at] == '\\' { 2 } else { 1 };
            }
            at += 1;
        } else if chars[at] == '\'' && chars.get(at + 1) == Some(&'\\') {
            at += 3;
            while at < chars.len() && chars[at] != '\'' {
                at += 1;
            }
            at += 1;
        } else if chars[at] == '\'' && chars.get(at + 2) == Some(&'\'') {
            at += 3;
        } else {
            code.push(chars[at]);
            at += 1;
        }
    }
    code
}
