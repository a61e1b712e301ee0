//! Files for other programs. Everything is returned as bytes; `cli/` writes them.

pub mod csv;
