//! Nothing that can be told is left without its words on a narrow and on a usual terminal.

use std::fs;
use std::path::Path;

use elbowroom::checks::{Angles, Check, Doubt, Hung, Lengths};
use elbowroom::geometry::V3;
use elbowroom::review::{Change, Ends, Remedy, RemedyKind, check_words, doubt_text, remedies_text, remedy_title};
use elbowroom::units::{Acceleration, Angle, Length, Mass, Seconds, Share, Speed, TurnAcceleration, TurnRate};

use crate::cases::{READY, SIX, found, judged, past_a_straight_wrist, shown};

/// The parts of all snapshots of a kind: what a terminal of 40 and one of 80 columns shows.
fn snapshots(of: &str) -> Vec<[String; 2]> {
    let folder = Path::new(env!("CARGO_MANIFEST_DIR")).join("tests/words/snapshots");
    let paths = fs::read_dir(folder).expect("there are snapshots").map(|entry| entry.expect("readable").path());
    let own = paths.filter(|path| path.file_name().is_some_and(|name| name.to_string_lossy().starts_with(of)));
    own.filter_map(|path| {
        let text = fs::read_to_string(path).expect("readable");
        let (_, narrow) = text.split_once(&format!("\n{}\n", "-".repeat(40)))?;
        let (narrow, wide) = narrow.split_once(&format!("\n{}\n", "-".repeat(80)))?;
        Some([narrow, wide].map(|part| part.split_whitespace().collect::<Vec<_>>().join(" ")))
    })
    .collect()
}

#[test]
fn every_check_is_told_at_both_widths() {
    let kinds = snapshots("words__kinds__");
    for check in Check::ALL {
        let words = check_words(check);
        let told = |text: &String| text.split_once(" WHAT ").is_some_and(|(title, _)| title.contains(words));
        assert!(kinds.iter().any(|parts| parts.iter().all(told)), "{check:?}: no snapshot has \"{words}\" in its title");
    }
}

/// How the advice of each kind of remedy begins or what it must contain. A new kind does not compile without its own.
fn phrase(kind: RemedyKind) -> &'static str {
    match kind {
        RemedyKind::Slower => "Run segment",
        RemedyKind::Acceleration => "Speed up and slow down on segment",
        RemedyKind::FlyBy => "Pass \"corner\" within",
        RemedyKind::Dwell => "Stand ",
        RemedyKind::Turn => "about its own axis",
        RemedyKind::Tilt => "Tilt the tool by",
        RemedyKind::Shift => "Shift segment",
        RemedyKind::Via => "stop at a point on the way",
        RemedyKind::JointMove => "go by a joint move",
        RemedyKind::Posture => "Take another posture",
        RemedyKind::Override => "At an override of",
        RemedyKind::Load => "the heaviest load",
        RemedyKind::Centre => "centre of mass of the load",
        RemedyKind::Grip => "turned 90° in the grip",
        RemedyKind::MountHeight => "With the base 66 mm lower",
        RemedyKind::MountTilt => "With the base leaning",
    }
}

#[test]
fn every_kind_of_remedy_is_told_at_both_widths() {
    let remedies = snapshots("words__remedies__");
    for kind in RemedyKind::ALL {
        let words = phrase(kind);
        assert!(remedies.iter().any(|parts| parts.iter().all(|text| text.contains(words))), "{kind:?}: no \"{words}\"");
    }
    let mut kinds = RemedyKind::ALL.to_vec();
    kinds.sort_unstable();
    kinds.dedup();
    assert_eq!(kinds.len(), RemedyKind::ALL.len());
}

