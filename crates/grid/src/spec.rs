//! What a user asks for, as read: names, SMILES and numbers, each with its place in the input.
//!
//! Jobs are kept in this form. Whatever a record lacks takes its default, so that a field added
//! later leaves old records readable.

use enolattice_reagents::Library;
use serde::{Deserialize, Serialize};

/// Where a value was written, for error messages.
#[derive(Clone, Debug, Default, PartialEq, Eq, Hash, Serialize, Deserialize)]
#[serde(default)]
pub struct Place {
    /// File name as the user gave it; empty over gRPC.
    pub file: String,
    /// Line from 1; 0 where unknown.
    pub line: u32,
    /// Column heading or key path, e.g. `smiles` or `substrates[3].smiles`.
    ///
    /// The place of a whole row may leave it empty or name the row.
    pub field: String,
}

impl Place {
    /// A field of a request, which has no file.
    pub(crate) fn of_field(field: &str) -> Place {
        Place {
            field: field.to_owned(),
            ..Place::default()
        }
    }
}

/// What a laboratory has of a substance. Kept for plates; no score depends on it.
#[derive(Clone, Debug, Default, PartialEq, Serialize, Deserialize)]
#[serde(default)]
pub struct Stock {
    /// Mass on the shelf, mg.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub stock_mg: Option<f64>,
    /// Volume on the shelf, mL.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub stock_ml: Option<f64>,
    /// Concentration of the solution that is on the shelf, mol/L; none where it is no solution.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub supplied_concentration_m: Option<f64>,
    /// Price of a gram, in `currency`.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub price_per_g: Option<f64>,
    /// Price of a millilitre, in `currency`.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub price_per_ml: Option<f64>,
    /// Currency of the prices, the three letters of ISO 4217.
    #[serde(skip_serializing_if = "String::is_empty")]
    pub currency: String,
    /// Lot or batch.
    #[serde(skip_serializing_if = "String::is_empty")]
    pub lot: String,
    /// Where it stands.
    #[serde(skip_serializing_if = "String::is_empty")]
    pub location: String,
}

impl Stock {
    /// Whether nothing is known.
    pub fn is_empty(&self) -> bool {
        *self == Stock::default()
    }
}

/// A named reagent of the library or a SMILES.
#[derive(Clone, Debug, Default, PartialEq, Serialize, Deserialize)]
#[serde(default)]
pub struct Entry {
    /// Name in the library or given by the user; empty where only a SMILES is given.
    pub name: String,
    /// SMILES; empty where the name is to be looked up.
    pub smiles: String,
    /// Equivalents of an additive on substrate; none: each of `conditions.additive_equiv`.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub equiv: Option<f64>,
    /// What the laboratory has of it.
    #[serde(skip_serializing_if = "Stock::is_empty")]
    pub stock: Stock,
    /// Where it was written.
    pub place: Place,
}

/// A substrate.
#[derive(Clone, Debug, Default, PartialEq, Serialize, Deserialize)]
#[serde(default)]
pub struct SubstrateEntry {
    /// Name; the SMILES where none is given.
    pub name: String,
    /// SMILES.
    pub smiles: String,
    /// The laboratory's own pKa on the DMSO scale.
    pub pka_dmso: Option<f64>,
    /// Its standard uncertainty.
    pub pka_sigma: Option<f64>,
    /// What the laboratory has of it.
    #[serde(skip_serializing_if = "Stock::is_empty")]
    pub stock: Stock,
    /// Where it was written.
    pub place: Place,
}

/// An axis of library reagents.
#[derive(Clone, Debug, Default, PartialEq, Serialize, Deserialize)]
#[serde(default)]
pub struct AxisSpec {
    /// Take the whole library.
    pub all: bool,
    /// Entries, in order.
    pub entries: Vec<Entry>,
}

impl AxisSpec {
    /// Whether nothing is asked for.
    pub fn is_empty(&self) -> bool {
        !self.all && self.entries.is_empty()
    }

    /// Puts these names in the place of "all", which comes before the entries.
    fn spell_out<'a>(&mut self, names: impl Iterator<Item = &'a String>) {
        if std::mem::take(&mut self.all) {
            let named = names.map(|name| Entry {
                name: name.clone(),
                ..Entry::default()
            });
            self.entries.splice(0..0, named);
        }
    }
}

/// Values of the condition axes, as written. Empty: the default of the axis.
#[derive(Clone, Debug, Default, PartialEq, Serialize, Deserialize)]
#[serde(default)]
pub struct ConditionsSpec {
    /// Temperature of the reaction, °C.
    pub temperature_c: Vec<f64>,
    /// Temperature of the deprotonation, °C; empty: that of the reaction.
    pub formation_temperature_c: Vec<f64>,
    /// Base, equivalents.
    pub base_equiv: Vec<f64>,
    /// Electrophile, equivalents.
    pub electrophile_equiv: Vec<f64>,
    /// Additive, equivalents; of no meaning where there is none.
    #[serde(skip_serializing_if = "Vec::is_empty")]
    pub additive_equiv: Vec<f64>,
    /// Substrate, mol/L.
    pub concentration_m: Vec<f64>,
    /// Time, h.
    pub time_h: Vec<f64>,
    /// Dosing time of the electrophile, min.
    pub dosing_min: Vec<f64>,
    /// Order of addition, by name; empty: the usual one of each base.
    pub addition: Vec<String>,
}

