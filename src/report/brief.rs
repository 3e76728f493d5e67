//! The brief: the written result for a review. Gathered once, rendered as text, Markdown or JSON.

mod json;
mod markdown;
mod text;

pub(super) use json::{LandmarksJson, PROGRAM, ProgramJson, landmarks as landmarks_json};

use super::plot::{self, Glyphs, Mark, Plot, Quantity};
use super::stops;
use super::words;
use crate::arrival::{Plan, Way};
use crate::study::curve::{self, Axis};
use crate::study::engine::{self, Divided, Questions};
use crate::study::knob::{KnobId, by_id};
use crate::study::landmarks;
use crate::study::verdict::{self, Verdict};
use crate::study::warning::{self, Warning};
use crate::study::watch::{Crew, Stopped};
use crate::study::{Answer, Case};

/// What stands over the scenario at the end of a brief.
const RERUN_TITLE: &str = "The scenario, as a file that gives the same digits again";

/// Everything a brief says about a case.
#[derive(Debug)]
pub struct Brief<'a> {
    /// The scenario.
    pub case: &'a Case,
    /// Every way, the cheapest, the landmarks.
    pub answer: Answer,
    /// The verdict weighed.
    pub verdict: Verdict,
    /// The verdict in words.
    pub sentence: String,
    /// Its reason.
    pub why: String,
    /// What moves it.
    pub shifts: Vec<String>,
    /// Warnings.
    pub warnings: Vec<Warning>,
    /// What is asked about the engine, in words; empty where burns take no time.
    pub engine: Vec<String>,
    /// What is left when the first burn of the cheapest way stops early.
    pub questions: Option<Questions>,
    /// What each extra pass saves.
    pub divisions: Vec<Divided>,
    /// Fingerprint of the scenario.
    pub fingerprint: String,
    /// Who shares the work of the curve.
    crew: &'a dyn Crew,
}

impl<'a> Brief<'a> {
    /// Asks everything a brief needs, the work shared by a crew.
    ///
    /// # Errors
    /// [`Stopped`] where the crew was stopped.
    pub fn with(case: &'a Case, fingerprint: String, crew: &'a dyn Crew) -> Result<Self, Stopped> {
        let setting = case.setting();
        let answer = Answer::with(setting, landmarks::scan_points(setting), crew)?;
        let verdict = verdict::weigh(setting, &answer, crew)?;
        let questions = answer
            .best_plan()
            .and_then(|plan| engine::questions(case.setting(), plan, 0));
        let divisions = engine::divisions(case.setting());
        Ok(Self {
            engine: answer.best_plan().map_or_else(Vec::new, |plan| {
                words::engine(case, plan, questions.as_ref(), &divisions)
            }),
            questions,
            divisions,
            sentence: words::verdict(case, &answer, &verdict),
            why: words::why(case, &verdict),
            shifts: words::shifts(case, &answer, &verdict),
            warnings: warning::warnings(case, &answer),
            case,
            answer,
            verdict,
            fingerprint,
            crew,
        })
    }

    /// Whether any way can be flown.
    pub fn flyable(&self) -> bool {
        self.answer.best.is_some()
    }

    /// As plain text of at most 80 columns, 7-bit.
    pub fn text(&self, glyphs: Glyphs) -> String {
        text::render(self, glyphs)
    }

    /// As Markdown.
    pub fn markdown(&self) -> String {
        markdown::render(self)
    }

    /// As JSON, see `docs/output.md`.
    pub fn json(&self) -> String {
        json::render(self)
    }

    /// What is left when the first burn of the cheapest way stops early, as lines of characters.
    fn stop_curve(&self, width: usize) -> Vec<String> {
        self.questions.as_ref().map_or_else(Vec::new, |questions| {
            stops::lines(self.case, questions, width, 9)
        })
    }

