//! JSON as it was written: keys in order, repeated keys kept, numbers never made floating.

use crate::truss::Limit;
use serde::de::{DeserializeSeed, Deserializer, Error, IgnoredAny, MapAccess, SeqAccess, Visitor};
use std::borrow::Cow;
use std::fmt;

/// Items of a list that are kept: one more than any list may have. The rest is read over, so that a hostile file does not
/// fill the memory.
const KEPT: usize = if Limit::MEMBERS > Limit::FIGURES { Limit::MEMBERS } else { Limit::FIGURES } + 1;

/// Depth of lists and objects within each other: twice what a truss file has.
const DEEPEST: usize = 8;
/// Entries of an object: more than any object of a truss file has.
const MOST_KEYS: usize = 64;

/// Why lists and objects within each other are refused.
pub(super) const TOO_DEEP: &str = "nested too deeply for a truss file";
/// Why an object with very many keys is refused.
pub(super) const TOO_MANY_KEYS: &str = "an object with more than 64 keys";

/// Whole numbers with fewer digits fit a number of the machine.
const SHORT_DIGITS: usize = 19;

/// A JSON value as it stands in the text.
#[derive(Clone, Debug, PartialEq)]
pub(super) enum Node {
    Null,
    Bool(bool),
    /// A whole number.
    Whole(i128),
    /// A number with a fraction or an exponent.
    Fraction,
    Text(String),
    List(Vec<Node>),
    Map(Vec<(String, Node)>),
}

impl Node {
    /// A text, or a whole number as its digits; empty for everything else.
    pub(super) fn written(&self) -> Cow<'_, str> {
        match self {
            Node::Text(text) => Cow::Borrowed(text),
            Node::Whole(number) => Cow::Owned(number.to_string()),
            _ => Cow::Borrowed(""),
        }
    }

    /// What it is, in words.
    pub(super) fn words(&self) -> &'static str {
        match self {
            Node::Null => "null",
            Node::Bool(_) => "true or false",
            Node::Whole(_) | Node::Fraction => "a number",
            Node::Text(_) => "a text",
            Node::List(_) => "a list",
            Node::Map(_) => "an object",
        }
    }
}

/// Reads JSON as it was written. Very long whole numbers come as texts of their digits.
///
/// # Errors
///
/// When the text is not JSON; with line and column.
pub(super) fn parse(text: &str) -> Result<Node, serde_json::Error> {
    let text = with_long_numbers_quoted(text);
    let mut reader = serde_json::Deserializer::from_str(&text);
    let node = At(0).deserialize(&mut reader)?;
    reader.end()?;
    Ok(node)
}

/// Reads a value from any source that describes itself.
///
/// # Errors
///
/// When the source does.
pub(super) fn read<'de, D: Deserializer<'de>>(source: D) -> Result<Node, D::Error> {
    At(0).deserialize(source)
}

/// The text with quotation marks around whole numbers that are too long for a number of the machine, which would be made
/// floating otherwise.
fn with_long_numbers_quoted(text: &str) -> Cow<'_, str> {
    let mut quoted = String::new();
    let mut copied = 0;
    for (start, end) in long_numbers(text.as_bytes()) {
        quoted.push_str(text.get(copied..start).unwrap_or_default());
        quoted.extend(["\"", text.get(start..end).unwrap_or_default(), "\""]);
        copied = end;
    }
    if copied == 0 {
        return Cow::Borrowed(text);
    }
    quoted.push_str(text.get(copied..).unwrap_or_default());
    Cow::Owned(quoted)
}

/// Where long whole numbers stand outside of texts.
fn long_numbers(bytes: &[u8]) -> Vec<(usize, usize)> {
    let at = |index: usize| bytes.get(index).copied().unwrap_or(b' ');
    let mut found = Vec::new();
    let (mut index, mut in_text) = (0, false);
    while index < bytes.len() {
        match at(index) {
            b'"' => in_text = !in_text,
            b'\\' if in_text => index += 1,
            b'-' | b'0'..=b'9' if !in_text => {
                let start = index;
                let is_part = |&b: &u8| matches!(b, b'0'..=b'9' | b'-' | b'+' | b'.' | b'e' | b'E');
                let length = bytes.get(start..).unwrap_or_default().iter().take_while(|b| is_part(b)).count();
                let number = bytes.get(start..start + length).unwrap_or_default();
                if is_long_whole(number) {
                    found.push((start, start + length));
                }
                index += length - 1;
            }
            _ => {}
        }
        index += 1;
    }
    found
}

