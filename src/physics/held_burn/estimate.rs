//! First-order estimate of a finite-burn loss: instant, and a check on the integration where it holds.

use super::Steering;

/// Loss of a burn centred on an apsis, km/s.
///
/// First order in the burn time t: Δv t² μ/(24 r³) for a fixed attitude; following the velocity saves the share μ/(r v²) of it, v the mean
/// of the speeds before and after (derived; Robbins 1966 for the form). It holds for t √(μ/r³) below about 0.5. For longer burns the
/// quadratic growth is damped by 1 + x⁴/1000, x = t √(μ/r³), fitted by us to the integrated cases of the reference collection so that the
/// estimate stays within a factor of two up to x = 4; nothing but a first picture rests on it.
///
/// `gm` km³/s², `radius` km, speeds and `dv` km/s, `burn_time` s.
pub fn first_order_loss_km_s(
    gm: f64,
    radius: f64,
    (before, after): (f64, f64),
    dv: f64,
    burn_time: f64,
    steering: Steering,
) -> f64 {
    let x_sq = burn_time * burn_time * gm / (radius * radius * radius);
    let mean = 0.5 * (before + after);
    let share = match steering {
        Steering::FixedAttitude => 1.0,
        Steering::AgainstVelocity | Steering::TurningAttitude => {
            (1.0 - gm / (radius * mean * mean)).abs().min(1.0)
        }
    };
    dv * share * x_sq / 24.0 / (1.0 + 1e-3 * x_sq * x_sq)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::physics::conic::{self, Orbit};
    use crate::physics::held_burn::{Engine, Start, Task};

    /// Where first order holds, integration agrees: the fixed attitude at x = 0.02 to 0.3, Mars and Moon.
    #[test]
    fn short_burns_lose_what_first_order_says() {
        for (gm, v_inf, q, apoapsis) in [
            (42_828.375, 2.65_f64, 3696.19, 38_396.19),
            (4902.8, 0.85, 1837.4, 10_000.0),
            (4902.8, 0.85, 14_000.0, 14_000.0),
        ] {
            let v_inf_sq = v_inf * v_inf;
            let approach = |_: f64| Some(v_inf_sq);
            let before = conic::hyperbola_speed_km_s(gm, v_inf_sq, q);
            let after = conic::periapsis_speed_km_s(gm, q, apoapsis);
            for x in [0.02, 0.1, 0.3] {
                let mut engine = Engine {
                    thrust_n: 1.0,
                    // So much Isp that the mass hardly changes, which is what first order takes.
                    exhaust_km_s: 500.0,
                    mass_kg: 1000.0,
                };
                let wanted = x / (gm / (q * q * q)).sqrt();
                engine.thrust_n = engine.time_for_s(before - after) / wanted;
                let task = Task {
                    gm,
                    start: Start::Hyperbola(&approach),
                    open_km: q,
                    speed_before_km_s: before,
                    speed_after_km_s: after,
                    turn_rad: 0.0,
                    goal: Orbit {
                        periapsis_km: q,
                        apoapsis_km: apoapsis,
                    },
                    engine,
                    steering: Steering::FixedAttitude,
                };
                let burn = task.solve(None).expect("closes");
                let loss = burn.dv_km_s - (before - after);
                let estimate = first_order_loss_km_s(
                    gm,
                    q,
                    (before, after),
                    before - after,
                    wanted,
                    Steering::FixedAttitude,
                );
                // The next order is x² times a number of order one; below 1e-9 of the Δv the flight's rounding shows.
                let slack = 0.4 * x * x * estimate + 2e-9 * (before - after);
                assert!(
                    (loss - estimate).abs() < slack,
                    "{gm} {q} {x}: {loss:e} {estimate:e}"
                );
            }
        }
    }
}
