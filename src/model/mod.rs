//! The physics at one point, in SI: no grid, no solver (model page, §1 to §6).

mod coherence;
pub mod duct;
pub mod feed;
pub mod flow;
pub mod formula;
pub mod kinetics;
pub mod lane;
pub mod limits;
pub mod local;
pub mod mixture;
pub mod number;
pub mod numerics;
pub mod output;
pub mod plant;
pub mod property;
pub mod rheology;
pub mod section;
pub mod species;
pub mod wall;

/// R_g in J/(mol K), exact since the SI of 2019: CODATA 2018.
pub const GAS_CONSTANT: f64 = 8.314_462_618;

/// g_n, standard acceleration of gravity [m/s²]: 3rd CGPM (1901), exact.
pub const STANDARD_GRAVITY: f64 = 9.806_65;
