//! The hottest point of the fluid over z and r, wall surface included (model page, §7).

use super::view::StationView;

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
    /// Whether it lies at an edge.
    pub site: Site,
}

/// Where a hot spot lies: at the wall before at an end.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Site {
    /// Away from all edges.
    Inside,
    /// On the wetted surface of the wall.
    Wall,
    /// At the inlet.
    Inlet,
    /// At the end of the run or section: it may be hotter beyond.
    End,
}

impl HotSpot {
    /// The hottest point of some sections: of all recorded stations, and of the local maxima along z that were
    /// found on the integrator's interpolant.
    #[must_use]
    pub fn of(sections: &[Vec<StationView<'_>>], peaks: &[Vec<StationView<'_>>]) -> Self {
        let all = sections.iter().zip(peaks).flat_map(|(stations, peaks)| stations.iter().chain(peaks));
        let station = all
            .reduce(|best, next| if next.peak.value > best.peak.value { next } else { best })
            .expect("the inlet is always recorded");
        let peak = station.peak;
        let section = station.leg.system.section;
        let position = peak.r / section.duct.tube.radius;
        let conversion = local_conversion(station, position);
        let reference = section.wall.reference_temperature();
        let inlet = sections.first().and_then(|stations| stations.first()).map_or(f64::NAN, |station| station.z);
        let outlet = sections.last().and_then(|stations| stations.last()).map_or(f64::NAN, |station| station.z);
        let site = match station.z {
            _ if position >= 1.0 - ROUNDING => Site::Wall,
            z if z <= inlet => Site::Inlet,
            z if z >= outlet => Site::End,
            _ => Site::Inside,
        };
        Self {
            temperature: peak.value,
            z: station.z,
            r: peak.r,
            position,
            section: section.name.clone(),
            conversion,
            rise: reference.map(|reference| peak.value - reference),
            site,
        }
    }
}

fn local_conversion(station: &StationView<'_>, position: f64) -> Option<f64> {
    let species = station.material().conversion_of?;
    station.conversion(species, station.tube(0))?;
    let value = |i| station.conversion(species, station.tube(i)).unwrap_or(f64::NAN);
    Some(station.profile.value_at(position, value))
}
