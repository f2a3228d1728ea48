//! The JSON text of an answer, compact, with keys in the order of the types.
//!
//! The same text as `serde_json::to_string` gives. Written here because that function is compiled
//! anew in whichever package calls it, and then for size like that package; and because most
//! pieces of an answer are a few bytes, for which a copy of memory costs a browser more than the
//! bytes themselves.

use serde::ser::{
    Serialize, SerializeMap, SerializeSeq, SerializeStruct, SerializeStructVariant, SerializeTuple,
    SerializeTupleStruct, SerializeTupleVariant, Serializer,
};
use std::fmt;

/// The JSON text of a value; empty where a map has keys that are not texts.
pub fn json_text<T: Serialize + ?Sized>(value: &T) -> String {
    let mut text = Text(Vec::with_capacity(1 << 14));
    match value.serialize(&mut text) {
        Ok(()) => String::from_utf8(text.0).unwrap_or_default(),
        Err(NotText) => String::new(),
    }
}

/// What cannot be told in JSON: a key that is not a text, or a type's own complaint.
#[derive(Debug)]
struct NotText;

impl fmt::Display for NotText {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.write_str("a key that is not a text")
    }
}

impl std::error::Error for NotText {}

impl serde::ser::Error for NotText {
    fn custom<T: fmt::Display>(_: T) -> Self {
        NotText
    }
}

struct Text(Vec<u8>);

impl Text {
    #[inline(never)]
    fn put(&mut self, piece: &[u8]) {
        if piece.len() > 32 {
            self.0.extend_from_slice(piece);
        } else {
            self.0.reserve(32);
            for &byte in piece {
                self.0.push(byte);
            }
        }
    }

    /// A text between quotation marks; what JSON forbids inside is escaped.
    #[inline(never)]
    fn quote(&mut self, text: &str) {
        self.0.reserve(text.len() + 2);
        self.0.push(b'"');
        for &byte in text.as_bytes() {
            if byte >= b' ' && byte != b'"' && byte != b'\\' {
                self.0.push(byte);
                continue;
            }
            match byte {
                b'"' => self.put(b"\\\""),
                b'\\' => self.put(b"\\\\"),
                b'\n' => self.put(b"\\n"),
                b'\r' => self.put(b"\\r"),
                b'\t' => self.put(b"\\t"),
                0x08 => self.put(b"\\b"),
                0x0c => self.put(b"\\f"),
                other => {
                    let digit = |value: u8| value + if value < 10 { b'0' } else { b'a' - 10 };
                    self.put(b"\\u00");
                    self.put(&[digit(other >> 4), digit(other & 15)]);
                }
            }
        }
        self.0.push(b'"');
    }

    #[inline(never)]
    fn natural(&mut self, mut value: u128) {
        let mut digits = [b'0'; 39];
        let mut used = 0;
        for place in digits.iter_mut().rev() {
            // Wide division is slow in a browser, and most numbers are narrow.
            let digit = match u64::try_from(value) {
                Ok(narrow) => {
                    value = u128::from(narrow / 10);
                    narrow % 10
                }
                Err(_) => {
                    let digit = value % 10;
                    value /= 10;
                    digit as u64
                }
            };
            *place = b'0' + digit as u8;
            used += 1;
            if value == 0 {
                break;
            }
        }
        self.put(digits.get(digits.len() - used..).unwrap_or_default());
    }

    fn integer(&mut self, value: i128) {
        if value < 0 {
            self.0.push(b'-');
        }
        self.natural(value.unsigned_abs());
    }

    /// The shortest digits that read back as the same number; `null` for what is no number.
    #[inline(never)]
    fn real(&mut self, value: f64) {
        if value.is_finite() {
            self.put(zmij::Buffer::new().format_finite(value).as_bytes());
        } else {
            self.put(b"null");
        }
    }

    fn open(&mut self, bracket: u8, close: u8) -> Parts<'_> {
        self.0.push(bracket);
        Parts {
            text: self,
            first: true,
            close,
        }
    }

    /// A variant that holds something is an object with its name as the only key.
    fn named(&mut self, name: &str) {
        self.0.push(b'{');
        self.quote(name);
        self.0.push(b':');
    }
}

/// The inside of an array or an object.
struct Parts<'a> {
    text: &'a mut Text,
    first: bool,
    close: u8,
}