    /// The cost curve over the sensible range as lines of characters.
    fn curve(&self, width: usize, height: usize, glyphs: Glyphs) -> Vec<String> {
        let case = self.case;
        let Some((low, high)) = landmarks::sensible_range(case.setting()) else {
            return Vec::new();
        };
        let to = case.altitude_km(high);
        // A floor at the surface has no place on a logarithmic axis.
        let from = case.altitude_km(low).max(1e-3 * to);
        let Ok(axis) = Axis::new(
            by_id(KnobId::TargetAltitude),
            from,
            to,
            plot::columns(width),
            true,
        ) else {
            return Vec::new();
        };
        let Ok(rows) = curve::curve_with(case, &axis, self.crew) else {
            return Vec::new();
        };
        let mark = |way: Way, radius: f64| {
            let figures = way
                .figures(&landmarks::at_radius(case.setting(), radius))
                .ok()?;
            Some(Mark {
                x: case.altitude_km(radius),
                y: 1e3 * figures.cost_km_s,
            })
        };
        let marks = &self.answer.landmarks;
        let crossovers: Vec<Mark> = marks
            .crossovers
            .iter()
            .filter_map(|crossover| mark(crossover.below, crossover.radius_km))
            .collect();
        let plot = Plot {
            rows: &rows,
            axis,
            x_title: "alt, km",
            quantity: Quantity::Cost,
            y_log: false,
            here: Some(case.altitude_km(case.setting().target.periapsis_km)),
            cheapest: marks
                .cheapest
                .and_then(|cheapest| mark(Way::Direct, cheapest.radius_km)),
            crossovers: &crossovers,
            glyphs,
        };
        plot::draw(&plot, width, height).lines()
    }
}

/// The inclination line of a target: what is asked for and what it takes.
fn plane(case: &Case) -> String {
    use crate::physics::asymptote;
    use crate::study::spec::PlaneSpec;
    match (case.spec().target.plane, case.declination_rad()) {
        (PlaneSpec::Any, _) => "any plane".to_owned(),
        (PlaneSpec::PlaneChangeDeg(turn), _) => format!("plane change of {turn} deg for every way"),
        (PlaneSpec::InclinationDeg(inclination), None) => format!("inclination {inclination} deg"),
        (PlaneSpec::InclinationDeg(inclination), Some(declination)) => {
            let (low, high) = asymptote::free_inclination_rad(declination);
            let free = format!(
                "free range {} to {}",
                words::degrees(low),
                words::degrees(high)
            );
            match asymptote::b_plane_angle_rad(inclination.to_radians(), declination) {
                Some(angle) => format!(
                    "inclination {inclination} deg ({free}; B-plane angle {})",
                    words::b_plane(angle)
                ),
                None => format!("inclination {inclination} deg, outside the {free}"),
            }
        }
    }
}

/// The three radii whose largest names the cheapest way, as long as nothing else pulls.
fn radii(brief: &Brief) -> String {
    let radii = &brief.verdict.radii;
    let or_none = |radius: Option<f64>| radius.map_or_else(|| "none".to_owned(), words::km);
    format!(
        "break-even {} (2 mu/v_inf^2), target apoapsis {}, loop apoapsis {}",
        or_none(radii.break_even_km),
        words::km(radii.target_apoapsis_km),
        or_none(radii.loop_apoapsis_km)
    )
}

/// How a way arrives: `dip: aiming radius 5541 km, v_inf 0.8119 km/s, with margin 699 m/s`.
fn way_line(plan: &Plan) -> String {
    format!(
        "{}: aiming radius {}, v_inf {}, with margin {}",
        plan.way.name(),
        words::km(plan.aiming_radius_km),
        words::speed(plan.v_inf_km_s),
        words::dv(plan.dv_with_margin_km_s)
    )
}

/// The warnings about a way, by code, to stand beside its numbers: `loop: tide-under-floor, burns-take-time`.
fn flags(brief: &Brief) -> Vec<String> {
    Way::TABLE
        .iter()
        .filter_map(|entry| {
            let codes: Vec<&str> = brief
                .warnings
                .iter()
                .filter(|warning| warning::about(warning) == Some(entry.way))
                .map(|warning| warning.code)
                .collect();
            (!codes.is_empty())
                .then(|| format!("{}: {} (see Warnings)", entry.name, codes.join(", ")))
        })
        .collect()
}

/// Program and fingerprint: with the scenario above it, all it takes to repeat the brief.
fn colophon(brief: &Brief) -> String {
    format!(
        "stoop {}, scenario fingerprint {}",
        env!("CARGO_PKG_VERSION"),
        brief.fingerprint
    )
}

