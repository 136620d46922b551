//! Reads a campaign from TOML and the files it names.

use std::collections::HashSet;

use toml::Spanned;
use toml::de::{DeTable, DeValue};

use crate::conditions::{CONDITIONS, PKA_DMSO, PKA_SIGMA, Quantity, YIELD_AT_LEAST};
use crate::faults::Faults;
use crate::keys::{keys_of, quoted};
use crate::page::items;
use crate::reader::{Inline, Reader};
use crate::values::{MOST_VALUES, check_count};
use crate::{
    AxisSpec, CampaignSpec, ConditionsSpec, Entry, FaultCode, InputError, MeasuredEntry, Place,
    Sources, SubstrateEntry, TargetSpec, entries, files, measured, resolve,
};

/// A campaign as far as it could be read, and what is wrong with its text and files.
#[derive(Clone, Debug, Default)]
pub struct Reading {
    /// The campaign, without the values at fault.
    pub spec: CampaignSpec,
    /// Every fault of form: of the TOML, its keys, kinds and ranges, of the files and their columns.
    pub faults: Vec<InputError>,
    campaign_name: String,
}

/// Reads a campaign from TOML and the files it names.
///
/// Names and structures are not looked at: they are for the engine that screens the campaign, whose
/// library counts ([`crate::Campaign::new`]). What it finds is put together with what was found
/// here by [`Reading::with`], so that a user sees all faults at once.
pub fn read(sources: &Sources) -> Reading {
    let (spec, faults) = read_all(sources);
    Reading {
        spec,
        faults: faults.in_order(&sources.campaign_name),
        campaign_name: sources.campaign_name.clone(),
    }
}

impl Reading {
    /// Adds the rows of files of measured yields and of substrates with a measured pKa, each with its name.
    pub fn add_measured(&mut self, yields: &[(String, Vec<u8>)], acidities: &[(String, Vec<u8>)]) {
        let mut faults: Faults = std::mem::take(&mut self.faults).into_iter().collect();
        let notes = &mut self.spec.notes;
        for (file, bytes) in yields {
            let notebook = files::Notebook {
                faults: &mut faults,
                notes,
            };
            let rows = measured::rows(file, bytes, notebook);
            self.spec.measured.extend(rows);
        }
        for (file, bytes) in acidities {
            let notebook = files::Notebook {
                faults: &mut faults,
                notes,
            };
            let rows = files::substrates(file, bytes, notebook);
            self.spec.substrates.extend(rows);
        }
        self.faults = faults.in_order(&self.campaign_name);
    }

    /// The campaign, if its text and files are sound.
    ///
    /// # Errors
    /// Every fault of form.
    pub fn sound(self) -> Result<CampaignSpec, Vec<InputError>> {
        if self.faults.is_empty() {
            Ok(self.spec)
        } else {
            Err(self.faults)
        }
    }

    /// All faults together with those that an engine found in [`Reading::spec`].
    ///
    /// Axes that are empty there were noted here, or lost their values to faults; so did a value that
    /// is missing there and could not be read here.
    pub fn with(&self, found: Vec<InputError>) -> Vec<InputError> {
        let known: HashSet<&Place> = self.faults.iter().map(|fault| &fault.place).collect();
        let is_new = |fault: &InputError| match FaultCode::from_name(fault.code) {
            Some(FaultCode::AxisEmpty) => false,
            Some(FaultCode::ValueMissing) => !known.contains(&fault.place),
            _ => true,
        };
        let found = found.into_iter().filter(is_new);
        let all: Faults = self.faults.iter().cloned().chain(found).collect();
        all.in_order(&self.campaign_name)
    }
}

/// Names of the files that a campaign wants to be given, as far as they can be made out.
///
/// Never fails: what is wrong with the text is for [`read`] to say, together with what is wrong
/// in the files.
pub fn files_named(campaign: &str) -> Vec<String> {
    if campaign.len() > MAX_CAMPAIGN_BYTES {
        return Vec::new();
    }
    let (top, _) = DeTable::parse_recoverable(campaign);
    let mut known: HashSet<String> = HashSet::new();
    let mut names: Vec<String> = Vec::new();
    for table in [
        "library",
        "substrates",
        "bases",
        "electrophiles",
        "solvents",
        "additives",
        "measured",
    ] {
        let Some(DeValue::Table(table)) = top.get_ref().get(table).map(Spanned::get_ref) else {
            continue;
        };
        let listed = table
            .get("file")
            .map(|value| items("", value))
            .unwrap_or_default();
        for (_, item) in listed {
            if let DeValue::String(name) = item.get_ref()
                && known.insert(name.to_string())
            {
                names.push(name.to_string());
            }
        }
    }
    names
}

