//! Reads values off the located tree and notes what is wrong with them.

use super::super::diagnostic::{Found, short};
use super::super::tree::{Kind, Node};
use crate::study::case::{nearest, out_of_range};
use crate::study::field::{Field, field_at};
use std::collections::HashSet;

/// Most faults listed for one text; more would bury the first ones.
const MOST: usize = 200;

/// Collects faults while values are read.
#[derive(Default)]
pub(super) struct Reader {
    /// What is wrong, in the order found.
    pub(super) faults: Vec<Found>,
    /// How many more faults there were than are kept.
    pub(super) unshown: usize,
    /// Paths whose values are stand-ins.
    pub(super) broken: Vec<String>,
    /// Whether numbers are taken as they are, without a look at their range.
    pub(super) any_number: bool,
}

impl Reader {
    /// Notes a fault that leaves the values as they are.
    pub(super) fn note(&mut self, offset: usize, field: &str, message: impl Into<String>) {
        if self.faults.len() < MOST {
            self.faults.push(Found {
                offset,
                field: short(field, 80),
                message: message.into(),
            });
        } else {
            self.unshown += 1;
        }
    }

    /// Notes a fault whose value is replaced by a stand-in.
    pub(super) fn fault(&mut self, offset: usize, field: &str, message: impl Into<String>) {
        self.note(offset, field, message);
        self.broken.push(field.to_owned());
    }

    /// Checks the field names of a struct: unknown ones, doubled ones.
    pub(super) fn fields(&mut self, node: &Node, path: &str, known: &[&str]) {
        let Kind::Struct { fields, .. } = &node.kind else {
            return;
        };
        let mut seen = HashSet::new();
        for field in fields {
            let at = field.name_span.start;
            let name = field.name.as_str();
            if !known.contains(&name) {
                let message = format!(
                    "there is no such field here{} Allowed: {}",
                    suggestion(name, known),
                    known.join(", ")
                );
                self.note(at, &join(path, name), message);
            } else if !seen.insert(name) {
                self.note(at, &join(path, name), "is given twice; keep one of the two");
            }
        }
    }

    /// A field that must be there.
    pub(super) fn required<'n>(
        &mut self,
        node: &'n Node,
        path: &str,
        name: &str,
    ) -> Option<&'n Node> {
        let found = optional(node, name);
        if found.is_none() {
            let offset = match &node.kind {
                Kind::Struct { close, .. } => *close,
                _ => node.span.start,
            };
            let full = join(path, name);
            let message = match field_at(&full) {
                Some(field) => format!(
                    "is missing; give a number, {}. It is the {}",
                    field.range(),
                    field.meaning
                ),
                None => "is missing; `stoop new` prints a complete scenario".to_owned(),
            };
            self.fault(offset, &full, message);
        }
        found
    }

    /// A number, inside its range if it has one.
    pub(super) fn number(&mut self, value: &Node, path: &str) -> f64 {
        let field = field_at(path);
        match (&value.kind, field) {
            (Kind::Number(number), None) => *number,
            (Kind::Number(number), Some(field)) => {
                if self.any_number || field.allows(*number) {
                    return *number;
                }
                let message = out_of_range(field, *number);
                self.fault(value.span.start, path, message);
                stand_in(Some(field))
            }
            (_, field) => {
                let range = field.map_or_else(String::new, |field| format!(" ({})", field.range()));
                let message = format!("a number is wanted here{range}, not {}", described(value));
                self.fault(value.span.start, path, message);
                stand_in(field)
            }
        }
    }

    /// A number that must be there.
    pub(super) fn required_number(&mut self, node: &Node, path: &str, name: &str) -> f64 {
        let full = join(path, name);
        match self.required(node, path, name) {
            Some(value) => self.number(value, &full),
            None => stand_in(field_at(&full)),
        }
    }

    /// A number that may be left out.
    pub(super) fn optional_number(&mut self, node: &Node, path: &str, name: &str) -> Option<f64> {
        let value = optional(node, name)?;
        Some(self.number(value, &join(path, name)))
    }

    /// A text.
    pub(super) fn text(&mut self, value: &Node, path: &str) -> String {
        if let Kind::Text(text) = &value.kind {
            return text.clone();
        }
        let message = format!("a text in quotes is wanted here, not {}", described(value));
        self.fault(value.span.start, path, message);
        String::new()
    }

    /// A text that must be there.
    pub(super) fn required_text(&mut self, node: &Node, path: &str, name: &str) -> String {
        match self.required(node, path, name) {
            Some(value) => self.text(value, &join(path, name)),
            None => String::new(),
        }
    }

    /// One of several bare words.
    pub(super) fn choice<T: Copy>(
        &mut self,
        value: &Node,
        path: &str,
        known: &[(&str, T)],
    ) -> Option<T> {
        let name = value.variant().unwrap_or("");
        let found = known.iter().find(|(word, _)| *word == name);
        match (found, &value.kind) {
            (Some((_, choice)), Kind::Word(_)) => Some(*choice),
            (Some((word, _)), _) => {
                let message = format!("{word} is written without parentheses");
                self.fault(value.span.start, path, message);
                None
            }
            (None, _) => {
                let words: Vec<&str> = known.iter().map(|(word, _)| *word).collect();
                self.no_variant(value, path, &words);
                None
            }
        }
    }

    /// Says that a value is none of the known forms, such as `Best` or `AltitudeKm(100.0)`.
    pub(super) fn no_variant(&mut self, value: &Node, path: &str, known: &[&str]) {
        let names: Vec<&str> = known
            .iter()
            .map(|form| form.split('(').next().unwrap_or(form))
            .collect();
        let name = value.variant().unwrap_or("");
        let message = if names.contains(&name) {
            format!(
                "{} is not complete or not in this form. Allowed: {}",
                described(value),
                known.join(", ")
            )
        } else {
            format!(
                "{} is not known here{} Allowed: {}",
                described(value),
                suggestion(name, &names),
                known.join(", ")
            )
        };
        self.fault(value.span.start, path, message);
    }

    /// The one value of a variant such as `AltitudeKm(100.0)`; `path` is the variant's field.
    pub(super) fn inner(&mut self, value: &Node, path: &str) -> f64 {
        let name = value.variant().unwrap_or("").to_owned();
        let full = join(path, &name);
        if let Kind::Tuple { values, .. } = &value.kind
            && let [inner] = values.as_slice()
        {
            return self.number(inner.plain(), &full);
        }
        let message = format!("one number in parentheses is wanted, like {name}(100.0)");
        self.fault(value.span.start, &full, message);
        stand_in(field_at(&full))
    }

    /// Whether a value is a group of fields without a name; says so if not.
    pub(super) fn is_group(&mut self, value: &Node, path: &str) -> bool {
        match &value.kind {
            Kind::Struct { name: None, .. } => true,
            Kind::Struct {
                name: Some(name), ..
            } => {
                let message = format!(
                    "a group (field: value, ...) is wanted here without a name before it; remove {}",
                    short(name, 40)
                );
                self.fault(value.span.start, path, message);
                false
            }
            _ => {
                let message = format!(
                    "a group (field: value, ...) is wanted here, not {}",
                    described(value)
                );
                self.fault(value.span.start, path, message);
                false
            }
        }
    }
}

