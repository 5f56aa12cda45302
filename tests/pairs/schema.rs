//! A validator for as much of JSON Schema (draft 2020-12) as the committed schemas use; any other keyword is an error.

use std::path::Path;

use serde_json::{Map, Value};

/// A schema that is committed in `core/schema`.
pub struct Schema(pub Value);

/// Keywords that say nothing about a value.
const WORDS_ONLY: [&str; 4] = ["$schema", "$defs", "title", "description"];

impl Schema {
    pub fn committed(name: &str) -> Self {
        let path = Path::new(env!("CARGO_MANIFEST_DIR")).join("../core/schema").join(name);
        let text = std::fs::read_to_string(&path).unwrap_or_else(|error| panic!("{name}: {error}"));
        Self(serde_json::from_str(&text).unwrap_or_else(|error| panic!("{name}: {error}")))
    }

    /// What of a document is not as the schema says; empty where all of it is.
    pub fn faults(&self, document: &Value) -> Vec<String> {
        let mut faults = Vec::new();
        self.check(&self.0, document, "", &mut faults);
        faults
    }

    /// Objects and words by their name.
    pub fn definitions(&self) -> &Map<String, Value> {
        self.0["$defs"].as_object().expect("$defs")
    }

    fn check(&self, schema: &Value, value: &Value, at: &str, faults: &mut Vec<String>) {
        let mut fault = |what: String| faults.push(format!("{at}: {what}"));
        let schema = schema.as_object().unwrap_or_else(|| panic!("{at}: the schema is no object"));
        for (keyword, rule) in schema {
            match keyword.as_str() {
                word if WORDS_ONLY.contains(&word) => {}
                "type" => {
                    let kinds: Vec<&str> = match rule {
                        Value::Array(kinds) => kinds.iter().filter_map(Value::as_str).collect(),
                        kind => kind.as_str().into_iter().collect(),
                    };
                    if !kinds.iter().any(|kind| is_of(value, kind)) {
                        fault(format!("{value} is no {}", kinds.join(" and no ")));
                    }
                }
                "enum" => {
                    if !rule.as_array().expect("a list of words").contains(value) {
                        fault(format!("{value} is none of {rule}"));
                    }
                }
                "minimum" => {
                    if value.as_f64().is_some_and(|x| x < rule.as_f64().expect("a number")) {
                        fault(format!("{value} is below {rule}"));
                    }
                }
                "minItems" | "maxItems" => {
                    let (limit, count) = (rule.as_u64().expect("a count"), value.as_array().map(Vec::len));
                    let count = count.map(|n| n as u64);
                    if count.is_some_and(|n| if keyword == "minItems" { n < limit } else { n > limit }) {
                        fault(format!("{count:?} entries against {keyword} {limit}"));
                    }
                }
                "required" => {
                    for key in rule.as_array().expect("a list of keys").iter().filter_map(Value::as_str) {
                        if value.as_object().is_some_and(|object| !object.contains_key(key)) {
                            fault(format!("'{key}' is missing"));
                        }
                    }
                }
                "additionalProperties" => {
                    assert_eq!(rule, &Value::Bool(false), "{at}: objects are closed");
                    let known = schema["properties"].as_object().expect("properties");
                    for key in value.as_object().into_iter().flat_map(Map::keys) {
                        if !known.contains_key(key) {
                            fault(format!("no key '{key}'"));
                        }
                    }
                }
                "properties" | "items" | "anyOf" | "$ref" => {}
                other => panic!("{at}: the validator does not know '{other}'"),
            }
        }
        self.check_parts(schema, value, at, faults);
    }

    fn check_parts(&self, schema: &Map<String, Value>, value: &Value, at: &str, faults: &mut Vec<String>) {
        if let (Some(Value::Object(properties)), Value::Object(object)) = (schema.get("properties"), value) {
            for (key, part) in object {
                if let Some(schema) = properties.get(key) {
                    self.check(schema, part, &format!("{at}/{key}"), faults);
                }
            }
        }
        if let (Some(items), Value::Array(list)) = (schema.get("items"), value) {
            for (number, part) in list.iter().enumerate() {
                self.check(items, part, &format!("{at}/{number}"), faults);
            }
        }
        if let Some(Value::Array(choices)) = schema.get("anyOf") {
            let of_each = choices.iter().map(|choice| {
                let mut own = Vec::new();
                self.check(choice, value, at, &mut own);
                own
            });
            // The faults of the choice that fits best.
            faults.extend(of_each.min_by_key(Vec::len).expect("a choice"));
        }
        if let Some(Value::String(name)) = schema.get("$ref") {
            let definition = name.strip_prefix("#/$defs/").and_then(|name| self.definitions().get(name));
            self.check(definition.unwrap_or_else(|| panic!("{at}: no {name}")), value, at, faults);
        }
    }
}

fn is_of(value: &Value, kind: &str) -> bool {
    match kind {
        "null" => value.is_null(),
        "boolean" => value.is_boolean(),
        "integer" => value.is_u64() || value.is_i64(),
        "number" => value.is_number(),
        "string" => value.is_string(),
        "array" => value.is_array(),
        "object" => value.is_object(),
        other => panic!("no type '{other}'"),
    }
}
