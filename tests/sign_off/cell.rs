//! A folder with recipes that the real program signs and verifies.

use std::path::{Path, PathBuf};
use std::process::{Command, Output, Stdio};

/// The recipe that is signed.
const NAME: &str = "lid-placing";

/// A folder with a recipe that is clear, and its arm.
pub struct Cell(pub tempfile::TempDir);

impl Cell {
    pub fn new() -> Self {
        let folder = tempfile::tempdir().expect("a folder");
        let from = Path::new(env!("CARGO_MANIFEST_DIR")).join("recipes");
        std::fs::create_dir(folder.path().join("arms")).expect("a folder");
        for name in ["lid-placing.toml", "housing-transfer.toml", "arms/four-axis-rrpr.toml", "arms/six-axis-12kg.toml"] {
            std::fs::copy(from.join(name), folder.path().join(name)).expect("copied");
        }
        Self(folder)
    }

    pub fn path(&self, name: &str) -> PathBuf {
        self.0.path().join(name)
    }

    pub fn text(&self, name: &str) -> String {
        std::fs::read_to_string(self.path(name)).expect("there")
    }

    pub fn write(&self, name: &str, text: &str) {
        std::fs::write(self.path(name), text).expect("written");
    }

    pub fn run(&self, arguments: &[&str]) -> Output {
        let program = env!("CARGO_BIN_EXE_elbowroom");
        Command::new(program).args(arguments).current_dir(self.0.path()).stdin(Stdio::null()).output().expect("runs")
    }

    /// Every answer that the template asks for.
    pub fn answers(&self, recipe: &str) -> String {
        let template = String::from_utf8(self.run(&["sign", recipe, "--template"]).stdout).expect("UTF-8");
        let uncommented = |line: &str| match line.strip_prefix("# ") {
            Some(rest) if rest.starts_with("[[confirm") || rest.starts_with("of =") || rest.starts_with("value =") => {
                rest.to_owned()
            }
            _ => line.replace("reason = \"\"", "reason = \"seen on the cell\""),
        };
        template.lines().map(|line| uncommented(line) + "\n").collect()
    }

    pub fn sign(&self, more: &[&str]) -> Output {
        self.write("answers.toml", &self.answers("lid-placing.toml"));
        let mut arguments = vec!["sign", "lid-placing.toml", "--reasons", "answers.toml", "--date", "2026-11-30"];
        arguments.extend(more);
        self.run(&arguments)
    }

    pub fn verify(&self, more: &[&str]) -> Output {
        let record = format!("{NAME}.signoff.toml");
        let mut arguments = vec!["verify", record.as_str()];
        arguments.extend(more);
        self.run(&arguments)
    }
}

pub fn told(output: &Output) -> String {
    format!("{}{}", String::from_utf8_lossy(&output.stdout), String::from_utf8_lossy(&output.stderr))
}

pub fn assert_code(output: &Output, code: i32, says: &str) {
    assert_eq!(output.status.code(), Some(code), "{}", told(output));
    assert!(told(output).contains(says), "{says}\n{}", told(output));
}
