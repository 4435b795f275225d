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
