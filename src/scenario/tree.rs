//! A tree of RON text that knows where everything stands.
//!
//! Built only from text that the `ron` crate has accepted, so it need not diagnose syntax; it must still never panic, and it
//! refuses what is nested deeper than [`DEEPEST`].

use std::ops::Range;

/// Deepest nesting of brackets read.
pub const DEEPEST: usize = 32;

/// A value and where it stands (bytes).
#[derive(Clone, Debug, PartialEq)]
pub struct Node {
    /// From its first to after its last character.
    pub span: Range<usize>,
    /// What it is.
    pub kind: Kind,
}

/// What a value is.
#[derive(Clone, Debug, PartialEq)]
pub enum Kind {
    /// `( field: value, … )` or `Name( field: value, … )`.
    Struct {
        /// Name before the parenthesis, if any.
        name: Option<String>,
        /// Fields in order.
        fields: Vec<Field>,
        /// Where the closing parenthesis stands.
        close: usize,
    },
    /// `Name(value, …)` or `(value, …)` without field names.
    Tuple {
        /// Name before the parenthesis, if any.
        name: Option<String>,
        /// Values in order.
        values: Vec<Node>,
    },
    /// A bare word: `Best`, `None`, `true`.
    Word(String),
    /// A number as written.
    Number(f64),
    /// A string, decoded.
    Text(String),
    /// A list, a map, a character: nothing a scenario has.
    Other,
}

/// A field of a struct.
#[derive(Clone, Debug, PartialEq)]
pub struct Field {
    /// Its name.
    pub name: String,
    /// Where the name stands.
    pub name_span: Range<usize>,
    /// Its value.
    pub value: Node,
}

impl Node {
    /// The name of a variant: a bare word, or what stands before the parenthesis.
    pub fn variant(&self) -> Option<&str> {
        match &self.kind {
            Kind::Word(name) => Some(name),
            Kind::Struct { name, .. } | Kind::Tuple { name, .. } => name.as_deref(),
            _ => None,
        }
    }

    /// The field of a struct by name.
    pub fn field(&self, name: &str) -> Option<&Field> {
        match &self.kind {
            Kind::Struct { fields, .. } => fields.iter().find(|field| field.name == name),
            _ => None,
        }
    }

    /// The value inside `Some(…)`, or the value itself.
    pub fn plain(&self) -> &Node {
        match &self.kind {
            Kind::Tuple {
                name: Some(name),
                values,
            } if name == "Some" && values.len() == 1 => values[0].plain(),
            _ => self,
        }
    }

    /// Whether this is `None`.
    pub fn is_none(&self) -> bool {
        matches!(&self.kind, Kind::Word(name) if name == "None")
    }

    /// What it is, in a word, for messages.
    pub fn described(&self) -> String {
        match &self.kind {
            Kind::Struct {
                name: Some(name), ..
            }
            | Kind::Tuple {
                name: Some(name), ..
            } => format!("{name}(…)"),
            Kind::Struct { .. } | Kind::Tuple { .. } => "a group in parentheses".to_owned(),
            Kind::Word(word) => format!("the word {word}"),
            Kind::Number(number) => format!("the number {number}"),
            Kind::Text(_) => "a text".to_owned(),
            Kind::Other => "a list or something else".to_owned(),
        }
    }
}

/// Builds the tree. `None` where the text is not what it should be; the caller's syntax check has said why.
pub fn parse(text: &str) -> Option<Node> {
    let mut reader = Reader { text, at: 0 };
    reader.blanks();
    // File attributes such as #![enable(…)] stand before the value.
    while reader.rest().starts_with('#') {
        let close = reader.rest().find(']')?;
        reader.at += close + 1;
        reader.blanks();
    }
    let node = reader.value(0)?;
    reader.blanks();
    reader.rest().is_empty().then_some(node)
}

/// After how many bytes from `from` the next thing begins: blanks and comments.
pub fn skip_blanks(text: &str, from: usize) -> usize {
    let mut reader = Reader {
        text,
        at: from.min(text.len()),
    };
    reader.blanks();
    reader.at
}

struct Reader<'a> {
    text: &'a str,
    at: usize,
}

