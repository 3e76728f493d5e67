//! Where the north pole of a body points, and so what "equator" means when an inclination is asked for.
//!
//! # Formula
//! α = α₀ + α₁ T + Σ aₖ sin(φₖ + ωₖ T), δ = δ₀ + δ₁ T + Σ dₖ cos(ψₖ + ωₖ T); T in Julian centuries of
//! TDB from J2000.0, all else in degrees. α and δ are right ascension and declination in the ICRF.
//!
//! # Source
//! IAU WGCCRE 2015: Archinal et al. 2018, Celest. Mech. Dyn. Astron. 130:22,
//! doi 10.1007/s10569-017-9805-5. Its north pole is the one on the north side of the invariable plane:
//! Venus and Uranus turn backwards about it.
//!
//! # Accuracy
//! The report's own where nothing is said beside the body. Some series are cut, and the constant then
//! says by how much. No nutation: the Earth's pole is good to some 0.003°.

/// Direction of a north pole as a slow series in time.
///
/// Right ascension and declination carry separate terms because for Mars their phases differ.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Pole {
    /// Right ascension at J2000.0 without the periodic terms, deg.
    pub ra_deg: f64,
    /// Its drift, deg per Julian century.
    pub ra_rate_deg_cy: f64,
    /// Declination at J2000.0 without the periodic terms, deg.
    pub dec_deg: f64,
    /// Its drift, deg per Julian century.
    pub dec_rate_deg_cy: f64,
    /// Sine terms of the right ascension.
    pub ra_terms: &'static [PoleTerm],
    /// Cosine terms of the declination.
    pub dec_terms: &'static [PoleTerm],
}

/// One periodic term: amplitude times sine or cosine of (phase + rate T).
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct PoleTerm {
    /// Amplitude, deg; may be negative.
    pub amplitude_deg: f64,
    /// Argument at J2000.0, deg.
    pub phase_deg: f64,
    /// Rate of the argument, deg per Julian century.
    pub rate_deg_cy: f64,
}

impl PoleTerm {
    fn argument_rad(&self, centuries_tdb: f64) -> f64 {
        (self.phase_deg + self.rate_deg_cy * centuries_tdb).to_radians()
    }
}

impl Pole {
    /// Right ascension and declination (rad) at `centuries_tdb` Julian centuries of TDB from J2000.0
    /// (JD 2451545.0); the right ascension is not reduced to one turn.
    ///
    /// Meant for a few centuries about J2000.0; further out the linear drifts stop being a good guide.
    pub fn at(&self, centuries_tdb: f64) -> (f64, f64) {
        let ra_wobble: f64 = self
            .ra_terms
            .iter()
            .map(|term| term.amplitude_deg * term.argument_rad(centuries_tdb).sin())
            .sum();
        let dec_wobble: f64 = self
            .dec_terms
            .iter()
            .map(|term| term.amplitude_deg * term.argument_rad(centuries_tdb).cos())
            .sum();
        (
            (self.ra_deg + self.ra_rate_deg_cy * centuries_tdb + ra_wobble).to_radians(),
            (self.dec_deg + self.dec_rate_deg_cy * centuries_tdb + dec_wobble).to_radians(),
        )
    }
}

/// A pole without periodic terms.
const fn drifting(ra_deg: f64, ra_rate_deg_cy: f64, dec_deg: f64, dec_rate_deg_cy: f64) -> Pole {
    Pole {
        ra_deg,
        ra_rate_deg_cy,
        dec_deg,
        dec_rate_deg_cy,
        ra_terms: &[],
        dec_terms: &[],
    }
}

/// A periodic term.
const fn term(amplitude_deg: f64, phase_deg: f64, rate_deg_cy: f64) -> PoleTerm {
    PoleTerm {
        amplitude_deg,
        phase_deg,
        rate_deg_cy,
    }
}

/// Sun.
pub const SUN: Pole = drifting(286.13, 0.0, 63.87, 0.0);

