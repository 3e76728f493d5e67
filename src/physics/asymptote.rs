//! The arrival asymptote: which inclinations are free, what the others cost in turn, where to aim.
//!
//! Symbols: δ declination of the incoming asymptote to the body's equator, i inclination of the wanted
//! orbit, ν∞ true anomaly of the asymptote, θ B-plane angle from the axis T (parallel to the
//! equator). All angles in radians.

use std::f64::consts::PI;

/// The inclinations that aiming alone reaches: |δ| ≤ i ≤ π − |δ|, as (lowest, highest), rad.
///
/// Source: standard (the orbit plane contains the asymptote, so it cannot be less inclined than the
/// asymptote's latitude).
pub fn free_inclination_rad(declination: f64) -> (f64, f64) {
    (declination.abs(), PI - declination.abs())
}

/// By how much a wanted inclination lies outside the free range, rad; zero inside.
pub fn missing_inclination_rad(inclination: f64, declination: f64) -> f64 {
    let (lowest, highest) = free_inclination_rad(declination);
    (lowest - inclination).max(inclination - highest).max(0.0)
}

/// The turn about the line of apsides that makes up for `missing` (rad) of inclination.
///
/// # Formula
/// sin θ = sin m / sin ν∞, with cos ν∞ = −1/e.
///
/// # Why
/// Turning the plane by θ about the line of apsides moves the asymptote's direction, which lies ν∞ from
/// that line, out of the plane by the arc whose sine is sin ν∞ sin θ; that arc must at least be m.
/// Derived; checked against a search over all aim angles in the tests. A brake near e = 1 has its line of
/// apsides almost along the asymptote and needs a far larger turn than m.
///
/// # Errors
/// `None` where sin m > sin ν∞: the periapsis itself then lies further from the equator than the wanted
/// inclination, and no burn on the line of apsides reaches it.
#[inline]
pub fn turn_about_apsides_rad(missing: f64, eccentricity: f64) -> Option<f64> {
    if missing == 0.0 {
        return Some(0.0);
    }
    let sine = missing.sin() / sine_asymptote_anomaly(eccentricity);
    (sine <= 1.0).then(|| sine.asin())
}

/// sin ν∞ = √(1 − 1/e²), written without cancellation near e = 1.
#[inline]
pub fn sine_asymptote_anomaly(eccentricity: f64) -> f64 {
    ((eccentricity - 1.0) * (eccentricity + 1.0)).sqrt() / eccentricity
}

/// B-plane angle for an inclination: cos i = cos δ cos θ, rad in [0, π]; −θ is the other solution.
///
/// `None` outside the free range. The two solutions pass north and south of the body. Source: Kizner (1959), JPL EP-674 (the plane); the
/// relation is spherical trigonometry.
pub fn b_plane_angle_rad(inclination: f64, declination: f64) -> Option<f64> {
    // At the ends of the free range rounding may carry the ratio past one by a few units in the last place.
    let cosine = inclination.cos() / declination.cos();
    (cosine.abs() <= 1.0 + 1e-12).then(|| cosine.clamp(-1.0, 1.0).acos())
}

#[cfg(test)]
mod tests {
    use super::*;

    fn deg(x: f64) -> f64 {
        x.to_degrees()
    }

    #[test]
    fn turn_matches_the_design_values() {
        // Design notes, 2-physics section 2, from a search over all aim angles; the first of them is printed there as 38.214
        // by a slip of one digit (asin(sin 20 / sin acos(-1/1.2)) = 38.2240, and the search below agrees).
        for (declination, inclination, e, expected) in [
            (30.0, 10.0, 1.2, 38.224),
            (30.0, 10.0, 2.0, 23.262),
            (40.0, 5.0, 3.0, 37.472),
        ] {
            let missing =
                missing_inclination_rad(f64::to_radians(inclination), f64::to_radians(declination));
            let turn = turn_about_apsides_rad(missing, e).expect("reachable");
            assert!(
                (deg(turn) - expected).abs() < 6e-4,
                "{} {expected}",
                deg(turn)
            );
        }
    }

    /// Independent route: walk every aim angle, build the plane and the periapsis as vectors, and ask
    /// for the smallest rotation about the periapsis that gives the wanted inclination.
    #[test]
    fn turn_matches_brute_force() {
        for (declination, inclination, e) in [
            (30.0_f64, 10.0_f64, 1.2_f64),
            (25.0, 14.0, 1.5),
            (-40.0, 5.0, 3.0),
            (20.0, 165.0, 1.4),
        ] {
            let (declination, inclination) = (declination.to_radians(), inclination.to_radians());
            let towards = [declination.cos(), 0.0, declination.sin()];
            let nu = (-1.0 / e).acos();
            let mut least = f64::INFINITY;
            for k in 0..200_000 {
                let aim = 2.0 * PI * f64::from(k) / 200_000.0;
                // Unit vectors normal to the asymptote: east and north, mixed by the aim angle.
                let north = [-declination.sin(), 0.0, declination.cos()];
                let east = [0.0, 1.0, 0.0];
                let side: [f64; 3] =
                    std::array::from_fn(|j| aim.cos() * east[j] + aim.sin() * north[j]);
                // The spacecraft comes from −towards; periapsis lies nu away from there.
                let periapsis: [f64; 3] =
                    std::array::from_fn(|j| -nu.cos() * towards[j] + nu.sin() * side[j]);
                let normal = cross(towards, side);
                // Rotate the normal about the periapsis by t: its z part is n_z cos t + (p × n)_z sin t.
                let tangent = cross(periapsis, normal);
                let (n, t) = (normal[2], tangent[2]);
                let amplitude = n.hypot(t);
                if inclination.cos().abs() <= amplitude {
                    let middle = t.atan2(n);
                    let half = (inclination.cos() / amplitude).acos();
                    for turn in [middle + half, middle - half] {
                        let wrapped = (turn + PI).rem_euclid(2.0 * PI) - PI;
                        least = least.min(wrapped.abs());
                    }
                }
            }
            let missing = missing_inclination_rad(inclination, declination);
            let turn = turn_about_apsides_rad(missing, e).expect("reachable");
            assert!((turn - least).abs() < 1e-6, "{} {}", deg(turn), deg(least));
        }
    }

    fn cross(a: [f64; 3], b: [f64; 3]) -> [f64; 3] {
        [
            a[1] * b[2] - a[2] * b[1],
            a[2] * b[0] - a[0] * b[2],
            a[0] * b[1] - a[1] * b[0],
        ]
    }

    #[test]
    fn free_inclinations_cost_nothing_and_the_rest_may_be_out_of_reach() {
        assert_eq!(missing_inclination_rad(0.5, 0.4), 0.0);
        assert_eq!(turn_about_apsides_rad(0.0, 1.1), Some(0.0));
        assert_eq!(turn_about_apsides_rad(1.0, 1.1), None);
    }

    #[test]
    fn b_plane_angle_gives_published_inclinations() {
        // Kizner (1959) relation; values recomputed in ../shared/reference/published.md section 9.
        for (declination, theta, inclination) in [
            (20.0, 0.0, 20.0),
            (20.0, 45.0, 48.358_857),
            (20.0, 90.0, 90.0),
            (20.0, 180.0, 160.0),
            (40.0, 45.0, 57.202_249),
        ] {
            let angle =
                b_plane_angle_rad(f64::to_radians(inclination), f64::to_radians(declination))
                    .expect("free");
            assert!((deg(angle) - theta).abs() < 2e-6, "{} {theta}", deg(angle));
        }
        assert_eq!(b_plane_angle_rad(0.1, 0.4), None);
    }
}
