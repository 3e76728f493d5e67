//! Impulsive burns at an apsis, with a turn of the plane, and the cheapest split of a turn over several.
//!
//! At an apsis the velocity is normal to the radius, so a burn there changes the speed from u to w and
//! turns the velocity about the line of apsides by α. Nothing else is modelled here; burns that take time
//! are integrated elsewhere.

use std::f64::consts::{FRAC_PI_2, PI};

/// The speeds a burn joins, km/s. `difference` is u − w, formed without cancellation by whoever knows the orbits.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct SpeedStep {
    /// Speed before, u > 0.
    pub before: f64,
    /// Speed after, w > 0.
    pub after: f64,
    /// u − w.
    pub difference: f64,
}

impl SpeedStep {
    /// Δv with a turn α (rad): √((u − w)² + 4 u w sin²(α/2)), km/s. The law of cosines without cancellation.
    #[inline]
    pub fn dv_km_s(&self, turn: f64) -> f64 {
        if turn == 0.0 {
            return self.difference.abs();
        }
        self.dv_for_half_sine((0.5 * turn).sin())
    }

    #[inline]
    fn dv_sq_for_half_sine(&self, half_sine: f64) -> f64 {
        self.difference * self.difference + 4.0 * self.before * self.after * half_sine * half_sine
    }

    #[inline]
    fn dv_for_half_sine(&self, half_sine: f64) -> f64 {
        self.dv_sq_for_half_sine(half_sine).sqrt()
    }

    #[inline]
    fn slower(&self) -> f64 {
        self.before.min(self.after)
    }

    #[inline]
    fn faster(&self) -> f64 {
        self.before.max(self.after)
    }

    /// Cosine of the far-branch angle at the multiplier λ: (λ² − √((u² − λ²)(w² − λ²)))/(uw).
    #[inline]
    fn cos_far_angle_at(&self, lambda: f64) -> f64 {
        let square = |speed: f64| ((speed - lambda) * (speed + lambda)).max(0.0);
        let root = (square(self.before) * square(self.after)).sqrt();
        (lambda * lambda - root) / (self.before * self.after)
    }
}

/// Share of a braking burn's own Δv after which the spacecraft is captured (energy below zero).
///
/// The velocity moves in a straight line from u to w (turned by α); its square falls to the escape speed's
/// after the share f with f²D² − 2fB + v∞² = 0, B = u² − u w cos α. The smaller root, in the form without
/// cancellation. Without a turn this is (u − v_esc)/(u − w). Takes v∞² (km²/s²).
#[inline]
pub fn captured_share(step: SpeedStep, turn: f64, v_inf_sq: f64) -> Option<f64> {
    let half_sine = if turn == 0.0 { 0.0 } else { (0.5 * turn).sin() };
    let toward = step.before * (step.difference + 2.0 * step.after * half_sine * half_sine);
    let dv_sq = step.dv_sq_for_half_sine(half_sine);
    let root = toward * toward - dv_sq * v_inf_sq;
    if root < 0.0 {
        return None;
    }
    let share = v_inf_sq / (toward + root.sqrt());
    (0.0..=1.0).contains(&share).then_some(share)
}

