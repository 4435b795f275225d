//! The unknowns: what is left of the joints' coordinates when exact ties are taken out.
//!
//! Set joints, level, plumb, and exact runs and rises tie coordinates together with exact differences. A union of tied
//! coordinates (Galler and Fischer 1964, with differences) is one unknown; those tied to a set joint are none. A part of
//! the drawing without a set joint is pinned at its first joint, and, when no figure gives it a direction, a second joint
//! is kept level (or plumb) with the first.

use crate::checks::close::meaning::{Axis, Condition, Function};
use crate::exact::{Point, Rational};
use crate::truss::{FigureId, FigureKind, JointId, Truss};
use num_traits::{Signed, ToPrimitive, Zero};

/// One coordinate of a joint: an unknown plus a difference, or the difference alone.
#[derive(Clone, Debug)]
pub(crate) struct Coordinate {
    /// The unknown it depends on, if any.
    pub unknown: Option<usize>,
    /// What is added to it, in the sheet's unit.
    pub offset: Rational,
}

/// How a part of the drawing that is free to slide (and turn) is held.
#[derive(Clone, Debug)]
pub(crate) struct Pin {
    /// The joint that stays in place.
    pub joint: JointId,
    /// A joint kept level (Y) or plumb (X) with it, when the part could turn.
    pub turn: Option<(JointId, Axis)>,
    /// True when the joint is set, so that the part cannot slide.
    pub is_set: bool,
}

/// The unknowns of a truss without some of its figures.
#[derive(Clone, Debug)]
pub(crate) struct Model {
    /// x and y of each joint.
    pub coordinates: Vec<[Coordinate; 2]>,
    /// The number of unknowns.
    pub unknowns: usize,
    /// The axis that each unknown lies along.
    pub axes: Vec<Axis>,
    /// How each free part is held.
    pub pins: Vec<Pin>,
    /// The part of each joint, numbered by its first joint.
    pub parts: Vec<usize>,
    /// Floats count from here.
    pub origin: Point,
    /// One unit of the floats, in the sheet's unit.
    pub scale: Rational,
}

/// Coordinates that are tied, each with its difference from its root.
struct Ties {
    parent: Vec<usize>,
    above: Vec<Rational>,
}

impl Ties {
    fn new(count: usize) -> Ties {
        Ties { parent: (0..count).collect(), above: vec![Rational::zero(); count] }
    }

    /// The root and the height above it; shortens the way as it goes.
    fn find(&mut self, node: usize) -> (usize, Rational) {
        let (mut way, mut at) = (Vec::new(), node);
        while self.parent[at] != at {
            way.push(at);
            at = self.parent[at];
        }
        for &step in way.iter().rev().skip(1) {
            let through = self.parent[step];
            self.above[step] = &self.above[step] + &self.above[through];
            self.parent[step] = at;
        }
        (at, self.above[node].clone())
    }

    /// Ties `b = a + difference`; a tie that contradicts is left to be excluded elsewhere.
    fn tie(&mut self, a: usize, b: usize, difference: &Rational) {
        let ((root_a, above_a), (root_b, above_b)) = (self.find(a), self.find(b));
        if root_a != root_b {
            self.parent[root_b] = root_a;
            self.above[root_b] = above_a + difference - above_b;
        }
    }
}

impl Model {
    /// The unknowns, with the conditions of each figure, without the disregarded figures.
    pub(crate) fn new(truss: &Truss, conditions: &[Vec<Condition>], disregarded: &[FigureId]) -> Model {
        let joints = truss.joints.len();
        let ground = 2 * joints;
        let mut ties = Ties::new(ground + 1);
        let node = |joint: JointId, axis: Axis| 2 * joint.index() + axis.index();
        for (index, joint) in truss.joints.iter().enumerate().filter(|(_, joint)| !joint.loose) {
            let point = joint.point();
            ties.tie(ground, 2 * index, &point.x);
            ties.tie(ground, 2 * index + 1, &point.y);
        }
        let kept = |index: usize| !disregarded.contains(&FigureId::new(index));
        let parts = parts(truss, &kept);
        let pins = pins(truss, &parts, &kept);
        for pin in &pins {
            let place = pinned_place(truss, &pins, pin);
            ties.tie(ground, node(pin.joint, Axis::X), &place.x);
            ties.tie(ground, node(pin.joint, Axis::Y), &place.y);
            if let Some((joint, axis)) = pin.turn {
                ties.tie(node(pin.joint, axis), node(joint, axis), &Rational::zero());
            }
        }
        for condition in conditions.iter().enumerate().filter(|(i, _)| kept(*i)).flat_map(|(_, c)| c) {
            if let Function::Along { axis, from, to } = condition.function
                && condition.possible.is_exact()
            {
                ties.tie(node(from, axis), node(to, axis), condition.possible.lo());
            }
        }
        let mut model = Model::numbered(joints, ties);
        (model.pins, model.parts) = (pins, parts);
        model.origin = truss.joints.iter().find(|joint| !joint.loose).map_or(Point::whole(0, 0), |j| j.point());
        model.scale = scale(truss);
        model
    }

