//! The same work for many items on as many threads as there are; the results never depend on how many.

use std::panic::resume_unwind;
use std::sync::atomic::{AtomicUsize, Ordering};
use std::thread::{available_parallelism, scope};

/// The result of `work` for each item, in the order of the items. Each thread takes the next item that nobody has taken;
/// `work` sees one item at a time and nothing of the others.
///
/// A panic in one of them is passed on: a result that is missing must never look like one that is empty.
pub fn each<T: Sync, R: Send>(items: &[T], work: impl Fn(&T) -> R + Sync) -> Vec<R> {
    each_on(available_parallelism().map_or(1, usize::from), items, work)
}

/// The same on so many threads at most.
pub fn each_on<T: Sync, R: Send>(threads: usize, items: &[T], work: impl Fn(&T) -> R + Sync) -> Vec<R> {
    let next = AtomicUsize::new(0);
    let take = || {
        let mut done = Vec::new();
        loop {
            let number = next.fetch_add(1, Ordering::Relaxed);
            let Some(item) = items.get(number) else { return done };
            done.push((number, work(item)));
        }
    };
    let mut results: Vec<(usize, R)> = scope(|scope| {
        let helpers: Vec<_> = (1..threads.min(items.len())).map(|_| scope.spawn(take)).collect();
        let mut results = take();
        for helper in helpers {
            match helper.join() {
                Ok(more) => results.extend(more),
                Err(panic) => resume_unwind(panic),
            }
        }
        results
    });
    results.sort_by_key(|(number, _)| *number);
    results.into_iter().map(|(_, result)| result).collect()
}

#[cfg(test)]
mod tests {
    use super::each_on;

    #[test]
    fn any_number_of_threads_gives_the_same_results_in_the_same_order() {
        let items: Vec<u64> = (0..50).collect();
        let alone = each_on(1, &items, |item| item * item);
        for threads in [2, 7] {
            assert_eq!(each_on(threads, &items, |item| item * item), alone);
        }
    }
}