/// Largest text of a campaign that is read, bytes: more takes the parser longer than a second.
const MAX_CAMPAIGN_BYTES: usize = 1 << 20;

/// What could be read, without the values at fault, and the faults.
fn read_all(sources: &Sources) -> (CampaignSpec, Faults) {
    if sources.campaign.len() > MAX_CAMPAIGN_BYTES {
        let mut faults = Faults::default();
        let place = Place {
            file: sources.campaign_name.clone(),
            line: 1,
            field: "size".to_owned(),
        };
        let reason = format!("the campaign has {} bytes", sources.campaign.len());
        let remedy = format!(
            "give at most {MAX_CAMPAIGN_BYTES} bytes; long lists belong in files that the campaign names"
        );
        faults.note(FaultCode::CampaignSyntax, place, "", reason, remedy);
        return (CampaignSpec::default(), faults);
    }
    let mut reader = Reader::new(sources);
    let (top, errors) = DeTable::parse_recoverable(&sources.campaign);
    let mut faults = Faults::default();
    for error in &errors {
        let span = error.span().unwrap_or_default();
        let place = reader.page.place(&span, "syntax");
        let line = reader.page.line_at(span.start).trim();
        let remedy =
            "write it as TOML: `key = value`, texts in quotation marks, lists in square brackets";
        faults.note(
            FaultCode::CampaignSyntax,
            place,
            line,
            told(error.message()),
            remedy,
        );
    }
    reader.values_lost = !errors.is_empty();
    let spec = campaign(&mut reader, top.get_ref());
    faults.append_of_other_lines(reader.faults);
    (spec, faults)
}

/// The parser's message, in words for those who do not read grammars where it is a common one.
fn told(message: &str) -> &str {
    if message.starts_with("invalid basic string") || message.starts_with("invalid literal string")
    {
        "a text has no closing quotation mark"
    } else if message.starts_with("invalid boolean") {
        "a text has no quotation marks"
    } else {
        message
    }
}

fn campaign(reader: &mut Reader<'_>, top: &DeTable<'_>) -> CampaignSpec {
    reader.refuse_unknown_keys("", top);
    let mut spec = CampaignSpec {
        title: title(reader, top),
        ..CampaignSpec::default()
    };
    if let Some(table) = reader.table(top, "library") {
        spec.library = reader.library_tables(table);
    }
    spec.substrates = axis(reader, top, "substrates", substrates, Vec::is_empty);
    spec.bases = axis(reader, top, "bases", bases, AxisSpec::is_empty);
    spec.electrophiles = axis(
        reader,
        top,
        "electrophiles",
        electrophiles,
        AxisSpec::is_empty,
    );
    spec.solvents = axis(reader, top, "solvents", solvents, AxisSpec::is_empty);
    if let Some(table) = reader.table(top, "additives") {
        spec.additives = reagents(reader, table, "additives");
    }
    if let Some(table) = reader.table(top, "conditions") {
        spec.conditions = conditions(reader, table);
    }
    if let Some(table) = reader.table(top, "target") {
        spec.target = TargetSpec {
            yield_at_least: optional(reader, table, "target", &YIELD_AT_LEAST),
        };
    }
    if let Some(table) = reader.table(top, "measured") {
        spec.measured = measured_yields(reader, table);
    }
    spec.notes = std::mem::take(&mut reader.notes);
    spec
}

fn title(reader: &mut Reader<'_>, top: &DeTable<'_>) -> String {
    let Some(value) = top.get("title") else {
        return String::new();
    };
    let place = reader.place(value, "title");
    let title = reader.text(value, "title");
    title
        .filter(|title| entries::check_text(title, place, &mut reader.faults))
        .unwrap_or_default()
}

/// Reads an axis and notes that it has no values, unless values were refused or lost.
fn axis<'i, T: Default>(
    reader: &mut Reader<'_>,
    top: &DeTable<'i>,
    name: &str,
    read: impl FnOnce(&mut Reader<'_>, &DeTable<'i>) -> T,
    is_empty: impl FnOnce(&T) -> bool,
) -> T {
    let faults_before = reader.faults.count();
    let values = reader
        .table(top, name)
        .map(|table| read(reader, table))
        .unwrap_or_default();
    if is_empty(&values) && reader.faults.count() == faults_before && !reader.values_lost {
        let (place, written) = match top.get(name) {
            Some(value) => (
                reader.place(value, name),
                reader.page.line_at(value.span().start),
            ),
            None => (reader.page.nowhere(name), ""),
        };
        let remedy = format!(
            "give at least one in [{name}] by {}",
            quoted(&keys_of(name))
        );
        reader.faults.note(
            FaultCode::AxisEmpty,
            place,
            written,
            "the axis has no values",
            remedy,
        );
    }
    values
}

