//! Writing a truss file: one joint, member, support or figure a line, so that two issues can be compared line by line.

use crate::truss::{Figure, FigureKind, Joint, JointId, Member, Support, SupportKind, Truss};

/// The text of a truss file: reading it gives the same truss, and every value as it was typed.
pub fn write_truss(truss: &Truss) -> String {
    let mut text = format!(
        "{{\n  \"chordwright\": 1,\n  \"title\": {},\n  \"unit\": {},\n  \"step\": {}",
        quoted(&truss.title),
        quoted(truss.unit.symbol()),
        quoted(&truss.step.text)
    );
    list(&mut text, "joints", truss.joints.iter().map(joint));
    list(&mut text, "members", truss.members.iter().map(|item| member(truss, item)));
    list(&mut text, "supports", truss.supports.iter().map(|item| support(truss, item)));
    list(&mut text, "figures", truss.figures.iter().map(|item| figure(truss, item)));
    text.push_str("\n}\n");
    text
}

fn list(text: &mut String, name: &str, rows: impl Iterator<Item = Row>) {
    let rows: Vec<String> = rows.map(|row| format!("    {{{}}}", row.0)).collect();
    if rows.is_empty() {
        text.push_str(&format!(",\n  \"{name}\": []"));
    } else {
        text.push_str(&format!(",\n  \"{name}\": [\n{}\n  ]", rows.join(",\n")));
    }
}

/// A JSON string.
fn quoted(text: &str) -> String {
    serde_json::to_string(text).unwrap_or_default()
}

/// The entries of one object, in order.
struct Row(String);

impl Row {
    fn new(key: &str, text: &str) -> Row {
        Row(String::new()).raw(key, &quoted(text))
    }

    fn text(self, key: &str, text: &str) -> Row {
        self.raw(key, &quoted(text))
    }

    fn raw(mut self, key: &str, json: &str) -> Row {
        let comma = if self.0.is_empty() { "" } else { ", " };
        self.0.push_str(&format!("{comma}\"{key}\": {json}"));
        self
    }

    fn joints(self, truss: &Truss, key: &str, joints: &[JointId]) -> Row {
        let marks: Vec<String> = joints.iter().map(|id| quoted(truss.mark(*id))).collect();
        self.raw(key, &format!("[{}]", marks.join(", ")))
    }

    fn pair(self, truss: &Truss, from: JointId, to: JointId) -> Row {
        self.text("from", truss.mark(from)).text("to", truss.mark(to))
    }
}

fn joint(joint: &Joint) -> Row {
    let row = Row::new("mark", &joint.mark).text("x", &joint.x.text).text("y", &joint.y.text);
    if joint.loose { row.raw("loose", "true") } else { row }
}

fn member(truss: &Truss, member: &Member) -> Row {
    Row::new("mark", &member.mark).pair(truss, member.from, member.to).text("role", member.role.name())
}

fn support(truss: &Truss, support: &Support) -> Row {
    let row = Row::new("joint", truss.mark(support.joint));
    match &support.kind {
        SupportKind::Pin => row.text("kind", "pin"),
        SupportKind::Roller { normal: [x, y] } => {
            row.text("kind", "roller").raw("normal", &format!("[{}, {}]", quoted(&x.text), quoted(&y.text)))
        }
    }
}

fn figure(truss: &Truss, figure: &Figure) -> Row {
    let row = Row::new("id", &figure.mark).text("kind", figure.kind.name());
    let row = match &figure.kind {
        FigureKind::Length { from, to, .. }
        | FigureKind::Run { from, to, .. }
        | FigureKind::Rise { from, to, .. }
        | FigureKind::Pitch { from, to, .. } => row.pair(truss, *from, *to),
        FigureKind::Angle { at, from, to, .. }
        | FigureKind::Spread { at, from, to, .. }
        | FigureKind::Square { at, from, to } => row.text("at", truss.mark(*at)).pair(truss, *from, *to),
        FigureKind::InLine { joints } | FigureKind::Level { joints } | FigureKind::Plumb { joints } => {
            row.joints(truss, "joints", joints)
        }
        FigureKind::Parallel { first, second } | FigureKind::Equal { first, second } => {
            row.joints(truss, "first", first).joints(truss, "second", second)
        }
    };
    let row = match figure.kind.value_text() {
        Some(value) => row.text("value", &value),
        None => row,
    };
    match &figure.step {
        Some(step) => row.text("step", &step.text),
        None => row,
    }
}
