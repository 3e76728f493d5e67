//! The brief as JSON: a contract (`docs/output.md`). Full double precision; what does not exist is `null`.

mod engine;

use super::Brief;
use crate::arrival::{NotFlyable, Plan, Way};
use crate::physics::asymptote;
use crate::report::{json, rerun, sources, words};
use crate::study::Case;
use crate::study::case::DAY_S;
use crate::study::landmarks::Landmarks;
use crate::study::spec::PlaneSpec;
use engine::{EngineJson, FlownJson, engine};
use serde::Serialize;

#[derive(Serialize)]
struct BriefJson {
    format: u32,
    program: ProgramJson,
    scenario: ScenarioJson,
    verdict: VerdictJson,
    body: BodyJson,
    arrival: ArrivalJson,
    target: TargetJson,
    limits: LimitsJson,
    burns: &'static str,
    ways: Vec<WayJson>,
    best: Option<&'static str>,
    engine: Option<EngineJson>,
    landmarks: LandmarksJson,
    warnings: Vec<WarningJson>,
    sources: Vec<String>,
    cautions: &'static [&'static str],
}

/// Name and version of the program that wrote a result.
#[derive(Serialize)]
pub(in crate::report) struct ProgramJson {
    name: &'static str,
    version: &'static str,
}

/// This program.
pub(in crate::report) const PROGRAM: ProgramJson = ProgramJson {
    name: "stoop",
    version: env!("CARGO_PKG_VERSION"),
};

#[derive(Serialize)]
struct ScenarioJson {
    title: String,
    fingerprint: String,
    ron: String,
}

#[derive(Serialize)]
struct VerdictJson {
    sentence: String,
    why: String,
    moved_by: Vec<String>,
    break_even_radius_km: Option<f64>,
    target_apoapsis_radius_km: f64,
    loop_apoapsis_radius_km: Option<f64>,
}

#[derive(Serialize)]
struct BodyJson {
    name: String,
    gm_km3_s2: f64,
    radius_km: f64,
    soi_radius_km: Option<f64>,
    hill_radius_km: Option<f64>,
}

#[derive(Serialize)]
struct ArrivalJson {
    model: &'static str,
    v_inf_km_s: Option<f64>,
    c3_km2_s2: Option<f64>,
    declination_deg: Option<f64>,
    break_even_radius_km: Option<f64>,
    free_inclination_deg: Option<[f64; 2]>,
    b_plane_angle_deg: Option<[f64; 2]>,
    departure_dv_m_s: Option<f64>,
    transfer_days: Option<f64>,
    total_dv_m_s: Option<f64>,
}

#[derive(Serialize)]
struct TargetJson {
    periapsis_radius_km: f64,
    apoapsis_radius_km: f64,
    period_h: f64,
    inclination_deg: Option<f64>,
}

#[derive(Serialize)]
struct LimitsJson {
    floor_radius_km: f64,
    cap_radius_km: f64,
    longest_days: f64,
    most_starts: usize,
    longest_burn_s: Option<f64>,
}

#[derive(Serialize)]
struct WayJson {
    way: &'static str,
    flyable: bool,
    reasons: Vec<String>,
    plane_change_deg: Option<f64>,
    v_inf_km_s: Option<f64>,
    cost_m_s: Option<f64>,
    dv_m_s: Option<f64>,
    impulsive_dv_m_s: Option<f64>,
    finite_burn_loss_m_s: Option<f64>,
    dv_with_margin_m_s: Option<f64>,
    propellant_kg: Option<f64>,
    propellant_with_margin_kg: Option<f64>,
    final_mass_kg: Option<f64>,
    days: Option<f64>,
    starts: Option<usize>,
    longest_burn_s: Option<f64>,
    captured_after_percent: Option<f64>,
    captured_after_s: Option<f64>,
    aiming_radius_km: Option<f64>,
    brake_radius_km: Option<f64>,
    lowest_radius_km: Option<f64>,
    burns: Vec<BurnJson>,
}

#[derive(Serialize)]
struct BurnJson {
    at_radius_km: f64,
    speed_before_km_s: f64,
    speed_after_km_s: f64,
    dv_m_s: f64,
    impulsive_dv_m_s: f64,
    loss_m_s: f64,
    plane_change_deg: f64,
    duration_s: Option<f64>,
    propellant_kg: Option<f64>,
    orbit_after: OrbitJson,
    flown: Option<FlownJson>,
}

#[derive(Serialize)]
struct OrbitJson {
    periapsis_radius_km: f64,
    apoapsis_radius_km: f64,
    period_h: f64,
}

