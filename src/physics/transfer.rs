//! Where v∞ comes from: given, from a Hohmann transfer between planets, or from an orbit round the parent.
//!
//! Symbols: μ_P parent's GM, μ_M the body's own GM (km³/s²), a distance of the body from its parent (taken
//! as a circle), r₀ periapsis radius of the transfer round the parent (the parking orbit), v₀ speed there, R
//! radius of the sphere of influence, q periapsis radius at the body, n angular rate of the body.

use super::conic::{
    apoapsis_speed_km_s, circular_speed_km_s, hyperbola_speed_km_s, periapsis_speed_km_s,
    time_to_radius_ellipse_s, time_to_radius_hyperbola_s,
};
use crate::numerics::root;
use std::f64::consts::PI;

/// How the speed of arrival follows from the orbit round the parent.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Model {
    /// v∞ is the velocity difference to a massless body at the crossing.
    Textbook,
    /// The velocity difference at the crossing (to the body's true orbital speed) read as the speed at the sphere of influence.
    BoundarySpeed,
    /// Conics patched at the sphere of influence, entry point solved for the wanted periapsis.
    Patched,
    /// The Jacobi integral of the circular restricted three-body problem, in closed form.
    ThreeBody,
}

/// Why an arrival speed does not exist for a periapsis.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum NoArrival {
    /// The passage (this side, this periapsis) cannot be reached from the transfer orbit.
    OutOfReach {
        /// Largest periapsis radius that the patched conic reaches on this side, km; zero if none.
        farthest_km: f64,
    },
    /// The model gives no positive v∞²: the spacecraft would arrive already bound, which no conic from outside does.
    NotHyperbolic,
}

/// The arrival as the ways see it: v∞² as a function of the periapsis.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Approach {
    /// One v∞ for every periapsis: v∞², km²/s².
    Given(f64),
    /// From an orbit round the parent.
    FromParent(ParentTransfer),
}

impl Approach {
    /// v∞² for periapsis radius q (km), km²/s².
    #[inline]
    pub fn v_inf_sq(&self, q: f64) -> Result<f64, NoArrival> {
        match self {
            Approach::Given(v_inf_sq) => Ok(*v_inf_sq),
            Approach::FromParent(transfer) => transfer.v_inf_sq(q),
        }
    }
}

/// The transfer round the parent as a user describes it.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct TransferInput {
    /// GM of the parent, km³/s².
    pub parent_gm: f64,
    /// GM of the body arrived at, km³/s².
    pub body_gm: f64,
    /// Distance of the body from its parent, km.
    pub distance_km: f64,
    /// Radius of departure, the transfer's periapsis round the parent, km.
    pub departure_radius_km: f64,
    /// Apoapsis radius of the transfer round the parent, km (two-body).
    pub apoapsis_km: f64,
    /// Which model gives v∞.
    pub model: Model,
    /// cos i of the passage to the body's orbital plane: +1 prograde, −1 retrograde.
    pub cos_inclination: f64,
}

/// A transfer from an orbit round the parent to its moon, ready to be asked for v∞ at any periapsis.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct ParentTransfer {
    input: TransferInput,
    /// R = a (μ_M/μ_P)^0.4, km (Laplace).
    sphere_km: f64,
    /// Speed at departure v₀, km/s.
    departure_speed: f64,
    /// v∞² of the models that do not depend on q.
    fixed_v_inf_sq: f64,
    /// Angular rate n, rad/s, and the part of the Jacobi relation that does not depend on q, km²/s².
    rate: f64,
    jacobi_part: f64,
    /// Angular momentum at the body (signed, km²/s) that entries on the outbound leg span.
    momentum_span: (f64, f64),
    /// First and last angle of entry on the outbound leg, rad.
    entry_span: (f64, f64),
    /// Angle of entry at which the momentum is least, rad: from the first angle to here it falls.
    least_angle: f64,
}

/// One entry through the sphere of influence.
#[derive(Clone, Copy, Debug)]
struct Entry {
    crossing_radius: f64,
    v_inf_sq: f64,
    /// Component of the angular momentum at the body along its orbit normal, km²/s.
    normal_momentum: f64,
    /// Angular momentum that periapsis q asks for at this v∞, km²/s.
    wanted_momentum: f64,
}

