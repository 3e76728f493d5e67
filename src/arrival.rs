//! The ways of arriving: each turns one [`Setting`] into a [`Plan`] or says why it cannot be flown.
//!
//! A new way is one new file with a `solve` function, a variant of [`Way`] and one line in [`Way::TABLE`](way::Way::TABLE).

mod dip;
mod direct;
mod guide;
mod lasting;
mod loop_way;
pub mod plan;
pub mod reason;
pub mod setting;
mod steps;
pub mod way;

pub use plan::{Before, Burn, Figures, Flown, Plan};
pub use reason::{NotFlyable, Reason};
pub use setting::{Burns, Choice, Limits, Passes, PlaneDemand, Policy, Setting};
pub use way::Way;
