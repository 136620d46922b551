//! Names and structures of a specification looked up in the library.

use std::cell::OnceCell;
use std::collections::HashMap;

use enolattice_model::Addition;
use enolattice_molecule::{Molecule, Salt};
use enolattice_reagents::{
    Additive, Base, Library, MixtureError, NamedElectrophile, ReagentKind, Solvent,
};

use crate::axes::side_by_side;
use crate::fault::value_of_row;
use crate::faults::Faults;
use crate::keys::{nearest, quoted};
use crate::values::check_count;
use crate::{AxisSpec, CampaignSpec, Entry, FaultCode, Place, entries, stock};

/// The word for a cell without an additive.
pub(crate) const NO_ADDITIVE: &str = "none";

/// Most entries of an axis of bases, solvents or additives; each is looked up, mixtures are mixed.
const MOST_REAGENTS: usize = 2_000;

/// Longest name for which a similar one is looked for, characters.
const LONGEST_NAME: usize = 100;

/// The reagents of a campaign; those at fault are left out.
pub(crate) struct Reagents<'l> {
    pub(crate) bases: Vec<&'l Base>,
    pub(crate) electrophiles: Vec<NamedStructure>,
    pub(crate) solvents: Vec<Solvent>,
    /// Additives with their equivalents where the entry says them; `None` inside: no additive.
    pub(crate) additives: Vec<(Option<&'l Additive>, Option<f64>)>,
}

/// A structure with the name it goes by in the campaign.
pub(crate) struct NamedStructure {
    pub(crate) name: String,
    pub(crate) salt: Salt,
}

/// Looks up all bases, electrophiles, solvents and additives.
pub(crate) fn reagents<'l>(
    spec: &CampaignSpec,
    library: &'l Library,
    faults: &mut Faults,
) -> Reagents<'l> {
    Reagents {
        bases: bases(&spec.bases, library, faults),
        electrophiles: electrophiles(&spec.electrophiles, library, faults),
        solvents: solvents(&spec.solvents, library, faults),
        additives: additives(&spec.additives, library, faults),
    }
}

fn bases<'l>(axis: &AxisSpec, library: &'l Library, faults: &mut Faults) -> Vec<&'l Base> {
    let all = if axis.all { library.bases() } else { &[] };
    let mut found: Vec<&Base> = all.iter().collect();
    let structures = Structures::of(library.bases(), |base| &base.smiles);
    for (entry, place) in placed(axis, "bases", faults) {
        stock::check(&entry.stock, &place, faults);
        let known = library.base(&entry.name);
        match known.or_else(|| structures.find(&entry.smiles)) {
            Some(base) => found.push(base),
            None => unknown(entry, &place, ReagentKind::Base, library, faults),
        }
    }
    found
}

fn solvents(axis: &AxisSpec, library: &Library, faults: &mut Faults) -> Vec<Solvent> {
    let all = if axis.all { library.solvents() } else { &[] };
    let mut found: Vec<Solvent> = all.to_vec();
    let structures = Structures::of(library.solvents(), |solvent| &solvent.smiles);
    for (entry, place) in placed(axis, "solvents", faults) {
        stock::check(&entry.stock, &place, faults);
        let pure = library.solvent(&entry.name);
        if let Some(solvent) = pure.or_else(|| structures.find(&entry.smiles)) {
            found.push(solvent.clone());
            continue;
        }
        if !is_mixture(&entry.name) {
            unknown(entry, &place, ReagentKind::Solvent, library, faults);
            continue;
        }
        match library.solvent_or_mixture(&entry.name) {
            Ok(mixture) => found.push(mixture),
            Err(error) => no_mixture(entry, &place, &error, faults),
        }
    }
    found
}

fn no_mixture(entry: &Entry, place: &Place, error: &MixtureError, faults: &mut Faults) {
    let (code, reason, remedy) = fault_of_mixture(error);
    faults.note(code, named(place, entry), &entry.name, reason, remedy);
}

/// Code, reason and remedy of a mixture that cannot be mixed.
pub(crate) fn fault_of_mixture(error: &MixtureError) -> (FaultCode, String, String) {
    let usual = "write solvents and their volumes, e.g. `THF/DMF 4:1`";
    let mut code = FaultCode::ValueOutOfRange;
    let (reason, remedy) = match error {
        MixtureError::Unknown { name, suggestion } => {
            code = FaultCode::ReagentUnknown;
            let near = suggestion.as_ref();
            (
                format!("the library has no solvent `{name}`"),
                near.map_or(usual.to_owned(), |near| format!("did you mean `{near}`?")),
            )
        }
        MixtureError::Parts { found } => (
            format!("this is a mixture of {found}"),
            "mix two or three solvents".to_owned(),
        ),
        MixtureError::Repeated { name } => (
            format!("`{name}` is there twice"),
            "write each solvent of a mixture once".to_owned(),
        ),
        MixtureError::Volumes { parts, volumes } => (
            format!("there are {volumes} volumes for {parts} solvents"),
            "write one for each, e.g. `THF/DMF 4:1`, or none for equal volumes".to_owned(),
        ),
        MixtureError::Volume { volume } => (
            format!("`{volume}` is no volume"),
            "write a number from 0.001 to 1000".to_owned(),
        ),
    };
    (code, reason, remedy)
}

