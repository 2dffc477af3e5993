//! The JSON Schema of the plan file, for editors, made of the same tables of
//! keys that the reader uses.

use serde_json::{Map, Value, json};

use super::keys::{Form, Key, Measure, PLAN_TABLE, Table};

/// The schema, draft 2020-12.
pub fn schema() -> Value {
    let mut schema = of_table(&PLAN_TABLE);
    if let Value::Object(members) = &mut schema {
        let dialect = "https://json-schema.org/draft/2020-12/schema";
        members.insert("$schema".to_owned(), json!(dialect));
        members.insert("title".to_owned(), json!("Plan of a well field"));
    }
    schema
}

fn of_table(table: &Table) -> Value {
    let described = |key: &&Key| (key.name.to_owned(), of_key(key));
    let properties: Map<String, Value> = table.keys.iter().map(described).collect();
    let required: Vec<_> = table
        .keys
        .iter()
        .filter(|key| key.required)
        .map(|key| key.name)
        .collect();
    let mut schema = json!({
        "type": "object",
        "description": table.doc,
        "properties": properties,
        "additionalProperties": false,
    });
    let Value::Object(members) = &mut schema else {
        return schema;
    };
    if !required.is_empty() {
        members.insert("required".to_owned(), json!(required));
    }
    if !table.exactly_one.is_empty() {
        let groups: Vec<_> = table
            .exactly_one
            .iter()
            .map(|group| exactly_one(group))
            .collect();
        members.insert("allOf".to_owned(), json!(groups));
    }
    if !table.needs.is_empty() {
        let needs = table
            .needs
            .iter()
            .map(|(key, other)| (key.name.to_owned(), json!([other.name])));
        let needs: Map<String, Value> = needs.collect();
        members.insert("dependentRequired".to_owned(), json!(needs));
    }
    schema
}

fn exactly_one(group: &[&Key]) -> Value {
    let choices: Vec<_> = group
        .iter()
        .map(|key| json!({ "required": [key.name] }))
        .collect();
    json!({ "oneOf": choices })
}

fn of_key(key: &Key) -> Value {
    let mut schema = of_form(&key.form);
    if let Value::Object(members) = &mut schema {
        members.insert("description".to_owned(), json!(key.doc));
    }
    schema
}

fn of_form(form: &Form) -> Value {
    let coordinate = json!({ "type": ["number", "string"] });
    let point = json!({ "type": "array", "items": coordinate, "minItems": 2, "maxItems": 2 });
    match form {
        Form::Text => json!({ "type": "string", "minLength": 1 }),
        Form::OneOf(choices) => json!({ "enum": choices }),
        Form::Crs => json!({ "oneOf": [
            { "type": "string", "pattern": "^[Ee][Pp][Ss][Gg]:[0-9]+$" },
            of_table(&super::keys::CRS_TABLE),
        ] }),
        Form::Quantity(measure) => of_measure(measure),
        Form::Stage(measure) => json!({ "anyOf": [
            of_measure(measure),
            { "type": "array", "items": of_measure(measure), "minItems": 2 },
        ] }),
        Form::LongitudeLatitude | Form::Point => point,
        Form::Points(least) => json!({ "type": "array", "items": point, "minItems": least }),
        Form::Extent => {
            json!({ "type": "array", "items": coordinate, "minItems": 4, "maxItems": 4 })
        }
        Form::Table(table) => of_table(table),
        Form::Tables(table) => json!({ "type": "array", "items": of_table(table) }),
    }
}

/// A bare number, or a text with a unit. Bounds other than zero depend on
/// the plan's units and are left to the reader.
fn of_measure(measure: &Measure) -> Value {
    let mut bare = json!({ "type": "number" });
    if let Value::Object(members) = &mut bare
        && measure.least == 0.0
    {
        let bound = if measure.above {
            "exclusiveMinimum"
        } else {
            "minimum"
        };
        members.insert(bound.to_owned(), json!(0));
    }
    let accepted = measure.dimension.accepted();
    let text =
        json!({ "type": "string", "description": format!("A number with one of {accepted}.") });
    json!({ "anyOf": [bare, text] })
}
