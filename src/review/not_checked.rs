use super::Judged;

/// What this program did not judge about a recipe, a sentence each. Stands wherever a verdict stands.
pub fn not_checked(judged: &Judged) -> Vec<String> {
    let _ = judged;
    [
        "Clearance: whether arm, tool, part or cables touch anything, themselves included.",
        "Stopping time and distance, and the separation of people from the arm.",
        "Safeguards, interlocks, emergency stops and the cell's risk assessment.",
        "Torque in motion: only what holding still asks is judged.",
        "Brakes, gears, heat and wear.",
        "Cables and hoses: how they wind and pull.",
        "The grip: whether the tool holds the part.",
        "The task program's logic, signals and waiting times.",
        "How the first waypoint is reached.",
        "Whether the cell runs the waypoints, tool and load that stand in this recipe.",
    ]
    .map(str::to_owned)
    .to_vec()
}
