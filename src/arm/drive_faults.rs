use crate::units::{Fault, Field, tidy};

use super::{Curve, Joint};

/// Share of a bound by which a figure converted from people's units may miss it.
const ROUNDING: f64 = 1e-9;

/// What can't be about a joint's drive: rotor, friction, balancer, peak rating.
pub(super) fn faults(joint: &Joint, field: &Field, thing: &str) -> Vec<Fault> {
    let mut faults = Vec::new();
    let mut not_negative = |field: Field, what: &str, value: f64| {
        if !(value.is_finite() && value >= 0.0) {
            faults.push(Fault::new(field, format!("{thing}: {what} is {}; it must be 0 or more", tidy(value))));
        }
    };
    if let Some(rotor) = &joint.drive.rotor {
        not_negative(field.key("rotor").key("inertia"), "rotor inertia", rotor.inertia);
    }
    if let Some(friction) = &joint.drive.friction {
        not_negative(field.key("friction").key("steady"), "steady friction", friction.steady);
        not_negative(field.key("friction").key("viscous"), "viscous friction", friction.viscous / joint.kind.value().per_si());
    }
    if let Some(curve) = &joint.drive.balancer {
        faults.extend(uncovered(joint, curve, &field.key("balancer"), thing));
    }
    if let Some(torque) = &joint.torque
        && let Some(peak) = &torque.peak
    {
        faults.extend(peak_faults(joint, torque.holding, peak, &field.key("torque").key("peak"), thing));
    }
    faults
}

fn peak_faults(joint: &Joint, holding: f64, peak: &Curve, field: &Field, thing: &str) -> Vec<Fault> {
    let sign = joint.kind.effort().sign();
    let points = peak.points();
    let [first, last] = [points[0], points[points.len() - 1]];
    let fault = |says: String| vec![Fault::new(field.clone(), format!("{thing}: {says}"))];
    if let Some(bad) = points.iter().map(|point| point[1]).find(|value| !(value.is_finite() && *value > 0.0)) {
        return fault(format!("peak is {} {sign}; it must be above 0", tidy(bad)));
    }
    if first[1] < holding {
        return fault(format!("peak is {}; it must be at least holding, {holding}", first[1]));
    }
    if points.len() == 1 {
        return Vec::new();
    }
    let shown = |si: f64| tidy(joint.rate_of(si).shown());
    if first[0] != 0.0 {
        return fault(format!("peak begins at {}; it must begin at a rate of 0", shown(first[0])));
    }
    if let Some(pair) = points.windows(2).find(|pair| pair[1][1] > pair[0][1]) {
        return fault(format!("peak rises from {} to {} {sign}; it must not rise with the rate", pair[0][1], pair[1][1]));
    }
    if last[0] < joint.rate * (1.0 - ROUNDING) {
        return fault(format!("peak ends at {}; it must reach the joint's rate, {}", shown(last[0]), shown(joint.rate)));
    }
    Vec::new()
}

/// A balancer says what it does over the whole of the joint's range.
fn uncovered(joint: &Joint, curve: &Curve, field: &Field, thing: &str) -> Option<Fault> {
    let points = curve.points();
    let [low, high] = [points[0][0], points[points.len() - 1][0]];
    let slack = ROUNDING * (joint.range.low.abs() + joint.range.high.abs());
    let shown = |si: f64| tidy(joint.value(si).shown());
    (low > joint.range.low + slack || high < joint.range.high - slack).then(|| {
        Fault::new(
            field.clone(),
            format!(
                "{thing}: balancer is given from {} to {}; it must cover the range, {} to {}",
                shown(low),
                shown(high),
                shown(joint.range.low),
                shown(joint.range.high)
            ),
        )
    })
}
