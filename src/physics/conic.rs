//! Two-body conics by their apsides: speeds, periods, the arriving hyperbola.
//!
//! Symbols: μ the body's GM (km³/s²), q and p periapsis radii (km), A and Q apoapsis radii (km), v∞ the
//! hyperbolic excess speed (km/s). All functions are exact two-body mechanics (any astrodynamics
//! textbook; vis-viva v² = 2μ/r − μ/a) and take radii that are positive and finite; the callers'
//! types see to that.

mod state;

pub use state::{State, ellipse_state, hyperbola_state};

use std::f64::consts::PI;

/// Speed at the periapsis q of an ellipse with apoapsis Q: √(2μ Q / (q (q + Q))), km/s.
#[inline]
pub fn periapsis_speed_km_s(gm: f64, q: f64, apoapsis: f64) -> f64 {
    (2.0 * gm * apoapsis / (q * (q + apoapsis))).sqrt()
}

/// Speed at the apoapsis Q of an ellipse with periapsis q: √(2μ q / (Q (q + Q))), km/s.
#[inline]
pub fn apoapsis_speed_km_s(gm: f64, q: f64, apoapsis: f64) -> f64 {
    (2.0 * gm * q / (apoapsis * (q + apoapsis))).sqrt()
}

/// Speed at radius r on a hyperbola: √(v∞² + 2μ/r), km/s. Takes v∞² (km²/s²).
#[inline]
pub fn hyperbola_speed_km_s(gm: f64, v_inf_sq: f64, r: f64) -> f64 {
    (v_inf_sq + 2.0 * gm / r).sqrt()
}

/// Escape speed at radius r: √(2μ/r), km/s.
#[inline]
pub fn escape_speed_km_s(gm: f64, r: f64) -> f64 {
    (2.0 * gm / r).sqrt()
}

/// Speed on a circle of radius r: √(μ/r), km/s.
#[inline]
pub fn circular_speed_km_s(gm: f64, r: f64) -> f64 {
    (gm / r).sqrt()
}

/// Period of an ellipse by its apsides: 2π √(a³/μ) with a = (q + Q)/2, s.
#[inline]
pub fn period_s(gm: f64, q: f64, apoapsis: f64) -> f64 {
    let a = 0.5 * (q + apoapsis);
    2.0 * PI * a * (a / gm).sqrt()
}

/// Semi-major axis for a period T (s): (μ (T/2π)²)^(1/3), km.
pub fn semi_major_axis_km(gm: f64, period_s: f64) -> f64 {
    (gm * (period_s / (2.0 * PI)).powi(2)).cbrt()
}

/// Break-even radius 2μ/v∞², km: where the escape speed equals v∞. Takes v∞² (km²/s²).
///
/// A target apoapsis (or loop apoapsis) at this radius costs the same by direct, dip and loop in the
/// ideal model (derived, `docs/model.md`).
#[inline]
pub fn break_even_radius_km(gm: f64, v_inf_sq: f64) -> f64 {
    2.0 * gm / v_inf_sq
}

/// Eccentricity of the arriving hyperbola with periapsis q: 1 + q v∞²/μ.
#[inline]
pub fn hyperbola_eccentricity(gm: f64, v_inf_sq: f64, q: f64) -> f64 {
    1.0 + q * v_inf_sq / gm
}

/// Angle by which the whole flyby turns the velocity: 2 asin(1/e), rad.
pub fn turn_angle_rad(eccentricity: f64) -> f64 {
    2.0 * (1.0 / eccentricity).asin()
}

/// Aiming radius |B| (impact parameter) for periapsis q: √(q² + 2μq/v∞²), km.
#[inline]
pub fn aiming_radius_km(gm: f64, v_inf_sq: f64, q: f64) -> f64 {
    (q * q + 2.0 * gm * q / v_inf_sq).sqrt()
}

