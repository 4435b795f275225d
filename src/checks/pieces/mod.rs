//! Pieces: what the shop cuts for each member, whose depth is more than its working line.
//!
//! ```text
//! Placed + Shop -> Meeting (what runs through at a joint) -> End (cuts) -> Piece (outline, lengths) -> findings, collisions
//! ```
//!
//! # What runs through at a joint
//!
//! Chords run through before posts, posts before webs, webs before others. Of the members of the best rank at a joint
//!
//! - two in line with each other run through: each ends square at the working point, as at a splice;
//! - else the two on either side of the widest open sector meet in a mitre, along the line through the meetings of their outer
//!   and of their inner edges (the bisector, where both are of one depth and one line);
//! - a lone one ends square at the working point.
//!
//! Everything else stops against the near edges of what runs before it: of the next such member to its left and of the next to
//! its right, each where it is less than half a turn away; the edges are taken as endless. Where both count within the depth
//! there are two cuts, which meet in a point, or, against a corner that stands out, in a notch. What comes from exactly opposite
//! is butted square at the working point. The gap is left in front of those edges, not in splices and mitres.
//!
//! Members of one rank that stop at one joint do not make room for each other; where their pieces overlap that is told as a
//! collision.
//!
//! # Exactness
//!
//! Edges are parallel to rational lines at distances that hold a root, so every corner is a sum of rational multiples of the
//! lengths of the members that meet at its joint. Such sums have certain signs and certain rounding ([`RootSum`]); nothing here
//! is near enough, on the border, or a floating-point number.

mod angle;
mod end;
mod meet;
mod outline;
mod overlap;
mod shop;
mod tell;
#[cfg(test)]
mod tests;

pub use shop::{Line, Shop, Stock};

use super::findings::Finding;
use super::frame::Frame;
use super::limits::Limits;
use super::placed::Placed;
use crate::exact::{Interval, RootSum};
use crate::measure::Sheet;
use crate::truss::{JointId, MemberId};
use end::{End, Slice};
use meet::Meeting;
use outline::Body;
use serde::{Deserialize, Serialize};

/// Fractional bits of the enclosures that are handed out.
const BITS: u32 = 48;

/// The pieces of a truss.
#[derive(Clone, Debug, Default, PartialEq, Eq, Serialize, Deserialize)]
pub struct Pieces {
    /// One for each member, in the order of the truss.
    pub pieces: Vec<Piece>,
    /// Neighbours at a joint whose pieces overlap.
    pub collisions: Vec<Collision>,
    /// Pieces with nothing left, and tight ends.
    pub findings: Vec<Finding>,
}

/// What is cut for a member.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub struct Piece {
    /// The member.
    pub member: MemberId,
    /// Whether its ends leave a piece between them.
    pub left: Left,
    /// Its corners counter-clockwise, each as enclosures of x and y at most 2^-48 of the unit wide, exact where they are written
    /// without a root. It starts at the lower (right) edge and the left (lower) end. Empty unless the piece is whole.
    pub outline: Vec<[Interval; 2]>,
    /// Cut length along the upper (left) edge. This and the other lengths are below zero where the cuts pass each other.
    pub upper: Length,
    /// Cut length along the lower (right) edge.
    pub lower: Length,
    /// Cut length along the working line.
    pub line: Length,
    /// From long point to long point, along the member.
    pub long: Length,
    /// Its ends, in the order of the member's.
    pub ends: [PieceEnd; 2],
}

/// Whether the cuts at both ends leave a piece.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash, Serialize, Deserialize)]
#[serde(rename_all = "lowercase")]
pub enum Left {
    /// Over the whole depth.
    Whole,
    /// Over a part of the depth only: the cuts of both ends cross in it.
    Part,
    /// Nothing.
    Nothing,
}

/// A length of a piece.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub struct Length {
    /// As it is printed, correctly rounded to the sheet's step; a tie goes away from zero.
    pub text: String,
    /// An enclosure at most 2^-48 of the unit wide; one number only where the length is written without a root.
    pub enclosure: Interval,
    /// True when nothing was rounded in the text.
    pub exact: bool,
}

/// One end of a piece.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub struct PieceEnd {
    /// Where it is.
    pub joint: JointId,
    /// From the working point to the cut, along the working line; below zero where the piece reaches past the working point.
    pub deduction: Length,
    /// Its shape.
    pub shape: EndShape,
}

/// The shape of an end.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "lowercase")]
pub enum EndShape {
    /// A square cut, against this member if any.
    Square(Option<MemberId>),
    /// One cut that is not square.
    One(Cut),
    /// A double cut: the cut at the upper (left) edge first.
    Two {
        /// The cuts.
        cuts: [Cut; 2],
        /// They leave a notch between them, not a point.
        notch: bool,
    },
}

/// One cut.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub struct Cut {
    /// The member it is cut against.
    pub against: Option<MemberId>,
    /// The corner is mitred with that member.
    pub mitre: bool,
    /// The angle from the working line to the cut in degrees, from 0 to 90, correctly rounded to 0.1: 90 is square.
    pub degrees: String,
    /// How far the cut runs along the member for 12 (1000 on metric sheets) across it, smaller leg first; `0 in 12` is square,
    /// and `steep` is a cut nearer to the working line than 45 degrees.
    pub bevel: String,
}

