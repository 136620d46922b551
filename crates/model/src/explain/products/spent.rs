//! What base, solvent and the electrophile itself make of the electrophile.

use enolattice_molecule::{
    AcylDonor, Bond, Cumulene, ElectrophileKind, ElectrophilicGroup, Molecule, alkenes, c_product,
    dehydrated, disproportionated, substitution_product,
};
use enolattice_reagents::BaseKind;

use super::{Drawing, Way};
use crate::acidity::acid_sites;
use crate::network::{Reaction, Species};
use crate::{Base, Channel};

const CARBON: u8 = 6;
const NITROGEN: u8 = 7;
const OXYGEN: u8 = 8;
const SULFUR: u8 = 16;

/// A molecule that attacks with one of its atoms.
type Nucleophile = (Molecule, usize);

/// Water.
pub(super) fn water() -> Option<Molecule> {
    Molecule::parse("O").ok()
}

/// Whether an atom is the carbon of a C=O.
pub(super) fn is_carbonyl(molecule: &Molecule, atom: usize) -> bool {
    let atoms = molecule.atoms();
    let mut bonds = molecule.neighbours(atom).iter();
    atoms[atom].element == CARBON
        && bonds.any(|&(other, bond)| bond == Bond::Double && atoms[other].element == OXYGEN)
}

/// The anion of a base with the atom that bears the charge, or an amine with its nitrogen; `None` for bases that
/// are no simple nucleophiles (hydrides, carbonates, fluorides) and where the atom is not certain.
pub(super) fn nucleophile_of_base(base: &Base) -> Option<Nucleophile> {
    match base.record.kind {
        BaseKind::Hydride | BaseKind::Carbonate | BaseKind::Fluoride => None,
        BaseKind::Amine => amine(&base.record.smiles),
        _ => anion(&base.record.smiles),
    }
}

/// The one anion of a salt, however often it is there, and the one atom of it with a charge.
pub(super) fn anion(smiles: &str) -> Option<Nucleophile> {
    let nucleophilic = |element: u8| matches!(element, CARBON | NITROGEN | OXYGEN | SULFUR);
    let mut found: Option<Nucleophile> = None;
    for part in smiles.split('.') {
        let Ok(molecule) = Molecule::parse(part) else {
            continue;
        };
        let atoms = molecule.atoms();
        let mut charged = (0..atoms.len()).filter(|atom| atoms[*atom].charge != 0);
        let (Some(atom), None) = (charged.next(), charged.next()) else {
            continue;
        };
        if atoms[atom].charge != -1 || !nucleophilic(atoms[atom].element) {
            continue;
        }
        match &found {
            Some((other, _)) if other.canonical() != molecule.canonical() => return None,
            _ => found = Some((molecule, atom)),
        }
    }
    found
}

/// An amine whose nitrogens are all alike, without other X–H.
fn amine(smiles: &str) -> Option<Nucleophile> {
    let molecule = Molecule::parse(smiles).ok()?;
    let nitrogen = the_only(&molecule, NITROGEN, |_| true)?;
    let is_plain = molecule.atoms().iter().all(|atom| {
        let bears_hydrogen = !matches!(atom.element, CARBON | NITROGEN) && atom.hydrogens > 0;
        atom.charge == 0 && !bears_hydrogen
    });
    is_plain.then_some((molecule, nitrogen))
}

/// The atom of this element of which this holds; `None` where there is none or where several are not equivalent.
fn the_only(molecule: &Molecule, element: u8, holds: impl Fn(usize) -> bool) -> Option<usize> {
    let classes = molecule.symmetry_classes();
    let atoms = molecule.atoms();
    let mut found = (0..atoms.len()).filter(|atom| atoms[*atom].element == element && holds(*atom));
    let first = found.next()?;
    found
        .all(|other| classes[other] == classes[first])
        .then_some(first)
}

/// What a nucleophile attacks with.
#[derive(Clone, Copy, PartialEq, Eq)]
enum Attacker {
    Carbon,
    Water,
    Carboxylate,
    TertiaryAmine,
    Nitrogen,
    Other,
}

fn attacker((molecule, atom): &Nucleophile) -> Attacker {
    let found = molecule.atoms()[*atom];
    let heavy = molecule.neighbours(*atom);
    match found.element {
        CARBON => Attacker::Carbon,
        NITROGEN if found.charge == 0 && found.hydrogens == 0 => Attacker::TertiaryAmine,
        NITROGEN => Attacker::Nitrogen,
        OXYGEN if heavy.is_empty() => Attacker::Water,
        OXYGEN if heavy.iter().any(|(other, _)| is_carbonyl(molecule, *other)) => {
            Attacker::Carboxylate
        }
        _ => Attacker::Other,
    }
}