/// Time from periapsis to radius r on an ellipse with apsides q ≤ Q (outbound), s.
///
/// Kepler's equation: E from r = a(1 − e cos E), t = (E − e sin E) √(a³/μ). `None` outside [q, Q].
pub fn time_to_radius_ellipse_s(gm: f64, q: f64, apoapsis: f64, r: f64) -> Option<f64> {
    if !(q..=apoapsis).contains(&r) {
        return None;
    }
    let a = 0.5 * (q + apoapsis);
    // sin²(E/2) = (r − q)/(Q − q): no cancellation at either apsis.
    let half = if q < apoapsis {
        ((r - q) / (apoapsis - q)).min(1.0).sqrt().asin()
    } else {
        0.0
    };
    let e = (apoapsis - q) / (apoapsis + q);
    let anomaly = 2.0 * half;
    Some((anomaly - e * anomaly.sin()) * (a * a * a / gm).sqrt())
}

/// Time from radius r down to the periapsis q of a hyperbola, s. Takes v∞² (km²/s²).
///
/// r = |a|(e cosh F − 1), t = (e sinh F − F) √(|a|³/μ), |a| = μ/v∞². `None` below the periapsis.
pub fn time_to_radius_hyperbola_s(gm: f64, v_inf_sq: f64, q: f64, r: f64) -> Option<f64> {
    if r < q {
        return None;
    }
    let a = gm / v_inf_sq;
    let e = hyperbola_eccentricity(gm, v_inf_sq, q);
    // sinh²(F/2) = (r − q)/(2 |a| e): no cancellation at periapsis.
    let anomaly = 2.0 * ((r - q) / (2.0 * a * e)).sqrt().asinh();
    Some((e * anomaly.sinh() - anomaly) * (a * a * a / gm).sqrt())
}

/// A closed orbit by its apsis radii, km. The periapsis is never above the apoapsis.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Orbit {
    /// Periapsis radius, km.
    pub periapsis_km: f64,
    /// Apoapsis radius, km.
    pub apoapsis_km: f64,
}

impl Orbit {
    /// Eccentricity (A − p)/(A + p).
    pub fn eccentricity(&self) -> f64 {
        (self.apoapsis_km - self.periapsis_km) / (self.apoapsis_km + self.periapsis_km)
    }

    /// Period, s.
    pub fn period_s(&self, gm: f64) -> f64 {
        period_s(gm, self.periapsis_km, self.apoapsis_km)
    }

    /// Specific energy −μ/(p + A), km²/s².
    pub fn energy_km2_s2(&self, gm: f64) -> f64 {
        -gm / (self.periapsis_km + self.apoapsis_km)
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn apsis_speeds_add_up() {
        // Exact identity: on an ellipse with apsides q, Q the two apsis speeds add to √(2μ(1/q + 1/Q)).
        for (q, apoapsis) in [(1837.4, 14_000.0), (3000.0, 3000.0), (100.0, 1e7)] {
            let sum = periapsis_speed_km_s(4902.8, q, apoapsis)
                + apoapsis_speed_km_s(4902.8, q, apoapsis);
            let expected = (2.0 * 4902.8 * (1.0 / q + 1.0 / apoapsis)).sqrt();
            assert!((sum / expected - 1.0).abs() <= 4e-16);
        }
    }

    #[test]
    fn times_meet_their_limits() {
        let (gm, q, apoapsis) = (398_600.4418, 6778.137, 384_400.0);
        let half = 0.5 * period_s(gm, q, apoapsis);
        let whole = time_to_radius_ellipse_s(gm, q, apoapsis, apoapsis).expect("on the ellipse");
        assert!((whole / half - 1.0).abs() <= 1e-15);
        assert_eq!(time_to_radius_ellipse_s(gm, q, apoapsis, q), Some(0.0));
        assert_eq!(time_to_radius_ellipse_s(gm, q, apoapsis, 400_000.0), None);
        // Far out a hyperbola is flown at v∞: the mean speed tends to it from above.
        let far = time_to_radius_hyperbola_s(4902.8, 0.7225, 1837.4, 1e9).expect("above periapsis");
        assert!((1e9 / far / 0.85 - 1.0).abs() <= 2e-4);
    }

    #[test]
    fn period_and_semi_major_axis_are_inverse() {
        // Curtis, Orbital Mechanics for Engineering Students, example 8.5: a 7 h orbit at Mars with
        // μ 42830 has a = 8832 km (printed value).
        let a = semi_major_axis_km(42_830.0, 25_200.0);
        assert!((a - 8832.0).abs() < 0.5);
        assert!((period_s(42_830.0, a, a) / 25_200.0 - 1.0).abs() <= 4e-16);
    }
}