fn bases(reader: &mut Reader<'_>, table: &DeTable<'_>) -> AxisSpec {
    reagents(reader, table, "bases")
}

fn solvents(reader: &mut Reader<'_>, table: &DeTable<'_>) -> AxisSpec {
    reagents(reader, table, "solvents")
}

/// An axis of library reagents: those of its files, then those it names.
fn reagents(reader: &mut Reader<'_>, table: &DeTable<'_>, name: &str) -> AxisSpec {
    let mut listed = Vec::new();
    for (file, bytes) in reader.files(table, name) {
        listed.extend(files::reagents(&file, bytes, reader.notebook()));
    }
    let mut axis = reader.library(table, name);
    listed.append(&mut axis.entries);
    AxisSpec {
        all: axis.all,
        entries: listed,
    }
}

fn substrates(reader: &mut Reader<'_>, table: &DeTable<'_>) -> Vec<SubstrateEntry> {
    let mut substrates = Vec::new();
    for (file, bytes) in reader.files(table, "substrates") {
        substrates.extend(files::substrates(&file, bytes, reader.notebook()));
    }
    for (smiles, place) in reader.texts(table, "substrates", "smiles") {
        substrates.push(SubstrateEntry {
            name: smiles.clone(),
            smiles,
            place,
            ..SubstrateEntry::default()
        });
    }
    for inline in reader.inline(table, "substrates") {
        substrates.extend(inline_substrate(reader, inline));
    }
    substrates
}

fn inline_substrate(reader: &mut Reader<'_>, inline: Inline<'_, '_>) -> Option<SubstrateEntry> {
    let path = inline.place.field.as_str();
    let before = reader.faults.count();
    let pka_dmso = optional(reader, inline.table, path, &PKA_DMSO);
    let pka_sigma = optional(reader, inline.table, path, &PKA_SIGMA);
    let refused = reader.faults.count() > before;
    let stock = reader.stock(&inline);
    let (name, smiles) = reader.named_structure(&inline)?;
    Some(SubstrateEntry {
        name: if name.is_empty() {
            smiles.clone()
        } else {
            name
        },
        smiles,
        pka_dmso: pka_dmso.filter(|_| !refused),
        pka_sigma: pka_sigma.filter(|_| !refused),
        stock,
        place: inline.place,
    })
}

fn electrophiles(reader: &mut Reader<'_>, table: &DeTable<'_>) -> AxisSpec {
    let mut axis = reagents(reader, table, "electrophiles");
    for (smiles, place) in reader.texts(table, "electrophiles", "smiles") {
        axis.entries.push(Entry {
            smiles,
            place,
            ..Entry::default()
        });
    }
    for inline in reader.inline(table, "electrophiles") {
        let stock = reader.stock(&inline);
        if let Some((name, smiles)) = reader.named_structure(&inline) {
            axis.entries.push(Entry {
                name,
                smiles,
                stock,
                place: inline.place,
                ..Entry::default()
            });
        }
    }
    axis
}

fn conditions(reader: &mut Reader<'_>, table: &DeTable<'_>) -> ConditionsSpec {
    let mut spec = ConditionsSpec::default();
    for (quantity, values) in CONDITIONS.iter().zip(spec.axes_mut()) {
        let Some(value) = table.get(quantity.name()) else {
            continue;
        };
        let listed = items(quantity.key, value);
        let place = reader.place(value, quantity.key);
        let written = reader.page.line_at(value.span().start);
        if !check_count(
            listed.len(),
            MOST_VALUES,
            place,
            written,
            &mut reader.faults,
        ) {
            continue;
        }
        *values = listed
            .into_iter()
            .filter_map(|(path, item)| reader.number(quantity, &path, item))
            .collect();
    }
    for (order, place) in reader.texts(table, "conditions", "addition") {
        if resolve::addition(&order, place, &mut reader.faults).is_some() {
            spec.addition.push(order);
        }
    }
    spec
}

fn measured_yields(reader: &mut Reader<'_>, table: &DeTable<'_>) -> Vec<MeasuredEntry> {
    if !table.contains_key("file") {
        let place = reader.page.nowhere("measured.file");
        let reason = "the table [measured] names no file";
        let remedy = "name a file of measured yields under `file`, or leave the table out";
        let code = FaultCode::ValueMissing;
        reader.faults.note(code, place, "", reason, remedy);
    }
    let mut yields = Vec::new();
    for (file, bytes) in reader.files(table, "measured") {
        yields.extend(measured::rows(&file, bytes, reader.notebook()));
    }
    yields
}

fn optional(
    reader: &mut Reader<'_>,
    table: &DeTable<'_>,
    path: &str,
    quantity: &Quantity,
) -> Option<f64> {
    let value = table.get(quantity.name())?;
    reader.number(quantity, &format!("{path}.{}", quantity.name()), value)
}
