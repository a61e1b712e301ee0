//! Quantities with units, for the edges of the program.
//!
//! Inside, every number is SI; a text such as `85 degC` or `70 Btu/(h ft2 degF)` becomes SI in
//! [`read()`] and leaves through [`write()`], [`show`] or a column's suffix. The rules of what may be
//! written are those of the spec format, section 1 ("Unit in the value"). Which key wants which
//! [`Dimension`], and in which line of a file the text stands, is the caller's business.

mod dimension;
mod error;
mod exponent;
mod expression;
mod mistakes;
mod names;
mod nearest;
mod number;
mod read;
mod show;
mod size;
mod table;
mod write;

pub use dimension::Dimension;
pub use error::UnitError;
pub use names::{column_suffix, example, symbol};
pub use read::read;
pub use show::{show, show_number, shown};
pub use table::{Kind, Unit, all};
pub use write::write;
