//! The table of numeric fields for `docs/scenario.md`, made from the table that validation uses.

use crate::study::field::FIELDS;

/// A Markdown table: field, unit, allowed values, default, meaning.
pub fn field_table() -> String {
    let mut out =
        String::from("| field | unit | allowed | default | meaning |\n|---|---|---|---|---|\n");
    for field in FIELDS {
        let range = field.range().to_string();
        let allowed = range
            .strip_suffix(field.unit)
            .map_or(range.as_str(), str::trim_end);
        out.push_str(&format!(
            "| `{}` | {} | {allowed} | {} | {} |\n",
            field.path,
            dash(field.unit),
            dash(field.default),
            field.meaning
        ));
    }
    out
}

fn dash(text: &str) -> &str {
    if text.is_empty() { "-" } else { text }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::scenario::write;

    #[test]
    fn one_row_for_each_field() {
        let table = field_table();
        assert_eq!(table.lines().count(), FIELDS.len() + 2);
        assert!(table.contains("| `arrival.v_inf_km_s` | km/s | above 0 and at most 200 | - | hyperbolic excess speed |"));
    }

    #[test]
    fn the_template_shows_every_field() {
        for field in FIELDS {
            let name = field.path.rsplit('.').next().unwrap_or("");
            assert!(
                write::template().contains(name),
                "the template lacks {}",
                field.path
            );
        }
    }
}
