use crate::geometry::V3;

/// A ball holds a vector that is not known exactly: everything within `radius` of `centre`.
#[derive(Debug, Clone, Copy)]
pub(super) struct Ball {
    pub centre: V3,
    pub radius: f64,
}

impl Ball {
    pub fn exact(centre: V3) -> Self {
        Self { centre, radius: 0.0 }
    }

    pub fn zero() -> Self {
        Self::exact(V3::zeros())
    }

    /// The largest norm in it.
    #[inline]
    pub fn most(&self) -> f64 {
        self.centre.norm() + self.radius
    }

    #[inline]
    pub fn plus(&self, other: &Self) -> Self {
        Self { centre: self.centre + other.centre, radius: self.radius + other.radius }
    }

    /// Cross product: |a| rb + ra |b| + ra rb bounds what the radii add.
    #[inline]
    pub fn cross(&self, other: &Self) -> Self {
        let radius = self.centre.norm() * other.radius + self.radius * other.most();
        Self { centre: self.centre.cross(&other.centre), radius }
    }

    /// Dot product: centre and radius.
    #[inline]
    pub fn dot(&self, other: &Self) -> (f64, f64) {
        let radius = self.centre.norm() * other.radius + self.radius * other.most();
        (self.centre.dot(&other.centre), radius)
    }

    /// Product with a number within `spread` of `value`.
    #[inline]
    pub fn times(&self, value: f64, spread: f64) -> Self {
        Self { centre: self.centre * value, radius: value.abs() * self.radius + spread * self.most() }
    }
}

/// A vector and its derivative by the path's fraction, both over one stretch of the path.
#[derive(Debug, Clone, Copy)]
pub(super) struct Moving {
    pub at: Ball,
    pub change: Ball,
}

impl Moving {
    pub fn zero() -> Self {
        Self { at: Ball::zero(), change: Ball::zero() }
    }

    /// A vector fixed in a body that turns at `turning`, over a stretch of half-width `half` around the middle, where the vector
    /// itself is known to within `slack` of its length.
    ///
    /// A first radius comes from the largest turning rate; with it the change is a product of balls; with that the radius is
    /// taken again, since a vector can't move farther than its change lasts.
    #[inline]
    pub fn fixed(vector: V3, turning: &Ball, half: f64, slack: f64) -> Self {
        let length = vector.norm();
        let first = (half * turning.most() * length).min(2.0 * length) + slack * length;
        let change = turning.cross(&Ball { centre: vector, radius: first });
        let radius = (half * change.most() + slack * length).min(first);
        Self { at: Ball { centre: vector, radius }, change }
    }

    #[inline]
    pub fn plus(&self, other: &Self) -> Self {
        Self { at: self.at.plus(&other.at), change: self.change.plus(&other.change) }
    }

    /// The radius taken again from the change of the whole: in a sum, changes may cancel where radii don't. `slack` in the
    /// vector's own unit is what the middle itself is unsure by.
    #[inline]
    pub fn tightened(mut self, half: f64, slack: f64) -> Self {
        self.at.radius = self.at.radius.min(half * self.change.most() + slack);
        self
    }

    #[inline]
    pub fn cross(&self, other: &Self) -> Self {
        Self { at: self.at.cross(&other.at), change: self.change.cross(&other.at).plus(&self.at.cross(&other.change)) }
    }

    /// The dot product's value in the middle, its change there, and how much that change may be off over the stretch.
    #[inline]
    pub fn dot(&self, other: &Self) -> Slope {
        let (a, ra) = self.change.dot(&other.at);
        let (b, rb) = self.at.dot(&other.change);
        Slope { value: self.at.centre.dot(&other.at.centre), change: a + b, spread: ra + rb }
    }
}

/// A number over a stretch: its value in the middle, its change there, and how much that change may be off.
#[derive(Debug, Clone, Copy, Default)]
pub(super) struct Slope {
    pub value: f64,
    pub change: f64,
    pub spread: f64,
}

impl Slope {
    #[inline]
    pub fn plus(self, other: Self) -> Self {
        Self { value: self.value + other.value, change: self.change + other.change, spread: self.spread + other.spread }
    }

    #[inline]
    pub fn times(self, factor: f64) -> Self {
        Self { value: self.value * factor, change: self.change * factor, spread: self.spread * factor.abs() }
    }

    /// The largest size over the stretch of half-width `half`.
    #[inline]
    pub fn most(self, half: f64) -> f64 {
        (self.value - half * self.change).abs().max((self.value + half * self.change).abs()) + half * self.spread
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::geometry::turn_about;

    #[test]
    fn the_product_rule_is_met_to_the_last_percent() {
        // Parallel excursions square to each other: |a x b - a0 x b0| = |a| rb + ra |b| + ra rb exactly.
        let a = Ball { centre: V3::x() * 2.0, radius: 0.3 };
        let b = Ball { centre: V3::y() * 3.0, radius: 0.2 };
        let bound = a.cross(&b).radius;
        let reached = (V3::x() * 2.3).cross(&(V3::y() * 3.2)) - V3::x().cross(&V3::y()) * 6.0;
        assert!(reached.norm() <= bound * (1.0 + 1e-12) && reached.norm() > 0.99 * bound);
        let (_, spread) = Ball { centre: V3::x() * 2.0, radius: 0.3 }.dot(&Ball { centre: V3::x() * 3.0, radius: 0.2 });
        assert!((2.3f64 * 3.2 - 6.0 - spread).abs() < 1e-12);
        let scaled = b.times(2.0, 0.1);
        assert!((2.1 * 3.2 - 6.0 - scaled.radius).abs() < 1e-12);
    }

    #[test]
    fn a_turning_vector_uses_its_bound() {
        // Turning evenly about an axis square to it, over a small stretch: it moves by half times rate times length.
        let (half, rate) = (1e-3, 2.0);
        let moving = Moving::fixed(V3::x(), &Ball::exact(V3::z() * rate), half, 0.0);
        let moved = (turn_about(&V3::z(), half * rate) * V3::x() - V3::x()).norm();
        assert!(moved <= moving.at.radius && moved > 0.99 * moving.at.radius);
        let change = V3::z().cross(&(turn_about(&V3::z(), half * rate) * V3::x())) * rate - moving.change.centre;
        assert!(change.norm() <= moving.change.radius && change.norm() > 0.99 * moving.change.radius);
    }

    #[test]
    fn a_sum_that_stands_still_has_no_radius_left() {
        let spin = Ball::exact(V3::z());
        let there = Moving::fixed(V3::x(), &spin, 0.1, 0.0);
        let back = Moving::fixed(-V3::x(), &spin, 0.1, 0.0);
        let sum = there.plus(&back);
        assert!(sum.at.radius > 0.1);
        assert!(sum.tightened(0.1, 0.0).at.radius < 0.1 * sum.at.radius + 0.1 * sum.change.radius + 1e-15);
    }
}
