//! The mechanics of an arrival, one subject a file.
//!
//! Every function states its formula, symbols with units, where it holds and where it comes from.
//! Units inside: km, km/s, s, kg, N and radians; names carry the unit. Nothing here knows of files,
//! screens or ways of arriving.

pub mod asymptote;
pub mod body;
pub mod burn;
pub mod catalogue;
pub mod conic;
pub mod held_burn;
pub mod pole;
mod thrust;
pub mod thrust_arc;
pub mod transfer;
pub mod vehicle;
