//! Whose turn it is, without a clock: shares, priorities, small jobs.

use std::collections::BTreeMap;
use std::time::Duration;

use enolattice_scheduler::{Candidate, Served};
use enolattice_store::JobId;
use proptest::prelude::*;

/// Ids in order.
fn id(number: usize) -> JobId {
    format!("0000000000{number:03}").parse().unwrap()
}

/// A job of so many blocks.
#[derive(Clone, Debug)]
struct Waiting {
    requester: usize,
    priority: i32,
    blocks: u64,
    block_ms: u64,
}

const NAMES: [&str; 4] = ["anna", "boris", "clara", "dora"];

/// Serves jobs block by block on one thread; gives whose job each block was of, and the state of all before it.
fn run(jobs: &[Waiting]) -> Vec<(usize, Vec<u64>)> {
    let mut left: Vec<u64> = jobs.iter().map(|job| job.blocks).collect();
    let mut served = Served::default();
    let mut course = Vec::new();
    loop {
        let candidates: Vec<Candidate<'_>> = (0..jobs.len())
            .filter(|&i| left[i] > 0)
            .map(|i| Candidate {
                job: id(i),
                requester: NAMES[jobs[i].requester],
                priority: jobs[i].priority,
                cells_left: left[i],
            })
            .collect();
        let Some(job) = served.turn(&candidates, std::iter::empty()) else {
            return course;
        };
        let at = (0..jobs.len()).find(|&i| id(i) == job).unwrap();
        course.push((at, left.clone()));
        left[at] -= 1;
        served.count(
            NAMES[jobs[at].requester],
            Duration::from_millis(jobs[at].block_ms),
        );
    }
}

fn jobs() -> impl Strategy<Value = Vec<Waiting>> {
    let job = (0usize..4, -1i32..2, 1u64..30, 1u64..50);
    let job = job.prop_map(|(requester, priority, blocks, block_ms)| Waiting {
        requester,
        priority,
        blocks,
        block_ms,
    });
    proptest::collection::vec(job, 1..12)
}

proptest! {
    #[test]
    fn nobody_is_passed_over(jobs in jobs()) {
        let course = run(&jobs);
        let blocks: u64 = jobs.iter().map(|job| job.blocks).sum();
        prop_assert_eq!(course.len() as u64, blocks, "every block has its turn once");
        for (at, left) in &course {
            let waiting = (0..jobs.len()).filter(|&i| left[i] > 0);
            let urgent = waiting.clone().map(|i| jobs[i].priority).max();
            prop_assert_eq!(Some(jobs[*at].priority), urgent);
            // of the same requester and priority none has less left
            let less = waiting.clone().filter(|&i| {
                jobs[i].requester == jobs[*at].requester
                    && jobs[i].priority == jobs[*at].priority
                    && left[i] < left[*at]
            });
            prop_assert_eq!(less.count(), 0);
        }
    }

    /// While the same requesters wait with jobs of one priority, their times differ by no more than a block.
    #[test]
    fn requesters_get_the_same_time(mut jobs in jobs()) {
        for job in &mut jobs {
            job.priority = 0;
        }
        let present = |left: &[u64]| -> Vec<usize> {
            let mut who: Vec<usize> = (0..jobs.len())
                .filter(|&i| left[i] > 0)
                .map(|i| jobs[i].requester)
                .collect();
            who.sort_unstable();
            who.dedup();
            who
        };
        let course = run(&jobs);
        let all = course.first().map(|(_, left)| present(left)).unwrap_or_default();
        let mut times: BTreeMap<usize, u64> = all.iter().map(|who| (*who, 0)).collect();
        let longest = jobs.iter().map(|job| job.block_ms).max().unwrap_or(0);
        for (at, left) in &course {
            if present(left) != all {
                break;
            }
            let (least, most) = (times.values().min().unwrap(), times.values().max().unwrap());
            prop_assert!(most - least <= longest, "{times:?}");
            *times.get_mut(&jobs[*at].requester).unwrap() += jobs[*at].block_ms;
        }
    }
}

#[test]
fn who_comes_late_neither_pays_nor_gains() {
    let mut served = Served::default();
    let anna = Candidate {
        job: id(0),
        requester: "anna",
        priority: 0,
        cells_left: 1000,
    };
    for _ in 0..100 {
        served.turn(&[anna], std::iter::empty());
        served.count("anna", Duration::from_secs(1));
    }
    let boris = Candidate {
        job: id(1),
        requester: "boris",
        ..anna
    };
    let mut turns = [0, 0];
    for _ in 0..10 {
        let at = usize::from(served.turn(&[anna, boris], std::iter::empty()) == Some(id(1)));
        turns[at] += 1;
        served.count(["anna", "boris"][at], Duration::from_secs(1));
    }
    assert_eq!(turns, [5, 5]);
}