/// Whether a name is written as a mixture is: parts by volume at its end.
pub(crate) fn is_mixture(name: &str) -> bool {
    name.contains('/') && name.chars().nth(LONGEST_NAME).is_none()
}

fn additives<'l>(
    axis: &AxisSpec,
    library: &'l Library,
    faults: &mut Faults,
) -> Vec<(Option<&'l Additive>, Option<f64>)> {
    let all = if axis.all { library.additives() } else { &[] };
    let mut found: Vec<_> = all.iter().map(|known| (Some(known), None)).collect();
    let structures = Structures::of(library.additives(), |additive| &additive.smiles);
    for (entry, place) in placed(axis, "additives", faults) {
        stock::check(&entry.stock, &place, faults);
        let is_none = entry.name.eq_ignore_ascii_case(NO_ADDITIVE) && entry.smiles.is_empty();
        let known = library.additive(&entry.name);
        match known.or_else(|| structures.find(&entry.smiles)) {
            Some(additive) => found.push((Some(additive), entry.equiv)),
            None if is_none => found.push((None, None)),
            None if are_additives(&entry.name, library) => several_additives(entry, &place, faults),
            None => unknown(entry, &place, ReagentKind::Additive, library, faults),
        }
    }
    found
}

/// Whether a name lists several additives of the library, as `HMPA + LiCl`.
pub(crate) fn are_additives(name: &str, library: &Library) -> bool {
    let mut parts = name.split(['+', '/', ',', '&']).map(str::trim);
    name.len() <= LONGEST_NAME
        && name.contains(['+', '/', ',', '&'])
        && parts.all(|part| library.additive(part).is_some())
}

fn several_additives(entry: &Entry, place: &Place, faults: &mut Faults) {
    let reason = "two additives in one cell are not computed yet";
    let remedy = "list them one by one: each is then screened alone";
    let place = named(place, entry);
    faults.note(FaultCode::NotYetAllowed, place, &entry.name, reason, remedy);
}

fn electrophiles(axis: &AxisSpec, library: &Library, faults: &mut Faults) -> Vec<NamedStructure> {
    let all = if axis.all {
        library.electrophiles()
    } else {
        &[]
    };
    let of_library = |known: &NamedElectrophile, place: Place, faults: &mut Faults| {
        let salt = entries::structure(&known.smiles, place, faults)?;
        let name = known.name.clone();
        Some(NamedStructure { name, salt })
    };
    let mut found = side_by_side(all, faults, |known, _, faults| {
        let place = Place::of_field(&format!("electrophiles `{}`", known.name));
        of_library(known, place, faults)
    });
    found.extend(side_by_side(&axis.entries, faults, |entry, i, faults| {
        let place = in_list(&entry.place, "electrophiles", i);
        stock::check(&entry.stock, &place, faults);
        if !entry.smiles.is_empty() {
            return electrophile(entry, &place, library, faults);
        }
        match library.electrophile(&entry.name) {
            Some(known) => of_library(known, place, faults),
            None => {
                unknown(entry, &place, ReagentKind::Electrophile, library, faults);
                None
            }
        }
    }));
    found
}

/// An electrophile that is given by its structure.
fn electrophile(
    entry: &Entry,
    place: &Place,
    library: &Library,
    faults: &mut Faults,
) -> Option<NamedStructure> {
    let is_named = entries::check_text(&entry.name, value_of_row(place, "name"), faults);
    let salt = entries::structure(&entry.smiles, value_of_row(place, "smiles"), faults);
    let salt = salt.filter(|_| is_named)?;
    let name = match entry.name.as_str() {
        "" => match library.electrophile_by_structure(salt.molecule.canonical()) {
            Some(known) => known.name.clone(),
            None => entry.smiles.clone(),
        },
        given => given.to_owned(),
    };
    Some(NamedStructure { name, salt })
}

