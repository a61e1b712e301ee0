//! Values between stream tubes: a cubic spline over ⟨r²⟩ (model page, §7, point values and peak).

use crate::model::property::table::monotone_slopes;

/// A smooth extremum between two knots passes them by at most h²|y″|/8; a piece may by this share of h²|y″|, with
/// the smaller curvature of its two ends. Beside a jump the curvature on one side is next to nothing.
const EXCESS: f64 = 0.5;
/// Beyond the knots the end pieces go on, but no faster than this many times the last secant.
const BEYOND: f64 = 2.0;

/// A cubic spline with not-a-knot ends, limited where the values are not smooth on the scale of the knots.
///
/// At an inlet whose wall is colder than the feed, and where stream tubes of very unlike width hold values that
/// jump, a spline would report temperatures that nothing has. There a piece takes the slopes of a monotone cubic.
///
/// Source: de Boor (1978), A Practical Guide to Splines, ch. IV (from memory); the limit is our own.
#[derive(Clone, Debug)]
pub struct Spline {
    /// Where the values stand, ascending.
    x: Vec<f64>,
    /// Values.
    y: Vec<f64>,
    /// Slopes at the knots.
    slope: Vec<f64>,
}

impl Spline {
    /// The spline through points with ascending `x`, four or more.
    ///
    /// | symbol | here | unit | shape |
    /// | --- | --- | --- | --- |
    /// | ⟨r²⟩ | `x` | m² | knots |
    /// | values | `y` | any | knots |
    #[must_use]
    pub fn through(x: Vec<f64>, y: Vec<f64>) -> Self {
        let slope = slopes(&x, &y);
        let mut spline = Self { x, y, slope };
        spline.limit();
        spline
    }

    /// Gives every piece that overshoots the slopes of a monotone cubic, and those whom this makes overshoot.
    fn limit(&mut self) {
        let n = self.x.len();
        let widths: Vec<f64> = self.x.windows(2).map(|w| w[1] - w[0]).collect();
        let secants: Vec<f64> = self.y.windows(2).zip(&widths).map(|(w, h)| (w[1] - w[0]) / h).collect();
        let curvature = |k: usize| {
            let k = k.clamp(1, n - 2);
            2.0 * (secants[k] - secants[k - 1]) / (widths[k] + widths[k - 1])
        };
        // an end piece has one curvature at its own end: it takes the next one inwards for the other
        let both = |k: usize| match k {
            0 => (curvature(1), curvature(2)),
            k if k == n - 2 => (curvature(n - 2), curvature(n - 3)),
            k => (curvature(k), curvature(k + 1)),
        };
        // how far below and above the values at its ends a piece may go: only where it bends that way throughout
        let excess = |k: usize| {
            let (a, b) = both(k);
            let smaller = if a * b > 0.0 { a.abs().min(b.abs()) } else { 0.0 };
            let most = EXCESS * widths[k] * widths[k] * smaller;
            if a > 0.0 { (most, 0.0) } else { (0.0, most) }
        };
        let excess: Vec<(f64, f64)> = (0..n - 1).map(excess).collect();
        let mut limited: Option<Vec<f64>> = None;
        for _ in 0..n {
            let wild: Vec<usize> = (0..n - 1).filter(|k| self.overshoots(*k, excess[*k])).collect();
            if wild.is_empty() {
                return;
            }
            let monotone = limited.get_or_insert_with(|| monotone_slopes(&widths, &secants));
            for k in wild {
                self.slope[k] = monotone[k];
                self.slope[k + 1] = monotone[k + 1];
            }
        }
    }

    /// Whether a piece leaves the values at its ends by more than a smooth extremum does.
    fn overshoots(&self, k: usize, (below, above): (f64, f64)) -> bool {
        let (piece, h) = (self.piece(k), self.x[k + 1] - self.x[k]);
        let (low, high) = (self.y[k].min(self.y[k + 1]), self.y[k].max(self.y[k + 1]));
        let rounding = 1e-13 * high.abs().max(low.abs());
        let inside = piece.turning_points().into_iter().filter(|s| *s > 0.0 && *s < h);
        inside.map(|s| piece.at(s)).any(|value| value > high + above + rounding || value < low - below - rounding)
    }

    /// The value at x; beyond the knots the end pieces go on, no faster than `BEYOND` allows.
    #[must_use]
    pub fn at(&self, x: f64) -> f64 {
        let last = self.x.len() - 1;
        let k = self.x.partition_point(|knot| *knot <= x).clamp(1, last) - 1;
        let value = self.piece(k).at(x - self.x[k]);
        let (knot, inner) = match x {
            x if x < self.x[0] => (0, 1),
            x if x > self.x[last] => (last, last - 1),
            _ => return value,
        };
        let secant = (self.y[knot] - self.y[inner]) / (self.x[knot] - self.x[inner]);
        let most = BEYOND * (secant * (x - self.x[knot])).abs();
        self.y[knot] + (value - self.y[knot]).clamp(-most, most)
    }

    /// The largest value between two ends, and where it is.
    #[must_use]
    pub fn largest(&self, from: f64, to: f64) -> (f64, f64) {
        let mut best = (self.at(from), from);
        let mut try_at = |x: f64, value: f64| {
            if value > best.0 {
                best = (value, x);
            }
        };
        try_at(to, self.at(to));
        let n = self.x.len();
        for k in 0..n - 1 {
            let start = if k == 0 { from } else { self.x[k] };
            let end = if k == n - 2 { to } else { self.x[k + 1] };
            let piece = self.piece(k);
            try_at(self.x[k].clamp(from, to), self.at(self.x[k].clamp(from, to)));
            for s in piece.turning_points() {
                let x = self.x[k] + s;
                if x > start && x < end {
                    try_at(x, self.at(x));
                }
            }
        }
        best
    }

