//! The hottest point of the fluid over z and r, wall surface included (model page, §7).

use std::ops::Range;

use super::view::{RunView, StationView};

/// r/R this close to 1 is the wall itself.
const ROUNDING: f64 = 1e-12;

/// The hottest point.
#[derive(Clone, Debug, PartialEq)]
pub struct HotSpot {
    /// T, in K.
    pub temperature: f64,
    /// z from the inlet, in m.
    pub z: f64,
    /// r, in m.
    pub r: f64,
    /// r/R.
    pub position: f64,
    /// The section.
    pub section: String,
    /// Local conversion there.
    pub conversion: Option<f64>,
    /// T less that of the coolant or wall there, in K.
    pub rise: Option<f64>,
    /// Where it lies in plain words, if at an end or at the wall.
    pub note: Option<&'static str>,
}

impl HotSpot {
    /// The hottest point of some sections: of all recorded stations, and of the local maxima along z that were
    /// found on the integrator's interpolant.
    #[must_use]
    pub fn of(run: &RunView<'_>, sections: Range<usize>) -> Self {
        let first = sections.start;
        let last = sections.end - 1;
        let all = sections.flat_map(|s| run.sections[s].iter().chain(&run.peaks[s]));
        let peaks = all.map(|station| (station, station.profile.peak_temperature()));
        let (station, peak) = peaks
            .reduce(|best, next| if next.1.value > best.1.value { next } else { best })
            .expect("the inlet is always recorded");
        let section = station.leg.system.section;
        let position = peak.r / section.duct.tube.radius;
        let conversion = local_conversion(station, position);
        let reference = section.wall.reference_temperature();
        let inlet = run.sections[first].first().map_or(f64::NAN, |station| station.z);
        let outlet = run.sections[last].last().map_or(f64::NAN, |station| station.z);
        let note = match station.z {
            _ if position >= 1.0 - ROUNDING => Some("at the wall"),
            z if z <= inlet => Some("at the inlet"),
            z if z >= outlet => Some("at the end: it may be hotter beyond"),
            _ => None,
        };
        Self {
            temperature: peak.value,
            z: station.z,
            r: peak.r,
            position,
            section: section.name.clone(),
            conversion,
            rise: reference.map(|reference| peak.value - reference),
            note,
        }
    }
}

fn local_conversion(station: &StationView<'_>, position: f64) -> Option<f64> {
    let species = station.material().conversion_of?;
    station.conversion(species, station.tube(0))?;
    let value = |i| station.conversion(species, station.tube(i)).unwrap_or(f64::NAN);
    Some(station.profile.value_at(position, value))
}
