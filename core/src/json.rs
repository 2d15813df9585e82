//! An answer as one line of JSON, as serde_json writes it, in a third of the time: it looks through every name and text
//! for what must be escaped, while the names of our own fields and words never hold any of it. And it is the one
//! way to write an answer that the page holds.

use serde::ser::{Impossible, Serialize, SerializeSeq, SerializeStruct, SerializeTuple, Serializer};
use std::fmt::{Error, Write as _};

/// The most bytes that the answer to a short link usually takes.
const USUAL_LENGTH: usize = 1024;

/// Whole numbers below this are written without an exponent.
const MOST_WHOLE: u32 = 1_000_000_000;

/// `value` as one line of JSON, numbers in the shortest digits that read back the same.
pub(crate) fn to_json(value: &impl Serialize) -> String {
    let mut json = String::with_capacity(USUAL_LENGTH);
    // A kind of value that stands in no answer is written as none: a test goes through all answers.
    value.serialize(Writer { json: &mut json }).unwrap_or_default();
    json
}

/// `text` in quotation marks, with all that must be escaped.
fn write_escaped(text: &str, json: &mut String) -> Result<(), Error> {
    json.push('"');
    for letter in text.chars() {
        let short = match letter {
            '"' | '\\' => letter,
            '\u{8}' => 'b',
            '\t' => 't',
            '\n' => 'n',
            '\u{c}' => 'f',
            '\r' => 'r',
            '\0'..' ' => {
                write!(json, "\\u{:04x}", letter as u32)?;
                continue;
            }
            _ => {
                json.push(letter);
                continue;
            }
        };
        json.extend(['\\', short]);
    }
    json.push('"');
    Ok(())
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

impl SerializeTuple for Items<'_> {
    type Ok = ();
    type Error = Error;

    fn serialize_element<T: Serialize + ?Sized>(&mut self, value: &T) -> Result<(), Error> {
        SerializeSeq::serialize_element(self, value)
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

/// What stands in no answer.
type Never = Impossible<(), Error>;

/// Kinds of values that stand in no answer.
macro_rules! never {
    ($($kind:ident($($argument:ty),*) -> $written:ty;)*) => {
        $(fn $kind(self, $(_: $argument),*) -> Result<$written, Error> {
            Err(Error)
        })*
    };
}

/// Whole numbers; a kind that stands in no answer weighs nothing.
macro_rules! whole {
    ($($kind:ident($number:ty);)*) => {
        $(fn $kind(self, value: $number) -> Result<(), Error> {
            self.json.push_str(itoa::Buffer::new().format(value));
            Ok(())
        })*
    };
}

impl<'a> Serializer for Writer<'a> {
    type Ok = ();
    type Error = Error;
    type SerializeSeq = Items<'a>;
    type SerializeStruct = Items<'a>;
    type SerializeTuple = Items<'a>;
    type SerializeTupleStruct = Never;
    type SerializeTupleVariant = Never;
    type SerializeMap = Never;
    type SerializeStructVariant = Never;

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

    fn serialize_str(self, value: &str) -> Result<(), Error> {
        // Every byte is looked at, which is done many at a time, and faster than to stop at the first to be escaped.
        let escaped = |byte: u8| byte < b' ' || byte == b'"' || byte == b'\\';
        if value.bytes().fold(false, |any, byte| any | escaped(byte)) {
            return write_escaped(value, self.json);
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

    fn serialize_tuple(self, _: usize) -> Result<Items<'a>, Error> {
        self.items('[', ']')
    }

    fn serialize_struct(self, _: &'static str, _: usize) -> Result<Items<'a>, Error> {
        self.items('{', '}')
    }

    fn serialize_newtype_struct<T: Serialize + ?Sized>(
        self,
        _: &'static str,
        value: &T,
    ) -> Result<(), Error> {
        value.serialize(self)
    }

    fn serialize_unit(self) -> Result<(), Error> {
        self.serialize_none()
    }

    fn serialize_unit_struct(self, _: &'static str) -> Result<(), Error> {
        self.serialize_none()
    }

    fn serialize_char(self, value: char) -> Result<(), Error> {
        self.serialize_str(value.encode_utf8(&mut [0; 4]))
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

    whole! {
        serialize_i8(i8);
        serialize_i16(i16);
        serialize_i32(i32);
        serialize_i64(i64);
        serialize_u8(u8);
        serialize_u16(u16);
        serialize_u32(u32);
        serialize_u64(u64);
    }

    never! {
        serialize_f32(f32) -> ();
        serialize_bytes(&[u8]) -> ();
        serialize_tuple_struct(&'static str, usize) -> Never;
        serialize_tuple_variant(&'static str, u32, &'static str, usize) -> Never;
        serialize_map(Option<usize>) -> Never;
        serialize_struct_variant(&'static str, u32, &'static str, usize) -> Never;
    }
}

#[cfg(test)]
mod tests {
    use super::to_json;

    #[test]
    fn numbers_are_written_in_the_shortest_digits() {
        let numbers = [
            0.0,
            -0.0,
            -3.0,
            0.1,
            f64::NAN,
            f64::INFINITY,
            1e21,
            5e-324,
            999_999_999.0,
            1e9,
            4_294_967_296.0,
        ];
        let known = "[0.0,-0.0,-3.0,0.1,null,null,1e+21,5e-324,999999999.0,1000000000.0,4294967296.0]";
        assert_eq!(to_json(&numbers), known);
        assert_eq!(to_json(&Vec::<u32>::new()), "[]");
        assert_eq!(
            to_json(&(7_u64, Some(true), None::<f64>, -1_i8, (), 'x')),
            "[7,true,null,-1,null,\"x\"]"
        );
    }

    #[test]
    fn letters_are_escaped_where_they_must_be() {
        let letters = "\"\\/\0\u{8}\t\n\u{b}\u{c}\r\u{1f}\u{7f}\u{e9}\u{2028}\u{10348}";
        let escaped = r#""\"\\/\u0000\b\t\n\u000b\f\r\u001f"#;
        assert_eq!(
            to_json(&letters),
            format!("{escaped}\u{7f}\u{e9}\u{2028}\u{10348}\"")
        );
        assert_eq!(to_json(&"plain"), "\"plain\"");
    }
}