/// Splits a turn of `total` (rad, 0 to π) over `steps`, so that the burns together cost least; returns the angles.
///
/// # Method
/// Each burn's slope is dD/dα = u w sin α / D. At the optimum all slopes equal one multiplier λ, and
/// solving that for the angle is closed form: with X = u² − λ², Y = w² − λ², P = uw,
///
/// ```text
/// near branch (D convex):   sin(α/2) = λ |u − w| / √(2P (P − λ² + √(XY)))
/// far branch  (D concave):  sin(α/2) = √((P − λ² + √(XY)) / (2P))
/// ```
///
/// so λ is at most the smallest speed of any burn, L. A minimum has at most one burn on its far branch
/// (second-order condition). The burn that owns L passes from the near to the far branch at λ = L; with
/// λ = L sin φ, φ from 0 to π, both are one smooth path on which the angles sum from 0 to π, and every
/// upward crossing of `total` is a local minimum. The crossings are bracketed on a fixed grid and refined;
/// the cheapest wins. Another burn can only be on its far branch where its far angle at λ = L is below
/// `total`; that rare case is searched the same way. The cost is not convex and has kinks where u = w; both are
/// covered (the near branch is then α = 0).
///
/// Derived; checked against dense search and the split values of ../shared/reference in the tests.
pub fn split_turn<const N: usize>(steps: &[SpeedStep; N], total: f64) -> [f64; N] {
    let mut angles = [0.0; N];
    if total == 0.0 || N == 0 {
        return angles;
    }
    if N == 1 {
        angles[0] = total;
        return angles;
    }
    let weakest = (1..N).fold(0, |k, j| {
        if steps[j].slower() < steps[k].slower() {
            j
        } else {
            k
        }
    });
    let limit = steps[weakest].slower();
    let mut best = Best {
        cost: f64::INFINITY,
        angles,
    };

    let path = Path {
        steps,
        limit,
        far: weakest,
    };
    let cos_total = total.cos();
    // At λ = L the weakest burn turns by acos(slower/faster); the others add to that.
    let fastest = steps[weakest].faster();
    let near_side = limit / fastest <= cos_total || total <= path.sum_at_limit();
    if near_side {
        // For small turns every angle is λ|u − w|/(uw); that guess saves Newton most of its steps.
        let compliance: f64 = steps
            .iter()
            .map(|step| step.difference.abs() / (step.before * step.after))
            .sum();
        let guess = (total / (compliance * limit)).min(0.95).asin();
        path.refine(total, (0.0, FRAC_PI_2), guess, &mut best);
        // On the far side the weakest burn alone turns by more than at λ = L, where it costs √(faster² − slower²), and
        // the others cost at least their speed differences. If that is more than what was found, the far side is out.
        let others: f64 = (0..N)
            .filter(|&j| j != weakest)
            .map(|j| steps[j].difference.abs())
            .sum();
        let far_floor = others + ((fastest - limit) * (fastest + limit)).max(0.0).sqrt();
        if far_floor < best.cost {
            path.search(total, FRAC_PI_2, PI, &mut best);
        }
    } else {
        path.search(total, FRAC_PI_2, PI, &mut best);
    }
    for j in (0..N).filter(|&j| j != weakest) {
        // The far angle falls as λ rises, so at λ = L it is smallest; if that is more than the total, it is out.
        if cos_total < steps[j].cos_far_angle_at(limit) {
            Path {
                steps,
                limit,
                far: j,
            }
            .search(total, FRAC_PI_2, PI, &mut best);
        }
    }
    // What the iteration left over goes to the largest angle, so that the angles sum to the total. Every burn that turns has
    // the same slope, so that costs no more than it must; a burn at its kink (u = w, no turn) would pay more.
    angles = best.angles;
    let largest = (1..N).fold(0, |k, j| if angles[k] < angles[j] { j } else { k });
    let rest: f64 = (0..N).filter(|&j| j != largest).map(|j| angles[j]).sum();
    angles[largest] = (total - rest).max(0.0);
    angles
}

struct Best<const N: usize> {
    cost: f64,
    angles: [f64; N],
}

/// The one-parameter family of candidate splits: λ = L sin φ, with burn `far` on its far branch for φ > π/2.
struct Path<'a, const N: usize> {
    steps: &'a [SpeedStep; N],
    limit: f64,
    far: usize,
}

