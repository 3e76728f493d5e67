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
    /// `( field: value, … )` or `Name( field: value, … )`; also empty parentheses.
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
    /// A number; infinite where it is too large for a double.
    Number(f64),
    /// A string, decoded.
    Text(String),
    /// A list, a map, a character, bytes: nothing a scenario has.
    Other(&'static str),
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

/// Why there is no tree, and where.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Trouble {
    /// Byte offset.
    pub at: usize,
    /// What is wrong.
    pub why: &'static str,
}

/// What is said about too many brackets, here and where the `ron` crate counts them.
pub const TOO_DEEP: &str =
    "brackets are nested deeper than 32 levels, which no scenario needs; remove some";

impl Node {
    /// The name of a variant: a bare word, or what stands before the parenthesis.
    pub fn variant(&self) -> Option<&str> {
        match &self.kind {
            Kind::Word(name) => Some(name),
            Kind::Struct { name, .. } | Kind::Tuple { name, .. } => name.as_deref(),
            _ => None,
        }
    }

    /// The field of a struct by name; the first, where it is given twice.
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
            } if name == "Some" => match values.as_slice() {
                [inner] => inner.plain(),
                _ => self,
            },
            _ => self,
        }
    }

    /// Whether this is `None`.
    pub fn is_none(&self) -> bool {
        matches!(&self.kind, Kind::Word(name) if name == "None")
    }
}

/// Builds the tree.
///
/// # Errors
/// What is nested too deep or not understood, with its place; the caller's syntax check has gone before.
pub fn parse(text: &str) -> Result<Node, Trouble> {
    let mut reader = Reader { text, at: 0 };
    reader.blanks();
    // File attributes such as #![enable(…)] stand before the value.
    while reader.rest().starts_with('#') {
        match reader.rest().find(']') {
            Some(close) => reader.at += close + 1,
            None => return reader.trouble(),
        }
        reader.blanks();
    }
    let node = reader.value(0)?;
    reader.blanks();
    if reader.rest().is_empty() {
        Ok(node)
    } else {
        reader.trouble()
    }
}

/// Where the next thing begins after `from`: blanks and comments are skipped.
pub fn skip_blanks(text: &str, from: usize) -> usize {
    let mut reader = Reader {
        text,
        at: from.min(text.len()),
    };
    reader.blanks();
    reader.at
}

/// White space as RON has it: the Unicode pattern white space, which holds the two direction marks.
fn is_blank(c: char) -> bool {
    c.is_whitespace() || c == '\u{200e}' || c == '\u{200f}'
}

struct Reader<'a> {
    text: &'a str,
    at: usize,
}

