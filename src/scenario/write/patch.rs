//! The author's text with new values in it: edits by place, so that everything else stays as it was.

use super::emit;
use super::pieces::{Fields, Piece, pieces};
use crate::scenario::decode;
use crate::scenario::tree::{self, Field, Kind, Node};
use crate::study::spec::Spec;
use std::ops::Range;

/// The author's text with the values of `new` in it. A text that cannot be read is replaced by a fresh one.
pub fn patch(original: &str, new: &Spec) -> String {
    patched(original, new).unwrap_or_else(|| emit(new))
}

/// `None` where the original cannot be read, or where the result would not say what `new` says.
fn patched(original: &str, new: &Spec) -> Option<String> {
    let body = decode::without_mark(original);
    let mark = original.strip_suffix(body)?;
    let (root, old) = decode::spec(body)?;
    let mut edits = Edits {
        text: body,
        edits: Vec::new(),
    };
    edits.value(&root, &pieces(&old), &pieces(new));
    let text = edits.apply();
    // The promise is that what is saved says what was on screen; if a text defeats the patching, a fresh one keeps it.
    let (_, back) = decode::spec(&text)?;
    (back == *new).then(|| format!("{mark}{text}"))
}

struct Edits<'a> {
    text: &'a str,
    edits: Vec<(Range<usize>, String)>,
}

impl Edits<'_> {
    /// Puts `new` where `old` stands, touching as little as possible.
    fn value(&mut self, node: &Node, old: &Piece, new: &Piece) {
        if old == new {
            return;
        }
        let node = node.plain();
        match (old, new, &node.kind) {
            (
                Piece::Group { name: before, .. },
                Piece::Group { name, fields },
                Kind::Struct {
                    fields: present,
                    close,
                    ..
                },
            ) if before == name => self.group(present, *close, old, fields),
            (
                Piece::Inner { name: before, .. },
                Piece::Inner { name, value },
                Kind::Tuple { values, .. },
            ) if before == name => {
                if let [inner] = values.as_slice() {
                    self.put(inner.plain().span.clone(), value.clone());
                }
            }
            _ => self.put(node.span.clone(), new.inline()),
        }
    }

    fn put(&mut self, range: Range<usize>, text: String) {
        self.edits.push((range, text));
    }

    /// The fields of a group: changed in place, renamed, removed, added.
    fn group(&mut self, present: &[Field], close: usize, old: &Piece, new: &Fields) {
        let Piece::Group { fields: old, .. } = old else {
            return;
        };
        let before = |name: &str| old.iter().find(|(each, _)| *each == name).map(|(_, p)| p);
        let mut added: Fields = Vec::new();
        for (name, piece) in new {
            match (
                present.iter().find(|field| field.name == *name),
                before(name),
            ) {
                (Some(field), Some(old)) if !field.value.is_none() => {
                    self.value(&field.value, old, piece);
                }
                // `None` in the text: the value was the default, or absent.
                (Some(_), Some(old)) if old == piece => {}
                (Some(field), _) => self.put(field.value.span.clone(), piece.inline()),
                (None, Some(old)) if old == piece => {}
                (None, _) => added.push((name, piece.clone())),
            }
        }
        let gone = |field: &&Field| {
            before(&field.name).is_some() && !new.iter().any(|(name, _)| *name == field.name)
        };
        let mut removed: Vec<&Field> = present.iter().filter(gone).collect();
        // An inclination for a plane change, or the reverse: the one takes the place of the other.
        added.retain(|(name, piece)| {
            let swaps = |field: &&Field| is_plane(name) && is_plane(&field.name);
            let Some(k) = removed.iter().position(swaps) else {
                return true;
            };
            let gone = removed.remove(k);
            self.put(
                gone.name_span.start..gone.value.span.end,
                format!("{name}: {}", piece.inline()),
            );
            false
        });
        let added: Vec<String> = added
            .iter()
            .map(|(name, piece)| format!("{name}: {}", piece.inline()))
            .collect();
        if !added.is_empty() {
            let last = present
                .iter()
                .rev()
                .find(|field| !removed.iter().any(|gone| gone.name == field.name));
            self.add(last, close, &added);
        }
        for field in removed {
            self.remove(
                field.name_span.start..field.value.span.end,
                added.is_empty(),
            );
        }
    }

    /// Adds fields before the closing parenthesis, on lines of their own where the group has such.
    fn add(&mut self, last: Option<&Field>, close: usize, added: &[String]) {
        let Some(last) = last else {
            // Nothing stays in the group but perhaps comments; a line comment before the parenthesis has its line's end.
            self.put(close..close, added.join(", "));
            return;
        };
        let end = last.value.span.end;
        if !self.comma_after(end) {
            self.put(end..end, ",".to_owned());
        }
        let line = line_start(self.text, close);
        let own_line = self.text[line..close].trim().is_empty() && end <= line;
        if own_line {
            // The closing parenthesis stands on its own line: new lines go above it, indented like the last field's.
            let start = line_start(self.text, last.name_span.start);
            let indent: String = self.text[start..]
                .chars()
                .take_while(|c| *c == ' ' || *c == '\t')
                .collect();
            let newline = if self.text[..line].ends_with("\r\n") {
                "\r\n"
            } else {
                "\n"
            };
            let lines: String = added
                .iter()
                .map(|field| format!("{indent}{field},{newline}"))
                .collect();
            self.put(line..line, lines);
        } else {
            let space = if self.text[..close].ends_with([' ', '\n']) {
                ""
            } else {
                " "
            };
            self.put(close..close, format!("{space}{}", added.join(", ")));
        }
    }

    /// Removes a field with its comma, and its line where nothing else is left on it. `tidy`: nothing is added to the group, so the
    /// comma before a last field may go as well.
    fn remove(&mut self, range: Range<usize>, tidy: bool) {
        let after = tree::skip_blanks(self.text, range.end);
        let comma = self.comma_after(range.end);
        let between = &self.text[range.end..after];
        let line = line_start(self.text, range.start);
        if comma && !between.trim().is_empty() {
            // A comment stands between the value and its comma: it stays, only the two go.
            self.put(range, String::new());
            self.put(after..after + 1, String::new());
            return;
        }
        let end = if comma { after + 1 } else { range.end };
        let rest = self.text[end..]
            .find('\n')
            .map_or(self.text.len(), |at| end + at);
        let before_blank = self.text[line..range.start].trim().is_empty();
        if before_blank && self.text[end..rest].trim().is_empty() && rest < self.text.len() {
            self.put(line..rest + 1, String::new());
        } else {
            // Within a line the blank after the comma goes too.
            let blank = usize::from(comma && self.text[end..].starts_with(' ') && !before_blank);
            let before = self.text[..range.start].trim_end_matches([' ', '\t']);
            let start = if tidy && !comma && before.ends_with(',') {
                before.len() - 1
            } else {
                range.start
            };
            self.put(start..end + blank, String::new());
        }
    }

    fn comma_after(&self, end: usize) -> bool {
        self.text[tree::skip_blanks(self.text, end)..].starts_with(',')
    }

    fn apply(mut self) -> String {
        self.edits
            .sort_by_key(|(range, _)| (range.start, range.end));
        let mut out = String::with_capacity(self.text.len() + 64);
        let mut at = 0;
        for (range, text) in &self.edits {
            // Two removals may share a comma; what lies inside a removal goes with it.
            let start = range.start.max(at);
            let inside = range.start < at && range.end <= at;
            if !inside {
                out.push_str(&self.text[at..start]);
                out.push_str(text);
                at = range.end;
            }
        }
        out.push_str(&self.text[at..]);
        out
    }
}

