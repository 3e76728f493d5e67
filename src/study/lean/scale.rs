//! On which scale a knob is walked along, where it ends, and how far two of its values are apart.

use crate::study::case::Case;
use crate::study::field::Bound;
use crate::study::knob::{Knob, Step};

/// A monotone scale on which steps of equal size matter about equally.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) enum Scale {
    /// Altitudes over a body of this radius (km): the logarithm of the radius.
    Radius(f64),
    /// What is positive and has no natural size: its logarithm.
    Log,
    /// What may be zero: linear up to this value and logarithmic beyond, asinh(x / s).
    Soft(f64),
    /// Angles given in degrees: radians.
    Angle,
    /// Whole numbers.
    Whole,
}

impl Scale {
    /// The scale of a knob that stands at a value.
    pub(super) fn of(knob: &Knob, case: &Case, from: f64) -> Self {
        if is_whole(knob) {
            return Scale::Whole;
        }
        if knob.is_altitude() {
            return Scale::Radius(case.body().radius_km);
        }
        if knob.unit() == "deg" {
            return Scale::Angle;
        }
        match (knob.range_field().low, knob.step) {
            (Bound::Excluding(low), _) if 0.0 <= low => Scale::Log,
            (Bound::Including(low), _) if 0.0 < low => Scale::Log,
            (_, Step::Fixed(step)) => Scale::Soft(0.1 * step),
            (_, Step::Percent) => Scale::Soft(0.01 * from.abs().max(1e-3)),
        }
    }

    /// Place on the scale.
    fn place(self, x: f64) -> f64 {
        match self {
            Scale::Radius(radius) => (x + radius).ln(),
            Scale::Log => x.ln(),
            Scale::Soft(linear) => (x / linear).asinh(),
            Scale::Angle => x.to_radians(),
            Scale::Whole => x,
        }
    }

    /// Value at a place.
    fn value(self, place: f64) -> f64 {
        match self {
            Scale::Radius(radius) => place.exp() - radius,
            Scale::Log => place.exp(),
            Scale::Soft(linear) => linear * place.sinh(),
            Scale::Angle => place.to_degrees(),
            Scale::Whole => place,
        }
    }

    /// The size against which a change of the knob is small or large, in its unit: how much x changes for one unit of the scale.
    pub(super) fn size(self, x: f64) -> f64 {
        match self {
            Scale::Radius(radius) => x + radius,
            Scale::Log => x,
            Scale::Soft(linear) => x.hypot(linear),
            Scale::Angle => 1.0_f64.to_degrees(),
            Scale::Whole => 1.0,
        }
    }

    /// The values from `from` (left out) to `end` (included), in steps that begin at `first` and grow by the factor `growth`; whole
    /// numbers one by one.
    pub(super) fn walk(
        self,
        from: f64,
        end: f64,
        first: f64,
        growth: f64,
    ) -> impl Iterator<Item = f64> {
        let (start, sign) = (self.place(from), (end - from).signum());
        let mut step = if self == Scale::Whole { 1.0 } else { first };
        let growth = if self == Scale::Whole { 1.0 } else { growth };
        let mut gone = 0.0;
        let mut last = from;
        std::iter::from_fn(move || {
            if last == end {
                return None;
            }
            gone += step;
            step *= growth;
            let next = self.value(start + sign * gone);
            // The end is met exactly; so is it where the scale runs out of numbers, or a step is lost in rounding.
            let inside = (next - last) * sign > 0.0 && (end - next) * sign > 0.0;
            last = if inside { next } else { end };
            Some(last)
        })
    }
}

/// Whether a knob takes whole numbers only.
pub(super) fn is_whole(knob: &Knob) -> bool {
    knob.unit().is_empty() && knob.step == Step::Fixed(1.0)
}

/// The lowest and the highest value looked at. An end that is not allowed itself is approached to a millionth of the start's distance.
pub(super) fn ends(knob: &Knob, from: f64) -> (f64, f64) {
    let field = knob.range_field();
    let value = |bound: Bound| match bound {
        Bound::Including(end) => end,
        Bound::Excluding(end) => end + 1e-6 * (from - end),
    };
    // A value that follows from another (an apoapsis from a period) may lie outside its own range; the walk then ends where it starts.
    (value(field.low).min(from), value(field.high).max(from))
}

/// What a percent is taken of: the radius for altitudes, the value otherwise; never nothing.
fn base(knob: &Knob, body_radius_km: f64, x: f64) -> f64 {
    let base = if knob.is_altitude() {
        x + body_radius_km
    } else {
        x
    };
    base.abs().max(1e-3)
}

/// One press of an arrow key at a value, in the knob's unit: the plain step, not rounded to a tidy number.
pub fn press(knob: &Knob, body_radius_km: f64, at: f64) -> f64 {
    match knob.step {
        Step::Fixed(step) => step,
        Step::Percent => 0.01 * base(knob, body_radius_km, at),
    }
}

/// How far two values of a knob are apart, in presses of an arrow key (see [`press`]). For a fixed step the difference divided by it; for
/// steps of one percent the logarithm of the ratio (of radii for altitudes) divided by ln 1.01.
pub fn presses(knob: &Knob, body_radius_km: f64, from: f64, to: f64) -> f64 {
    match knob.step {
        Step::Fixed(step) => (to - from).abs() / step,
        Step::Percent => {
            let base = |x: f64| base(knob, body_radius_km, x);
            (base(to) / base(from)).ln().abs() / 1.01_f64.ln()
        }
    }
}