/// A solved patched conic.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Patch {
    /// Angle at the body from the line to the parent to the entry point, positive to the leading side, rad.
    pub entry_angle_rad: f64,
    /// Distance of the entry point from the parent, km.
    pub crossing_radius_km: f64,
    /// v∞² at the body, km²/s².
    pub v_inf_sq: f64,
    /// Time from departure to the entry point, s.
    pub outer_time_s: f64,
    /// Time from the entry point to periapsis at the body, s.
    pub inner_time_s: f64,
}

/// Entry angles looked at when solving for the passage. The span of angular momentum over them is smooth (one
/// rise or fall), so 90 nodes of 4° bracket every solution that the tests know.
const ENTRY_NODES: u32 = 90;

/// Nodes of the search for one passage inside the region of entries, where the momentum rises or falls at most once each.
const PATCH_NODES: u32 = 16;

/// By how much that region is widened on either side, rad.
const ENTRY_MARGIN: f64 = 0.06;

impl ParentTransfer {
    /// Prepares a transfer: sphere of influence, constants of the models, and the span of reachable passages.
    ///
    /// All inputs positive and finite, `departure_radius_km` < `apoapsis_km`, |cos i| ≤ 1.
    pub fn new(input: TransferInput) -> Self {
        let TransferInput {
            parent_gm,
            body_gm,
            distance_km: a,
            departure_radius_km: r0,
            ..
        } = input;
        let total = parent_gm + body_gm;
        let rate = (total / (a * a * a)).sqrt();
        let departure_speed = periapsis_speed_km_s(parent_gm, r0, input.apoapsis_km);
        let b = a * body_gm / total;
        // J of the departure state, then K' without its q terms (2-physics section 3, model 3; Szebehely, Theory of Orbits, 1967, for the integral).
        let jacobi = 0.5 * (departure_speed - rate * r0).powi(2)
            - 0.5 * rate * rate * (r0 * r0 + b * b)
            - parent_gm / r0
            - body_gm / a;
        let jacobi_part = jacobi + 0.5 * rate * rate * (a - b).powi(2) + parent_gm / a;
        let mut transfer = Self {
            input,
            sphere_km: a * (body_gm / parent_gm).powf(0.4),
            departure_speed,
            fixed_v_inf_sq: 0.0,
            rate,
            jacobi_part,
            momentum_span: (0.0, 0.0),
            entry_span: (-PI, PI),
            least_angle: PI,
        };
        transfer.fixed_v_inf_sq = match input.model {
            Model::Textbook => transfer.crossing_speed_sq(parent_gm).unwrap_or(0.0),
            Model::BoundarySpeed => {
                transfer.crossing_speed_sq(total).unwrap_or(0.0)
                    - 2.0 * body_gm / transfer.sphere_km
            }
            Model::Patched | Model::ThreeBody => {
                transfer.take_spans();
                0.0
            }
        };
        transfer
    }

    /// Radius of the sphere of influence used for patching, km.
    pub fn sphere_km(&self) -> f64 {
        self.sphere_km
    }

    /// The description this was made from.
    pub fn input(&self) -> &TransferInput {
        &self.input
    }

    /// Burn that leaves a circular parking orbit at the departure radius: v₀ − √(μ_P/r₀), km/s.
    pub fn departure_dv_km_s(&self) -> f64 {
        self.departure_speed
            - circular_speed_km_s(self.input.parent_gm, self.input.departure_radius_km)
    }

    /// v∞² at the body for periapsis q (km), km²/s².
    #[inline]
    pub fn v_inf_sq(&self, q: f64) -> Result<f64, NoArrival> {
        match self.input.model {
            Model::Textbook | Model::BoundarySpeed => {
                if 0.0 < self.fixed_v_inf_sq {
                    Ok(self.fixed_v_inf_sq)
                } else {
                    Err(NoArrival::NotHyperbolic)
                }
            }
            Model::ThreeBody => {
                let v_inf_sq = self.three_body_v_inf_sq(q);
                // NaN where the integral forbids the passage.
                if v_inf_sq.is_nan() || v_inf_sq <= 0.0 {
                    return Err(NoArrival::NotHyperbolic);
                }
                self.reach(q, v_inf_sq)?;
                Ok(v_inf_sq)
            }
            Model::Patched => self
                .patch(q)
                .map(|patch| patch.v_inf_sq)
                .ok_or_else(|| self.out_of_reach(None)),
        }
    }

