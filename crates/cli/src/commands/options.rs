//! Options that several commands share.

use std::path::PathBuf;

use clap::{Args, ValueEnum};
use enolattice_engine::{Axis, Order};

/// Where results are kept unless the user says otherwise.
const USUAL_DATA_DIR: &str = "enolattice-data";

/// Which engine to use.
#[derive(Clone, Debug, Default, Args)]
pub(crate) struct EngineOptions {
    /// Directory of jobs and results [default: $ENOLATTICE_DATA, else ./enolattice-data].
    #[arg(long, value_name = "DIR", conflicts_with = "server")]
    data: Option<PathBuf>,
    /// Use the engine of a server instead, e.g. http://127.0.0.1:7413.
    #[arg(long, value_name = "URL")]
    pub(crate) server: Option<String>,
    /// Compute threads of the engine in this process; 0: one for each core.
    #[arg(long, value_name = "N", default_value_t = 0, conflicts_with = "server")]
    pub(crate) threads: usize,
    /// Lay a table of your own reagents over the library; may be given several times.
    #[arg(long, value_name = "FILE", conflicts_with = "server")]
    pub(crate) library: Vec<PathBuf>,
}

impl EngineOptions {
    /// An engine in this process that keeps its data in this directory.
    pub(crate) fn in_dir(data: Option<PathBuf>) -> EngineOptions {
        EngineOptions {
            data,
            ..EngineOptions::default()
        }
    }

    pub(crate) fn data_dir(&self) -> PathBuf {
        let from_environment = || std::env::var_os("ENOLATTICE_DATA").filter(|dir| !dir.is_empty());
        match &self.data {
            Some(dir) => dir.clone(),
            None => from_environment().map_or_else(|| PathBuf::from(USUAL_DATA_DIR), PathBuf::from),
        }
    }

    /// The options that lead another command to the same engine.
    pub(crate) fn repeated(&self) -> String {
        match (&self.server, &self.data) {
            (Some(server), _) => format!(" --server {server}"),
            (None, Some(dir)) => format!(" --data {}", dir.display()),
            (None, None) => String::new(),
        }
    }
}

/// Form of the log.
#[derive(Clone, Copy, Debug, Default, ValueEnum)]
pub(crate) enum LogFormat {
    /// A sentence a line, for people.
    #[default]
    Text,
    /// An object a line, for programs.
    Json,
}

/// Order of a ranking.
#[derive(Clone, Copy, Debug, Default, ValueEnum)]
pub(crate) enum OrderName {
    #[default]
    #[value(name = "expected_yield", alias = "yield")]
    ExpectedYield,
    #[value(name = "p_hit")]
    PHit,
    #[value(name = "selectivity")]
    Selectivity,
    #[value(name = "feasibility")]
    Feasibility,
}

impl From<OrderName> for Order {
    fn from(name: OrderName) -> Order {
        match name {
            OrderName::ExpectedYield => Order::ExpectedYield,
            OrderName::PHit => Order::PHit,
            OrderName::Selectivity => Order::Selectivity,
            OrderName::Feasibility => Order::Feasibility,
        }
    }
}

/// An axis of a campaign.
#[derive(Clone, Copy, Debug, ValueEnum)]
pub(crate) enum AxisName {
    #[value(name = "substrate")]
    Substrate,
    #[value(name = "base")]
    Base,
    #[value(name = "electrophile")]
    Electrophile,
    #[value(name = "solvent")]
    Solvent,
    #[value(name = "temperature")]
    Temperature,
    #[value(name = "additive")]
    Additive,
    #[value(name = "formation_temperature")]
    FormationTemperature,
    #[value(name = "base_equiv")]
    BaseEquiv,
    #[value(name = "electrophile_equiv")]
    ElectrophileEquiv,
    #[value(name = "concentration")]
    Concentration,
    #[value(name = "time")]
    Time,
    #[value(name = "dosing")]
    Dosing,
    #[value(name = "addition")]
    Addition,
}

impl From<AxisName> for Axis {
    fn from(name: AxisName) -> Axis {
        match name {
            AxisName::Substrate => Axis::Substrate,
            AxisName::Base => Axis::Base,
            AxisName::Electrophile => Axis::Electrophile,
            AxisName::Solvent => Axis::Solvent,
            AxisName::Temperature => Axis::Temperature,
            AxisName::Additive => Axis::Additive,
            AxisName::FormationTemperature => Axis::FormationTemperature,
            AxisName::BaseEquiv => Axis::BaseEquiv,
            AxisName::ElectrophileEquiv => Axis::ElectrophileEquiv,
            AxisName::Concentration => Axis::Concentration,
            AxisName::Time => Axis::Time,
            AxisName::Dosing => Axis::Dosing,
            AxisName::Addition => Axis::Addition,
        }
    }
}

/// Two axes with a comma between them.
pub(crate) fn map_axes(text: &str) -> Result<[Axis; 2], String> {
    let axis = |name: &str| {
        AxisName::from_str(name.trim(), true)
            .map(Axis::from)
            .map_err(|_| {
                let names = Axis::ALL.map(Axis::name).join(", ");
                format!("`{name}` is no axis; the axes are {names}")
            })
    };
    match text.split_once(',') {
        Some((rows, columns)) => Ok([axis(rows)?, axis(columns)?]),
        None => Err("name two axes with a comma between them, e.g. `base,solvent`".to_owned()),
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_map_has_two_axes() {
        assert_eq!(map_axes("base,solvent"), Ok([Axis::Base, Axis::Solvent]));
        assert!(map_axes("base").is_err_and(|reason| reason.contains("comma")));
        assert!(map_axes("base,wind").is_err_and(|reason| reason.contains("`wind` is no axis")));
    }

    #[test]
    fn axes_are_called_alike_everywhere() {
        for axis in Axis::ALL {
            let name = AxisName::from_str(axis.name(), false);
            assert_eq!(name.map(Axis::from), Ok(axis));
        }
    }
}
