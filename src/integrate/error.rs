//! When the numerics fail: where, and what to try.

/// The integration of a section came to a stop that no limit of the spec explains.
#[derive(Clone, Debug, PartialEq, thiserror::Error)]
#[error("the integration of section `{section}` failed at z = {z} m: {reason}")]
pub struct NumericsError {
    /// The section.
    pub section: String,
    /// z from the inlet, in m.
    pub z: f64,
    /// The last step tried, in m.
    pub step: f64,
    /// Lowest and highest temperature of the stream tubes there, in K.
    pub temperatures: (f64, f64),
    /// What the integrator says.
    pub reason: String,
}

impl NumericsError {
    /// What to try.
    #[must_use]
    pub fn help(&self) -> &'static str {
        "give `limits.temperature.highest` a value that the fluid must not pass, use more `numerics.stream_tubes`, \
         or a tighter `numerics.relative_tolerance`; if it still fails, check rate constants and their units"
    }
}