fn is_plane(name: &str) -> bool {
    name == "inclination_deg" || name == "plane_change_deg"
}

fn line_start(text: &str, at: usize) -> usize {
    text[..at].rfind('\n').map_or(0, |newline| newline + 1)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::scenario::file;
    use crate::scenario::write::canonical;
    use crate::study::spec::*;
    use proptest::prelude::*;

    fn spec_of(text: &str) -> Spec {
        decode::spec(text).expect("it reads").1
    }

    /// An inline group and one over several lines, with a comment wherever one can stand.
    const COMMENTED: &str = "// head\r
( /* a */ format: /* b */ 1 /* c */ , // d\r
    body: Known(\"Moon\" /* e */), arrival: Asymptote(v_inf_km_s: 1.0 /* f */),\r
    target: (shape: Circular(altitude_km: /* g */ 100), inclination_deg: 5.0), // h\r
    braking: (brake: AltitudeKm(/* i */ 20 /* j */)),\r
    limits: (\r
        // k\r
        floor_alt_km: 10.0, // l\r
        longest_burn_s: Some(50 /* m */) // n\r
    ),\r
) // tail";

    fn comments(text: &str) -> usize {
        text.matches("/*").count() + text.matches("//").count()
    }

    #[test]
    fn the_same_values_give_the_same_bytes() {
        for (name, text) in file::SHIPPED {
            let spec = spec_of(text);
            assert_eq!(&patch(text, &spec), text, "{name}");
        }
        assert_eq!(patch(COMMENTED, &spec_of(COMMENTED)), COMMENTED);
        let marked = format!("\u{feff}{COMMENTED}");
        assert_eq!(patch(&marked, &spec_of(COMMENTED)), marked);
    }

    #[test]
    fn changes_touch_only_their_place() {
        let mut spec = spec_of(COMMENTED);
        spec.title = "New \"title\"\u{1b}".to_owned();
        spec.body = BodySpec::Known("Mars".to_owned());
        spec.target.shape = ShapeSpec::Circular { altitude_km: 250.0 };
        spec.target.plane = PlaneSpec::PlaneChangeDeg(3.0);
        spec.braking.brake = AltitudeChoice::AltitudeKm(21.0);
        spec.limits.floor_alt_km = None;
        spec.limits.longest_burn_s = Some(60.0);
        spec.limits.most_starts = 3;
        let patched = patched(COMMENTED, &spec).expect("patched");
        assert_eq!(comments(&patched), comments(COMMENTED));
        let expected = r#"// head
( /* a */ format: /* b */ 1 /* c */ , // d
    body: Known("Mars" /* e */), arrival: Asymptote(v_inf_km_s: 1.0 /* f */),
    target: (shape: Circular(altitude_km: /* g */ 250.0), plane_change_deg: 3.0), // h
    braking: (brake: AltitudeKm(/* i */ 21.0 /* j */)),
    limits: (
        // k
         // l
        longest_burn_s: Some(60.0 /* m */), // n
        most_starts: 3,
    ),
    title: "New \"title\"\u{1b}",
) // tail"#;
        assert_eq!(patched, expected.replace('\n', "\r\n"));
    }

    #[test]
    fn a_text_that_cannot_be_read_is_replaced() {
        let spec = spec_of(COMMENTED);
        assert_eq!(patch("(format: 1", &spec), emit(&spec));
    }

    fn number() -> impl Strategy<Value = f64> {
        prop_oneof![
            proptest::num::f64::NORMAL,
            -1000.0..1000.0,
            Just(0.0),
            Just(1.0)
        ]
    }

    fn maybe() -> impl Strategy<Value = Option<f64>> {
        proptest::option::of(number())
    }

    fn body() -> impl Strategy<Value = BodySpec> {
        let parent = (any::<String>(), number(), number(), number(), number());
        let custom = (
            any::<String>(),
            (number(), number(), number(), number()),
            maybe(),
            proptest::option::of(parent),
        );
        prop_oneof![
            any::<String>().prop_map(BodySpec::Known),
            custom.prop_map(|(name, (gm, radius, j2, lowest), hill, parent)| {
                BodySpec::Custom(CustomBody {
                    name,
                    gm_km3_s2: gm,
                    radius_km: radius,
                    j2,
                    lowest_alt_km: lowest,
                    hill_radius_km: hill,
                    parent: parent.map(|(name, gm, radius, axis, eccentricity)| CustomParent {
                        name,
                        gm_km3_s2: gm,
                        radius_km: radius,
                        semi_major_axis_km: axis,
                        eccentricity,
                    }),
                })
            }),
        ]
    }

    fn arrival() -> impl Strategy<Value = ArrivalSpec> {
        let from_parent = (
            number(),
            maybe(),
            prop_oneof![Just(Model::Textbook), Just(Model::ThreeBody)],
            proptest::option::of(prop_oneof![Just(Sense::Prograde), Just(Sense::Retrograde)]),
            prop_oneof![Just(Departure::ParkingOrbit), Just(Departure::OnTransfer)],
        );
        prop_oneof![
            (number(), maybe(), maybe()).prop_map(|(v, d, a)| ArrivalSpec::Asymptote {
                v_inf_km_s: v,
                declination_deg: d,
                right_ascension_deg: a,
            }),
            (number(), maybe(), maybe()).prop_map(|(c3, d, a)| ArrivalSpec::Energy {
                c3_km2_s2: c3,
                declination_deg: d,
                right_ascension_deg: a,
            }),
            (any::<String>(), maybe()).prop_map(|(from, parking)| ArrivalSpec::Transfer {
                from,
                parking_alt_km: parking,
            }),
            from_parent.prop_map(|(periapsis, radius, model, sense, departure)| {
                ArrivalSpec::FromParentOrbit {
                    periapsis_alt_km: periapsis,
                    apoapsis: radius.map_or(TransferApoapsis::AtBody, TransferApoapsis::RadiusKm),
                    model,
                    sense,
                    departure,
                }
            }),
        ]
    }

    fn target() -> impl Strategy<Value = TargetSpec> {
        let shape = prop_oneof![
            number().prop_map(|altitude_km| ShapeSpec::Circular { altitude_km }),
            (number(), number()).prop_map(|(low, high)| ShapeSpec::Ellipse {
                periapsis_alt_km: low,
                apoapsis_alt_km: high,
            }),
            (number(), number()).prop_map(|(low, hours)| ShapeSpec::Period {
                periapsis_alt_km: low,
                hours,
            }),
        ];
        let plane = prop_oneof![
            Just(PlaneSpec::Any),
            number().prop_map(PlaneSpec::InclinationDeg),
            number().prop_map(PlaneSpec::PlaneChangeDeg),
        ];
        (shape, plane).prop_map(|(shape, plane)| TargetSpec { shape, plane })
    }

    fn limits() -> impl Strategy<Value = LimitsSpec> {
        let cap = prop_oneof![
            number().prop_map(CapSpec::HillFraction),
            number().prop_map(CapSpec::AltitudeKm),
        ];
        (
            maybe(),
            proptest::option::of(cap),
            number(),
            any::<u32>(),
            maybe(),
        )
            .prop_map(|(floor, cap, days, starts, burn)| LimitsSpec {
                floor_alt_km: floor,
                cap,
                longest_days: days,
                most_starts: starts,
                longest_burn_s: burn,
            })
    }

    fn any_spec() -> impl Strategy<Value = Spec> {
        let altitude = || {
            maybe().prop_map(|value| value.map_or(AltitudeChoice::Best, AltitudeChoice::AltitudeKm))
        };
        let vehicle =
            (number(), number(), number(), number()).prop_map(|(dry, fuel, f, isp)| VehicleSpec {
                dry_mass_kg: dry,
                propellant_kg: fuel,
                thrust_n: f,
                isp_s: isp,
                steering: Steering::FixedAttitude,
            });
        let policy = (number(), number(), number()).prop_map(|(margin, start, rest)| PolicySpec {
            margin_percent: margin,
            per_start_m_s: start,
            residual_percent: rest,
        });
        (
            (any::<String>(), any::<String>()),
            body(),
            arrival(),
            target(),
            (altitude(), altitude()),
            limits(),
            proptest::option::of(vehicle),
            prop_oneof![Just(Burns::Impulsive), Just(Burns::Finite)],
            policy,
        )
            .prop_map(
                |((title, note), body, arrival, target, brakes, limits, vehicle, burns, policy)| {
                    Spec {
                        title,
                        note,
                        body,
                        arrival,
                        target,
                        braking: BrakingSpec {
                            brake: brakes.0,
                            loop_apoapsis: brakes.1,
                            steps: PassesChoice::Best,
                        },
                        limits,
                        vehicle,
                        burns,
                        policy,
                    }
                },
            )
    }

    proptest! {
        /// Whatever the scenario, what is written reads back to it, and so does what is patched: into a fresh text over many lines,
        /// into one line, into the shipped texts, into one that leaves out nearly everything and has comments everywhere.
        #[test]
        fn what_is_patched_reads_back(old in any_spec(), new in any_spec()) {
            prop_assert_eq!(&spec_of(&emit(&new)), &new);
            let line = canonical(&old);
            let fresh = emit(&old);
            let texts = [fresh.as_str(), line.as_str(), COMMENTED]
                .into_iter()
                .chain(file::SHIPPED.iter().map(|(_, text)| *text));
            for text in texts {
                let patched = patched(text, &new);
                prop_assert!(patched.is_some(), "not patched: {}", text);
                let patched = patched.unwrap_or_default();
                prop_assert_eq!(&spec_of(&patched), &new);
                prop_assert_eq!(&patch(&patched, &new), &patched);
                if text.starts_with("//") {
                    prop_assert_eq!(text.lines().next(), patched.lines().next());
                }
            }
        }

        /// One section after another taken from another scenario: the small steps that a session makes.
        #[test]
        fn small_steps_keep_every_comment_outside(new in any_spec()) {
            let mut spec = spec_of(COMMENTED);
            let mut text = COMMENTED.to_owned();
            spec.policy = new.policy;
            text = patched(&text, &spec).unwrap_or_default();
            prop_assert_eq!(comments(&text), comments(COMMENTED));
            spec.vehicle = new.vehicle;
            text = patched(&text, &spec).unwrap_or_default();
            prop_assert_eq!(comments(&text), comments(COMMENTED));
            spec.target.plane = new.target.plane;
            text = patched(&text, &spec).unwrap_or_default();
            prop_assert_eq!(comments(&text), comments(COMMENTED));
            spec.limits.cap = new.limits.cap;
            spec.limits.floor_alt_km = new.limits.floor_alt_km;
            text = patched(&text, &spec).unwrap_or_default();
            prop_assert_eq!(comments(&text), comments(COMMENTED));
            prop_assert_eq!(spec_of(&text), spec);
        }
    }
}