/// Entries with their places; where the caller gave none, the place in the list. None of them where
/// they are more than any library has, which is noted.
fn placed<'s>(
    axis: &'s AxisSpec,
    name: &'static str,
    faults: &mut Faults,
) -> impl Iterator<Item = (&'s Entry, Place)> + use<'s> {
    let count = axis.entries.len();
    let entries = match check_count(count, MOST_REAGENTS, Place::of_field(name), "", faults) {
        true => axis.entries.as_slice(),
        false => &[],
    };
    entries
        .iter()
        .enumerate()
        .map(move |(i, entry)| (entry, in_list(&entry.place, name, i)))
}

/// The place of a value; where none was given, its place in the list of the axis.
pub(crate) fn in_list(place: &Place, axis: &str, index: usize) -> Place {
    if place.file.is_empty() && place.field.is_empty() {
        Place::of_field(&format!("{axis}[{index}]"))
    } else {
        place.clone()
    }
}

/// Reagents of the library by their structure, prepared when the first one is looked for.
pub(crate) struct Structures<'l, T> {
    reagents: &'l [T],
    smiles: fn(&T) -> &String,
    by_structure: OnceCell<HashMap<String, &'l T>>,
}

impl<'l, T> Structures<'l, T> {
    pub(crate) fn of(reagents: &'l [T], smiles: fn(&T) -> &String) -> Structures<'l, T> {
        Structures {
            reagents,
            smiles,
            by_structure: OnceCell::new(),
        }
    }

    pub(crate) fn find(&self, smiles: &str) -> Option<&'l T> {
        if smiles.is_empty() || smiles.len() > Molecule::MAX_BYTES {
            return None;
        }
        let by_structure = self.by_structure.get_or_init(|| {
            // where two reagents have one structure, the first counts
            let all = self.reagents.iter().rev();
            all.map(|known| (structure((self.smiles)(known)), known))
                .collect()
        });
        by_structure.get(&structure(smiles)).copied()
    }
}

/// What is the same for two ways to write a structure; ions in any order.
fn structure(smiles: &str) -> String {
    let canonical = |part: &str| match Molecule::parse(part) {
        Ok(molecule) => molecule.canonical().to_owned(),
        // metal ions are no molecules: they are compared as they are written
        Err(_) => part.to_owned(),
    };
    let mut parts: Vec<String> = smiles.split('.').map(canonical).collect();
    parts.sort_unstable();
    parts.join(".")
}

/// The place of an entry's name or structure, whichever it is known by.
fn named(place: &Place, entry: &Entry) -> Place {
    let value = if entry.name.is_empty() && !entry.smiles.is_empty() {
        "smiles"
    } else {
        "name"
    };
    if place.field.is_empty() {
        value_of_row(place, value)
    } else {
        place.clone()
    }
}

fn unknown(
    entry: &Entry,
    place: &Place,
    kind: ReagentKind,
    library: &Library,
    faults: &mut Faults,
) {
    let kind_name = kind.name();
    let place = named(place, entry);
    if entry.name.is_empty() && !entry.smiles.is_empty() {
        let reason = format!("the library has no {kind_name} of this structure");
        let remedy = format!("give the name of a {kind_name} of the library");
        faults.note(
            FaultCode::ReagentUnknown,
            place,
            &entry.smiles,
            reason,
            remedy,
        );
        return;
    }
    let is_long = entry.name.chars().nth(LONGEST_NAME).is_some();
    let near = if is_long || faults.is_full() {
        None
    } else {
        library.suggest(kind, &entry.name)
    };
    let remedy = match near {
        _ if entry.name.is_empty() => {
            format!("give the name of a {kind_name} or leave the entry out")
        }
        _ if kind == ReagentKind::Electrophile && Molecule::parse(&entry.name).is_ok() => {
            "give a SMILES under `smiles`, not under `library`".to_owned()
        }
        Some(near) => format!("did you mean `{near}`?"),
        None => format!("`enolattice reagents` lists every {kind_name} of the library"),
    };
    let reason = if entry.smiles.is_empty() {
        format!("the library has no {kind_name} of this name")
    } else {
        format!("the library has no {kind_name} of this name or structure")
    };
    faults.note(
        FaultCode::ReagentUnknown,
        place,
        &entry.name,
        reason,
        remedy,
    );
}

/// The order of addition with this name.
pub(crate) fn addition(name: &str, place: Place, faults: &mut Faults) -> Option<Addition> {
    let order = Addition::from_name(name);
    if order.is_none() {
        let names = Addition::ALL.map(Addition::name);
        let remedy = match nearest(name, names) {
            Some(near) => format!("did you mean `{near}`?"),
            None => format!("the orders are {}", quoted(&names)),
        };
        let reason = "there is no such order of addition";
        faults.note(FaultCode::ValueUnknown, place, name, reason, remedy);
    }
    order
}
