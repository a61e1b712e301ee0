//! Percentiles over the stream tubes, by mass flow (model page, §7).

/// The value below which a share of the weight lies.
///
/// The tubes are sorted by value; each stands at the middle of its own weight, between two of them the value is
/// linear, beyond the first and last it is held.
///
/// | symbol | here | unit | shape |
/// | --- | --- | --- | --- |
/// | values | `values` | any | per stream tube |
/// | ṁᵢ | `weights` | kg/s | per stream tube |
#[must_use]
pub fn percentile(values: &[f64], weights: &[f64], share: f64) -> f64 {
    let mut order: Vec<usize> = (0..values.len()).collect();
    order.sort_by(|a, b| values[*a].total_cmp(&values[*b]));
    let total: f64 = weights.iter().sum();
    let (mut passed, mut before) = (0.0, None);
    for i in order {
        let middle = (passed + 0.5 * weights[i]) / total;
        if middle >= share {
            return match before {
                None => values[i],
                Some((place, value)) => value + (values[i] - value) * (share - place) / (middle - place),
            };
        }
        passed += weights[i];
        before = Some((middle, values[i]));
    }
    before.map_or(f64::NAN, |(_, value)| value)
}

#[cfg(test)]
mod tests {
    use super::*;
    use approx::assert_relative_eq;

    #[test]
    fn percentiles_of_a_uniform_spread_are_linear() {
        let values: Vec<f64> = (0..100).rev().map(|k| f64::from(k) + 0.5).collect();
        let weights = vec![1.0; 100];
        for share in [0.1, 0.5, 0.9] {
            assert_relative_eq!(percentile(&values, &weights, share), 100.0 * share, max_relative = 1e-12);
        }
    }
}
