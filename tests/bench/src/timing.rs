//! Times of work done in turn, so that a machine that slows down slows both.

use std::hint::black_box;
use std::time::{Duration, Instant};

/// The middle one.
pub(crate) fn median(mut times: Vec<Duration>) -> Duration {
    times.sort();
    times[times.len() / 2]
}

/// How long one run takes; what it gives is dropped outside the time.
pub(crate) fn time<T>(run: impl FnOnce() -> T) -> Duration {
    let start = Instant::now();
    let given = black_box(run());
    let time = start.elapsed();
    drop(given);
    time
}

/// The median of so many runs, after one that does not count.
pub(crate) fn alone<T>(rounds: usize, mut run: impl FnMut() -> T) -> Duration {
    time(&mut run);
    median((0..rounds).map(|_| time(&mut run)).collect())
}

/// The medians of two kinds of runs, in turn.
pub(crate) fn in_turn<A, B>(rounds: usize, mut one: impl FnMut() -> A, mut other: impl FnMut() -> B) -> [Duration; 2] {
    time(&mut one);
    time(&mut other);
    let (ones, others) = (0..rounds).map(|_| (time(&mut one), time(&mut other))).unzip();
    [median(ones), median(others)]
}

/// How many times as long as the second the first takes.
pub(crate) fn ratio([one, other]: [Duration; 2]) -> f64 {
    one.as_secs_f64() / other.as_secs_f64()
}

/// The power of the size with which time grows, between two sizes.
pub(crate) fn exponent(sizes: [usize; 2], times: [Duration; 2]) -> f64 {
    ratio([times[1], times[0]]).ln() / (sizes[1] as f64 / sizes[0] as f64).ln()
}

/// Milliseconds, to three places at most.
pub(crate) fn milliseconds(time: Duration) -> String {
    let ms = time.as_secs_f64() * 1000.0;
    match ms {
        _ if ms < 10.0 => format!("{ms:.2} ms"),
        _ if ms < 100.0 => format!("{ms:.1} ms"),
        _ => format!("{ms:.0} ms"),
    }
}
