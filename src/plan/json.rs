//! Reads JSON text (RFC 8259) into values that know their place, so that a
//! fault in a layer is shown at its line and column.
//!
//! Limits: 64 levels of nesting, as GeoJSON needs fewer than ten.

use super::source::Place;
use super::value::{Entry, Node, Value};

const DEEPEST: usize = 64;

/// Why a text is not JSON, and the byte where that shows.
#[derive(Clone, Debug, PartialEq, Eq)]
pub(super) struct JsonError {
    pub(super) at: usize,
    pub(super) what: String,
}

/// The tree of a JSON text that is source number `source`.
pub(super) fn parse(text: &str, source: usize) -> Result<Value, JsonError> {
    let mut parser = Parser {
        text,
        at: 0,
        source,
    };
    // Some programs begin a file with a byte order mark.
    if text.starts_with('\u{feff}') {
        parser.at = '\u{feff}'.len_utf8();
    }
    let value = parser.value(0)?;
    parser.skip_space();
    if parser.at < text.len() {
        return Err(parser.fault("nothing may follow the JSON value"));
    }
    Ok(value)
}

struct Parser<'t> {
    text: &'t str,
    at: usize,
    source: usize,
}

impl<'t> Parser<'t> {
    fn rest(&self) -> &'t str {
        self.text.get(self.at..).unwrap_or("")
    }

    fn peek(&self) -> Option<u8> {
        self.text.as_bytes().get(self.at).copied()
    }

    fn skip_space(&mut self) {
        while matches!(self.peek(), Some(b' ' | b'\t' | b'\n' | b'\r')) {
            self.at += 1;
        }
    }

    fn take(&mut self, byte: u8) -> bool {
        let found = self.peek() == Some(byte);
        self.at += usize::from(found);
        found
    }

    fn fault(&self, what: impl Into<String>) -> JsonError {
        JsonError {
            at: self.at,
            what: what.into(),
        }
    }

    fn value(&mut self, depth: usize) -> Result<Value, JsonError> {
        self.skip_space();
        if depth > DEEPEST {
            return Err(self.fault(format!("more than {DEEPEST} levels of nesting")));
        }
        let start = self.at;
        let node = match self.peek() {
            Some(b'{') => self.object(depth)?,
            Some(b'[') => self.array(depth)?,
            Some(b'"') => Node::Text(self.string()?),
            Some(b'-' | b'0'..=b'9') => Node::Number(self.number()?),
            _ => self.word()?,
        };
        Ok(Value {
            node,
            place: Place::new(self.source, start..self.at),
        })
    }

    fn word(&mut self) -> Result<Node, JsonError> {
        let words = [
            ("null", Node::Null),
            ("true", Node::Boolean),
            ("false", Node::Boolean),
        ];
        for (word, node) in words {
            if self.rest().starts_with(word) {
                self.at += word.len();
                return Ok(node);
            }
        }
        Err(self.fault("a JSON value was expected"))
    }

    fn array(&mut self, depth: usize) -> Result<Node, JsonError> {
        self.at += 1;
        let mut items = Vec::new();
        self.skip_space();
        if self.take(b']') {
            return Ok(Node::List(items));
        }
        loop {
            items.push(self.value(depth + 1)?);
            self.skip_space();
            if self.take(b']') {
                return Ok(Node::List(items));
            }
            if !self.take(b',') {
                return Err(self.fault("`,` or `]` was expected"));
            }
        }
    }

    fn object(&mut self, depth: usize) -> Result<Node, JsonError> {
        self.at += 1;
        let mut entries: Vec<Entry> = Vec::new();
        let mut known = std::collections::HashSet::new();
        self.skip_space();
        if self.take(b'}') {
            return Ok(Node::Table(entries));
        }
        loop {
            self.skip_space();
            let start = self.at;
            if self.peek() != Some(b'"') {
                return Err(self.fault("a key in double quotes was expected"));
            }
            let key = self.string()?;
            if !known.insert(key.clone()) {
                self.at = start;
                return Err(self.fault("the same key stands twice in one object"));
            }
            let key_place = Place::new(self.source, start..self.at);
            self.skip_space();
            if !self.take(b':') {
                return Err(self.fault("`:` was expected"));
            }
            let value = self.value(depth + 1)?;
            entries.push(Entry {
                key,
                key_place,
                value,
            });
            self.skip_space();
            if self.take(b'}') {
                return Ok(Node::Table(entries));
            }
            if !self.take(b',') {
                return Err(self.fault("`,` or `}` was expected"));
            }
        }
    }

    /// Finds the string's end; its escapes are left to `serde_json`.
    fn string(&mut self) -> Result<String, JsonError> {
        let start = self.at;
        self.at += 1;
        loop {
            match self.peek() {
                Some(b'"') => break,
                Some(b'\\') => self.at += 2,
                Some(_) => self.at += 1,
                None => {
                    self.at = start;
                    return Err(self.fault("this text has no closing quote"));
                }
            }
        }
        self.at += 1;
        let written = self.text.get(start..self.at).unwrap_or("");
        serde_json::from_str(written).map_err(|_| JsonError {
            at: start,
            what: "this text has a control character or an unknown escape in it".to_owned(),
        })
    }

    fn number(&mut self) -> Result<f64, JsonError> {
        let length = self
            .rest()
            .bytes()
            .take_while(|byte| matches!(byte, b'0'..=b'9' | b'+' | b'-' | b'.' | b'e' | b'E'))
            .count();
        let written = self.rest().get(..length).unwrap_or("");
        // serde_json knows the grammar, but rounds the last bit of some
        // numbers wrongly; a number too large becomes infinite here and is
        // refused where it is used.
        let sound = serde_json::from_str::<serde::de::IgnoredAny>(written).is_ok();
        let number = written.parse().ok().filter(|_| sound);
        let number = number.ok_or_else(|| self.fault("this is not a JSON number"))?;
        self.at += length;
        Ok(number)
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    /// The tree as `serde_json` would have it.
    fn plain(value: &Value) -> serde_json::Value {
        match &value.node {
            Node::Number(number) => serde_json::json!(number),
            Node::Text(text) => serde_json::json!(text),
            Node::List(items) => items.iter().map(plain).collect(),
            Node::Table(entries) => entries
                .iter()
                .map(|entry| (entry.key.clone(), plain(&entry.value)))
                .collect(),
            Node::Null | Node::Boolean | Node::Date => serde_json::Value::Null,
        }
    }

    #[test]
    fn values_know_their_place_and_escapes_are_read() {
        let text = " { \"a\\u00e9\" : [1.5e3, \"\\n\"] }";
        let value = parse(text, 0).unwrap();
        assert_eq!(plain(&value), serde_json::json!({ "aé": [1500.0, "\n"] }));
        let list = value.get("aé").unwrap();
        assert_eq!(&text[list.place.range()], "[1.5e3, \"\\n\"]");
    }

    #[test]
    fn nesting_without_end_is_refused_before_the_stack_is_full() {
        assert!(parse(&"[".repeat(1_000_000), 0).is_err());
        assert!(parse(&"{\"a\":".repeat(1_000_000), 0).is_err());
    }

    #[test]
    fn a_number_is_rounded_to_the_nearest_float() {
        // The decimal expansion of 1 + 2⁻⁵² + 2⁻⁵³, a tie but for its last digit.
        let text = "1.00000000000000033306690738754696212708950042724609376";
        let value = parse(text, 0).unwrap();
        assert_eq!(plain(&value), serde_json::json!(1.0 + 2.0 * f64::EPSILON));
    }

    proptest::proptest! {
        /// `serde_json` judges what is JSON and what it says.
        #[test]
        fn texts_are_accepted_exactly_where_serde_json_accepts_them(
            text in "[\\[\\]{}:,\"\\\\ \n0-9.eE+\\-a-fnrtul]{0,12}",
        ) {
            let judge = serde_json::from_str::<serde_json::Value>(&text);
            let out_of_range = judge.as_ref().is_err_and(|error| error.to_string().contains("out of range"));
            let parsed = parse(&text, 0);
            let twice = parsed.as_ref().is_err_and(|error| error.what.contains("twice"));
            if !out_of_range && !twice {
                proptest::prop_assert_eq!(parsed.is_ok(), judge.is_ok(), "{}", text);
            }
        }
    }
}
