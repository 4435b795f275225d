//! What is under a pixel.

use super::camera::{Camera, Pixel, Place};
use super::model::Thing;
use crate::exact::Point;
use crate::truss::{JointId, MemberId, Selection, Truss};

/// The joint within reach, else the member within reach: the nearest of each.
pub(super) fn thing_at(truss: &Truss, places: &[Place], camera: &Camera, at: Pixel, finger: bool) -> Option<Thing> {
    let (joint_reach, member_reach) = if finger { (24.0, 14.0) } else { (10.0, 6.0) };
    let pixels: Vec<Pixel> = places.iter().map(|&place| camera.at(place)).collect();
    joint_near(&pixels, at, joint_reach)
        .map(Thing::Joint)
        .or_else(|| member_near(truss, &pixels, at, member_reach).map(Thing::Member))
}

/// The joint within reach, if any.
pub(super) fn joint_at(points: &[Point], camera: &Camera, at: Pixel, reach: f64) -> Option<JointId> {
    let pixels: Vec<Pixel> = points.iter().map(|point| camera.pixel(point)).collect();
    joint_near(&pixels, at, reach)
}

fn joint_near(pixels: &[Pixel], at: Pixel, reach: f64) -> Option<JointId> {
    nearest(pixels.iter().map(|pixel| pixel.distance(at)), reach).map(JointId::new)
}

fn member_near(truss: &Truss, pixels: &[Pixel], at: Pixel, reach: f64) -> Option<MemberId> {
    let distance = |ends: [JointId; 2]| {
        let [a, b] = ends.map(|id| pixels.get(id.index()).copied());
        a.zip(b).map_or(f64::INFINITY, |(a, b)| segment_distance(at, a, b))
    };
    nearest(truss.members.iter().map(|member| distance(member.ends())), reach).map(MemberId::new)
}

fn nearest(distances: impl Iterator<Item = f64>, reach: f64) -> Option<usize> {
    distances.enumerate().filter(|(_, d)| *d <= reach).min_by(|a, b| a.1.total_cmp(&b.1)).map(|(index, _)| index)
}

fn segment_distance(p: Pixel, a: Pixel, b: Pixel) -> f64 {
    let (dx, dy) = (b.x - a.x, b.y - a.y);
    let square = dx * dx + dy * dy;
    let share = if square > 0.0 { (((p.x - a.x) * dx + (p.y - a.y) * dy) / square).clamp(0.0, 1.0) } else { 0.0 };
    p.distance(a.towards(b, share))
}

/// Everything that lies wholly within the frame between two pixels.
pub(super) fn within(truss: &Truss, places: &[Place], camera: &Camera, a: Pixel, b: Pixel) -> Selection {
    let inside: Vec<bool> = places
        .iter()
        .map(|&place| {
            let p = camera.at(place);
            p.x >= a.x.min(b.x) && p.x <= a.x.max(b.x) && p.y >= a.y.min(b.y) && p.y <= a.y.max(b.y)
        })
        .collect();
    let is_in = |id: JointId| inside.get(id.index()) == Some(&true);
    let members = truss.members.iter().enumerate().filter(|(_, m)| m.ends().into_iter().all(is_in));
    Selection {
        joints: (0..inside.len()).map(JointId::new).filter(|&id| is_in(id)).collect(),
        members: members.map(|(index, _)| MemberId::new(index)).collect(),
        ..Selection::default()
    }
}
