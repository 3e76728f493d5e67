//! Where on a conic a spacecraft is at a time: Kepler's equation, in the plane of the conic, x towards its periapsis.

use std::f64::consts::PI;

/// A state in the plane: position (km) and velocity (km/s).
pub type State = [f64; 4];

/// The state on a hyperbola at a time from its periapsis, s (negative: before). Takes v∞² (km²/s²).
///
/// Kepler's equation e sinh F − F = t √(μ/|a|³), by Newton from a starter that brackets its growth; error a few units in the last place, times e/(e − 1) near a
/// parabola.
pub fn hyperbola_state(gm: f64, v_inf_sq: f64, q: f64, t: f64) -> State {
    let a = gm / v_inf_sq;
    let e = super::hyperbola_eccentricity(gm, v_inf_sq, q);
    let n = (gm / (a * a * a)).sqrt();
    let mean = n * t;
    // Bounds from above, so that Newton comes down steadily: e sinh F − F is at least (e − 1) F, e F³/6, and, for F above 1, sinh F
    // times 1 − 1/sinh 1.
    let size = mean.abs();
    let mut anomaly = (6.72 * size)
        .asinh()
        .max(1.0)
        .min((6.0 * size / e).cbrt())
        .min(size / (e - 1.0))
        .copysign(mean);
    for _ in 0..60 {
        let step = (e * anomaly.sinh() - anomaly - mean) / (e * anomaly.cosh() - 1.0);
        anomaly -= step;
        if step.abs() <= 1e-15 * anomaly.abs().max(1e-3) {
            break;
        }
    }
    let (sinh, cosh) = (anomaly.sinh(), anomaly.cosh());
    let rate = n / (e * cosh - 1.0);
    // q + a (1 − cosh F), written so that a near-parabola keeps its digits.
    let half = (0.5 * anomaly).sinh();
    let minor = a * ((e - 1.0) * (e + 1.0)).sqrt();
    [
        q - 2.0 * a * half * half,
        minor * sinh,
        -a * sinh * rate,
        minor * cosh * rate,
    ]
}

/// The state on an ellipse at a time from one of its apsides, s.
///
/// Kepler's equation E − e sin E = M; from apoapsis with E = π + x, M = π + m it reads x + e sin x = m, which keeps its digits there.
/// Newton, held in its bracket; error a few units in the last place. Radii in km, positive, the periapsis not above the apoapsis; `t` in s.
pub fn ellipse_state(gm: f64, periapsis: f64, apoapsis: f64, t: f64, from_apoapsis: bool) -> State {
    let a = 0.5 * (periapsis + apoapsis);
    let e = (apoapsis - periapsis) / (apoapsis + periapsis);
    let n = (gm / a).sqrt() / a;
    // Whole revolutions do not matter for the state.
    let mean = {
        let m = n * t;
        m - 2.0 * PI * (m / (2.0 * PI)).round()
    };
    let sign = if from_apoapsis { 1.0 } else { -1.0 };
    let (mut low, mut high) = if mean < 0.0 { (-PI, 0.0) } else { (0.0, PI) };
    let mut x = mean / (1.0 + sign * e * 0.9);
    if !(low..=high).contains(&x) {
        x = 0.5 * (low + high);
    }
    for _ in 0..60 {
        let (sine, cosine) = x.sin_cos();
        let miss = x + sign * e * sine - mean;
        if 0.0 < miss {
            high = x;
        } else {
            low = x;
        }
        let newton = x - miss / (1.0 + sign * e * cosine);
        let next = if low <= newton && newton <= high {
            newton
        } else {
            0.5 * (low + high)
        };
        let moved = (next - x).abs();
        x = next;
        if moved <= 1e-15 * x.abs().max(1e-3) {
            break;
        }
    }
    let (sine, cosine) = x.sin_cos();
    // cos E, sin E, and dE/dt, by x.
    let (sine_e, cosine_e) = (-sign * sine, -sign * cosine);
    let rate = n / (1.0 + sign * e * cosine);
    let minor = (periapsis * apoapsis).sqrt();
    [
        a * (cosine_e - e),
        minor * sine_e,
        -a * sine_e * rate,
        minor * cosine_e * rate,
    ]
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::physics::conic;

    #[test]
    fn a_state_on_the_hyperbola_keeps_energy_and_momentum() {
        let (gm, v_inf_sq, q) = (42_828.375, 2.65 * 2.65, 3696.19);
        for t in [-1e6, -4000.0, -200.0, -1e-3, 0.0, 300.0] {
            let y = hyperbola_state(gm, v_inf_sq, q, t);
            let energy = 0.5 * (y[2] * y[2] + y[3] * y[3]) - gm / y[0].hypot(y[1]);
            assert!(
                (energy / (0.5 * v_inf_sq) - 1.0).abs() < 1e-12,
                "{t}: {energy}"
            );
            let momentum = y[0] * y[3] - y[1] * y[2];
            assert!(
                (momentum / (q * (v_inf_sq + 2.0 * gm / q).sqrt()) - 1.0).abs() < 1e-12,
                "{t}"
            );
            // The clock agrees with the time to that radius.
            if t < -1.0 {
                let r = y[0].hypot(y[1]);
                let back =
                    conic::time_to_radius_hyperbola_s(gm, v_inf_sq, q, r).expect("above periapsis");
                assert!((back / -t - 1.0).abs() < 1e-9, "{t}: {back}");
            }
        }
    }

    #[test]
    fn a_state_on_an_ellipse_keeps_energy_momentum_and_clock() {
        let (gm, p, a) = (4902.8, 1837.4, 60_000.0);
        for from_apoapsis in [false, true] {
            for t in [-40_000.0, -900.0, 0.0, 1e-3, 5000.0] {
                let y = ellipse_state(gm, p, a, t, from_apoapsis);
                let r = y[0].hypot(y[1]);
                let energy = 0.5 * (y[2] * y[2] + y[3] * y[3]) - gm / r;
                assert!((energy / (-gm / (p + a)) - 1.0).abs() < 1e-12, "{t}");
                let momentum = y[0] * y[3] - y[1] * y[2];
                let expected = p * conic::periapsis_speed_km_s(gm, p, a);
                assert!((momentum / expected - 1.0).abs() < 1e-13, "{t}");
                // At the apsides the radius does not tell the time.
                if t.abs() < 1.0 {
                    continue;
                }
                let clock = conic::time_to_radius_ellipse_s(gm, p, a, r).expect("on it");
                let from_periapsis = if from_apoapsis {
                    0.5 * conic::period_s(gm, p, a) - t.abs()
                } else {
                    t.abs()
                };
                assert!((clock - from_periapsis).abs() < 1e-5, "{t}: {clock}");
            }
        }
    }
}
