//! Looks for stresses: the conditions that the least worst overshoot leans on, boxes around the places, multipliers from a
//! linear programme that already allows for the rest, and splits where boxes are too wide.

use super::boxes::{Frame, Way};
use super::forms::{Form, LegPart, forms, side_form};
use super::judge::{Case, accepts};
use super::span::Span;
use super::{Branch, Certificate, Part, Source, Stress};
use crate::checks::close::meaning::{Axis, Function};
use crate::checks::close::search::interior::{Programme, Strip};
use crate::checks::close::search::model::to_float;
use crate::checks::close::search::sparse::Pattern;
use crate::exact::Rational;
use crate::truss::{FigureId, JointId};
use num_bigint::BigInt;
use num_traits::{One, ToPrimitive};
use std::collections::BTreeSet;

/// Units to the extent of the drawing.
const UNIT_BITS: u32 = 44;
/// A multiplier is rounded to this many binary places of the greatest.
const MULTIPLIER_BITS: i32 = 90;
/// Frames over more joints than this are not tried.
const MOST_JOINTS: usize = 600;

/// What a search for a stress starts from.
pub(crate) struct Lean<'a> {
    /// The conditions with a multiplier, heaviest first.
    pub sources: &'a [Source],
    /// Where the overshoot is least, by joint, in the sheet's unit divided by `scale`.
    pub places: &'a [[f64; 2]],
    /// One unit of `places`.
    pub scale: &'a Rational,
    /// Splits of boxes allowed.
    pub splits: usize,
}

/// A stress that the judge accepts, if one is found: first over the joints of the leaning conditions alone, then with
/// their neighbours.
pub(crate) fn stress(case: &Case, lean: &Lean) -> Option<Certificate> {
    let mut joints: BTreeSet<JointId> = BTreeSet::new();
    joints.extend(lean.sources.iter().flat_map(|s| joints_of(case, *s)));
    for ring in 0..4 {
        if joints.len() > MOST_JOINTS {
            break;
        }
        for turned in [false, true] {
            if let Some(found) = over(case, lean, &joints, turned) {
                return Some(found);
            }
        }
        let wider = widened(case, &joints, ring == 2);
        if wider.len() == joints.len() {
            break;
        }
        joints = wider;
    }
    None
}

fn joints_of(case: &Case, source: Source) -> Vec<JointId> {
    case.conditions[source.figure.index()][source.condition].function.joints()
}

fn kept_sources(case: &Case) -> impl Iterator<Item = Source> {
    let kept = |figure: &usize| !case.disregarded.contains(&FigureId::new(*figure));
    let numbered = |figure: usize| {
        (0..case.conditions[figure].len()).map(move |c| Source { figure: FigureId::new(figure), condition: c })
    };
    (0..case.conditions.len()).filter(kept).flat_map(numbered)
}

/// The joints with those that share a condition with them; or all.
fn widened(case: &Case, joints: &BTreeSet<JointId>, all: bool) -> BTreeSet<JointId> {
    let mut wider = joints.clone();
    for source in kept_sources(case) {
        let of = joints_of(case, source);
        if all || of.iter().any(|joint| joints.contains(joint)) {
            wider.extend(of);
        }
    }
    wider
}

/// A stress over these joints; turned freely when asked, without figures that give a direction.
fn over(case: &Case, lean: &Lean, joints: &BTreeSet<JointId>, turned: bool) -> Option<Certificate> {
    let directed = |s: &Source| {
        let function = &case.conditions[s.figure.index()][s.condition].function;
        matches!(function, Function::Along { .. } | Function::Slope { .. })
    };
    if turned && lean.sources.iter().any(directed) {
        return None;
    }
    let inside =
        |s: &Source| joints_of(case, *s).iter().all(|joint| joints.contains(joint)) && !(turned && directed(s));
    let conditions: Vec<Source> = kept_sources(case).filter(inside).collect();
    let sides =
        (0..case.sides.len()).filter(|&i| case.sides[i].joints.iter().all(|joint| joints.contains(joint))).collect();
    let origin = origin(case, lean, joints)?;
    let turned = if turned { Some(partner(case, &conditions, origin)?) } else { None };
    let unit = lean.scale / Rational::from_integer(BigInt::one() << UNIT_BITS);
    let mut stress = Stress { origin, turned, unit, conditions, sides, branch: Branch::Empty };
    let frame = Frame::new(case.truss, case.conditions, case.sides, &stress)?;
    let around = around(lean, &frame, &stress)?;
    let mut splits = lean.splits;
    if let Some(boxes) = frame.narrowed_start() {
        stress.branch = Finder { case, stress: &stress, frame: &frame, around: &around }.branch(&boxes, &mut splits)?;
    }
    let certificate = Certificate::Stress(stress);
    accepts(case, &certificate).then_some(certificate)
}

