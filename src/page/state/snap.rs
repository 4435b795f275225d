//! Where a pointer puts a joint: on the lattice that can be seen at this zoom, level with or plumb over other joints.

use super::camera::{Camera, Pixel, to_f64};
use crate::exact::{Point, Rational, ratio, whole};
use crate::measure::Unit;
use crate::truss::{JointId, Truss};
use num_traits::Signed;

/// Pixels within which a pointer is drawn to a joint's height or plumb line.
const REACH: f64 = 7.0;
/// The fewest pixels between two places a pointer can choose.
const FINEST: f64 = 5.0;

/// A place that was chosen, and what it was drawn to, in words.
#[derive(Clone, Debug, PartialEq)]
pub(super) struct Snapped {
    pub(super) point: Point,
    pub(super) words: String,
}

/// The place a pointer means. `free` leaves other joints out of it; `moving` joints never draw themselves.
pub(super) fn snap(truss: &Truss, camera: &Camera, at: Pixel, free: bool, moving: &[JointId]) -> Snapped {
    let grid = visible_step(truss, camera);
    let (x, y) = camera.under(at);
    let near = |line: f64, here: f64| ((line - here) * camera.scale).abs();
    let others = || truss.joints.iter().enumerate().filter(|(i, _)| !free && !moving.contains(&JointId::new(*i)));
    let nearest = |coordinate: fn(&crate::truss::Joint) -> &Rational, here: f64| {
        others()
            .map(|(_, joint)| (near(to_f64(coordinate(joint)), here), joint))
            .filter(|(distance, _)| *distance <= REACH)
            .min_by(|a, b| a.0.total_cmp(&b.0))
            .map(|(_, joint)| joint)
    };
    let plumb = nearest(|joint| &joint.x.value, x);
    let level = nearest(|joint| &joint.y.value, y);
    let words = [plumb.map(|j| format!("plumb with {}", j.mark)), level.map(|j| format!("level with {}", j.mark))];
    Snapped {
        point: Point {
            x: plumb.map_or_else(|| to_lattice(x, &grid), |joint| joint.x.value.clone()),
            y: level.map_or_else(|| to_lattice(y, &grid), |joint| joint.y.value.clone()),
        },
        words: words.into_iter().flatten().collect::<Vec<_>>().join(", "),
    }
}

/// The multiple of the grid nearest to a pixel's value: exact, whatever rounding the pixel had.
fn to_lattice(value: f64, grid: &Rational) -> Rational {
    let steps = (value / to_f64(grid)).round().clamp(-1e15, 1e15);
    grid * whole(steps as i64)
}

/// The smallest step of the trade that is still wide enough on the screen, and no finer than the sheet's own step.
pub(super) fn visible_step(truss: &Truss, camera: &Camera) -> Rational {
    let ladder: Vec<Rational> = if truss.unit.is_imperial() {
        let inch = Unit::In.in_units_of(truss.unit);
        let inches =
            [(1, 16), (1, 8), (1, 4), (1, 2), (1, 1), (3, 1), (6, 1), (12, 1), (24, 1), (60, 1), (120, 1), (600, 1)];
        inches.iter().map(|&(n, d)| ratio(n, d) * &inch).collect()
    } else {
        let mm = Unit::Mm.in_units_of(truss.unit);
        [1, 5, 10, 50, 100, 500, 1000, 5000, 10_000, 50_000].iter().map(|&n| whole(n) * &mm).collect()
    };
    let step = &truss.step.value;
    let fits = |rung: &&Rational| to_f64(rung) * camera.scale >= FINEST && (!step.is_positive() || *rung >= step);
    ladder.iter().find(fits).or(ladder.last()).cloned().unwrap_or_else(|| whole(1))
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::measure::Written;
    use crate::truss::Joint;

    fn one_joint() -> Truss {
        let at = |n| Written::plain(ratio(n, 7));
        Truss { joints: vec![Joint { mark: "L0".into(), x: at(480), y: at(0), loose: false }], ..Truss::default() }
    }

    #[test]
    fn a_pointer_near_a_plumb_line_takes_its_exact_place() {
        let camera = Camera { scale: 2.0, origin: Pixel::new(0.0, 400.0) };
        let snapped = snap(&one_joint(), &camera, Pixel::new(139.0, 100.0), false, &[]);
        assert_eq!(snapped.point.x, ratio(480, 7), "not a rounded 68.57");
        assert_eq!(snapped.words, "plumb with L0");
    }

    #[test]
    fn a_free_pointer_stays_on_the_lattice() {
        let camera = Camera { scale: 2.0, origin: Pixel::new(0.0, 400.0) };
        let snapped = snap(&one_joint(), &camera, Pixel::new(139.0, 100.0), true, &[]);
        let grid = visible_step(&one_joint(), &camera);
        assert!((&snapped.point.x / &grid).is_integer() && (&snapped.point.y / &grid).is_integer(), "{snapped:?}");
    }
}
