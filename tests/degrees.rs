//! Certified degrees against the floating-point functions of the standard library, which know nothing of them.

use chordwright::exact::{
    Rational, Vector, degrees_of, degrees_of_spread, nearest_degrees, ratio, spread_of_degrees, whole,
};
use num_bigint::BigInt;
use num_traits::{One, ToPrimitive};

fn vector(x: i64, y: i64) -> Vector {
    Vector { x: whole(x), y: whole(y) }
}

fn rounded(v: &Vector) -> String {
    let (steps, _) = nearest_degrees(v, &ratio(1, 1000)).expect("a direction");
    Rational::new(steps, 1000.into()).to_f64().map(|d| format!("{d:.3}")).expect("finite")
}

#[test]
fn directions_in_every_octant() {
    // Against the tangent's own identities: 3-4-5 is 36.8699 degrees, and its mirror images.
    for (v, expected) in [
        (vector(4, 3), "36.870"),
        (vector(3, 4), "53.130"),
        (vector(-3, 4), "126.870"),
        (vector(-4, 3), "143.130"),
        (vector(-4, -3), "216.870"),
        (vector(3, -4), "306.870"),
        (vector(1, 0), "0.000"),
        (vector(0, 7), "90.000"),
        (vector(-5, 5), "135.000"),
        (vector(2, -2), "315.000"),
        (vector(1_000_000_000, 1), "0.000"),
    ] {
        assert_eq!(rounded(&v), expected, "{v:?}");
    }
    assert_eq!(degrees_of(&vector(0, 0), 96), None);
}

#[test]
fn enclosures_hold_the_floating_point_value() {
    for (x, y) in [(7, 2), (2, 7), (120, 119), (1, 999), (355, 113), (31, 1), (32, 1), (1, 1_000_003)] {
        let enclosure = degrees_of(&vector(x, y), 96).expect("a direction");
        let float = (y as f64).atan2(x as f64).to_degrees();
        let middle = enclosure.middle().to_f64().expect("finite");
        assert!((float - middle).abs() < 1e-12, "{x} {y}: {float} {middle}");
        assert!(enclosure.width() < Rational::new(1.into(), BigInt::one() << 70u32), "{x} {y}");
    }
}

#[test]
fn spreads_of_degrees_and_back() {
    for degrees in
        [ratio(1, 10), whole(10), ratio(266, 10), whole(44), ratio(451, 10), whole(89), whole(120), whole(179)]
    {
        let spread = spread_of_degrees(&degrees, 96);
        let sine = degrees.to_f64().expect("finite").to_radians().sin();
        assert!((spread.middle().to_f64().expect("finite") - sine * sine).abs() < 1e-14, "{degrees}");
        let sharp = if degrees > whole(90) { whole(180) - &degrees } else { degrees.clone() };
        let ends = [spread.lo(), spread.hi()].map(|s| degrees_of_spread(s, 96).expect("a spread"));
        assert!(ends[0].lo() <= &sharp && &sharp <= ends[1].hi(), "{degrees}");
    }
}
