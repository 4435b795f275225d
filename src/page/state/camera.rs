//! How the plane of the truss is seen on the board: the one place where pixels and lengths meet.

use crate::exact::{Point, Rational};
use num_traits::ToPrimitive;

/// A place on the board, in pixels from its top left corner.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub struct Pixel {
    /// To the right.
    pub x: f64,
    /// Downwards.
    pub y: f64,
}

/// Which part of the plane the board shows, and how large.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Camera {
    /// Pixels for one unit of the sheet.
    pub scale: f64,
    /// Where the origin of the plane is on the board.
    pub origin: Pixel,
}

impl Default for Camera {
    fn default() -> Self {
        Camera { scale: 2.0, origin: Pixel { x: 120.0, y: 320.0 } }
    }
}

/// Room kept free around a fitted truss, in pixels: left, right, above, below (dimension strings hang below and right).
const MARGIN: [f64; 4] = [72.0, 96.0, 56.0, 120.0];
const MARGIN_NARROW: [f64; 4] = [40.0, 52.0, 40.0, 84.0];

impl Pixel {
    /// The pixel at (x, y).
    pub fn new(x: f64, y: f64) -> Pixel {
        Pixel { x, y }
    }

    /// The distance to another, in pixels.
    pub fn distance(self, other: Pixel) -> f64 {
        (self.x - other.x).hypot(self.y - other.y)
    }

    /// The place a share of the way to another.
    pub fn towards(self, other: Pixel, share: f64) -> Pixel {
        Pixel::new(self.x + (other.x - self.x) * share, self.y + (other.y - self.y) * share)
    }
}

impl Camera {
    /// Where a point of the plane is on the board.
    pub fn pixel(&self, point: &Point) -> Pixel {
        self.at(place_of(point))
    }

    /// Where a place of the plane is on the board, given in units of the sheet.
    pub fn at(&self, (x, y): Place) -> Pixel {
        Pixel::new(self.origin.x + x * self.scale, self.origin.y - y * self.scale)
    }

    /// What lies under a pixel, in units of the sheet.
    pub fn under(&self, pixel: Pixel) -> (f64, f64) {
        ((pixel.x - self.origin.x) / self.scale, (self.origin.y - pixel.y) / self.scale)
    }

    /// Zoomed by a factor about a pixel that stays where it is.
    pub fn zoomed(&self, factor: f64, about: Pixel) -> Camera {
        let scale = (self.scale * factor).clamp(1e-9, 1e9);
        let factor = scale / self.scale;
        Camera {
            scale,
            origin: Pixel::new(
                about.x + (self.origin.x - about.x) * factor,
                about.y + (self.origin.y - about.y) * factor,
            ),
        }
    }

    /// Moved by some pixels.
    pub fn panned(&self, dx: f64, dy: f64) -> Camera {
        Camera { origin: Pixel::new(self.origin.x + dx, self.origin.y + dy), ..*self }
    }

    /// The camera that shows all points on a board of this size, with room for dimension strings.
    pub fn fitted(places: &[Place], (width, height): (f64, f64)) -> Camera {
        let Some(&first) = places.first() else {
            return Camera { origin: Pixel::new(width * 0.15, height * 0.65), ..Camera::default() };
        };
        let fold = |f: fn(f64, f64) -> f64| places.iter().fold(first, |a, b| (f(a.0, b.0), f(a.1, b.1)));
        let (least, most) = (fold(f64::min), fold(f64::max));
        let [left, right, above, below] = if width < 600.0 { MARGIN_NARROW } else { MARGIN };
        let room = ((width - left - right).max(40.0), (height - above - below).max(40.0));
        let size = ((most.0 - least.0).max(1e-9), (most.1 - least.1).max(1e-9));
        let scale = if places.len() == 1 { 2.0 } else { (room.0 / size.0).min(room.1 / size.1) };
        let centre = ((least.0 + most.0) / 2.0, (least.1 + most.1) / 2.0);
        Camera {
            scale,
            origin: Pixel::new(left + room.0 / 2.0 - centre.0 * scale, above + room.1 / 2.0 + centre.1 * scale),
        }
    }
}

/// A place of the plane in units of the sheet, near enough for pixels.
pub type Place = (f64, f64);

/// The place of a point, for pixels only.
pub(super) fn place_of(point: &Point) -> Place {
    (to_f64(&point.x), to_f64(&point.y))
}

/// The nearest floating-point number, for pixels only.
pub(super) fn to_f64(value: &Rational) -> f64 {
    value.to_f64().filter(|v| v.is_finite()).unwrap_or(0.0)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn zooming_keeps_the_place_under_the_pointer() {
        let camera = Camera::default();
        let about = Pixel::new(300.0, 200.0);
        let before = camera.under(about);
        let after = camera.zoomed(3.0, about).under(about);
        assert!((before.0 - after.0).abs() < 1e-9 && (before.1 - after.1).abs() < 1e-9, "{before:?} {after:?}");
    }

    #[test]
    fn a_fitted_truss_is_wholly_on_the_board() {
        let places = [(0.0, 0.0), (480.0, 0.0), (240.0, 96.0)];
        let camera = Camera::fitted(&places, (900.0, 500.0));
        for pixel in places.map(|place| camera.at(place)) {
            assert!((0.0..900.0).contains(&pixel.x) && (0.0..500.0).contains(&pixel.y), "{pixel:?}");
        }
    }

    #[test]
    fn nothing_and_one_joint_can_be_fitted() {
        for places in [vec![], vec![(7.0, 7.0)], vec![(7.0, 7.0); 3]] {
            assert!(Camera::fitted(&places, (10.0, 10.0)).scale.is_finite(), "{places:?}");
        }
    }
}