impl Parts<'_> {
    fn comma(&mut self) {
        if !std::mem::replace(&mut self.first, false) {
            self.text.0.push(b',');
        }
    }

    #[inline(never)]
    fn key(&mut self, key: &str) {
        self.comma();
        self.text.quote(key);
        self.text.0.push(b':');
    }

    fn item<T: Serialize + ?Sized>(&mut self, value: &T) -> Result<(), NotText> {
        self.comma();
        value.serialize(&mut *self.text)
    }

    fn field<T: Serialize + ?Sized>(&mut self, key: &str, value: &T) -> Result<(), NotText> {
        self.key(key);
        value.serialize(&mut *self.text)
    }

    fn close(self) -> Result<(), NotText> {
        self.text.0.push(self.close);
        Ok(())
    }

    /// The end of what [`Text::named`] began.
    fn close_named(self) -> Result<(), NotText> {
        self.text.0.push(self.close);
        self.text.0.push(b'}');
        Ok(())
    }
}

macro_rules! numbers {
    ($($name:ident: $type:ty => $with:ident as $wide:ty;)*) => {
        $(fn $name(self, value: $type) -> Result<(), NotText> {
            self.$with(<$wide>::from(value));
            Ok(())
        })*
    };
}

impl<'a> Serializer for &'a mut Text {
    type Ok = ();
    type Error = NotText;
    type SerializeSeq = Parts<'a>;
    type SerializeTuple = Parts<'a>;
    type SerializeTupleStruct = Parts<'a>;
    type SerializeTupleVariant = Parts<'a>;
    type SerializeMap = Parts<'a>;
    type SerializeStruct = Parts<'a>;
    type SerializeStructVariant = Parts<'a>;

    numbers! {
        serialize_u8: u8 => natural as u128;
        serialize_u16: u16 => natural as u128;
        serialize_u32: u32 => natural as u128;
        serialize_u64: u64 => natural as u128;
        serialize_u128: u128 => natural as u128;
        serialize_i8: i8 => integer as i128;
        serialize_i16: i16 => integer as i128;
        serialize_i32: i32 => integer as i128;
        serialize_i64: i64 => integer as i128;
        serialize_i128: i128 => integer as i128;
        serialize_f32: f32 => real as f64;
        serialize_f64: f64 => real as f64;
    }

    fn serialize_bool(self, value: bool) -> Result<(), NotText> {
        self.put(if value { b"true" } else { b"false" });
        Ok(())
    }

    fn serialize_char(self, value: char) -> Result<(), NotText> {
        self.quote(value.encode_utf8(&mut [0; 4]));
        Ok(())
    }

    fn serialize_str(self, value: &str) -> Result<(), NotText> {
        self.quote(value);
        Ok(())
    }

    fn serialize_bytes(self, value: &[u8]) -> Result<(), NotText> {
        self.collect_seq(value)
    }

    fn serialize_none(self) -> Result<(), NotText> {
        self.serialize_unit()
    }

    fn serialize_some<T: Serialize + ?Sized>(self, value: &T) -> Result<(), NotText> {
        value.serialize(self)
    }

    fn serialize_unit(self) -> Result<(), NotText> {
        self.put(b"null");
        Ok(())
    }

    fn serialize_unit_struct(self, _: &'static str) -> Result<(), NotText> {
        self.serialize_unit()
    }

    fn serialize_unit_variant(
        self,
        _: &'static str,
        _: u32,
        variant: &'static str,
    ) -> Result<(), NotText> {
        self.serialize_str(variant)
    }

    fn serialize_newtype_struct<T: Serialize + ?Sized>(
        self,
        _: &'static str,
        value: &T,
    ) -> Result<(), NotText> {
        value.serialize(self)
    }

    fn serialize_newtype_variant<T: Serialize + ?Sized>(
        self,
        _: &'static str,
        _: u32,
        variant: &'static str,
        value: &T,
    ) -> Result<(), NotText> {
        self.named(variant);
        value.serialize(&mut *self)?;
        self.0.push(b'}');
        Ok(())
    }

    fn serialize_seq(self, _: Option<usize>) -> Result<Parts<'a>, NotText> {
        Ok(self.open(b'[', b']'))
    }

    fn serialize_tuple(self, _: usize) -> Result<Parts<'a>, NotText> {
        Ok(self.open(b'[', b']'))
    }

    fn serialize_tuple_struct(self, _: &'static str, _: usize) -> Result<Parts<'a>, NotText> {
        Ok(self.open(b'[', b']'))
    }

    fn serialize_tuple_variant(
        self,
        _: &'static str,
        _: u32,
        variant: &'static str,
        _: usize,
    ) -> Result<Parts<'a>, NotText> {
        self.named(variant);
        Ok(self.open(b'[', b']'))
    }

    fn serialize_map(self, _: Option<usize>) -> Result<Parts<'a>, NotText> {
        Ok(self.open(b'{', b'}'))
    }

    fn serialize_struct(self, _: &'static str, _: usize) -> Result<Parts<'a>, NotText> {
        Ok(self.open(b'{', b'}'))
    }

    fn serialize_struct_variant(
        self,
        _: &'static str,
        _: u32,
        variant: &'static str,
        _: usize,
    ) -> Result<Parts<'a>, NotText> {
        self.named(variant);
        Ok(self.open(b'{', b'}'))
    }
}