    /// v∞² from the Jacobi integral, without asking whether the passage can be reached.
    ///
    /// With K' = J + n²((a−b)² + q²)/2 + μ_P/a + μ_M/q and the inclination i of the passage to the orbital
    /// plane: (v² − 2 n q v cos i + n²q²)/2 = K', v the periapsis speed; v∞² = v² − 2μ_M/q.
    /// Within 0.3 m/s of integrated arrivals from low Earth orbit to the Moon (tests). May be ≤ 0 or NaN where the integral forbids the passage.
    #[inline]
    pub fn three_body_v_inf_sq(&self, q: f64) -> f64 {
        let nq = self.rate * q;
        let along = nq * self.input.cos_inclination;
        // 2K' without the μ_M/q term, which cancels against the escape speed.
        let double_k = 2.0 * self.jacobi_part + nq * nq;
        let escape_sq = 2.0 * self.input.body_gm / q;
        // v = along + s with s² = along² − n²q² + 2K' + escape²; then v² − escape².
        let rest = along * along - nq * nq + double_k;
        let s = (rest + escape_sq).sqrt();
        along * along + 2.0 * along * s + rest
    }

    /// Speed relative to the body met where the transfer first crosses its orbit, squared.
    ///
    /// With the apoapsis at the body this is the textbook (v_M − v_a)², v_M = √(`orbital_gm`/a): the parent's GM alone
    /// for a massless body, the sum of both for the body's true speed (2 to 4 m/s more at the Moon). `None` where the
    /// transfer does not come that far.
    fn crossing_speed_sq(&self, orbital_gm: f64) -> Option<f64> {
        let TransferInput {
            parent_gm,
            distance_km: a,
            departure_radius_km: r0,
            apoapsis_km,
            ..
        } = self.input;
        let along = r0 * self.departure_speed / a;
        // Radial speed squared in the factored form 2μ… (Q − a)(a − r₀): exactly zero at the apoapsis.
        let outward_sq =
            2.0 * parent_gm * (apoapsis_km - a) * (a - r0) / (a * a * (r0 + apoapsis_km));
        (0.0 <= outward_sq).then(|| {
            let behind = circular_speed_km_s(orbital_gm, a) - along;
            behind * behind + outward_sq
        })
    }

