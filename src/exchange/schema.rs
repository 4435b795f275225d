//! The truss file as a JSON Schema, for editors and for other programs: generated from types that mirror the file.
//!
//! The schema says which keys there are and of what kind; whether a value can be read and a mark names a joint only the
//! reader knows.

use schemars::{JsonSchema, Schema, SchemaGenerator, generate::SchemaSettings, json_schema};
use std::borrow::Cow;

/// The JSON Schema (draft 2020-12) of the truss file.
pub fn truss_schema() -> serde_json::Value {
    SchemaSettings::draft2020_12().into_generator().into_root_schema_for::<TrussFile>().to_value()
}

/// Types whose schema is written out.
macro_rules! written_out {
    ($($name:ident = $schema:tt)*) => {
        $(
            struct $name;

            impl JsonSchema for $name {
                fn schema_name() -> Cow<'static, str> {
                    stringify!($name).into()
                }

                fn json_schema(_: &mut SchemaGenerator) -> Schema {
                    json_schema!($schema)
                }
            }
        )*
    };
}

written_out! {
    Version = { "description": "The version of the file format.", "enum": [1, "1"] }
    Value = {
        "description": "An exact value as it is typed, such as \"8'-3 3/8\\\"\", \"40'/7\" or \"3.81 m\"; or a whole number. A bare number means the sheet's unit where a length is wanted.",
        "type": ["string", "integer"]
    }
    Pitch = { "description": "Rise and run, such as \"6:12\" or \"6 in 12\".", "type": "string" }
    Mark = {
        "description": "1 to 24 characters, no control characters, unique in its list.",
        "type": "string", "minLength": 1, "maxLength": 24, "pattern": "^[^\\u0000-\\u001f\\u007f-\\u009f]*$"
    }
    JointMark = { "description": "The mark of a joint of this file.", "type": "string", "minLength": 1, "maxLength": 24 }
    Yes = { "type": "boolean" }
    Ends = { "type": "array", "items": { "type": "string" }, "minItems": 2, "maxItems": 2 }
    Normal = {
        "description": "The direction in which a roller holds; [\"0\", \"1\"], upwards, when it is left out.",
        "type": "array", "items": { "type": ["string", "integer"] }, "minItems": 2, "maxItems": 2
    }
    TwoJoints = { "type": "array", "items": { "type": "string" }, "minItems": 2, "uniqueItems": true }
    ThreeJoints = { "type": "array", "items": { "type": "string" }, "minItems": 3, "uniqueItems": true }
}

macro_rules! left_out {
    ($($name:ident)*) => {
        // A key that may be left out, and has no default that could be written.
        $(impl Default for $name { fn default() -> $name { $name } })*
    };
}

left_out! { Value Yes Normal }

/// A truss drawing: joints, members, supports and the figures printed on it.
#[derive(JsonSchema)]
#[schemars(rename = "TrussFile", title = "Chordwright truss file", deny_unknown_fields)]
#[allow(dead_code, reason = "only its schema is used")]
struct TrussFile {
    chordwright: Version,
    /// The title of the sheet.
    #[schemars(default, with = "String")]
    title: Absent,
    unit: Unit,
    /// The printing step of the sheet, a length in `unit`; 0 means that every figure is exact.
    step: Value,
    #[schemars(default, with = "Vec<Joint>", length(max = 50_000))]
    joints: Absent,
    #[schemars(default, with = "Vec<Member>", length(max = 100_000))]
    members: Absent,
    #[schemars(default, with = "Vec<Support>", length(max = 50_000))]
    supports: Absent,
    #[schemars(default, with = "Vec<Figure>", length(max = 100_000))]
    figures: Absent,
}

/// What stands for a key that may be left out: its default cannot be written, so that the schema gives none.
#[derive(Default)]
struct Absent;

/// What a bare number means, and how values print.
#[derive(JsonSchema)]
#[schemars(rename_all = "lowercase")]
#[allow(dead_code, reason = "only its schema is used")]
enum Unit {
    In,
    Ft,
    Mm,
    Cm,
    M,
}

