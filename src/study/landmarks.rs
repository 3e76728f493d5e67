//! Where it turns: the cheapest altitude of the direct curve, and every altitude at which the cheapest way changes.
//!
//! Both follow the target-altitude sweep over the whole sensible range (floor to cap) at unchanged eccentricity, with
//! everything else as in the setting. Radii here are those of the target's periapsis.

use super::answer::cheapest;
use super::watch::{Alone, Crew, Stopped, gather};
use crate::arrival::{Burns, Choice, Setting, Way};
use crate::numerics::tolerance::{
    FLOWN_BORDER_RELATIVE, FLOWN_ROOT_RELATIVE, ROOT_RELATIVE, SAME_COST_RELATIVE,
};
use crate::numerics::{minimum, root};

/// Cheapest altitude and crossovers.
#[derive(Clone, Debug, PartialEq, Default)]
pub struct Landmarks {
    /// Where direct costs least; `None` where direct is flyable nowhere.
    pub cheapest: Option<Cheapest>,
    /// Every change of the cheapest way, from low to high.
    pub crossovers: Vec<Crossover>,
}

/// The least direct cost.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Cheapest {
    /// Target periapsis radius, km.
    pub radius_km: f64,
    /// Δv there, km/s.
    pub dv_km_s: f64,
    /// Whether the curve still falls towards an end of the range there (floor, cap or a limit holds it).
    pub at_border: bool,
}

/// A change of the cheapest way.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Crossover {
    /// Target periapsis radius, km.
    pub radius_km: f64,
    /// Δv of the way that is cheapest just below, km/s.
    pub dv_km_s: f64,
    /// Cheapest way just below.
    pub below: Way,
    /// Cheapest way just above.
    pub above: Way,
    /// What changes there.
    pub kind: CrossoverKind,
}

/// What makes the cheapest way change.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum CrossoverKind {
    /// The two cost the same there.
    Tie,
    /// One of the two stops (or starts) being flyable there, or its cost jumps because a limit changes how it is flown.
    Limit,
}

/// Nodes of the scan over the sensible range where burns take no time.
pub const SCAN_POINTS: usize = 240;

/// Nodes of the scan where burns are integrated: each is a thousand times the work, and the curves are as smooth.
pub const INTEGRATED_SCAN_POINTS: usize = 120;

/// Nodes of the scan where losses are estimated, for a first picture.
pub const ESTIMATED_SCAN_POINTS: usize = 48;

/// Nodes of the scan that a setting gets.
pub fn scan_points(setting: &Setting) -> usize {
    match setting.burns {
        Burns::Impulsive => SCAN_POINTS,
        Burns::Estimated(_) => ESTIMATED_SCAN_POINTS,
        Burns::Integrated(_) => INTEGRATED_SCAN_POINTS,
    }
}

/// The sensible range of the target periapsis radius (km): floor to where the target apoapsis meets the cap.
///
/// `None` where the two leave nothing.
pub fn sensible_range(setting: &Setting) -> Option<(f64, f64)> {
    let ratio = setting.target.apoapsis_km / setting.target.periapsis_km;
    let (low, high) = (
        setting.limits.floor_radius_km,
        setting.limits.cap_radius_km / ratio,
    );
    (low < high).then_some((low, high))
}

/// The setting with its target periapsis at a radius, eccentricity unchanged.
pub fn at_radius(setting: &Setting, radius_km: f64) -> Setting {
    let ratio = setting.target.apoapsis_km / setting.target.periapsis_km;
    // At the top of the range the product may pass the cap by a rounding error; the range's end is allowed.
    let apoapsis = radius_km * ratio;
    let cap = setting.limits.cap_radius_km;
    let apoapsis = if cap < apoapsis && apoapsis <= cap * (1.0 + 1e-12) {
        cap
    } else {
        apoapsis
    };
    setting.with_target(radius_km, apoapsis.max(radius_km))
}

