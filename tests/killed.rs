//! The real program killed at random moments of a session of teaching: the recipe's file is always one whole version, and the next
//! start offers all but at most the last keystroke's edit.
//!
//! `ELBOWROOM_TEST_SEED` and `ELBOWROOM_TEST_KILLS` set another sequence of moments and another count.
#![cfg(unix)]

#[expect(dead_code, reason = "other tests use other parts")]
mod pty;
#[expect(dead_code, reason = "other tests use other parts")]
mod random;

use std::path::{Path, PathBuf};
use std::sync::atomic::{AtomicUsize, Ordering};
use std::time::{Duration, Instant};

use elbowroom::arm::Arm;
use elbowroom::files::{Aside, left_behind, open_arm, read_recipe};
use elbowroom::program::{Arrive, Recipe};
use portable_pty::CommandBuilder;
use pty::Running;
use random::Draw;

/// What is pressed, and what the screen then says.
const SESSION: [(&str, &str); 14] = [
    ("", "READY TO SIGN"),
    // The share of the second waypoint.
    ("e\x1b[B\r\x7f\x7f\x7f\x7f\x7f33\r", "-> 33 %; u undoes it"),
    ("u", "undone: waypoint 2"),
    ("r", "done again: waypoint 2"),
    ("\x7fs", "saved to"),
    // A step of the first joint, inserted under the name that is offered.
    ("j\x1b[C\r\r\r", "inserted"),
    ("je\x1b[B\r\x7f\x7f\x7f\x7f\x7f34\r", "-> 34 %; u undoes it"),
    ("\x7fs", "saved to"),
    ("u", "undone: waypoint 2"),
    ("u", "undone: waypoint 3"),
    ("r", "done again: waypoint 3"),
    // The last in the menu of stretches deletes.
    ("x\x1b[A\r", "deleted"),
    ("s", "saved to"),
    ("u", "undone: waypoint 2"),
];

/// A folder with the recipe and its arm.
struct Cell {
    folder: tempfile::TempDir,
    recipe: PathBuf,
}

impl Cell {
    fn new() -> Self {
        let folder = tempfile::tempdir().expect("a folder");
        let from = Path::new(env!("CARGO_MANIFEST_DIR")).join("recipes");
        std::fs::create_dir(folder.path().join("arms")).expect("a folder");
        for name in ["lid-placing.toml", "arms/four-axis-rrpr.toml"] {
            std::fs::copy(from.join(name), folder.path().join(name)).expect("copied");
        }
        Self { recipe: folder.path().join("lid-placing.toml"), folder }
    }

    fn open(&self) -> Running {
        let mut command = CommandBuilder::new(env!("CARGO_BIN_EXE_elbowroom"));
        command.arg(&self.recipe);
        command.env("XDG_STATE_HOME", self.folder.path().join("state"));
        command.env("XDG_CONFIG_HOME", self.folder.path().join("config"));
        Running::start(command)
    }

    fn text(&self) -> String {
        std::fs::read_to_string(&self.recipe).expect("the recipe is there and is text")
    }
}

/// The screen's words in one line, so that line ends don't matter.
fn words(running: &Running) -> String {
    running.text().split_whitespace().collect::<Vec<_>>().join(" ")
}

/// What can be told of a recipe's state: the share of the second segment, and the waypoints.
fn state(recipe: &Recipe) -> String {
    let names: Vec<&str> = recipe.waypoints.iter().map(|waypoint| waypoint.name.as_str()).collect();
    let share = recipe.waypoints.iter().find(|waypoint| waypoint.name == "above chute").map(|waypoint| match &waypoint.arrive {
        Some(Arrive::Joint { share, .. }) => format!("{share:?}"),
        other => panic!("{other:?}"),
    });
    format!("{share:?} {names:?}")
}

/// What the next start would show: what was left behind, where something was, else the file.
fn found(cell: &Cell, arm: &Arm) -> String {
    let aside = Aside::with(Some(cell.folder.path().join("state").join("elbowroom")));
    match left_behind(&cell.recipe, &aside) {
        Some(found) => {
            assert!(found.lost <= 1, "{} lines are lost", found.lost);
            state(&found.recipes("lid-placing.toml", arm).expect("what was left behind reads").1)
        }
        None => state(&read_recipe(&cell.text(), "lid-placing.toml", arm).expect("the file reads")),
    }
}

/// Runs the first `steps` of the session, each until the screen confirms it.
fn run(running: &mut Running, steps: usize, mut seen: impl FnMut()) {
    for (keys, says) in &SESSION[..steps] {
        running.press(keys);
        running.wait_for(says, |running| words(running).contains(says));
        seen();
    }
}

/// A moment of the session: so many steps were confirmed, and so long ago the next one was pressed.
#[derive(Clone, Copy)]
struct Moment {
    steps: usize,
    since: Duration,
}

fn kill(running: &mut Running) {
    running.signal("KILL");
    while !running.has_ended() {
        std::thread::sleep(Duration::from_millis(1));
    }
}

