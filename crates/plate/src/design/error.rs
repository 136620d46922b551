//! What a design is refused for.

/// Why no design was made.
#[derive(Clone, Debug, PartialEq, thiserror::Error)]
pub enum DesignError {
    /// More runs than asked for at most.
    #[error(
        "the full factorial has {runs} runs, more than the {most} allowed; \
         take fewer levels, or a fraction, D-optimal or space-filling design"
    )]
    TooManyRuns {
        /// Runs of the full factorial.
        runs: u128,
        /// The most allowed.
        most: usize,
    },
    /// No axis at all.
    #[error("a design needs at least one axis")]
    NoAxis,
    /// An axis without levels, or a numeric axis with one value.
    #[error("axis {axis} has no two levels to compare; leave it out of the design or add a level")]
    OneLevel {
        /// Index of the axis.
        axis: usize,
    },
    /// A numeric axis with a value that is no number.
    #[error("level {level} of axis {axis} is {value}; numeric axes need finite values")]
    NotFinite {
        /// Index of the axis.
        axis: usize,
        /// Index of the level.
        level: usize,
        /// The value.
        value: f64,
    },
    /// A candidate with too few or too many levels.
    #[error("candidate {candidate} has {given} levels for {axes} axes; give one level an axis")]
    AxesDiffer {
        /// Index of the candidate.
        candidate: usize,
        /// Levels given.
        given: usize,
        /// Axes.
        axes: usize,
    },
    /// A level that its axis does not have.
    #[error(
        "candidate {candidate} has level {level} on axis {axis}, which has {levels}; levels count from 0"
    )]
    NoSuchLevel {
        /// Index of the candidate.
        candidate: usize,
        /// Index of the axis.
        axis: usize,
        /// The level.
        level: u16,
        /// Levels of the axis.
        levels: usize,
    },
    /// Fewer candidates than runs.
    #[error("{runs} runs are asked of {candidates} candidates; ask for fewer or allow repeats")]
    TooFewCandidates {
        /// Runs asked for.
        runs: usize,
        /// Candidates.
        candidates: usize,
    },
    /// Fewer runs than parameters.
    #[error(
        "{runs} runs cannot determine {parameters} parameters; \
         ask for more runs, or take fewer levels or a model without interactions"
    )]
    TooFewRuns {
        /// Runs asked for.
        runs: usize,
        /// Parameters of the model.
        parameters: usize,
    },
    /// The candidates cannot tell the terms of the model apart.
    #[error(
        "the allowed cells cannot determine the {parameters} parameters of the model, whatever is chosen; \
         allow more cells or take a smaller model"
    )]
    NotEstimable {
        /// Parameters of the model.
        parameters: usize,
    },
    /// A candidate that must be in the design does not exist.
    #[error(
        "run {index} must be in the design, but there are {candidates} candidates, counted from 0"
    )]
    NoSuchCandidate {
        /// Index asked for.
        index: usize,
        /// Candidates.
        candidates: usize,
    },
    /// More work than is sensible.
    #[error(
        "a D-optimal choice of {runs} runs from {candidates} candidates with {parameters} parameters takes too long; \
         shorten the list of candidates or take a smaller model"
    )]
    TooMuchWork {
        /// Runs asked for.
        runs: usize,
        /// Candidates.
        candidates: usize,
        /// Parameters of the model.
        parameters: usize,
    },
    /// No fraction with so many factors and runs.
    #[error(
        "no two-level fraction with {factors} factors in {runs} runs; \
         runs must be 4, 8, 16, 32, 64 or 128 and more than the factors, and not more than the full factorial has"
    )]
    NoFraction {
        /// Factors.
        factors: usize,
        /// Runs.
        runs: usize,
    },
    /// A generator that is none.
    #[error(
        "generator {generator} must name two or more of the {base} base factors, each once, \
         and differ from the other generators"
    )]
    Generator {
        /// Index of the generator.
        generator: usize,
        /// Base factors.
        base: usize,
    },
    /// A Plackett–Burman design of a size that there is no generator for.
    #[error("no Plackett–Burman design for {factors} factors; from 1 to 35 are possible")]
    NoPlackettBurman {
        /// Factors.
        factors: usize,
    },
    /// More axes than the Sobol sequence has here.
    #[error("{axes} axes for a Sobol sequence of {most}; take another design or fewer axes")]
    TooManyAxes {
        /// Axes asked for.
        axes: usize,
        /// The most.
        most: usize,
    },
}
