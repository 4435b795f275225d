//! The adjustment against published least-squares adjustments of surveying networks (tests only).
//!
//! With every residual inside its half interval the robust adjustment is plain weighted least squares, so it has to give
//! the published coordinates, to their last digit.

use super::trial::Problem;
use super::{CloseState, Effort, close};
use crate::exact::{Rational, ratio, whole};
use crate::measure::{Unit, Written, parse_plain};
use crate::truss::{Figure, FigureKind, Joint, Truss};
use serde::Deserialize;

/// A network with its published adjustment; lengths in metres.
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
    deviation_mm: String,
}

/// F. Krumm, Geodetic Network Adjustment Examples, University of Stuttgart, revision 3.5, 2020, after the textbooks that
/// the networks are named by; the coordinates are the published ones.
fn networks() -> Vec<Network> {
    serde_json::from_str(include_str!("../../../tests/data/least-squares-networks.json")).expect("five networks")
}

/// Half an interval in standard deviations, so that every published residual is inside: the deviations of the last network
/// are relative (about a metre, for residuals of centimetres).
fn half_interval(network: &Network) -> Rational {
    if network.name.starts_with("Weiss") { ratio(1, 20) } else { whole(4) }
}

fn number(text: &str) -> Rational {
    parse_plain(text).expect("a number")
}

fn float(text: &str) -> f64 {
    text.parse().expect("a number")
}

/// Stations as joints, distances as lengths, each printed to a step of twice its half interval.
fn truss(network: &Network) -> Truss {
    let mut truss = Truss { unit: Unit::M, step: Written::plain(ratio(1, 1000)), ..Truss::default() };
    for station in &network.joints {
        let [x, y] = [&station.x, &station.y].map(|text| Written::plain(number(text)));
        truss.joints.push(Joint { mark: station.mark.clone(), x, y, loose: !station.fixed });
    }
    for (index, distance) in network.distances.iter().enumerate() {
        let [from, to] = [&distance.from, &distance.to].map(|mark| truss.joint_marked(mark).expect("a station"));
        let step = number(&distance.deviation_mm) * half_interval(network) * ratio(2, 1000);
        truss.figures.push(Figure {
            mark: format!("d{}", index + 1),
            kind: FigureKind::Length { from, to, value: Written::plain(number(&distance.metres)) },
            step: Some(Written::plain(step)),
        });
    }
    truss
}

/// The adjusted places in metres.
fn adjusted(truss: &Truss) -> Vec<[f64; 2]> {
    use super::search::model::to_float;
    let problem = Problem::new(truss, &Effort::default());
    let places = problem.adjusted(&[]);
    problem.with_base(&[], |base| {
        let [x, y, scale] = [&base.model.origin.x, &base.model.origin.y, &base.model.scale].map(to_float);
        places.iter().map(|place| [place[0] * scale + x, place[1] * scale + y]).collect()
    })
}

#[test]
fn the_adjustment_gives_the_published_coordinates() {
    let mut fixed = 0;
    for network in networks().iter().filter(|network| network.joints.iter().any(|station| station.fixed)) {
        let truss = truss(network);
        let places = adjusted(&truss);
        for station in &network.published {
            let place = places[truss.joint_marked(&station.mark).expect("a station").index()];
            let off = f64::hypot(place[0] - float(&station.x), place[1] - float(&station.y));
            // Published to a tenth of a millimetre.
            assert!(off < 1.0e-4, "{}, {}: {place:?} is {off} m off", network.name, station.mark);
        }
        fixed += 1;
    }
    assert_eq!(fixed, 4);
}

#[test]
fn a_free_network_has_the_published_distances_whatever_it_is_pinned_at() {
    let networks = networks();
    let network = networks.iter().find(|n| n.joints.iter().all(|station| !station.fixed)).expect("a free network");
    let truss = truss(network);
    let places = adjusted(&truss);
    let published: Vec<[f64; 2]> =
        network.published.iter().map(|station| [float(&station.x), float(&station.y)]).collect();
    for (i, a) in network.published.iter().enumerate() {
        for (j, b) in network.published.iter().enumerate().skip(i + 1) {
            let [p, q] = [a, b].map(|station| places[truss.joint_marked(&station.mark).expect("a station").index()]);
            let here = f64::hypot(p[0] - q[0], p[1] - q[1]);
            let there = f64::hypot(published[i][0] - published[j][0], published[i][1] - published[j][1]);
            assert!((here - there).abs() < 2.0e-4, "{}-{}: {here} and {there}", a.mark, b.mark);
        }
    }
}

#[test]
fn a_network_closes_at_its_deviations_and_a_blunder_in_it_is_found() {
    for network in networks() {
        let good = truss(&network);
        let (answer, _) = close(&good, &Effort::default());
        assert_eq!(answer.state, CloseState::Closes, "{}: {}", network.name, answer.summary);
        if network.distances.len() < 20 {
            continue;
        }
        // Two metres too long, one distance after the other.
        for index in 0..good.figures.len() {
            let mut bad = good.clone();
            if let FigureKind::Length { value, .. } = &mut bad.figures[index].kind {
                *value = Written::plain(&value.value + whole(2));
            }
            let (answer, _) = close(&bad, &Effort::default());
            assert_eq!(answer.state, CloseState::DoesNotClose, "{}, d{}", network.name, index + 1);
            assert_eq!(answer.suspects.first().map(|s| s.figure.index()), Some(index), "{}", answer.summary);
        }
    }
}
