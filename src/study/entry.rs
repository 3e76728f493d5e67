//! Values as people type them: `6500`, `6 500 km`, `6.5e3km`, `0.5 d`, `22 N`, `best`.

use super::knob::{Knob, Value};

/// Units that are understood: name, the unit of the table it converts to, factor.
const UNITS: &[(&str, &str, f64)] = &[
    ("km", "km", 1.0),
    ("m", "km", 1e-3),
    ("au", "km", 149_597_870.7),
    ("km/s", "km/s", 1.0),
    ("m/s", "km/s", 1e-3),
    ("m/s", "m/s", 1.0),
    ("km/s", "m/s", 1e3),
    ("d", "d", 1.0),
    ("day", "d", 1.0),
    ("days", "d", 1.0),
    ("h", "d", 1.0 / 24.0),
    ("min", "d", 1.0 / 1440.0),
    ("s", "s", 1.0),
    ("min", "s", 60.0),
    ("h", "s", 3600.0),
    ("h", "h", 1.0),
    ("d", "h", 24.0),
    ("n", "N", 1.0),
    ("mn", "N", 1e-3),
    ("kn", "N", 1e3),
    ("kg", "kg", 1.0),
    ("t", "kg", 1e3),
    ("deg", "deg", 1.0),
    ("\u{b0}", "deg", 1.0),
    ("rad", "deg", 180.0 / std::f64::consts::PI),
    ("%", "%", 1.0),
];

/// Reads a typed value for a knob, in the knob's own unit.
///
/// Spaces between groups of digits are ignored; a comma is refused rather than guessed at.
///
/// # Errors
/// A sentence that says what is understood.
pub fn parse(knob: &Knob, text: &str) -> Result<Value, String> {
    let trimmed = text.trim();
    if trimmed.eq_ignore_ascii_case("best") {
        return if knob.takes_best() {
            Ok(Value::Best)
        } else {
            Err(format!("{} takes a number, not `best`", knob.name))
        };
    }
    if trimmed.is_empty() {
        return Err(format!(
            "type a number for {}{}",
            knob.name,
            unit_hint(knob)
        ));
    }
    if trimmed.contains(',') {
        return Err(
            "write the decimal point as a point and leave thousands unmarked, like 6500.5"
                .to_owned(),
        );
    }
    let end = number_end(trimmed);
    let digits: String = trimmed[..end]
        .chars()
        .filter(|c| !c.is_whitespace())
        .collect();
    let number: f64 = digits.parse().map_err(|_| {
        format!(
            "\"{}\" is not a number{}",
            crate::visible::ascii(trimmed),
            unit_hint(knob)
        )
    })?;
    let unit = trimmed[end..].trim();
    if unit.is_empty() {
        return Ok(Value::Number(number));
    }
    let lower = unit.to_lowercase();
    let factor = UNITS
        .iter()
        .find(|(name, to, _)| *name == lower && *to == knob.unit())
        .map(|(_, _, factor)| factor);
    match factor {
        Some(factor) => Ok(Value::Number(number * factor)),
        None => {
            let known: Vec<&str> = UNITS
                .iter()
                .filter(|(_, to, _)| *to == knob.unit())
                .map(|(name, ..)| *name)
                .collect();
            let known = if known.is_empty() {
                "none".to_owned()
            } else {
                known.join(", ")
            };
            Err(format!(
                "\"{}\" is not a unit of {}; understood: {known}",
                crate::visible::ascii(unit),
                knob.name
            ))
        }
    }
}

/// Where the number ends and the unit begins: digits, sign, point, exponent, and spaces between digits.
fn number_end(text: &str) -> usize {
    let bytes = text.as_bytes();
    let mut end = 0;
    let mut k = 0;
    while k < bytes.len() {
        let c = bytes[k];
        let exponent = matches!(c, b'e' | b'E')
            && 0 < end
            && bytes.get(k + 1).is_some_and(|next| {
                next.is_ascii_digit()
                    || (matches!(next, b'+' | b'-')
                        && bytes.get(k + 2).is_some_and(u8::is_ascii_digit))
            });
        let sign = matches!(c, b'+' | b'-')
            && (end == 0 || matches!(bytes.get(end - 1), Some(b'e' | b'E')));
        if c.is_ascii_digit() || c == b'.' || exponent || sign {
            end = k + 1;
        } else if c != b' ' {
            break;
        }
        k += 1;
    }
    end
}

fn unit_hint(knob: &Knob) -> String {
    if knob.unit().is_empty() {
        String::new()
    } else {
        format!(" (in {}, or with its unit)", knob.unit())
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::study::knob::by_name;

    #[test]
    fn values_are_read_as_people_type_them() {
        for (name, text, expected) in [
            ("target-altitude", "6500", 6500.0),
            ("target-altitude", "6 500 km", 6500.0),
            ("target-altitude", "6.5e3km", 6500.0),
            ("target-altitude", " 800 m ", 0.8),
            ("longest-days", "12 h", 0.5),
            ("longest-days", "0.5 d", 0.5),
            ("thrust", "22 N", 22.0),
            ("thrust", "0.4kN", 400.0),
            ("dry-mass", "1.2 t", 1200.0),
            ("v-inf", "830 m/s", 0.83),
            ("per-start", "20 m/s", 20.0),
            ("declination", "-30", -30.0),
            ("margin", "5%", 5.0),
            ("longest-burn", "20 min", 1200.0),
        ] {
            let knob = by_name(name).expect("known");
            match parse(knob, text) {
                Ok(Value::Number(value)) => assert!(
                    (value / expected - 1.0).abs() < 1e-15,
                    "{name} {text}: {value}"
                ),
                other => panic!("{name} {text}: {other:?}"),
            }
        }
        assert_eq!(
            parse(by_name("brake-altitude").expect("known"), "Best"),
            Ok(Value::Best)
        );
    }

    #[test]
    fn what_is_not_understood_says_what_would_be() {
        let knob = by_name("target-altitude").expect("known");
        for text in [
            "",
            "abc",
            "6,500",
            "12 furlongs",
            "--3",
            "1e",
            "best",
            "\u{1b}[31m",
        ] {
            let error = parse(knob, text).expect_err(text);
            assert!(error.is_ascii() && 10 < error.len(), "{error}");
        }
    }
}
