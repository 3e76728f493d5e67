//! How fast a crossover moves when a knob is turned.

use super::Slope;
use super::probe::{Prober, cost};
use super::scale::Scale;
use super::slope;
use crate::numerics::root;
use crate::study::landmarks::{Crossover, CrossoverKind, at_radius};

/// Slope of the crossover's radius (and altitude), km per unit of the knob.
pub(super) fn slope(
    prober: &Prober,
    crossover: &Crossover,
    from: f64,
    scale: &Scale,
    ends: (f64, f64),
) -> Slope {
    match crossover.kind {
        CrossoverKind::Tie => of_tie(prober, crossover, from, scale, ends),
        CrossoverKind::Limit => slope::slope(
            |x| of_limit(prober, crossover, x),
            from,
            scale.size(from),
            ends,
        ),
    }
}

/// Where the two ways tie, g(r, x) = 0 with g the difference of their costs, so dr/dx = −(∂g/∂x)/(∂g/∂r): two slopes at one point, and no
/// root has to be found again.
fn of_tie(
    prober: &Prober,
    crossover: &Crossover,
    from: f64,
    scale: &Scale,
    ends: (f64, f64),
) -> Slope {
    let radius = crossover.radius_km;
    let gap = |x: f64, radius: f64| {
        let setting = at_radius(&prober.setting(x).ok()?, radius);
        Some(cost(&setting, crossover.below)? - cost(&setting, crossover.above)?)
    };
    let Ok(here) = prober.setting(from) else {
        return Slope::Absent;
    };
    let along = slope::slope(
        |radius| {
            let setting = at_radius(&here, radius);
            Some(cost(&setting, crossover.below)? - cost(&setting, crossover.above)?)
        },
        radius,
        radius,
        (0.0, f64::INFINITY),
    );
    let Some(along) = along.value().filter(|along| *along != 0.0) else {
        return Slope::Absent;
    };
    let moved = |slope: f64| {
        if slope == 0.0 { 0.0 } else { -slope / along }
    };
    match slope::slope(|x| gap(x, radius), from, scale.size(from), ends) {
        Slope::Central(slope) => Slope::Central(moved(slope)),
        Slope::Above(slope) => Slope::Above(moved(slope)),
        Slope::Below(slope) => Slope::Below(moved(slope)),
        Slope::Kinked { below, above } => Slope::Kinked {
            below: moved(below),
            above: moved(above),
        },
        Slope::Absent => Slope::Absent,
    }
}

/// The radius at which a limit makes the cheapest way change, near where it did: the border of "the way below is flyable and no dearer".
fn of_limit(prober: &Prober, crossover: &Crossover, x: f64) -> Option<f64> {
    let setting = prober.setting(x).ok()?;
    let below_wins = |radius: f64| {
        let setting = at_radius(&setting, radius);
        match (
            cost(&setting, crossover.below),
            cost(&setting, crossover.above),
        ) {
            (Some(below), Some(above)) => below <= above,
            (below, _) => below.is_some(),
        }
    };
    [1e-3, 1e-2, 6e-2].into_iter().find_map(|width| {
        let (low, high) = (
            crossover.radius_km * (1.0 - width),
            crossover.radius_km * (1.0 + width),
        );
        (below_wins(low) && !below_wins(high)).then(|| root::border(below_wins, low, high).1)
    })
}
