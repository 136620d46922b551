//! A small ordered set of named numbers.

/// Named numbers, summed by name, sorted by name.
#[derive(Clone, Debug, Default)]
pub(crate) struct Descriptors(Vec<(&'static str, f64)>);

impl Descriptors {
    /// Adds to a number; zero leaves no trace.
    pub(crate) fn add(&mut self, name: &'static str, value: f64) {
        if value == 0.0 {
            return;
        }
        match self.0.binary_search_by(|(known, _)| known.cmp(&name)) {
            Ok(place) => self.0[place].1 += value,
            Err(place) => self.0.insert(place, (name, value)),
        }
    }

    pub(crate) fn into_vec(self) -> Vec<(&'static str, f64)> {
        self.0
    }
}
