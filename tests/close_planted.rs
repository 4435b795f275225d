//! Planted truths and planted slips.

mod close_help;

use chordwright::checks::{CloseState, Effort, close};
use close_help::generate::{SHAPES, clean};

#[test]
fn clean_drawings_close() {
    let start = std::time::Instant::now();
    let mut count = 0;
    for shape in SHAPES {
        for panels in 4..=14 {
            for seed in 0..4 {
                let planted = clean(shape, panels, seed);
                let (answer, _) = close(&planted.truss, &Effort::default());
                count += 1;
                if answer.state != CloseState::Closes {
                    println!("{shape:?} {panels} {seed}: {} {}", answer.state.name(), answer.summary);
                }
            }
        }
    }
    println!("{count} in {:?}", start.elapsed());
}

#[test]
fn slips_are_excluded() {
    use close_help::generate::{Dice, slip};
    use close_help::q;
    let start = std::time::Instant::now();
    let mut counts = std::collections::BTreeMap::<String, usize>::new();
    for shape in SHAPES {
        for panels in [4, 5, 6, 7, 8, 9, 10, 12, 14] {
            for seed in 0..12 {
                let planted = clean(shape, panels, seed);
                let mut dice = Dice::new(seed + 1000 * panels as u64);
                let figure = dice.below(planted.truss.figures.len());
                let by = q(dice.between(2, 40) * if dice.below(2) == 0 { 1 } else { -1 }, 16);
                let truss = slip(&planted.truss, figure, &by);
                let at = std::time::Instant::now();
                let (answer, _) = close(&truss, &Effort::default());
                *counts
                    .entry(format!(
                        "{} {}",
                        answer.state.name(),
                        if answer.state == CloseState::DoesNotClose { &answer.summary } else { "" }
                    ))
                    .or_default() += 1;
                let place = answer.suspects.iter().position(|s| s.figure.index() == figure);
                *counts.entry(format!("place {place:?}")).or_default() += 1;
                if place != Some(0) {
                    for s in &answer.suspects {
                        if false {
                            println!(
                                "   {:?} implied {} range {} {} slip {:?}",
                                truss.figures[s.figure.index()].kind,
                                s.implied,
                                s.implied_range.lo(),
                                s.implied_range.hi(),
                                s.slip
                            );
                        }
                    }
                    if place.is_none() || answer.state != CloseState::DoesNotClose {
                        println!(
                            "{shape:?} {panels} {seed}: {:?} by {by}: {} {:?}",
                            truss.figures[figure].kind,
                            answer.summary,
                            at.elapsed()
                        );
                    }
                }
            }
        }
    }
    println!("{counts:?} in {:?}", start.elapsed());
}

#[test]
fn mixed_kinds() {
    use close_help::generate::mixed;
    let start = std::time::Instant::now();
    let mut counts = std::collections::BTreeMap::<String, usize>::new();
    for seed in 0..std::env::var("N").map_or(400, |n| n.parse().unwrap()) {
        let planted = mixed(seed);
        let (answer, found) = close(&planted.truss, &Effort::default());
        *counts.entry(answer.state.name().to_string()).or_default() += 1;
        if answer.state != CloseState::Closes {
            println!("{seed}: {} {} {}", answer.state.name(), answer.summary, found.first().map_or("", |f| &f.text));
        }
    }
    println!("{counts:?} in {:?}", start.elapsed());
}