/// Mercury.
pub const MERCURY: Pole = drifting(281.0103, -0.0328, 61.4155, -0.0049);

/// Venus.
pub const VENUS: Pole = drifting(272.76, 0.0, 67.16, 0.0);

/// Earth, mean pole.
pub const EARTH: Pole = drifting(0.0, -0.641, 90.0, -0.557);

/// Days in a Julian century: the report gives the Moon's rates per day.
const DAYS_PER_CENTURY: f64 = 36_525.0;
const MOON_E1: (f64, f64) = (125.045, -0.052_992_1 * DAYS_PER_CENTURY);
// The arguments E2 (twice E1) and E3 and the term of E3 in declination are from memory. The Cassini state
// in the tests confirms E2; E3 is the monthly libration, 0.03°, whose phase nothing here confirms.
const MOON_E2: (f64, f64) = (250.089, -0.105_984_2 * DAYS_PER_CENTURY);
const MOON_E3: (f64, f64) = (260.008, 13.012_000_9 * DAYS_PER_CENTURY);

/// Moon: the three largest arguments; each term left out stays below 0.01° on the sky.
pub const MOON: Pole = Pole {
    ra_deg: 269.9949,
    ra_rate_deg_cy: 0.0031,
    dec_deg: 66.5392,
    dec_rate_deg_cy: 0.0130,
    ra_terms: &[
        term(-3.8787, MOON_E1.0, MOON_E1.1),
        term(-0.1204, MOON_E2.0, MOON_E2.1),
        term(0.0700, MOON_E3.0, MOON_E3.1),
    ],
    dec_terms: &[
        term(1.5419, MOON_E1.0, MOON_E1.1),
        term(0.0239, MOON_E2.0, MOON_E2.1),
        term(-0.0278, MOON_E3.0, MOON_E3.1),
    ],
};

/// Mars. The slow last terms belong to the definition: without them the pole is wrong by 0.41° in right
/// ascension and 1.55° in declination (1.6° on the sky, wholly within reach of a wrong inclination).
pub const MARS: Pole = Pole {
    ra_deg: 317.269_202,
    ra_rate_deg_cy: -0.109_275_47,
    dec_deg: 54.432_516,
    dec_rate_deg_cy: -0.058_271_05,
    ra_terms: &[
        term(0.000_068, 198.991_226, 19_139.481_998_5),
        term(0.000_238, 226.292_679, 38_280.851_128_1),
        term(0.000_052, 249.663_391, 57_420.725_159_3),
        term(0.000_009, 266.183_510, 76_560.636_795_0),
        term(0.419_057, 79.398_797, 0.504_261_5),
    ],
    dec_terms: &[
        term(0.000_051, 122.433_576, 19_139.940_747_6),
        term(0.000_141, 43.058_401, 38_280.875_327_2),
        term(0.000_031, 57.663_379, 57_420.751_720_5),
        term(0.000_005, 79.476_401, 76_560.649_500_4),
        term(1.591_274, 166.325_722, 0.504_261_5),
    ],
};

/// Jupiter, without its five terms, each below 0.0022°.
pub const JUPITER: Pole = drifting(268.056_595, -0.006_499, 64.495_303, 0.002_413);

/// Saturn.
pub const SATURN: Pole = drifting(40.589, -0.036, 83.537, -0.004);

/// Uranus.
pub const URANUS: Pole = drifting(257.311, 0.0, -15.175, 0.0);

const NEPTUNE_N: (f64, f64) = (357.85, 52.316);

/// Neptune, drawn round by Triton.
pub const NEPTUNE: Pole = Pole {
    ra_deg: 299.36,
    ra_rate_deg_cy: 0.0,
    dec_deg: 43.46,
    dec_rate_deg_cy: 0.0,
    ra_terms: &[term(0.70, NEPTUNE_N.0, NEPTUNE_N.1)],
    dec_terms: &[term(-0.51, NEPTUNE_N.0, NEPTUNE_N.1)],
};

