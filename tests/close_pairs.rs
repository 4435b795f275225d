//! Two slips at once: the pair is found, within a bound of work.

mod close_help;

use chordwright::checks::{CloseState, Effort, Evidence, Finding, Rule, Suspect, close};
use chordwright::truss::{FigureKind, JointId, Truss};
use close_help::generate::{Dice, SHAPES, clean, slip};
use close_help::{agrees, q};
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

fn figures(blamed: &[Suspect]) -> Vec<usize> {
    blamed.iter().map(|suspect| suspect.figure.index()).collect()
}

/// True when the finding says in words that the others close without these two.
fn is_told(truss: &Truss, findings: &[Finding], pair: [usize; 2]) -> bool {
    let says = |words: &str| {
        let marks = pair.map(|index| format!("{}, the ", truss.figures[index].mark));
        words.starts_with(&format!("without {}", marks[0]))
            && words.contains(&format!(" and {}", marks[1]))
            && words.contains(" the others close: ")
    };
    let excluded = findings.iter().filter(|finding| finding.rule == Rule::Excluded);
    excluded.flat_map(|finding| &finding.evidence).any(|line| matches!(line, Evidence::Words(words) if says(words)))
}

#[derive(Debug, Default)]
struct Tally {
    planted: usize,
    alone: usize,
    excluded: usize,
    pair: usize,
    other_pair: usize,
    /// The planted pair is among those told in words.
    told: usize,
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
    assert!(tally.told * 100 >= two * 95, "and told in at least 95 of 100, if not first: {tally:?}");
}

fn judge(truss: &Truss, pair: [usize; 2], tally: &mut Tally) {
    let (answer, findings) = close(truss, &Effort::default());
    tally.planted += 1;
    if let Some(layout) = &answer.layout {
        assert_eq!(answer.state, CloseState::Closes);
        assert!(agrees(truss, layout, &[]), "closes is proved by a layout");
    }
    for suspect in &answer.suspects {
        assert!(agrees(truss, &suspect.layout, &figures(std::slice::from_ref(suspect))), "a suspect is proved by one");
    }
    if answer.state == CloseState::Closes || !answer.suspects.is_empty() {
        // One of the two has no other figure against it.
        tally.alone += 1;
        return;
    }
    tally.excluded += usize::from(answer.state == CloseState::DoesNotClose);
    let mut told = figures(&answer.pair);
    told.sort_unstable();
    if told.is_empty() {
        return;
    }
    assert_eq!(told.len(), 2);
    for suspect in &answer.pair {
        assert!(agrees(truss, &suspect.layout, &told), "a pair is proved by a layout");
    }
    let is_planted = told == pair;
    tally.pair += usize::from(is_planted);
    tally.other_pair += usize::from(!is_planted);
    tally.told += usize::from(is_told(truss, &findings, pair));
}

#[test]
fn a_pair_with_a_false_level_in_it_is_found() {
    let mut found = 0;
    for seed in 0..12 {
        let planted = clean(close_help::generate::Shape::Gable, 6, seed);
        let mut dice = Dice::new(seed + 900);
        // Two top joints of different heights are called level, and a member is figured an inch and more too long.
        let [low, high] = ["U1", "U3"].map(|mark| planted.truss.joint_marked(mark).expect("a top joint"));
        let is_length = |index: &usize| matches!(planted.truss.figures[*index].kind, FigureKind::Length { .. });
        let lengths: Vec<usize> = (0..planted.truss.figures.len()).filter(is_length).collect();
        let figure = lengths[dice.below(lengths.len())];
        let mut truss = slip(&planted.truss, figure, &q(dice.between(20, 60), 16));
        let level = truss.figures.len();
        let kind = FigureKind::Level { joints: vec![low, high] };
        truss.figures.push(chordwright::truss::Figure { mark: "fl".into(), kind, step: None });
        let (answer, _) = close(&truss, &Effort::default());
        let told: Vec<usize> = answer.pair.iter().map(|suspect| suspect.figure.index()).collect();
        assert_ne!(answer.state, CloseState::Closes);
        found += usize::from(told.contains(&level) && told.contains(&figure));
    }
    assert!(found >= 9, "{found} of 12");
}