/// Whether the product of the attack is simple and stays what it is: half esters of carbonic acid, carbamic acids,
/// silanols, mixed anhydrides and acylammonium ions do not, and an organometal does more than one thing to an acyl
/// group or an acceptor.
fn stays(attacker: Attacker, kind: &ElectrophileKind) -> bool {
    use Attacker::*;
    match kind {
        ElectrophileKind::Alkyl { .. } => true,
        _ if attacker == TertiaryAmine => false,
        ElectrophileKind::Ring { .. } | ElectrophileKind::Aryl { .. } => true,
        ElectrophileKind::Silyl { .. } => attacker != Water,
        ElectrophileKind::Acyl { donor, .. } => {
            let is_carbonic = matches!(
                donor,
                AcylDonor::Chloroformate
                    | AcylDonor::Dicarbonate
                    | AcylDonor::Carbonate
                    | AcylDonor::CarbamoylChloride
            );
            match attacker {
                Carbon | Carboxylate => false,
                Water => !is_carbonic,
                _ => true,
            }
        }
        ElectrophileKind::Cumulene { cumulene } => match cumulene {
            Cumulene::Isocyanate | Cumulene::Isothiocyanate => {
                matches!(attacker, Carbon | Nitrogen | Other)
            }
            Cumulene::Ketene => matches!(attacker, Water | Nitrogen | Other),
            _ => attacker == Carbon,
        },
        ElectrophileKind::Aldehyde { .. }
        | ElectrophileKind::Ketone { .. }
        | ElectrophileKind::Imine { .. } => attacker == Carbon,
        ElectrophileKind::Michael { .. } => attacker == Nitrogen,
        ElectrophileKind::Transfer { .. } | ElectrophileKind::Inert { .. } => false,
    }
}

impl Drawing<'_> {
    /// What becomes of electrophile that binds no substrate.
    pub(super) fn of_electrophile(&mut self) {
        let Some(group) = &self.cell.electrophile.group else {
            return;
        };
        for (channel, species) in [
            (Channel::BaseConsumedByElectrophile, Species::Spent),
            (Channel::Elimination, Species::Eliminated),
            (Channel::Solvolysis, Species::Solvolysed),
        ] {
            let ways = self.making(species).map(|r| self.way(r, group)).collect();
            self.add(Some(channel), self.at_end(species), ways);
        }
    }

    fn way(&self, r: &Reaction, group: &ElectrophilicGroup) -> Way {
        let electrophile = &self.cell.electrophile.molecule;
        let weight = self.extent(r);
        let by = |nucleophile: Option<Nucleophile>| {
            Way::to(weight, nucleophile.and_then(|n| self.taken_by(&n, group)))
        };
        if r.products.contains(&Some(Species::Eliminated)) {
            let possible = alkenes(electrophile, group).unwrap_or_default();
            return Way::to_one_of(weight, possible);
        }
        if r.products.contains(&Some(r.first)) {
            // a chain of the electrophile, which is no one molecule
            return Way::to(weight, None);
        }
        // what the electrophile does with itself uses up two molecules each time
        let twice = 2.0 * weight;
        match r.first {
            Species::Base => by(nucleophile_of_base(&self.cell.base)),
            Species::Hydroxide => by(water().map(|water| (water, 0))),
            Species::SolventAnion => by(self.carbon_acid_of_solvent()),
            Species::ElectrophileAnion => {
                let possible = self.electrophile_with_itself(group);
                Way::to_one_of(twice, possible.unwrap_or_default())
            }
            Species::Electrophile if r.second.is_some() => {
                let both = disproportionated(electrophile, group.atom).ok();
                let makes =
                    both.map(|(acid, alcohol)| vec![(acid, Some(0.5)), (alcohol, Some(0.5))]);
                Way {
                    weight: twice,
                    makes: makes.unwrap_or_default(),
                }
            }
            _ => by(self.hydroxylic_solvent()),
        }
    }

    fn taken_by(&self, nucleophile: &Nucleophile, group: &ElectrophilicGroup) -> Option<Molecule> {
        let (molecule, atom) = nucleophile;
        let electrophile = &self.cell.electrophile.molecule;
        if !stays(attacker(nucleophile), &group.kind) {
            return None;
        }
        let product = substitution_product(molecule, *atom, electrophile, group).ok()?;
        Some(product.molecule)
    }

    /// Aldol adduct and enone, or Claisen product, of the electrophile.
    fn electrophile_with_itself(&self, group: &ElectrophilicGroup) -> Option<Vec<Molecule>> {
        let electrophile = &self.cell.electrophile;
        let acid = electrophile.acid.as_ref()?;
        let is_simple = matches!(
            group.kind,
            ElectrophileKind::Aldehyde { .. }
                | ElectrophileKind::Ketone { .. }
                | ElectrophileKind::Acyl {
                    donor: AcylDonor::Ester,
                    ..
                }
        );
        if !is_simple || acid.element != CARBON {
            return None;
        }
        let molecule = &electrophile.molecule;
        let product = c_product(molecule, acid.atom, molecule, group).ok()?;
        let enone = dehydrated(&product).ok()?;
        Some(std::iter::once(product.molecule).chain(enone).collect())
    }

    /// The solvent with its O–H; `None` for mixtures.
    fn hydroxylic_solvent(&self) -> Option<Nucleophile> {
        let molecule = self.pure_solvent()?;
        let atom = the_only(&molecule, OXYGEN, |atom| {
            molecule.atoms()[atom].hydrogens > 0
        })?;
        Some((molecule, atom))
    }

    /// The solvent with its most acidic C–H; `None` for mixtures.
    fn carbon_acid_of_solvent(&self) -> Option<Nucleophile> {
        let molecule = self.pure_solvent()?;
        let sites = acid_sites(&molecule, self.library);
        let site = sites
            .iter()
            .find(|site| site.element == CARBON && site.hydrogens > 0)?;
        let atom = site.atom;
        Some((molecule, atom))
    }

    fn pure_solvent(&self) -> Option<Molecule> {
        let record = &self.cell.solvent.record;
        let structure = record.parts.is_empty().then_some(&record.smiles)?;
        Molecule::parse(structure).ok()
    }
}
