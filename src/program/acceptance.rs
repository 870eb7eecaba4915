use crate::units::{Angle, Length, Share, Speed};

use super::Stages;

/// The acceptance criteria: the reserves and limits that a program is judged by.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Acceptance {
    /// Room that lines and arcs must leave of every joint's rate. A joint move runs at the share it was given.
    pub rate_reserve: Share,
    /// Room that lines and arcs must leave of every joint's acceleration.
    pub accel_reserve: Share,
    /// Room that holding must leave of every joint's continuous torque.
    pub holding_reserve: Share,
    /// Room that motion must leave of every joint's peak torque.
    pub moving_reserve: Share,
    /// Room that holding must leave of every brake.
    pub brake_reserve: Share,
    /// Room that the root mean square over the cycle must leave of every joint's continuous torque.
    pub rms_reserve: Share,
    /// Least distance to a turning joint's end.
    pub range_least: Angle,
    /// Least distance to a sliding joint's end.
    pub slide_least: Length,
    /// Smallest singular value allowed on lines and arcs, translations divided by the characteristic length.
    pub singular_least: f64,
    /// Tool speed that must remain in the worst direction on lines and arcs.
    pub tool_speed_left: Speed,
    /// Greatest speed of the TCP, if the cell has one.
    pub tcp_speed: Option<Speed>,
    /// Greatest speed of flange, wrist centre, elbow and the tool's named points, if the cell has one.
    pub point_speed: Option<Speed>,
    /// How far the least and the greatest value of a wrist joint on the cycle may be apart, for the cables' sake, if the cell says.
    pub wind_up: Option<Angle>,
    /// Overrides at which the first run is tried, one after the other.
    pub stages: Stages,
}

impl Default for Acceptance {
    /// What a recipe is judged by where it says nothing. Rates flagged from 90 % and torques from 80 % of the limit: common
    /// practice, no source.
    fn default() -> Self {
        Self {
            rate_reserve: Share::fraction(0.10),
            accel_reserve: Share::fraction(0.0),
            holding_reserve: Share::fraction(0.20),
            moving_reserve: Share::fraction(0.20),
            brake_reserve: Share::fraction(0.20),
            rms_reserve: Share::fraction(0.20),
            range_least: Angle::deg(3.0),
            slide_least: Length::mm(5.0),
            singular_least: 0.05,
            tool_speed_left: Speed::mm_per_s(100.0),
            tcp_speed: None,
            point_speed: None,
            wind_up: None,
            stages: Stages::default(),
        }
    }
}
