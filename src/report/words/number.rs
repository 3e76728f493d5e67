//! Numbers with sensible digits and their units.

use crate::study::case::DAY_S;

/// An integer part in groups of three: `12 980`.
pub(super) fn grouped(digits: &str) -> String {
    let (sign, digits) = digits
        .strip_prefix('-')
        .map_or(("", digits), |rest| ("-", rest));
    let (whole, fraction) = digits
        .split_once('.')
        .map_or((digits, ""), |(whole, fraction)| (whole, fraction));
    let mut out = String::with_capacity(digits.len() + 4);
    for (k, digit) in whole.chars().enumerate() {
        if 0 < k && (whole.len() - k).is_multiple_of(3) && 4 < whole.len() {
            out.push(' ');
        }
        out.push(digit);
    }
    let point = if fraction.is_empty() { "" } else { "." };
    format!("{sign}{out}{point}{fraction}")
}

/// A number to about four digits, grouped: `12 980`, `99.6`, `0.829`.
pub fn number(value: f64) -> String {
    let magnitude = value.abs();
    let decimals = if 100.0 <= magnitude || magnitude == 0.0 {
        0
    } else if 10.0 <= magnitude {
        1
    } else if 1.0 <= magnitude {
        2
    } else {
        3
    };
    if 1e9 <= magnitude {
        return format!("{value:.3e}");
    }
    grouped(&format!("{value:.decimals$}"))
}

/// A length: `12 980 km`.
pub fn km(value: f64) -> String {
    format!("{} km", number(value))
}

/// An altitude: like a length, but without decimals from 10 km up, as altitudes are spoken of.
pub fn altitude(value: f64) -> String {
    if 10.0 <= value.abs() && value.abs() < 1e9 {
        format!("{} km", grouped(&format!("{value:.0}")))
    } else {
        km(value)
    }
}

/// A velocity change given in km/s, to 1 m/s: `667 m/s`; below 1 m/s with decimals.
pub fn dv(km_s: f64) -> String {
    let m_s = 1e3 * km_s;
    let magnitude = m_s.abs();
    if magnitude == 0.0 || 0.95 <= magnitude {
        format!("{} m/s", grouped(&format!("{m_s:.0}")))
    } else if 0.0095 <= magnitude {
        format!("{m_s:.2} m/s")
    } else {
        format!("{m_s:.1e} m/s")
    }
}

/// A speed: `0.8290 km/s`.
pub fn speed(km_s: f64) -> String {
    format!("{km_s:.4} km/s")
}

/// A mass: `41.2 kg`.
pub fn kg(value: f64) -> String {
    if 1000.0 <= value.abs() {
        format!("{} kg", number(value))
    } else {
        format!("{value:.1} kg")
    }
}

/// A thrust: `22 N`, `0.5 N`.
pub fn newton(value: f64) -> String {
    format!("{} N", number(value))
}

/// A time in the unit that suits it: `45 s`, `21 min`, `7.2 h`, `3.1 d`.
pub fn time(seconds: f64) -> String {
    if seconds < 100.0 {
        format!("{seconds:.0} s")
    } else if seconds < 100.0 * 60.0 {
        format!("{:.0} min", seconds / 60.0)
    } else if seconds < 2.0 * DAY_S {
        format!("{:.1} h", seconds / 3600.0)
    } else {
        format!("{} d", days(seconds))
    }
}

/// Seconds as a number of days: `3.1`, `0.08`.
pub fn days(seconds: f64) -> String {
    let days = seconds / DAY_S;
    if days == 0.0 {
        "0".to_owned()
    } else if days < 1.0 {
        format!("{days:.2}")
    } else if days < 100.0 {
        format!("{days:.1}")
    } else {
        grouped(&format!("{days:.0}"))
    }
}

/// An angle given in radians: `16.6 deg`.
pub fn degrees(radians: f64) -> String {
    let degrees = radians.to_degrees();
    if degrees == 0.0 || 0.1 <= degrees.abs() {
        format!("{degrees:.1} deg")
    } else {
        format!("{degrees:.3} deg")
    }
}

/// The B-plane angles that give an inclination, from one of them (rad): `57.0 deg or -57.0 deg`, or the one there is.
pub fn b_plane(angle: f64) -> String {
    let shown = degrees(angle);
    if angle.sin().abs() < 1e-12 {
        shown
    } else {
        format!("{shown} or -{shown}")
    }
}

/// `1 start`, `2 starts`.
pub fn starts(count: usize) -> String {
    if count == 1 {
        "1 start".to_owned()
    } else {
        format!("{count} starts")
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn numbers_read_well() {
        for (value, expected) in [
            (12_980.4, "12 980"),
            (1837.4, "1837"),
            (99.64, "99.6"),
            (8.2, "8.20"),
            (0.829, "0.829"),
            (-12_345.0, "-12 345"),
            (0.0, "0"),
            (1.5e11, "1.500e11"),
        ] {
            assert_eq!(number(value), expected);
        }
        assert_eq!(dv(0.6674), "667 m/s");
        assert_eq!(dv(0.000_124), "0.12 m/s");
        assert_eq!(dv(17.2), "17 200 m/s");
        assert_eq!(time(1260.0), "21 min");
        assert_eq!(time(86_400.0 * 3.06), "3.1 d");
    }
}