/// Finds the landmarks of a setting.
pub fn landmarks(setting: &Setting) -> Landmarks {
    landmarks_with(setting, scan_points(setting), &Alone).unwrap_or_default()
}

/// Finds the landmarks of a setting with a number of scan nodes, the work shared by a crew.
///
/// # Errors
/// [`Stopped`] where the crew was stopped.
pub fn landmarks_with(
    setting: &Setting,
    points: usize,
    crew: &dyn Crew,
) -> Result<Landmarks, Stopped> {
    let Some((low, high)) = sensible_range(setting) else {
        return Ok(Landmarks::default());
    };
    let grid = grid(setting, low, high, points.max(2));
    let nodes = gather(crew, grid.len(), |k| Node::ask(setting, grid[k]))?;
    // The two refinements do not need each other.
    let mut parts = gather(crew, 2, |part| {
        if part == 0 {
            (cheapest_direct(setting, &grid, &nodes), Vec::new())
        } else {
            (None, crossovers(setting, &nodes))
        }
    })?
    .into_iter();
    let cheapest = parts.next().and_then(|(cheapest, _)| cheapest);
    let crossovers = parts.next().map_or_else(Vec::new, |(_, found)| found);
    Ok(Landmarks {
        cheapest,
        crossovers,
    })
}

/// Log-spaced radii; nodes crowd just above the brake radius, where dip and loop begin and r = q is a trivial tie.
fn grid(setting: &Setting, low: f64, high: f64, points: usize) -> Vec<f64> {
    let span = (high / low).ln();
    let mut grid: Vec<f64> = (0..points)
        .map(|k| low * (span * k as f64 / (points - 1) as f64).exp())
        .collect();
    grid[0] = low;
    grid[points - 1] = high;
    let brake = match setting.brake {
        Choice::Radius(brake) => brake,
        Choice::Best => low,
    };
    for near in [0.0, 1e-9, 1e-6, 1e-4, 1e-3, 5e-3] {
        let radius = brake * (1.0 + near);
        if low < radius && radius < high {
            grid.push(radius);
        }
    }
    grid.sort_by(f64::total_cmp);
    grid.dedup();
    grid
}

/// Two costs further apart than this, relative, are no tie: the searches for ties end far closer.
const TIED_RELATIVE: f64 = 1e-7;

/// Relative widths at which searches for a tie and for the border of a limit stop.
pub(super) fn sharpness(setting: &Setting) -> (f64, f64) {
    match setting.burns {
        Burns::Impulsive | Burns::Estimated(_) => (ROOT_RELATIVE, ROOT_RELATIVE),
        Burns::Integrated(_) => (FLOWN_ROOT_RELATIVE, FLOWN_BORDER_RELATIVE),
    }
}

/// Costs of all ways at one radius, km/s.
#[derive(Clone, Copy, Debug)]
struct Node {
    radius: f64,
    costs: [Option<(f64, usize)>; Way::COUNT],
    best: Option<Way>,
}

impl Node {
    fn ask(setting: &Setting, radius: f64) -> Self {
        let here = at_radius(setting, radius);
        let costs: [Option<(f64, usize)>; Way::COUNT] = std::array::from_fn(|k| {
            Way::TABLE[k]
                .way
                .figures(&here)
                .ok()
                .map(|figures| (figures.cost_km_s, figures.starts))
        });
        let best = cheapest(
            Way::TABLE
                .iter()
                .zip(&costs)
                .filter_map(|(entry, cost)| cost.map(|(cost, starts)| (entry.way, cost, starts))),
        );
        Self {
            radius,
            costs,
            best,
        }
    }

    fn cost(&self, way: Way) -> Option<f64> {
        self.costs[way as usize].map(|(cost, _)| cost)
    }
}

fn cost_at(setting: &Setting, way: Way, radius: f64) -> Option<f64> {
    way.figures(&at_radius(setting, radius))
        .ok()
        .map(|figures| figures.cost_km_s)
}

