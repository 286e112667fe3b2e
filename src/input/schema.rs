//! JSON Schema (draft 2020-12) of the case file and of a bid, from the structs that read them.

use super::quantity::Kind;
use super::raw::{CapacityText, DiameterText, PositionText, RawBid, RawDiameters, RawFile, ResistanceText, StageText};
use super::reader::{Anything, At, FromTable, List, Many, Named, Quantity};
use schemars::transform::{Transform, transform_subschemas};
use schemars::{JsonSchema, Schema, SchemaGenerator, json_schema};
use serde_json::Value;
use std::borrow::Cow;

/// The schema of a case file.
pub fn case_schema() -> Value {
    whole::<RawFile>("Case of a dividing-wall column")
}

/// The schema of a bid.
pub fn bid_schema() -> Value {
    whole::<RawBid>("Bid for the internals of a dividing-wall column")
}

fn whole<T: JsonSchema>(title: &str) -> Value {
    let mut schema = schemars::generate::SchemaSettings::draft2020_12().into_generator().into_root_schema_for::<T>();
    WithoutNull.transform(&mut schema);
    schema.insert("title".to_owned(), Value::from(title));
    schema.to_value()
}

/// TOML has no null: a key that may be left out is left out.
struct WithoutNull;

impl Transform for WithoutNull {
    fn transform(&mut self, schema: &mut Schema) {
        transform_subschemas(self, schema);
        let Some(object) = schema.as_object_mut() else {
            return;
        };
        if let Some(Value::Array(types)) = object.get_mut("type") {
            types.retain(|kind| kind != "null");
            if let [only] = types.as_slice() {
                let only = only.clone();
                object.insert("type".to_owned(), only);
            }
        }
        if let Some(Value::Array(choices)) = object.get_mut("anyOf") {
            choices.retain(|choice| choice.get("type").is_none_or(|kind| kind != "null"));
            if let [Value::Object(only)] = choices.as_slice() {
                let only = only.clone();
                object.remove("anyOf");
                for (key, value) in only {
                    object.entry(key).or_insert(value);
                }
            }
        }
    }
}

/// A number and something behind it; the unit itself is the program's business.
const QUANTITY_PATTERN: &str = r"^\s*[+\-−]?(\d+\.?\d*|\.\d+)([eE][+-]?\d+)?\s*\S.*$";

impl<K: Kind> JsonSchema for Quantity<K> {
    fn inline_schema() -> bool {
        true
    }
    fn schema_name() -> Cow<'static, str> {
        Cow::Borrowed(K::NOUN)
    }
    fn json_schema(_: &mut SchemaGenerator) -> Schema {
        json_schema!({
            "type": "string",
            "title": format!("{} with its unit ({})", K::NOUN, K::UNITS),
            "pattern": QUANTITY_PATTERN,
            "examples": [K::EXAMPLE],
        })
    }
}

impl<T: JsonSchema> JsonSchema for At<T> {
    fn inline_schema() -> bool {
        true
    }
    fn schema_name() -> Cow<'static, str> {
        T::schema_name()
    }
    fn json_schema(generator: &mut SchemaGenerator) -> Schema {
        let mut schema = T::json_schema(generator);
        schema.remove("format");
        schema
    }
}

impl JsonSchema for Anything {
    fn inline_schema() -> bool {
        true
    }
    fn schema_name() -> Cow<'static, str> {
        Cow::Borrowed("anything")
    }
    fn json_schema(_: &mut SchemaGenerator) -> Schema {
        json_schema!({})
    }
}

impl<T: JsonSchema> JsonSchema for List<T> {
    fn inline_schema() -> bool {
        true
    }
    fn schema_name() -> Cow<'static, str> {
        Cow::Owned(format!("list of {}", T::schema_name()))
    }
    fn json_schema(generator: &mut SchemaGenerator) -> Schema {
        json_schema!({ "type": "array", "items": generator.subschema_for::<T>() })
    }
}

impl<T: JsonSchema + FromTable> JsonSchema for Many<T> {
    fn inline_schema() -> bool {
        true
    }
    fn schema_name() -> Cow<'static, str> {
        Cow::Owned(format!("tables {}", T::TITLE))
    }
    fn json_schema(generator: &mut SchemaGenerator) -> Schema {
        json_schema!({ "type": "array", "items": generator.subschema_for::<T>() })
    }
}

impl<T: JsonSchema> JsonSchema for Named<T> {
    fn inline_schema() -> bool {
        true
    }
    fn schema_name() -> Cow<'static, str> {
        Cow::Owned(format!("{} by name", T::schema_name()))
    }
    fn json_schema(generator: &mut SchemaGenerator) -> Schema {
        json_schema!({ "type": "object", "additionalProperties": generator.subschema_for::<T>() })
    }
}

/// A schema by hand for values that may be typed in more than one way.
macro_rules! choice_schema {
    ($type:ty, $name:literal, |$generator:ident| $schema:expr) => {
        impl JsonSchema for $type {
            fn inline_schema() -> bool {
                true
            }
            fn schema_name() -> Cow<'static, str> {
                Cow::Borrowed($name)
            }
            fn json_schema($generator: &mut SchemaGenerator) -> Schema {
                $schema
            }
        }
    };
}

use super::quantity as kind;

choice_schema!(DiameterText, "diameter", |generator| {
    let parts = generator.subschema_for::<RawDiameters>();
    json_schema!({
        "anyOf": [{ "type": "string", "examples": ["size", "3.10 m"] }, parts],
    })
});

choice_schema!(PositionText, "position", |generator| {
    let lengths = generator.subschema_for::<List<Quantity<kind::Length>>>();
    json_schema!({
        "anyOf": [
            { "type": "string", "examples": ["equal flood", "equal pressure drop", "vapour load", "0.210 m"] },
            lengths,
        ],
    })
});

choice_schema!(StageText, "stage", |_generator| json_schema!({ "type": ["string", "integer"] }));

choice_schema!(CapacityText, "capacity", |generator| {
    let velocity = generator.subschema_for::<Quantity<kind::Velocity>>();
    json_schema!({
        "anyOf": [
            velocity,
            {
                "type": "array",
                "minItems": 1,
                "items": {
                    "type": "array",
                    "prefixItems": [{ "type": "number" }, velocity],
                    "minItems": 2,
                    "maxItems": 2,
                },
            },
        ],
    })
});

choice_schema!(ResistanceText, "resistance", |generator| {
    let gradient = generator.subschema_for::<Quantity<kind::Gradient>>();
    let factor = generator.subschema_for::<Quantity<kind::FFactor>>();
    json_schema!({
        "anyOf": [
            { "type": "number" },
            gradient,
            {
                "type": "array",
                "minItems": 2,
                "items": {
                    "type": "array",
                    "prefixItems": [factor, gradient],
                    "minItems": 2,
                    "maxItems": 2,
                },
            },
        ],
    })
});
