//! Closing with all joints loose, clean and with a slip.

use crate::close_help::generate::{Planted, SHAPES, clean, slip};
use crate::table::Row;
use crate::timing::{alone, exponent, time};
use chordwright::checks::{CloseState, Effort, close};
use chordwright::exact::{ratio, whole};
use chordwright::truss::{FigureKind, Truss};
use std::time::Duration;

const PANELS: [usize; 5] = [10, 20, 40, 80, 200];
const SEED: u64 = 3;

/// What is done to a clean drawing.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
enum Slip {
    None,
    /// A member's length in the middle of the truss, an inch too long.
    Length,
    /// A piece of the string in the middle of the truss, half an inch too long.
    String,
}

/// Seconds by number of panels: the slowest of all shapes.
pub(crate) fn measure() -> Result<Vec<Row>, String> {
    let mut rows = Vec::new();
    for (kind, what) in [(Slip::None, "clean"), (Slip::Length, "a wrong length"), (Slip::String, "a wrong string")] {
        let mut times: Vec<(usize, Duration)> = Vec::new();
        for panels in PANELS {
            let (time, told) = slowest(panels, kind)?;
            let (name, seconds) = (format!("{panels} panels, {what}"), time.as_secs_f64());
            let row = match panels {
                40 => Row::at_most(name, seconds, 1.0, " s"),
                _ => Row::plain(name, format!("{seconds:.2} s")),
            };
            rows.push(row.with(told));
            times.push((panels, time));
        }
        for [a, b] in [[0, 2], [2, 4]].map(|pair| pair.map(|i| times[i])) {
            let power = exponent([a.0, b.0], [a.1, b.1]);
            rows.push(Row::plain(format!("power of growth, {} to {} panels", a.0, b.0), format!("{power:.2}")));
        }
    }
    Ok(rows)
}

fn slowest(panels: usize, kind: Slip) -> Result<(Duration, String), String> {
    let mut slowest = (Duration::ZERO, String::new());
    for shape in SHAPES {
        let (truss, wrong) = planted(&clean(shape, panels, SEED), kind);
        let told = answered(&truss, wrong)?;
        let run = || close(&truss, &Effort::default());
        let first = time(run);
        let time = if first.as_secs() < 2 { alone(3, run) } else { first };
        slowest = slowest.max((time, format!("{shape:?}: {told}")));
    }
    Ok(slowest)
}

/// The drawing with the slip, and which figure it is in.
fn planted(clean: &Planted, kind: Slip) -> (Truss, Option<usize>) {
    let figures = &clean.truss.figures;
    let of_kind = |wanted: &dyn Fn(&FigureKind) -> bool| -> Vec<usize> {
        (0..figures.len()).filter(|&i| wanted(&figures[i].kind)).collect()
    };
    let (among, by) = match kind {
        Slip::None => return (clean.truss.clone(), None),
        Slip::Length => (of_kind(&|kind| matches!(kind, FigureKind::Length { .. })), whole(1)),
        Slip::String => (of_kind(&|kind| matches!(kind, FigureKind::Run { .. })), ratio(1, 2)),
    };
    let wrong = among[among.len() / 2];
    (slip(&clean.truss, wrong, &by), Some(wrong))
}

/// What was answered, in short; an error where it contradicts what was planted.
fn answered(truss: &Truss, wrong: Option<usize>) -> Result<String, String> {
    let (answer, _) = close(truss, &Effort::default());
    let suspects = answer.suspects.len();
    let is_named = answer.suspects.iter().any(|suspect| Some(suspect.figure.index()) == wrong);
    match (answer.state, wrong) {
        (CloseState::Closes, None) => Ok("closes".into()),
        (CloseState::DoesNotClose, None) | (CloseState::Closes, Some(_)) => Err(format!("wrong: {}", answer.summary)),
        (CloseState::DoesNotClose, _) if is_named => Ok(format!("{suspects} suspects, the slip among them")),
        (state, _) => Ok(format!("{}, {suspects} suspects", state.name())),
    }
}
