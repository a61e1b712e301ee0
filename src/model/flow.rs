//! How the fluid flows: the kinds of velocity profile (model page, §3).

use crate::spec::{About, Block, Key, Need, Reported, Takes};

/// The words for a profile.
pub const PROFILES: &[&str] = &["plug", "parabolic", "from_viscosity"];

pub const ABOUT: About = About {
    kind: "flow",
    summary: "the velocity profile and the heat of friction",
    equation: "",
    source: "",
    keys: &[
        Key {
            name: "profile",
            takes: Takes::Word(PROFILES),
            need: Need::Required("from_viscosity"),
            meaning: "`plug`: flat; `parabolic`: Newtonian of constant viscosity; `from_viscosity`: follows the \
                      viscosity field",
        },
        Key {
            name: "index",
            takes: Takes::Other("a number"),
            need: Need::Later,
            meaning: "index of the profile `power_law`",
        },
        Key {
            name: "viscous_heating",
            takes: Takes::Flag,
            need: Need::Default("false"),
            meaning: "heat of friction and pressure work in the energy balance",
        },
    ],
};

/// A kind of velocity profile.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Profile {
    /// Flat.
    Plug,
    /// Poiseuille's.
    Parabolic,
    /// From the momentum balance with the local viscosity.
    FromViscosity,
}

/// How the fluid flows.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Flow {
    /// The velocity profile.
    pub profile: Profile,
    /// Whether friction and pressure work heat the fluid.
    pub viscous_heating: bool,
}

impl Flow {
    /// Reads the block `flow`.
    ///
    /// # Errors
    /// What is wrong with any of its keys.
    pub fn read(block: &Block<'_>) -> Result<Self, Reported> {
        let fields = block.open(&ABOUT);
        let profile = match fields.word("profile") {
            "plug" => Profile::Plug,
            "parabolic" => Profile::Parabolic,
            _ => Profile::FromViscosity,
        };
        let viscous_heating = fields.flag("viscous_heating");
        fields.finish(Self { profile, viscous_heating })
    }
}
