//! Names and structures of a specification looked up in the library.

use enolattice_model::Addition;
use enolattice_molecule::Molecule;
use enolattice_reagents::{Base, Library, ReagentKind, Solvent};

use crate::fault::{Faults, value_of_row};
use crate::keys::{nearest, quoted};
use crate::{AxisSpec, CampaignSpec, Entry, FaultCode, Place, entries};

/// The reagents of a campaign; those at fault are left out.
pub(crate) struct Reagents<'l> {
    pub(crate) bases: Vec<&'l Base>,
    pub(crate) electrophiles: Vec<NamedStructure>,
    pub(crate) solvents: Vec<&'l Solvent>,
}

/// A structure with the name it goes by in the campaign.
pub(crate) struct NamedStructure {
    pub(crate) name: String,
    pub(crate) molecule: Molecule,
}

/// Looks up all bases, electrophiles and solvents.
pub(crate) fn reagents<'l>(
    spec: &CampaignSpec,
    library: &'l Library,
    faults: &mut Faults,
) -> Reagents<'l> {
    let mut bases: Vec<&Base> = if spec.bases.all {
        library.bases().iter().collect()
    } else {
        vec![]
    };
    for (entry, place) in placed(&spec.bases, "bases") {
        let known = match entry.smiles.as_str() {
            "" => library.base(&entry.name),
            smiles => library
                .bases()
                .iter()
                .find(|base| same_structure(&base.smiles, smiles)),
        };
        match known {
            Some(base) => bases.push(base),
            None => unknown(entry, place, ReagentKind::Base, library, faults),
        }
    }
    let mut solvents: Vec<&Solvent> = if spec.solvents.all {
        library.solvents().iter().collect()
    } else {
        vec![]
    };
    for (entry, place) in placed(&spec.solvents, "solvents") {
        let known = match entry.smiles.as_str() {
            "" => library.solvent(&entry.name),
            smiles => library
                .solvents()
                .iter()
                .find(|known| same_structure(&known.smiles, smiles)),
        };
        match known {
            Some(solvent) => solvents.push(solvent),
            None if is_mixture(&entry.name, library) => {
                let reason = "mixtures of solvents are not covered yet";
                let remedy = "name one solvent for each value";
                faults.note(FaultCode::NotYetAllowed, place, &entry.name, reason, remedy);
            }
            None => unknown(entry, place, ReagentKind::Solvent, library, faults),
        }
    }
    Reagents {
        bases,
        electrophiles: electrophiles(&spec.electrophiles, library, faults),
        solvents,
    }
}

fn electrophiles(axis: &AxisSpec, library: &Library, faults: &mut Faults) -> Vec<NamedStructure> {
    let all = if axis.all {
        library.electrophiles()
    } else {
        &[]
    };
    let mut found: Vec<NamedStructure> = Vec::new();
    for known in all {
        let place = Place::of_field(&format!("electrophiles `{}`", known.name));
        let molecule = entries::molecule(&known.smiles, place, faults);
        found.extend(molecule.map(|molecule| NamedStructure {
            name: known.name.clone(),
            molecule,
        }));
    }
    for (entry, place) in placed(axis, "electrophiles") {
        if entry.smiles.is_empty() {
            let Some(known) = library.electrophile(&entry.name) else {
                unknown(entry, place, ReagentKind::Electrophile, library, faults);
                continue;
            };
            let molecule = entries::molecule(&known.smiles, place, faults);
            found.extend(molecule.map(|molecule| NamedStructure {
                name: known.name.clone(),
                molecule,
            }));
            continue;
        }
        let named = entries::check_name(&entry.name, value_of_row(&place, "name"), faults);
        let molecule = entries::molecule(&entry.smiles, value_of_row(&place, "smiles"), faults);
        let Some(molecule) = molecule.filter(|_| named) else {
            continue;
        };
        let name = match library.electrophile_by_structure(molecule.canonical()) {
            _ if !entry.name.is_empty() => entry.name.clone(),
            Some(known) => known.name.clone(),
            None => entry.smiles.clone(),
        };
        found.push(NamedStructure { name, molecule });
    }
    found
}

/// Entries with their places; where the caller gave none, the place in the list.
fn placed<'s>(axis: &'s AxisSpec, name: &str) -> impl Iterator<Item = (&'s Entry, Place)> {
    axis.entries
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

/// Whether two SMILES mean the same. Salts are no molecules: they must be written alike.
fn same_structure(known: &str, given: &str) -> bool {
    known == given
        || matches!((Molecule::parse(known), Molecule::parse(given)),
            (Ok(known), Ok(given)) if known.canonical() == given.canonical())
}

/// Whether a name is several solvents of the library, as `THF/DMF` or `EtOH + water 9:1`.
fn is_mixture(name: &str, library: &Library) -> bool {
    let mut parts = name
        .split(['/', '+', ',', ':', ' '])
        .filter(|part| !part.is_empty());
    parts
        .by_ref()
        .filter(|part| library.solvent(part).is_some())
        .take(2)
        .count()
        == 2
}

fn unknown(entry: &Entry, place: Place, kind: ReagentKind, library: &Library, faults: &mut Faults) {
    let kind_name = kind.name();
    if !entry.smiles.is_empty() {
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
    let remedy = match library.suggest(kind, &entry.name) {
        _ if entry.name.is_empty() => {
            format!("give the name of a {kind_name} or leave the entry out")
        }
        _ if kind == ReagentKind::Electrophile && Molecule::parse(&entry.name).is_ok() => {
            "give a SMILES under `smiles`, not under `library`".to_owned()
        }
        Some(near) => format!("did you mean `{near}`?"),
        None => format!("`enolattice reagents` lists every {kind_name} of the library"),
    };
    let reason = format!("the library has no {kind_name} of this name");
    faults.note(
        FaultCode::ReagentUnknown,
        place,
        &entry.name,
        reason,
        remedy,
    );
}

/// Additives have their place in a campaign but are not covered yet.
pub(crate) fn refuse_additives(axis: &AxisSpec, faults: &mut Faults) {
    let mut refuse = |place, value: &str| {
        let reason = "additives are not covered yet";
        faults.note(
            FaultCode::NotYetAllowed,
            place,
            value,
            reason,
            "leave additives out",
        );
    };
    if axis.all {
        refuse(Place::of_field("additives"), "all");
    }
    for (entry, place) in placed(axis, "additives") {
        refuse(
            place,
            if entry.name.is_empty() {
                &entry.smiles
            } else {
                &entry.name
            },
        );
    }
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