    /// The state at an entry angle λ (rad) on the outbound leg, for a passage with periapsis q.
    ///
    /// For a passage inclined to the orbital plane the entry point lies off it by β, sin β = h sin i/(R V), with h the
    /// momentum that q asks for; the transfer itself stays in the plane. β changes the crossing distance slightly,
    /// hence the short fixed-point loop (one round when i is 0 or 180°). `None` where the transfer
    /// does not come that far, leaves the sphere rather than enters it, or is not hyperbolic at the body.
    fn entry(&self, lambda: f64, q: f64) -> Option<Entry> {
        let TransferInput {
            parent_gm,
            body_gm,
            distance_km: a,
            departure_radius_km: r0,
            ..
        } = self.input;
        let moon_speed = ((parent_gm + body_gm) / a).sqrt();
        let sin_i_sq = 1.0 - self.input.cos_inclination * self.input.cos_inclination;
        let (sine, cosine) = lambda.sin_cos();
        let (mut cos_beta, mut before) = (1.0_f64, f64::NAN);
        for round in 0..50 {
            let (x, y) = (
                a - self.sphere_km * cos_beta * cosine,
                self.sphere_km * cos_beta * sine,
            );
            let off_plane_sq = self.sphere_km * self.sphere_km * (1.0 - cos_beta * cos_beta);
            let r = (x * x + y * y + off_plane_sq).sqrt();
            let along = r0 * self.departure_speed / r;
            let speed_sq = self.departure_speed * self.departure_speed
                - 2.0 * parent_gm * (1.0 / r0 - 1.0 / r);
            let outward_sq = speed_sq - along * along;
            if outward_sq < 0.0 {
                return None;
            }
            let outward = outward_sq.sqrt();
            let (ux, uy) = (x / r, y / r);
            let vx = outward * ux - along * uy;
            let vy = outward * uy + along * ux - moon_speed;
            let (px, py) = (x - a, y);
            let v_sq = vx * vx + vy * vy;
            let v_inf_sq = v_sq - 2.0 * body_gm / self.sphere_km;
            if 0.0 <= px * vx + py * vy || v_inf_sq <= 0.0 {
                return None;
            }
            let wanted = (q * (q * v_inf_sq + 2.0 * body_gm)).sqrt();
            let sin_beta_sq = wanted * wanted * sin_i_sq / (self.sphere_km * self.sphere_km * v_sq);
            if 1.0 < sin_beta_sq {
                return None;
            }
            let next = (1.0 - sin_beta_sq).sqrt();
            if (next - cos_beta).abs() <= 1e-15 {
                return Some(Entry {
                    crossing_radius: r,
                    v_inf_sq,
                    normal_momentum: px * vy - py * vx,
                    wanted_momentum: wanted * self.input.cos_inclination,
                });
            }
            // Aitken's extrapolation of the last three every other round, while their differences are more than rounding.
            let (first, second) = (cos_beta - before, next - cos_beta);
            let leap = next - second * second / (second - first);
            before = cos_beta;
            let trusted = 1e-11 < second.abs() && (0.0..=1.0).contains(&leap);
            cos_beta = if round % 2 == 1 && trusted {
                leap
            } else {
                next
            };
        }
        None
    }

    /// Solves the patched conic for periapsis q on the outbound leg: the first entry angle, from the trailing side on.
    pub fn patch(&self, q: f64) -> Option<Patch> {
        let miss = |lambda: f64| {
            self.entry(lambda, q)
                .map(|entry| entry.normal_momentum - entry.wanted_momentum)
        };
        // From the first entry to the least momentum there is one root for every passage in reach. An inclined passage
        // shifts the first entry a little, so its neighbourhood is tried.
        let b = self.least_angle - 1e-9;
        if let Some(fb) = miss(b) {
            let starts = [1e-9, 0.02, 0.1].map(|inwards| self.entry_span.0 + inwards);
            let start = starts
                .into_iter()
                .find(|a| miss(*a).is_some_and(|fa| (fa < 0.0) != (fb < 0.0)));
            if let Some(a) = start {
                return self.patch_at(q, root::bracketed(miss, a, b).ok()?);
            }
        }
        // The region of entries in the plane, a little wider because an inclined passage shifts it.
        let (first, last) = (
            self.entry_span.0 - ENTRY_MARGIN,
            self.entry_span.1 + ENTRY_MARGIN,
        );
        let node = |k: u32| first + (last - first) * f64::from(k) / f64::from(PATCH_NODES);
        let mut before: Option<(f64, f64)> = None;
        for k in 0..=PATCH_NODES {
            let here = miss(node(k)).map(|value| (node(k), value));
            let bracket = match (before, here) {
                (Some((a, fa)), Some((b, fb))) if (fa < 0.0) != (fb < 0.0) => Some((a, b)),
                // The region of entries ends between two nodes: look up to its border.
                (Some((a, fa)), None) => {
                    let (last, _) = root::border(|x| miss(x).is_some(), a, node(k));
                    miss(last)
                        .filter(|fb| (fa < 0.0) != (*fb < 0.0))
                        .map(|_| (a, last))
                }
                (None, Some((b, fb))) if 0 < k => {
                    let (_, first) = root::border(|x| miss(x).is_some(), node(k - 1), b);
                    miss(first)
                        .filter(|fa| (*fa < 0.0) != (fb < 0.0))
                        .map(|_| (first, b))
                }
                _ => None,
            };
            if let Some((a, b)) = bracket {
                return self.patch_at(q, root::bracketed(miss, a, b).ok()?);
            }
            before = here;
        }
        None
    }

