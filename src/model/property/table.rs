//! A property given by points: a monotone cubic between them, held outside.

use crate::model::number::Number;
use crate::spec::{About, Block, Bound, Key, Need, Place, Reported, SpecError, Takes};
use crate::units::Dimension;

use super::{KIND, VALID};

pub const ABOUT: About = About {
    kind: "table",
    summary: "points joined by a monotone cubic; outside them the first or last value holds, and the report says so",
    equation: "y = cubic Hermite polynomial between two points, with slopes that add no extremum",
    source: "Fritsch and Butland (1984), SIAM J. Sci. Stat. Comput. 5, 300 (from memory)",
    keys: &[
        KIND,
        Key {
            name: "points",
            takes: Takes::Points,
            need: Need::Required("{20 degC: 867 kg/m3, 60 degC: 829 kg/m3}"),
            meaning: "temperatures with values",
        },
        VALID,
    ],
};

/// A table as cubic pieces, SI.
#[derive(Clone, Debug, PartialEq)]
pub struct Table {
    /// Value at the first point, in the property's unit.
    first: f64,
    pieces: Vec<Piece>,
}

/// The rise of the property over one interval: y − y_start = c₁ s + c₂ s² + c₃ s³, s = T − start.
#[derive(Clone, Debug, PartialEq)]
struct Piece {
    start: f64,
    end: f64,
    /// y at the start.
    value: f64,
    c: [f64; 3],
}

impl Table {
    /// Reads the law from the block that names it.
    ///
    /// # Errors
    /// Fewer than two points, two at one temperature, a value that is negative or of the wrong dimension.
    pub fn read(block: &Block<'_>, subject: Dimension) -> Result<Self, Reported> {
        let fields = block.open_for(&ABOUT, subject);
        let points = fields.child("points").map(|child| read_points(&child, subject));
        let law = match points {
            Some(Ok(points)) => Some(Self::through(&points)),
            Some(Err(Reported)) => return Err(Reported),
            None => None,
        };
        super::skip_range(&fields);
        fields.finish(())?;
        law.ok_or(Reported)
    }

    /// The table through points (T in K, y), ascending in T.
    fn through(points: &[(f64, f64)]) -> Self {
        let widths: Vec<f64> = points.windows(2).map(|p| p[1].0 - p[0].0).collect();
        let secants: Vec<f64> = points.windows(2).map(|p| (p[1].1 - p[0].1) / (p[1].0 - p[0].0)).collect();
        let slopes = monotone_slopes(&widths, &secants);
        let piece = |k: usize| {
            let (h, d, m, n) = (widths[k], secants[k], slopes[k], slopes[k + 1]);
            Piece {
                start: points[k].0,
                end: points[k + 1].0,
                value: points[k].1,
                c: [m, (3.0 * d - 2.0 * m - n) / h, (m + n - 2.0 * d) / (h * h)],
            }
        };
        Self { first: points[0].1, pieces: (0..widths.len()).map(piece).collect() }
    }

    /// The first and the last temperature, in K.
    #[must_use]
    pub fn range(&self) -> (f64, f64) {
        let first = self.pieces.first().map_or(f64::NEG_INFINITY, |piece| piece.start);
        (first, self.pieces.last().map_or(f64::INFINITY, |piece| piece.end))
    }

    /// The property in one stream tube.
    ///
    /// | symbol | here | unit | shape |
    /// | --- | --- | --- | --- |
    /// | T | `temperature` | K | one stream tube |
    /// | y | returned | the property's | one stream tube |
    ///
    /// Each interval adds its rise up to T, so that no branch on T is needed; outside the points the first
    /// or last value is held.
    #[inline(always)]
    pub fn at<N: Number>(&self, temperature: N) -> N {
        let rise = |sum: N, piece: &Piece| {
            let s = temperature.at_least(piece.start).at_most(piece.end) - piece.start;
            sum + ((s * piece.c[2] + piece.c[1]) * s + piece.c[0]) * s
        };
        self.pieces.iter().fold(N::constant(self.first), rise)
    }

    /// ∫ y dT from one temperature to another.
    #[inline(always)]
    pub fn integral<N: Number>(&self, from: f64, to: N) -> N {
        self.primitive(to) - self.primitive(N::constant(from))
    }

    /// ∫ y dT from the first point.
    #[inline(always)]
    fn primitive<N: Number>(&self, to: N) -> N {
        let (first, last) = self.range();
        let before = (to.at_most(first) - first) * self.first;
        let within = |sum: N, piece: &Piece| {
            let s = to.at_least(piece.start).at_most(piece.end) - piece.start;
            let [c1, c2, c3] = piece.c;
            sum + (((s * (c3 / 4.0) + c2 / 3.0) * s + c1 / 2.0) * s + piece.value) * s
        };
        let after = (to.at_least(last) - last) * self.at(last);
        self.pieces.iter().fold(before, within) + after
    }
}