/// A set joint, else the joint that the most leaning conditions name.
fn origin(case: &Case, lean: &Lean, joints: &BTreeSet<JointId>) -> Option<JointId> {
    let set = joints.iter().copied().find(|joint| !case.truss.joint(*joint).loose);
    let named = |joint: &JointId| lean.sources.iter().filter(|s| joints_of(case, **s).contains(joint)).count();
    set.or_else(|| joints.iter().copied().max_by_key(|joint| (named(joint), std::cmp::Reverse(*joint))))
}

/// The joint at the other end of a length from the origin.
fn partner(case: &Case, conditions: &[Source], origin: JointId) -> Option<JointId> {
    conditions.iter().find_map(|s| match case.conditions[s.figure.index()][s.condition].function {
        Function::Quadrance { from, to } if from == origin => Some(to),
        Function::Quadrance { from, to } if to == origin => Some(from),
        _ => None,
    })
}

/// The places in units from the origin, turned as the stress is.
fn around(lean: &Lean, frame: &Frame, stress: &Stress) -> Option<Vec<[i128; 2]>> {
    let base = lean.places[stress.origin.index()];
    let relative = |joint: JointId| {
        let place = lean.places[joint.index()];
        [place[0] - base[0], place[1] - base[1]]
    };
    let (cosine, sine) = match stress.turned.map(relative) {
        Some([x, y]) if x.hypot(y) > 0.0 => (x / x.hypot(y), y / x.hypot(y)),
        _ => (1.0, 0.0),
    };
    let units = 2f64.powi(UNIT_BITS as i32);
    let place = |joint: &JointId| {
        let [x, y] = relative(*joint);
        let turned = [cosine * x + sine * y, cosine * y - sine * x];
        let [x, y] = turned.map(|c| (c.is_finite() && c.abs() < 1e4).then(|| (c * units).round() as i128));
        Some([x?, y?])
    };
    frame.joints.iter().map(place).collect()
}

struct Finder<'a> {
    case: &'a Case<'a>,
    stress: &'a Stress,
    frame: &'a Frame,
    around: &'a [[i128; 2]],
}

/// A form linearised in floats, with the least and the greatest of its rest over the boxes.
struct Line {
    part: Part,
    unknowns: Vec<usize>,
    gradient: Vec<f64>,
    norm: f64,
    value: f64,
    rest: [f64; 2],
    lo: f64,
    hi: f64,
    linear: bool,
}

