//! What a quantity is: the exponents of five base quantities, and how its numbers are to be taken.

use super::names;
use std::fmt;

/// Exponents closer than this are the same: a fitted order such as 1.333 must meet 4/3.
const SAME_EXPONENT: f64 = 5e-3;

/// Tells quantities apart that share their exponents but not the units allowed.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Role {
    /// Nothing but its exponents; of temperatures and pressures, a difference.
    Plain,
    /// A temperature on its scale, where degC and degF have an offset.
    Point,
    /// A pressure counted from vacuum, where barg and psig have an offset.
    Level,
    /// An angle, without exponents but with a unit.
    Angle,
}

/// Exponents of length, mass, time, temperature and amount, decimal ones allowed, and the role
/// that tells a temperature from a difference, a pressure level from a difference, an angle from a
/// ratio. Exponents are compared within 5e-3.
#[derive(Clone, Copy, Debug)]
pub struct Dimension {
    /// Of length, mass, time, temperature, amount; single precision is far finer than the play in
    /// comparing them, and keeps errors that carry two dimensions small.
    exponents: [f32; 5],
    role: Role,
}

impl Dimension {
    /// A fraction, a ratio, a count: a bare number, % or ppm.
    pub const RATIO: Self = Self::new(0.0, 0.0, 0.0, 0.0, 0.0);
    /// An angle (rad); a bare number will not do.
    pub const ANGLE: Self = Self::RATIO.with(Role::Angle);
    /// Length (m).
    pub const LENGTH: Self = Self::new(1.0, 0.0, 0.0, 0.0, 0.0);
    /// Area (m2).
    pub const AREA: Self = Self::LENGTH.to_power(2.0);
    /// Volume (m3).
    pub const VOLUME: Self = Self::LENGTH.to_power(3.0);
    /// Mass (kg).
    pub const MASS: Self = Self::new(0.0, 1.0, 0.0, 0.0, 0.0);
    /// Time (s).
    pub const TIME: Self = Self::new(0.0, 0.0, 1.0, 0.0, 0.0);
    /// Amount of substance (mol).
    pub const AMOUNT: Self = Self::new(0.0, 0.0, 0.0, 0.0, 1.0);
    /// A difference of temperatures (K), also the B of a law exp(B/T); `degC` is refused.
    pub const TEMPERATURE_DIFFERENCE: Self = Self::new(0.0, 0.0, 0.0, 1.0, 0.0);
    /// A temperature on its scale (K); `degC` and `degF` carry their offset.
    pub const TEMPERATURE: Self = Self::TEMPERATURE_DIFFERENCE.with(Role::Point);
    /// Force (N).
    pub const FORCE: Self = Self::MASS.times(Self::ACCELERATION);
    /// A difference of pressures (Pa); `barg` and `psig` are refused.
    pub const PRESSURE: Self = Self::FORCE.over(Self::AREA);
    /// A pressure counted from vacuum (Pa); `barg` and `psig` are allowed.
    pub const PRESSURE_LEVEL: Self = Self::PRESSURE.with(Role::Level);
    /// A stress (Pa), the same as a difference of pressures.
    pub const STRESS: Self = Self::PRESSURE;
    /// Velocity (m/s).
    pub const VELOCITY: Self = Self::LENGTH.over(Self::TIME);
    /// Acceleration (m/s2).
    pub const ACCELERATION: Self = Self::VELOCITY.over(Self::TIME);
    /// Mass flow (kg/s).
    pub const MASS_FLOW: Self = Self::MASS.over(Self::TIME);
    /// Mass flow per area (kg/(m2 s)).
    pub const MASS_FLUX: Self = Self::MASS_FLOW.over(Self::AREA);
    /// Volume flow (m3/s).
    pub const VOLUME_FLOW: Self = Self::VOLUME.over(Self::TIME);
    /// Density (kg/m3).
    pub const DENSITY: Self = Self::MASS.over(Self::VOLUME);
    /// Slope of a density over temperature (kg/(m3 K)).
    pub const DENSITY_SLOPE: Self = Self::DENSITY.over(Self::TEMPERATURE_DIFFERENCE);
    /// Concentration (mol/m3).
    pub const CONCENTRATION: Self = Self::AMOUNT.over(Self::VOLUME);
    /// Inverse of a concentration (m3/mol).
    pub const PER_CONCENTRATION: Self = Self::CONCENTRATION.to_power(-1.0);
    /// Rate of a reaction (mol/(m3 s)).
    pub const REACTION_RATE: Self = Self::CONCENTRATION.over(Self::TIME);
    /// Molar mass (kg/mol).
    pub const MOLAR_MASS: Self = Self::MASS.over(Self::AMOUNT);
    /// Amount per mass (mol/kg).
    pub const AMOUNT_PER_MASS: Self = Self::AMOUNT.over(Self::MASS);
    /// Energy (J).
    pub const ENERGY: Self = Self::FORCE.times(Self::LENGTH);
    /// Energy per amount (J/mol).
    pub const MOLAR_ENERGY: Self = Self::ENERGY.over(Self::AMOUNT);
    /// Energy per mass (J/kg).
    pub const SPECIFIC_ENERGY: Self = Self::ENERGY.over(Self::MASS);
    /// Heat capacity per mass (J/(kg K)).
    pub const HEAT_CAPACITY: Self = Self::SPECIFIC_ENERGY.over(Self::TEMPERATURE_DIFFERENCE);
    /// Heat capacity per amount (J/(mol K)).
    pub const MOLAR_HEAT_CAPACITY: Self = Self::MOLAR_ENERGY.over(Self::TEMPERATURE_DIFFERENCE);
    /// Power (W).
    pub const POWER: Self = Self::ENERGY.over(Self::TIME);
    /// Power per mass (W/kg).
    pub const SPECIFIC_POWER: Self = Self::POWER.over(Self::MASS);
    /// Power per volume (W/m3).
    pub const HEAT_SOURCE: Self = Self::POWER.over(Self::VOLUME);
    /// Heat flux (W/m2).
    pub const HEAT_FLUX: Self = Self::POWER.over(Self::AREA);
    /// Heat transfer coefficient (W/(m2 K)).
    pub const HEAT_TRANSFER_COEFFICIENT: Self = Self::HEAT_FLUX.over(Self::TEMPERATURE_DIFFERENCE);
    /// Heat resistance of an area (m2 K/W).
    pub const HEAT_RESISTANCE: Self = Self::HEAT_TRANSFER_COEFFICIENT.to_power(-1.0);
    /// Thermal conductivity (W/(m K)).
    pub const CONDUCTIVITY: Self = Self::HEAT_TRANSFER_COEFFICIENT.times(Self::LENGTH);
    /// Diffusivity, also a kinematic viscosity (m2/s).
    pub const DIFFUSIVITY: Self = Self::AREA.over(Self::TIME);
    /// Dynamic viscosity (Pa s).
    pub const VISCOSITY: Self = Self::PRESSURE.times(Self::TIME);
    /// A frequency, a shear rate, a rate constant of first order (1/s).
    pub const FREQUENCY: Self = Self::TIME.to_power(-1.0);
    /// Shear rate (1/s).
    pub const SHEAR_RATE: Self = Self::FREQUENCY;
    /// Pressure gradient (Pa/m).
    pub const PRESSURE_GRADIENT: Self = Self::PRESSURE.over(Self::LENGTH);
    /// A coefficient per kelvin (1/K).
    pub const PER_TEMPERATURE: Self = Self::TEMPERATURE_DIFFERENCE.to_power(-1.0);