/// Slopes at the points: weighted harmonic means, 0 at an extremum; one-sided and held at the ends.
#[must_use]
pub fn monotone_slopes(widths: &[f64], secants: &[f64]) -> Vec<f64> {
    let n = secants.len();
    if n == 1 {
        return vec![secants[0]; 2];
    }
    let inner = |k: usize| {
        let (h, g, d, e) = (widths[k - 1], widths[k], secants[k - 1], secants[k]);
        if d * e <= 0.0 {
            return 0.0;
        }
        let (v, w) = (2.0 * g + h, g + 2.0 * h);
        (v + w) / (v / d + w / e)
    };
    let end = |h: f64, g: f64, d: f64, e: f64| {
        let slope = ((2.0 * h + g) * d - h * e) / (h + g);
        if slope * d <= 0.0 {
            0.0
        } else if d * e < 0.0 && slope.abs() > 3.0 * d.abs() {
            3.0 * d
        } else {
            slope
        }
    };
    let mut all = vec![end(widths[0], widths[1], secants[0], secants[1])];
    all.extend((1..n).map(inner));
    all.push(end(widths[n - 1], widths[n - 2], secants[n - 1], secants[n - 2]));
    all
}

fn read_points(block: &Block<'_>, subject: Dimension) -> Result<Vec<(f64, f64)>, Reported> {
    let mut points = Vec::new();
    let mut failed = block.node().entries().is_none();
    if failed {
        let _ = block.refuse(block.wrong_shape("points", "temperatures with values"));
    }
    for (key, location, point) in block.keyed() {
        let temperature = point.measure_key(key, location.clone(), Dimension::TEMPERATURE);
        let value = point.measure("points", subject, Bound::NotNegative);
        let at = Place { location, path: point.path().clone() };
        match (temperature, value) {
            (Ok(temperature), Ok(value)) => points.push((temperature, value, key, at)),
            _ => failed = true,
        }
    }
    points.sort_by(|a, b| a.0.total_cmp(&b.0));
    if let Some(twice) = points.windows(2).find(|pair| pair[0].0 >= pair[1].0) {
        let (_, _, key, at) = &twice[1];
        return Err(block.refuse(SpecError::PointTwice { at: at.clone(), temperature: (*key).to_owned() }));
    }
    if failed {
        return Err(Reported);
    }
    if points.len() < 2 {
        return Err(block.refuse(SpecError::TooFewPoints { at: block.place() }));
    }
    Ok(points.into_iter().map(|(temperature, value, ..)| (temperature, value)).collect())
}

#[cfg(test)]
mod tests {
    use super::*;
    use approx::assert_relative_eq;

    fn water_density() -> Table {
        // Kell (1975), J. Chem. Eng. Data 20, 97, rounded: density at 0.1 MPa [kg/m³]
        Table::through(&[(293.15, 998.2), (313.15, 992.2), (333.15, 983.2), (353.15, 971.8)])
    }

    #[test]
    fn table_meets_its_points_and_is_held_outside() {
        let table = water_density();
        for (temperature, value) in [(293.15, 998.2), (313.15, 992.2), (333.15, 983.2), (353.15, 971.8)] {
            assert_relative_eq!(table.at(temperature), value, max_relative = 1e-14);
        }
        assert_relative_eq!(table.at(200.0), 998.2, max_relative = 1e-14);
        assert_relative_eq!(table.at(900.0), 971.8, max_relative = 1e-14);
    }

    #[test]
    fn table_adds_no_extremum() {
        let table = Table::through(&[(300.0, 1.0), (310.0, 1.0), (311.0, 5.0), (340.0, 5.1)]);
        let values: Vec<f64> = (0..=400).map(|k| table.at(300.0 + 0.1 * f64::from(k))).collect();
        assert!(values.windows(2).all(|pair| pair[1] >= pair[0] - 1e-12));
    }

    #[test]
    fn integral_is_the_sum_of_thin_slices() {
        let table = water_density();
        let (from, to, n) = (280.0, 370.0, 200_000);
        let width = (to - from) / f64::from(n);
        let slices: f64 = (0..n).map(|k| table.at(from + width * (f64::from(k) + 0.5)) * width).sum();
        // midpoint rule: error of order width², 2e-7 of the curvature
        assert_relative_eq!(table.integral(from, to), slices, max_relative = 1e-9);
    }
}
