//! Surveying networks with published adjustments: their distances close beside the published places, and not after a blunder.
//!
//! The networks are in `tests/data/least-squares-networks.json`, each with its source (seen): F. Krumm, Geodetic Network
//! Adjustment Examples, University of Stuttgart, revision 3.5, 2020, after the textbook or paper that it is named by. All are
//! plane networks of distances in metres. Nothing had to be reduced or left out; networks of directions or of angles are not
//! among those that were seen with all their numbers.
//!
//! The published places have the least sum of squared misfits; a layout has every misfit within half a step. The two are
//! neighbours and not the same, so that the places agree to about a step. The adjustment itself is compared to the last
//! published digit in the unit tests of `checks::close`.

mod close_help;

use chordwright::checks::{CloseAnswer, CloseState, Effort, Finding, Proof, Rule, close};
use chordwright::exact::{Point, Rational, quadrance};
use chordwright::measure::{Unit, Written, parse_plain};
use chordwright::truss::{Figure, FigureKind, Joint, JointId, Truss};
use close_help::{q, r, w};
use num_traits::{Signed, Zero};
use serde::Deserialize;

#[derive(Clone, Debug, Deserialize)]
struct Network {
    name: String,
    joints: Vec<Station>,
    distances: Vec<Distance>,
    published: Vec<Station>,
}

#[derive(Clone, Debug, Deserialize)]
struct Station {
    mark: String,
    x: String,
    y: String,
    #[serde(default)]
    fixed: bool,
}

#[derive(Clone, Debug, Deserialize)]
struct Distance {
    from: String,
    to: String,
    metres: String,
}

fn networks() -> Vec<Network> {
    serde_json::from_str(include_str!("data/least-squares-networks.json")).expect("networks")
}

fn number(text: &str) -> Rational {
    parse_plain(text).unwrap_or_else(|error| panic!("{text}: {error}"))
}

/// A network as it is tested.
struct Case {
    /// How its name begins.
    name: &'static str,
    /// The smallest step of the row 1, 2, 5, 10, 20 ... mm at which the published distances agree with each other, in metres.
    step: &'static str,
    /// The step before it in the row, at which they do not.
    too_fine: &'static str,
    /// Distances beyond those that are just enough.
    spare: usize,
}

const CASES: [Case; 5] = [
    Case { name: "Benning 2011, ex. 8-2", step: "1/100", too_fine: "1/200", spare: 1 },
    Case { name: "Benning 2011, ex. 8-8", step: "1/20", too_fine: "1/50", spare: 3 },
    Case { name: "Strang & Borre 1997, ex. 10.1", step: "1/20", too_fine: "1/50", spare: 1 },
    Case { name: "Strang & Borre 1997, ex. 12.4", step: "1/50", too_fine: "1/100", spare: 1 },
    Case { name: "Weiss et al. 2010", step: "1/20", too_fine: "1/50", spare: 14 },
];

fn each(check: impl Fn(&Case, &Network)) {
    let networks = networks();
    assert_eq!(networks.len(), CASES.len());
    for case in &CASES {
        let network = networks.iter().find(|network| network.name.starts_with(case.name)).expect(case.name);
        check(case, network);
    }
}

/// Stations as joints, the unknown ones sketched some metres off their published places; distances as lengths.
fn truss(network: &Network, step: &str) -> Truss {
    let mut truss = Truss { unit: Unit::M, step: Written::plain(r(step)), ..Truss::default() };
    for (index, station) in network.joints.iter().enumerate() {
        let published = network.published.iter().find(|published| published.mark == station.mark);
        let place = published.filter(|_| !station.fixed).unwrap_or(station);
        let off = if station.fixed { [0, 0] } else { [[3, -2], [-2, -3], [2, 3]][index % 3] };
        let [x, y] = [(&place.x, off[0]), (&place.y, off[1])].map(|(text, off)| {
            let value = number(text) + w(off);
            Written::plain(if station.fixed { value } else { value.round() })
        });
        truss.joints.push(Joint { mark: station.mark.clone(), x, y, loose: !station.fixed });
    }
    for (index, distance) in network.distances.iter().enumerate() {
        let [from, to] = [&distance.from, &distance.to].map(|mark| truss.joint_marked(mark).expect("a station"));
        let kind = FigureKind::Length { from, to, value: Written::plain(number(&distance.metres)) };
        truss.figures.push(Figure { mark: format!("d{}", index + 1), kind, step: None });
    }
    assert_eq!(truss.problems(), Vec::new(), "{}", network.name);
    truss
}

fn ask(truss: &Truss) -> (CloseAnswer, Vec<Finding>) {
    close(truss, &Effort::default())
}

fn ends(truss: &Truss, figure: usize) -> ([JointId; 2], Rational) {
    let FigureKind::Length { from, to, value } = &truss.figures[figure].kind else {
        panic!("every figure is a length")
    };
    ([*from, *to], value.value.clone())
}

