//! Paper and scale of the printed sheet.

use super::camera::{Camera, Pixel, Place};
use crate::measure::Unit;

/// Sizes of paper, laid across.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Paper {
    /// ISO 216 A4.
    A4,
    /// ISO 216 A3.
    A3,
    /// ISO 216 A2.
    A2,
    /// ANSI/ASME Y14.1 A, letter.
    Letter,
    /// ANSI/ASME Y14.1 B, tabloid.
    Tabloid,
    /// ANSI/ASME Y14.1 C.
    AnsiC,
}

impl Paper {
    /// All of them.
    pub const ALL: [Paper; 6] = [Paper::A4, Paper::A3, Paper::A2, Paper::Letter, Paper::Tabloid, Paper::AnsiC];

    /// What is usual where this unit is.
    pub fn usual(unit: Unit) -> Paper {
        if unit.is_imperial() { Paper::Letter } else { Paper::A4 }
    }

    /// Its name.
    pub fn name(self) -> &'static str {
        match self {
            Paper::A4 => "A4",
            Paper::A3 => "A3",
            Paper::A2 => "A2",
            Paper::Letter => "ANSI A, letter",
            Paper::Tabloid => "ANSI B, tabloid",
            Paper::AnsiC => "ANSI C",
        }
    }

    /// The name used for its style.
    pub fn class(self) -> &'static str {
        match self {
            Paper::A4 => "sheet paper-a4",
            Paper::A3 => "sheet paper-a3",
            Paper::A2 => "sheet paper-a2",
            Paper::Letter => "sheet paper-letter",
            Paper::Tabloid => "sheet paper-tabloid",
            Paper::AnsiC => "sheet paper-ansi-c",
        }
    }

    /// Width and height in millimetres.
    pub fn size(self) -> (f64, f64) {
        match self {
            Paper::A4 => (297.0, 210.0),
            Paper::A3 => (420.0, 297.0),
            Paper::A2 => (594.0, 420.0),
            Paper::Letter => (279.4, 215.9),
            Paper::Tabloid => (431.8, 279.4),
            Paper::AnsiC => (558.8, 431.8),
        }
    }
}

/// A standard scale: how many times smaller than it is a thing is drawn.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Scale {
    /// How it is written.
    pub name: &'static str,
    /// How many times smaller.
    pub times: u32,
}

const fn scale(name: &'static str, times: u32) -> Scale {
    Scale { name, times }
}

/// The reduction scales that ISO 5455:1979 recommends.
pub(super) const METRIC: [Scale; 7] = [
    scale("1:2", 2),
    scale("1:5", 5),
    scale("1:10", 10),
    scale("1:20", 20),
    scale("1:50", 50),
    scale("1:100", 100),
    scale("1:200", 200),
];

/// Inch scales, so many to the foot (common practice).
pub(super) const IMPERIAL: [Scale; 10] = [
    scale("3\u{2033} = 1\u{2032}-0\u{2033}", 4),
    scale("1 1/2\u{2033} = 1\u{2032}-0\u{2033}", 8),
    scale("1\u{2033} = 1\u{2032}-0\u{2033}", 12),
    scale("3/4\u{2033} = 1\u{2032}-0\u{2033}", 16),
    scale("1/2\u{2033} = 1\u{2032}-0\u{2033}", 24),
    scale("3/8\u{2033} = 1\u{2032}-0\u{2033}", 32),
    scale("1/4\u{2033} = 1\u{2032}-0\u{2033}", 48),
    scale("3/16\u{2033} = 1\u{2032}-0\u{2033}", 64),
    scale("1/8\u{2033} = 1\u{2032}-0\u{2033}", 96),
    scale("1/16\u{2033} = 1\u{2032}-0\u{2033}", 192),
];

/// The standard scales where this unit is, the largest first.
pub fn scales(unit: Unit) -> &'static [Scale] {
    if unit.is_imperial() { &IMPERIAL } else { &METRIC }
}

/// How the sheet is to be printed.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub struct SheetSetup {
    /// The paper; `None` is what is usual for the unit.
    pub paper: Option<Paper>,
    /// How many times smaller it is drawn; `None` is the largest standard scale that fits.
    pub times: Option<u32>,
}

/// The margin on all sides, in millimetres.
pub(super) const MARGIN: f64 = 12.0;
/// One unit of the drawing on paper, in millimetres: letters of 12 units are then 3.6 mm, their capitals 2.6 mm high.
pub(super) const UNIT: f64 = 0.3;
/// Room around the truss for marks, strings and heights, in millimetres: left, right, above, below.
const ROOM: [f64; 4] = [14.0, 26.0, 14.0, 42.0];
/// What the title, the title block and the notice take from the height, in millimetres.
const FRAME: f64 = 44.0;

