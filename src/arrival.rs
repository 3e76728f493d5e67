//! The ways of arriving: each turns one [`Setting`] into a [`Plan`] or says why it cannot be flown.
//!
//! A new way is one new file with a `solve` function, a variant of [`Way`] and one line in [`Way::TABLE`](way::Way::TABLE).

mod dip;
mod direct;
mod loop_way;
pub mod setting;
pub mod way;

pub use setting::{Choice, Limits, PlaneDemand, Policy, Setting};
pub use way::{Burn, Figures, NotFlyable, Plan, Reason, Way};
