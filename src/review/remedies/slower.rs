use crate::checks::{Check, Kind};
use crate::program::{Arrive, Edit, Waypoint};
use crate::units::{Acceleration, Share, Speed, TurnAcceleration, TurnRate};

use super::greatest::{greatest, greatest_from_above};
use super::trial::{Aim, Nearest, Trial};
use super::{Change, Outcome, Short, size};

/// A quantity below this many steps is told in tenths of a step.
const FINE_BELOW: f64 = 20.0;

/// A figure that a remedy lowers: what it is, in the unit that people type, and how it is set.
pub(super) struct Dial {
    /// What it is now.
    pub now: f64,
    /// From where on lowering it changes anything: what is reached on the segment.
    pub reached: f64,
    /// The step in which it is lowered.
    pub step: f64,
    pub set: fn(&mut Arrive, f64),
    pub change: fn(f64, f64) -> Change,
}

/// The segment's speed, turning speed or share, whichever leads, as low as it must be to be clear with the reserve.
pub(super) fn slower(trial: &Trial) -> Outcome {
    if trial.segment().blend {
        return pace(trial);
    }
    let Some(dial) = speed_dial(trial) else { return Outcome::nothing() };
    turn_down(trial, &dial, size::slowed)
}

/// Lowers one figure of the segment until it is clear.
pub(super) fn turn_down(trial: &Trial, dial: &Dial, size: fn(f64) -> f64) -> Outcome {
    let Some(arrive) = trial.recipe().waypoints[trial.to()].arrive.clone() else { return Outcome::nothing() };
    let step = if dial.now / dial.step < FINE_BELOW { dial.step / 10.0 } else { dial.step };
    let edit = |value: f64| {
        let mut arrive = arrive.clone();
        (dial.set)(&mut arrive, value);
        trial.change(|waypoint: &mut Waypoint| waypoint.arrive = Some(arrive))
    };
    let value = |steps: u32| crate::units::tidy(f64::from(steps) * step);
    // What is at or above what is reached changes nothing; at the value itself it is known not to be clear.
    let above = (dial.now.min(dial.reached) / step - 1e-6).ceil().clamp(1.0, f64::from(u32::MAX)) as u32;
    let guess = (dial.now.min(dial.reached) * estimate(trial, size(0.5) < 1.0) / step).floor() as u32;
    let found = lowered(trial, above, guess, |steps| edit(value(steps)));
    let Ok(steps) = found else { return Outcome::short(found.unwrap_err()) };
    let to = value(steps);
    Outcome::of(trial.offer((dial.change)(dial.now, to), edit(to), size(to / dial.now), false))
}

/// The greatest number of steps that is clear, by an order of search that suits the finding.
fn lowered(trial: &Trial, above: u32, guess: u32, edit: impl Fn(u32) -> Edit) -> Result<u32, Short> {
    let mut nearest = Nearest::default();
    let mut clear = |steps: u32, aim: Aim| {
        let seen = trial.look(&edit(steps), aim);
        nearest.note(seen)
    };
    for aim in [Aim::Speeds, Aim::Check] {
        // Lower speeds are lower all along, but a joint's acceleration is a sum whose parts may have relieved each other.
        let falls = trial.finding.check.grows_with_speed() && trial.finding.check != Check::Accel;
        let found = if falls {
            greatest(above, guess, |steps| clear(steps, aim))
        } else {
            greatest_from_above(above, guess, |steps| clear(steps, aim))
        };
        if let Some(steps) = found {
            return Ok(steps);
        }
    }
    Err(nearest.short())
}

/// By which share the figure must fall by the scaling law: rates fall with the speed, accelerations with its square where the
/// speed is lowered and at most in step where only the acceleration is.
fn estimate(trial: &Trial, acceleration: bool) -> f64 {
    let Kind::Excess(excess) = &trial.finding.kind else { return 0.5 };
    let share = (1.0 - excess.reserve.as_fraction()) / (1.0 - excess.room.as_fraction());
    let share = if share.is_finite() { share.clamp(0.0, 1.0) } else { 0.5 };
    match trial.finding.check {
        Check::Accel if !acceleration => share.sqrt(),
        _ => share,
    }
}