    fn numbered(joints: usize, mut ties: Ties) -> Model {
        let ground = 2 * joints;
        let ground_root = ties.find(ground);
        let (mut number, mut axes) = (vec![None; ground + 1], Vec::new());
        let mut coordinate = |node: usize| {
            let (root, above) = ties.find(node);
            if root == ground_root.0 {
                return Coordinate { unknown: None, offset: above - &ground_root.1 };
            }
            let axis = if node.is_multiple_of(2) { Axis::X } else { Axis::Y };
            let unknown = *number[root].get_or_insert_with(|| {
                axes.push(axis);
                axes.len() - 1
            });
            Coordinate { unknown: Some(unknown), offset: above }
        };
        let coordinates = (0..joints).map(|j| [coordinate(2 * j), coordinate(2 * j + 1)]).collect();
        let (pins, parts, unknowns) = (Vec::new(), Vec::new(), axes.len());
        Model { coordinates, unknowns, axes, pins, parts, origin: Point::whole(0, 0), scale: crate::exact::whole(1) }
    }

    /// Unknowns from floats, exactly.
    pub(crate) fn exactly(&self, floats: &[f64]) -> Option<Vec<Rational>> {
        let exact = |(unknown, float): (usize, &f64)| {
            Some(self.axes[unknown].of(&self.origin) + Rational::from_float(*float)? * &self.scale)
        };
        floats.iter().enumerate().map(exact).collect()
    }

    /// Exact places from exact unknowns.
    pub(crate) fn places(&self, unknowns: &[Rational]) -> Vec<Point> {
        let value = |c: &Coordinate| match c.unknown {
            Some(unknown) => &unknowns[unknown] + &c.offset,
            None => c.offset.clone(),
        };
        self.coordinates.iter().map(|[x, y]| Point { x: value(x), y: value(y) }).collect()
    }

    /// The offsets of each joint's coordinates as floats.
    pub(crate) fn float_offsets(&self) -> Vec<[(Option<usize>, f64); 2]> {
        let convert = |c: &Coordinate, origin: &Rational| {
            let base = if c.unknown.is_some() { c.offset.clone() } else { &c.offset - origin };
            (c.unknown, to_float(&(base / &self.scale)))
        };
        self.coordinates.iter().map(|[x, y]| [convert(x, &self.origin.x), convert(y, &self.origin.y)]).collect()
    }

    /// Unknowns as floats, from places as floats: the mean over the coordinates that depend on each.
    pub(crate) fn unknowns_from(&self, offsets: &[[(Option<usize>, f64); 2]], places: &[[f64; 2]]) -> Vec<f64> {
        let (mut sums, mut counts) = (vec![0.0; self.unknowns], vec![0.0f64; self.unknowns]);
        for (offsets, place) in offsets.iter().zip(places) {
            for (&(unknown, offset), value) in offsets.iter().zip(place) {
                if let Some(unknown) = unknown {
                    sums[unknown] += value - offset;
                    counts[unknown] += 1.0;
                }
            }
        }
        sums.iter().zip(&counts).map(|(sum, count)| sum / count.max(1.0)).collect()
    }

    /// The sketch as floats, each free part moved (and turned) to where it is pinned.
    pub(crate) fn float_sketch(&self, truss: &Truss) -> Vec<[f64; 2]> {
        let float = |p: &Point| {
            [to_float(&((&p.x - &self.origin.x) / &self.scale)), to_float(&((&p.y - &self.origin.y) / &self.scale))]
        };
        let mut places: Vec<[f64; 2]> = truss.joints.iter().map(|joint| float(&joint.point())).collect();
        for pin in &self.pins {
            let [x, y] = [0, 1].map(|axis| self.coordinates[pin.joint.index()][axis].offset.clone());
            let target = float(&Point { x, y });
            let from = places[pin.joint.index()];
            let (cosine, sine) = turn(pin, &places);
            for (joint, place) in places.iter_mut().enumerate() {
                if self.parts[joint] == self.parts[pin.joint.index()] {
                    let [dx, dy] = [place[0] - from[0], place[1] - from[1]];
                    *place = [target[0] + cosine * dx + sine * dy, target[1] - sine * dx + cosine * dy];
                }
            }
        }
        places
    }
}

/// The turn that brings the second joint of a pin level (or plumb) with the first, without turning it about.
fn turn(pin: &Pin, places: &[[f64; 2]]) -> (f64, f64) {
    let Some((joint, axis)) = pin.turn else { return (1.0, 0.0) };
    let (a, b) = (places[pin.joint.index()], places[joint.index()]);
    let [dx, dy] = [b[0] - a[0], b[1] - a[1]];
    let length = dx.hypot(dy);
    if length == 0.0 {
        return (1.0, 0.0);
    }
    match axis {
        Axis::Y => (dx.abs() / length, dy * dx.signum() / length),
        Axis::X => (dy.abs() / length, -dx * dy.signum() / length),
    }
}