impl<const N: usize> Path<'_, N> {
    /// Sum of the angles at λ = L.
    fn sum_at_limit(&self) -> f64 {
        self.angles(1.0, 0.0).iter().sum()
    }

    /// The angles at sin φ, cos φ. A negative (or negative zero) cosine means the far half.
    #[inline]
    fn angles(&self, sine: f64, cosine: f64) -> [f64; N] {
        let lambda = self.limit * sine;
        std::array::from_fn(|j| {
            let far = j == self.far && cosine.is_sign_negative();
            2.0 * half_sine(&self.steps[j], self.limit, lambda, cosine, far).asin()
        })
    }

    /// Sum of the angles, and its derivative by φ where that is finite.
    fn sum_and_slope(&self, phi: f64) -> (f64, f64) {
        let (sine, cosine) = phi.sin_cos();
        let lambda = self.limit * sine;
        let (mut sum, mut slope) = (0.0, 0.0);
        for (j, step) in self.steps.iter().enumerate() {
            let far = j == self.far && cosine.is_sign_negative();
            let half = half_sine(step, self.limit, lambda, cosine, far);
            sum += 2.0 * half.asin();
            // dα/dλ = ± D/√(XY), dλ/dφ = L cos φ.
            let root = root_xy(step, self.limit, lambda, cosine);
            let sign = if far { -1.0 } else { 1.0 };
            slope += sign * step.dv_for_half_sine(half) * self.limit * cosine / root;
        }
        (sum, slope)
    }

    /// Finds every upward crossing of `total` between the ends on a fixed grid, and offers each to `best`.
    fn search(&self, total: f64, from: f64, to: f64, best: &mut Best<N>) {
        const CELLS: u32 = 8;
        let mut left = from;
        let mut below = self.sum_at(left) < total;
        for k in 1..=CELLS {
            let right = from + (to - from) * f64::from(k) / f64::from(CELLS);
            let right_below = k != CELLS && self.sum_at(right) < total;
            if below && !right_below {
                self.refine(total, (left, right), 0.5 * (left + right), best);
            }
            left = right;
            below = right_below;
        }
    }

    fn sum_at(&self, phi: f64) -> f64 {
        let (sine, cosine) = phi.sin_cos();
        self.angles(sine, cosine).iter().sum()
    }

    /// Safeguarded Newton for one upward crossing inside a bracket, from a first guess in it.
    fn refine(&self, total: f64, bracket: (f64, f64), guess: f64, best: &mut Best<N>) {
        let (mut low, mut high) = bracket;
        let mut phi = if low < guess && guess < high {
            guess
        } else {
            0.5 * (low + high)
        };
        for _ in 0..60 {
            let (sum, slope) = self.sum_and_slope(phi);
            let excess = sum - total;
            if excess < 0.0 {
                low = phi;
            } else {
                high = phi;
            }
            // The cost is stationary here, so 1e-9 in the angle is far below a rounding error of the cost; the
            // remainder is handed out exactly by the caller.
            if excess.abs() <= 1e-9 * total || high - low <= 1e-15 * high {
                break;
            }
            let newton = phi - excess / slope;
            phi = if low < newton && newton < high {
                newton
            } else {
                0.5 * (low + high)
            };
        }
        let (sine, cosine) = phi.sin_cos();
        let angles = self.angles(sine, cosine);
        let cost = (0..N).map(|j| self.steps[j].dv_km_s(angles[j])).sum();
        if cost < best.cost {
            *best = Best { cost, angles };
        }
    }
}

/// √(XY) ≥ 0. For the burn that owns the limit one factor is L² cos² φ exactly, which keeps its digits at φ = π/2.
#[inline]
fn root_xy(step: &SpeedStep, limit: f64, lambda: f64, cosine: f64) -> f64 {
    let slower = step.slower();
    let near = if slower == limit {
        (limit * cosine).abs()
    } else {
        ((slower - lambda) * (slower + lambda)).max(0.0).sqrt()
    };
    let faster = step.faster();
    let wide = if faster == limit {
        (limit * cosine).abs()
    } else {
        ((faster - lambda) * (faster + lambda)).max(0.0).sqrt()
    };
    near * wide
}

/// sin(α/2) for the multiplier λ on the near or the far branch.
#[inline]
fn half_sine(step: &SpeedStep, limit: f64, lambda: f64, cosine: f64, far: bool) -> f64 {
    let product = step.before * step.after;
    // P − λ² ≥ 0 since λ is at most the slower speed; rounding must not make it negative.
    let sum = (product - lambda * lambda).max(0.0) + root_xy(step, limit, lambda, cosine);
    let sine = if far {
        (sum / (2.0 * product)).sqrt()
    } else if sum == 0.0 {
        0.0
    } else {
        lambda * step.difference.abs() / (2.0 * product * sum).sqrt()
    };
    sine.min(1.0)
}

#[cfg(test)]
mod tests {
    use super::*;

    fn step(before: f64, after: f64) -> SpeedStep {
        SpeedStep {
            before,
            after,
            difference: before - after,
        }
    }

    fn cost<const N: usize>(steps: &[SpeedStep; N], angles: &[f64; N]) -> f64 {
        (0..N).map(|k| steps[k].dv_km_s(angles[k])).sum()
    }

