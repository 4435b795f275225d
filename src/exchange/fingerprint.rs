//! A short mark by which two people know that they speak of the same truss.

use crate::exact::Rational;
use crate::truss::{SupportKind, Truss};
use sha2::{Digest, Sha256};

/// The fingerprint of a truss: the first 16 hexadecimal digits of the SHA-256 of what it says (values, not the way they were
/// typed; marks, roles, supports and figures in their order). The same natively and in every browser.
pub fn fingerprint(truss: &Truss) -> String {
    let mut content = Content(Sha256::new());
    content.text(&truss.title).text(truss.unit.symbol()).value(&truss.step.value);
    for joint in &truss.joints {
        content.text(&joint.mark).value(&joint.x.value).value(&joint.y.value).text(if joint.loose { "l" } else { "s" });
    }
    content.text("members");
    for member in &truss.members {
        content.text(&member.mark).number(member.from.0).number(member.to.0).text(member.role.name());
    }
    content.text("supports");
    for support in &truss.supports {
        content.number(support.joint.0);
        match &support.kind {
            SupportKind::Pin => content.text("pin"),
            SupportKind::Roller { normal: [x, y] } => content.value(&x.value).value(&y.value),
        };
    }
    content.text("figures");
    for figure in &truss.figures {
        content.text(&figure.mark).text(figure.kind.name());
        for joint in figure.kind.joints() {
            content.number(joint.0);
        }
        for written in figure.kind.values() {
            content.value(&written.value);
        }
        content.text(&figure.step.as_ref().map(|step| step.value.to_string()).unwrap_or_default());
    }
    content.0.finalize().iter().take(8).map(|byte| format!("{byte:02x}")).collect()
}

/// Content being hashed: every part with its length before it, so that no two contents read alike.
struct Content(Sha256);

impl Content {
    fn text(&mut self, text: &str) -> &mut Content {
        self.0.update((text.len() as u64).to_le_bytes());
        self.0.update(text.as_bytes());
        self
    }

    fn number(&mut self, number: u32) -> &mut Content {
        self.0.update(number.to_le_bytes());
        self
    }

    fn value(&mut self, value: &Rational) -> &mut Content {
        self.text(&value.to_string())
    }
}
