//! Third step: the located tree → the structs of `written`, by serde.
//!
//! Reads the tree and not the text again, so that leaves stay as written and keep their places.

use std::fmt;
use std::ops::Range;

use serde::de::value::{StrDeserializer, U64Deserializer};
use serde::de::{
    self, DeserializeSeed, Deserializer, EnumAccess, IntoDeserializer, MapAccess, SeqAccess,
    VariantAccess, Visitor,
};
use serde::forward_to_deserialize_any;

use super::text::{KIND, LOCATED, Text, place};
use super::tree::{Kind, Node};
use crate::diagnostic::Diagnostic;

/// Fills a value from a tree.
///
/// # Errors
/// The first thing that does not fit. After a clean shape pass there is none.
pub(super) fn read<'t, T: de::Deserialize<'t>>(node: &'t Node) -> Result<T, Diagnostic> {
    T::deserialize(Reader::Node(node))
        .map_err(|error| Diagnostic::error("wrong-kind", error.message).at(error.range.map(place)))
}

#[derive(Debug)]
struct Error {
    message: String,
    range: Option<Range<usize>>,
}

impl fmt::Display for Error {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.write_str(&self.message)
    }
}

impl std::error::Error for Error {}

impl de::Error for Error {
    fn custom<T: fmt::Display>(message: T) -> Self {
        Self { message: message.to_string(), range: None }
    }
}

#[derive(Clone, Copy)]
enum Reader<'t> {
    Node(&'t Node),
    Key(&'t Text),
}

impl<'t> Reader<'t> {
    fn range(self) -> &'t Range<usize> {
        match self {
            Self::Node(node) => &node.range,
            Self::Key(key) => key.range(),
        }
    }

    /// Gives an error that has no place yet the place of this value.
    fn placed<T>(self, result: Result<T, Error>) -> Result<T, Error> {
        result.map_err(|error| Error {
            range: error.range.or_else(|| Some(self.range().clone())),
            ..error
        })
    }
}

impl<'de> Deserializer<'de> for Reader<'de> {
    type Error = Error;

    fn deserialize_any<V: Visitor<'de>>(self, visitor: V) -> Result<V::Value, Error> {
        let result = match self {
            Self::Key(key) => visitor.visit_borrowed_str(key.as_str()),
            Self::Node(node) => match &node.kind {
                Kind::Empty => visitor.visit_unit(),
                Kind::Leaf(text) => visitor.visit_borrowed_str(text),
                Kind::List(items) => visitor.visit_seq(Items(items.iter())),
                Kind::Map(entries) => visitor.visit_map(Entries(entries.iter(), None)),
            },
        };
        self.placed(result)
    }

    fn deserialize_bool<V: Visitor<'de>>(self, visitor: V) -> Result<V::Value, Error> {
        match self {
            Self::Node(Node { kind: Kind::Leaf(text), .. }) if text == "true" => {
                visitor.visit_bool(true)
            }
            Self::Node(Node { kind: Kind::Leaf(text), .. }) if text == "false" => {
                visitor.visit_bool(false)
            }
            other => other.deserialize_any(visitor),
        }
    }

    fn deserialize_option<V: Visitor<'de>>(self, visitor: V) -> Result<V::Value, Error> {
        visitor.visit_some(self)
    }

    fn deserialize_newtype_struct<V: Visitor<'de>>(
        self,
        _: &'static str,
        visitor: V,
    ) -> Result<V::Value, Error> {
        visitor.visit_newtype_struct(self)
    }

    fn deserialize_tuple_struct<V: Visitor<'de>>(
        self,
        name: &'static str,
        _: usize,
        visitor: V,
    ) -> Result<V::Value, Error> {
        if name == LOCATED {
            self.placed(visitor.visit_seq(Parts(self, 0)))
        } else {
            self.deserialize_any(visitor)
        }
    }

    fn deserialize_enum<V: Visitor<'de>>(
        self,
        name: &'static str,
        _: &'static [&'static str],
        visitor: V,
    ) -> Result<V::Value, Error> {
        if name == KIND {
            return self.placed(visitor.visit_enum(ByKind(self)));
        }
        match self {
            // A word that names a variant without content.
            Self::Node(Node { kind: Kind::Leaf(word), .. }) => {
                let word: StrDeserializer<'_, Error> = word.as_str().into_deserializer();
                self.placed(visitor.visit_enum(word))
            }
            _ => self.deserialize_any(visitor),
        }
    }

    forward_to_deserialize_any! {
        i8 i16 i32 i64 i128 u8 u16 u32 u64 u128 f32 f64 char str string bytes byte_buf unit unit_struct
        seq tuple map struct identifier ignored_any
    }
}

