//! Suspects against a brute-force twin: each figure taken off the drawing in turn, and the rest asked about.

mod close_help;

use chordwright::checks::{CloseState, Effort, close};
use chordwright::truss::{Figure, FigureKind, JointId, Truss};
use close_help::generate::{Dice, mixed, slip_of_any_kind};

/// A drawing with a figure of any kind slipped.
fn slipped(seed: u64) -> Option<Truss> {
    let truth = mixed(seed).truss;
    let mut dice = Dice::new(seed + 5000);
    let figure = dice.below(truth.figures.len());
    slip_of_any_kind(&truth, figure, &mut dice)
}

/// A drawing with a level or a plumb line too many, at one loose joint or between two.
fn tied(seed: u64) -> Option<Truss> {
    let mut truss = mixed(seed).truss;
    let mut dice = Dice::new(seed + 7000);
    let (a, b) = (2 + dice.below(truss.joints.len() - 2), dice.below(truss.joints.len()));
    let joints = vec![JointId::new(a), JointId::new(b)];
    let is_in_one_row = a % 2 == b % 2;
    let kind = if is_in_one_row { FigureKind::Level { joints } } else { FigureKind::Plumb { joints } };
    truss.figures.push(Figure { mark: "tie".into(), kind, step: None });
    (a != b).then_some(truss)
}

/// The figures without which the rest has a layout.
fn to_blame_alone(truss: &Truss) -> Vec<usize> {
    let closes_without = |figure: &usize| {
        let mut rest = truss.clone();
        rest.figures.remove(*figure);
        close(&rest, &Effort::default()).0.layout.is_some()
    };
    (0..truss.figures.len()).filter(closes_without).collect()
}

/// How many drawings of these do not close; of each the suspects are those of the twin.
fn suspects_are_all(drawings: impl Iterator<Item = (u64, Option<Truss>)>) -> usize {
    let mut wrong = 0;
    for (seed, truss) in drawings {
        let Some(truss) = truss else { continue };
        let (answer, _) = close(&truss, &Effort::default());
        if answer.state != CloseState::DoesNotClose {
            continue;
        }
        let mut suspects: Vec<usize> = answer.suspects.iter().map(|suspect| suspect.figure.index()).collect();
        suspects.sort_unstable();
        assert_eq!(suspects, to_blame_alone(&truss), "seed {seed}: {}", answer.summary);
        wrong += 1;
    }
    wrong
}

#[test]
fn the_suspects_of_a_slip_are_all_figures_without_which_the_rest_closes() {
    let wrong = suspects_are_all((0..60).map(|seed| (seed, slipped(seed))));
    println!("{wrong}");
    assert!(wrong >= 40, "{wrong}");
}

#[test]
fn the_suspects_of_a_wrong_tie_are_all_figures_without_which_the_rest_closes() {
    let wrong = suspects_are_all((0..60).map(|seed| (seed, tied(seed))));
    println!("{wrong}");
    assert!(wrong >= 40, "{wrong}");
}