impl<'a> Reader<'a> {
    fn rest(&self) -> &'a str {
        self.text.get(self.at..).unwrap_or("")
    }

    fn trouble<T>(&self) -> Result<T, Trouble> {
        Err(Trouble {
            at: self.at,
            why: "this is not understood; `stoop new` prints a commented starting point",
        })
    }

    fn blanks(&mut self) {
        loop {
            let rest = self.rest();
            let trimmed = rest.trim_start_matches(is_blank);
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
        while let Some(first) = self.rest().chars().next() {
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
                self.at += first.len_utf8();
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

    /// A word; empty where none stands here.
    fn word(&mut self) -> &'a str {
        if self.rest().starts_with("r#") && !self.raw_string_ahead(1) {
            self.at += 2;
        }
        let rest = self.rest();
        let end = rest
            .find(|c: char| !(c.is_alphanumeric() || c == '_'))
            .unwrap_or(rest.len());
        self.at += end;
        rest.get(..end).unwrap_or("")
    }

    /// Depth counts the brackets that are open around the value.
    fn value(&mut self, depth: usize) -> Result<Node, Trouble> {
        let start = self.at;
        let Some(first) = self.rest().chars().next() else {
            return self.trouble();
        };
        let kind = match first {
            '(' => self.group(None, depth)?,
            '[' => self.other(']', "a list", depth)?,
            '{' => self.other('}', "a map", depth)?,
            '"' => self.string()?,
            'r' if self.raw_string_ahead(1) => self.string()?,
            '\'' => self.character()?,
            'b' if self.rest().starts_with("b\"") || self.raw_bytes_ahead() => {
                self.at += 1;
                self.skip_string()?;
                Kind::Other("bytes")
            }
            'b' if self.rest().starts_with("b'") => {
                self.at += 1;
                self.character()?
            }
            c if c.is_ascii_digit() || "+-.".contains(c) => self.number()?,
            _ => self.named(depth)?,
        };
        Ok(Node {
            span: start..self.at,
            kind,
        })
    }

    fn named(&mut self, depth: usize) -> Result<Kind, Trouble> {
        let word = self.word();
        match word {
            "" => return self.trouble(),
            "inf" => return Ok(Kind::Number(f64::INFINITY)),
            "NaN" => return Ok(Kind::Number(f64::NAN)),
            _ => {}
        }
        let after = self.at;
        self.blanks();
        if self.rest().starts_with('(') {
            return self.group(Some(word.to_owned()), depth);
        }
        self.at = after;
        Ok(Kind::Word(word.to_owned()))
    }

    fn number(&mut self) -> Result<Kind, Trouble> {
        let rest = self.rest();
        let end = rest
            .find(|c: char| !(c.is_ascii_alphanumeric() || "+-._".contains(c)))
            .unwrap_or(rest.len());
        match rest.get(..end).and_then(numeric) {
            Some(value) => {
                self.at += end;
                Ok(Kind::Number(value))
            }
            None => self.trouble(),
        }
    }

    /// Whether a raw string's `#…"` or `"` stands `skip` bytes ahead; `r#word` is a raw word.
    fn raw_string_ahead(&self, skip: usize) -> bool {
        self.rest()
            .get(skip..)
            .is_some_and(|rest| rest.trim_start_matches('#').starts_with('"'))
    }

    fn raw_bytes_ahead(&self) -> bool {
        self.rest().starts_with("br") && self.raw_string_ahead(2)
    }

    fn character(&mut self) -> Result<Kind, Trouble> {
        let mut letters = self.rest().char_indices().skip(1);
        let escaped = letters.next().is_some_and(|(_, c)| c == '\\');
        if escaped {
            letters.next();
        }
        match letters.find(|(_, c)| *c == '\'') {
            Some((end, _)) => {
                self.at += end + 1;
                Ok(Kind::Other("a character"))
            }
            None => self.trouble(),
        }
    }

    /// A string, raw or escaped: its end is found here, its content is decoded by `ron`.
    fn string(&mut self) -> Result<Kind, Trouble> {
        let start = self.at;
        self.skip_string()?;
        let written = self.text.get(start..self.at).unwrap_or("");
        match ron::from_str(written) {
            Ok(text) => Ok(Kind::Text(text)),
            Err(_) => self.trouble(),
        }
    }

    fn skip_string(&mut self) -> Result<(), Trouble> {
        let rest = self.rest();
        let end = if let Some(raw) = rest.strip_prefix('r') {
            let hashes = raw.len() - raw.trim_start_matches('#').len();
            let open = 1 + hashes + 1;
            let close = format!("\"{}", "#".repeat(hashes));
            rest.get(open..)
                .and_then(|inner| inner.find(&close))
                .map(|at| open + at + close.len())
        } else {
            let mut escaped = false;
            rest.bytes()
                .enumerate()
                .skip(1)
                .find(|(_, byte)| {
                    let ends = !escaped && *byte == b'"';
                    escaped = !escaped && *byte == b'\\';
                    ends
                })
                .map(|(at, _)| at + 1)
        };
        match end {
            Some(end) => {
                self.at += end;
                Ok(())
            }
            None => self.trouble(),
        }
    }

    fn deeper(&self, depth: usize) -> Result<usize, Trouble> {
        if depth < DEEPEST {
            Ok(depth + 1)
        } else {
            Err(Trouble {
                at: self.at,
                why: TOO_DEEP,
            })
        }
    }

    /// A list or map: read over, with strings and comments respected.
    fn other(&mut self, close: char, what: &'static str, depth: usize) -> Result<Kind, Trouble> {
        let inside = self.deeper(depth)?;
        self.at += 1;
        loop {
            self.blanks();
            if self.eat(close) {
                return Ok(Kind::Other(what));
            }
            if !self.eat(',') && !self.eat(':') {
                self.value(inside)?;
            }
        }
    }

    fn group(&mut self, name: Option<String>, depth: usize) -> Result<Kind, Trouble> {
        let inside = self.deeper(depth)?;
        self.at += 1;
        let mut fields = Vec::new();
        let mut values = Vec::new();
        loop {
            self.blanks();
            let close = self.at;
            if self.eat(')') {
                return Ok(if values.is_empty() {
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
            match self.field_name() {
                Some((name, name_span)) => {
                    let value = self.value(inside)?;
                    fields.push(Field {
                        name,
                        name_span,
                        value,
                    });
                }
                None => {
                    self.at = start;
                    values.push(self.value(inside)?);
                }
            }
        }
    }

    /// `name:` and the blanks after it.
    fn field_name(&mut self) -> Option<(String, Range<usize>)> {
        let start = self.at;
        let word = self.word();
        let span = start..self.at;
        self.blanks();
        let named = !word.is_empty() && self.eat(':');
        self.blanks();
        named.then(|| (word.to_owned(), span))
    }
}

/// The value of a number as RON writes it: signs, underscores, bases, type suffixes.
fn numeric(written: &str) -> Option<f64> {
    const SUFFIXES: [&str; 12] = [
        "i128", "u128", "i16", "i32", "i64", "u16", "u32", "u64", "f32", "f64", "i8", "u8",
    ];
    let clean: String = written.chars().filter(|c| *c != '_').collect();
    let unsigned = clean.trim_start_matches(['+', '-']);
    let base = match unsigned.get(..2) {
        Some("0x") => 16,
        Some("0b") => 2,
        Some("0o") => 8,
        _ => 10,
    };
    // In base 16 the letters of f32 and f64 are digits.
    let plain = SUFFIXES
        .iter()
        .filter(|suffix| base != 16 || !suffix.starts_with('f'))
        .find_map(|suffix| unsigned.strip_suffix(suffix))
        .unwrap_or(unsigned);
    let value = match (plain, base) {
        ("inf", _) => f64::INFINITY,
        ("NaN", _) => f64::NAN,
        (_, 10) => plain.parse().ok()?,
        _ => {
            let digits = plain.get(2..).filter(|digits| !digits.is_empty())?;
            digits.chars().try_fold(0.0, |sum, digit| {
                Some(sum * f64::from(base) + f64::from(digit.to_digit(base)?))
            })?
        }
    };
    Some(if clean.starts_with('-') {
        -value
    } else {
        value
    })
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    #[test]
    fn spans_cover_what_was_written() {
        let text = "// head\n(a: 1.5, b: Best, /* c: /* 2 */ 3 */ d: Circular(altitude_km: 100), \
                    e: AltitudeKm(3), f: \"x\\\"y)\", g: Some(2), h: r#\"a\"b\"#, i: Asymptote(),)";
        let node = parse(text).expect("a tree");
        let kind = |name: &str| node.field(name).map(|field| &field.value.plain().kind);
        let span = |name: &str| {
            node.field(name)
                .map(|field| &text[field.value.span.clone()])
        };
        assert_eq!(span("a"), Some("1.5"));
        assert_eq!(span("b"), Some("Best"));
        assert_eq!(span("d"), Some("Circular(altitude_km: 100)"));
        assert_eq!(span("e"), Some("AltitudeKm(3)"));
        assert_eq!(kind("f"), Some(&Kind::Text("x\"y)".to_owned())));
        assert_eq!(kind("g"), Some(&Kind::Number(2.0)));
        assert_eq!(kind("h"), Some(&Kind::Text("a\"b".to_owned())));
        assert!(matches!(kind("i"), Some(Kind::Struct { .. })));
        assert!(node.field("c").is_none());
    }

    #[test]
    fn numbers_of_every_spelling() {
        for (written, value) in [
            ("100", 100.0),
            ("-3.5e-2", -0.035),
            ("+.5", 0.5),
            ("5.", 5.0),
            ("1_000.5", 1000.5),
            ("0xff", 255.0),
            ("-0b101", -5.0),
            ("7u8", 7.0),
            ("1.5f32", 1.5),
            ("0x1f32", 7986.0),
            ("1e999", f64::INFINITY),
            ("-inf", f64::NEG_INFINITY),
        ] {
            assert_eq!(numeric(written), Some(value), "{written}");
        }
        assert!(numeric("NaN").is_some_and(f64::is_nan));
        assert_eq!(numeric("0x"), None);
        assert_eq!(numeric("1.2.3"), None);
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
            "b\"",
            "#![enable(",
        ] {
            assert!(parse(text).is_err(), "{text}");
        }
    }

    #[test]
    fn brackets_are_counted() {
        let nested = |depth: usize| format!("{}{}", "(".repeat(depth), ")".repeat(depth));
        assert!(parse(&nested(DEEPEST)).is_ok());
        let trouble = parse(&nested(DEEPEST + 1)).expect_err("too deep");
        assert_eq!((trouble.at, trouble.why), (DEEPEST, TOO_DEEP));
        assert!(parse(&"[".repeat(200_000)).is_err());
        assert!(TOO_DEEP.contains(&DEEPEST.to_string()));
    }

    proptest! {
        #[test]
        fn no_text_makes_it_panic(text in "[()\\[\\]{}:,.\"'#/*r0-9a-zA-Z \\\\\u{e9}\n]{0,60}") {
            let _ = parse(&text);
        }

        /// The `ron` crate decides what is valid; whatever it takes, the tree must take too.
        #[test]
        fn what_ron_takes_the_tree_takes(text in "\\(a: [()\\[\\]{}:,.\"'#/*rb0-9a-f_ \\\\\n]{0,8}\\)") {
            // A run of dots passes the crate as a value to be ignored, but as a value of no type at all.
            let dots = text.contains("..");
            if !dots && ron::from_str::<serde::de::IgnoredAny>(&text).is_ok() {
                prop_assert!(parse(&text).is_ok(), "{}", text);
            }
        }
    }
}
