//! Adaptive integration of ordinary differential equations with an event that ends it.
//!
//! Dormand–Prince 8(5,3) on arrays: no allocation, no dense output. An event is looked for at the end of every step and, where a
//! step is long, at its middle; it is then met by shrinking the last step, so the end state is an integrated one and not an
//! interpolated one.

mod coefficients;

use coefficients::{A, B, C, E3, E5};

/// Why an integration ended.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Stop {
    /// The event's function crossed zero upwards.
    Event,
    /// The last time was reached without the event.
    EndOfTime,
    /// The derivatives could not be computed there, or the step became too small to go on.
    Stuck,
}

/// Where an integration ended.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct End<const N: usize> {
    /// Time.
    pub t: f64,
    /// State.
    pub y: [f64; N],
    /// Why.
    pub stop: Stop,
    /// Steps accepted.
    pub steps: u32,
}

/// Accuracy asked for: each component's error per step stays below `absolute[k] + relative |y_k|`.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Accuracy<const N: usize> {
    /// Relative part.
    pub relative: f64,
    /// Absolute part, component by component.
    pub absolute: [f64; N],
}

/// Most steps before an integration counts as stuck.
const MOST_STEPS: u32 = 20_000;

/// Integrates `dy/dt = f(t, y)` from (`t0`, `y0`) to `t1` or to the first upward zero of `event(t, y)`, whichever comes first.
///
/// `after_step` sees every accepted state (for extremes on the way). An event that is already positive at the start ends nothing
/// until it has been negative.
///
/// # Method
/// Hairer, Nørsett & Wanner (1993), DOP853: eighth order, error from the embedded third and fifth order estimates, step control with
/// exponent 1/8. The event is placed by a bracketed secant on the length of the last step, each trial a full step from the same
/// state, to a rounding error of the time.
pub fn integrate<const N: usize>(
    mut f: impl FnMut(f64, &[f64; N]) -> [f64; N],
    mut event: impl FnMut(f64, &[f64; N]) -> f64,
    mut after_step: impl FnMut(f64, &[f64; N]),
    (t0, y0): (f64, [f64; N]),
    t1: f64,
    first_step: f64,
    accuracy: &Accuracy<N>,
) -> End<N> {
    let (mut t, mut y) = (t0, y0);
    let mut k1 = f(t, &y);
    let mut h = first_step.min(t1 - t0);
    let mut value = event(t, &y);
    let mut steps = 0;
    let mut rejected = false;
    while t < t1 {
        h = h.min(t1 - t);
        if h <= 1e-14 * t.abs().max(t1.abs()) || steps == MOST_STEPS {
            // The remainder of the interval may itself be a rounding error long.
            let stop = if t1 - t <= 1e-12 * t1.abs() {
                Stop::EndOfTime
            } else {
                Stop::Stuck
            };
            return End { t, y, stop, steps };
        }
        let (next, error) = step(&mut f, t, &y, &k1, h, Some(accuracy));
        if !error.is_finite() {
            h *= 0.1;
            rejected = true;
            continue;
        }
        if 1.0 < error {
            h *= (0.9 * error.powf(-0.125)).max(0.2);
            rejected = true;
            continue;
        }
        steps += 1;
        let next_value = event(t + h, &next);
        if value < 0.0 && 0.0 <= next_value {
            let (t, y) = meet(
                &mut f,
                &mut event,
                (t, &y, &k1),
                (value, next_value),
                (h, next),
            );
            after_step(t, &y);
            return End {
                t,
                y,
                stop: Stop::Event,
                steps,
            };
        }
        let grow =
            (0.9 * error.max(1e-10).powf(-0.125)).clamp(0.2, if rejected { 1.0 } else { 6.0 });
        rejected = false;
        t += h;
        y = next;
        value = next_value;
        k1 = f(t, &y);
        after_step(t, &y);
        h *= grow;
    }
    End {
        t,
        y,
        stop: Stop::EndOfTime,
        steps,
    }
}

/// Places the event inside a step: the length at which its function is zero.
fn meet<const N: usize>(
    f: &mut impl FnMut(f64, &[f64; N]) -> [f64; N],
    event: &mut impl FnMut(f64, &[f64; N]) -> f64,
    (t, y, k1): (f64, &[f64; N], &[f64; N]),
    (before, after): (f64, f64),
    (h, next): (f64, [f64; N]),
) -> (f64, [f64; N]) {
    // Regula falsi with the Illinois weight: superlinear, and never leaves the bracket.
    let (mut low, mut f_low) = (0.0, before);
    let (mut high, mut f_high, mut y_high) = (h, after, next);
    let mut side = 0;
    for _ in 0..60 {
        if f_high == 0.0 || high - low <= 1e-15 * (t.abs() + h) {
            break;
        }
        let trial = (low * f_high - high * f_low) / (f_high - f_low);
        let trial = if low < trial && trial < high {
            trial
        } else {
            0.5 * (low + high)
        };
        let (state, _) = step(f, t, y, k1, trial, None);
        let value = event(t + trial, &state);
        let scale = before.abs().max(after.abs());
        if value.abs() <= 4.0 * f64::EPSILON * scale {
            return (t + trial, state);
        }
        if value < 0.0 {
            (low, f_low) = (trial, value);
            if side == -1 {
                f_high *= 0.5;
            }
            side = -1;
        } else {
            (high, f_high, y_high) = (trial, value, state);
            if side == 1 {
                f_low *= 0.5;
            }
            side = 1;
        }
    }
    (t + high, y_high)
}