    /// The solved patch at an entry angle.
    fn patch_at(&self, q: f64, lambda: f64) -> Option<Patch> {
        let entry = self.entry(lambda, q)?;
        let outer_time_s = time_to_radius_ellipse_s(
            self.input.parent_gm,
            self.input.departure_radius_km,
            self.input.apoapsis_km,
            entry.crossing_radius,
        )?;
        let inner_time_s =
            time_to_radius_hyperbola_s(self.input.body_gm, entry.v_inf_sq, q, self.sphere_km)?;
        Some(Patch {
            entry_angle_rad: lambda,
            crossing_radius_km: entry.crossing_radius,
            v_inf_sq: entry.v_inf_sq,
            outer_time_s,
            inner_time_s,
        })
    }

    /// Finds the smallest and largest signed angular momentum at the body over all entries in the orbital plane, and
    /// the angles that bound them.
    fn take_spans(&mut self) {
        let planar = Self {
            input: TransferInput {
                cos_inclination: 1.0,
                ..self.input
            },
            ..*self
        };
        let at = |lambda: f64| planar.entry(lambda, 0.0).map(|entry| entry.normal_momentum);
        let node = |k: u32| -PI + 2.0 * PI * f64::from(k) / f64::from(ENTRY_NODES);
        type Spans = ((f64, f64), (f64, f64), f64);
        let mut found: Option<Spans> = None;
        let mut take = |lambda: f64, value: f64| {
            found = Some(match found {
                None => ((value, value), (lambda, lambda), lambda),
                Some(((low, high), (first, last), least)) => (
                    (low.min(value), high.max(value)),
                    (first.min(lambda), last.max(lambda)),
                    if value < low { lambda } else { least },
                ),
            });
        };
        let mut before = None;
        for k in 0..=ENTRY_NODES {
            let here = at(node(k));
            // The region of entries begins or ends between two nodes: its border counts too. Extremes between two
            // nodes of 4° are passed over; the reach is approximate anyway.
            let edge = match (before, here) {
                (Some(_), None) => Some(root::border(|x| at(x).is_some(), node(k - 1), node(k)).0),
                (None, Some(_)) if 0 < k => {
                    Some(root::border(|x| at(x).is_some(), node(k - 1), node(k)).1)
                }
                _ => None,
            };
            for (lambda, value) in [edge.map(|edge| (edge, at(edge))), Some((node(k), here))]
                .into_iter()
                .flatten()
            {
                if let Some(value) = value {
                    take(lambda, value);
                }
            }
            before = here;
        }
        if let Some((momenta, angles, least)) = found {
            (self.momentum_span, self.entry_span, self.least_angle) = (momenta, angles, least);
        }
    }

    /// Whether the patched conic reaches periapsis q with this v∞ on the wanted side.
    #[inline]
    fn reach(&self, q: f64, v_inf_sq: f64) -> Result<(), NoArrival> {
        let momentum =
            q * hyperbola_speed_km_s(self.input.body_gm, v_inf_sq, q) * self.input.cos_inclination;
        let (low, high) = self.momentum_span;
        if low <= momentum && momentum <= high {
            Ok(())
        } else {
            Err(self.out_of_reach(Some(v_inf_sq)))
        }
    }

    /// The refusal, with the farthest periapsis that is reached: h = q √(v∞² + 2μ/q) solved for q.
    fn out_of_reach(&self, v_inf_sq: Option<f64>) -> NoArrival {
        let (low, high) = self.momentum_span;
        let cosine = self.input.cos_inclination;
        let most = if 0.0 < cosine {
            high.max(0.0) / cosine
        } else {
            low.min(0.0) / cosine
        };
        let v_inf_sq = v_inf_sq
            .unwrap_or_else(|| self.three_body_v_inf_sq(self.sphere_km))
            .max(f64::MIN_POSITIVE);
        let gm = self.input.body_gm;
        let farthest = most * most / (gm + (gm * gm + v_inf_sq * most * most).sqrt());
        NoArrival::OutOfReach {
            farthest_km: if farthest.is_finite() { farthest } else { 0.0 },
        }
    }

