//! What is read from the file keeps its place: [`Text`], [`Word`] and [`Located`].
//!
//! These types are filled by `tree::read` only. It knows them by the names below, hands over the byte range
//! first and then the value; no other deserializer can fill them.

use std::borrow::{Borrow, Cow};
use std::fmt;
use std::hash::{Hash, Hasher};
use std::marker::PhantomData;
use std::ops::{Deref, Range};

use indexmap::IndexMap;
use schemars::{JsonSchema, Schema, SchemaGenerator, json_schema};
use serde::de::{Deserialize, Deserializer, Error, SeqAccess, Visitor};

use crate::diagnostic::Place;

/// The file in which everything of this module was written.
pub const FILE: &str = "project.yaml";
/// Asks the deserializer for `(start, end, value)`.
pub(super) const LOCATED: &str = "$located";
/// An enum of this name takes `Word`, `List` or `Map` by what stands in the file.
pub(super) const KIND: &str = "$kind";

/// A map in the order of the file; keys know their places.
pub type Map<V> = IndexMap<Text, V>;

/// A place in the project file.
#[must_use]
pub fn place(range: Range<usize>) -> Place {
    Place { file: FILE.to_owned(), range }
}

/// A value with the bytes it was read from.
#[derive(Clone, Debug)]
pub struct Located<T> {
    value: T,
    range: Range<usize>,
}

impl<T> Located<T> {
    /// Where the value was written, from its first to its last byte.
    #[must_use]
    pub fn place(&self) -> Place {
        place(self.range.clone())
    }
}

impl<T> Deref for Located<T> {
    type Target = T;
    fn deref(&self) -> &T {
        &self.value
    }
}

/// A leaf or a key as written: `6.10`, `2005`, `no` and `12 kN` alike are text, quotes taken off.
///
/// Two texts are equal when they say the same, wherever they stand; maps are looked up by `&str`.
#[derive(Clone, Debug)]
pub struct Text(Located<String>);

impl Text {
    /// Text read from these bytes.
    pub(super) fn new(text: String, range: Range<usize>) -> Self {
        Self(Located { value: text, range })
    }

    /// The bytes it was read from.
    #[must_use]
    pub fn range(&self) -> &Range<usize> {
        &self.0.range
    }

    /// The text.
    #[must_use]
    pub fn as_str(&self) -> &str {
        &self.0
    }

    /// Where it was written.
    #[must_use]
    pub fn place(&self) -> Place {
        self.0.place()
    }
}

impl Deref for Text {
    type Target = str;
    fn deref(&self) -> &str {
        &self.0
    }
}

impl fmt::Display for Text {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.write_str(self)
    }
}

impl PartialEq for Text {
    fn eq(&self, other: &Self) -> bool {
        self.as_str() == other.as_str()
    }
}

impl Eq for Text {}

impl Hash for Text {
    fn hash<H: Hasher>(&self, state: &mut H) {
        self.as_str().hash(state);
    }
}

impl Borrow<str> for Text {
    fn borrow(&self) -> &str {
        self
    }
}

/// A set of words, each with what it stands for.
pub trait Words: Copy + 'static {
    /// Name of the definition in the schema.
    const NAME: &'static str;
    /// What a reader of the schema sees.
    const DESCRIPTION: &'static str;
    /// Every word that is understood.
    const WORDS: &'static [(&'static str, Self)];
}

/// One word of a fixed set, read.
#[derive(Clone, Debug)]
pub struct Word<T> {
    /// What it stands for.
    pub is: T,
    text: Text,
}

impl<T> Word<T> {
    /// The word as written.
    #[must_use]
    pub fn text(&self) -> &Text {
        &self.text
    }

    /// Where it was written.
    #[must_use]
    pub fn place(&self) -> Place {
        self.text.place()
    }
}

struct LocatedVisitor<T>(PhantomData<T>);

impl<'de, T: Deserialize<'de>> Visitor<'de> for LocatedVisitor<T> {
    type Value = Located<T>;

    fn expecting(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.write_str("a value with its place")
    }

    fn visit_seq<A: SeqAccess<'de>>(self, mut parts: A) -> Result<Located<T>, A::Error> {
        let short = || A::Error::custom("no place");
        let start = parts.next_element()?.ok_or_else(short)?;
        let end = parts.next_element()?.ok_or_else(short)?;
        let value = parts.next_element()?.ok_or_else(short)?;
        Ok(Located { value, range: start..end })
    }
}

impl<'de, T: Deserialize<'de>> Deserialize<'de> for Located<T> {
    fn deserialize<D: Deserializer<'de>>(deserializer: D) -> Result<Self, D::Error> {
        deserializer.deserialize_tuple_struct(LOCATED, 3, LocatedVisitor(PhantomData))
    }
}

impl<'de> Deserialize<'de> for Text {
    fn deserialize<D: Deserializer<'de>>(deserializer: D) -> Result<Self, D::Error> {
        Located::deserialize(deserializer).map(Self)
    }
}

impl<'de, T: Words> Deserialize<'de> for Word<T> {
    fn deserialize<D: Deserializer<'de>>(deserializer: D) -> Result<Self, D::Error> {
        let text = Text::deserialize(deserializer)?;
        T::WORDS
            .iter()
            .find(|(word, _)| *word == text.as_str())
            .map(|&(_, is)| Self { is, text: text.clone() })
            .ok_or_else(|| D::Error::custom(format!("`{text}` is not one of the known words")))
    }
}

impl<T: JsonSchema> JsonSchema for Located<T> {
    fn inline_schema() -> bool {
        T::inline_schema()
    }
    fn schema_name() -> Cow<'static, str> {
        T::schema_name()
    }
    fn schema_id() -> Cow<'static, str> {
        T::schema_id()
    }
    fn json_schema(generator: &mut SchemaGenerator) -> Schema {
        T::json_schema(generator)
    }
}

impl JsonSchema for Text {
    fn inline_schema() -> bool {
        true
    }
    fn schema_name() -> Cow<'static, str> {
        "Text".into()
    }
    fn json_schema(_: &mut SchemaGenerator) -> Schema {
        // What a YAML reader makes of a scalar; it is taken as written all the same.
        json_schema!({ "type": ["string", "number", "boolean"] })
    }
}

impl<T: Words> JsonSchema for Word<T> {
    fn schema_name() -> Cow<'static, str> {
        T::NAME.into()
    }
    fn json_schema(_: &mut SchemaGenerator) -> Schema {
        let words: Vec<&str> = T::WORDS.iter().map(|&(word, _)| word).collect();
        json_schema!({ "description": T::DESCRIPTION, "enum": words })
    }
}
