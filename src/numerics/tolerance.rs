//! The accuracies the engine works to, by name, each with the reason for its value.
//!
//! A search that needs another accuracy gets another name here, so that every loosening is
//! visible in one place.

/// Relative width at which a bracketed root search stops.
///
/// Four units in the last place of a double: below that the bracket ends differ only by rounding.
pub const ROOT_RELATIVE: f64 = 4.0 * f64::EPSILON;

/// Relative width at which a bounded minimum search stops.
///
/// Near a smooth minimum the value changes by the square of the displacement, so comparing values
/// cannot place it better than the square root of the rounding error, 1.5e-8. Where the place
/// itself is reported, [`super::minimum::stationary_point`] goes on from there.
pub const MINIMUM_RELATIVE: f64 = 1.5e-8;

/// Step of the derivative stencil, relative to the abscissa.
///
/// The sixth-order stencil truncates at h⁶ = 1.6e-17 for this step, below the rounding error of the
/// values; a smaller step would only amplify that rounding error (by 1/h).
pub const STENCIL_RELATIVE: f64 = 5.0e-3;

/// Two costs closer than this, relative, are the same cost: the way with fewer burns is preferred.
///
/// The exact ties (braking altitude equal to the target, apoapsis at the break-even radius) come out
/// to a few 1e-16; one hundred times that keeps rounding from choosing the winner.
pub const SAME_COST_RELATIVE: f64 = 1.0e-13;

/// Relative accuracy of an integrated thrust arc, per step.
///
/// At 1e-10 the finite-burn loss of every reference case is within 1e-6 m/s of its value at 1e-12; half of it moves the
/// loss by less (a test holds that to 0.01 m/s).
pub const ARC_RELATIVE: f64 = 1.0e-10;

/// Relative width at which a root search stops whose every value is itself a solved course of burns.
///
/// Costs of integrated courses are smooth to about 1e-11 of themselves; two that cross at an angle cross to about that.
pub const FLOWN_ROOT_RELATIVE: f64 = 1.0e-11;

/// Relative width at which the search for the border of a limit stops where every look at it integrates burns: a millimetre on a body's
/// radius.
pub const FLOWN_BORDER_RELATIVE: f64 = 1.0e-9;

/// Relative width at which a search in a flat valley stops whose every value is itself a solved course of burns.
///
/// The cost changes by the square of the displacement: by some 1e-9 of itself at this width, below what the flights carry.
pub const FLAT_RELATIVE: f64 = 3.0e-5;