    /// Time of flight from departure to periapsis q, s.
    ///
    /// Patched conic for the models that patch (the three-body energy has no clock of its own; against
    /// integrated transfers the patched time is about 1 % long); for the textbook models the time to the
    /// crossing of the body's orbit.
    pub fn time_of_flight_s(&self, q: f64) -> Option<f64> {
        match self.input.model {
            Model::Textbook | Model::BoundarySpeed => time_to_radius_ellipse_s(
                self.input.parent_gm,
                self.input.departure_radius_km,
                self.input.apoapsis_km,
                self.input.distance_km,
            ),
            Model::Patched | Model::ThreeBody => self
                .patch(q)
                .map(|patch| patch.outer_time_s + patch.inner_time_s),
        }
    }
}

/// A coplanar Hohmann transfer between two bodies of one parent.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Hohmann {
    /// v∞ at departure, km/s.
    pub departure_v_inf_km_s: f64,
    /// v∞ at arrival, km/s.
    pub arrival_v_inf_km_s: f64,
    /// Half the period of the transfer ellipse, s.
    pub time_of_flight_s: f64,
}

/// Hohmann transfer between circular coplanar orbits of radii `from_km` and `to_km` round `parent_gm`.
///
/// v∞ = |√(μ/r) − apsis speed of the transfer ellipse| at either end (any textbook; Curtis section 8.8 in
/// the tests). Valid for the mean orbits; real arrivals differ with date and inclination.
pub fn hohmann(parent_gm: f64, from_km: f64, to_km: f64) -> Hohmann {
    let (low, high) = (from_km.min(to_km), from_km.max(to_km));
    let excess_low =
        periapsis_speed_km_s(parent_gm, low, high) - circular_speed_km_s(parent_gm, low);
    let excess_high =
        circular_speed_km_s(parent_gm, high) - apoapsis_speed_km_s(parent_gm, low, high);
    let (departure, arrival) = if from_km <= to_km {
        (excess_low, excess_high)
    } else {
        (excess_high, excess_low)
    };
    Hohmann {
        departure_v_inf_km_s: departure,
        arrival_v_inf_km_s: arrival,
        time_of_flight_s: 0.5 * super::conic::period_s(parent_gm, low, high),
    }
}

/// Burn from a circular parking orbit of radius r onto a hyperbola with v∞: √(v∞² + 2μ/r) − √(μ/r), km/s.
pub fn escape_burn_km_s(gm: f64, radius_km: f64, v_inf_km_s: f64) -> f64 {
    hyperbola_speed_km_s(gm, v_inf_km_s * v_inf_km_s, radius_km)
        - circular_speed_km_s(gm, radius_km)
}

#[cfg(test)]
mod tests {
    use super::*;

    fn earth_moon(model: Model, apoapsis_km: f64, cos_inclination: f64) -> ParentTransfer {
        ParentTransfer::new(TransferInput {
            parent_gm: 398_600.4418,
            body_gm: 4902.8,
            distance_km: 384_400.0,
            departure_radius_km: 6778.137,
            apoapsis_km,
            model,
            cos_inclination,
        })
    }

    fn circle_cost_m_s(transfer: &ParentTransfer, q: f64) -> f64 {
        let v_inf_sq = transfer.v_inf_sq(q).expect("reached");
        1e3 * (hyperbola_speed_km_s(4902.8, v_inf_sq, q) - circular_speed_km_s(4902.8, q))
    }

