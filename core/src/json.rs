//! An answer as one line of JSON, as serde_json writes it, in a third of the time: it looks through every name and text
//! for what must be escaped, while the names of our own fields and words never hold any of it.
//!
//! What seldom stands in an answer, and every text with something to escape, is left to serde_json.

use serde::ser::{Impossible, Serialize, SerializeSeq, SerializeStruct, Serializer};
use std::fmt::Error;

/// The most bytes that the answer to a short link usually takes.
const USUAL_LENGTH: usize = 1024;

/// Whole numbers below this are written without an exponent.
const MOST_WHOLE: u32 = 1_000_000_000;

/// `value` as one line of JSON, numbers in the shortest digits that read back the same.
pub(crate) fn to_json(value: &impl Serialize) -> String {
    let mut json = String::with_capacity(USUAL_LENGTH);
    match value.serialize(Writer { json: &mut json }) {
        Ok(()) => json,
        // Nothing in an answer can fail to be written: no maps with other keys than texts.
        Err(Error) => serde_json::to_string(value).unwrap_or_default(),
    }
}

/// Writes one value behind the others.
struct Writer<'a> {
    json: &'a mut String,
}

/// Writes the items of a list, or the fields of a structure, each with a comma behind it.
struct Items<'a> {
    json: &'a mut String,
    close: char,
}

impl<'a> Writer<'a> {
    /// A text without anything to escape.
    fn word(self, word: &str) -> Result<(), Error> {
        self.json.push('"');
        self.json.push_str(word);
        self.json.push('"');
        Ok(())
    }

    fn items(self, open: char, close: char) -> Result<Items<'a>, Error> {
        self.json.push(open);
        let json = self.json;
        Ok(Items { json, close })
    }
}

impl Items<'_> {
    fn end(self) -> Result<(), Error> {
        if self.json.ends_with(',') {
            self.json.pop();
        }
        self.json.push(self.close);
        Ok(())
    }
}

impl SerializeSeq for Items<'_> {
    type Ok = ();
    type Error = Error;

    fn serialize_element<T: Serialize + ?Sized>(&mut self, value: &T) -> Result<(), Error> {
        value.serialize(Writer { json: self.json })?;
        self.json.push(',');
        Ok(())
    }

    fn end(self) -> Result<(), Error> {
        Items::end(self)
    }
}

impl SerializeStruct for Items<'_> {
    type Ok = ();
    type Error = Error;

    // Always, so that each name is written by a few moves of known length.
    #[inline(always)]
    fn serialize_field<T: Serialize + ?Sized>(&mut self, name: &'static str, value: &T) -> Result<(), Error> {
        self.json.push('"');
        self.json.push_str(name);
        self.json.push_str("\":");
        value.serialize(Writer { json: self.json })?;
        self.json.push(',');
        Ok(())
    }

    fn end(self) -> Result<(), Error> {
        Items::end(self)
    }
}

/// What is left to serde_json.
type Left = Impossible<(), Error>;

/// Kinds of values that are left to serde_json.
macro_rules! left {
    ($($kind:ident($($argument:ty),*) -> $written:ty;)*) => {
        $(fn $kind(self, $(_: $argument),*) -> Result<$written, Error> {
            Err(Error)
        })*
    };
}

impl<'a> Serializer for Writer<'a> {
    type Ok = ();
    type Error = Error;
    type SerializeSeq = Items<'a>;
    type SerializeStruct = Items<'a>;
    type SerializeTuple = Left;
    type SerializeTupleStruct = Left;
    type SerializeTupleVariant = Left;
    type SerializeMap = Left;
    type SerializeStructVariant = Left;

    fn serialize_bool(self, value: bool) -> Result<(), Error> {
        self.json.push_str(if value { "true" } else { "false" });
        Ok(())
    }

    fn serialize_f64(self, value: f64) -> Result<(), Error> {
        // Nearly half of all are 0, and most others whole: those are written faster so.
        let whole = value as u32;
        if value.to_bits() == 0 {
            self.json.push_str("0.0");
        } else if f64::from(whole) == value && whole < MOST_WHOLE && value.is_sign_positive() {
            self.json.push_str(itoa::Buffer::new().format(whole));
            self.json.push_str(".0");
        } else if value.is_finite() {
            self.json.push_str(zmij::Buffer::new().format_finite(value));
        } else {
            self.json.push_str("null");
        }
        Ok(())
    }