/// True when a length comes to its printed value, within half a step.
fn agrees(truss: &Truss, figure: usize, places: &[Point]) -> bool {
    let ([from, to], printed) = ends(truss, figure);
    let half = &truss.step.value / w(2);
    let (least, most) = (&printed - &half, &printed + &half);
    let found = quadrance(&places[from.index()], &places[to.index()]);
    found >= &least * &least && found <= &most * &most
}

/// True when `|√a - √b| <= most`, by squaring twice.
fn nearly_equal(a: &Rational, b: &Rational, most: &Rational) -> bool {
    let left = a + b - most * most;
    !left.is_positive() || &left * &left <= w(4) * a * b
}

/// The published places, those of the set stations with them, in the order of the joints.
fn published(network: &Network) -> Vec<Point> {
    let place = |station: &Station| Point::new(number(&station.x), number(&station.y));
    let found =
        |station: &Station| network.published.iter().find(|published| published.mark == station.mark).map(place);
    network.joints.iter().map(|station| found(station).unwrap_or_else(|| place(station))).collect()
}

#[test]
fn published_distances_close_beside_the_published_places() {
    each(|case, network| {
        let truss = truss(network, case.step);
        let (answer, findings) = ask(&truss);
        let what = format!("{}: {} {findings:?}", case.name, answer.summary);
        assert_eq!((answer.state, answer.proof), (CloseState::Closes, Proof::Layout), "{what}");
        let places = answer.layout.expect("a layout");
        for figure in 0..truss.figures.len() {
            assert!(agrees(&truss, figure, &places), "{what}: {} does not agree", truss.figures[figure].mark);
        }
        let (published, near) = (published(network), r(case.step));
        for (i, joint) in truss.joints.iter().enumerate() {
            if truss.joints.iter().any(|joint| !joint.loose) {
                let off = quadrance(&places[i], &published[i]);
                let most = if joint.loose { &near * &near } else { w(0) };
                assert!(off <= most, "{what}: {} is {off} m² off", joint.mark);
                continue;
            }
            // A free network may lie anywhere: its distances are compared, also those that were not measured.
            for j in 0..i {
                let (here, there) = (quadrance(&places[i], &places[j]), quadrance(&published[i], &published[j]));
                assert!(nearly_equal(&here, &there, &near), "{what}: {} from {}", joint.mark, truss.joints[j].mark);
            }
        }
    });
}

#[test]
fn the_steps_are_the_smallest_of_their_row() {
    each(|case, network| {
        let loose = network.joints.iter().filter(|station| !station.fixed).count();
        // A free network slides two ways and turns.
        let free = if loose == network.joints.len() { 3 } else { 0 };
        assert_eq!(network.distances.len() + free - 2 * loose, case.spare, "{}", case.name);
        let ratio = r(case.step) / r(case.too_fine);
        assert!(ratio == w(2) || ratio == q(5, 2), "{}: neighbours in the row", case.name);
        let (answer, findings) = ask(&truss(network, case.too_fine));
        let what = format!("{}: {} {findings:?}", case.name, answer.summary);
        assert_eq!((answer.state, answer.proof), (CloseState::DoesNotClose, Proof::Exclusion), "{what}");
    });
}

#[test]
fn a_blunder_in_any_distance_is_excluded_and_suspected() {
    each(|case, network| {
        let good = truss(network, case.step);
        for altered in 0..good.figures.len() {
            for by in [1, -1] {
                let mut bad = good.clone();
                if let FigureKind::Length { value, .. } = &mut bad.figures[altered].kind {
                    *value = Written::plain(&value.value + w(by));
                }
                judge(case, &bad, altered, &format!("{}, d{} by {by} m", case.name, altered + 1));
            }
        }
    });
}

fn judge(case: &Case, bad: &Truss, altered: usize, what: &str) {
    let (answer, findings) = ask(bad);
    let what = format!("{what}: {} {findings:?}", answer.summary);
    assert_eq!((answer.state, answer.proof), (CloseState::DoesNotClose, Proof::Exclusion), "{what}");
    assert!(findings.iter().any(|finding| finding.rule == Rule::Excluded), "{what}");
    let suspects: Vec<usize> = answer.suspects.iter().map(|suspect| suspect.figure.index()).collect();
    // With one distance to spare each is as suspect as the next; with more the blunder comes first.
    match case.spare {
        1 => assert!(suspects.contains(&altered), "{what}: {suspects:?}"),
        _ => assert_eq!(suspects.first(), Some(&altered), "{what}"),
    }
    let as_measured = ends(bad, altered).1;
    for suspect in &answer.suspects {
        let others = (0..bad.figures.len()).filter(|figure| *figure != suspect.figure.index());
        for figure in others {
            assert!(agrees(bad, figure, &suspect.layout), "{what}: d{} without {:?}", figure + 1, suspect.figure);
        }
        if suspect.figure.index() == altered {
            let range = &suspect.implied_range;
            assert!(as_measured < *range.lo() || as_measured > *range.hi(), "{what}: {range:?}");
            assert!(!(range.hi() - range.lo()).is_zero(), "{what}: other distances are not exact");
        }
    }
}