    #[test]
    fn the_four_models_give_the_design_table() {
        // ../shared/design/2-physics.md section 3, Δv into a circle at q, m/s.
        let table = [
            (100.0, 820.8, 792.5, 794.4, 817.38),
            (500.0, 771.2, 740.4, 743.4, 768.16),
            (2000.0, 674.1, 635.9, 643.6, 672.90),
            (5000.0, 610.6, 562.7, 581.1, 614.70),
            (10_000.0, 587.5, 530.3, 567.8, 602.59),
        ];
        for (altitude, textbook, boundary, patched, three_body) in table {
            let q = 1737.4 + altitude;
            for (model, expected, digits) in [
                (Model::Textbook, textbook, 0.06),
                (Model::BoundarySpeed, boundary, 0.06),
                (Model::Patched, patched, 0.06),
                (Model::ThreeBody, three_body, 0.006),
            ] {
                let cost = circle_cost_m_s(&earth_moon(model, 384_400.0, 1.0), q);
                assert!(
                    (cost - expected).abs() < digits,
                    "{model:?} {altitude}: {cost} {expected}"
                );
            }
        }
    }

    #[test]
    fn retrograde_passages_have_a_reach() {
        // 2-physics section 3: with the apoapsis just at the moon no retrograde pass (the patched conic keeps a
        // sliver of 2.8 km radius, inside the body); from 400 000 km integrated passages end at 8 440 km radius,
        // patched ones at 10 186 km.
        let near = earth_moon(Model::ThreeBody, 384_400.0, -1.0);
        assert!(
            matches!(near.v_inf_sq(1837.4), Err(NoArrival::OutOfReach { farthest_km }) if farthest_km < 10.0)
        );
        let far = earth_moon(Model::ThreeBody, 400_000.0, -1.0);
        assert!(
            far.v_inf_sq(8000.0).is_ok(),
            "{far:?} {:?}",
            far.v_inf_sq(8000.0)
        );
        match far.v_inf_sq(20_000.0) {
            Err(NoArrival::OutOfReach { farthest_km }) => {
                assert!((9_500.0..11_000.0).contains(&farthest_km), "{farthest_km}");
            }
            other => panic!("{other:?}"),
        }
    }

    #[test]
    fn inclined_passages_lie_between_the_two_senses() {
        let at = |cosine: f64| {
            earth_moon(Model::ThreeBody, 400_000.0, cosine).three_body_v_inf_sq(6737.4)
        };
        assert!(at(-1.0) < at(0.0) && at(0.0) < at(1.0));
        let patched = |cosine: f64| {
            earth_moon(Model::Patched, 400_000.0, cosine)
                .v_inf_sq(6737.4)
                .expect("reached")
        };
        let (retrograde, polar, prograde) = (patched(-1.0), patched(0.0), patched(1.0));
        assert!(retrograde < polar && polar < prograde);
        // Continuous at the planar ends.
        assert!((patched(1.0 - 1e-12) - prograde).abs() < 1e-7);
    }

    #[test]
    fn boundary_speed_can_fail_to_be_hyperbolic() {
        // Titan from an orbit reaching just to it, slow enough that the number read at the boundary is bound.
        let transfer = ParentTransfer::new(TransferInput {
            parent_gm: 398_600.4418,
            body_gm: 4902.8,
            distance_km: 384_400.0,
            departure_radius_km: 300_000.0,
            apoapsis_km: 384_400.0,
            model: Model::BoundarySpeed,
            cos_inclination: 1.0,
        });
        assert_eq!(transfer.v_inf_sq(2000.0), Err(NoArrival::NotHyperbolic));
    }

    #[test]
    fn hohmann_matches_a_handbook() {
        // Curtis, Orbital Mechanics for Engineering Students, examples 8.4 and 8.5 (inputs and printed answers; digits
        // recomputed in ../shared/reference/published.md section 1).
        let transfer = hohmann(1.327e11, 149.6e6, 227.9e6);
        assert!((transfer.departure_v_inf_km_s - 2.943_324_620).abs() < 1e-9);
        assert!((transfer.arrival_v_inf_km_s - 2.647_792_764).abs() < 1e-9);
        assert!(
            (escape_burn_km_s(398_600.0, 6678.0, transfer.departure_v_inf_km_s) - 3.589_650_599)
                .abs()
                < 1e-9
        );
        // The way back swaps the ends and takes as long.
        let back = hohmann(1.327e11, 227.9e6, 149.6e6);
        assert_eq!(back.arrival_v_inf_km_s, transfer.departure_v_inf_km_s);
        assert_eq!(back.time_of_flight_s, transfer.time_of_flight_s);
    }
}
