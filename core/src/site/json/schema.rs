//! The JSON Schema (draft 2020-12) of what is written, from the declarations themselves.

extern crate std;

use alloc::string::{String, ToString};
use alloc::vec::Vec;
use std::format;

use serde_json::{Map, Value, json};

/// Objects and words by their name.
pub(super) type Definitions = Map<String, Value>;

/// What a type looks like in JSON.
pub(super) trait Described {
    fn describe(definitions: &mut Definitions) -> Value;
}

/// Of a key: its name, its doc comment, its type.
type Key<'a> = (&'a str, &'a [&'a str], fn(&mut Definitions) -> Value);

impl Described for &str {
    fn describe(_: &mut Definitions) -> Value {
        json!({ "type": "string" })
    }
}

impl Described for String {
    fn describe(_: &mut Definitions) -> Value {
        json!({ "type": "string" })
    }
}

impl Described for bool {
    fn describe(_: &mut Definitions) -> Value {
        json!({ "type": "boolean" })
    }
}

impl Described for f64 {
    fn describe(_: &mut Definitions) -> Value {
        json!({ "type": "number" })
    }
}

macro_rules! whole {
    ($($type:ty),+) => { $(
        impl Described for $type {
            fn describe(_: &mut Definitions) -> Value {
                json!({ "type": "integer", "minimum": 0 })
            }
        }
    )+ };
}
whole!(u8, u16, u32, usize);

impl<T: Described> Described for Option<T> {
    fn describe(definitions: &mut Definitions) -> Value {
        let mut inner = T::describe(definitions);
        match inner.get("type").cloned() {
            Some(kind) => inner["type"] = json!([kind, "null"]),
            None => inner = json!({ "anyOf": [inner, { "type": "null" }] }),
        }
        inner
    }
}

impl<T: Described> Described for Vec<T> {
    fn describe(definitions: &mut Definitions) -> Value {
        json!({ "type": "array", "items": T::describe(definitions) })
    }
}

impl<T: Described, const N: usize> Described for [T; N] {
    fn describe(definitions: &mut Definitions) -> Value {
        json!({ "type": "array", "items": T::describe(definitions), "minItems": N, "maxItems": N })
    }
}

/// A doc comment as one line.
fn line(doc: &[&str]) -> String {
    doc.iter().map(|part| part.trim()).collect::<Vec<_>>().join(" ")
}

fn reference(name: &str) -> Value {
    json!({ "$ref": format!("#/$defs/{name}") })
}

pub(super) fn words(definitions: &mut Definitions, name: &str, about: &[&str], words: &[&str]) -> Value {
    definitions.insert(name.to_string(), json!({ "description": line(about), "enum": words }));
    reference(name)
}

pub(super) fn object(definitions: &mut Definitions, name: &str, about: &[&str], keys: &[Key]) -> Value {
    if !definitions.contains_key(name) {
        let mut properties = Map::new();
        for (key, doc, describe) in keys {
            let mut schema = describe(definitions);
            schema["description"] = line(doc).into();
            properties.insert((*key).to_string(), schema);
        }
        let required: Vec<&str> = keys.iter().map(|(key, ..)| *key).collect();
        let definition = json!({
            "description": line(about),
            "type": "object",
            "properties": properties,
            "required": required,
            "additionalProperties": false,
        });
        definitions.insert(name.to_string(), definition);
    }
    reference(name)
}

/// The whole schema of a document.
pub(super) fn document<T: Described>(title: &str) -> String {
    let mut definitions = Definitions::new();
    let root = T::describe(&mut definitions);
    let schema = json!({
        "$schema": "https://json-schema.org/draft/2020-12/schema",
        "title": title,
        "$ref": root["$ref"],
        "$defs": definitions,
    });
    super::text(&schema)
}