impl<'a> Reader<'a> {
    fn rest(&self) -> &'a str {
        self.text.get(self.at..).unwrap_or("")
    }

    fn blanks(&mut self) {
        loop {
            let rest = self.rest();
            let trimmed = rest.trim_start();
            self.at += rest.len() - trimmed.len();
            if trimmed.starts_with("//") {
                self.at += trimmed.find('\n').unwrap_or(trimmed.len());
            } else if trimmed.starts_with("/*") {
                self.block_comment();
            } else {
                return;
            }
        }
    }

    /// Block comments nest.
    fn block_comment(&mut self) {
        let mut depth = 0_usize;
        while !self.rest().is_empty() {
            if self.rest().starts_with("/*") {
                depth += 1;
                self.at += 2;
            } else if self.rest().starts_with("*/") {
                depth = depth.saturating_sub(1);
                self.at += 2;
                if depth == 0 {
                    return;
                }
            } else {
                self.at += self.rest().chars().next().map_or(1, char::len_utf8);
            }
        }
    }

    fn eat(&mut self, c: char) -> bool {
        let found = self.rest().starts_with(c);
        if found {
            self.at += c.len_utf8();
        }
        found
    }

    fn word(&mut self) -> Option<String> {
        let start = self.at;
        if self.rest().starts_with("r#") {
            self.at += 2;
        }
        let end = self
            .rest()
            .find(|c: char| !(c.is_alphanumeric() || c == '_'))
            .unwrap_or(self.rest().len());
        if end == 0 {
            self.at = start;
            return None;
        }
        let word = self.rest().get(..end)?.to_owned();
        self.at += end;
        Some(word)
    }

    fn value(&mut self, depth: usize) -> Option<Node> {
        if DEEPEST < depth {
            return None;
        }
        let start = self.at;
        let first = self.rest().chars().next()?;
        let kind = match first {
            '(' => self.group(None, depth)?,
            '"' => self.text_value()?,
            'r' if self.raw_text_ahead() => self.text_value()?,
            '[' | '{' => self.other(first, depth)?,
            '\'' => {
                self.at += self.rest().get(1..)?.find('\'')? + 2;
                Kind::Other
            }
            c if c.is_ascii_digit() || "+-.".contains(c) => self.number()?,
            _ => self.named(depth)?,
        };
        Some(Node {
            span: start..self.at,
            kind,
        })
    }

    fn named(&mut self, depth: usize) -> Option<Kind> {
        let word = self.word()?;
        match word.as_str() {
            "inf" => return Some(Kind::Number(f64::INFINITY)),
            "NaN" => return Some(Kind::Number(f64::NAN)),
            _ => {}
        }
        let after = self.at;
        self.blanks();
        if self.rest().starts_with('(') {
            return self.group(Some(word), depth);
        }
        self.at = after;
        Some(Kind::Word(word))
    }

    fn number(&mut self) -> Option<Kind> {
        let rest = self.rest();
        let end = rest
            .find(|c: char| !(c.is_ascii_alphanumeric() || "+-._".contains(c)))
            .unwrap_or(rest.len());
        let written = rest.get(..end)?;
        self.at += end;
        let clean: String = written.chars().filter(|c| *c != '_').collect();
        let unsigned = clean.trim_start_matches(['+', '-']);
        let value = match unsigned {
            "inf" => f64::INFINITY,
            "NaN" => f64::NAN,
            _ => integer_in_base(unsigned).or_else(|| {
                unsigned
                    .trim_end_matches("f64")
                    .trim_end_matches("f32")
                    .parse()
                    .ok()
            })?,
        };
        Some(Kind::Number(if clean.starts_with('-') {
            -value
        } else {
            value
        }))
    }

    fn raw_text_ahead(&self) -> bool {
        self.rest()
            .get(1..)
            .is_some_and(|rest| rest.trim_start_matches('#').starts_with('"'))
    }

    /// A string, raw or escaped: its end is found here, its content is decoded by `ron`.
    fn text_value(&mut self) -> Option<Kind> {
        let rest = self.rest();
        let length = if rest.starts_with('r') {
            let hashes = rest[1..].bytes().take_while(|b| *b == b'#').count();
            let close = format!("\"{}", "#".repeat(hashes));
            let open = 1 + hashes + 1;
            open + rest.get(open..)?.find(&close)? + close.len()
        } else {
            let mut escaped = false;
            let mut end = None;
            for (k, c) in rest.char_indices().skip(1) {
                match c {
                    _ if escaped => escaped = false,
                    '\\' => escaped = true,
                    '"' => {
                        end = Some(k + 1);
                        break;
                    }
                    _ => {}
                }
            }
            end?
        };
        let decoded: String = ron::from_str(rest.get(..length)?).ok()?;
        self.at += length;
        Some(Kind::Text(decoded))
    }

    /// A list or map: read over, with strings and comments respected.
    fn other(&mut self, open: char, depth: usize) -> Option<Kind> {
        let close = if open == '[' { ']' } else { '}' };
        self.eat(open);
        loop {
            self.blanks();
            if self.eat(close) {
                return Some(Kind::Other);
            }
            if self.eat(',') || self.eat(':') {
                continue;
            }
            self.value(depth + 1)?;
        }
    }

    fn group(&mut self, name: Option<String>, depth: usize) -> Option<Kind> {
        self.eat('(');
        let mut fields = Vec::new();
        let mut values = Vec::new();
        loop {
            self.blanks();
            let close = self.at;
            if self.eat(')') {
                let is_struct = values.is_empty() && (!fields.is_empty() || name.is_none());
                return Some(if is_struct {
                    Kind::Struct {
                        name,
                        fields,
                        close,
                    }
                } else {
                    Kind::Tuple { name, values }
                });
            }
            if self.eat(',') {
                continue;
            }
            let start = self.at;
            let field = self.word().and_then(|word| {
                let name_span = start..self.at;
                self.blanks();
                (self.rest().starts_with(':') && !self.rest().starts_with("::"))
                    .then_some((word, name_span))
            });
            match field {
                Some((name, name_span)) => {
                    self.eat(':');
                    self.blanks();
                    let value = self.value(depth + 1)?;
                    fields.push(Field {
                        name,
                        name_span,
                        value,
                    });
                }
                None => {
                    self.at = start;
                    values.push(self.value(depth + 1)?);
                }
            }
        }
    }
}

