//! How integrated burns are flown, and what is asked about the engine.

use super::super::Brief;
use crate::arrival::{Before, Flown};
use crate::physics::held_burn::{Left, Missed};
use crate::study::case::DAY_S;
use serde::Serialize;

/// How an integrated burn is flown.
#[derive(Serialize)]
pub(super) struct FlownJson {
    aimed_periapsis_radius_km: Option<f64>,
    ignition_lead_s: f64,
    ignition_radius_km: f64,
    ignition_mass_kg: f64,
    ignition_speed_km_s: f64,
    shut_off_speed_km_s: f64,
    arc_deg: f64,
    lowest_radius_km: f64,
    yaw_deg: f64,
    attitude_deg: f64,
    attitude_rate_deg_s: f64,
}

impl FlownJson {
    pub(super) fn of(flown: &Flown) -> Self {
        let (controls, track) = (&flown.controls, &flown.track);
        Self {
            aimed_periapsis_radius_km: match flown.before {
                Before::Hyperbola { periapsis_km, .. } => Some(periapsis_km),
                Before::AtPeriapsis(_) | Before::AtApoapsis(_) => None,
            },
            ignition_lead_s: controls.lead_s,
            ignition_radius_km: track.ignition_radius_km,
            ignition_mass_kg: flown.mass_at_ignition_kg,
            ignition_speed_km_s: track.speed_at_ignition_km_s,
            shut_off_speed_km_s: track.speed_at_shut_off_km_s,
            arc_deg: track.arc_rad.to_degrees(),
            lowest_radius_km: track.lowest_radius_km,
            yaw_deg: controls.yaw_rad.to_degrees(),
            attitude_deg: controls.offset_rad.to_degrees(),
            attitude_rate_deg_s: controls.rate_rad_s.to_degrees(),
        }
    }
}

/// What is asked about the engine: the first burn of the cheapest way off plan, and what each extra pass saves.
#[derive(Serialize)]
pub(super) struct EngineJson {
    way: &'static str,
    stops: Vec<StopJson>,
    late: Vec<LateJson>,
    thrust_2_percent_low: Option<MissedJson>,
    steps: Vec<StepsJson>,
}

#[derive(Serialize)]
struct StopJson {
    burnt_percent: f64,
    captured: bool,
    periapsis_radius_km: f64,
    apoapsis_radius_km: Option<f64>,
    v_inf_km_s: Option<f64>,
}

#[derive(Serialize)]
struct LateJson {
    seconds: f64,
    missed: Option<MissedJson>,
}

#[derive(Serialize)]
struct MissedJson {
    cost_m_s: f64,
    extra_dv_m_s: f64,
    repair_dv_m_s: f64,
    extra_s: f64,
    periapsis_radius_km: f64,
    apoapsis_radius_km: f64,
}

impl MissedJson {
    fn of(missed: &Missed) -> Self {
        Self {
            cost_m_s: 1e3 * missed.cost_km_s(),
            extra_dv_m_s: 1e3 * missed.extra_dv_km_s,
            repair_dv_m_s: 1e3 * missed.repair_dv_km_s,
            extra_s: missed.extra_s,
            periapsis_radius_km: missed.orbit.periapsis_km,
            apoapsis_radius_km: missed.orbit.apoapsis_km,
        }
    }
}

#[derive(Serialize)]
struct StepsJson {
    passes: usize,
    starts: usize,
    cost_m_s: f64,
    days: f64,
    longest_burn_s: f64,
}

pub(super) fn engine(brief: &Brief) -> Option<EngineJson> {
    let way = brief.answer.best?;
    let questions = brief.questions.as_ref()?;
    Some(EngineJson {
        way: way.name(),
        stops: questions
            .stops
            .iter()
            .map(|(share, left)| {
                let (captured, periapsis_radius_km, apoapsis_radius_km, v_inf_km_s) = match *left {
                    Left::Orbit(orbit) => (true, orbit.periapsis_km, Some(orbit.apoapsis_km), None),
                    Left::Flyby {
                        v_inf_km_s,
                        periapsis_km,
                    } => (false, periapsis_km, None, Some(v_inf_km_s)),
                };
                StopJson {
                    burnt_percent: 100.0 * share,
                    captured,
                    periapsis_radius_km,
                    apoapsis_radius_km,
                    v_inf_km_s,
                }
            })
            .collect(),
        late: questions
            .late
            .iter()
            .map(|(seconds, missed)| LateJson {
                seconds: *seconds,
                missed: missed.as_ref().map(MissedJson::of),
            })
            .collect(),
        thrust_2_percent_low: questions.weak.as_ref().map(MissedJson::of),
        steps: brief
            .divisions
            .iter()
            .map(|divided| StepsJson {
                passes: divided.passes,
                starts: divided.starts,
                cost_m_s: 1e3 * divided.cost_km_s,
                days: divided.duration_s / DAY_S,
                longest_burn_s: divided.longest_burn_s,
            })
            .collect(),
    })
}
