//! The JSON Schema of the truss file: kept as it is generated, and satisfied by what is written.
//!
//! To write it anew: `UPDATE_SCHEMA=1 cargo test --features schema --test schema`.

#![cfg(all(feature = "schema", not(target_arch = "wasm32")))]

mod common;

use chordwright::exchange::{read_truss, truss_schema, write_truss};
use common::trusses;
use proptest::prelude::*;
use serde_json::{Map, Value, json};
use std::path::PathBuf;

fn project(file: &str) -> PathBuf {
    PathBuf::from(env!("CARGO_MANIFEST_DIR")).join(file)
}

#[test]
fn the_schema_that_is_kept_is_the_one_that_is_generated() {
    let text = serde_json::to_string_pretty(&truss_schema()).expect("writes") + "\n";
    let kept = project("demo/truss.schema.json");
    if std::env::var_os("UPDATE_SCHEMA").is_some() {
        std::fs::write(&kept, &text).expect("written");
    }
    let kept = std::fs::read_to_string(kept).expect("the schema is kept");
    assert!(kept == text, "demo/truss.schema.json is not what is generated; see the head of this test");
}

/// Whether a value satisfies a schema, as far as this schema goes; what it does not know it refuses to judge.
struct Judge(Value);

impl Judge {
    fn satisfied(&self, schema: &Value, value: &Value) -> bool {
        let schema = schema.as_object().expect("a schema is an object");
        schema.iter().all(|(keyword, wanted)| self.keyword(keyword, wanted, schema, value))
    }

    fn keyword(&self, keyword: &str, wanted: &Value, schema: &Map<String, Value>, value: &Value) -> bool {
        let size = |count: Option<usize>| count.is_none_or(|count| compare(keyword, count as u64, wanted));
        match keyword {
            "$schema" | "$defs" | "title" | "description" => true,
            "$ref" => {
                let path = wanted.as_str().and_then(|path| path.strip_prefix('#')).expect("a place in this schema");
                self.satisfied(self.0.pointer(path).unwrap_or_else(|| panic!("{path} is not there")), value)
            }
            "type" => match wanted {
                Value::Array(types) => types.iter().any(|name| is_of_type(name, value)),
                name => is_of_type(name, value),
            },
            "const" => value == wanted,
            "enum" => wanted.as_array().expect("a list").contains(value),
            "oneOf" => {
                wanted.as_array().expect("a list").iter().filter(|schema| self.satisfied(schema, value)).count() == 1
            }
            "required" => {
                let keys = wanted.as_array().expect("a list").iter().map(|key| key.as_str().expect("a key"));
                value.as_object().is_none_or(|object| keys.into_iter().all(|key| object.contains_key(key)))
            }
            "properties" => value.as_object().is_none_or(|object| {
                object.iter().all(|(key, value)| wanted.get(key).is_none_or(|schema| self.satisfied(schema, value)))
            }),
            "additionalProperties" => {
                assert_eq!(wanted, &json!(false));
                let known = schema["properties"].as_object().expect("properties");
                value.as_object().is_none_or(|object| object.keys().all(|key| known.contains_key(key)))
            }
            "items" => value.as_array().is_none_or(|items| items.iter().all(|item| self.satisfied(wanted, item))),
            "minItems" | "maxItems" => size(value.as_array().map(Vec::len)),
            "minLength" | "maxLength" => size(value.as_str().map(|text| text.chars().count())),
            "uniqueItems" => {
                let repeated = |items: &Vec<Value>| (1..items.len()).any(|i| items[..i].contains(&items[i]));
                value.as_array().is_none_or(|items| !repeated(items))
            }
            "pattern" => {
                assert_eq!(
                    wanted, r"^[^\u0000-\u001f\u007f-\u009f]*$",
                    "the one pattern there is: no control characters"
                );
                value.as_str().is_none_or(|text| !text.chars().any(char::is_control))
            }
            _ => panic!("the keyword {keyword} is not known here"),
        }
    }
}