fn is_long_whole(number: &[u8]) -> bool {
    let digits = number.strip_prefix(b"-").unwrap_or(number);
    // Minus nought is whole, too, but the machine has it only among the floating numbers.
    let long = digits.len() >= SHORT_DIGITS && digits.first() != Some(&b'0');
    (long && digits.iter().all(u8::is_ascii_digit)) || number == b"-0"
}

/// A value at some depth of lists and objects: reads it as a [`Node`].
struct At(usize);

impl At {
    /// What stands inside a list or an object here.
    fn inside<E: Error>(&self) -> Result<At, E> {
        if self.0 < DEEPEST { Ok(At(self.0 + 1)) } else { Err(E::custom(TOO_DEEP)) }
    }
}

impl<'de> DeserializeSeed<'de> for At {
    type Value = Node;

    fn deserialize<D: Deserializer<'de>>(self, deserializer: D) -> Result<Node, D::Error> {
        deserializer.deserialize_any(self)
    }
}

impl<'de> Visitor<'de> for At {
    type Value = Node;

    fn expecting(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.write_str("a JSON value")
    }

    fn visit_unit<E: Error>(self) -> Result<Node, E> {
        Ok(Node::Null)
    }

    fn visit_bool<E: Error>(self, value: bool) -> Result<Node, E> {
        Ok(Node::Bool(value))
    }

    fn visit_u64<E: Error>(self, value: u64) -> Result<Node, E> {
        Ok(Node::Whole(value.into()))
    }

    fn visit_i64<E: Error>(self, value: i64) -> Result<Node, E> {
        Ok(Node::Whole(value.into()))
    }

    fn visit_f64<E: Error>(self, _: f64) -> Result<Node, E> {
        Ok(Node::Fraction)
    }

    fn visit_str<E: Error>(self, value: &str) -> Result<Node, E> {
        Ok(Node::Text(value.to_string()))
    }

    fn visit_string<E: Error>(self, value: String) -> Result<Node, E> {
        Ok(Node::Text(value))
    }

    fn visit_seq<A: SeqAccess<'de>>(self, mut items: A) -> Result<Node, A::Error> {
        let mut list = Vec::new();
        while list.len() < KEPT {
            match items.next_element_seed(self.inside()?)? {
                Some(item) => list.push(item),
                None => break,
            }
        }
        if list.len() == KEPT {
            while items.next_element::<IgnoredAny>()?.is_some() {}
        }
        list.shrink_to_fit();
        Ok(Node::List(list))
    }

    fn visit_map<A: MapAccess<'de>>(self, mut entries: A) -> Result<Node, A::Error> {
        let mut map = Vec::new();
        while let Some(key) = entries.next_key::<String>()? {
            if map.len() == MOST_KEYS {
                return Err(A::Error::custom(TOO_MANY_KEYS));
            }
            map.push((key, entries.next_value_seed(self.inside()?)?));
        }
        map.shrink_to_fit();
        Ok(Node::Map(map))
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn long_whole_numbers_keep_their_digits() {
        let long = "1234567890123456789012345678901234567890";
        for (text, expected) in [
            (format!("[{long}]"), Node::List(vec![Node::Text(long.into())])),
            (format!("-{long}"), Node::Text(format!("-{long}"))),
            (format!("\"{long}\""), Node::Text(long.into())),
            (format!("\"\\\"{long}\""), Node::Text(format!("\"{long}"))),
            (format!("{long}.5"), Node::Fraction),
            ("1e3".into(), Node::Fraction),
            ("-12".into(), Node::Whole(-12)),
            ("[-0]".into(), Node::List(vec![Node::Text("-0".into())])),
            ("-0.0".into(), Node::Fraction),
        ] {
            assert_eq!(parse(&text).ok(), Some(expected), "{text}");
        }
        for bad in [format!("0{long}"), format!("--{long}"), format!("{long}-{long}"), format!("{long} {long}")] {
            assert!(parse(&bad).is_err(), "{bad}");
        }
    }

    #[test]
    fn what_would_fill_the_memory_is_refused() {
        let keys: Vec<String> = (0..=MOST_KEYS).map(|n| format!("\"{n}\":0")).collect();
        let error = parse(&format!("{{{}}}", keys.join(","))).expect_err("too many keys");
        assert!(error.to_string().starts_with(TOO_MANY_KEYS), "{error}");
        let deep = |depth: usize| format!("{}0{}", "[".repeat(depth), "]".repeat(depth));
        assert!(parse(&deep(DEEPEST)).is_ok());
        assert!(parse(&deep(DEEPEST + 1)).expect_err("too deep").to_string().starts_with(TOO_DEEP));
        let Ok(Node::List(kept)) = parse(&format!("[{}0]", "0,".repeat(2 * KEPT))) else { panic!("a list") };
        assert_eq!(kept.len(), KEPT);
    }
}