/// Start, end and value of a located value.
struct Parts<'t>(Reader<'t>, u8);

impl<'t> SeqAccess<'t> for Parts<'t> {
    type Error = Error;

    fn next_element_seed<T: DeserializeSeed<'t>>(
        &mut self,
        seed: T,
    ) -> Result<Option<T::Value>, Error> {
        self.1 += 1;
        let number = |byte: usize| -> U64Deserializer<Error> {
            u64::try_from(byte).unwrap_or(u64::MAX).into_deserializer()
        };
        match self.1 {
            1 => seed.deserialize(number(self.0.range().start)).map(Some),
            2 => seed.deserialize(number(self.0.range().end)).map(Some),
            3 => seed.deserialize(self.0).map(Some),
            _ => Ok(None),
        }
    }
}

struct Items<'t>(std::slice::Iter<'t, Node>);

impl<'t> SeqAccess<'t> for Items<'t> {
    type Error = Error;

    fn next_element_seed<T: DeserializeSeed<'t>>(
        &mut self,
        seed: T,
    ) -> Result<Option<T::Value>, Error> {
        self.0.next().map(|node| seed.deserialize(Reader::Node(node))).transpose()
    }
}

struct Entries<'t>(indexmap::map::Iter<'t, Text, Node>, Option<&'t Node>);

impl<'t> MapAccess<'t> for Entries<'t> {
    type Error = Error;

    fn next_key_seed<K: DeserializeSeed<'t>>(
        &mut self,
        seed: K,
    ) -> Result<Option<K::Value>, Error> {
        let Some((key, node)) = self.0.next() else { return Ok(None) };
        self.1 = Some(node);
        seed.deserialize(Reader::Key(key)).map(Some)
    }

    fn next_value_seed<V: DeserializeSeed<'t>>(&mut self, seed: V) -> Result<V::Value, Error> {
        let node = self.1.take().ok_or_else(|| de::Error::custom("a value without its key"))?;
        seed.deserialize(Reader::Node(node))
    }
}

/// Picks the variant `Word`, `List` or `Map` by what the value is.
struct ByKind<'t>(Reader<'t>);

impl<'t> EnumAccess<'t> for ByKind<'t> {
    type Error = Error;
    type Variant = Self;

    fn variant_seed<V: DeserializeSeed<'t>>(self, seed: V) -> Result<(V::Value, Self), Error> {
        let variant = match self.0 {
            Reader::Node(Node { kind: Kind::List(_), .. }) => "List",
            Reader::Node(Node { kind: Kind::Map(_), .. }) => "Map",
            _ => "Word",
        };
        let name: StrDeserializer<'_, Error> = variant.into_deserializer();
        Ok((seed.deserialize(name)?, self))
    }
}

impl<'t> VariantAccess<'t> for ByKind<'t> {
    type Error = Error;

    fn unit_variant(self) -> Result<(), Error> {
        Ok(())
    }

    fn newtype_variant_seed<T: DeserializeSeed<'t>>(self, seed: T) -> Result<T::Value, Error> {
        seed.deserialize(self.0)
    }

    fn tuple_variant<V: Visitor<'t>>(self, _: usize, visitor: V) -> Result<V::Value, Error> {
        self.0.deserialize_any(visitor)
    }

    fn struct_variant<V: Visitor<'t>>(
        self,
        _: &'static [&'static str],
        visitor: V,
    ) -> Result<V::Value, Error> {
        self.0.deserialize_any(visitor)
    }
}
