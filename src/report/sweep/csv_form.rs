//! A sweep as CSV in long form: one row for each value and way.

use super::{Line, Sweep};

/// Columns after the knobs' own: the fields of a line in their order.
pub const COLUMNS: &[&str] = &[
    "way",
    "flyable",
    "cost_m_s",
    "dv_m_s",
    "impulsive_dv_m_s",
    "finite_burn_loss_m_s",
    "propellant_kg",
    "final_mass_kg",
    "days",
    "starts",
    "longest_burn_s",
    "captured_after_percent",
    "reason",
];

/// Renders the sweep.
pub(super) fn render(sweep: &Sweep) -> String {
    let mut writer = csv::Writer::from_writer(Vec::new());
    let mut header = vec![sweep.first.knob.column];
    header.extend(sweep.second.map(|axis| axis.knob.column));
    header.extend(COLUMNS);
    // Writing into memory cannot fail, and every record has the header's length.
    let _ = writer.write_record(&header);
    for entry in sweep.entries() {
        let mut record = vec![entry.x.to_string()];
        record.extend(sweep.second.map(|_| entry.y.to_string()));
        record.extend(cells(&entry.line));
        let _ = writer.write_record(&record);
    }
    writer
        .into_inner()
        .ok()
        .and_then(|bytes| String::from_utf8(bytes).ok())
        .unwrap_or_default()
}

fn cells(line: &Line) -> [String; COLUMNS.len()] {
    // The shortest digits that read back to the same number.
    let number = |value: Option<f64>| value.map_or_else(String::new, |value| value.to_string());
    [
        line.way.to_owned(),
        line.flyable.to_string(),
        number(line.cost_m_s),
        number(line.dv_m_s),
        number(line.impulsive_dv_m_s),
        number(line.finite_burn_loss_m_s),
        number(line.propellant_kg),
        number(line.final_mass_kg),
        number(line.days),
        line.starts
            .map_or_else(String::new, |starts| starts.to_string()),
        number(line.longest_burn_s),
        number(line.captured_after_percent),
        line.reason
            .as_deref()
            .map_or_else(String::new, not_a_formula),
    ]
}

/// Text that no spreadsheet takes for a formula: a leading sign is preceded by an apostrophe.
fn not_a_formula(text: &str) -> String {
    let starts = text
        .trim_start_matches(' ')
        .starts_with(['=', '+', '-', '@', '\t', '\r']);
    let clean = crate::visible::visible(text);
    if starts {
        format!("'{clean}")
    } else {
        clean.into_owned()
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn text_never_starts_a_formula() {
        for (text, expected) in [
            ("=1+1", "'=1+1"),
            ("@x", "'@x"),
            ("-2+3", "'-2+3"),
            ("  +1", "'  +1"),
            ("\t=1", "'\\t=1"),
            ("3 starts, limit 2", "3 starts, limit 2"),
        ] {
            assert_eq!(not_a_formula(text), expected);
        }
    }

    /// The columns and the fields of a line are written in two places; they have to be the same.
    #[test]
    fn columns_are_the_fields_of_a_line() {
        let line = Line::refused(crate::arrival::Way::Direct, "no".to_owned());
        let json = serde_json::to_string(&line).expect("JSON");
        let mut from = 0;
        for column in COLUMNS {
            let at = json[from..]
                .find(&format!("\"{column}\":"))
                .unwrap_or_else(|| panic!("{column} in its place"));
            from += at;
        }
        assert_eq!(json.matches("\":").count(), COLUMNS.len());
    }
}
