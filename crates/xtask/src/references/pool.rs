//! The same function over many seeds, on all cores; the order of results is that of the seeds.

use std::ops::Range;
use std::thread;

/// `f(seed)` for every seed, in order.
pub fn over<T: Send>(seeds: Range<u64>, f: impl Fn(u64) -> T + Sync) -> Vec<T> {
    let workers = thread::available_parallelism().map_or(1, usize::from) as u64;
    let total = seeds.end - seeds.start;
    let share = total.div_ceil(workers).max(1);
    let f = &f;
    thread::scope(|scope| {
        let handles: Vec<_> = (0..workers)
            .map(|w| {
                let from = seeds.start + (w * share).min(total);
                let to = seeds.start + ((w + 1) * share).min(total);
                scope.spawn(move || (from..to).map(f).collect::<Vec<T>>())
            })
            .collect();
        handles
            .into_iter()
            .flat_map(|h| h.join().unwrap_or_else(|panic| std::panic::resume_unwind(panic)))
            .collect()
    })
}

#[cfg(test)]
mod tests {
    #[test]
    fn order_is_that_of_the_seeds() {
        let squares = super::over(3..20, |s| s * s);
        assert_eq!(squares, (3..20).map(|s| s * s).collect::<Vec<u64>>());
    }
}
