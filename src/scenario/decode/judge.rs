//! Contradictions between fields, all at once and never about a stand-in.
//!
//! [`Case::new`] stops at the first contradiction, because what follows computes with the numbers. Here each part of a scenario is
//! put alone among harmless values, so that every part is looked at whatever is wrong with the others; and a part is looked
//! at only where nothing that it depends on is broken, so that no fault is a mere consequence of another.

use super::sections::harmless;
use crate::scenario::tree::{Kind, Node};
use crate::study::case::{Case, Fault};
use crate::study::spec::Spec;

/// Faults that stand between fields. `broken` are the paths that hold stand-ins.
pub(super) fn faults(spec: &Spec, broken: &[String]) -> Vec<Fault> {
    let sound = |parts: &[&str]| {
        !broken
            .iter()
            .any(|path| parts.iter().any(|part| overlaps(path, part)))
    };
    let alone = Spec {
        body: spec.body.clone(),
        ..harmless()
    };
    let mut shape = alone.clone();
    shape.target.shape = spec.target.shape;
    let mut way_in = alone.clone();
    way_in.arrival = spec.arrival.clone();
    // A plane that is broken cannot contradict the sense; the rest of the arrival is looked at without it.
    if sound(&["target.inclination_deg", "target.plane_change_deg"]) {
        way_in.target.plane = spec.target.plane;
    }
    let parts: [(&[&str], Spec); 5] = [
        (
            &["burns", "vehicle"],
            Spec {
                burns: spec.burns,
                vehicle: spec.vehicle,
                ..harmless()
            },
        ),
        (&["body"], alone.clone()),
        (&["body", "target.shape"], shape),
        (
            &["body", "limits.floor_alt_km", "limits.cap"],
            Spec {
                limits: spec.limits,
                ..alone
            },
        ),
        (&["body", "arrival"], way_in),
    ];
    let mut out: Vec<Fault> = Vec::new();
    for (depends_on, part) in parts {
        if !sound(depends_on) {
            continue;
        }
        for fault in Case::new(part).err().unwrap_or_default() {
            if !out.contains(&fault) {
                out.push(fault);
            }
        }
    }
    out
}

/// Whether one of two paths is the other or stands above it.
fn overlaps(a: &str, b: &str) -> bool {
    let above = |short: &str, long: &str| {
        short.is_empty()
            || long
                .strip_prefix(short)
                .is_some_and(|rest| rest.is_empty() || rest.starts_with('.'))
    };
    above(a, b) || above(b, a)
}

/// Where a path stands (byte offset): the deepest part of it that is present.
pub(super) fn locate(root: &Node, path: &str) -> usize {
    let mut node = root;
    for part in path.split('.') {
        let next = match (node.field(part), &node.kind) {
            (Some(field), _) => Some(&field.value),
            // `brake.AltitudeKm` is the value inside the variant of that name.
            (
                None,
                Kind::Tuple {
                    name: Some(name),
                    values,
                },
            ) if name == part => values.first(),
            _ => None,
        };
        match next {
            Some(next) => node = next.plain(),
            None => break,
        }
    }
    node.span.start
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::scenario::tree;

    #[test]
    fn the_harmless_scenario_has_no_faults() {
        assert!(Case::new(harmless()).is_ok());
        assert!(faults(&harmless(), &[]).is_empty());
    }

    #[test]
    fn paths_overlap_by_whole_parts() {
        assert!(overlaps("limits", "limits.cap.AltitudeKm"));
        assert!(overlaps("limits.cap", "limits"));
        assert!(overlaps("", "body"));
        assert!(!overlaps("body.parent", "body.parents"));
        assert!(!overlaps("target.shape", "target.inclination_deg"));
    }

    #[test]
    fn a_path_that_is_absent_is_its_nearest_ancestor() {
        let text = "(a: Some((b: AltitudeKm(7.0))))";
        let root = tree::parse(text).expect("a tree");
        let at = |path: &str| &text[locate(&root, path)..][..3];
        assert_eq!(at("a.b.AltitudeKm"), "7.0");
        assert_eq!(at("a.b"), "Alt");
        assert_eq!(at("a.c"), "(b:");
        assert_eq!(at("z"), "(a:");
    }
}