    fn piece(&self, k: usize) -> Piece {
        let h = self.x[k + 1] - self.x[k];
        let secant = (self.y[k + 1] - self.y[k]) / h;
        let (m, n) = (self.slope[k], self.slope[k + 1]);
        Piece { c: [self.y[k], m, (3.0 * secant - 2.0 * m - n) / h, (m + n - 2.0 * secant) / (h * h)] }
    }
}

/// c₀ + c₁ s + c₂ s² + c₃ s³.
struct Piece {
    c: [f64; 4],
}

impl Piece {
    fn at(&self, s: f64) -> f64 {
        ((self.c[3] * s + self.c[2]) * s + self.c[1]) * s + self.c[0]
    }

    /// Where the slope c₁ + 2c₂ s + 3c₃ s² is 0; infinite where there is no such place.
    fn turning_points(&self) -> [f64; 2] {
        let (a, half_b, c) = (3.0 * self.c[3], self.c[2], self.c[1]);
        let root = (half_b * half_b - a * c).max(0.0).sqrt();
        let q = -(half_b + root.copysign(half_b));
        [q / a, c / q]
    }
}

/// Slopes at the knots: continuous curvature inside, the third derivative continuous at the last knot but one.
fn slopes(x: &[f64], y: &[f64]) -> Vec<f64> {
    let n = x.len();
    let h: Vec<f64> = x.windows(2).map(|w| w[1] - w[0]).collect();
    let d: Vec<f64> = y.windows(2).zip(&h).map(|(w, h)| (w[1] - w[0]) / h).collect();
    let (mut lower, mut diagonal, mut upper, mut right) = (vec![0.0; n], vec![0.0; n], vec![0.0; n], vec![0.0; n]);
    for k in 1..n - 1 {
        lower[k] = h[k];
        diagonal[k] = 2.0 * (h[k - 1] + h[k]);
        upper[k] = h[k - 1];
        right[k] = 3.0 * (h[k] * d[k - 1] + h[k - 1] * d[k]);
    }
    let first = h[0] + h[1];
    diagonal[0] = h[1];
    upper[0] = first;
    right[0] = ((h[0] + 2.0 * first) * h[1] * d[0] + h[0] * h[0] * d[1]) / first;
    let (a, b) = (h[n - 2], h[n - 3]);
    let last = a + b;
    diagonal[n - 1] = b;
    lower[n - 1] = last;
    right[n - 1] = (a * a * d[n - 3] + (2.0 * last + a) * b * d[n - 2]) / last;
    for k in 1..n {
        let factor = lower[k] / diagonal[k - 1];
        diagonal[k] -= factor * upper[k - 1];
        right[k] -= factor * right[k - 1];
    }
    let mut slope = right;
    slope[n - 1] /= diagonal[n - 1];
    for k in (0..n - 1).rev() {
        slope[k] = (slope[k] - upper[k] * slope[k + 1]) / diagonal[k];
    }
    slope
}

#[cfg(test)]
mod tests {
    use super::*;
    use approx::assert_relative_eq;

    #[test]
    fn spline_is_exact_for_cubics_inside_and_beyond_its_knots() {
        let cubic = |x: f64| 1.0 - 2.0 * x + 0.5 * x * x + 0.3 * x * x * x;
        let x = vec![0.0, 0.4, 0.5, 1.3, 2.0, 2.1];
        let y = x.iter().map(|x| cubic(*x)).collect();
        let spline = Spline::through(x, y);
        for x in [-0.3, 0.0, 0.2, 0.45, 1.0, 2.05, 2.4] {
            assert_relative_eq!(spline.at(x), cubic(x), epsilon = 1e-12);
        }
    }

    #[test]
    fn largest_value_is_found_between_knots() {
        let x: Vec<f64> = (0..30).map(|k| 0.1 * f64::from(k)).collect();
        let y = x.iter().map(|x| x.sin()).collect();
        let (value, place) = Spline::through(x, y).largest(0.0, 2.9);
        // knots 0.1 apart: the spline's error is of order h⁴/384
        assert_relative_eq!(value, 1.0, epsilon = 1e-6);
        assert_relative_eq!(place, std::f64::consts::FRAC_PI_2, epsilon = 1e-4);
    }

    #[test]
    fn values_that_jump_across_knots_of_unlike_width_are_not_overshot() {
        // thirty thin tubes that differ by next to nothing, and a wide one that is warmer
        let mut x: Vec<f64> = (0..30).map(|k| 1e-6 * f64::from(k)).collect();
        let mut y: Vec<f64> = (0..30).map(|k| 373.0 + 1e-3 * f64::from(k * k % 7)).collect();
        x.extend([0.5, 1.0]);
        y.extend([378.0, 375.0]);
        let spline = Spline::through(x, y);
        let (value, place) = spline.largest(0.0, 1.0);
        assert_relative_eq!(value, 378.0, epsilon = 1e-12);
        assert_relative_eq!(place, 0.5, epsilon = 1e-12);
        assert!((0..1000).all(|k| spline.at(1e-3 * f64::from(k)) >= 373.0));
    }

    #[test]
    fn a_hot_feed_at_a_cold_wall_is_nowhere_hotter_than_the_feed() {
        for n in [4, 10, 40, 200] {
            let mut x: Vec<f64> = (0..n).map(|k| (f64::from(k) + 0.5) / f64::from(n)).collect();
            let mut y = vec![360.0; x.len()];
            x.push(1.0);
            y.push(314.0);
            let (value, _) = Spline::through(x, y).largest(0.0, 1.0);
            assert_relative_eq!(value, 360.0, max_relative = 1e-12);
        }
    }
}
