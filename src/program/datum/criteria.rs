use crate::program::{Acceptance, Edit, Recipe, Stages, Usual};
use crate::units::{
    Acceleration, Angle, Dimension, Jerk, Length, Measure, Share, Speed, TurnAcceleration, TurnJerk, TurnRate, tidy, typed_share,
};

use super::Datum;
use super::sheet::Sheet;

pub(super) fn acceptance(recipe: &Recipe) -> Vec<Datum> {
    let a = &recipe.acceptance;
    let mut sheet = Sheet::of(a, |acceptance: Acceptance| Edit::Acceptance(Box::new(acceptance)));
    sheet.share("rate-reserve", a.rate_reserve, |a, v| a.rate_reserve = v);
    sheet.share("accel-reserve", a.accel_reserve, |a, v| a.accel_reserve = v);
    sheet.share("holding-reserve", a.holding_reserve, |a, v| a.holding_reserve = v);
    sheet.share("moving-reserve", a.moving_reserve, |a, v| a.moving_reserve = v);
    sheet.share("brake-reserve", a.brake_reserve, |a, v| a.brake_reserve = v);
    sheet.share("rms-reserve", a.rms_reserve, |a, v| a.rms_reserve = v);
    sheet.measure("range-least", a.range_least.measure(), |a, si| a.range_least = Angle::rad(si));
    sheet.measure("slide-least", a.slide_least.measure(), |a, si| a.slide_least = Length::m(si));
    sheet.measure("singular-least", Measure::si(a.singular_least, Dimension::Ratio), |a, si| a.singular_least = si);
    sheet.measure("tool-speed-left", a.tool_speed_left.measure(), |a, si| a.tool_speed_left = Speed::m_per_s(si));
    sheet.maybe("tcp-speed", (Dimension::Speed, a.tcp_speed.map(Speed::as_m_per_s)), |a, si| {
        a.tcp_speed = si.map(Speed::m_per_s);
    });
    sheet.maybe("point-speed", (Dimension::Speed, a.point_speed.map(Speed::as_m_per_s)), |a, si| {
        a.point_speed = si.map(Speed::m_per_s);
    });
    sheet.maybe("wind-up", (Dimension::Angle, a.wind_up.map(Angle::as_rad)), |a, si| a.wind_up = si.map(Angle::rad));
    let stages: Vec<String> = a.stages.shares().iter().map(|share| tidy(share.as_percent()).to_string()).collect();
    sheet.datum("stages", ("%", stages.join(" ")), |a, text| {
        a.stages = stages_of(text)?;
        Ok(())
    });
    sheet.listed()
}

/// Overrides in percent, parted by blanks or semicolons.
fn stages_of(text: &str) -> Result<Stages, String> {
    let parts =
        text.trim_end_matches('%').split([' ', ';']).map(|part| part.trim_end_matches([',', '%'])).filter(|p| !p.is_empty());
    let shares: Vec<Share> = parts.map(|part| typed_share(part).map(Share::fraction)).collect::<Result<_, _>>()?;
    Stages::of(&shares).ok_or_else(|| {
        format!("it must be 1 to {} overrides in %, rising, above 0 and at most 100, parted by blanks", Stages::MOST)
    })
}

pub(super) fn usual(recipe: &Recipe) -> Vec<Datum> {
    let u = &recipe.usual;
    let mut sheet = Sheet::of(u, |usual: Usual| Edit::Usual(Box::new(usual)));
    sheet.maybe("speed", (Dimension::Speed, u.speed.map(Speed::as_m_per_s)), |u, si| u.speed = si.map(Speed::m_per_s));
    sheet.measure("accel", u.accel.measure(), |u, si| u.accel = Acceleration::m_per_s2(si));
    sheet.measure("turn-speed", u.turn_speed.measure(), |u, si| u.turn_speed = TurnRate::rad_per_s(si));
    sheet.measure("turn-accel", u.turn_accel.measure(), |u, si| u.turn_accel = TurnAcceleration::rad_per_s2(si));
    sheet.maybe("jerk", (Dimension::Jerk, u.jerk.map(Jerk::as_m_per_s3)), |u, si| u.jerk = si.map(Jerk::m_per_s3));
    sheet.maybe("turn-jerk", (Dimension::TurnJerk, u.turn_jerk.map(TurnJerk::as_rad_per_s3)), |u, si| {
        u.turn_jerk = si.map(TurnJerk::rad_per_s3);
    });
    sheet.maybe_share("share", u.share, |u, v| u.share = v);
    sheet.share("accel-share", u.accel_share, |u, v| u.accel_share = v);
    sheet.listed()
}