/// What counts as a hit.
#[derive(Clone, Debug, Default, PartialEq, Serialize, Deserialize)]
#[serde(default)]
pub struct TargetSpec {
    /// Yield that makes a hit, 0–1.
    pub yield_at_least: Option<f64>,
}

/// A yield that the laboratory has measured. Kept to be shown beside the computed one; no score
/// depends on it.
///
/// A condition that is left out is that of the campaign, which must then have one value of it.
#[derive(Clone, Debug, Default, PartialEq, Serialize, Deserialize)]
#[serde(default)]
pub struct MeasuredEntry {
    /// Substrate: its name in the campaign, or a SMILES.
    pub substrate: String,
    /// Base, as an axis names it.
    pub base: String,
    /// Electrophile: its name in the campaign or the library, or a SMILES.
    pub electrophile: String,
    /// Solvent or mixture of solvents.
    pub solvent: String,
    /// Additive, or `none`; empty: that of the campaign.
    #[serde(skip_serializing_if = "String::is_empty")]
    pub additive: String,
    /// Temperature of the reaction, °C.
    pub temperature_c: Option<f64>,
    /// Temperature of the deprotonation, °C.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub formation_temperature_c: Option<f64>,
    /// Base, equivalents.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub base_equiv: Option<f64>,
    /// Electrophile, equivalents.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub electrophile_equiv: Option<f64>,
    /// Additive, equivalents.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub additive_equiv: Option<f64>,
    /// Substrate, mol/L.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub concentration_m: Option<f64>,
    /// Time, h.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub time_h: Option<f64>,
    /// Dosing time of the electrophile, min.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub dosing_min: Option<f64>,
    /// Order of addition, by name; empty: that of the campaign.
    #[serde(skip_serializing_if = "String::is_empty")]
    pub addition: String,
    /// Yield on the substrate charged, 0–1.
    pub yield_fraction: Option<f64>,
    /// Its standard uncertainty, 0–1.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub sigma: Option<f64>,
    /// What the laboratory says of it.
    #[serde(skip_serializing_if = "String::is_empty")]
    pub note: String,
    /// Where it was written.
    pub place: Place,
}

/// A table of reagents of a laboratory's own, laid over the library.
#[derive(Clone, Debug, Default, PartialEq, Eq, Serialize, Deserialize)]
#[serde(default)]
pub struct LibraryTable {
    /// Name for messages: that of the file.
    pub name: String,
    /// Its text, of the form of the library's tables.
    pub text: String,
}

/// A campaign as read.
#[derive(Clone, Debug, Default, PartialEq, Serialize, Deserialize)]
#[serde(default)]
pub struct CampaignSpec {
    /// Title.
    pub title: String,
    /// Substrates.
    pub substrates: Vec<SubstrateEntry>,
    /// Bases.
    pub bases: AxisSpec,
    /// Electrophiles.
    pub electrophiles: AxisSpec,
    /// Solvents and mixtures of solvents, as `THF/DMF 4:1`.
    pub solvents: AxisSpec,
    /// Additives; `none` is a value like any other, and the only one where the axis is empty.
    pub additives: AxisSpec,
    /// Conditions.
    pub conditions: ConditionsSpec,
    /// Target.
    pub target: TargetSpec,
    /// The laboratory's own tables of reagents, the later over the earlier.
    #[serde(skip_serializing_if = "Vec::is_empty")]
    pub library: Vec<LibraryTable>,
    /// Yields that the laboratory has measured.
    #[serde(skip_serializing_if = "Vec::is_empty")]
    pub measured: Vec<MeasuredEntry>,
    /// What was noticed while the files were read and is no fault, for the user.
    #[serde(skip_serializing_if = "Vec::is_empty")]
    pub notes: Vec<String>,
}

impl CampaignSpec {
    /// The same campaign with the names of the library in the place of every "all", so that it
    /// means the same to a later library.
    pub fn spelled_out(mut self, library: &Library) -> CampaignSpec {
        self.bases
            .spell_out(library.bases().iter().map(|known| &known.name));
        self.electrophiles
            .spell_out(library.electrophiles().iter().map(|known| &known.name));
        self.solvents
            .spell_out(library.solvents().iter().map(|known| &known.name));
        self.additives
            .spell_out(library.additives().iter().map(|known| &known.name));
        self
    }
}

/// The bytes of a campaign file and of the files it names, by the names it uses.
#[derive(Clone, Debug, Default)]
pub struct Sources {
    /// Name of the campaign file.
    pub campaign_name: String,
    /// Its text.
    pub campaign: String,
    /// Files that it names.
    pub files: std::collections::BTreeMap<String, Vec<u8>>,
}
