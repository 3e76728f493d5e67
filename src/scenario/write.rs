//! A `Spec` as text: fresh with comments, patched into the author's own text, or canonical for the fingerprint.
//!
//! Saving patches. Only values that differ from what the text says are replaced, where they stand; comments, order and spacing
//! stay the author's.

mod patch;
mod pieces;

pub use patch::patch;

use crate::study::field::field_at;
use crate::study::spec::Spec;
use pieces::{Piece, pieces};
use sha2::{Digest, Sha256};

/// A commented starting point that loads: what `stoop new` prints.
pub fn template() -> &'static str {
    include_str!("template.ron")
}

/// A fresh, commented file.
pub fn emit(spec: &Spec) -> String {
    format!(
        "// A stoop scenario. Units are part of every field's name.\n{}\n",
        commented(&pieces(spec), "", 0)
    )
}

/// The values alone in one line, the same text for equal scenarios: what the fingerprint is taken of. Without title and note, so
/// that renaming changes nothing.
pub fn canonical(spec: &Spec) -> String {
    let nameless = Spec {
        title: String::new(),
        note: String::new(),
        ..spec.clone()
    };
    pieces(&nameless).inline()
}

/// First 16 hexadecimal digits of the SHA-256 of [`canonical`].
pub fn fingerprint(spec: &Spec) -> String {
    let digest = Sha256::digest(canonical(spec).as_bytes());
    digest
        .iter()
        .take(8)
        .map(|byte| format!("{byte:02x}"))
        .collect()
}

/// A piece over several lines with a comment beside every number; small groups inside sections stay in one line.
fn commented(piece: &Piece, path: &str, depth: usize) -> String {
    let Piece::Group { name, fields } = piece else {
        return piece.inline();
    };
    if 2 <= depth && fields.len() <= 2 {
        return piece.inline();
    }
    let pad = " ".repeat(4 * (depth + 1));
    let mut out = format!("{name}(\n");
    for (field, piece) in fields {
        let full = if path.is_empty() {
            (*field).to_owned()
        } else {
            format!("{path}.{field}")
        };
        let value = commented(piece, &full, depth + 1);
        let comment = comment(&full, piece).map_or_else(String::new, |text| format!("  // {text}"));
        out.push_str(&format!("{pad}{field}: {value},{comment}\n"));
    }
    out.push_str(&" ".repeat(4 * depth));
    out.push(')');
    out
}

/// What stands beside a number in a fresh file: unit and meaning.
fn comment(path: &str, piece: &Piece) -> Option<String> {
    let field = match piece {
        Piece::Value(_) => field_at(path),
        Piece::Inner { name, .. } => field_at(&format!("{path}.{name}")),
        Piece::Group { .. } => None,
    }?;
    Some(if field.unit.is_empty() {
        field.meaning.to_owned()
    } else {
        format!("{}: {}", field.unit, field.meaning)
    })
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::scenario::file;

    #[test]
    fn a_fresh_file_says_the_same() {
        for (name, text) in file::SHIPPED {
            let spec = file::parse(name, text)
                .expect("it loads")
                .case
                .spec()
                .clone();
            let fresh = file::parse(name, &emit(&spec)).expect("what is written loads");
            assert_eq!(fresh.case.spec(), &spec, "{name}");
        }
    }

    #[test]
    fn the_template_loads() {
        file::parse("template.ron", template()).expect("it loads");
    }

    #[test]
    fn the_fingerprint_follows_values_and_not_names() {
        let spec = file::built_in().case.spec().clone();
        let print = fingerprint(&spec);
        assert_eq!(print.len(), 16);
        let mut renamed = spec.clone();
        renamed.title = "Another".to_owned();
        renamed.note = "Other words".to_owned();
        assert_eq!(fingerprint(&renamed), print);
        let mut changed = spec.clone();
        changed.policy.per_start_m_s = f64::from_bits(spec.policy.per_start_m_s.to_bits() + 1);
        assert_ne!(fingerprint(&changed), print);
        let mut zero = spec;
        zero.policy.per_start_m_s = 0.0;
        let mut signed = zero.clone();
        signed.policy.per_start_m_s = -0.0;
        assert_eq!(fingerprint(&signed), fingerprint(&zero));
    }
}