/// One of each change, and what it changes next in the list; a new one does not compile without a place in it.
fn changes() -> Vec<Change> {
    let next = |change: Option<&Change>| -> Option<Change> {
        let by = V3::new(0.010, 0.0, -0.004);
        let speed = Speed::mm_per_s;
        let deg = Angle::deg;
        Some(match change {
            None => Change::Speed { from: speed(400.0), to: speed(233.0) },
            Some(Change::Speed { .. }) => Change::TurnSpeed { from: TurnRate::deg_per_s(90.0), to: TurnRate::deg_per_s(61.0) },
            Some(Change::TurnSpeed { .. }) => Change::Share { from: Share::percent(80.0), to: Share::percent(57.0) },
            Some(Change::Share { .. }) => Change::Pace { to: Share::percent(57.0) },
            Some(Change::Pace { .. }) => {
                Change::Accel { from: Acceleration::mm_per_s2(4000.0), to: Acceleration::mm_per_s2(1230.0) }
            }
            Some(Change::Accel { .. }) => {
                Change::TurnAccel { from: TurnAcceleration::deg_per_s2(900.0), to: TurnAcceleration::deg_per_s2(410.0) }
            }
            Some(Change::TurnAccel { .. }) => Change::AccelShare { from: Share::percent(100.0), to: Share::percent(71.0) },
            Some(Change::AccelShare { .. }) => Change::FlyBy { waypoint: 1, from: Length::mm(20.0), to: Some(Length::mm(34.0)) },
            Some(Change::FlyBy { to: Some(_), .. }) => Change::FlyBy { waypoint: 1, from: Length::mm(20.0), to: None },
            Some(Change::FlyBy { to: None, .. }) => Change::Dwell { waypoint: 1, from: Seconds::s(0.0), to: Seconds::s(1.3) },
            Some(Change::Dwell { .. }) => Change::Turn { ends: Ends::Start, angle: deg(-12.3) },
            Some(Change::Turn { .. }) => Change::Tilt { ends: Ends::End, axis: V3::y(), angle: deg(1.3) },
            Some(Change::Tilt { .. }) => Change::Shift { ends: Ends::Both, by },
            Some(Change::Shift { .. }) => Change::Via { u: 0.5, by: V3::zeros() },
            Some(Change::Via { by: beside, .. }) if *beside == V3::zeros() => Change::Via { u: 0.5, by },
            Some(Change::Via { .. }) => Change::JointMove { share: Share::percent(11.0), leaves: Length::mm(45.2), keeps: false },
            Some(Change::JointMove { keeps: false, .. }) => {
                Change::JointMove { share: Share::percent(11.0), leaves: Length::mm(45.2), keeps: true }
            }
            Some(Change::JointMove { keeps: true, .. }) => {
                let posture = |j4: f64| elbowroom::arm::Joints::from_fn(6, |j| if j == 3 { j4 } else { 0.5 });
                Change::Posture { waypoint: 1, last: 2, from: posture(1.0), to: posture(-2.0) }
            }
            Some(Change::Posture { .. }) => Change::Override { share: Share::percent(58.0) },
            Some(Change::Override { .. }) => Change::Load { from: Mass::kg(6.5), to: Mass::kg(4.5) },
            Some(Change::Load { .. }) => Change::Centre { by },
            Some(Change::Centre { .. }) => Change::Grip { axis: 2, angle: deg(90.0) },
            Some(Change::Grip { .. }) => Change::MountHeight { by: Length::mm(-66.0) },
            Some(Change::MountHeight { .. }) => Change::MountTilt { axis: 1, angle: deg(-13.1) },
            Some(Change::MountTilt { .. }) => return None,
        })
    };
    let mut all = Vec::new();
    while let Some(change) = next(all.last()) {
        all.push(change);
    }
    all
}

/// The words of every change, made up; that found ones are true is for `tests/remedies`.
#[test]
fn every_change_has_a_title_and_a_sentence() {
    let judged = past_a_straight_wrist(400.0);
    let finding = found(&judged, Check::Rate);
    let (real, _) = elbowroom::review::found_by(&judged, &finding, &elbowroom::checks::Watch::default());
    let made_up: Vec<Remedy> = changes().into_iter().map(|change| Remedy { change, ..real[0].clone() }).collect();
    let titles: Vec<String> = made_up.iter().map(|remedy| remedy_title(&judged, remedy)).collect();
    let told = remedies_text(&judged, &finding, &made_up, &[]).into_iter().map(|mut paragraph| {
        paragraph.text = paragraph.text.split_inclusive(". ").next().expect("a sentence").trim().to_owned();
        paragraph
    });
    let told = elbowroom::review::Explanation { title: "every change".to_owned(), paragraphs: told.collect() };
    insta::assert_snapshot!("every_change", format!("{}\n{}", titles.join("\n"), shown(&told)));
}