fn compare(keyword: &str, count: u64, wanted: &Value) -> bool {
    let limit = wanted.as_u64().expect("a number");
    if keyword.starts_with("min") { count >= limit } else { count <= limit }
}

fn is_of_type(name: &Value, value: &Value) -> bool {
    match name.as_str().expect("the name of a type") {
        "object" => value.is_object(),
        "array" => value.is_array(),
        "string" => value.is_string(),
        "boolean" => value.is_boolean(),
        "integer" => value.is_i64() || value.is_u64(),
        name => panic!("the type {name} is not known here"),
    }
}

fn satisfied(text: &str) -> bool {
    let judge = Judge(truss_schema());
    judge.satisfied(&judge.0, &serde_json::from_str(text).expect("JSON"))
}

fn demo(name: &str) -> String {
    std::fs::read_to_string(project(&format!("demo/{name}.truss.json"))).expect("a demonstration")
}

#[test]
fn the_demonstrations_satisfy_it() {
    for name in ["barn-roof-slips", "boathouse-first-issue", "boathouse-roof", "mill-footbridge"] {
        assert!(satisfied(&demo(name)), "{name}");
    }
}

proptest! {
    #![proptest_config(ProptestConfig { failure_persistence: None, cases: 100, ..ProptestConfig::default() })]

    #[test]
    fn whatever_is_written_satisfies_it(truss in trusses()) {
        prop_assert!(satisfied(&write_truss(&truss)));
    }
}

#[test]
fn it_refuses_what_the_reader_refuses() {
    let sheet = demo("boathouse-roof");
    for (from, to) in [
        ("\"chordwright\": 1", "\"chordwright\": 2"),
        ("\"chordwright\": 1,", ""),
        ("\"unit\": \"in\"", "\"unit\": \"yd\""),
        ("\"unit\": \"in\",", ""),
        ("\"step\": \"1/16\",", ""),
        ("\"title\"", "\"Title\""),
        ("\"title\": \"", "\"title\": null, \"titel\": \""),
        ("{\"mark\": \"L0\"", "{\"mark\": \"\""),
        ("{\"mark\": \"L0\"", "{\"mark\": \"L0\", \"z\": \"0\""),
        ("{\"mark\": \"L0\"", "{\"mark\": \"L0\", \"loose\": 1"),
        ("{\"mark\": \"L0\"", "{\"mark\": \"a mark of twenty-five chars\""),
        ("{\"mark\": \"L0\", \"x\": \"0\"", "{\"mark\": \"L0\", \"x\": 0.5"),
        ("{\"mark\": \"L0\", \"x\": \"0\"", "{\"mark\": \"L0\""),
        ("\"role\": \"bottom chord\"", "\"role\": \"chord\""),
        ("\"kind\": \"pin\"", "\"kind\": \"fixed\""),
        ("\"kind\": \"pin\"", "\"kind\": \"pin\", \"normal\": [\"0\", \"1\"]"),
        ("\"normal\": [\"0\", \"1\"]", "\"normal\": [\"0\"]"),
        ("\"kind\": \"length\"", "\"kind\": \"Length\""),
        ("\"kind\": \"length\"", "\"kind\": \"square\""),
        ("\"kind\": \"length\"", "\"kind\": \"length\", \"at\": \"L0\""),
        ("\"joints\": [\"L0\"", "\"joints\": [0"),
    ] {
        let changed = sheet.replacen(from, to, 1);
        assert_ne!(changed, sheet, "`{from}` stands in the sheet");
        assert!(read_truss(changed.as_bytes()).is_err(), "the reader takes `{to}`");
        assert!(!satisfied(&changed), "the schema takes `{to}`");
    }
}

fn truss_with(list: &str, entry: &Value) -> Value {
    let joints = json!([
        {"mark": "A", "x": "0", "y": "0"}, {"mark": "B", "x": "4'", "y": "0"},
        {"mark": "C", "x": "4'", "y": "3'"}, {"mark": "D", "x": "0", "y": "3'"},
    ]);
    let mut truss = json!({"chordwright": 1, "title": "", "unit": "in", "step": "1/16", "joints": joints});
    match list {
        "" => truss = entry.clone(),
        "joints" => truss["joints"] = json!([entry]),
        _ => truss[list] = json!([entry]),
    }
    truss
}