/// A drawing placed on paper.
#[derive(Clone, Debug, PartialEq)]
pub struct OnPaper {
    /// The paper.
    pub paper: Paper,
    /// The scale, in words; `not to scale` where no standard one fits.
    pub scale: String,
    /// How places come to units of the drawing.
    pub camera: Camera,
    /// Width and height of the drawing, in units.
    pub size: (f64, f64),
}

/// Puts a truss with joints at these places (in its unit) onto the paper.
pub fn on_paper(places: &[Place], unit: Unit, setup: SheetSetup) -> OnPaper {
    let paper = setup.paper.unwrap_or(Paper::usual(unit));
    let (paper_width, paper_height) = paper.size();
    let (width, height) = (paper_width - 2.0 * MARGIN, paper_height - 2.0 * MARGIN - FRAME);
    let ends = |axis: fn(&Place) -> f64| {
        let values = places.iter().map(axis).filter(|value| value.is_finite());
        values.fold((f64::INFINITY, f64::NEG_INFINITY), |(lo, hi), value| (lo.min(value), hi.max(value)))
    };
    let ((left, right), (low, high)) = (ends(|p| p.0), ends(|p| p.1));
    let millimetres = super::camera::to_f64(&unit.in_millimetres());
    let span = [right - left, high - low].map(|span| if span.is_finite() { span * millimetres } else { 0.0 });
    let room = [width - ROOM[0] - ROOM[1], height - ROOM[2] - ROOM[3]];
    let fits = |times: f64| span[0] / times <= room[0] && span[1] / times <= room[1];
    let standard = scales(unit);
    let wished = setup.times.and_then(|times| standard.iter().find(|scale| scale.times == times));
    let chosen = wished.or_else(|| standard.iter().find(|scale| fits(f64::from(scale.times))));
    let times =
        chosen.map_or_else(|| (span[0] / room[0]).max(span[1] / room[1]).max(1.0), |scale| f64::from(scale.times));
    let drawn = span.map(|span| span / times / UNIT);
    let scale = millimetres / times / UNIT;
    let size = (width / UNIT, drawn[1] + (ROOM[2] + ROOM[3]) / UNIT);
    let free = (width - ROOM[0] - ROOM[1]) / UNIT - drawn[0];
    let at = |value: f64| if value.is_finite() { value } else { 0.0 };
    let origin = Pixel::new(ROOM[0] / UNIT + free / 2.0 - at(left) * scale, ROOM[2] / UNIT + at(high) * scale);
    let name = chosen.map_or_else(|| "not to scale".to_string(), |scale| scale.name.to_string());
    OnPaper { paper, scale: name, camera: Camera { scale, origin }, size }
}

#[cfg(test)]
mod tests {
    use super::*;

    /// Places of a truss so wide and high, in feet and metres.
    fn span(width: f64, height: f64) -> [Place; 2] {
        [(0.0, 0.0), (width, height)]
    }

    #[test]
    fn the_largest_standard_scale_that_fits_is_taken() {
        // 40' at 1/4" to the foot is 10" long: 254 mm; letter has 255.4 mm, less the room for strings.
        let roof = on_paper(&span(480.0, 96.0), Unit::In, SheetSetup::default());
        assert_eq!((roof.paper, roof.scale.as_str()), (Paper::Letter, "3/16″ = 1′-0″"));
        let tabloid = SheetSetup { paper: Some(Paper::Tabloid), times: None };
        // At 3/8" it is 381 mm long, and there are 368.
        assert_eq!(on_paper(&span(480.0, 96.0), Unit::In, tabloid).scale, "1/4″ = 1′-0″");
        // 20 m on A4: 1:100 is 200 mm.
        let bridge = on_paper(&span(20.0, 2.0), Unit::M, SheetSetup::default());
        assert_eq!((bridge.paper, bridge.scale.as_str()), (Paper::A4, "1:100"));
        let huge = on_paper(&span(9_000.0, 2.0), Unit::M, SheetSetup::default());
        assert_eq!(huge.scale, "not to scale");
    }

    #[test]
    fn what_is_measured_on_the_paper_is_the_truss_at_the_scale() {
        for setup in [SheetSetup::default(), SheetSetup { paper: Some(Paper::A3), times: Some(50) }] {
            let places = span(9_600.0, 1_500.0);
            let sheet = on_paper(&places, Unit::Mm, setup);
            let [a, b] = places.map(|place| sheet.camera.at(place));
            let times: f64 = sheet.scale.trim_start_matches("1:").parse().expect("a metric scale");
            assert!(((b.x - a.x) * UNIT * times - 9_600.0).abs() < 1e-6, "{}", sheet.scale);
            assert!(a.x >= 0.0 && b.x <= sheet.size.0 && b.y >= 0.0 && a.y <= sheet.size.1, "nothing is clipped");
        }
    }

    #[test]
    fn an_empty_sheet_has_a_size() {
        let sheet = on_paper(&[], Unit::In, SheetSetup::default());
        assert!(sheet.size.0 > 0.0 && sheet.size.1 > 0.0 && sheet.camera.origin.x.is_finite());
    }
}
