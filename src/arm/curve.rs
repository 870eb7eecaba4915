/// A curve is a figure that depends on another one: straight lines between points in order of the first figure. Beyond its ends
/// it keeps the value of the end. Lives on the stack.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Curve {
    count: usize,
    points: [[f64; 2]; Curve::MOST],
}

impl Curve {
    /// The most points that a curve may have.
    pub const MOST: usize = 12;

    /// The curve through points in rising order of their first figure; `None` for no points, too many, or another order.
    pub fn through(points: &[[f64; 2]]) -> Option<Self> {
        let rising = points.windows(2).all(|pair| pair[0][0] < pair[1][0]);
        if points.is_empty() || points.len() > Self::MOST || !rising || !points.iter().flatten().all(|v| v.is_finite()) {
            return None;
        }
        let mut curve = Self { count: points.len(), points: [[0.0; 2]; Self::MOST] };
        curve.points[..points.len()].copy_from_slice(points);
        Some(curve)
    }

    /// The same value everywhere.
    pub fn level(value: f64) -> Self {
        let mut curve = Self { count: 1, points: [[0.0; 2]; Self::MOST] };
        curve.points[0][1] = value;
        curve
    }

    /// Its points.
    pub fn points(&self) -> &[[f64; 2]] {
        &self.points[..self.count]
    }

    /// Whether it is the same everywhere.
    pub fn is_level(&self) -> bool {
        self.points().iter().all(|point| point[1] == self.points[0][1])
    }

    /// Its value at `x`; NaN for NaN.
    #[inline]
    pub fn at(&self, x: f64) -> f64 {
        let points = self.points();
        let [first, last] = [points[0], points[points.len() - 1]];
        if x <= first[0] {
            return first[1];
        }
        if x >= last[0] {
            return last[1];
        }
        if x.is_nan() {
            return f64::NAN;
        }
        let next = points.partition_point(|point| point[0] <= x);
        let [a, b] = [points[next - 1], points[next]];
        a[1] + (b[1] - a[1]) * (x - a[0]) / (b[0] - a[0])
    }

    /// The least and the greatest slope that it has anywhere between `low` and `high`.
    pub fn slopes(&self, low: f64, high: f64) -> [f64; 2] {
        let points = self.points();
        let (mut least, mut most) = (f64::INFINITY, f64::NEG_INFINITY);
        let mut take = |slope: f64| (least, most) = (least.min(slope), most.max(slope));
        if low < points[0][0] || high > points[points.len() - 1][0] || points.len() == 1 {
            take(0.0);
        }
        for pair in points.windows(2) {
            if pair[0][0] <= high && pair[1][0] >= low {
                take((pair[1][1] - pair[0][1]) / (pair[1][0] - pair[0][0]));
            }
        }
        [least, most]
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_curve_runs_straight_between_its_points_and_level_beyond_them() {
        let curve = Curve::through(&[[0.0, 900.0], [120.0, 700.0], [175.0, 400.0]]).expect("in order");
        for (x, expected) in [(-5.0, 900.0), (0.0, 900.0), (60.0, 800.0), (120.0, 700.0), (147.5, 550.0), (300.0, 400.0)] {
            assert!((curve.at(x) - expected).abs() < 1e-12, "{x}");
        }
        assert!(curve.at(f64::NAN).is_nan());
        assert_eq!(Curve::level(7.0).at(3.0), 7.0);
    }

    #[test]
    fn slopes_cover_every_piece_that_is_touched() {
        let curve = Curve::through(&[[0.0, 0.0], [1.0, 2.0], [2.0, 1.0]]).expect("in order");
        assert_eq!(curve.slopes(0.2, 0.8), [2.0, 2.0]);
        assert_eq!(curve.slopes(0.5, 1.5), [-1.0, 2.0]);
        assert_eq!(curve.slopes(-0.5, 0.5), [0.0, 2.0]);
        assert_eq!(Curve::level(7.0).slopes(0.0, 1.0), [0.0, 0.0]);
    }

    #[test]
    fn points_out_of_order_make_no_curve() {
        assert_eq!(Curve::through(&[]), None);
        assert_eq!(Curve::through(&[[1.0, 0.0], [1.0, 2.0]]), None);
        assert_eq!(Curve::through(&[[0.0, f64::NAN]]), None);
    }
}