/// The landmarks as JSON has them.
#[derive(Serialize)]
pub(in crate::report) struct LandmarksJson {
    cheapest: Option<CheapestJson>,
    crossovers: Vec<CrossoverJson>,
}

#[derive(Serialize)]
struct CheapestJson {
    altitude_km: f64,
    dv_m_s: f64,
}

#[derive(Serialize)]
struct CrossoverJson {
    altitude_km: f64,
    dv_m_s: f64,
    below: &'static str,
    above: &'static str,
}

#[derive(Serialize)]
struct WarningJson {
    code: &'static str,
    text: String,
}

/// Renders the brief.
pub(super) fn render(brief: &Brief) -> String {
    let value = BriefJson {
        format: 1,
        program: PROGRAM,
        scenario: ScenarioJson {
            title: brief.case.spec().title.clone(),
            fingerprint: brief.fingerprint.clone(),
            ron: rerun::lines(brief.case.spec()).join("\n") + "\n",
        },
        verdict: VerdictJson {
            sentence: brief.sentence.clone(),
            why: brief.why.clone(),
            moved_by: brief.shifts.clone(),
            break_even_radius_km: brief.verdict.radii.break_even_km,
            target_apoapsis_radius_km: brief.verdict.radii.target_apoapsis_km,
            loop_apoapsis_radius_km: brief.verdict.radii.loop_apoapsis_km,
        },
        body: body(brief),
        arrival: arrival(brief),
        target: target(brief),
        limits: limits(brief),
        burns: if brief.case.setting().lasting().is_some() {
            "finite"
        } else {
            "impulsive"
        },
        ways: brief
            .answer
            .ways
            .iter()
            .map(|(way, plan)| self::way(brief, *way, plan))
            .collect(),
        best: brief.answer.best.map(Way::name),
        engine: engine(brief),
        landmarks: landmarks(brief.case, &brief.answer.landmarks),
        warnings: brief
            .warnings
            .iter()
            .map(|warning| WarningJson {
                code: warning.code,
                text: warning.text.clone(),
            })
            .collect(),
        sources: sources::sources(brief.case),
        cautions: sources::CAUTIONS,
    };
    json::text(&value)
}

fn body(brief: &Brief) -> BodyJson {
    let body = brief.case.body();
    BodyJson {
        name: body.name.clone(),
        gm_km3_s2: body.gm_km3_s2,
        radius_km: body.radius_km,
        soi_radius_km: body.sphere_of_influence_km(),
        hill_radius_km: body.hill_radius_km(),
    }
}

fn arrival(brief: &Brief) -> ArrivalJson {
    let case = brief.case;
    let v_inf_sq = case
        .setting()
        .approach
        .v_inf_sq(case.setting().target.periapsis_km)
        .ok();
    let declination = case.declination_rad();
    let journey = case.journey();
    let wanted = match case.spec().target.plane {
        PlaneSpec::InclinationDeg(inclination) => Some(inclination.to_radians()),
        _ => None,
    };
    ArrivalJson {
        model: sources::arrival_model(&case.spec().arrival),
        v_inf_km_s: v_inf_sq.map(f64::sqrt),
        c3_km2_s2: v_inf_sq,
        declination_deg: declination.map(f64::to_degrees),
        break_even_radius_km: brief.verdict.radii.break_even_km,
        free_inclination_deg: declination.map(|declination| {
            let (low, high) = asymptote::free_inclination_rad(declination);
            [low.to_degrees(), high.to_degrees()]
        }),
        b_plane_angle_deg: declination
            .zip(wanted)
            .and_then(|(declination, inclination)| {
                asymptote::b_plane_angle_rad(inclination, declination)
            })
            // 0 - 0 is 0, where -0 would be written as such.
            .map(|angle| [angle.to_degrees(), 0.0 - angle.to_degrees()]),
        departure_dv_m_s: journey.departure_dv_km_s.map(|dv| 1e3 * dv),
        transfer_days: journey.time_of_flight_s.map(|seconds| seconds / DAY_S),
        total_dv_m_s: journey
            .departure_dv_km_s
            .zip(brief.answer.best_plan())
            .map(|(departure, plan)| 1e3 * (departure + plan.dv_km_s)),
    }
}

fn target(brief: &Brief) -> TargetJson {
    let orbit = brief.case.setting().target;
    TargetJson {
        periapsis_radius_km: orbit.periapsis_km,
        apoapsis_radius_km: orbit.apoapsis_km,
        period_h: orbit.period_s(brief.case.setting().gm) / 3600.0,
        inclination_deg: match brief.case.spec().target.plane {
            PlaneSpec::InclinationDeg(inclination) => Some(inclination),
            _ => None,
        },
    }
}