/// Entries with every key that they may have.
fn full_entries() -> Vec<(&'static str, Value)> {
    let mut entries = vec![
        (
            "",
            json!({"chordwright": 1, "title": "T", "unit": "mm", "step": 1, "joints": [], "members": [], "supports": [], "figures": []}),
        ),
        ("joints", json!({"mark": "A", "x": "0", "y": 0, "loose": true})),
        ("members", json!({"mark": "W1", "from": "A", "to": "B", "role": "web"})),
        ("supports", json!({"kind": "pin", "joint": "A"})),
        ("supports", json!({"kind": "roller", "joint": "A", "normal": ["0", 1]})),
    ];
    for (kind, value) in [("length", "1'"), ("run", "-1'"), ("rise", "1'"), ("pitch", "6:12")] {
        entries
            .push(("figures", json!({"id": "f", "kind": kind, "from": "A", "to": "B", "value": value, "step": "0"})));
    }
    for (kind, value) in [("angle", "26.6"), ("spread", "1/5")] {
        entries.push((
            "figures",
            json!({"id": "f", "kind": kind, "at": "A", "from": "B", "to": "C", "value": value, "step": "0"}),
        ));
    }
    entries.push(("figures", json!({"id": "f", "kind": "square", "at": "A", "from": "B", "to": "D", "step": "0"})));
    for kind in ["in line", "level", "plumb"] {
        entries.push(("figures", json!({"id": "f", "kind": kind, "joints": ["A", "B", "C"], "step": "0"})));
    }
    for kind in ["parallel", "equal"] {
        let figure = json!({"id": "f", "kind": kind, "first": ["A", "B"], "second": ["C", "D"], "step": "0"});
        entries.push(("figures", figure));
    }
    entries
}

/// What the schema says of an entry: its keys and those that it needs.
fn described<'s>(schema: &'s Value, list: &str, entry: &Value) -> &'s Map<String, Value> {
    let definition = match list {
        "" => schema,
        "joints" => &schema["$defs"]["Joint"],
        "members" => &schema["$defs"]["Member"],
        kinds => {
            let name = if kinds == "supports" { "Support" } else { "Figure" };
            let kinds = schema["$defs"][name]["oneOf"].as_array().expect("one of several kinds");
            let fits = |kind: &&Value| kind["properties"]["kind"]["const"] == entry["kind"];
            kinds.iter().find(fits).unwrap_or_else(|| panic!("the schema has no kind {}", entry["kind"]))
        }
    };
    definition.as_object().expect("an object")
}

fn reads(truss: &Value) -> Result<(), String> {
    read_truss(truss.to_string().as_bytes()).map(drop).map_err(|error| error.to_string())
}

#[test]
fn reader_and_schema_take_the_same_keys() {
    let schema = truss_schema();
    for (list, entry) in full_entries() {
        let described = described(&schema, list, &entry);
        assert_eq!(described["additionalProperties"], json!(false), "{entry}");
        let mut known: Vec<&String> = described["properties"].as_object().expect("keys").keys().collect();
        let mut used: Vec<&String> = entry.as_object().expect("keys").keys().collect();
        known.sort();
        used.sort();
        assert_eq!(known, used, "{entry}");
        assert_eq!(reads(&truss_with(list, &entry)), Ok(()), "{entry}");
        for key in used {
            let mut without = entry.clone();
            without.as_object_mut().expect("keys").remove(key);
            let needed = described["required"].as_array().expect("a list").contains(&json!(key));
            assert_eq!(reads(&truss_with(list, &without)).is_err(), needed, "{entry} without {key}");
        }
        let mut more = entry.clone();
        more["surprise"] = json!("1");
        let refused = reads(&truss_with(list, &more)).expect_err("an unknown key");
        assert!(refused.contains("surprise"), "{refused}");
    }
}