/// Two whole pieces that overlap: they share some area. Touching is fine.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash, Serialize, Deserialize)]
pub struct Collision {
    /// The joint at which they are neighbours.
    pub joint: JointId,
    /// Their members, counter-clockwise around the joint.
    pub members: [MemberId; 2],
}

/// Cuts the pieces of a placed truss.
///
/// Members without length have no piece. A truss that names a joint that is not there has none at all.
///
/// Near linear in the members of the truss, quadratic in those of one joint at worst.
pub fn pieces(placed: &Placed, shop: &Shop, limits: &Limits) -> Pieces {
    let count = placed.truss.joints.len().min(placed.points.len());
    let is_there = |joint: JointId| joint.index() < count;
    let truss = placed.truss;
    let is_whole = truss.members.iter().all(|member| member.ends().into_iter().all(is_there))
        && truss.supports.iter().all(|support| is_there(support.joint))
        && placed.points.len() == truss.joints.len();
    if !is_whole {
        return Pieces::default();
    }
    let frame = Frame::new(placed, limits);
    let bodies = bodies(&frame, shop);
    Pieces {
        pieces: (0..bodies.len()).map(|member| piece(&frame, member, bodies[member].as_ref())).collect(),
        collisions: overlap::collisions(&frame, &bodies),
        findings: tell::findings(&frame, &bodies),
    }
}

/// The body of every member that has a length.
fn bodies(frame: &Frame, shop: &Shop) -> Vec<Option<Body>> {
    let mut ends: Vec<[Option<End>; 2]> = frame.ends.iter().map(|_| [None, None]).collect();
    for joint in 0..frame.joint_count() {
        let meeting = Meeting::at(frame, shop, joint);
        for (place, stick) in meeting.sticks.iter().enumerate() {
            let side = usize::from(frame.left_to_right(stick.member)[0] != joint);
            ends[stick.member][side] = Some(End::new(&meeting, place, frame.lattice.point(joint), &shop.gap));
        }
    }
    let body = |[first, last]: [Option<End>; 2]| Some(Body::new([first?, last?]));
    ends.into_iter().map(body).collect()
}

fn piece(frame: &Frame, member: usize, body: Option<&Body>) -> Piece {
    let sheet = frame.print.sheet();
    let [from, to] = frame.ends[member];
    let Some(body) = body else {
        let nothing = || Length::of(sheet, &RootSum::default());
        let end = |joint| PieceEnd { joint: JointId::new(joint), deduction: nothing(), shape: EndShape::Square(None) };
        return Piece {
            member: MemberId::new(member),
            left: Left::Nothing,
            outline: Vec::new(),
            upper: nothing(),
            lower: nothing(),
            line: nothing(),
            long: nothing(),
            ends: [end(from), end(to)],
        };
    };
    // The left edge of the first end is the upper one, of the second the lower one.
    let is_forward = frame.left_to_right(member)[0] == from;
    let side = |place: usize| if is_forward { place } else { 1 - place };
    let end = |joint, place: usize| piece_end(sheet, joint, &body.ends[side(place)], side(place) == 0);
    Piece {
        member: MemberId::new(member),
        left: body.left,
        outline: body.outline.iter().map(|corner| corner.enclosures(BITS)).collect(),
        upper: Length::of(sheet, &body.upper),
        lower: Length::of(sheet, &body.lower),
        line: Length::of(sheet, &body.line),
        long: Length::of(sheet, &body.long),
        ends: [end(from, 0), end(to, 1)],
    }
}

fn piece_end(sheet: &Sheet, joint: usize, end: &End, left_is_upper: bool) -> PieceEnd {
    let cut = |slice: &Slice| Cut {
        against: slice.against.map(MemberId::new),
        mitre: slice.is_mitre,
        degrees: angle::degrees(end.skew(slice).as_ref()),
        bevel: angle::bevel(sheet, end.skew(slice).as_ref()),
    };
    let shape = match end.slices.as_slice() {
        [right, left] => {
            let cuts = if left_is_upper { [cut(left), cut(right)] } else { [cut(right), cut(left)] };
            EndShape::Two { cuts, notch: end.is_notch }
        }
        [slice, ..] if end.skew(slice).is_some_and(|skew| skew.is_positive()) => EndShape::One(cut(slice)),
        slices => EndShape::Square(slices.first().and_then(|slice| slice.against).map(MemberId::new)),
    };
    PieceEnd { joint: JointId::new(joint), deduction: Length::of(sheet, &end.true_length(&end.at_line())), shape }
}

impl Length {
    fn of(sheet: &Sheet, value: &RootSum) -> Length {
        let enclosure = value.enclosure(BITS);
        match value.nearest(sheet.step()) {
            Some(rounded) => {
                let text = sheet.length(&(sheet.step() * crate::exact::whole(rounded.steps)));
                Length { text, enclosure, exact: rounded.exact }
            }
            // The step of a sheet is positive.
            None => Length { text: String::new(), enclosure, exact: false },
        }
    }
}