fn limits(brief: &Brief) -> LimitsJson {
    let limits = &brief.case.setting().limits;
    let stated = &brief.case.spec().limits;
    LimitsJson {
        floor_radius_km: limits.floor_radius_km,
        cap_radius_km: limits.cap_radius_km,
        longest_days: stated.longest_days,
        most_starts: limits.most_starts,
        longest_burn_s: stated.longest_burn_s,
    }
}

fn way(brief: &Brief, way: Way, plan: &Result<Plan, NotFlyable>) -> WayJson {
    let reasons = match plan {
        Ok(_) => Vec::new(),
        Err(not) => not
            .reasons
            .iter()
            .map(|reason| words::reason(brief.case, reason))
            .collect(),
    };
    let plan = plan.as_ref().ok();
    let used = plan.and_then(|plan| plan.consumption);
    let gm = brief.case.setting().gm;
    WayJson {
        way: way.name(),
        flyable: plan.is_some(),
        reasons,
        plane_change_deg: plan.map(|plan| plan.turn_rad.to_degrees()),
        v_inf_km_s: plan.map(|plan| plan.v_inf_km_s),
        cost_m_s: plan.map(|plan| 1e3 * plan.cost_km_s),
        dv_m_s: plan.map(|plan| 1e3 * plan.dv_km_s),
        impulsive_dv_m_s: plan.map(|plan| 1e3 * plan.impulsive_dv_km_s),
        finite_burn_loss_m_s: plan.map(|plan| 1e3 * plan.loss_km_s()),
        dv_with_margin_m_s: plan.map(|plan| 1e3 * plan.dv_with_margin_km_s),
        propellant_kg: used.map(|used| used.propellant_kg),
        propellant_with_margin_kg: used.map(|used| used.propellant_with_margin_kg),
        final_mass_kg: used.map(|used| used.final_mass_kg),
        days: plan.map(|plan| plan.duration_s / DAY_S),
        starts: plan.map(Plan::starts),
        longest_burn_s: used.map(|used| used.longest_burn_s),
        captured_after_percent: plan
            .and_then(|plan| plan.captured_share)
            .map(|share| 100.0 * share),
        captured_after_s: plan.and_then(|plan| plan.captured_after_s),
        aiming_radius_km: plan.map(|plan| plan.aiming_radius_km),
        brake_radius_km: plan.map(|plan| plan.brake_radius_km),
        lowest_radius_km: plan.map(|plan| plan.lowest_radius_km),
        burns: plan.map_or_else(Vec::new, |plan| {
            plan.burns
                .iter()
                .map(|burn| BurnJson {
                    at_radius_km: burn.at_radius_km,
                    speed_before_km_s: burn.speed_before_km_s,
                    speed_after_km_s: burn.speed_after_km_s,
                    dv_m_s: 1e3 * burn.dv_km_s,
                    impulsive_dv_m_s: 1e3 * burn.impulsive_dv_km_s,
                    loss_m_s: 1e3 * (burn.dv_km_s - burn.impulsive_dv_km_s),
                    plane_change_deg: burn.turn_rad.to_degrees(),
                    duration_s: burn.duration_s,
                    propellant_kg: burn.propellant_kg,
                    orbit_after: OrbitJson {
                        periapsis_radius_km: burn.orbit_after.periapsis_km,
                        apoapsis_radius_km: burn.orbit_after.apoapsis_km,
                        period_h: burn.orbit_after.period_s(gm) / 3600.0,
                    },
                    flown: burn.flown.as_ref().map(FlownJson::of),
                })
                .collect()
        }),
    }
}

/// The landmarks; the sweep's JSON has them too.
pub(in crate::report) fn landmarks(case: &Case, marks: &Landmarks) -> LandmarksJson {
    LandmarksJson {
        cheapest: marks.cheapest.map(|cheapest| CheapestJson {
            altitude_km: case.altitude_km(cheapest.radius_km),
            dv_m_s: 1e3 * cheapest.dv_km_s,
        }),
        crossovers: marks
            .crossovers
            .iter()
            .map(|crossover| CrossoverJson {
                altitude_km: case.altitude_km(crossover.radius_km),
                dv_m_s: 1e3 * crossover.dv_km_s,
                below: crossover.below.name(),
                above: crossover.above.name(),
            })
            .collect(),
    }
}