/// A field that may be left out, or be `None`.
pub(super) fn optional<'n>(node: &'n Node, name: &str) -> Option<&'n Node> {
    node.field(name)
        .map(|field| field.value.plain())
        .filter(|value| !value.is_none())
}

/// A path one level down.
pub(super) fn join(path: &str, name: &str) -> String {
    if path.is_empty() {
        name.to_owned()
    } else {
        format!("{path}.{name}")
    }
}

/// A number that is allowed, in place of one that is not.
fn stand_in(field: Option<&Field>) -> f64 {
    let Some(field) = field else { return 1.0 };
    [1.0, 0.5, field.low.value(), field.high.value()]
        .into_iter()
        .find(|value| field.allows(*value))
        .unwrap_or(1.0)
}

/// `, did you mean "Moon"?`, or a full stop where nothing is near.
fn suggestion(name: &str, known: &[&str]) -> String {
    let near = nearest(&short(name, 40), known.iter().copied());
    if near.is_empty() {
        ".".to_owned()
    } else {
        near
    }
}

/// What a value is, in a few words.
fn described(value: &Node) -> String {
    match &value.kind {
        Kind::Struct { name: None, .. } | Kind::Tuple { name: None, .. } => {
            "a group in parentheses".to_owned()
        }
        Kind::Struct {
            name: Some(name), ..
        }
        | Kind::Tuple {
            name: Some(name), ..
        } => format!("{}(...)", short(name, 40)),
        Kind::Word(word) => format!("the word {}", short(word, 40)),
        // A whole number is shown as it is mostly written, a huge one not digit by digit.
        Kind::Number(number) if number.abs() < 1e15 => format!("the number {number}"),
        Kind::Number(number) => format!("the number {number:?}"),
        Kind::Text(text) => format!("the text \"{}\"", short(text, 40)),
        Kind::Other(what) => (*what).to_owned(),
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::study::field::FIELDS;

    #[test]
    fn every_field_has_a_stand_in_that_is_allowed() {
        for field in FIELDS {
            assert!(field.allows(stand_in(Some(field))), "{}", field.path);
        }
    }

    #[test]
    fn only_so_many_faults_are_kept() {
        let mut reader = Reader::default();
        (0..MOST + 7).for_each(|k| reader.note(k, "title", "wrong"));
        assert_eq!((reader.faults.len(), reader.unshown), (MOST, 7));
    }
}
