//! The conditions as floating-point rows: value, gradient and the interval allowed, all in lengths.
//!
//! Each condition is read in the form that is most nearly linear: a length (not its square), an angle times the shorter
//! arm, a signed offset. Near a solution they are all about as long as the joints move.

use super::model::{Model, to_float};
use crate::checks::close::meaning::{Axis, Condition, Function, Sense};
use crate::truss::JointId;

/// One condition, ready to be linearised.
#[derive(Clone, Debug)]
pub(crate) struct Row {
    /// The figure it comes from.
    pub figure: usize,
    /// Which of the figure's conditions it is.
    pub condition: usize,
    /// What it measures.
    form: Form,
    /// The interval in the form's own measure (lengths, radians, or a slope).
    lo: f64,
    hi: f64,
    /// True when the interval holds one number only.
    pub exact: bool,
    /// The unknowns it touches, each once.
    pub unknowns: Vec<usize>,
    /// For each of the form's joint coordinates (x, y of each joint in turn) its place in `unknowns`.
    places: Vec<Option<usize>>,
    joints: Vec<usize>,
}

#[derive(Clone, Copy, Debug)]
enum Form {
    Along(usize),
    Length,
    Slope {
        small: usize,
        senses: [f64; 2],
    },
    Angle,
    /// The spread's angle may be acute or obtuse.
    Spread,
    OffLine,
    OffSquare,
    OffParallel,
    Difference,
}

/// A row at certain places: `lo <= value + gradient · change <= hi`.
#[derive(Clone, Debug, Default)]
pub(crate) struct Linear {
    /// What the places give.
    pub value: f64,
    /// The least allowed.
    pub lo: f64,
    /// The greatest allowed.
    pub hi: f64,
    /// In the order of the row's unknowns.
    pub gradient: Vec<f64>,
}

impl Linear {
    /// How far outside the interval (positive) or inside (negative) the value is.
    pub(crate) fn overshoot(&self) -> f64 {
        (self.lo - self.value).max(self.value - self.hi)
    }

    /// The distance from the middle of the interval.
    pub(crate) fn residual(&self) -> f64 {
        self.value - (self.lo + self.hi) / 2.0
    }

    /// Half of the interval.
    pub(crate) fn half(&self) -> f64 {
        (self.hi - self.lo) / 2.0
    }
}

/// The rows of the kept conditions that touch an unknown.
pub(crate) fn rows(model: &Model, conditions: &[Vec<Condition>], kept: &dyn Fn(usize) -> bool) -> Vec<Row> {
    let mut rows = Vec::new();
    for (figure, conditions) in conditions.iter().enumerate().filter(|(figure, _)| kept(*figure)) {
        for (index, condition) in conditions.iter().enumerate() {
            let row = Row::new(model, figure, index, condition);
            if !row.unknowns.is_empty() {
                rows.push(row);
            }
        }
    }
    rows
}

impl Row {
    /// One condition as a row.
    pub(crate) fn new(model: &Model, figure: usize, index: usize, condition: &Condition) -> Row {
        let (form, lo, hi) = form(condition, to_float(&model.scale));
        let joints: Vec<usize> = ordered_joints(&condition.function).iter().map(|id| id.index()).collect();
        let (mut unknowns, mut places) = (Vec::new(), Vec::new());
        for coordinate in joints.iter().flat_map(|&joint| &model.coordinates[joint]) {
            places.push(coordinate.unknown.map(|unknown| match unknowns.iter().position(|&u| u == unknown) {
                Some(place) => place,
                None => {
                    unknowns.push(unknown);
                    unknowns.len() - 1
                }
            }));
        }
        if let Form::Along(axis) = form {
            // Only one coordinate of each joint matters.
            let kept: Vec<usize> =
                [axis, 2 + axis].iter().filter_map(|&i| places[i].map(|place| unknowns[place])).collect();
            let place = |i: usize| if i % 2 == axis { places[i].map(|p| unknowns[p]) } else { None };
            let mut only = kept.clone();
            only.dedup();
            let moved: Vec<Option<usize>> =
                (0..4).map(|i| place(i).and_then(|u| only.iter().position(|&k| k == u))).collect();
            (unknowns, places) = (only, moved);
        }
        Row { figure, condition: index, form, lo, hi, exact: condition.is_exact(), unknowns, places, joints }
    }

