//! Completions and the manual page, made from the same definitions as the arguments themselves.

use std::io::Write;
use std::process::{Command, Output, Stdio};

fn elbowroom(arguments: &[&str]) -> String {
    let output = Command::new(env!("CARGO_BIN_EXE_elbowroom")).args(arguments).output().expect("the program starts");
    assert_eq!(output.status.code(), Some(0), "{output:?}");
    assert!(output.stderr.is_empty(), "{output:?}");
    String::from_utf8(output.stdout).expect("it prints UTF-8")
}

/// What a program says to a text on its standard input; `None` where it is not installed and need not be.
fn fed(program: &str, arguments: &[&str], text: &str) -> Option<Output> {
    let child = Command::new(program).args(arguments).stdin(Stdio::piped()).stdout(Stdio::piped()).stderr(Stdio::piped()).spawn();
    let mut child = match child {
        Ok(child) => child,
        Err(error) => {
            assert!(error.kind() == std::io::ErrorKind::NotFound, "{program}: {error}");
            assert!(program != "bash", "bash is needed");
            println!("{program} is not installed: left out");
            return None;
        }
    };
    let mut input = child.stdin.take().expect("piped");
    let text = text.to_owned();
    let writer = std::thread::spawn(move || input.write_all(text.as_bytes()));
    let output = child.wait_with_output().expect("it ends");
    let _ = writer.join();
    Some(output)
}

const COMMANDS: [&str; 12] =
    ["check", "explain", "plan", "trace", "sign", "verify", "compare", "page", "new", "completions", "manual", "help"];

#[test]
fn completions_parse_in_their_shells_and_know_every_command() {
    for shell in ["bash", "zsh", "fish"] {
        let text = elbowroom(&["completions", shell]);
        for command in COMMANDS {
            assert!(text.contains(command), "{shell}: {command}");
        }
        assert!(text.contains("tighten") && text.contains("changed"), "{shell}: options");
        let Some(output) = fed(shell, &["-n"], &text) else { continue };
        assert!(output.status.success() && output.stderr.is_empty(), "{shell}: {output:?}");
        // The check can fail.
        let output = fed(shell, &["-n"], &format!("{text}\nif (")).expect("installed");
        assert!(!output.status.success(), "{shell}");
    }
    for shell in ["elvish", "powershell"] {
        assert!(elbowroom(&["completions", shell]).contains("tighten"), "{shell}");
    }
}

#[test]
fn bash_completes_commands_and_options() {
    let script = elbowroom(&["completions", "bash"])
        + "\nCOMP_WORDS=(elbowroom ver); COMP_CWORD=1; _elbowroom elbowroom ver elbowroom; echo \"${COMPREPLY[*]}\"\n\
           COMP_WORDS=(elbowroom check --ch); COMP_CWORD=2; _elbowroom elbowroom --ch check; echo \"${COMPREPLY[*]}\"\n";
    let output = fed("bash", &["--norc"], &script).expect("bash is there");
    assert_eq!(String::from_utf8_lossy(&output.stdout), "verify\n--changed\n", "{output:?}");
}

#[test]
fn the_manual_is_whole_and_groff_has_nothing_to_warn_of() {
    let text = elbowroom(&["manual"]);
    for command in COMMANDS.iter().filter(|command| **command != "help") {
        assert!(text.contains(&format!(".SH \"ELBOWROOM {}\"", command.to_uppercase())), "{command}");
    }
    assert!(text.contains(".SH \"ELBOWROOM NEW RECIPE\""));
    let Some(output) = fed("groff", &["-man", "-Tutf8", "-ww", "-P-cbou"], &text) else { return };
    assert!(output.status.success(), "{output:?}");
    assert!(output.stderr.is_empty(), "{}", String::from_utf8_lossy(&output.stderr));
    let page = String::from_utf8_lossy(&output.stdout).split_whitespace().collect::<Vec<_>>().join(" ");
    assert!(page.contains("ELBOWROOM CHECK") && page.contains("Exit codes: 0 every recipe is clear"), "{page}");
    let output = fed("groff", &["-man", "-Tutf8", "-ww", "-P-cbou"], &format!("{text}\n.nonsense here\n")).expect("installed");
    assert!(!output.stderr.is_empty(), "groff warns of what it does not know");
}
