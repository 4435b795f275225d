//! SVG path data, written with one decimal.

use crate::page::state::camera::Pixel;

/// One path of the drawing: many lines of one style.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct PathView {
    /// Its style.
    pub class: &'static str,
    /// Its data.
    pub d: String,
}

/// Path data being written.
#[derive(Clone, Debug, Default)]
pub(super) struct PathText(pub(super) String);

impl PathText {
    pub(super) fn line(&mut self, a: Pixel, b: Pixel) {
        self.at('M', a);
        self.at('L', b);
    }

    pub(super) fn polygon(&mut self, corners: &[Pixel]) {
        for (index, corner) in corners.iter().enumerate() {
            self.at(if index == 0 { 'M' } else { 'L' }, *corner);
        }
        self.0.push('Z');
    }

    pub(super) fn circle(&mut self, centre: Pixel, radius: f64) {
        let r = tenths(radius);
        let d = tenths(radius * 2.0);
        self.at('M', Pixel::new(centre.x - radius, centre.y));
        self.0.push_str(&format!("a{r} {r} 0 1 0 {d} 0a{r} {r} 0 1 0 -{d} 0"));
    }

    pub(super) fn arc(&mut self, from: Pixel, radius: f64, clockwise: bool, to: Pixel) {
        let r = tenths(radius);
        self.at('M', from);
        self.0.push_str(&format!("A{r} {r} 0 0 {} {} {}", u8::from(clockwise), tenths(to.x), tenths(to.y)));
    }

    pub(super) fn cross(&mut self, centre: Pixel, arm: f64) {
        let at = |dx: f64, dy: f64| Pixel::new(centre.x + dx * arm, centre.y + dy * arm);
        self.line(at(-1.0, -1.0), at(1.0, 1.0));
        self.line(at(-1.0, 1.0), at(1.0, -1.0));
    }

    fn at(&mut self, command: char, pixel: Pixel) {
        self.0.push(command);
        push_tenths(&mut self.0, pixel.x);
        self.0.push(' ');
        push_tenths(&mut self.0, pixel.y);
    }

    pub(super) fn view(self, class: &'static str) -> Option<PathView> {
        (!self.0.is_empty()).then_some(PathView { class, d: self.0 })
    }
}

/// A number with one decimal, without the weight of float printing.
pub(super) fn tenths(value: f64) -> String {
    let mut text = String::new();
    push_tenths(&mut text, value);
    text
}

fn push_tenths(text: &mut String, value: f64) {
    let tenths = (value.clamp(-1e6, 1e6) * 10.0).round() as i64;
    if tenths < 0 {
        text.push('-');
    }
    let tenths = tenths.unsigned_abs();
    text.push_str(&(tenths / 10).to_string());
    if !tenths.is_multiple_of(10) {
        text.push('.');
        text.push(char::from(b'0' + (tenths % 10) as u8));
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn numbers_have_one_decimal() {
        for (value, expected) in
            [(0.0, "0"), (-0.04, "0"), (12.34, "12.3"), (-7.96, "-8"), (-0.5, "-0.5"), (f64::NAN, "0")]
        {
            assert_eq!(tenths(value), expected);
        }
    }
}
