use std::collections::BTreeMap;
use std::num::NonZero;
use std::sync::atomic::{AtomicUsize, Ordering};
use std::sync::mpsc::channel;
use std::thread;

/// Does some work for every item on as many threads as there are cores and hands the results on in the items' order, each as soon as
/// it and all before it are done. `done` hears after each how many are done. Work may itself spread over the cores: threads of its own
/// wait for it, so that nothing is piled up on the stacks of those that do it.
pub fn many<I: Sync, T: Send>(items: &[I], work: impl Fn(&I) -> T + Sync, mut hand_on: impl FnMut(T), mut done: impl FnMut(usize)) {
    let (send, receive) = channel();
    let (work, next) = (&work, &AtomicUsize::new(0));
    let cores = thread::available_parallelism().map_or(1, NonZero::get);
    thread::scope(|scope| {
        for _ in 0..cores.min(items.len()) {
            let send = send.clone();
            scope.spawn(move || {
                while let Some((index, item)) = Some(next.fetch_add(1, Ordering::Relaxed)).and_then(|k| Some((k, items.get(k)?))) {
                    // Whoever waits for results stays until the last.
                    drop(send.send((index, work(item))));
                }
            });
        }
        drop(send);
        let mut waiting = BTreeMap::new();
        let (mut handed, mut count) = (0, 0);
        for (index, result) in receive {
            waiting.insert(index, result);
            count += 1;
            done(count);
            while let Some(result) = waiting.remove(&handed) {
                hand_on(result);
                handed += 1;
            }
        }
    });
}

#[cfg(test)]
mod tests {
    use super::many;

    #[test]
    fn results_come_in_the_order_of_the_items_and_all_are_counted() {
        let items: Vec<u64> = (0..500).collect();
        let (mut results, mut counts) = (Vec::new(), Vec::new());
        let slow_first = |item: &u64| {
            if *item == 0 {
                std::thread::sleep(std::time::Duration::from_millis(20));
            }
            item * 2
        };
        many(&items, slow_first, |result| results.push(result), |count| counts.push(count));
        assert_eq!(results, items.iter().map(|item| item * 2).collect::<Vec<_>>());
        assert_eq!(counts, (1..=500).collect::<Vec<_>>());
        many(&[0_u64; 0], |_| panic!("there is nothing to do"), |(): ()| panic!("nor a result"), |_| panic!("nor a count"));
    }
}