impl Finder<'_> {
    fn branch(&self, boxes: &[Way], splits: &mut usize) -> Option<Branch> {
        let lines = self.lines(boxes);
        if let Some(multipliers) = self.multipliers(boxes, &lines) {
            let branch = Branch::Combined { around: self.around.to_vec(), multipliers };
            let stress = Stress { branch, ..self.stress.clone() };
            if self.accepted(boxes, &stress) {
                return Some(stress.branch);
            }
        }
        self.split(boxes, &lines, splits)
    }

    fn accepted(&self, boxes: &[Way], stress: &Stress) -> bool {
        let Branch::Combined { around, multipliers } = &stress.branch else { return false };
        super::judge::cannot_be_reached(self.case, self.stress, self.frame, boxes, around, multipliers)
    }

    fn split(&self, boxes: &[Way], lines: &[Line], splits: &mut usize) -> Option<Branch> {
        *splits = splits.checked_sub(1)?;
        let (place, axis) = self.widest(boxes, lines)?;
        let span = boxes_from_origin(self.frame, boxes, place)[axis];
        if span.is_unbounded() || span.width() < 16 {
            return None;
        }
        let at = if span.lo < 0 && span.hi > 0 && span.lo.abs().min(span.hi) > span.width() / 8 {
            0
        } else {
            span.lo + span.width() / 2
        };
        let (joint, axis) = (self.frame.joints[place], if axis == 0 { Axis::X } else { Axis::Y });
        let half = |with: Span, splits: &mut usize| match self.frame.halved(boxes, joint, axis, with) {
            None => Some(Branch::Empty),
            Some(boxes) => self.branch(&boxes, splits),
        };
        let below = half(Span { lo: Span::ALL.lo, hi: at }, splits)?;
        let above = half(Span { lo: at, hi: Span::ALL.hi }, splits)?;
        Some(Branch::Split { joint, axis, at, halves: Box::new([below, above]) })
    }

    /// The widest bounded coordinate among the joints whose forms leave the most rest.
    fn widest(&self, boxes: &[Way], lines: &[Line]) -> Option<(usize, usize)> {
        let mut leaning: BTreeSet<usize> = BTreeSet::new();
        leaning.extend(
            lines
                .iter()
                .filter(
                    |line| matches!(line.part, Part::Condition(s, _) if self.case.conditions.len() > s.figure.index()),
                )
                .flat_map(|line| line.unknowns.iter().map(|u| u / 2 + 1)),
        );
        let widths = leaning.into_iter().flat_map(|place| [(place, 0), (place, 1)]);
        let bounded = widths.filter_map(|(place, axis)| {
            let span = boxes_from_origin(self.frame, boxes, place)[axis];
            (!span.is_unbounded()).then_some((span.width(), place, axis))
        });
        bounded.max().map(|(_, place, axis)| (place, axis))
    }

    fn lines(&self, boxes: &[Way]) -> Vec<Line> {
        let mut lines = Vec::new();
        for source in &self.stress.conditions {
            let condition = &self.case.conditions[source.figure.index()][source.condition];
            for (index, form) in forms(self.frame, condition, boxes, &self.stress.unit).iter().enumerate() {
                lines.extend(self.line(Part::Condition(*source, index), form, boxes));
            }
        }
        for (index, (corners, sign)) in self.stress.sides.iter().zip(self.frame.sides()) {
            lines.extend(self.line(Part::Side(*index), &side_form(*corners, *sign), boxes));
        }
        lines
    }

    /// In floats whose unit is the extent of the drawing.
    fn line(&self, part: Part, form: &Form, boxes: &[Way]) -> Option<Line> {
        let small = 2f64.powi(-(UNIT_BITS as i32));
        let centre = |(ends, axis): LegPart| (self.around[ends[1]][axis] - self.around[ends[0]][axis]) as f64 * small;
        let strayed = |(ends, axis): LegPart| {
            let span = self.frame.way(boxes, ends[0], ends[1])[axis];
            let centre = self.around[ends[1]][axis] - self.around[ends[0]][axis];
            [(span.lo - centre) as f64 * small, (span.hi - centre) as f64 * small]
        };
        let quadratic = form.terms.iter().any(|term| term.second.is_some());
        let mut line = Line {
            part,
            linear: !quadratic,
            unknowns: Vec::new(),
            gradient: Vec::new(),
            norm: 0.0,
            value: 0.0,
            rest: [0.0; 2],
            lo: f64::NEG_INFINITY,
            hi: f64::INFINITY,
        };
        for term in &form.terms {
            let (c, first) = (to_float(&term.coefficient), centre(term.first));
            let Some(part) = term.second else {
                line.value += c * first;
                line.slope(term.first, c);
                continue;
            };
            let second = centre(part);
            line.value += c * first * second;
            line.slope(term.first, c * second);
            line.slope(part, c * first);
            let (a, b) = (strayed(term.first), strayed(part));
            let mut ends = vec![a[0] * b[0], a[1] * b[1]];
            if term.first == part {
                ends.push(if a[0] < 0.0 && a[1] > 0.0 { 0.0 } else { ends[0] });
            } else {
                ends.extend([a[0] * b[1], a[1] * b[0]]);
            }
            let (lo, hi) =
                ends.iter().fold((f64::INFINITY, f64::NEG_INFINITY), |(lo, hi), e| (lo.min(c * e), hi.max(c * e)));
            line.rest[0] += lo;
            line.rest[1] += hi;
        }
        let factor = if quadratic { small * small } else { small };
        line.lo = form.lo.as_ref().map_or(f64::NEG_INFINITY, |lo| to_float(lo) * factor);
        line.hi = form.hi.as_ref().map_or(f64::INFINITY, |hi| to_float(hi) * factor);
        line.norm = line.gradient.iter().map(|g| g * g).sum::<f64>().sqrt();
        let usable = line.norm > 1e-9 && line.rest.iter().all(|r| r.is_finite() && r.abs() < 1e6);
        usable.then_some(line)
    }

    /// Multipliers in whole numbers from a programme over the lines and the boxes.
    fn multipliers(&self, boxes: &[Way], lines: &[Line]) -> Option<Vec<(Part, i128)>> {
        let unknowns = 2 * (self.frame.joints.len() - 1);
        let small = 2f64.powi(-(UNIT_BITS as i32));
        let mut touched: Vec<Vec<usize>> = lines.iter().map(|line| line.unknowns.clone()).collect();
        let mut strips: Vec<Option<Strip>> = lines.iter().map(|line| Some(line.strip())).collect();
        for unknown in 0..unknowns {
            let (place, axis) = (unknown / 2 + 1, unknown % 2);
            let span = boxes_from_origin(self.frame, boxes, place)[axis];
            let centre = self.around[place][axis] - self.around[0][axis];
            if !span.is_unbounded() {
                touched.push(vec![unknown]);
                let [lo, hi] = [span.lo - centre - 1, span.hi - centre + 1].map(|end| end as f64 * small);
                strips.push(Some(Strip { gradient: vec![1.0], lo, hi, elastic: 0.0 }));
            }
        }
        let pattern = Pattern::new(unknowns, &touched);
        let slope = vec![0.0; unknowns];
        let programme =
            Programme { pattern: &pattern, touched: &touched, strips, slope, overshoot_weight: 1.0, reach: 2.0 };
        let optimum = programme.solve()?;
        if optimum.overshoot <= 0.0 {
            return None;
        }
        let weights: Vec<f64> = lines.iter().zip(&optimum.multipliers).map(|(line, m)| m / line.norm).collect();
        whole_multipliers(lines, &optimum.multipliers, &weights)
    }
}

