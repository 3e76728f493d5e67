//! The spacecraft as the rocket equation sees it: masses, propellant, burn times.

/// Standard gravity, m/s²: exact by definition (3rd CGPM, 1901; ISO 80000-3). Turns Isp into exhaust speed.
pub const STANDARD_GRAVITY_M_S2: f64 = 9.806_65;

/// A spacecraft with one engine. Masses and Isp are positive and finite.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Vehicle {
    /// Mass without usable propellant, kg.
    pub dry_mass_kg: f64,
    /// Propellant aboard before the first burn, kg.
    pub propellant_kg: f64,
    /// Thrust, N.
    pub thrust_n: f64,
    /// Specific impulse, s.
    pub isp_s: f64,
}

impl Vehicle {
    /// Mass before the first burn, kg.
    pub fn start_mass_kg(&self) -> f64 {
        self.dry_mass_kg + self.propellant_kg
    }

    /// Effective exhaust speed Isp g₀, km/s.
    pub fn exhaust_speed_km_s(&self) -> f64 {
        self.isp_s * STANDARD_GRAVITY_M_S2 * 1e-3
    }

    /// Propellant mass flow T/(Isp g₀), kg/s.
    pub fn mass_flow_kg_s(&self) -> f64 {
        self.thrust_n / (self.isp_s * STANDARD_GRAVITY_M_S2)
    }

    /// Propellant for `dv_km_s` from `mass_kg`: m (1 − exp(−Δv/(Isp g₀))), kg.
    ///
    /// Source: the rocket equation. Written with expm1 so that small burns keep their digits.
    #[inline]
    pub fn propellant_for_kg(&self, mass_kg: f64, dv_km_s: f64) -> f64 {
        -mass_kg * (-dv_km_s / self.exhaust_speed_km_s()).exp_m1()
    }

    /// Time to burn `propellant_kg` at full thrust, s.
    #[inline]
    pub fn burn_time_s(&self, propellant_kg: f64) -> f64 {
        propellant_kg / self.mass_flow_kg_s()
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn margin_policy_example() {
        // ESA SRE-PA/2011.097 margin philosophy, worked in ../shared/reference/published.md section 9:
        // 600 kg dry, 1110 m/s, Isp 318 s → 256.5120044 kg; with 2 % residuals 261.6422445 kg.
        let vehicle = Vehicle {
            dry_mass_kg: 600.0,
            propellant_kg: 256.512_004_4,
            thrust_n: 400.0,
            isp_s: 318.0,
        };
        let used = vehicle.propellant_for_kg(vehicle.start_mass_kg(), 1.110);
        assert!((used - 256.512_004_4).abs() < 1e-6, "{used}");
        assert!((used * 1.02 - 261.642_244_5).abs() < 1e-6);
    }

    #[test]
    fn flown_burn_gives_back_its_isp() {
        // 2001 Mars Odyssey insertion (JPL/NASA releases): 695 N, 262.8 kg in 19.7 min.
        let vehicle = Vehicle {
            dry_mass_kg: 457.0,
            propellant_kg: 262.8,
            thrust_n: 695.0,
            isp_s: 318.754_441_3,
        };
        assert!((vehicle.burn_time_s(262.8) / 60.0 - 19.7).abs() < 1e-3);
    }

    #[test]
    fn burns_in_sequence_equal_one_burn() {
        let vehicle = Vehicle {
            dry_mass_kg: 300.0,
            propellant_kg: 200.0,
            thrust_n: 110.0,
            isp_s: 312.0,
        };
        let first = vehicle.propellant_for_kg(500.0, 0.3);
        let second = vehicle.propellant_for_kg(500.0 - first, 0.2);
        let both = vehicle.propellant_for_kg(500.0, 0.5);
        assert!(((first + second) / both - 1.0).abs() < 1e-15);
    }
}