/// A working point. `x` grows to the right, `y` upwards.
#[derive(JsonSchema)]
#[schemars(deny_unknown_fields)]
#[allow(dead_code, reason = "only its schema is used")]
struct Joint {
    mark: Mark,
    x: Value,
    y: Value,
    /// True when the coordinates are only the sketch, and its place has to come from the figures.
    #[schemars(default)]
    loose: Yes,
}

/// A straight piece between two joints.
#[derive(JsonSchema)]
#[schemars(deny_unknown_fields)]
#[allow(dead_code, reason = "only its schema is used")]
struct Member {
    mark: Mark,
    from: JointMark,
    to: JointMark,
    #[schemars(default, with = "Role")]
    role: Absent,
}

/// What a member is for; `other` when it is left out.
#[derive(JsonSchema)]
#[schemars(rename_all = "lowercase")]
#[allow(dead_code, reason = "only its schema is used")]
enum Role {
    #[schemars(rename = "top chord")]
    TopChord,
    #[schemars(rename = "bottom chord")]
    BottomChord,
    Web,
    Post,
    Other,
}

/// What holds a joint.
#[derive(JsonSchema)]
#[schemars(tag = "kind", rename_all = "lowercase", deny_unknown_fields)]
#[allow(dead_code, reason = "only its schema is used")]
enum Support {
    /// Held in every direction.
    Pin { joint: JointMark },
    /// Held along the normal only.
    Roller {
        joint: JointMark,
        #[schemars(default)]
        normal: Normal,
    },
}

/// A value printed on the drawing, or a relation that is declared on it.
#[derive(JsonSchema)]
#[schemars(tag = "kind", rename_all = "lowercase", deny_unknown_fields)]
#[allow(dead_code, reason = "only its schema is used")]
enum Figure {
    /// The distance between two joints: a length, not negative.
    Length {
        id: Mark,
        from: JointMark,
        to: JointMark,
        value: Value,
        #[schemars(default)]
        step: Value,
    },
    /// How far `to` lies to the right of `from`: a length, negative to the left.
    Run {
        id: Mark,
        from: JointMark,
        to: JointMark,
        value: Value,
        #[schemars(default)]
        step: Value,
    },
    /// How far `to` lies above `from`: a length, negative below.
    Rise {
        id: Mark,
        from: JointMark,
        to: JointMark,
        value: Value,
        #[schemars(default)]
        step: Value,
    },
    /// The slope of the line between two joints, unsigned.
    Pitch {
        id: Mark,
        from: JointMark,
        to: JointMark,
        value: Pitch,
        #[schemars(default)]
        step: Value,
    },
    /// The angle at a joint between the lines to two others, in degrees from 0 to 180.
    Angle {
        id: Mark,
        at: JointMark,
        from: JointMark,
        to: JointMark,
        value: Value,
        #[schemars(default)]
        step: Value,
    },
    /// The spread at a joint between the lines to two others: a plain number from 0 to 1.
    Spread {
        id: Mark,
        at: JointMark,
        from: JointMark,
        to: JointMark,
        value: Value,
        #[schemars(default)]
        step: Value,
    },
    /// The lines from a joint to two others are square.
    Square {
        id: Mark,
        at: JointMark,
        from: JointMark,
        to: JointMark,
        #[schemars(default)]
        step: Value,
    },
    /// Three or more joints lie on one line.
    #[schemars(rename = "in line")]
    InLine {
        id: Mark,
        joints: ThreeJoints,
        #[schemars(default)]
        step: Value,
    },
    /// Two lines are parallel.
    Parallel {
        id: Mark,
        first: Ends,
        second: Ends,
        #[schemars(default)]
        step: Value,
    },
    /// Two distances are equal.
    Equal {
        id: Mark,
        first: Ends,
        second: Ends,
        #[schemars(default)]
        step: Value,
    },
    /// Two or more joints lie at one height.
    Level {
        id: Mark,
        joints: TwoJoints,
        #[schemars(default)]
        step: Value,
    },
    /// Two or more joints lie one above the other.
    Plumb {
        id: Mark,
        joints: TwoJoints,
        #[schemars(default)]
        step: Value,
    },
}