// The nodes of Io (7.4 years) and Europa (30 years). Both arguments are from memory: the report's
// amplitudes were reconfirmed, these were not.
const JUPITER_J3: (f64, f64) = (283.90, 4_850.7);
const JUPITER_J4: (f64, f64) = (355.80, 1_191.3);

/// Io.
pub const IO: Pole = Pole {
    ra_deg: 268.05,
    ra_rate_deg_cy: -0.009,
    dec_deg: 64.50,
    dec_rate_deg_cy: 0.003,
    ra_terms: &[
        term(0.094, JUPITER_J3.0, JUPITER_J3.1),
        term(0.024, JUPITER_J4.0, JUPITER_J4.1),
    ],
    dec_terms: &[
        term(0.040, JUPITER_J3.0, JUPITER_J3.1),
        term(0.011, JUPITER_J4.0, JUPITER_J4.1),
    ],
};

/// Europa: the largest term only; the others stay below 0.05°.
pub const EUROPA: Pole = Pole {
    ra_deg: 268.08,
    ra_rate_deg_cy: -0.009,
    dec_deg: 64.51,
    dec_rate_deg_cy: 0.003,
    ra_terms: &[term(1.086, JUPITER_J4.0, JUPITER_J4.1)],
    dec_terms: &[term(0.468, JUPITER_J4.0, JUPITER_J4.1)],
};

/// Ganymede, mean: periodic terms of some 0.2° are left out.
pub const GANYMEDE: Pole = drifting(268.20, -0.009, 64.57, 0.003);

/// Callisto, mean: periodic terms of some 0.3° are left out.
pub const CALLISTO: Pole = drifting(268.72, -0.009, 64.83, 0.003);

/// Enceladus.
pub const ENCELADUS: Pole = drifting(40.66, -0.036, 83.52, -0.004);

/// Titan.
pub const TITAN: Pole = drifting(39.4827, 0.0, 83.4279, 0.0);

#[cfg(test)]
mod tests {
    use super::*;

    fn direction((ra, dec): (f64, f64)) -> [f64; 3] {
        [dec.cos() * ra.cos(), dec.cos() * ra.sin(), dec.sin()]
    }

    fn angle_deg(a: [f64; 3], b: [f64; 3]) -> f64 {
        let cross = [
            a[1] * b[2] - a[2] * b[1],
            a[2] * b[0] - a[0] * b[2],
            a[0] * b[1] - a[1] * b[0],
        ];
        let dot: f64 = a.iter().zip(b).map(|(x, y)| x * y).sum();
        cross
            .iter()
            .map(|x| x * x)
            .sum::<f64>()
            .sqrt()
            .atan2(dot)
            .to_degrees()
    }

    /// Normal of an orbit given in the ecliptic of J2000, in equatorial axes (ε = 84381.448″).
    fn orbit_normal(inclination_deg: f64, node_deg: f64) -> [f64; 3] {
        let (sin_i, cos_i) = inclination_deg.to_radians().sin_cos();
        let (sin_node, cos_node) = node_deg.to_radians().sin_cos();
        let (sin_eps, cos_eps) = (84_381.448_f64 / 3_600.0).to_radians().sin_cos();
        let [x, y, z] = [sin_i * sin_node, -sin_i * cos_node, cos_i];
        [x, y * cos_eps - z * sin_eps, y * sin_eps + z * cos_eps]
    }

    #[test]
    fn mars_at_j2000_is_the_published_direction() {
        // Archinal et al. 2018, the sum of the Mars series at J2000: 317.6808544°, 52.8864393°.
        let (ra, dec) = MARS.at(0.0);
        assert!(
            (ra.to_degrees() - 317.680_854_4).abs() <= 5e-8,
            "{}",
            ra.to_degrees()
        );
        assert!(
            (dec.to_degrees() - 52.886_439_3).abs() <= 5e-8,
            "{}",
            dec.to_degrees()
        );
    }

    #[test]
    fn mars_constants_alone_are_the_known_trap() {
        let (ra, dec) = MARS.at(0.0);
        assert!((ra.to_degrees() - MARS.ra_deg - 0.41).abs() < 0.005);
        assert!((dec.to_degrees() - MARS.dec_deg + 1.55).abs() < 0.005);
    }

