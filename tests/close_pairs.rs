//! Two slips at once: the pair is found, within a bound of work.

mod close_help;

use chordwright::checks::{CloseAnswer, CloseState, Effort, close};
use chordwright::exact::quadrance;
use chordwright::truss::{FigureKind, JointId, Truss};
use close_help::generate::{Dice, SHAPES, clean, slip};
use close_help::q;
use std::collections::HashSet;

/// Two places among the figures that share no joint.
fn two_apart(truss: &Truss, dice: &mut Dice) -> [usize; 2] {
    loop {
        let [a, b] = [0, 0].map(|_: i32| dice.below(truss.figures.len()));
        let joints: HashSet<JointId> = truss.figures[a].kind.joints().into_iter().collect();
        if truss.figures[b].kind.joints().iter().all(|joint| !joints.contains(joint)) {
            return [a.min(b), a.max(b)];
        }
    }
}

/// True when the layout of a blamed figure agrees with every length but those blamed.
fn agrees_without(truss: &Truss, answer: &CloseAnswer) -> bool {
    let blamed: Vec<usize> = answer.pair.iter().map(|suspect| suspect.figure.index()).collect();
    let places = &answer.pair[0].layout;
    truss.figures.iter().enumerate().filter(|(index, _)| !blamed.contains(index)).all(|(_, figure)| {
        let FigureKind::Length { from, to, value } = &figure.kind else { return true };
        let half = q(1, 32);
        let (least, most) = (&value.value - &half, &value.value + &half);
        let found = quadrance(&places[from.index()], &places[to.index()]);
        found >= &least * &least && found <= &most * &most
    })
}

#[derive(Debug, Default)]
struct Tally {
    planted: usize,
    alone: usize,
    excluded: usize,
    pair: usize,
    other_pair: usize,
}

#[test]
fn two_planted_slips_are_excluded_and_the_pair_is_found() {
    let mut tally = Tally::default();
    for shape in SHAPES {
        for panels in [4, 6, 8] {
            for seed in 0..4 {
                let truth = clean(shape, panels, seed).truss;
                let mut dice = Dice::new(seed + 31 * panels as u64);
                let pair = two_apart(&truth, &mut dice);
                let mut truss = truth;
                for figure in pair {
                    let sign = if dice.below(2) == 0 { 1 } else { -1 };
                    truss = slip(&truss, figure, &q(dice.between(6, 48) * sign, 16));
                }
                judge(&truss, pair, &mut tally);
            }
        }
    }
    println!("{tally:?}");
    assert!(tally.alone * 10 <= tally.planted, "{tally:?}");
    let two = tally.planted - tally.alone;
    assert!(tally.excluded * 100 >= two * 95, "at least 95 in 100 are excluded by proof: {tally:?}");
    assert!(tally.pair * 100 >= two * 90, "the pair is found in at least 90 of 100: {tally:?}");
}

fn judge(truss: &Truss, pair: [usize; 2], tally: &mut Tally) {
    let (answer, _) = close(truss, &Effort::default());
    tally.planted += 1;
    if answer.state == CloseState::Closes || !answer.suspects.is_empty() {
        // One of the two has no other figure against it.
        tally.alone += 1;
        return;
    }
    tally.excluded += usize::from(answer.state == CloseState::DoesNotClose);
    let mut told: Vec<usize> = answer.pair.iter().map(|suspect| suspect.figure.index()).collect();
    told.sort_unstable();
    match told.as_slice() {
        [] => {}
        told => {
            assert!(agrees_without(truss, &answer), "the pair is proved by a layout");
            tally.pair += usize::from(told == pair);
            tally.other_pair += usize::from(told != pair);
        }
    }
}