fn cheapest_direct(setting: &Setting, grid: &[f64], nodes: &[Node]) -> Option<Cheapest> {
    let mut scanned = nodes.iter();
    // The scan has been paid for: hand out its values first, compute only what the refinement adds.
    let mut known = || scanned.next().map(|node| node.cost(Way::Direct));
    let cost = |radius: f64| cost_at(setting, Way::Direct, radius);
    let found = minimum::scan_then_refine(|radius| known().unwrap_or_else(|| cost(radius)), grid)?;
    let sharp = minimum::stationary_point(cost, found.x);
    // Close to a bound the stencil of the sharp search does not fit; the minimum may be inside all the same.
    let interior = [1.0 - 1e-4, 1.0 + 1e-4]
        .iter()
        .all(|side| cost(found.x * side).is_some_and(|value| found.value <= value));
    let radius_km = sharp.unwrap_or(found.x);
    let plan = Way::Direct.plan(&at_radius(setting, radius_km)).ok()?;
    Some(Cheapest {
        radius_km,
        dv_km_s: plan.dv_km_s,
        at_border: sharp.is_none() && !interior,
    })
}

fn crossovers(setting: &Setting, nodes: &[Node]) -> Vec<Crossover> {
    let mut found = Vec::new();
    for (k, pair) in nodes.windows(2).enumerate() {
        let (left, right) = (&pair[0], &pair[1]);
        match (left.best, right.best) {
            (Some(a), Some(b)) if a == b => {
                if !ends_within(setting, left, right, a, &mut found) {
                    touch(setting, nodes, k, a, &mut found);
                }
            }
            (Some(_), Some(_)) => between(setting, left, right, 0, &mut found),
            // Nothing is flyable at one end: the last place where something is takes its part.
            (Some(_), None) | (None, Some(_)) => {
                let (near, far) = root::border_to(
                    |radius| Node::ask(setting, radius).best.is_some(),
                    left.radius,
                    right.radius,
                    sharpness(setting).1,
                );
                if left.best.is_some() {
                    between(setting, left, &Node::ask(setting, near), 0, &mut found);
                } else {
                    between(setting, &Node::ask(setting, far), right, 0, &mut found);
                }
            }
            (None, None) => {}
        }
    }
    // Where dip and loop begin, at the brake radius (the floor, where the program chooses it), the change is not a
    // crossover but the brake itself.
    let brake = match setting.brake {
        Choice::Radius(brake) => brake,
        Choice::Best => setting.limits.floor_radius_km,
    };
    // The same at the top: where the target's apoapsis meets the cap, a loop up to the cap is a dip.
    let top = nodes.last().map_or(f64::INFINITY, |node| node.radius);
    found.retain(|crossover: &Crossover| {
        brake * (1.0 + 2e-6) < crossover.radius_km && crossover.radius_km < top * (1.0 - 2e-6)
    });
    found
}