/// The text of the file and what would be found, after each number of steps, and how long a session takes.
fn undisturbed(arm: &Arm) -> (Vec<String>, Vec<String>, Duration) {
    let cell = Cell::new();
    let original = read_recipe(&cell.text(), "lid-placing.toml", arm).expect("it reads");
    let (mut texts, mut states) = (vec![cell.text()], vec![state(&original)]);
    let start = Instant::now();
    let mut running = cell.open();
    // While it runs its journal is nobody else's, so that states are told by what each step does.
    let share = |percent: &str| states_with(&original, Some(percent), &[]);
    let both = |percent: &str| states_with(&original, Some(percent), &["after above chute"]);
    let deleted = original.waypoints.iter().filter(|waypoint| waypoint.name != "above chute").count();
    run(&mut running, SESSION.len(), || texts.push(cell.text()));
    let took = start.elapsed();
    kill(&mut running);
    assert_eq!(deleted + 1, original.waypoints.len());
    let now = state(&original);
    let without = states_with(&original, None, &["after above chute"]);
    states.extend([
        now.clone(),
        share("33"),
        now,
        share("33"),
        share("33"),
        both("33"),
        both("34"),
        both("34"),
        both("33"),
        share("33"),
        both("33"),
        without.clone(),
        without,
        both("33"),
    ]);
    assert_eq!(found(&cell, arm), states[SESSION.len()]);
    (texts, states, took)
}

/// The state of the recipe with another share, or without that waypoint, and with waypoints put in where it stands.
fn states_with(original: &Recipe, percent: Option<&str>, new: &[&str]) -> String {
    let mut recipe = original.clone();
    let at = recipe.waypoint_named("above chute").expect("there");
    for name in new.iter().rev() {
        let mut waypoint = recipe.waypoints[at].clone();
        (*name).clone_into(&mut waypoint.name);
        recipe.waypoints.insert(at + 1, waypoint);
    }
    match percent {
        Some(percent) => {
            let share = elbowroom::units::Share::percent(percent.parse().expect("a number"));
            recipe.waypoints[at].arrive = Some(Arrive::Joint { share: Some(share), accel_share: None });
        }
        None => {
            recipe.waypoints.remove(at);
        }
    }
    state(&recipe)
}

fn setting(name: &str, usual: u64) -> u64 {
    std::env::var(name).map_or(usual, |text| text.parse().unwrap_or_else(|_| panic!("{name} is \"{text}\", which is no number")))
}

#[test]
fn a_kill_at_any_of_two_hundred_moments_leaves_one_whole_version_and_loses_at_most_the_last_edit() {
    let (seed, kills) = (setting("ELBOWROOM_TEST_SEED", 20_261_201), setting("ELBOWROOM_TEST_KILLS", 200) as usize);
    println!("ELBOWROOM_TEST_SEED={seed} ELBOWROOM_TEST_KILLS={kills}");
    let arm = open_arm(&Path::new(env!("CARGO_MANIFEST_DIR")).join("recipes/arms/four-axis-rrpr.toml")).expect("reads");
    let (texts, states, took) = undisturbed(&arm);
    let mut draw = Draw(seed);
    // Within the time that a step takes by itself: while it is on its way, being done, or just done.
    let longest = took.as_secs_f64() / SESSION.len() as f64;
    let moments: Vec<Moment> = (0..kills)
        .map(|_| Moment {
            steps: draw.between(0.0, SESSION.len() as f64) as usize,
            since: Duration::from_secs_f64(draw.between(0.0, longest)),
        })
        .collect();
    let (next, in_time) = (AtomicUsize::new(0), AtomicUsize::new(0));
    let one = |round: usize| {
        let cell = Cell::new();
        let Moment { steps: done, since } = moments[round];
        let mut running = cell.open();
        run(&mut running, done, || {});
        let (keys, says) = SESSION[done];
        running.press(keys);
        std::thread::sleep(since);
        in_time.fetch_add(usize::from(words(&running).contains(says)), Ordering::Relaxed);
        kill(&mut running);
        let either = done..=done + 1;
        let text = cell.text();
        assert!(texts[either.clone()].contains(&text), "round {round}, {done} steps: neither the old nor the new\n{text}");
        let found = found(&cell, &arm);
        assert!(states[either.clone()].contains(&found), "round {round}, {done} steps: {found}\nneither of {:#?}", &states[either]);
        // Now and then the next start itself is asked.
        if round.is_multiple_of(20) {
            next_start(&cell, &found);
        }
    };
    std::thread::scope(|scope| {
        for _ in 0..4 {
            scope.spawn(|| {
                while let Some(round) = Some(next.fetch_add(1, Ordering::Relaxed)).filter(|round| *round < kills) {
                    one(round);
                }
            });
        }
    });
    println!("{} of {kills} were killed when the screen had confirmed the last step", in_time.into_inner());
}

/// Starts the program again, takes up what it offers, saves, and finds the state in the file.
fn next_start(cell: &Cell, found: &str) {
    let mut running = cell.open();
    running.until("no arm connected");
    let offered = left_behind(&cell.recipe, &Aside::with(Some(cell.folder.path().join("state").join("elbowroom")))).is_some();
    if offered {
        running.until("never saved");
        running.press("\r");
        running.until("taken up again");
        running.press("q");
        running.wait_for("the end, or a question", |running| {
            running.text().contains("save and quit") || !running.text().contains("READY")
        });
        if running.text().contains("save and quit") {
            running.press("\r");
        }
    } else {
        running.until("READY");
        assert!(!running.text().contains("never saved"));
        running.press("q");
    }
    assert!(running.end().success());
    let arm = open_arm(&cell.folder.path().join("arms/four-axis-rrpr.toml")).expect("reads");
    assert_eq!(state(&read_recipe(&cell.text(), "lid-placing.toml", &arm).expect("the file reads")), found);
}
