//! Planted truths and planted slips: drawings made from seeds, whose answers are known before they are asked.

mod close_help;

use chordwright::checks::{CloseAnswer, CloseState, Effort, Proof, close};
use chordwright::truss::Truss;
use close_help::generate::{Dice, SHAPES, clean, mixed, slip, slip_of_any_kind};
use close_help::{agrees, q};

fn asked(truss: &Truss) -> CloseAnswer {
    close(truss, &Effort::default()).0
}

#[test]
fn every_clean_drawing_closes_with_a_layout_that_agrees() {
    for shape in SHAPES {
        for panels in 4..=14 {
            for seed in 0..4 {
                let planted = clean(shape, panels, seed);
                let answer = asked(&planted.truss);
                let what = format!("{shape:?}, {panels} panels, seed {seed}: {}", answer.summary);
                assert_eq!((answer.state, answer.proof), (CloseState::Closes, Proof::Layout), "{what}");
                assert!(agrees(&planted.truss, &answer.layout.expect("a layout"), &[]), "{what}");
            }
        }
    }
}

/// What became of the planted slips.
#[derive(Debug, Default)]
struct Tally {
    planted: usize,
    still_close: usize,
    excluded: usize,
    suspected: usize,
    first: usize,
}

#[test]
fn a_planted_slip_is_excluded_by_proof_and_found() {
    let mut tally = Tally::default();
    for shape in SHAPES {
        for panels in [4, 5, 6, 7, 8, 9, 10, 12, 14] {
            for seed in 0..12 {
                one_slip(clean(shape, panels, seed).truss, panels, seed, &mut tally);
            }
        }
    }
    println!("{tally:?}");
    let wrong = tally.planted - tally.still_close;
    assert!(tally.still_close * 20 <= tally.planted, "most slips of an eighth or more leave no layout: {tally:?}");
    assert!(tally.excluded * 100 >= wrong * 95, "at least 95 in 100 are excluded by proof: {tally:?}");
    assert_eq!(tally.suspected, tally.excluded, "the planted figure is always a suspect: {tally:?}");
    assert!(tally.first * 100 >= wrong * 95, "and first in at least 95 of 100: {tally:?}");
}

fn one_slip(truth: Truss, panels: usize, seed: u64, tally: &mut Tally) {
    let mut dice = Dice::new(seed + 1000 * panels as u64);
    let figure = dice.below(truth.figures.len());
    let sign = if dice.below(2) == 0 { 1 } else { -1 };
    let truss = slip(&truth, figure, &q(dice.between(2, 40) * sign, 16));
    let answer = asked(&truss);
    tally.planted += 1;
    match answer.state {
        CloseState::Closes => {
            tally.still_close += 1;
            assert!(agrees(&truss, &answer.layout.expect("a layout"), &[]), "never a false word");
        }
        CloseState::DoesNotClose => {
            tally.excluded += 1;
            for suspect in &answer.suspects {
                assert!(agrees(&truss, &suspect.layout, &[suspect.figure.index()]), "a suspect is proved by a layout");
            }
            let place = answer.suspects.iter().position(|suspect| suspect.figure.index() == figure);
            tally.suspected += usize::from(place.is_some());
            tally.first += usize::from(place == Some(0));
        }
        other => println!("{}: {}", other.name(), answer.summary),
    }
}

#[test]
fn clean_drawings_with_figures_of_every_kind_close() {
    for seed in 0..400 {
        let planted = mixed(seed);
        let (answer, found) = close(&planted.truss, &Effort::default());
        assert_eq!(answer.state, CloseState::Closes, "{seed}: {} {:?}", answer.summary, found.first());
    }
}

#[test]
fn a_slip_in_a_figure_of_any_kind_is_excluded_by_proof_and_found() {
    let mut tally = Tally::default();
    for seed in 0..400 {
        let truth = mixed(seed).truss;
        let mut dice = Dice::new(seed + 5000);
        let figure = dice.below(truth.figures.len());
        let Some(truss) = slip_of_any_kind(&truth, figure, &mut dice) else { continue };
        let answer = asked(&truss);
        tally.planted += 1;
        match answer.state {
            CloseState::Closes => tally.still_close += 1,
            CloseState::DoesNotClose => {
                tally.excluded += 1;
                let place = answer.suspects.iter().position(|suspect| suspect.figure.index() == figure);
                tally.suspected += usize::from(place.is_some());
                tally.first += usize::from(place == Some(0));
                if place.is_none() {
                    println!("seed {seed}, {}: {}", truth.figures[figure].kind.name(), answer.summary);
                }
            }
            other => println!("seed {seed}: {}: {}", other.name(), answer.summary),
        }
    }
    println!("{tally:?}");
    let wrong = tally.planted - tally.still_close;
    assert!(tally.planted >= 300 && tally.still_close * 10 <= tally.planted, "{tally:?}");
    assert!(tally.excluded * 100 >= wrong * 95, "at least 95 in 100 are excluded by proof: {tally:?}");
    assert!(tally.suspected * 100 >= tally.excluded * 99, "the slipped figure is a suspect: {tally:?}");
    assert!(tally.first * 100 >= wrong * 95, "and first in at least 95 of 100: {tally:?}");
}
