//! The burns lens: each burn of one way, before and after, and how the way arrives.

use super::put_page;
use crate::arrival::{Plan, Way};
use crate::physics::asymptote;
use crate::report::words::wrap;
use crate::report::{stops, words};
use crate::study::Case;
use crate::study::spec::PlaneSpec;
use crate::tui::model::Model;
use crate::tui::results::Grade;
use crate::tui::theme::Theme;
use ratatui::buffer::Buffer;
use ratatui::layout::Rect;
use ratatui::text::{Line, Span};

pub(super) fn draw(model: &Model, theme: Theme, area: Rect, buffer: &mut Buffer) {
    let way = model.shown_way();
    let width = usize::from(area.width).saturating_sub(2);
    let mut lines = vec![Line::from(vec![
        Span::raw(" "),
        Span::styled(
            format!("{} {}", way.entry().glyph, way.name()),
            theme.way(way).patch(theme.strong()),
        ),
        Span::styled(
            format!("  {}", crate::tui::layout::fit("w: next way", width)),
            theme.faint(),
        ),
    ])];
    let mut put = |text: String| {
        lines.extend(
            wrap(&text, width)
                .into_iter()
                .map(|line| Line::from(format!(" {line}"))),
        )
    };
    let plan = model
        .results
        .answer
        .ways
        .iter()
        .find(|(each, _)| *each == way)
        .map(|(_, plan)| plan);
    match plan {
        Some(Ok(plan)) => {
            arrival(&model.case, plan, &mut put);
            for k in 0..plan.starts() {
                put(String::new());
                burn(&model.case, plan, k, &mut put);
            }
            put(String::new());
            totals(&model.case, plan, &mut put);
            engine(model, plan, width, &mut put);
        }
        Some(Err(not)) => {
            put("not flyable:".to_owned());
            for reason in &not.reasons {
                put(format!("- {}", words::reason(&model.case, reason)));
            }
        }
        None => {}
    }
    put_page(buffer, area, &lines, model.scroll, theme);
}

fn arrival(case: &Case, plan: &Plan, put: &mut impl FnMut(String)) {
    put(format!(
        "arrives with v_inf {}, aiming radius {}, periapsis {}",
        words::speed(plan.v_inf_km_s),
        words::km(plan.aiming_radius_km),
        words::altitude(case.altitude_km(plan.brake_radius_km))
    ));
    if let (PlaneSpec::InclinationDeg(inclination), Some(declination)) =
        (case.spec().target.plane, case.declination_rad())
    {
        match asymptote::b_plane_angle_rad(inclination.to_radians(), declination) {
            Some(angle) => put(format!(
                "B-plane angle {} for inclination {inclination} deg",
                words::b_plane(angle)
            )),
            None => {
                let (low, high) = asymptote::free_inclination_rad(declination);
                put(format!(
                    "free inclinations {} to {}; {inclination} deg takes a turn of {}",
                    words::degrees(low),
                    words::degrees(high),
                    words::degrees(plan.turn_rad)
                ));
            }
        }
    }
}

fn burn(case: &Case, plan: &Plan, k: usize, put: &mut impl FnMut(String)) {
    let Some(burn) = plan.burns.get(k) else {
        return;
    };
    let what = match (plan.way, k) {
        (Way::Direct, _) => "brake into the target",
        (Way::Steps, _) if burn.brakes() && k + 1 == plan.starts() => "brake into the target",
        (Way::Steps, _) if burn.brakes() => "brake, one pass of several",
        (_, 0) => "brake",
        (Way::Steps, _) | (_, 1) => "raise the periapsis",
        _ => "brake into the target",
    };
    put(format!(
        "burn {}: {what} at {} altitude",
        k + 1,
        words::altitude(case.altitude_km(burn.at_radius_km))
    ));
    put(format!(
        "   {} -> {}   dv {}{}",
        words::speed(burn.speed_before_km_s),
        words::speed(burn.speed_after_km_s),
        words::dv(burn.dv_km_s),
        if burn.turn_rad == 0.0 {
            String::new()
        } else {
            format!("   turn {}", words::degrees(burn.turn_rad))
        }
    ));
    if let (Some(propellant), Some(duration)) = (burn.propellant_kg, burn.duration_s) {
        put(format!(
            "   {} in {} at full thrust",
            words::kg(propellant),
            words::time(duration)
        ));
    }
    if let Some(flown) = words::flown_short(case, burn) {
        put(format!("   {flown}"));
    }
    let orbit = burn.orbit_after;
    let (low, high) = (
        case.altitude_km(orbit.periapsis_km),
        case.altitude_km(orbit.apoapsis_km),
    );
    let shape = if orbit.periapsis_km == orbit.apoapsis_km {
        format!("a circle at {}", words::altitude(low))
    } else {
        format!(
            "{} x {} altitude",
            words::altitude(low),
            words::altitude(high)
        )
    };
    put(format!(
        "   leaves {shape}, period {}",
        words::time(orbit.period_s(case.body().gm_km3_s2))
    ));
    if k == 0 {
        match plan.captured_share {
            Some(share) => put(format!(
                "   captured after {:.1} % of this burn{}",
                100.0 * share,
                plan.captured_after_s
                    .map_or_else(String::new, |seconds| format!(
                        ", {seconds:.0} s after ignition"
                    ))
            )),
            None => put("   this burn does not capture".to_owned()),
        }
    }
}

/// What a review asks about the engine, for the way shown.
fn engine(model: &Model, plan: &Plan, width: usize, put: &mut impl FnMut(String)) {
    let case = &model.case;
    if case.setting().lasting().is_none() {
        return;
    }
    put(String::new());
    let results = &model.results;
    if results.grade != Grade::Integrated {
        put(
            "engine questions (early stop, late ignition, weak thrust): when integrated".to_owned(),
        );
        return;
    }
    let questions = results
        .questions
        .iter()
        .find(|(way, _)| *way == plan.way)
        .map(|(_, questions)| questions);
    put("engine".to_owned());
    for line in words::engine(case, plan, questions, &results.divisions) {
        put(format!("   {line}"));
    }
    if let Some(questions) = questions {
        put(String::new());
        for line in stops::lines(case, questions, width.min(80), 9) {
            put(line);
        }
    }
}

fn totals(case: &Case, plan: &Plan, put: &mut impl FnMut(String)) {
    put(format!(
        "together dv {}, with margin {}, {} in {}",
        words::dv(plan.dv_km_s),
        words::dv(plan.dv_with_margin_km_s),
        words::starts(plan.starts()),
        words::time(plan.duration_s)
    ));
    if let Some(used) = &plan.consumption {
        put(format!(
            "propellant {}, with margin and residuals {} of {} aboard; {} left in orbit",
            words::kg(used.propellant_kg),
            words::kg(used.propellant_with_margin_kg),
            words::kg(
                case.setting()
                    .vehicle
                    .map_or(0.0, |vehicle| vehicle.propellant_kg)
            ),
            words::kg(used.final_mass_kg)
        ));
    }
    let journey = case.journey();
    if let Some(departure) = journey.departure_dv_km_s {
        put(format!(
            "with the departure burn {}: {} in all",
            words::dv(departure),
            words::dv(departure + plan.dv_km_s)
        ));
    }
    if let Some(flight) = journey.time_of_flight_s {
        put(format!(
            "transfer {}, then {} to the target orbit",
            words::time(flight),
            words::time(plan.duration_s)
        ));
    }
}
