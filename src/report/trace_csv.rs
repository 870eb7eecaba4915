use std::io::{self, Write};

use crate::arm::{Arm, MAX_JOINTS};
use crate::checks::{Check, Meter};
use crate::kinematics::{condition, singular_values};
use crate::motion::{Follower, Instant, Segment};
use crate::review::Judged;
use crate::units::{Angle, Dimension, Length, Measure, Seconds, Speed};

use super::TooManyRows;
use super::grid::{Doing, Row, rows};

/// Why a trace can't be written.
#[derive(Debug, thiserror::Error)]
pub enum TraceError {
    /// It would be too long.
    #[error(transparent)]
    TooManyRows(#[from] TooManyRows),
    /// It can't be written.
    #[error(transparent)]
    Io(#[from] io::Error),
}

/// Digits behind the point of angles, lengths and their rates, in people's units.
const FINE: usize = 6;
/// Digits behind the point of torques and forces.
const COARSE: usize = 4;
/// Digits behind the point of times and fractions.
const FINEST: usize = 9;

/// Writes the motion over the whole cycle as CSV, quoted as RFC 4180 has it: a row at every multiple of `every` from the start
/// of the cycle, and at every waypoint and corner of a speed law, one for each side where values differ. Of each joint value, rate,
/// acceleration, holding torque, and the torque in motion with rotor, friction and balancer. Poses are those of the
/// TCP in the base, angles roll, pitch, yaw about the fixed x, then y, then z axis. Beyond the place where a path is lost cells
/// are empty.
///
/// # Errors
/// Where it would be too long, or `out` fails.
pub fn trace_csv(judged: &Judged, every: Seconds, out: &mut dyn Write) -> Result<(), TraceError> {
    let rows = rows(&judged.plan, every)?;
    line(out, &headings(&judged.arm))?;
    for chunk in rows.chunk_by(|a, b| a.segment == b.segment) {
        let index = chunk[0].segment;
        let segment: &Segment = &judged.plan.segments[index];
        let meter = Meter::of(&judged.arm, segment, &judged.recipe.acceptance, judged.plan.gravity);
        let follower = Follower::of(&judged.arm, segment);
        for row in chunk {
            line(out, &cells(judged, segment, &meter, &follower, row))?;
        }
    }
    Ok(())
}

fn headings(arm: &Arm) -> Vec<String> {
    let mut headings: Vec<String> = ["time_s", "segment", "fraction"].map(str::to_owned).to_vec();
    for joint in arm.joints() {
        let kind = joint.kind;
        let name = &joint.name;
        headings.extend([kind.value(), kind.rate(), kind.acceleration()].map(|of| format!("{name}_{}", of.ascii())));
        headings.extend(["hold", "motion"].map(|what| format!("{name}_{what}_{}", kind.effort().ascii())));
    }
    headings.extend(
        [
            "sigma_min",
            "condition",
            "tool_speed_left_mm_s",
            "tcp_x_mm",
            "tcp_y_mm",
            "tcp_z_mm",
            "tcp_roll_deg",
            "tcp_pitch_deg",
            "tcp_yaw_deg",
            "tcp_speed_mm_s",
        ]
        .map(str::to_owned),
    );
    headings
}

fn cells(judged: &Judged, segment: &Segment, meter: &Meter, follower: &Follower, row: &Row) -> Vec<String> {
    let [u, rate, accel] = match row.doing {
        Doing::Moves(side) => segment.law.at(row.time, side),
        Doing::Waits => [0.0; 3],
        Doing::Stands | Doing::StandsAfter => [1.0, 0.0, 0.0],
    };
    let number = if row.doing == Doing::Waits { segment.to } else { segment.number() };
    let time = Seconds::s(judged.plan.starts[row.segment] + row.time).measure();
    let mut cells = vec![time.number(FINEST), number.to_string(), Measure::si(u, Dimension::Ratio).number(FINEST)];
    let followed = if u <= segment.followed_to() { follower.at(u) } else { None };
    match followed {
        Some(instant) => motion(judged, segment, meter, &instant, [rate, accel], row.doing, &mut cells),
        None => cells.resize(3 + 5 * judged.arm.len() + 10, String::new()),
    }
    cells
}

fn motion(
    judged: &Judged,
    segment: &Segment,
    meter: &Meter,
    instant: &Instant,
    [rate, accel]: [f64; 2],
    doing: Doing,
    cells: &mut Vec<String>,
) {
    let arm = &judged.arm;
    // Read with another `Carried` than the segment's own, the meter leaves out the process force, which belongs to the motion.
    let before = segment.carried;
    let carried = match (doing, &segment.carried_after) {
        (Doing::StandsAfter, Some(after)) => after,
        (Doing::Waits, _) => &before,
        _ => &segment.carried,
    };
    let reading = meter.read_with(instant, rate, accel, carried);
    for (j, joint) in arm.joints().iter().enumerate() {
        let values =
            [joint.value(reading[j]), joint.rate_of(reading[MAX_JOINTS + j]), joint.acceleration_of(reading[2 * MAX_JOINTS + j])];
        cells.extend(values.map(|value| value.number(FINE)));
        let moving = reading[meter.slots(Check::Moving).start + j];
        cells.extend([reading[3 * MAX_JOINTS + j], moving].map(|effort| joint.effort_of(effort).number(COARSE)));
    }
    let single = |check: Check| reading[meter.slots(check).start];
    let scaled = instant.jacobian.scaled_rows(arm.task(), arm.characteristic_length().m);
    let count = scaled.rows.min(scaled.columns);
    cells.push(Measure::si(single(Check::Singular), Dimension::Ratio).number(FINE));
    cells.push(Measure::si(condition(&singular_values(&scaled), count), Dimension::Ratio).number(FINE));
    cells.push(Speed::m_per_s(single(Check::SpeedLeft)).measure().number(FINE));
    cells.extend([0, 1, 2].map(|axis| Length::m(instant.tcp.at[axis]).measure().number(FINE)));
    cells.extend(instant.tcp.rotation().rpy().map(|angle| Angle::rad(angle).measure().number(FINE)));
    cells.push(Speed::m_per_s(single(Check::TcpSpeed)).measure().number(FINE));
}

/// One record, with a plain line feed at its end, so that line-wise tools find no stray character in the last column.
fn line(out: &mut dyn Write, cells: &[String]) -> io::Result<()> {
    let quoted: Vec<String> = cells.iter().map(|cell| quoted(cell)).collect();
    out.write_all(quoted.join(",").as_bytes())?;
    out.write_all(b"\n")
}

fn quoted(cell: &str) -> String {
    if cell.contains(['"', ',', '\r', '\n']) { format!("\"{}\"", cell.replace('"', "\"\"")) } else { cell.to_owned() }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn cells_with_commas_and_quotes_are_quoted() {
        assert_eq!(quoted("J1_deg"), "J1_deg");
        assert_eq!(quoted("turn, big"), "\"turn, big\"");
        assert_eq!(quoted("the \"elbow\""), "\"the \"\"elbow\"\"\"");
    }
}