    /// A quantity of these exponents; of temperatures and pressures, a difference.
    #[must_use]
    #[expect(clippy::cast_possible_truncation, reason = "exponents are compared within 5e-3")]
    pub const fn new(length: f64, mass: f64, time: f64, temperature: f64, amount: f64) -> Self {
        Self {
            exponents: [length as f32, mass as f32, time as f32, temperature as f32, amount as f32],
            role: Role::Plain,
        }
    }

    const fn with(self, role: Role) -> Self {
        Self { role, ..self }
    }

    /// The product. It is plain: a temperature times anything is no point on a scale any more.
    #[must_use]
    pub const fn times(self, other: Self) -> Self {
        let [length, mass, time, temperature, amount] = self.exponents();
        let others = other.exponents();
        Self::new(length + others[0], mass + others[1], time + others[2], temperature + others[3], amount + others[4])
    }

    /// The quotient, plain like a product.
    #[must_use]
    pub const fn over(self, other: Self) -> Self {
        self.times(other.to_power(-1.0))
    }

    /// The power, plain like a product.
    #[must_use]
    pub const fn to_power(self, power: f64) -> Self {
        let [length, mass, time, temperature, amount] = self.exponents();
        Self::new(length * power, mass * power, time * power, temperature * power, amount * power)
    }