/// Every change of the cheapest way between two nodes with different winners.
///
/// A third way may win in between; the halves are then looked at on their own (bounded depth).
fn between(setting: &Setting, left: &Node, right: &Node, depth: u32, found: &mut Vec<Crossover>) {
    let (Some(below), Some(above)) = (left.best, right.best) else {
        return;
    };
    if below == above {
        return;
    }
    let both = [left, right].map(|node| node.cost(below).zip(node.cost(above)));
    let both_flyable = both.iter().all(Option::is_some);
    // With the brake left open, dip below the crossover brakes at the target itself and costs exactly what direct does: the
    // difference is then zero over a stretch and its root means nothing.
    let apart = both
        .iter()
        .all(|pair| pair.is_some_and(|(a, b)| SAME_COST_RELATIVE * a.max(b) < (a - b).abs()));
    let tie = if apart {
        let difference =
            |radius: f64| Some(cost_at(setting, below, radius)? - cost_at(setting, above, radius)?);
        root::bracketed_to(difference, left.radius, right.radius, sharpness(setting).0).ok()
    } else {
        None
    };
    let (radius, kind) = match tie {
        Some(radius) => (radius, CrossoverKind::Tie),
        None => {
            let (_, right_side) = root::border_to(
                |radius| Node::ask(setting, radius).best == Some(below),
                left.radius,
                right.radius,
                sharpness(setting).1,
            );
            let kind = if both_flyable {
                CrossoverKind::Tie
            } else {
                CrossoverKind::Limit
            };
            (right_side, kind)
        }
    };
    let middle = Node::ask(setting, radius);
    // A change of sign is a tie only where the two do cost the same there; a curve that jumps changes it too.
    let kind = match middle.cost(below).zip(middle.cost(above)) {
        Some((a, b)) if TIED_RELATIVE * a.max(b) < (a - b).abs() => CrossoverKind::Limit,
        _ => kind,
    };
    if let Some(best) = middle.best
        && best != below
        && best != above
        && depth < 4
    {
        between(setting, left, &middle, depth + 1, found);
        between(setting, &middle, right, depth + 1, found);
        return;
    }
    let just_below = radius * (1.0 - 1e-13);
    let dv = below
        .plan(&at_radius(
            setting,
            if kind == CrossoverKind::Tie {
                radius
            } else {
                just_below.max(left.radius)
            },
        ))
        .or_else(|_| below.plan(&at_radius(setting, left.radius)));
    if let Ok(plan) = dv {
        found.push(Crossover {
            radius_km: radius,
            dv_km_s: plan.dv_km_s,
            below,
            above,
            kind,
        });
    }
}

/// Two crossovers inside one cell whose ends have the same winner, because a limit takes the cheaper way out (or lets it in) right after
/// it has become the cheaper. Looks where the flyability of a way changes; `false` where that hides nothing.
fn ends_within(
    setting: &Setting,
    left: &Node,
    right: &Node,
    winner: Way,
    found: &mut Vec<Crossover>,
) -> bool {
    for entry in Way::TABLE.iter().filter(|entry| entry.way != winner) {
        let flyable = |node: &Node| node.cost(entry.way).is_some();
        if flyable(left) == flyable(right) {
            continue;
        }
        let (near, far) = root::border_to(
            |radius| cost_at(setting, entry.way, radius).is_some(),
            left.radius,
            right.radius,
            sharpness(setting).1,
        );
        let inside = Node::ask(setting, if flyable(left) { near } else { far });
        if inside.best.is_some_and(|best| best != winner) {
            between(setting, left, &inside, 0, found);
            between(setting, &inside, right, 0, found);
            return true;
        }
    }
    false
}

/// Two crossovers inside one cell: the winner is the same at both ends, but another way comes close enough between
/// nodes to win for a stretch. Looks wherever the gap to another way has its least value at node `k + 1`.
fn touch(setting: &Setting, nodes: &[Node], k: usize, winner: Way, found: &mut Vec<Crossover>) {
    let Some(next) = nodes.get(k + 2) else { return };
    let (left, here) = (&nodes[k], &nodes[k + 1]);
    if next.best != Some(winner) {
        return;
    }
    for entry in Way::TABLE.iter().filter(|entry| entry.way != winner) {
        let gap = |node: &Node| Some(node.cost(entry.way)? - node.cost(winner)?);
        let (Some(a), Some(b), Some(c)) = (gap(left), gap(here), gap(next)) else {
            continue;
        };
        // A smooth gap has a parabola's worth of room below its least node, no more than its second difference.
        if !(b <= a && b < c && b <= a + c - 2.0 * b) {
            continue;
        }
        let between_costs = |radius: f64| {
            Some(cost_at(setting, entry.way, radius)? - cost_at(setting, winner, radius)?)
        };
        let start = minimum::Minimum {
            x: here.radius,
            value: b,
        };
        let least = minimum::refine(between_costs, left.radius, next.radius, start);
        let middle = Node::ask(setting, least.x);
        if middle.best != Some(winner) {
            between(setting, left, &middle, 0, found);
            between(setting, &middle, next, 0, found);
        }
    }
}