/// A form is in square units or in plain ones; its multiplier is brought to units and rounded.
fn whole_multipliers(lines: &[Line], raw: &[f64], weights: &[f64]) -> Option<Vec<(Part, i128)>> {
    let heaviest = raw.iter().take(lines.len()).fold(0.0f64, |a, b| a.max(b.abs()));
    // In units a linear form counts 2^UNIT_BITS times as much as a quadratic one.
    let in_units = |line: &Line, weight: f64| if line.linear { weight * 2f64.powi(UNIT_BITS as i32) } else { weight };
    let greatest = lines.iter().zip(weights).map(|(line, w)| in_units(line, *w).abs()).fold(0.0f64, f64::max);
    let scale = 2f64.powi(MULTIPLIER_BITS) / greatest;
    let rounded = lines.iter().zip(raw).zip(weights).filter(|((_, m), _)| m.abs() > 1e-9 * heaviest);
    let rounded =
        rounded.map(|((line, _), weight)| Some((line.part, (in_units(line, *weight) * scale).round().to_i128()?)));
    rounded.filter(|entry| entry.as_ref().is_none_or(|(_, m)| *m != 0)).collect()
}

impl Line {
    fn slope(&mut self, (ends, axis): LegPart, by: f64) {
        for (place, sign) in [(ends[1], 1.0), (ends[0], -1.0)] {
            let Some(joint) = place.checked_sub(1) else { continue };
            let unknown = 2 * joint + axis;
            match self.unknowns.iter().position(|u| *u == unknown) {
                Some(at) => self.gradient[at] += sign * by,
                None => {
                    self.unknowns.push(unknown);
                    self.gradient.push(sign * by);
                }
            }
        }
    }

    /// The bounds, loosened by the rest and brought to lengths.
    fn strip(&self) -> Strip {
        let end = |x: f64| (x / self.norm).clamp(-10.0, 10.0);
        Strip {
            gradient: self.gradient.iter().map(|g| g / self.norm).collect(),
            lo: end(self.lo - self.value - self.rest[1]),
            hi: end(self.hi - self.value - self.rest[0]),
            elastic: 1.0,
        }
    }
}

fn boxes_from_origin(frame: &Frame, boxes: &[Way], place: usize) -> Way {
    frame.way(boxes, 0, place)
}