    /// A rate constant of this order, (mol/m3)^(1 − order)/s.
    #[must_use]
    pub const fn rate_constant(order: f64) -> Self {
        Self::CONCENTRATION.to_power(1.0 - order).over(Self::TIME)
    }

    /// The same exponents, as a difference: for arithmetic, where a temperature may be subtracted
    /// from a difference or divided by one.
    #[must_use]
    pub const fn plain(self) -> Self {
        self.with(Role::Plain)
    }

    /// Whether a bare number may stand for it.
    #[must_use]
    pub fn is_ratio(self) -> bool {
        self == Self::RATIO
    }

    /// What it is called, such as `heat flux`; none for exponents that have no usual name.
    #[must_use]
    pub fn words(self) -> Option<&'static str> {
        names::words(self)
    }

    /// Exponents of length, mass, time, temperature, amount.
    pub(super) const fn exponents(self) -> [f64; 5] {
        let [length, mass, time, temperature, amount] = self.exponents;
        [length as f64, mass as f64, time as f64, temperature as f64, amount as f64]
    }

    pub(super) const fn role(self) -> Role {
        self.role
    }
}

/// Whether an exponent counts as none.
pub(super) fn vanishes(exponent: f64) -> bool {
    exponent.abs() < SAME_EXPONENT
}

impl PartialEq for Dimension {
    fn eq(&self, other: &Self) -> bool {
        self.role == other.role && self.exponents().into_iter().zip(other.exponents()).all(|(a, b)| vanishes(a - b))
    }
}

impl fmt::Display for Dimension {
    /// Name and unit as in a sentence: `heat flux (W/m2)`, `ratio (a bare number, % or ppm)`.
    fn fmt(&self, out: &mut fmt::Formatter<'_>) -> fmt::Result {
        let symbol = names::symbol(*self);
        match self.words() {
            Some(words) if symbol.is_empty() => write!(out, "{words} (a bare number, % or ppm)"),
            Some(words) => write!(out, "{words} ({symbol})"),
            None => write!(out, "quantity in {symbol}"),
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_temperature_is_no_difference_but_shares_its_exponents() {
        assert_ne!(Dimension::TEMPERATURE, Dimension::TEMPERATURE_DIFFERENCE);
        assert_eq!(Dimension::TEMPERATURE.plain(), Dimension::TEMPERATURE_DIFFERENCE);
        assert_ne!(Dimension::PRESSURE_LEVEL, Dimension::PRESSURE);
        assert_ne!(Dimension::ANGLE, Dimension::RATIO);
    }

    #[test]
    fn exponents_are_compared_with_some_play() {
        assert_eq!(Dimension::rate_constant(1.333), Dimension::rate_constant(4.0 / 3.0));
        assert_ne!(Dimension::rate_constant(1.3), Dimension::rate_constant(4.0 / 3.0));
    }

    #[test]
    fn first_order_rate_constant_is_a_frequency() {
        assert_eq!(Dimension::rate_constant(1.0), Dimension::FREQUENCY);
        assert_eq!(Dimension::rate_constant(0.0), Dimension::REACTION_RATE);
    }

    #[test]
    fn arithmetic_of_temperatures_is_plain() {
        let product = Dimension::TEMPERATURE.times(Dimension::HEAT_TRANSFER_COEFFICIENT);
        assert_eq!(product, Dimension::HEAT_FLUX);
        assert!(Dimension::TEMPERATURE.over(Dimension::TEMPERATURE_DIFFERENCE).is_ratio());
    }

    #[test]
    fn derived_exponents_are_those_of_the_si_brochure() {
        assert_eq!(Dimension::PRESSURE, Dimension::new(-1.0, 1.0, -2.0, 0.0, 0.0));
        assert_eq!(Dimension::POWER, Dimension::new(2.0, 1.0, -3.0, 0.0, 0.0));
        assert_eq!(Dimension::HEAT_TRANSFER_COEFFICIENT, Dimension::new(0.0, 1.0, -3.0, -1.0, 0.0));
    }

    #[test]
    fn a_dimension_reads_like_a_sentence() {
        assert_eq!(Dimension::HEAT_FLUX.to_string(), "heat flux (W/m2)");
        assert_eq!(Dimension::RATIO.to_string(), "ratio (a bare number, % or ppm)");
        assert_eq!(Dimension::MASS.to_power(2.0).to_string(), "quantity in kg2");
    }
}
