//! The checks of `stoop check` as a table.

use super::words;
use crate::study::check::Check;

/// The checks as text: each figure by both routes, the difference, whether it passes.
pub fn text(checks: &[Check]) -> String {
    let mut out = String::new();
    for check in checks {
        let verdict = if check.passed() { "ok  " } else { "FAIL" };
        out.push_str(&format!("{verdict} {}\n", check.name));
        out.push_str(&format!(
            "       {} {unit} here, {} {unit} by the other route; relative difference {:.1e}, allowed {:.0e}\n",
            check.here,
            check.there,
            check.difference(),
            check.tolerance,
            unit = check.unit
        ));
        for line in words::wrap(&format!("other route: {}", check.route), 70) {
            out.push_str(&format!("       {line}\n"));
        }
    }
    let failed = checks.iter().filter(|check| !check.passed()).count();
    let worst = checks.iter().map(Check::difference).fold(0.0, f64::max);
    out.push_str(&if failed == 0 {
        format!(
            "all {} checks agree; largest relative difference {worst:.1e}\n",
            checks.len()
        )
    } else {
        format!("{failed} of {} checks disagree\n", checks.len())
    });
    out
}
