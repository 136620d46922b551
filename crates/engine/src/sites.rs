//! Acidic sites of molecules.

use enolattice_grid::{FaultCode, InputError, Place};
use enolattice_model::{acid_sites, reasons};
use enolattice_molecule::Molecule;

use crate::engine::blocking;
use crate::{Engine, EngineError, ReasonedSite, SiteReport};

impl Engine {
    /// Acidic sites of molecules with their reasons, in the order given.
    ///
    /// # Errors
    /// [`EngineError::Input`] with every SMILES that cannot be read, as `smiles[i]`.
    pub async fn sites(&self, smiles: &[String]) -> Result<Vec<SiteReport>, EngineError> {
        let (model, smiles) = (self.model().clone(), smiles.to_vec());
        blocking(move || {
            let (mut reports, mut faults) = (Vec::with_capacity(smiles.len()), Vec::new());
            for (i, text) in smiles.into_iter().enumerate() {
                match Molecule::parse(&text) {
                    Ok(molecule) => {
                        let library = model.library();
                        let sites = acid_sites(&molecule, library).into_iter();
                        reports.push(SiteReport {
                            smiles: text,
                            sites: sites
                                .map(|site| ReasonedSite {
                                    reasons: reasons(&site, library),
                                    site,
                                })
                                .collect(),
                        });
                    }
                    Err(error) => faults.push(InputError {
                        place: Place {
                            field: format!("smiles[{i}]"),
                            ..Place::default()
                        },
                        value: text.chars().take(80).collect(),
                        code: FaultCode::StructureInvalid.name(),
                        reason: error.reason,
                        remedy: error.remedy,
                    }),
                }
            }
            if faults.is_empty() {
                Ok(reports)
            } else {
                Err(EngineError::Input(faults))
            }
        })
        .await
    }
}
