use std::sync::Arc;

use elbowroom::checks::{Check, Watch};
use elbowroom::geometry::{Rotation, V3, turn_about};
use elbowroom::program::{Edit, Recipe, Taught, Waypoint};
use elbowroom::review::{Change, Ends, Judged, RemedyKind};

use crate::cases::{found, past_a_straight_wrist, remedy};

/// Directions of the dense search.
const DIRECTIONS: usize = 90;
/// How much shorter than the remedy a displacement of the dense search is: none may be clear.
const SHORTER: [f64; 3] = [0.95, 0.75, 0.45];

/// Directions spread evenly over the sphere by the golden angle (a published way; from memory).
pub fn directions() -> impl Iterator<Item = V3> {
    let golden = std::f64::consts::PI * (3.0 - 5f64.sqrt());
    (0..DIRECTIONS).map(move |k| {
        let z = 1.0 - (2.0 * k as f64 + 1.0) / DIRECTIONS as f64;
        let (s, c) = (golden * k as f64).sin_cos();
        let level = (1.0 - z * z).sqrt();
        V3::new(level * c, level * s, z)
    })
}

pub fn ends(which: Ends, to: usize) -> Vec<usize> {
    match which {
        Ends::Both => vec![to - 1, to],
        Ends::Start => vec![to - 1],
        Ends::End => vec![to],
    }
}

/// Whether a recipe with its waypoints changed has no finding at all on a segment that it did not have before elsewhere.
fn is_clear(judged: &Judged, to: usize, indices: &[usize], how: impl Fn(&mut Waypoint)) -> bool {
    let mut recipe: Recipe = (*judged.recipe).clone();
    for &index in indices {
        Edit::change(&judged.recipe, index, &how).apply(&mut recipe).expect("it is there");
    }
    let after = Judged::of(&judged.arm, &Arc::new(recipe), Some(judged), &Watch::default()).expect("nobody stops it");
    let own = after.survey.findings.iter().all(|finding| after.plan.segments[finding.segment].to != to);
    own && after.survey.findings.len() <= judged.survey.findings.iter().filter(|f| judged.plan.segments[f.segment].to != to).count()
}

#[test]
fn no_shift_of_a_dense_search_is_shorter_by_a_twentieth() {
    let judged = past_a_straight_wrist("[acceptance]\nsingular-least = 0.02\ntool-speed-left = 100");
    let finding = found(&judged, Check::Rate);
    let to = judged.plan.segments[finding.segment].to;
    let Change::Shift { by, ends: found } = remedy(&judged, &finding, RemedyKind::Shift).change else { panic!("a shift") };
    let shifted = |which: Ends, by: V3| {
        is_clear(&judged, to, &ends(which, to), |waypoint| {
            if let Taught::Pose { pose, .. } = &mut waypoint.taught {
                pose.at += by;
            }
        })
    };
    assert!(shifted(found, by * 1.01), "what is offered is clear by the same measure");
    for which in [Ends::Both, Ends::Start, Ends::End] {
        for direction in directions() {
            for share in SHORTER {
                let moved = direction * (share * by.norm());
                let clear = shifted(which, moved);
                assert!(!clear, "{which:?} by {moved:?}, {share} of {by:?}");
            }
        }
    }
}

#[test]
fn no_tilt_of_a_dense_search_is_smaller_by_a_twentieth() {
    let judged = past_a_straight_wrist("[acceptance]\nsingular-least = 0.02\ntool-speed-left = 100");
    let finding = found(&judged, Check::Rate);
    let to = judged.plan.segments[finding.segment].to;
    let Change::Tilt { angle, .. } = remedy(&judged, &finding, RemedyKind::Tilt).change else { panic!("a tilt") };
    for which in [Ends::Both, Ends::Start, Ends::End] {
        for direction in directions() {
            for share in SHORTER {
                let clear = is_clear(&judged, to, &ends(which, to), |waypoint| {
                    if let Taught::Pose { pose, .. } = &mut waypoint.taught {
                        let turned = turn_about(&direction, share * angle.as_rad()) * pose.rotation.expect("given").matrix();
                        pose.rotation = Some(Rotation::from_matrix(&turned));
                    }
                });
                assert!(!clear, "{which:?} about {direction:?}, {share} of {angle}");
            }
        }
    }
}