/// One step of length `h` from (t, y) with k1 = f(t, y) known: the new state, and the error over the accuracy where one is given.
#[inline]
fn step<const N: usize>(
    f: &mut impl FnMut(f64, &[f64; N]) -> [f64; N],
    t: f64,
    y: &[f64; N],
    k1: &[f64; N],
    h: f64,
    accuracy: Option<&Accuracy<N>>,
) -> ([f64; N], f64) {
    let mut k = [[0.0; N]; 12];
    k[0] = *k1;
    for s in 1..12 {
        let mut at = *y;
        for (a, slope) in A[s].iter().zip(&k) {
            // Many coefficients are zero by construction.
            if *a != 0.0 {
                for (value, slope) in at.iter_mut().zip(slope) {
                    *value += h * a * slope;
                }
            }
        }
        k[s] = f(t + C[s] * h, &at);
    }
    let combine = |weights: &[f64; 12], component: usize| -> f64 {
        weights
            .iter()
            .zip(&k)
            .map(|(weight, slope)| weight * slope[component])
            .sum()
    };
    let next: [f64; N] = std::array::from_fn(|c| y[c] + h * combine(&B, c));
    let Some(accuracy) = accuracy else {
        return (next, 0.0);
    };
    let (mut third, mut fifth) = (0.0, 0.0);
    for c in 0..N {
        let scale = accuracy.absolute[c] + accuracy.relative * y[c].abs().max(next[c].abs());
        third += (combine(&E3, c) / scale).powi(2);
        fifth += (combine(&E5, c) / scale).powi(2);
    }
    let both = fifth + 0.01 * third;
    let error = if both == 0.0 {
        0.0
    } else {
        h.abs() * fifth / (both * N as f64).sqrt()
    };
    (next, error)
}

#[cfg(test)]
mod tests {
    use super::*;

    fn tight<const N: usize>() -> Accuracy<N> {
        Accuracy {
            relative: 1e-12,
            absolute: [1e-12; N],
        }
    }

    #[test]
    fn coefficients_meet_the_simplest_order_conditions() {
        // Σ b = 1, Σ b c^k = 1/(k+1) for k up to 7 (order eight), Σ_j a_ij = c_i.
        for k in 0..8 {
            let sum: f64 = B.iter().zip(&C).map(|(b, c)| b * c.powi(k)).sum();
            assert!((sum - 1.0 / f64::from(k + 1)).abs() < 1e-14, "{k}: {sum}");
        }
        for (row, c) in A.iter().zip(&C) {
            assert!((row.iter().sum::<f64>() - c).abs() < 1e-13);
        }
        // Error estimates vanish on constants.
        assert!(E3.iter().sum::<f64>().abs() < 1e-14 && E5.iter().sum::<f64>().abs() < 1e-14);
    }

    #[test]
    fn a_circle_closes() {
        let end = integrate(
            |_, y: &[f64; 2]| [y[1], -y[0]],
            |_, _| -1.0,
            |_, _| {},
            (0.0, [1.0, 0.0]),
            2.0 * std::f64::consts::PI,
            0.1,
            &tight(),
        );
        assert_eq!(end.stop, Stop::EndOfTime);
        assert!(
            (end.y[0] - 1.0).abs() < 1e-11 && end.y[1].abs() < 1e-11,
            "{end:?}"
        );
    }

    #[test]
    fn an_event_is_met_to_a_rounding_error() {
        // cos t falls through zero at π/2: the event is −cos t.
        let end = integrate(
            |_, y: &[f64; 2]| [y[1], -y[0]],
            |_, y| -y[0],
            |_, _| {},
            (0.0, [1.0, 0.0]),
            10.0,
            0.1,
            &tight(),
        );
        assert_eq!(end.stop, Stop::Event);
        assert!(
            (end.t - std::f64::consts::FRAC_PI_2).abs() < 1e-12,
            "{}",
            end.t
        );
    }

    #[test]
    fn a_wall_is_reported_and_not_passed() {
        // dy/dt = y² from 1 has a pole at t = 1.
        let end = integrate(
            |_, y: &[f64; 1]| [y[0] * y[0]],
            |_, _| -1.0,
            |_, _| {},
            (0.0, [1.0]),
            2.0,
            0.1,
            &tight(),
        );
        assert_eq!(end.stop, Stop::Stuck);
        assert!(end.t < 1.0 + 1e-9);
    }
}