    /// True when no place changes what it measures: both its ends are tied to one unknown. Such a row is never leant on
    /// while it holds.
    pub(crate) fn is_constant(&self) -> bool {
        matches!(self.form, Form::Along(axis) if self.places[axis] == self.places[2 + axis])
    }

    /// The row at these places (floats, by joint).
    pub(crate) fn linearise(&self, places: &[[f64; 2]]) -> Linear {
        let mut slopes = [0.0; 8];
        let (value, lo, hi) = self.measure(places, &mut slopes);
        let mut gradient = vec![0.0; self.unknowns.len()];
        for (slot, slope) in self.places.iter().zip(slopes) {
            if let Some(slot) = slot {
                gradient[*slot] += slope;
            }
        }
        Linear { value, lo, hi, gradient }
    }

    fn measure(&self, places: &[[f64; 2]], slopes: &mut [f64; 8]) -> (f64, f64, f64) {
        let p = |i: usize| places[self.joints[i]];
        let leg = |a: usize, b: usize| [p(b)[0] - p(a)[0], p(b)[1] - p(a)[1]];
        match self.form {
            Form::Along(axis) => {
                (slopes[axis], slopes[2 + axis]) = (-1.0, 1.0);
                (leg(0, 1)[axis], self.lo, self.hi)
            }
            Form::Length => {
                let leg = leg(0, 1);
                let length = norm(leg);
                add_leg(slopes, 0, 1, [leg[0] / length, leg[1] / length]);
                (length, self.lo, self.hi)
            }
            Form::Slope { small, senses } => self.slope(leg(0, 1), small, senses, slopes),
            Form::Angle => self.angle(leg(0, 1), leg(0, 2), [self.lo, self.hi], slopes),
            Form::Spread => {
                let (u, v) = (leg(0, 1), leg(0, 2));
                let obtuse = dot(u, v) < 0.0 && self.hi < std::f64::consts::FRAC_PI_2 - 1e-12;
                let pi = std::f64::consts::PI;
                let range = match (obtuse, self.hi >= std::f64::consts::FRAC_PI_2 - 1e-12) {
                    (_, true) => [self.lo, pi - self.lo],
                    (true, false) => [pi - self.hi, pi - self.lo],
                    (false, false) => [self.lo, self.hi],
                };
                self.angle(u, v, range, slopes)
            }
            Form::OffLine => {
                let (u, v) = (leg(1, 2), leg(1, 0));
                let (value, gu, gv) = cross_over(u, v, norm(u));
                let along = norm(u);
                // The line's own length is in the denominator.
                let gu = [gu[0] - value * u[0] / (along * along), gu[1] - value * u[1] / (along * along)];
                add_leg(slopes, 1, 2, gu);
                add_leg(slopes, 1, 0, gv);
                (value, self.lo, self.hi)
            }
            Form::OffSquare => {
                let (u, v) = (leg(0, 1), leg(0, 2));
                let long = norm(u).max(norm(v));
                add_leg(slopes, 0, 1, [v[0] / long, v[1] / long]);
                add_leg(slopes, 0, 2, [u[0] / long, u[1] / long]);
                (dot(u, v) / long, self.lo, self.hi)
            }
            Form::OffParallel => {
                let (u, v) = (leg(0, 1), leg(2, 3));
                let (value, gu, gv) = cross_over(u, v, norm(u).max(norm(v)));
                add_leg(slopes, 0, 1, gu);
                add_leg(slopes, 2, 3, gv);
                (value, self.lo, self.hi)
            }
            Form::Difference => {
                let (u, v) = (leg(0, 1), leg(2, 3));
                let (l1, l2) = (norm(u), norm(v));
                add_leg(slopes, 0, 1, [u[0] / l1, u[1] / l1]);
                add_leg(slopes, 2, 3, [-v[0] / l2, -v[1] / l2]);
                (l1 - l2, self.lo, self.hi)
            }
        }
    }

    /// The smaller leg less the middle slope times the larger.
    fn slope(&self, leg: [f64; 2], small: usize, senses: [f64; 2], slopes: &mut [f64; 8]) -> (f64, f64, f64) {
        let sense = |axis: usize| if senses[axis] == 0.0 { 1f64.copysign(leg[axis]) } else { senses[axis] };
        let (s, l) = (sense(small), sense(1 - small));
        let (short, long) = (s * leg[small], l * leg[1 - small]);
        let middle = (self.lo + self.hi) / 2.0;
        let mut towards = [0.0; 2];
        (towards[small], towards[1 - small]) = (s, -middle * l);
        add_leg(slopes, 0, 1, towards);
        let reach = long.abs();
        // With a sense unknown and a slope that may be 0, the other sense is as good.
        let least = if self.lo == 0.0 && senses[small] == 0.0 { -self.hi - middle } else { self.lo - middle };
        (short - middle * long, least * reach, (self.hi - middle) * reach)
    }