    #[test]
    fn obliquities_against_the_planets_orbits() {
        // Orbits: JPL approximate elements, table 1 (Standish), inclination and node at J2000.
        // Obliquities: recomputed for the reference collection from the same poles, to four decimals;
        // NASA fact sheets give 25.19, 26.73, 97.77 (by spin: 180° less 82.23°) and 28.32.
        let rows = [
            ("Mercury", MERCURY, 7.004_979_02, 48.330_765_93, 0.0340),
            ("Venus", VENUS, 3.394_676_05, 76.679_842_55, 2.6376),
            ("Earth", EARTH, -0.000_015_31, 0.0, 23.4393),
            ("Mars", MARS, 1.849_691_42, 49.559_538_91, 25.1916),
            ("Jupiter", JUPITER, 1.304_396_95, 100.473_909_09, 3.1199),
            ("Saturn", SATURN, 2.485_991_87, 113.662_424_48, 26.7301),
            ("Uranus", URANUS, 0.772_637_83, 74.016_925_03, 82.2300),
            ("Neptune", NEPTUNE, 1.770_043_47, 131.784_225_74, 28.3181),
        ];
        for (name, pole, inclination, node, expected) in rows {
            let found = angle_deg(direction(pole.at(0.0)), orbit_normal(inclination, node));
            assert!(
                (found - expected).abs() <= 5.1e-5,
                "{name}: {found} for {expected}"
            );
        }
    }

    #[test]
    fn moon_keeps_its_cassini_state() {
        // Cassini's laws: the mean equator stays inclined to the ecliptic by 1.5424° (1°32′33″, from memory)
        // while its node goes round in 18.6 years. The monthly libration of the pole about it is the
        // term in E3, 0.070° cos δ = 0.028°; with it and the series cut short, 0.033° at most.
        let ecliptic_pole = orbit_normal(0.0, 0.0);
        let node_period_cy = 360.0 / 0.052_992_1 / DAYS_PER_CENTURY;
        let samples = 6_800;
        let mut sum = 0.0;
        for step in 0..samples {
            let centuries = node_period_cy * f64::from(step) / f64::from(samples);
            let found = angle_deg(direction(MOON.at(centuries)), ecliptic_pole);
            assert!((found - 1.5424).abs() < 0.035, "step {step}: {found}");
            sum += found;
        }
        let mean = sum / f64::from(samples);
        assert!((mean - 1.5424).abs() < 0.0005, "{mean}");
    }

    #[test]
    fn europa_leans_on_jupiter_by_its_inclination() {
        // JPL mean elements: Europa 0.466° to its Laplace plane (from memory). Synchronous moons keep the
        // pole near the orbit normal; 0.05° is what the terms left out amount to.
        for step in 0..100 {
            let centuries = f64::from(step) * 0.01;
            let found = angle_deg(
                direction(EUROPA.at(centuries)),
                direction(JUPITER.at(centuries)),
            );
            assert!((found - 0.466).abs() < 0.05, "step {step}: {found}");
        }
    }

    #[test]
    fn neptune_stays_within_its_wobble() {
        // Period of N: 36000/52.316 = 688 years; a full turn later only the rounding of N remains.
        let turn = 360.0 / 52.316;
        let (start, end) = (NEPTUNE.at(0.0), NEPTUNE.at(turn));
        assert!(angle_deg(direction(start), direction(end)) < 1e-9);
        // Archinal et al. 2018 at J2000: 299.36 + 0.70 sin 357.85° and 43.46 − 0.51 cos 357.85°.
        assert!(
            (start.0.to_degrees() - 299.333_739).abs() < 1e-6,
            "{}",
            start.0.to_degrees()
        );
        assert!(
            (start.1.to_degrees() - 42.950_359).abs() < 1e-6,
            "{}",
            start.1.to_degrees()
        );
    }
}
