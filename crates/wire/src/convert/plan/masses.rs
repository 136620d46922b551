//! What the LC-MS is told to look for.

use enolattice_plate::{
    ClashKind, Detection, Ion, IonKind, IsotopePeak, MassClash, SeenBy, SpeciesMasses, WellMasses,
};

use super::given;
use super::lists::{ION_KINDS, STRENGTHS};
use crate::convert::{ConversionError, enums, numbers};
use crate::v1;

impl From<&WellMasses> for v1::WellMasses {
    fn from(masses: &WellMasses) -> Self {
        v1::WellMasses {
            species: masses.species.iter().map(species_message).collect(),
            clashes: masses.clashes.iter().map(clash_message).collect(),
        }
    }
}

impl TryFrom<v1::WellMasses> for WellMasses {
    type Error = ConversionError;

    fn try_from(masses: v1::WellMasses) -> Result<Self, ConversionError> {
        let species = masses.species.into_iter().map(species);
        let clashes = masses.clashes.into_iter().map(clash);
        Ok(WellMasses {
            species: species.collect::<Result<_, _>>()?,
            clashes: clashes.collect::<Result<_, _>>()?,
        })
    }
}

fn species_message(species: &SpeciesMasses) -> v1::SpeciesMasses {
    let SpeciesMasses {
        name,
        smiles,
        smiles_flat,
        share,
        formula,
        monoisotopic_da,
        ions,
        isotopes,
        detection,
    } = species;
    let ion = |ion: &Ion| v1::Ion {
        kind: v1::IonKind::from(ion.kind).into(),
        mz: ion.mz,
    };
    let peak = |peak: &IsotopePeak| v1::IsotopePeak {
        offset: peak.offset,
        height: peak.height,
    };
    v1::SpeciesMasses {
        name: name.clone(),
        smiles: smiles.clone(),
        smiles_flat: smiles_flat.clone(),
        share: *share,
        formula: formula.clone(),
        monoisotopic_da: *monoisotopic_da,
        ions: ions.iter().map(ion).collect(),
        isotopes: isotopes.iter().map(peak).collect(),
        detection: Some(v1::Detection {
            uv: detection.uv.as_ref().map(seen_message),
            positive: detection.positive.as_ref().map(seen_message),
            negative: detection.negative.as_ref().map(seen_message),
            other_method: detection.other_method.clone(),
        }),
    }
}

fn species(species: v1::SpeciesMasses) -> Result<SpeciesMasses, ConversionError> {
    let detection = given("SpeciesMasses.detection", species.detection)?;
    let ions = species.ions.into_iter().map(|ion| {
        Ok(Ion {
            kind: ion_kind("Ion.kind", ion.kind)?,
            mz: ion.mz,
        })
    });
    let peaks = species.isotopes.into_iter().map(|peak| IsotopePeak {
        offset: peak.offset,
        height: peak.height,
    });
    Ok(SpeciesMasses {
        name: species.name,
        smiles: species.smiles,
        smiles_flat: species.smiles_flat,
        share: species.share,
        formula: species.formula,
        monoisotopic_da: species.monoisotopic_da,
        ions: ions.collect::<Result<_, _>>()?,
        isotopes: peaks.collect(),
        detection: Detection {
            uv: detection.uv.map(seen).transpose()?,
            positive: detection.positive.map(seen).transpose()?,
            negative: detection.negative.map(seen).transpose()?,
            other_method: detection.other_method,
        },
    })
}

fn ion_kind(field: &'static str, number: i32) -> Result<IonKind, ConversionError> {
    enums::from_wire::<_, v1::IonKind>(field, &ION_KINDS, number)
}

fn seen_message(seen: &SeenBy) -> v1::SeenBy {
    v1::SeenBy {
        strength: v1::DetectorStrength::from(seen.strength).into(),
        group: seen.group.clone(),
    }
}

fn seen(seen: v1::SeenBy) -> Result<SeenBy, ConversionError> {
    Ok(SeenBy {
        strength: enums::from_wire::<_, v1::DetectorStrength>(
            "SeenBy.strength",
            &STRENGTHS,
            seen.strength,
        )?,
        group: seen.group,
    })
}

fn clash_message(clash: &MassClash) -> v1::MassClash {
    let (kind, ions) = match clash.kind {
        ClashKind::SameCompound => (v1::ClashKind::SameCompound, None),
        ClashKind::SameFormula => (v1::ClashKind::SameFormula, None),
        ClashKind::SameMz {
            ion_of_one,
            ion_of_other,
            difference_ppm,
        } => {
            let ions = v1::ClashingIons {
                ion_of_one: v1::IonKind::from(ion_of_one).into(),
                ion_of_other: v1::IonKind::from(ion_of_other).into(),
                difference_ppm,
            };
            (v1::ClashKind::SameMz, Some(ions))
        }
    };
    v1::MassClash {
        one: numbers::index_to_wire(clash.one),
        other: numbers::index_to_wire(clash.other),
        kind: kind.into(),
        ions,
    }
}

fn clash(clash: v1::MassClash) -> Result<MassClash, ConversionError> {
    let field = "MassClash.kind";
    let kind = match v1::ClashKind::try_from(clash.kind) {
        Ok(v1::ClashKind::SameCompound) => ClashKind::SameCompound,
        Ok(v1::ClashKind::SameFormula) => ClashKind::SameFormula,
        Ok(v1::ClashKind::SameMz) => {
            let ions = given("MassClash.ions", clash.ions)?;
            ClashKind::SameMz {
                ion_of_one: ion_kind("ClashingIons.ion_of_one", ions.ion_of_one)?,
                ion_of_other: ion_kind("ClashingIons.ion_of_other", ions.ion_of_other)?,
                difference_ppm: ions.difference_ppm,
            }
        }
        Ok(v1::ClashKind::Unspecified) => return Err(ConversionError::Missing { field }),
        Err(_) => {
            return Err(ConversionError::Unknown {
                field,
                value: clash.kind.to_string(),
            });
        }
    };
    Ok(MassClash {
        one: numbers::from_wire("MassClash.one", clash.one)?,
        other: numbers::from_wire("MassClash.other", clash.other)?,
        kind,
    })
}