/// What sets the pace of the segment.
fn speed_dial(trial: &Trial) -> Option<Dial> {
    let (segment, usual) = (trial.segment(), &trial.recipe().usual);
    let top = trial.judged.plan.arriving(trial.to())?.law.top_rate();
    let path = &trial.judged.plan.arriving(trial.to())?.path;
    match trial.recipe().waypoints[trial.to()].arrive.as_ref()? {
        Arrive::Joint { share, .. } => {
            let now = share.or(usual.share).map_or(100.0, Share::as_percent);
            Some(Dial {
                now,
                reached: now,
                step: 1.0,
                set: |arrive, percent| {
                    if let Arrive::Joint { share, .. } = arrive {
                        *share = Some(Share::percent(percent));
                    }
                },
                change: |from, to| Change::Share { from: Share::percent(from), to: Share::percent(to) },
            })
        }
        Arrive::Line(speed) | Arrive::Arc { speed, .. } => {
            let moving = speed.speed.or(usual.speed).filter(|_| path.length() > 0.0);
            let turning = speed.turn_speed.unwrap_or(usual.turn_speed);
            let lasts = |reached: f64, length: f64| if length > 0.0 { reached / length } else { f64::INFINITY };
            let by_moving = moving.map_or(f64::INFINITY, |speed| lasts(speed.as_m_per_s(), path.length()));
            let by_turning = lasts(turning.as_rad_per_s(), path.turn());
            let _ = segment;
            if by_moving <= by_turning {
                Some(Dial {
                    now: moving?.as_mm_per_s(),
                    reached: Speed::m_per_s(top * path.length()).as_mm_per_s(),
                    step: 1.0,
                    set: |arrive, mm| on_path(arrive, |speed| speed.speed = Some(Speed::mm_per_s(mm))),
                    change: |from, to| Change::Speed { from: Speed::mm_per_s(from), to: Speed::mm_per_s(to) },
                })
            } else {
                Some(Dial {
                    now: turning.as_deg_per_s(),
                    reached: TurnRate::rad_per_s(top * path.turn()).as_deg_per_s(),
                    step: 1.0,
                    set: |arrive, deg| on_path(arrive, |speed| speed.turn_speed = Some(TurnRate::deg_per_s(deg))),
                    change: |from, to| Change::TurnSpeed { from: TurnRate::deg_per_s(from), to: TurnRate::deg_per_s(to) },
                })
            }
        }
    }
}

/// What sets how hard the segment speeds up.
pub(super) fn accel_dial(trial: &Trial) -> Option<Dial> {
    let usual = &trial.recipe().usual;
    let path = &trial.judged.plan.arriving(trial.to())?.path;
    match trial.recipe().waypoints[trial.to()].arrive.as_ref()? {
        Arrive::Joint { accel_share, .. } => {
            let now = accel_share.unwrap_or(usual.accel_share).as_percent();
            Some(Dial {
                now,
                reached: now,
                step: 1.0,
                set: |arrive, percent| {
                    if let Arrive::Joint { accel_share, .. } = arrive {
                        *accel_share = Some(Share::percent(percent));
                    }
                },
                change: |from, to| Change::AccelShare { from: Share::percent(from), to: Share::percent(to) },
            })
        }
        Arrive::Line(speed) | Arrive::Arc { speed, .. } => {
            let moving = speed.accel.unwrap_or(usual.accel);
            let turning = speed.turn_accel.unwrap_or(usual.turn_accel);
            let of = |size: f64, length: f64| if length > 0.0 { size / length } else { f64::INFINITY };
            if of(moving.as_m_per_s2(), path.length()) <= of(turning.as_rad_per_s2(), path.turn()) {
                let now = moving.as_mm_per_s2();
                Some(Dial {
                    now,
                    reached: now,
                    step: 10.0,
                    set: |arrive, mm| on_path(arrive, |speed| speed.accel = Some(Acceleration::mm_per_s2(mm))),
                    change: |from, to| Change::Accel { from: Acceleration::mm_per_s2(from), to: Acceleration::mm_per_s2(to) },
                })
            } else {
                let now = turning.as_deg_per_s2();
                Some(Dial {
                    now,
                    reached: now,
                    step: 10.0,
                    set: |arrive, deg| on_path(arrive, |speed| speed.turn_accel = Some(TurnAcceleration::deg_per_s2(deg))),
                    change: |from, to| Change::TurnAccel {
                        from: TurnAcceleration::deg_per_s2(from),
                        to: TurnAcceleration::deg_per_s2(to),
                    },
                })
            }
        }
    }
}

fn on_path(arrive: &mut Arrive, how: impl FnOnce(&mut crate::program::PathSpeed)) {
    match arrive {
        Arrive::Line(speed) | Arrive::Arc { speed, .. } => how(speed),
        Arrive::Joint { .. } => {}
    }
}

/// Both segments that meet in a fly-by point slower by the same share.
fn pace(trial: &Trial) -> Outcome {
    let found = lowered(trial, 100, 50, |percent| paced(trial, percent));
    let Ok(percent) = found else { return Outcome::short(found.unwrap_err()) };
    let to = Share::percent(f64::from(percent));
    Outcome::of(trial.offer(Change::Pace { to }, paced(trial, percent), size::slowed(to.as_fraction()), false))
}

fn paced(trial: &Trial, percent: u32) -> Edit {
    let recipe = trial.recipe();
    let k = f64::from(percent) / 100.0;
    let slowed = |index: usize| {
        Edit::change(recipe, index, |waypoint| match &mut waypoint.arrive {
            Some(Arrive::Joint { share, .. }) => {
                let now = share.or(recipe.usual.share).map_or(1.0, Share::as_fraction);
                *share = Some(Share::fraction(now * k));
            }
            Some(Arrive::Line(speed) | Arrive::Arc { speed, .. }) => {
                speed.speed = speed.speed.or(recipe.usual.speed).map(|now| Speed::m_per_s(now.as_m_per_s() * k));
                let turning = speed.turn_speed.unwrap_or(recipe.usual.turn_speed).as_rad_per_s();
                speed.turn_speed = Some(TurnRate::rad_per_s(turning * k));
            }
            None => {}
        })
    };
    Edit::Together(vec![slowed(trial.to()), slowed(trial.to() + 1)])
}
