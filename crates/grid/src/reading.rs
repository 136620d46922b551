//! Reads a campaign from TOML and the files it names.

use enolattice_reagents::Library;
use toml::Spanned;
use toml::de::{DeTable, DeValue};

use crate::conditions::{CONDITIONS, PKA_DMSO, PKA_SIGMA, Quantity, YIELD_AT_LEAST};
use crate::fault::{Faults, value_of_row};
use crate::keys::{keys_of, quoted};
use crate::page::items;
use crate::reader::{Inline, Reader};
use crate::{
    AxisSpec, CampaignSpec, ConditionsSpec, Entry, FaultCode, InputError, Sources, SubstrateEntry,
    TargetSpec, entries, files, resolve,
};

/// Reads a campaign from TOML and the files it names; reports all faults at once.
///
/// Names of reagents are not looked up: the library that counts may be that of a server.
/// [`read_against`] looks them up too.
///
/// # Errors
/// Every fault, with file, line, field, value, reason and remedy.
pub fn read(sources: &Sources) -> Result<CampaignSpec, Vec<InputError>> {
    let (spec, faults) = read_all(sources);
    faults.unless_any(spec, &sources.campaign_name)
}

/// Reads a campaign as [`read`] does and looks up every name in a library, so that unknown names
/// stand in the same list as all other faults.
///
/// # Errors
/// Every fault, with file, line, field, value, reason and remedy.
pub fn read_against(sources: &Sources, library: &Library) -> Result<CampaignSpec, Vec<InputError>> {
    let (spec, mut faults) = read_all(sources);
    resolve::reagents(&spec, library, &mut faults);
    faults.unless_any(spec, &sources.campaign_name)
}

/// Names of the files that a campaign wants to be given, as far as they can be made out.
///
/// Never fails: what is wrong with the text is for [`read`] to say, together with what is wrong
/// in the files.
pub fn files_named(campaign: &str) -> Vec<String> {
    let (top, _) = DeTable::parse_recoverable(campaign);
    let mut names: Vec<String> = Vec::new();
    for table in ["substrates", "electrophiles"] {
        let Some(DeValue::Table(table)) = top.get_ref().get(table).map(Spanned::get_ref) else {
            continue;
        };
        let listed = table
            .get("file")
            .map(|value| items("", value))
            .unwrap_or_default();
        for (_, item) in listed {
            if let DeValue::String(name) = item.get_ref()
                && !names.iter().any(|known| known == name)
            {
                names.push(name.to_string());
            }
        }
    }
    names
}

/// What could be read, without the values at fault, and the faults.
fn read_all(sources: &Sources) -> (CampaignSpec, Faults) {
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
            error.message(),
            remedy,
        );
    }
    reader.values_lost = !errors.is_empty();
    let spec = campaign(&mut reader, top.get_ref());
    faults.append_of_other_lines(reader.faults);
    (spec, faults)
}

fn campaign(reader: &mut Reader<'_>, top: &DeTable<'_>) -> CampaignSpec {
    reader.refuse_unknown_keys("", top);
    let mut spec = CampaignSpec {
        title: title(reader, top),
        ..CampaignSpec::default()
    };
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
        let additives = reader.library(table, "additives");
        resolve::refuse_additives(&additives, &mut reader.faults);
    }
    if let Some(table) = reader.table(top, "conditions") {
        spec.conditions = conditions(reader, table);
    }
    if let Some(table) = reader.table(top, "target") {
        spec.target = TargetSpec {
            yield_at_least: optional(reader, table, "target", &YIELD_AT_LEAST),
        };
    }
    spec
}

fn title(reader: &mut Reader<'_>, top: &DeTable<'_>) -> String {
    let Some(value) = top.get("title") else {
        return String::new();
    };
    let place = reader.place(value, "title");
    let title = reader.text(value, "title");
    title
        .filter(|title| entries::check_name(title, place, &mut reader.faults))
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
    reader.library(table, "bases")
}

fn solvents(reader: &mut Reader<'_>, table: &DeTable<'_>) -> AxisSpec {
    reader.library(table, "solvents")
}

fn substrates(reader: &mut Reader<'_>, table: &DeTable<'_>) -> Vec<SubstrateEntry> {
    let mut substrates = Vec::new();
    for (file, bytes) in reader.files(table, "substrates") {
        substrates.extend(files::substrates(&file, bytes, &mut reader.faults));
    }
    let mut add = |entry: SubstrateEntry, faults: &mut Faults| {
        if entries::substrate(&entry, faults).is_some() {
            substrates.push(entry);
        }
    };
    for (smiles, place) in reader.texts(table, "substrates", "smiles") {
        let name = smiles.clone();
        add(
            SubstrateEntry {
                name,
                smiles,
                place,
                ..SubstrateEntry::default()
            },
            &mut reader.faults,
        );
    }
    for inline in reader.inline(table, "substrates") {
        if let Some(entry) = inline_substrate(reader, inline) {
            add(entry, &mut reader.faults);
        }
    }
    substrates
}

fn inline_substrate(reader: &mut Reader<'_>, inline: Inline<'_, '_>) -> Option<SubstrateEntry> {
    let path = inline.place.field.as_str();
    let before = reader.faults.count();
    let pka_dmso = optional(reader, inline.table, path, &PKA_DMSO);
    let pka_sigma = optional(reader, inline.table, path, &PKA_SIGMA);
    let refused = reader.faults.count() > before;
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
        place: inline.place,
    })
}

fn electrophiles(reader: &mut Reader<'_>, table: &DeTable<'_>) -> AxisSpec {
    let mut listed = Vec::new();
    for (file, bytes) in reader.files(table, "electrophiles") {
        listed.extend(files::electrophiles(&file, bytes, &mut reader.faults));
    }
    let mut axis = reader.library(table, "electrophiles");
    listed.append(&mut axis.entries);
    let mut add = |entry: Entry, faults: &mut Faults| {
        let named = entries::check_name(&entry.name, value_of_row(&entry.place, "name"), faults);
        let place = value_of_row(&entry.place, "smiles");
        if entries::molecule(&entry.smiles, place, faults).is_some() && named {
            listed.push(entry);
        }
    };
    for (smiles, place) in reader.texts(table, "electrophiles", "smiles") {
        add(
            Entry {
                name: String::new(),
                smiles,
                place,
            },
            &mut reader.faults,
        );
    }
    for inline in reader.inline(table, "electrophiles") {
        if let Some((name, smiles)) = reader.named_structure(&inline) {
            add(
                Entry {
                    name,
                    smiles,
                    place: inline.place,
                },
                &mut reader.faults,
            );
        }
    }
    AxisSpec {
        all: axis.all,
        entries: listed,
    }
}

fn conditions(reader: &mut Reader<'_>, table: &DeTable<'_>) -> ConditionsSpec {
    let mut spec = ConditionsSpec::default();
    for (quantity, values) in CONDITIONS.iter().zip(spec.axes_mut()) {
        let Some(value) = table.get(quantity.name()) else {
            continue;
        };
        *values = items(quantity.key, value)
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

fn optional(
    reader: &mut Reader<'_>,
    table: &DeTable<'_>,
    path: &str,
    quantity: &Quantity,
) -> Option<f64> {
    let value = table.get(quantity.name())?;
    reader.number(quantity, &format!("{path}.{}", quantity.name()), value)
}
