//! The session without a terminal: where the cursor goes, and the recheck that stands behind it.

use std::sync::Arc;
use std::time::Duration;

use elbowroom::checks::{Verdict, Watch};
use elbowroom::files::{Opened, demo};
use elbowroom::program::Arrive;
use elbowroom::review::{Done, Judged, Recheck, Session};
use elbowroom::units::Speed;

fn judged() -> Judged {
    let Opened { arm, recipe, .. } = demo();
    Judged::of(&Arc::new(arm), &Arc::new(recipe), None, &Watch::default()).expect("nobody stops it")
}

fn slower(judged: &Judged) -> Judged {
    let mut recipe = judged.recipe.as_ref().clone();
    if let Some(Arrive::Line(speed)) = &mut recipe.waypoints[9].arrive {
        speed.speed = Some(Speed::mm_per_s(100.0));
    }
    Judged::of(&judged.arm, &Arc::new(recipe), Some(judged), &Watch::default()).expect("nobody stops it")
}

#[test]
fn a_session_opens_on_the_worst_instant_of_the_worst_finding() {
    let session = Session::open(judged());
    let worst = session.judged().survey.findings[0];
    assert_eq!(session.finding(), Some(&worst));
    assert_eq!(session.cursor().segment, worst.segment);
    assert_eq!(session.cursor().time, worst.worst().time);
    assert_eq!(worst.verdict, Verdict::Over);
}

#[test]
fn findings_come_one_after_the_other_and_around() {
    let mut session = Session::open(judged());
    let count = session.judged().survey.findings.len();
    for number in (2..=count).chain([1]) {
        assert!(session.go_to_next_finding());
        assert_eq!(session.finding_number(), Some(number));
    }
    assert!(session.go_to_previous_finding());
    assert_eq!(session.finding_number(), Some(count));
}

#[test]
fn a_segment_without_findings_shows_where_it_is_nearest_to_its_reserve() {
    let mut session = Session::open(judged());
    session.go_to_segment(3);
    assert_eq!((session.finding(), session.cursor().segment), (None, 3));
    let nearest = session.judged().survey.segments[3].nearest().expect("it moves").1.at.time;
    assert_eq!(session.cursor().time, nearest);
    session.go_by_segments(-99);
    assert_eq!(session.cursor().segment, 0);
    session.go_by_segments(99);
    assert_eq!(session.cursor().segment, session.segments() - 1);
}

#[test]
fn steps_stop_at_each_end_of_a_segment_before_they_go_on() {
    let mut session = Session::open(judged());
    session.go_to_time(0.0);
    let mut ends = Vec::new();
    for _ in 0..2000 {
        let cursor = session.cursor();
        if cursor.time >= session.lasts(cursor.segment) && ends.last() != Some(&cursor.segment) {
            ends.push(cursor.segment);
        }
        session.step(1);
    }
    assert_eq!(ends, (0..session.segments()).collect::<Vec<_>>());
    for _ in 0..2000 {
        session.step(-1);
    }
    assert_eq!(session.time(), 0.0);
}

#[test]
fn going_on_to_another_segment_selects_its_worst_finding() {
    let mut session = Session::open(judged());
    session.go_to_time(0.0);
    assert_eq!(session.finding(), None);
    let over = session.judged().plan.starts[8] + 0.1;
    session.go_to_time(over);
    assert_eq!(session.finding_number(), Some(1));
}

#[test]
fn a_newer_judgement_keeps_the_place() {
    let mut session = Session::open(judged());
    let share = session.cursor().time / session.lasts(8);
    let newer = slower(session.judged());
    session.renew(newer);
    assert_eq!(session.cursor().segment, 8);
    assert!((session.cursor().time / session.lasts(8) - share).abs() < 1e-9);
    assert!(session.finding().is_none_or(|finding| finding.segment == 8 && finding.verdict < Verdict::Over));
}

#[test]
fn a_recheck_says_the_same_as_the_check_itself() {
    let direct = judged();
    let mut recheck = Recheck::start().expect("a thread");
    let ticket = recheck.submit(&direct.arm, &direct.recipe, None);
    assert!(recheck.progress().is_some());
    let reply = recheck.replies().recv_timeout(Duration::from_secs(60)).expect("a reply");
    assert_eq!(reply.ticket, ticket);
    let Some(Done::Judged(there)) = recheck.accept(reply) else { panic!("not the newest") };
    assert!(there.survey.findings == direct.survey.findings && there.survey.doubts == direct.survey.doubts);
    assert_eq!(recheck.progress(), None);
}

#[test]
fn a_newer_request_stops_the_older_one() {
    let first = judged();
    let newer = Arc::clone(&slower(&first).recipe);
    let mut recheck = Recheck::start().expect("a thread");
    let tickets: Vec<_> = (0..20).map(|_| recheck.submit(&first.arm, &first.recipe, None)).collect();
    let last = recheck.submit(&first.arm, &newer, None);
    assert!(tickets.iter().all(|ticket| *ticket < last));
    let mut accepted = Vec::new();
    while accepted.is_empty() {
        let reply = recheck.replies().recv_timeout(Duration::from_secs(60)).expect("a reply");
        accepted.extend(recheck.accept(reply));
    }
    assert!(matches!(&accepted[0], Done::Judged(judged) if judged.recipe == newer));
}

#[test]
fn bounds_are_proved_closer_away_from_the_thread_that_asks() {
    let judged = judged();
    let mut recheck = Recheck::start().expect("a thread");
    recheck.tighten(&judged, 3);
    let reply = recheck.replies().recv_timeout(Duration::from_secs(60)).expect("a reply");
    let Some(Done::Closer(survey, closer)) = recheck.accept(reply) else { panic!("not what was asked for") };
    assert!(Arc::ptr_eq(&survey, &judged.survey) && closer.segment == 3);
    let gap = closer.largest_gap().expect("proved").1;
    assert!(gap <= 0.005 + 1e-9 && gap < judged.survey.segments[3].largest_gap().expect("proved").1, "{gap}");
}
