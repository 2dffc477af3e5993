//! The JSON Schema says the same as the reader.
//!
//! The checker below knows the few words of draft 2020-12 that the schema
//! uses, by the rules of the JSON Schema validation vocabulary.

use mirrorwell::plan::schema;
use serde_json::{Value, json};

use crate::support::SOUND;

fn as_json(toml: &str) -> Value {
    let table: toml::Table = toml::from_str(toml).unwrap();
    serde_json::to_value(table).unwrap()
}

#[test]
fn the_full_example_plan_fits_the_schema() {
    let plan = as_json(include_str!("contract.toml"));
    assert_eq!(faults(&schema(), &plan, "plan"), Vec::<String>::new());
    assert_eq!(
        faults(&schema(), &as_json(SOUND), "plan"),
        Vec::<String>::new()
    );
}

#[test]
fn what_the_reader_refuses_for_its_keys_does_not_fit_the_schema() {
    let spoil = |change: fn(&mut Value)| {
        let mut plan = as_json(SOUND);
        change(&mut plan);
        faults(&schema(), &plan, "plan")
    };
    assert!(!spoil(|plan| plan["colour"] = json!("red")).is_empty());
    assert!(!spoil(|plan| plan["units"] = json!("imperial")).is_empty());
    assert!(!spoil(|plan| plan["well"][0]["injection"] = json!(1)).is_empty());
    assert!(!spoil(|plan| plan["well"][0]["pumping"] = json!(-1)).is_empty());
    assert!(!spoil(|plan| plan["well"][0]["at"] = json!([1])).is_empty());
    assert!(!spoil(|plan| plan["river"][0]["layer"] = json!("a.geojson")).is_empty());
    assert!(!spoil(|plan| plan["aquifer"] = json!([])).is_empty());
}

#[test]
fn every_key_is_explained() {
    fn visit(schema: &Value) {
        for (key, member) in schema["properties"].as_object().into_iter().flatten() {
            assert!(member["description"].is_string(), "{key}");
            visit(member);
            visit(&member["items"]);
        }
    }
    visit(&schema());
}

fn faults(schema: &Value, value: &Value, path: &str) -> Vec<String> {
    let mut found = Vec::new();
    let words = schema.as_object().unwrap();
    for (word, rule) in words {
        let holds = match word.as_str() {
            "type" => has_type(rule, value),
            "enum" => rule.as_array().unwrap().contains(value),
            "minLength" => value
                .as_str()
                .is_none_or(|text| text.len() as u64 >= rule.as_u64().unwrap()),
            "minItems" => value
                .as_array()
                .is_none_or(|items| items.len() as u64 >= rule.as_u64().unwrap()),
            "maxItems" => value
                .as_array()
                .is_none_or(|items| items.len() as u64 <= rule.as_u64().unwrap()),
            "minimum" => value
                .as_f64()
                .is_none_or(|number| number >= rule.as_f64().unwrap()),
            "exclusiveMinimum" => value
                .as_f64()
                .is_none_or(|number| number > rule.as_f64().unwrap()),
            "anyOf" => fitting(rule, value) >= 1,
            "oneOf" => fitting(rule, value) == 1,
            "allOf" => fitting(rule, value) == rule.as_array().unwrap().len(),
            "required" => value.as_object().is_none_or(|table| {
                let keys = rule.as_array().unwrap().iter();
                keys.map(|key| key.as_str().unwrap())
                    .all(|key| table.contains_key(key))
            }),
            "dependentRequired" => value.as_object().is_none_or(|table| {
                let needs = rule.as_object().unwrap().iter();
                let present = needs.filter(|(key, _)| table.contains_key(*key));
                present
                    .flat_map(|(_, others)| others.as_array().unwrap())
                    .all(|other| table.contains_key(other.as_str().unwrap()))
            }),
            "items" => {
                for (index, item) in value.as_array().into_iter().flatten().enumerate() {
                    found.extend(faults(rule, item, &format!("{path}[{index}]")));
                }
                true
            }
            "properties" => {
                for (key, member) in value.as_object().into_iter().flatten() {
                    match rule.get(key) {
                        Some(rule) => found.extend(faults(rule, member, &format!("{path}.{key}"))),
                        None => found.push(format!("{path} has no {key}")),
                    }
                }
                true
            }
            "additionalProperties" => *rule == json!(false),
            "$schema" | "title" | "description" | "pattern" => true,
            other => panic!("the schema uses {other}"),
        };
        if !holds {
            found.push(format!("{path}: {word}"));
        }
    }
    found
}

fn fitting(schemas: &Value, value: &Value) -> usize {
    let schemas = schemas.as_array().unwrap().iter();
    schemas
        .filter(|schema| faults(schema, value, "").is_empty())
        .count()
}

fn has_type(rule: &Value, value: &Value) -> bool {
    let name = match value {
        Value::Null => "null",
        Value::Bool(_) => "boolean",
        Value::Number(_) => "number",
        Value::String(_) => "string",
        Value::Array(_) => "array",
        Value::Object(_) => "object",
    };
    match rule {
        Value::Array(names) => names.contains(&json!(name)),
        _ => *rule == json!(name),
    }
}