/// The number as a float; huge numbers become infinite and are refused by whoever uses them.
pub(crate) fn to_float(value: &Rational) -> f64 {
    value.to_f64().unwrap_or(f64::NAN)
}

/// The greatest extent of the sketch or of a length figure: about 1 in floats.
fn scale(truss: &Truss) -> Rational {
    let mut greatest = Rational::zero();
    if let Some(first) = truss.joints.first().map(|joint| joint.point()) {
        for joint in &truss.joints {
            greatest = greatest.max((&joint.x.value - &first.x).abs()).max((&joint.y.value - &first.y).abs());
        }
    }
    for figure in &truss.figures {
        if let FigureKind::Length { value, .. } | FigureKind::Run { value, .. } | FigureKind::Rise { value, .. } =
            &figure.kind
        {
            greatest = greatest.max(value.value.abs());
        }
    }
    if greatest.is_zero() { crate::exact::whole(1) } else { greatest }
}

/// The part of each joint: joints that kept figures tie together, all set joints being one part.
fn parts(truss: &Truss, kept: &dyn Fn(usize) -> bool) -> Vec<usize> {
    let mut ties = Ties::new(truss.joints.len());
    let zero = Rational::zero();
    let mut first_set = None;
    for (index, _) in truss.joints.iter().enumerate().filter(|(_, joint)| !joint.loose) {
        ties.tie(*first_set.get_or_insert(index), index, &zero);
    }
    for (_, figure) in truss.figures.iter().enumerate().filter(|(index, _)| kept(*index)) {
        let joints = figure.kind.joints();
        for pair in joints.windows(2) {
            ties.tie(pair[0].index(), pair[1].index(), &zero);
        }
    }
    let mut first: Vec<Option<usize>> = vec![None; truss.joints.len()];
    (0..truss.joints.len()).map(|joint| *first[ties.find(joint).0].get_or_insert(joint)).collect()
}

/// A pin for every part that is free to slide or to turn as a whole.
fn pins(truss: &Truss, parts: &[usize], kept: &dyn Fn(usize) -> bool) -> Vec<Pin> {
    let count = truss.joints.len();
    let (mut set, mut directed) = (vec![Vec::new(); count], vec![false; count]);
    for (joint, part) in parts.iter().enumerate().filter(|(joint, _)| !truss.joints[*joint].loose) {
        set[*part].push(joint);
    }
    for (_, figure) in truss.figures.iter().enumerate().filter(|(index, _)| kept(*index)) {
        if gives_direction(&figure.kind)
            && let Some(joint) = figure.kind.joints().first()
        {
            directed[parts[joint.index()]] = true;
        }
    }
    // A part with one set joint cannot slide, but may still turn about it.
    let free = (0..count).filter(|&joint| parts[joint] == joint && set[joint].len() < 2);
    let pin = |part: usize| {
        let joint = set[part].first().copied().unwrap_or(part);
        let turn = if directed[part] { None } else { levelled(truss, parts, part, joint) };
        let holds = set[part].is_empty() || turn.is_some();
        holds.then_some(Pin { joint: JointId::new(joint), turn, is_set: !set[part].is_empty() })
    };
    free.filter_map(pin).collect()
}

/// True for figures that tell how the drawing is turned.
pub(crate) fn gives_direction(kind: &FigureKind) -> bool {
    matches!(
        kind,
        FigureKind::Run { .. }
            | FigureKind::Rise { .. }
            | FigureKind::Pitch { .. }
            | FigureKind::Level { .. }
            | FigureKind::Plumb { .. }
    )
}

/// The joint of a part that is sketched most nearly level (or plumb) with its first and far from it.
fn levelled(truss: &Truss, parts: &[usize], part: usize, first: usize) -> Option<(JointId, Axis)> {
    let from = truss.joints[first].point();
    let four = crate::exact::whole(4);
    let mut best: Option<(Rational, JointId, Axis)> = None;
    for joint in (0..parts.len()).filter(|&joint| parts[joint] == part && joint != first) {
        let leg = &truss.joints[joint].point() - &from;
        for (axis, along, off) in [(Axis::Y, leg.x.abs(), leg.y.abs()), (Axis::X, leg.y.abs(), leg.x.abs())] {
            let worth = along - &four * off;
            if best.as_ref().is_none_or(|(most, ..)| worth > *most) {
                best = Some((worth, JointId::new(joint), axis));
            }
        }
    }
    best.map(|(_, joint, axis)| (joint, axis))
}

/// The first joint of the drawing sits at the origin when nothing is set; other parts keep their sketched place beside it.
fn pinned_place(truss: &Truss, pins: &[Pin], pin: &Pin) -> Point {
    let place = truss.joint(pin.joint).point();
    if truss.joints.iter().any(|joint| !joint.loose) {
        return place;
    }
    let first = pins.first().map_or(place.clone(), |first| truss.joint(first.joint).point());
    Point { x: place.x - first.x, y: place.y - first.y }
}