impl SerializeSeq for Parts<'_> {
    type Ok = ();
    type Error = NotText;
    fn serialize_element<T: Serialize + ?Sized>(&mut self, value: &T) -> Result<(), NotText> {
        self.item(value)
    }
    fn end(self) -> Result<(), NotText> {
        self.close()
    }
}

impl SerializeTuple for Parts<'_> {
    type Ok = ();
    type Error = NotText;
    fn serialize_element<T: Serialize + ?Sized>(&mut self, value: &T) -> Result<(), NotText> {
        self.item(value)
    }
    fn end(self) -> Result<(), NotText> {
        self.close()
    }
}

impl SerializeTupleStruct for Parts<'_> {
    type Ok = ();
    type Error = NotText;
    fn serialize_field<T: Serialize + ?Sized>(&mut self, value: &T) -> Result<(), NotText> {
        self.item(value)
    }
    fn end(self) -> Result<(), NotText> {
        self.close()
    }
}

impl SerializeTupleVariant for Parts<'_> {
    type Ok = ();
    type Error = NotText;
    fn serialize_field<T: Serialize + ?Sized>(&mut self, value: &T) -> Result<(), NotText> {
        self.item(value)
    }
    fn end(self) -> Result<(), NotText> {
        self.close_named()
    }
}

impl SerializeMap for Parts<'_> {
    type Ok = ();
    type Error = NotText;
    fn serialize_key<T: Serialize + ?Sized>(&mut self, key: &T) -> Result<(), NotText> {
        self.comma();
        let start = self.text.0.len();
        key.serialize(&mut *self.text)?;
        if self.text.0.get(start) != Some(&b'"') {
            return Err(NotText);
        }
        self.text.0.push(b':');
        Ok(())
    }
    fn serialize_value<T: Serialize + ?Sized>(&mut self, value: &T) -> Result<(), NotText> {
        value.serialize(&mut *self.text)
    }
    fn end(self) -> Result<(), NotText> {
        self.close()
    }
}

impl SerializeStruct for Parts<'_> {
    type Ok = ();
    type Error = NotText;
    fn serialize_field<T: Serialize + ?Sized>(
        &mut self,
        key: &'static str,
        value: &T,
    ) -> Result<(), NotText> {
        self.field(key, value)
    }
    fn end(self) -> Result<(), NotText> {
        self.close()
    }
}

impl SerializeStructVariant for Parts<'_> {
    type Ok = ();
    type Error = NotText;
    fn serialize_field<T: Serialize + ?Sized>(
        &mut self,
        key: &'static str,
        value: &T,
    ) -> Result<(), NotText> {
        self.field(key, value)
    }
    fn end(self) -> Result<(), NotText> {
        self.close_named()
    }
}

#[cfg(test)]
mod tests {
    use super::json_text;
    use serde::Serialize;
    use serde_json::{Value, json};

    #[derive(Serialize)]
    enum Kind {
        Bare,
        Held(u8),
        Pair(i64, f32),
        Named { a: Option<bool>, b: char },
    }

    #[derive(Serialize)]
    struct Everything {
        texts: Vec<String>,
        reals: Vec<f64>,
        wholes: (i8, u64, i128, u128),
        kinds: Vec<Kind>,
        nothing: (),
        value: Value,
    }

    #[test]
    fn the_text_is_that_of_the_library() {
        let all: String = (0..0x250).filter_map(char::from_u32).collect();
        let everything = Everything {
            texts: vec![
                all,
                String::new(),
                "3d⁶ 4s² 🙂 \u{2028}".into(),
                "long enough to be copied as a whole, not byte by byte".into(),
            ],
            reals: vec![
                0.0,
                -0.0,
                1.0,
                1e21,
                1e-7,
                0.1 + 0.2,
                f64::MAX,
                f64::NAN,
                f64::INFINITY,
            ],
            wholes: (-128, u64::MAX, i128::MIN, u128::MAX),
            kinds: vec![
                Kind::Bare,
                Kind::Held(0),
                Kind::Pair(-10, 0.5),
                Kind::Named { a: None, b: '"' },
                Kind::Named {
                    a: Some(true),
                    b: 'é',
                },
            ],
            nothing: (),
            value: json!({"a": [], "b": {}, "c": [1, [2.5, null], {"d": "e"}], "": false}),
        };
        let expected = serde_json::to_string(&everything).expect("it is JSON");
        assert_eq!(json_text(&everything), expected);
    }

    #[test]
    fn keys_are_texts() {
        let odd = std::collections::BTreeMap::from([(vec![1], 2)]);
        assert_eq!(json_text(&odd), "");
    }
}