fn integer_in_base(digits: &str) -> Option<f64> {
    let (base, rest) = match digits.get(..2)? {
        "0x" => (16, &digits[2..]),
        "0b" => (2, &digits[2..]),
        "0o" => (8, &digits[2..]),
        _ => return None,
    };
    i64::from_str_radix(rest, base)
        .ok()
        .map(|value| value as f64)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn spans_cover_what_was_written() {
        let text = "// head\n(a: 1.5, b: Best, /* c: 2 */ d: Circular(altitude_km: 100), e: AltitudeKm(3), f: \"x\\\"y)\", g: Some(2),)";
        let node = parse(text).expect("a tree");
        let span = |name: &str| {
            node.field(name)
                .map(|field| &text[field.value.span.clone()])
        };
        assert_eq!(span("a"), Some("1.5"));
        assert_eq!(span("b"), Some("Best"));
        assert_eq!(span("d"), Some("Circular(altitude_km: 100)"));
        assert_eq!(span("e"), Some("AltitudeKm(3)"));
        assert_eq!(
            node.field("f").map(|field| field.value.kind.clone()),
            Some(Kind::Text("x\"y)".to_owned()))
        );
        assert_eq!(
            node.field("g")
                .map(|field| field.value.plain().kind.clone()),
            Some(Kind::Number(2.0))
        );
        assert!(node.field("c").is_none());
    }

    #[test]
    fn broken_text_gives_no_tree_and_no_panic() {
        for text in [
            "",
            "(",
            "(a",
            "(a:",
            "(a: \"",
            "(a: r#\"x\"",
            "(a: [1, 2",
            "/* open",
            "(a: 'x",
            "\u{feff}(",
            "(a: 0x)",
            "-",
        ] {
            assert_eq!(parse(text), None, "{text}");
        }
        assert_eq!(parse(&"(".repeat(100_000)), None);
    }
}
