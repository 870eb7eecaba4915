use super::{Carried, Load, Recipe, Then, Tool};

/// What hangs on the flange around a waypoint.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Hanging<'a> {
    /// The tool on the segment that arrives there (and at the first waypoint); `None` for a bare flange.
    pub tool: Option<&'a Tool>,
    /// The load on that segment; what is taken at the waypoint comes after.
    pub before: Option<&'a Load>,
    /// The load when the waypoint is left.
    pub after: Option<&'a Load>,
}

impl Hanging<'_> {
    /// What the flange carries on the segment that arrives there.
    pub fn arriving(&self) -> Carried {
        Carried::of(self.tool, self.before)
    }

    /// What it carries when the waypoint is left.
    pub fn leaving(&self) -> Carried {
        Carried::of(self.tool, self.after)
    }
}

impl Recipe {
    /// What hangs on the flange around every waypoint, in order. Names that the recipe does not explain count as nothing.
    pub fn hanging(&self) -> impl Iterator<Item = Hanging<'_>> {
        let load = |name: &String| self.loads.iter().find(|load| &load.name == name);
        let mut tool = self.tools.first();
        let mut carries = self.carrying.as_ref().and_then(load);
        self.waypoints.iter().map(move |waypoint| {
            if let Some(name) = &waypoint.tool {
                tool = self.tools.iter().find(|tool| &tool.name == name);
            }
            let before = carries;
            match &waypoint.then {
                Some(Then::Take(name)) => carries = load(name),
                Some(Then::Release) => carries = None,
                None => {}
            }
            Hanging { tool, before, after: carries }
        })
    }

    /// What hangs on the flange around waypoint `index`, counted from 0; nothing where there is no such waypoint. For all waypoints
    /// in turn use [`Recipe::hanging`].
    pub fn hanging_at(&self, index: usize) -> Hanging<'_> {
        self.hanging().nth(index).unwrap_or(Hanging { tool: None, before: None, after: None })
    }
}
