//! The engine's model, and those of campaigns that bring a library of their own.

use std::collections::VecDeque;
use std::sync::{Arc, Mutex, PoisonError};

use enolattice_grid::{
    Campaign, CampaignSpec, FaultCode, Grid, InputError, LibraryTable, Measured, Place,
};
use enolattice_model::Model;
use enolattice_reagents::{Library, LibraryError, OwnTable};

use crate::EngineError;

/// Most text of a campaign's own tables, bytes.
const MOST_LIBRARY_BYTES: usize = 1 << 20;

/// Models of campaigns that are kept.
const MOST_KEPT: usize = 4;

/// The engine's model and the latest of campaigns with tables of their own.
#[derive(Debug)]
pub(crate) struct Models {
    engine: Arc<Model>,
    own: Mutex<VecDeque<(Vec<LibraryTable>, Arc<OwnModel>)>>,
}

/// A model with what differs from the library below it.
#[derive(Debug)]
pub(crate) struct OwnModel {
    pub(crate) model: Arc<Model>,
    pub(crate) conflicts: Vec<String>,
}

impl Models {
    pub(crate) fn new(engine: Arc<Model>) -> Models {
        Models {
            engine,
            own: Mutex::default(),
        }
    }

    /// The engine's own.
    pub(crate) fn engine(&self) -> &Arc<Model> {
        &self.engine
    }

    /// Checks a campaign and builds its grid with the model of its library. Takes time.
    pub(crate) fn grid(&self, spec: &CampaignSpec) -> Result<Arc<Grid>, EngineError> {
        let own = self.of(spec).map_err(|faults| {
            let mut all = faults;
            all.extend(self.faults_beside_library(spec));
            EngineError::Input(enolattice_grid::in_order(all))
        })?;
        let mut campaign = Campaign::new(spec, &own.model).map_err(EngineError::Input)?;
        campaign.warnings.extend(own.conflicts.iter().cloned());
        Ok(Arc::new(Grid::new(campaign, own.model.clone())?))
    }

    /// Every fault in the values of a campaign.
    pub(crate) fn faults(&self, spec: &CampaignSpec) -> Vec<InputError> {
        match self.of(spec) {
            Ok(own) => Campaign::faults(spec, own.model.library()),
            Err(mut faults) => {
                faults.extend(self.faults_beside_library(spec));
                enolattice_grid::in_order(faults)
            }
        }
    }

    /// What a specification says that was measured, with the model of its library. Takes time.
    pub(crate) fn measured(
        &self,
        spec: &CampaignSpec,
    ) -> Result<(Arc<Model>, Measured), EngineError> {
        let own = self.of(spec).map_err(EngineError::Input)?;
        let measured = Measured::of(spec, &own.model).map_err(EngineError::Input)?;
        Ok((own.model.clone(), measured))
    }

    /// Faults of a campaign whose library cannot be read: names may be unknown for that reason only.
    fn faults_beside_library(&self, spec: &CampaignSpec) -> Vec<InputError> {
        let mut faults = Campaign::faults(spec, self.engine.library());
        faults.retain(|fault| fault.code != FaultCode::ReagentUnknown.name());
        faults
    }

    pub(crate) fn of(&self, spec: &CampaignSpec) -> Result<Arc<OwnModel>, Vec<InputError>> {
        if spec.library.is_empty() {
            return Ok(Arc::new(OwnModel {
                model: self.engine.clone(),
                conflicts: Vec::new(),
            }));
        }
        // held while a model is made, so that none is made twice
        let mut kept = self.own.lock().unwrap_or_else(PoisonError::into_inner);
        if let Some((_, known)) = kept.iter().find(|(tables, _)| *tables == spec.library) {
            return Ok(known.clone());
        }
        let tables: Vec<OwnTable> = spec.library.iter().map(own_table).collect();
        let own = Arc::new(laid_over(self.engine.library(), &tables)?);
        kept.push_front((spec.library.clone(), own.clone()));
        kept.truncate(MOST_KEPT);
        Ok(own)
    }
}

/// The model of a library with a laboratory's tables laid over it.
///
/// # Errors
/// Every fault of the tables.
pub(crate) fn laid_over(
    library: &Library,
    tables: &[OwnTable],
) -> Result<OwnModel, Vec<InputError>> {
    let bytes: usize = tables.iter().map(|table| table.text.len()).sum();
    if bytes > MOST_LIBRARY_BYTES {
        return Err(vec![InputError {
            place: Place {
                field: "library".to_owned(),
                ..Place::default()
            },
            value: String::new(),
            code: FaultCode::LibraryInvalid.name(),
            reason: format!("the tables have {bytes} bytes, more than {MOST_LIBRARY_BYTES}"),
            remedy: "leave out the reagents that the campaign does not use".to_owned(),
        }]);
    }
    let (library, conflicts) = library
        .with_own(tables)
        .map_err(|faults| enolattice_grid::in_order(faults.into_iter().map(fault)))?;
    Ok(OwnModel {
        model: Arc::new(Model::new(Arc::new(library))),
        conflicts: conflicts.iter().map(ToString::to_string).collect(),
    })
}

fn own_table(table: &LibraryTable) -> OwnTable {
    OwnTable {
        name: table.name.clone(),
        text: table.text.clone(),
    }
}

fn fault(error: LibraryError) -> InputError {
    InputError {
        place: Place {
            file: error.table,
            line: u32::try_from(error.row).unwrap_or(0),
            field: if error.column.is_empty() {
                "row".to_owned()
            } else {
                error.column
            },
        },
        value: error.value.chars().take(80).collect(),
        code: FaultCode::LibraryInvalid.name(),
        reason: error.reason,
        remedy: "the page of the library says what each column holds".to_owned(),
    }
}