    #[test]
    fn two_burn_split_from_a_handbook() {
        // Vallado, Fundamentals of Astrodynamics, table 6-3 case: 6671.53 → 42163.95 km, 28.5°, μ 398600.4418.
        // Split recomputed with 30 digits in ../shared/reference/published.md section 2: 2.198173343°, 4.233643200 km/s.
        use crate::physics::conic::{
            apoapsis_speed_km_s, circular_speed_km_s, periapsis_speed_km_s,
        };
        let (gm, low, high) = (398_600.4418, 6671.53, 42_163.95);
        let steps = [
            step(
                circular_speed_km_s(gm, low),
                periapsis_speed_km_s(gm, low, high),
            ),
            step(
                apoapsis_speed_km_s(gm, low, high),
                circular_speed_km_s(gm, high),
            ),
        ];
        let angles = split_turn(&steps, 28.5_f64.to_radians());
        assert!(
            (angles[0].to_degrees() - 2.198_173_343).abs() < 1e-6,
            "{}",
            angles[0].to_degrees()
        );
        assert!((cost(&steps, &angles) - 4.233_643_200).abs() < 1e-9);
    }

    /// Independent route: a dense grid over the simplex, polished by shrinking it round its best node.
    fn brute_three(steps: &[SpeedStep; 3], total: f64) -> f64 {
        let mut best = f64::INFINITY;
        let (mut centre, mut width) = ([0.5 * total, 0.5 * total], 0.5 * total);
        for round in 0..12 {
            let n = if round == 0 { 400 } else { 40 };
            let mut at = centre;
            for i in -n..=n {
                for j in -n..=n {
                    let a = centre[0] + width * f64::from(i) / f64::from(n);
                    let b = centre[1] + width * f64::from(j) / f64::from(n);
                    if a < 0.0 || b < 0.0 || total < a + b {
                        continue;
                    }
                    let value = cost(steps, &[a, b, total - a - b]);
                    if value < best {
                        best = value;
                        at = [a, b];
                    }
                }
            }
            centre = at;
            width *= 0.1;
        }
        best
    }

    #[test]
    fn three_burn_split_is_never_beaten_by_search() {
        let cases = [
            [step(2.46, 2.27), step(0.07, 0.13), step(1.14, 0.85)],
            [step(2.46, 2.27), step(0.5, 0.5), step(1.14, 0.85)],
            [step(1.0, 0.9), step(0.8, 0.85), step(0.82, 0.6)],
            [step(1.0, 1.0), step(1.0, 1.0), step(1.0, 1.0)],
            [step(3.0, 0.2), step(0.25, 2.0), step(1.0, 0.99)],
        ];
        for steps in cases {
            for total in [0.01, 0.3, 1.0, 2.0, 3.0_f64] {
                let angles = split_turn(&steps, total);
                assert!(((angles.iter().sum::<f64>()) / total - 1.0).abs() < 1e-14);
                assert!(angles.iter().all(|angle| 0.0 <= *angle));
                let found = cost(&steps, &angles);
                let search = brute_three(&steps, total);
                assert!(
                    found <= search * (1.0 + 1e-12),
                    "{steps:?} {total}: {found} {search} {angles:?}"
                );
            }
        }
    }

    #[test]
    fn captured_share_without_a_turn_is_the_plain_ratio() {
        // v∞ 0.85 km/s at q 1837.4 km of the Moon, into a circle.
        let v_inf_sq: f64 = 0.85 * 0.85;
        let (u, w) = (
            (v_inf_sq + 2.0 * 4902.8 / 1837.4).sqrt(),
            (4902.8_f64 / 1837.4).sqrt(),
        );
        let escape = (2.0 * 4902.8_f64 / 1837.4).sqrt();
        let share = captured_share(step(u, w), 0.0, v_inf_sq).expect("captured");
        assert!((share - (u - escape) / (u - w)).abs() < 1e-14);
        // With a turn: walk along the straight line and compare the energy there.
        let turned = captured_share(step(u, w), 0.4, v_inf_sq).expect("captured");
        let along = [
            u + turned * (w * 0.4_f64.cos() - u),
            turned * w * 0.4_f64.sin(),
        ];
        assert!((along[0].hypot(along[1]) - escape).abs() < 1e-13);
        // A burn that stays hyperbolic captures never.
        assert_eq!(captured_share(step(u, escape + 0.1), 0.0, v_inf_sq), None);
    }
}
