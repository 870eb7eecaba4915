//! Poses, Jacobians, drifts, holding torques and torques in motion beside those of the rigid-body library Pinocchio, which `tests/fixtures/arms.py` wrote to
//! `tests/fixtures/arms.json` from the same arm files, read by a reader of its own.

mod stand;

use std::collections::BTreeMap;
use std::path::Path;

use elbowroom::arm::Joints;
use elbowroom::dynamics::{Going, Wrench, holding_torque, moving_torque};
use elbowroom::files::read_arm;
use elbowroom::geometry::{M3, Pose, V3};
use elbowroom::kinematics::{Jacobian, Posture, drift};
use elbowroom::program::Carried;
use serde_json::Value;
use stand::near;

/// Share of the largest number of a list by which ours may differ.
const SLACK: f64 = 1e-9;

fn numbers(of: &Value, key: &str) -> Vec<f64> {
    let list = of[key].as_array().unwrap_or_else(|| panic!("{key} is a list"));
    list.iter().map(|number| number.as_f64().expect("a number")).collect()
}

fn vector(numbers: &[f64]) -> V3 {
    V3::from_column_slice(numbers)
}

/// Three rows of a homogeneous matrix.
fn pose(rows: &[f64]) -> Pose {
    let axes = M3::from_fn(|row, column| rows[4 * row + column]);
    Pose { axes, at: V3::new(rows[3], rows[7], rows[11]) }
}

fn rows(pose: &Pose) -> Vec<f64> {
    (0..3).flat_map(|row| [pose.axes[(row, 0)], pose.axes[(row, 1)], pose.axes[(row, 2)], pose.at[row]]).collect()
}

/// The largest difference of each list of numbers.
type Apart = BTreeMap<String, f64>;

fn assert_same(ours: &[f64], case: &Value, key: &str, name: &str, apart: &mut Apart) {
    let theirs = numbers(case, key);
    let most = theirs.iter().fold(1.0f64, |most, number| most.max(number.abs()));
    let same = ours.len() == theirs.len() && ours.iter().zip(&theirs).all(|(a, b)| near(*a, *b, SLACK * most));
    assert!(same, "{name}: {key}: {ours:?}, the fixture has {theirs:?}");
    let gap = apart.entry(key.to_owned()).or_default();
    *gap = ours.iter().zip(&theirs).fold(*gap, |most, (a, b)| most.max((a - b).abs()));
}

#[test]
fn arms_from_files_move_and_weigh_as_another_library_computes() {
    let top = Path::new(env!("CARGO_MANIFEST_DIR"));
    assert_eq!(compare(top, "tests/fixtures/arms.json").len(), 4);
}

/// By hand, where `ELBOWROOM_ARMS` names a folder that `arms.py --urdf` has filled: arms from open models.
#[test]
fn arms_from_open_models_move_and_weigh_as_another_library_computes() {
    let Some(folder) = std::env::var_os("ELBOWROOM_ARMS") else {
        let text = std::fs::read_to_string(Path::new(env!("CARGO_MANIFEST_DIR")).join("tests/fixtures/arms.json")).expect("there");
        let fixture: Value = serde_json::from_str(&text).expect("JSON");
        let runs = fixture["by_hand"].as_array().expect("the figures of the last run by hand");
        assert!(runs.len() >= 2);
        for run in runs {
            let apart = run["largest_difference"].as_object().expect("a table").values();
            assert!(apart.clone().count() >= 4 && apart.into_iter().all(|gap| gap.as_f64().expect("a number") < 1e-9), "{run}");
        }
        return;
    };
    for (name, joints, apart) in compare(Path::new(&folder), "arms.json") {
        println!("{name}: {joints} joints, largest differences {apart:?}");
    }
}

fn compare(top: &Path, fixture: &str) -> Vec<(String, usize, Apart)> {
    let text = |name: &str| std::fs::read_to_string(top.join(name)).unwrap_or_else(|fault| panic!("{name}: {fault}"));
    let fixture: Value = serde_json::from_str(&text(fixture)).expect("JSON");
    let arms = fixture["arms"].as_array().expect("a list of arms");
    let mut told = Vec::new();
    for entry in arms {
        let mut apart = Apart::new();
        let name = entry["file"].as_str().expect("a file's name");
        let arm = read_arm(&text(name), name).unwrap_or_else(|rejected| panic!("{rejected:?}"));
        let cases = entry["cases"].as_array().expect("a list of cases");
        assert_eq!(cases.len(), 6);
        for case in cases {
            let q = Joints::from_slice(&numbers(case, "q"));
            let (tool, load) = (numbers(case, "tool"), numbers(case, "load"));
            let carried = Carried {
                tcp: pose(&numbers(case, "tcp")),
                tool_mass: tool[0],
                tool_com: vector(&tool[1..]),
                load_mass: load[0],
                load_com: vector(&load[1..]),
                ..Carried::nothing()
            };
            let posture = Posture::at(arm.chain(), &q);
            let tcp = posture.tcp(&carried.tcp);
            assert_same(&rows(&tcp), case, "pose", name, &mut apart);
            let jacobian = Jacobian::at(arm.chain(), &posture, &tcp.at);
            assert_same(jacobian.columns().as_flattened(), case, "columns", name, &mut apart);
            assert_same(&drift(arm.chain(), &posture, &tcp.at, &numbers(case, "rates")), case, "drift", name, &mut apart);
            let gravity = vector(&numbers(case, "gravity"));
            assert_same(&holding_torque(arm.chain(), &posture, &carried, &gravity, None), case, "holding", name, &mut apart);
            let push = numbers(case, "push");
            let push = Wrench { force: vector(&push[..3]), torque: vector(&push[3..]) };
            let pushed = holding_torque(arm.chain(), &posture, &carried, &V3::zeros(), Some(&push));
            assert_same(&pushed, case, "pushed", name, &mut apart);
            let going = Going {
                rates: Joints::from_slice(&numbers(case, "rates")),
                accelerations: Joints::from_slice(&numbers(case, "accelerations")),
            };
            let moving = moving_torque(arm.chain(), &posture, &carried, &gravity, None, &going);
            assert_same(&moving, case, "moving", name, &mut apart);
        }
        told.push((name.to_owned(), arm.len(), apart));
    }
    told
}