/// One of each doubt, as the changes above.
fn doubts() -> Vec<Doubt> {
    let next = |doubt: Option<&Doubt>| -> Option<Doubt> {
        let gripper = || "gripper".to_owned();
        Some(match doubt {
            None => Doubt::Shown { waypoint: 1, gap: 0.012, turn: 0.05 },
            Some(Doubt::Shown { .. }) => Doubt::ToolWithoutMass { tool: gripper() },
            Some(Doubt::ToolWithoutMass { .. }) => Doubt::LoadWithoutMass { load: "housing".to_owned() },
            Some(Doubt::LoadWithoutMass { .. }) => Doubt::TakenTwice { waypoint: 1 },
            Some(Doubt::TakenTwice { .. }) => Doubt::NothingToRelease { waypoint: 1 },
            Some(Doubt::NothingToRelease { .. }) => Doubt::NoMotion { waypoint: 1 },
            Some(Doubt::NoMotion { .. }) => Doubt::MotionInPart,
            Some(Doubt::MotionInPart) => Doubt::NoInertia { thing: "tool \"gripper\"".to_owned() },
            Some(Doubt::NoInertia { .. }) => Doubt::OverRatedLoad { waypoint: 1, carried: 14.2, rated: 12.0 },
            Some(Doubt::OverRatedLoad { .. }) => Doubt::FlyByCut { waypoint: 1, radius: 0.08 },
            Some(Doubt::FlyByCut { .. }) => Doubt::FlyByStops { waypoint: 1 },
            Some(Doubt::FlyByStops { .. }) => Doubt::FarCentre { of: Hung::Tool(gripper()), distance: 0.65 },
            Some(Doubt::FarCentre { .. }) => Doubt::CentreAtFlange { tool: gripper() },
            Some(Doubt::CentreAtFlange { .. }) => Doubt::MountByName { word: "ceiling", lean: 0.0 },
            Some(Doubt::MountByName { .. }) => Doubt::LikeRadians { of: Angles::Joints, largest: 1.57 },
            Some(Doubt::LikeRadians { .. }) => Doubt::LikeMetres { of: Lengths::Positions, largest: 0.0009 },
            Some(Doubt::LikeMetres { .. }) => Doubt::SpeedBeyondArm { waypoint: 1, speed: 25.0, most: 14.3 },
            Some(Doubt::SpeedBeyondArm { .. }) => Doubt::LongWay { waypoint: 1, joint: 5, turns: 4.36, shorter: -1.92 },
            Some(Doubt::LongWay { .. }) => Doubt::WhichTurn { waypoint: 1, joint: 5, value: 5.0, other: -1.28 },
            Some(Doubt::WhichTurn { .. }) => Doubt::NotUnwound { joint: 5, turned: std::f64::consts::TAU },
            Some(Doubt::NotUnwound { .. }) => return None,
        })
    };
    let mut all = Vec::new();
    while let Some(doubt) = next(all.last()) {
        all.push(doubt);
    }
    all
}

#[test]
fn every_doubt_is_told_at_both_widths() {
    let next = "[[waypoint]]\nname = \"next\"\njoints = [10, -20, -20, 0, 60, 0]\narrive = \"joint\"\nshare = 40\n";
    let judged = judged(SIX, "", &format!("{READY}{next}"));
    let mut text = String::new();
    for width in [40, 80] {
        text += &format!("{}\n", "-".repeat(width));
        for doubt in doubts() {
            let lines = elbowroom::review::wrap(&doubt_text(&judged, &doubt), width);
            assert!(lines.iter().all(|line| unicode_width::UnicodeWidthStr::width(line.as_str()) <= width));
            text += &(lines.join("\n") + "\n");
        }
    }
    insta::assert_snapshot!("every_doubt", text);
}
