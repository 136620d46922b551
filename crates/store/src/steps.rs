//! Steps towards the disk, each announced before it is taken.
//!
//! The program passes them by. The tests of this crate let the process die at a step, or the disk refuse it: every one in
//! its turn.

#[cfg(test)]
mod tests;

#[cfg(test)]
pub(crate) use tests::step;

/// Announces the step that follows.
#[cfg(not(test))]
#[inline(always)]
pub(crate) fn step(_what: &'static str) -> std::io::Result<()> {
    Ok(())
}
