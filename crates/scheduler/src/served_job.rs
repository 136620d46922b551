//! A job that is being worked at.

use std::sync::Arc;
use std::sync::atomic::{AtomicBool, Ordering};

use enolattice_grid::BlockId;
use enolattice_store::JobRecord;

use crate::desk::Reply;
use crate::{Event, Work, WorkBlock};

/// Blocks that failed for good and are named in a job's record, at most.
const NAMED_GAPS: usize = 20;

/// A job that is being worked at.
pub(crate) struct ServedJob {
    pub(crate) record: Arc<JobRecord>,
    pub(crate) hands: Hands,
    /// Pieces of its work that are in hand: blocks, its one piece, or making it ready.
    pub(crate) in_hand: usize,
    /// Blocks that failed for good, with the reason.
    pub(crate) gaps: Vec<(BlockId, String)>,
    /// Why it cannot go on.
    pub(crate) failure: Option<String>,
    /// Why it is to stop before its end, and who wants to hear of it.
    pub(crate) stopping: Option<(Event, Vec<Reply>)>,
    /// Tells its one piece to stop.
    pub(crate) stop: Arc<AtomicBool>,
}

/// What is left to be handed out.
pub(crate) enum Hands {
    /// It is being made ready.
    GettingReady,
    /// Blocks.
    Blocks {
        work: Arc<Work>,
        missing: Vec<WorkBlock>,
        next: usize,
        cells_left: u64,
    },
    /// One piece, in hand.
    Piece,
}

impl ServedJob {
    /// A job that is being made ready.
    pub(crate) fn new(record: JobRecord) -> ServedJob {
        ServedJob {
            record: Arc::new(record),
            hands: Hands::GettingReady,
            in_hand: 1,
            gaps: Vec::new(),
            failure: None,
            stopping: None,
            stop: Arc::default(),
        }
    }

    /// Cells that could be handed out now; none where there is nothing to hand out.
    pub(crate) fn cells_left(&self) -> Option<u64> {
        match &self.hands {
            Hands::Blocks {
                missing,
                next,
                cells_left,
                ..
            } if *next < missing.len() && self.goes_on() => Some(*cells_left),
            _ => None,
        }
    }

    /// The next block.
    pub(crate) fn take(&mut self) -> Option<(Arc<Work>, WorkBlock)> {
        let Hands::Blocks {
            work,
            missing,
            next,
            cells_left,
        } = &mut self.hands
        else {
            return None;
        };
        let block = *missing.get(*next)?;
        *next += 1;
        *cells_left -= block.cells;
        self.in_hand += 1;
        Some((work.clone(), block))
    }

    /// Whether more of it may be handed out.
    pub(crate) fn goes_on(&self) -> bool {
        self.failure.is_none() && self.stopping.is_none()
    }

    /// Gives it up for a reason; the first one stays.
    pub(crate) fn fail(&mut self, reason: String) {
        self.failure.get_or_insert(reason);
        self.stop.store(true, Ordering::Relaxed);
    }

    /// Stops it before its end. Who asked first is answered as asked; a job that is stopped for good stays so.
    pub(crate) fn stop_for(&mut self, event: Event, reply: Option<Reply>) {
        self.stop.store(true, Ordering::Relaxed);
        let (why, replies) = self.stopping.get_or_insert((event, Vec::new()));
        if event == Event::Cancel {
            *why = Event::Cancel;
        }
        replies.extend(reply);
    }

    /// Whether nothing of it is in hand and nothing will be.
    pub(crate) fn is_over(&self) -> bool {
        self.in_hand == 0 && self.cells_left().is_none()
    }

    /// What its end means; `none_committed` where none of its blocks is kept.
    pub(crate) fn verdict(&self, none_committed: bool) -> (Event, String) {
        if let Some(reason) = &self.failure {
            return (Event::Fail, reason.clone());
        }
        let complete = match &self.hands {
            Hands::Blocks { missing, next, .. } => *next == missing.len(),
            Hands::Piece => true,
            Hands::GettingReady => false,
        };
        match &self.stopping {
            Some((event, _)) if !complete => (*event, String::new()),
            _ if self.gaps.is_empty() => (Event::Finish, String::new()),
            _ if none_committed => (Event::Fail, self.named_gaps()),
            _ => (Event::FinishWithGaps, self.named_gaps()),
        }
    }

    /// The blocks that failed, as `segment/index`, with their reasons.
    fn named_gaps(&self) -> String {
        let mut gaps = self.gaps.clone();
        gaps.sort();
        let mut of_reason: Vec<(&str, Vec<String>)> = Vec::new();
        for (BlockId { segment, index }, reason) in gaps.iter().take(NAMED_GAPS) {
            let name = format!("{segment}/{index}");
            match of_reason.iter_mut().find(|(known, _)| known == reason) {
                Some((_, names)) => names.push(name),
                None => of_reason.push((reason, vec![name])),
            }
        }
        let named = of_reason
            .iter()
            .map(|(reason, names)| format!("{}: {reason}", names.join(", ")));
        let named: Vec<String> = named.collect();
        let unnamed = gaps.len().saturating_sub(NAMED_GAPS);
        let more = match unnamed {
            0 => String::new(),
            unnamed => format!("; and {unnamed} more"),
        };
        let blocks = self.record.blocks;
        format!(
            "{} of {blocks} blocks failed twice, {}{more}",
            gaps.len(),
            named.join("; ")
        )
    }
}
