//! Texts on the drawing, placed so that they do not stand on each other.

use crate::page::state::camera::Pixel;

/// How a text is anchored.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Anchor {
    /// Begins at its place.
    Start,
    /// Is centred on its place.
    Middle,
    /// Ends at its place.
    End,
}

impl Anchor {
    /// The value of `text-anchor`.
    pub fn name(self) -> &'static str {
        match self {
            Anchor::Start => "start",
            Anchor::Middle => "middle",
            Anchor::End => "end",
        }
    }
}

/// A text on the drawing.
#[derive(Clone, Debug, PartialEq)]
pub struct LabelView {
    /// Where its middle line is.
    pub at: Pixel,
    /// Degrees by which it is turned, clockwise.
    pub turn: f64,
    /// How it is anchored.
    pub anchor: Anchor,
    /// Its style.
    pub class: &'static str,
    /// The text.
    pub text: String,
}

/// Average width of a character of a label, in pixels (12 px type).
pub(super) const CHARACTER: f64 = 6.7;
/// Half the height that a label takes up, in pixels.
const HALF_HEIGHT: f64 = 7.0;
/// The most labels on one drawing.
const MOST: usize = 700;

impl LabelView {
    pub(super) fn width(&self) -> f64 {
        self.text.chars().count() as f64 * CHARACTER
    }

    /// Discs along the text that stand for the room it takes.
    fn discs(&self) -> Vec<Pixel> {
        let width = self.width();
        let start = match self.anchor {
            Anchor::Start => 0.0,
            Anchor::Middle => -width / 2.0,
            Anchor::End => -width,
        };
        let (sin, cos) = self.turn.to_radians().sin_cos();
        let count = (width / HALF_HEIGHT).ceil().max(1.0);
        (0..=count as usize)
            .map(|i| {
                let along = start + width * i as f64 / count;
                Pixel::new(self.at.x + along * cos, self.at.y + along * sin)
            })
            .collect()
    }
}

/// Labels that were given a place, and the room that is taken.
#[derive(Default)]
pub(super) struct Labels {
    placed: Vec<LabelView>,
    taken: std::collections::HashMap<(i32, i32), Vec<Pixel>>,
}

fn tile(pixel: Pixel) -> (i32, i32) {
    ((pixel.x / 16.0).floor() as i32, (pixel.y / 16.0).floor() as i32)
}

impl Labels {
    /// Takes room that no label may stand on.
    pub(super) fn block(&mut self, at: Pixel) {
        self.taken.entry(tile(at)).or_default().push(at);
    }

    fn is_free(&self, disc: Pixel) -> bool {
        let (x, y) = tile(disc);
        let near = (x - 1..=x + 1).flat_map(|x| (y - 1..=y + 1).map(move |y| (x, y)));
        near.filter_map(|key| self.taken.get(&key))
            .flatten()
            .all(|other| disc.distance(*other) >= 2.0 * HALF_HEIGHT - 2.0)
    }

    /// Places the first of the proposals that has room; says whether one had.
    pub(super) fn place(&mut self, proposals: impl IntoIterator<Item = LabelView>) -> bool {
        if self.placed.len() >= MOST {
            return false;
        }
        let fits = |label: &LabelView| label.discs().into_iter().all(|disc| self.is_free(disc));
        let Some(label) = proposals.into_iter().find(fits) else { return false };
        self.force(label);
        true
    }

    /// Places a label whatever stands there.
    pub(super) fn force(&mut self, label: LabelView) {
        for disc in label.discs() {
            self.block(disc);
        }
        self.placed.push(label);
    }

    pub(super) fn into_views(self) -> Vec<LabelView> {
        self.placed
    }
}

/// The turn of a text along a line, in degrees, so that it reads from below or from the right.
pub(super) fn reading_turn(a: Pixel, b: Pixel) -> f64 {
    let turn = (b.y - a.y).atan2(b.x - a.x).to_degrees();
    let upright = match turn {
        t if t > 90.0 => t - 180.0,
        t if t < -90.0 => t + 180.0,
        t => t,
    };
    if upright > 89.9 { -90.0 } else { upright }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn label(x: f64, text: &str) -> LabelView {
        LabelView { at: Pixel::new(x, 0.0), turn: 0.0, anchor: Anchor::Start, class: "", text: text.into() }
    }

    #[test]
    fn a_label_takes_the_first_place_with_room() {
        let mut labels = Labels::default();
        assert!(labels.place([label(0.0, "8'-3\"")]));
        assert!(!labels.place([label(10.0, "6'-0\"")]), "it would stand on the first");
        assert!(labels.place([label(10.0, "6'-0\""), label(80.0, "6'-0\"")]), "the second place is free");
    }

    #[test]
    fn texts_read_from_below_or_from_the_right() {
        let origin = Pixel::new(0.0, 0.0);
        for (x, y, expected) in
            [(1.0, 0.0, 0.0), (-1.0, 0.0, 0.0), (0.0, -1.0, -90.0), (0.0, 1.0, -90.0), (-1.0, -1.0, 45.0)]
        {
            let turn = reading_turn(origin, Pixel::new(x, y));
            assert!(
                (turn.abs() - f64::abs(expected)).abs() < 1e-9 && (-90.0..=90.0).contains(&turn),
                "{x} {y}: {turn}"
            );
        }
    }
}