/// Heading, arrival and target as short lines.
fn facts(brief: &Brief) -> Vec<(&'static str, String)> {
    let case = brief.case;
    let setting = case.setting();
    let body = case.body();
    let mut facts = vec![(
        "body",
        format!(
            "{}, GM {} km3/s2, radius {}",
            crate::visible::ascii(&body.name),
            body.gm_km3_s2,
            words::km(body.radius_km)
        ),
    )];
    let v_inf = setting
        .approach
        .v_inf_sq(setting.target.periapsis_km)
        .ok()
        .map(f64::sqrt);
    let arrival = match v_inf {
        Some(v_inf) => format!(
            "v_inf {} at the target periapsis ({})",
            words::speed(v_inf),
            super::sources::arrival_model(&case.spec().arrival)
        ),
        None => format!(
            "no hyperbola at the target periapsis ({})",
            super::sources::arrival_model(&case.spec().arrival)
        ),
    };
    facts.push(("arrival", arrival));
    facts.push(("radii", radii(brief)));
    facts.push((
        "target",
        format!(
            "{}, period {}, {}",
            words::target(case),
            words::time(setting.target.period_s(setting.gm)),
            plane(case)
        ),
    ));
    let limits = &setting.limits;
    facts.push((
        "limits",
        format!(
            "floor {}, cap {}, at most {} and {}{}",
            words::altitude(case.altitude_km(limits.floor_radius_km)),
            words::altitude(case.altitude_km(limits.cap_radius_km)),
            words::time(limits.longest_s),
            words::starts(limits.most_starts),
            if limits.longest_burn_s.is_finite() {
                format!(", longest burn {}", words::time(limits.longest_burn_s))
            } else {
                String::new()
            }
        ),
    ));
    if let Some(vehicle) = &setting.vehicle {
        facts.push((
            "vehicle",
            format!(
                "{} dry, {} propellant, {} N, Isp {} s",
                words::kg(vehicle.dry_mass_kg),
                words::kg(vehicle.propellant_kg),
                vehicle.thrust_n,
                vehicle.isp_s
            ),
        ));
    }
    let policy = &case.spec().policy;
    facts.push((
        "policy",
        format!(
            "margin {} %, {} m/s for every start after the first, residuals {} %",
            policy.margin_percent, policy.per_start_m_s, policy.residual_percent
        ),
    ));
    let journey = case.journey();
    if let Some(departure) = journey.departure_dv_km_s {
        let total = brief.answer.best_plan().map_or_else(String::new, |plan| {
            format!(
                "; with the arrival {} in all",
                words::dv(departure + plan.dv_km_s)
            )
        });
        facts.push((
            "departure",
            format!("burn of {}{total}", words::dv(departure)),
        ));
    }
    if let Some(flight) = journey.time_of_flight_s {
        facts.push((
            "transfer",
            format!("{} to the periapsis", words::time(flight)),
        ));
    }
    facts
}

/// Landmarks as sentences.
fn landmark_lines(brief: &Brief) -> Vec<String> {
    let case = brief.case;
    let mut lines = Vec::new();
    match brief.answer.landmarks.cheapest {
        Some(cheapest) => lines.push(format!(
            "cheapest direct altitude {} ({}){}",
            words::altitude(case.altitude_km(cheapest.radius_km)),
            words::dv(cheapest.dv_km_s),
            if cheapest.at_border {
                ", held there by a limit"
            } else {
                ""
            }
        )),
        None => lines.push("direct can be flown nowhere in the range".to_owned()),
    }
    for crossover in &brief.answer.landmarks.crossovers {
        let kind = match crossover.kind {
            landmarks::CrossoverKind::Tie => "",
            landmarks::CrossoverKind::Limit => ", where a limit binds",
        };
        lines.push(format!(
            "crossover at {} ({}): {} below, {} above{kind}",
            words::altitude(case.altitude_km(crossover.radius_km)),
            words::dv(crossover.dv_km_s),
            crossover.below.name(),
            crossover.above.name()
        ));
    }
    if brief.answer.landmarks.crossovers.is_empty() {
        lines.push("no crossover in the range: the same way is cheapest all along".to_owned());
    }
    lines
}