    fn serialize_u32(self, value: u32) -> Result<(), Error> {
        self.json.push_str(&value.to_string());
        Ok(())
    }

    fn serialize_str(self, value: &str) -> Result<(), Error> {
        // Every byte is looked at, which is done many at a time, and faster than to stop at the first to be escaped.
        let escaped = |byte: u8| byte < b' ' || byte == b'"' || byte == b'\\';
        if value.bytes().fold(false, |any, byte| any | escaped(byte)) {
            self.json
                .push_str(&serde_json::to_string(value).map_err(|_| Error)?);
            return Ok(());
        }
        self.word(value)
    }

    fn serialize_none(self) -> Result<(), Error> {
        self.json.push_str("null");
        Ok(())
    }

    fn serialize_some<T: Serialize + ?Sized>(self, value: &T) -> Result<(), Error> {
        value.serialize(self)
    }

    fn serialize_unit_variant(self, _: &'static str, _: u32, word: &'static str) -> Result<(), Error> {
        self.word(word)
    }

    fn serialize_seq(self, _: Option<usize>) -> Result<Items<'a>, Error> {
        self.items('[', ']')
    }

    fn serialize_struct(self, _: &'static str, _: usize) -> Result<Items<'a>, Error> {
        self.items('{', '}')
    }

    fn serialize_newtype_struct<T: Serialize + ?Sized>(self, _: &'static str, _: &T) -> Result<(), Error> {
        Err(Error)
    }

    fn serialize_newtype_variant<T: Serialize + ?Sized>(
        self,
        _: &'static str,
        _: u32,
        _: &'static str,
        _: &T,
    ) -> Result<(), Error> {
        Err(Error)
    }

    left! {
        serialize_i8(i8) -> ();
        serialize_i16(i16) -> ();
        serialize_i32(i32) -> ();
        serialize_i64(i64) -> ();
        serialize_u8(u8) -> ();
        serialize_u16(u16) -> ();
        serialize_u64(u64) -> ();
        serialize_f32(f32) -> ();
        serialize_char(char) -> ();
        serialize_bytes(&[u8]) -> ();
        serialize_unit() -> ();
        serialize_unit_struct(&'static str) -> ();
        serialize_tuple(usize) -> Left;
        serialize_tuple_struct(&'static str, usize) -> Left;
        serialize_tuple_variant(&'static str, u32, &'static str, usize) -> Left;
        serialize_map(Option<usize>) -> Left;
        serialize_struct_variant(&'static str, u32, &'static str, usize) -> Left;
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::answer::{Besides, answer, answer_with};
    use crate::golden;

    /// The lines of links of all kinds, and texts with all that must be escaped.
    #[test]
    fn it_writes_what_serde_json_writes() {
        let mut links: Vec<String> = (0..200).map(golden::link).collect();
        links.push("x.start=%22%5C%01%C3%A9%E2%80%A8%7F/&x.rate=-0&title=%0A".into());
        links.push("x.start=600&x.rate=0.04&y.start=400&y.rate=0.05&x.name=%22O%5C&x.join=-0.1@1".into());
        for (place, link) in links.into_iter().enumerate() {
            let besides = Besides {
                working: true,
                reversal: place == 0,
            };
            for answer in [answer(&link), answer_with(&link, besides)] {
                let known = serde_json::to_string(&answer).expect("it can be written");
                assert_eq!(to_json(&answer), known, "{link}");
            }
        }
    }

    #[test]
    fn what_seldom_stands_in_an_answer_is_written_too() {
        let rare = (
            1_u8,
            -2_i64,
            'x',
            [
                f64::NAN,
                -0.0,
                -3.0,
                1e21,
                5e-324,
                999_999_999.0,
                1e9,
                4_294_967_296.0,
            ],
            Some([true]),
            (),
        );
        assert_eq!(
            to_json(&rare),
            serde_json::to_string(&rare).expect("it can be written")
        );
        assert_eq!(to_json(&Vec::<u32>::new()), "[]");
    }
}
