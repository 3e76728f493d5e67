//! The checks of `stoop check` as text of at most 80 columns.

use super::words;
use crate::study::check::Check;

const WIDTH: usize = 78;
const PAD: &str = "      ";

/// The checks as text: each figure by both routes, the difference, what is allowed, whether it passes.
pub fn text(checks: &[Check]) -> String {
    let mut out = String::new();
    for check in checks {
        let mark = if check.passed() { "ok" } else { "FAIL" };
        out.push_str(&format!("{mark:<5} {}\n", check.name));
        let sentences = [
            format!("other route: {}", check.route),
            format!(
                "here {} {unit}, there {} {unit}, relative difference {:.1e}, allowed {:.0e}",
                figure(check.here),
                figure(check.there),
                check.difference(),
                check.tolerance,
                unit = check.unit
            ),
        ];
        for sentence in sentences {
            for line in words::wrap(&sentence, WIDTH - PAD.len()) {
                out.push_str(&format!("{PAD}{line}\n"));
            }
        }
    }
    out.push('\n');
    out.push_str(&summary(checks));
    out
}

/// The last line: how many agree, and how well the worst does.
fn summary(checks: &[Check]) -> String {
    let failed = checks.iter().filter(|check| !check.passed()).count();
    let worst = checks.iter().map(Check::difference).fold(0.0, f64::max);
    let tail = format!("largest relative difference {worst:.1e}");
    match (checks.len(), failed) {
        (0, _) => "nothing to check\n".to_owned(),
        (all, 0) => format!("{all} of {all} checks agree; {tail}\n"),
        (all, failed) => format!("{failed} of {all} checks disagree; {tail}\n"),
    }
}

/// A figure in full: the shortest digits that read back to the same number.
fn figure(value: f64) -> String {
    if value != 0.0 && !(1e-4..1e15).contains(&value.abs()) {
        format!("{value:e}")
    } else {
        value.to_string()
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn check(there: f64) -> Check {
        Check {
            name: "direct: burn 1".to_owned(),
            route: "length of the vector difference",
            here: 0.595_720_446_718_190_9,
            there,
            unit: "km/s",
            tolerance: 1e-9,
        }
    }

    #[test]
    fn a_check_says_both_figures_and_whether_they_agree() {
        let good = text(&[check(0.595_720_446_718_190_8)]);
        let flat = good.split_whitespace().collect::<Vec<_>>().join(" ");
        assert!(good.starts_with("ok    direct: burn 1\n"), "{good}");
        assert!(
            flat.contains("here 0.5957204467181909 km/s, there 0.5957204467181908 km/s,"),
            "{good}"
        );
        assert!(flat.contains("allowed 1e-9"));
        assert!(good.ends_with("1 of 1 checks agree; largest relative difference 1.9e-16\n"));
        let bad = text(&[check(0.6), check(0.595_720_446_718_190_8)]);
        assert!(bad.starts_with("FAIL  direct: burn 1\n"), "{bad}");
        assert!(bad.contains("1 of 2 checks disagree"));
        assert_eq!(text(&[]), "\nnothing to check\n");
    }

    #[test]
    fn figures_keep_every_digit() {
        for value in [8237.4, 0.1 + 0.2, -1.226_025_208_319_019_3, 3.2e-9, 0.0] {
            let again: f64 = figure(value).parse().expect("a number");
            assert!(again == value, "{value}");
        }
    }
}
