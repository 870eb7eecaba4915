use crate::geometry::{M3, Rotation};
use crate::units::Dimension;

/// Digits of a double that never lie; with more, the last one is only needed to come back to the same double.
const MOST_DIGITS: usize = 17;

/// How far the elements of an orientation may be off after it was written and read again, where no triple of angles gives the very
/// same one: a few last digits of a double.
const SAME_TURN: f64 = 1e-15;

/// How a number in a file becomes one in SI.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) enum Scale {
    /// As it stands.
    Plain,
    /// Divided by how many of people's units make one SI unit.
    Of(Dimension),
    /// Percent.
    Percent,
}

/// A figure is a number in SI that knows how a file has it.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct Figure {
    pub si: f64,
    pub scale: Scale,
}

impl Figure {
    /// What a number in a file means.
    fn read(self, written: f64) -> f64 {
        match self.scale {
            Scale::Plain => written,
            Scale::Of(dimension) => written / dimension.per_si(),
            Scale::Percent => written / 100.0,
        }
    }

    /// The number as a file has it: the one with the fewest digits that reads as this figure. Where none does (dividing by the
    /// scale skips some doubles), the nearest, which is one last digit off.
    pub fn written(self) -> f64 {
        let near = match self.scale {
            Scale::Plain => self.si,
            Scale::Of(dimension) => self.si * dimension.per_si(),
            Scale::Percent => self.si * 100.0,
        };
        let short = (0..MOST_DIGITS).filter_map(|digits| format!("{near:.digits$e}").parse::<f64>().ok());
        let beside = [near.next_down(), near.next_up(), near.next_down().next_down(), near.next_up().next_up()];
        let found = short.chain(beside).find(|written| self.read(*written) == self.si);
        // No negative zero: nobody writes one.
        found.unwrap_or(near) + 0.0
    }

    /// Whether a number in a file reads as this figure.
    pub fn is_written_as(self, literal: &str) -> bool {
        literal.replace('_', "").parse::<f64>().is_ok_and(|number| self.read(number) == self.si)
    }
}

/// A number as TOML has it, in the style of the one that stood there: a whole number stays without a point where there was none.
pub(super) fn literal(number: f64, before: Option<&str>) -> String {
    let text = number.to_string();
    let pointed = before.is_some_and(|old| !old.starts_with("0x") && old.contains(['.', 'e', 'E']));
    if pointed && !text.contains('.') { text + ".0" } else { text }
}

/// An orientation as a recipe holds it: a waypoint's as a rotation, a frame's as axes.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) enum Turn {
    Rotation(Rotation),
    Axes(M3),
}

/// How an orientation is written.
pub(super) enum Written {
    /// Roll, pitch, yaw in degrees.
    Rpy([f64; 3]),
    /// w, x, y, z.
    Quaternion([f64; 4]),
}

impl Turn {
    fn rotation(self) -> Rotation {
        match self {
            Self::Rotation(rotation) => rotation,
            Self::Axes(axes) => Rotation::from_matrix(&axes),
        }
    }

    /// How far another rotation is off, as the largest difference of an element; 0 for the very same.
    fn off(self, other: Rotation) -> f64 {
        match self {
            Self::Axes(axes) => (other.matrix() - axes).amax(),
            Self::Rotation(own) if own == other => 0.0,
            Self::Rotation(own) => {
                let differences = own.wxyz().into_iter().zip(other.wxyz()).map(|(a, b)| (a - b).abs());
                // The very same is only what compares equal.
                differences.fold(f64::MIN_POSITIVE, f64::max)
            }
        }
    }

    /// Whether no element of the other orientation is off by more.
    pub fn is_near(self, other: Self, most: f64) -> bool {
        self.off(other.rotation()) <= most
    }

    /// As a quaternion of full length.
    pub fn quaternion(self) -> [f64; 4] {
        self.rotation().kept().map(|element| element + 0.0)
    }

    /// The triple with the fewest decimals that reads as the very same orientation; else one that is off by no more than a few last
    /// digits; else a quaternion.
    pub fn written(self) -> Written {
        let degrees = self.rotation().rpy().map(f64::to_degrees);
        let rounded = |decimals: usize| degrees.map(|angle| format!("{angle:.decimals$}").parse().unwrap_or(angle) + 0.0);
        let triples = || (0..=13).map(rounded).chain([degrees]);
        let off = |triple: &[f64; 3]| self.off(Rotation::from_rpy_deg(*triple));
        let same = triples().find(|triple| off(triple) == 0.0);
        match same.or_else(|| triples().find(|triple| off(triple) <= SAME_TURN)) {
            Some(triple) => Written::Rpy(triple),
            None => Written::Quaternion(self.quaternion()),
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn what_was_typed_is_written_as_it_was_typed() {
        for number in [180.0, 0.25, -0.1, 62.345, 1e-7, 359.999, 123_456.789, 33.333_333, 0.0] {
            for scale in [Scale::Plain, Scale::Percent, Scale::Of(Dimension::Angle), Scale::Of(Dimension::Length)] {
                let figure = Figure { si: Figure { si: 0.0, scale }.read(number), scale };
                assert_eq!(figure.written(), number, "{scale:?}");
            }
        }
    }

    #[test]
    fn any_double_is_written_to_within_its_last_digit() {
        let mut si = 0.731_f64;
        let mut off = 0;
        for _ in 0..2000 {
            si = (si * 3.999).sin() * 7.0;
            for scale in [Scale::Percent, Scale::Of(Dimension::Angle), Scale::Of(Dimension::Length)] {
                let figure = Figure { si, scale };
                let back = figure.read(figure.written());
                assert!(back == si || back == si.next_up() || back == si.next_down(), "{si} became {back}");
                off += usize::from(back != si);
            }
        }
        assert!(off < 3000, "{off} of 6000 are one digit off");
    }

    #[test]
    fn an_orientation_is_written_as_the_triple_that_was_typed() {
        for triple in [[180.0, 0.0, -45.0], [180.0, -55.0, 0.0], [12.5, -33.25, 170.125], [0.0, 0.0, 0.0]] {
            let rotation = Rotation::from_rpy_deg(triple);
            for turn in [Turn::Rotation(rotation), Turn::Axes(rotation.matrix())] {
                let Written::Rpy(written) = turn.written() else { panic!("a triple gives it") };
                assert!(turn.off(Rotation::from_rpy_deg(written)) <= SAME_TURN, "{triple:?} {written:?}");
            }
            let Written::Rpy(written) = Turn::Rotation(rotation).written() else { panic!("a triple gives it") };
            assert_eq!(written, triple);
        }
    }
}
