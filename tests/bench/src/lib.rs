//! What is measured both natively and in WebAssembly: trusses to measure with, and the work that is done on them.

#[path = "../../trusses/mod.rs"]
mod trusses;
mod values;
#[cfg(target_arch = "wasm32")]
pub mod wasm;
mod work;

pub use values::{Corners, Fractions, Plain, floats, fractions, steps};
pub use work::{Work, Workload};

use chordwright::exact::{Rational, whole};
use chordwright::measure::Written;
use chordwright::truss::{Joint, JointId, Member, Role, Truss};

/// A long truss with parallel chords, about so many members, all joints set, on a pin and a roller.
pub fn long_truss(members: usize) -> Truss {
    trusses::long_truss((members / 4).saturating_sub(1))
}

/// A lattice of braced fields, so many on a side, its joints a little out of the straight and measured in sixteenths.
pub fn braced_lattice(side: usize) -> Truss {
    let mut truss = trusses::lattice(side);
    let sixteenth = |value: &Written| Written::plain(&value.value / whole(16));
    truss.joints.iter_mut().for_each(|joint| (joint.x, joint.y) = (sixteenth(&joint.x), sixteenth(&joint.y)));
    truss
}

/// A square lattice with just enough diagonals to stand, so many fields on a side.
pub fn bare_lattice(side: usize) -> Truss {
    trusses::bare_lattice(side)
}

/// A truss of loose sticks: every member has two joints of its own, at these whole places.
pub fn sticks(places: &[[i64; 4]]) -> Truss {
    let at = |number: usize, x: i64, y: i64| {
        let place = |value: i64| Written::plain(Rational::from_integer(value.into()));
        Joint { mark: format!("J{number}"), x: place(x), y: place(y), loose: false }
    };
    let joints = places.iter().enumerate().flat_map(|(i, &[a, b, c, d])| [at(2 * i, a, b), at(2 * i + 1, c, d)]);
    let member = |i: usize| Member {
        mark: format!("M{i}"),
        from: JointId::new(2 * i),
        to: JointId::new(2 * i + 1),
        role: Role::Other,
    };
    Truss { joints: joints.collect(), members: (0..places.len()).map(member).collect(), ..Truss::default() }
}