    /// The angle from `u` to `v` (without sign, except where it may be 0), times the shorter arm.
    fn angle(&self, u: [f64; 2], v: [f64; 2], range: [f64; 2], slopes: &mut [f64; 8]) -> (f64, f64, f64) {
        let pi = std::f64::consts::PI;
        let arm = norm(u).min(norm(v));
        let signed = cross(u, v).atan2(dot(u, v));
        let sign = if signed < 0.0 { -1.0 } else { 1.0 };
        let mut angle = signed.abs();
        let [mut lo, mut hi] = range;
        if lo <= 0.0 {
            lo = -hi;
        }
        if hi >= pi {
            hi = 2.0 * pi - range[0];
        }
        if !angle.is_finite() {
            angle = 0.0;
        }
        let (qu, qv) = (dot(u, u), dot(v, v));
        let factor = sign * arm;
        add_leg(slopes, 0, 2, [-v[1] / qv * factor, v[0] / qv * factor]);
        add_leg(slopes, 0, 1, [u[1] / qu * factor, -u[0] / qu * factor]);
        (angle * arm, lo * arm, hi * arm)
    }
}

fn form(condition: &Condition, scale: f64) -> (Form, f64, f64) {
    let range = condition.sure.as_ref().unwrap_or(&condition.possible);
    let (lo, hi) = (to_float(range.lo()), to_float(range.hi()));
    let root = |x: f64| x.max(0.0).sqrt() / scale;
    let angle = |cosine: f64| (cosine.abs().sqrt().min(1.0) * cosine.signum()).acos();
    match &condition.function {
        Function::Along { axis, .. } => (Form::Along(axis.index()), lo / scale, hi / scale),
        Function::Quadrance { .. } => (Form::Length, root(lo), root(hi)),
        Function::Slope { small, senses, .. } => {
            let sense = |s: Sense| match s {
                Sense::Plus => 1.0,
                Sense::Minus => -1.0,
                Sense::Either => 0.0,
            };
            (Form::Slope { small: small.index(), senses: senses.map(sense) }, lo, hi)
        }
        Function::Spread { .. } => {
            (Form::Spread, lo.max(0.0).sqrt().min(1.0).asin(), hi.max(0.0).sqrt().min(1.0).asin())
        }
        Function::Cosine { .. } => (Form::Angle, angle(hi), angle(lo)),
        Function::OffLine { .. } => (Form::OffLine, -root(hi), root(hi)),
        Function::OffSquare { .. } => (Form::OffSquare, -root(hi), root(hi)),
        Function::OffParallel { .. } => (Form::OffParallel, -root(hi), root(hi)),
        Function::LengthDifference { .. } => (Form::Difference, lo / scale, hi / scale),
    }
}

/// The joints in the order in which the forms use them.
fn ordered_joints(function: &Function) -> Vec<JointId> {
    function.joints()
}

fn dot(u: [f64; 2], v: [f64; 2]) -> f64 {
    u[0] * v[0] + u[1] * v[1]
}

fn cross(u: [f64; 2], v: [f64; 2]) -> f64 {
    u[0] * v[1] - u[1] * v[0]
}

/// Never quite zero, so that joints sketched in one place can come apart.
fn norm(u: [f64; 2]) -> f64 {
    u[0].hypot(u[1]).max(1e-12)
}

/// `u × v / long` and its slopes by `u` and `v`, with `long` held.
fn cross_over(u: [f64; 2], v: [f64; 2], long: f64) -> (f64, [f64; 2], [f64; 2]) {
    (cross(u, v) / long, [v[1] / long, -v[0] / long], [-u[1] / long, u[0] / long])
}

/// Adds the slope by the leg from joint `a` to joint `b` to the slopes by their coordinates.
fn add_leg(slopes: &mut [f64; 8], a: usize, b: usize, by_leg: [f64; 2]) {
    for axis in [Axis::X.index(), Axis::Y.index()] {
        slopes[2 * a + axis] -= by_leg[axis];
        slopes[2 * b + axis] += by_leg[axis];
    }
}
