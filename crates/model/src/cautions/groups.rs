//! Groups that make a molecule dangerous, read off its graph.

use enolattice_molecule::{Bond, Molecule};

use super::{Category, Caution};

const CARBON: u8 = 6;
const NITROGEN: u8 = 7;
const OXYGEN: u8 = 8;
const SULFUR: u8 = 16;

/// What leaves from an alkylating agent.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Leaving {
    Chloride,
    Bromide,
    Iodide,
    Sulfonate,
    Sulfate,
    Triflate,
}

/// A carbon that alkylates.
#[derive(Clone, Copy, Debug)]
pub(super) struct Alkylator {
    pub(super) leaving: Leaving,
    pub(super) propargyl: bool,
    pub(super) alpha_acceptor: bool,
    /// Methyl or ethyl.
    small: bool,
    /// Allyl, benzyl, propargyl, next to an acceptor, or with O, N or S on the same carbon.
    activated: bool,
}

impl Alkylator {
    /// Alkylates amines and DNA at room temperature.
    pub(super) fn is_reactive(self) -> bool {
        let good = !matches!(self.leaving, Leaving::Chloride | Leaving::Bromide);
        self.activated || self.small || good
    }

    /// Alkylates weak nucleophiles, solvents among them.
    pub(super) fn is_fierce(self) -> bool {
        matches!(self.leaving, Leaving::Sulfate | Leaving::Triflate)
    }
}

/// All saturated carbons with a leaving group.
pub(super) fn alkylators(molecule: &Molecule) -> Vec<Alkylator> {
    let atoms = 0..molecule.atoms().len();
    let saturated = atoms.filter(|&atom| is_saturated_carbon(molecule, atom));
    saturated
        .filter_map(|carbon| alkylator(molecule, carbon))
        .collect()
}

fn alkylator(molecule: &Molecule, carbon: usize) -> Option<Alkylator> {
    let neighbours = || molecule.neighbours(carbon).iter().map(|&(atom, _)| atom);
    let (leaving_atom, leaving) =
        neighbours().find_map(|atom| Some((atom, leaving(molecule, carbon, atom)?)))?;
    let carbons: Vec<usize> = neighbours().filter(|&a| is(molecule, a, CARBON)).collect();
    let propargyl = carbons
        .iter()
        .any(|&a| has_bond(molecule, a, Bond::Triple, CARBON));
    let alpha_acceptor = carbons.iter().any(|&a| is_acceptor(molecule, a));
    let activated = carbons.iter().any(|&a| !is_saturated_carbon(molecule, a))
        || neighbours().any(|a| a != leaving_atom && is_donor(molecule, a));
    let small = match carbons[..] {
        [] => true,
        [only] => molecule.atoms()[only].hydrogens == 3,
        _ => false,
    };
    Some(Alkylator {
        leaving,
        propargyl,
        alpha_acceptor,
        small,
        activated,
    })
}

fn leaving(molecule: &Molecule, carbon: usize, atom: usize) -> Option<Leaving> {
    match molecule.atoms()[atom].element {
        17 => Some(Leaving::Chloride),
        35 => Some(Leaving::Bromide),
        53 => Some(Leaving::Iodide),
        OXYGEN => {
            let mut beyond = molecule
                .neighbours(atom)
                .iter()
                .filter(|(a, _)| *a != carbon);
            beyond.find_map(|&(sulfur, _)| sulfonyl(molecule, sulfur))
        }
        _ => None,
    }
}

fn sulfonyl(molecule: &Molecule, sulfur: usize) -> Option<Leaving> {
    let neighbours = molecule.neighbours(sulfur);
    let oxo = |&&(atom, bond): &&(usize, Bond)| is(molecule, atom, OXYGEN) && bond == Bond::Double;
    if !is(molecule, sulfur, SULFUR) || neighbours.iter().filter(oxo).count() < 2 {
        return None;
    }
    let single_oxygens = neighbours
        .iter()
        .filter(|&&(atom, bond)| is(molecule, atom, OXYGEN) && bond == Bond::Single)
        .count();
    let fluorines = |&&(atom, _): &&(usize, Bond)| {
        molecule
            .neighbours(atom)
            .iter()
            .filter(|(f, _)| is(molecule, *f, 9))
            .count()
            >= 2
    };
    Some(match single_oxygens {
        2.. => Leaving::Sulfate,
        _ if neighbours.iter().any(|neighbour| fluorines(&neighbour)) => Leaving::Triflate,
        _ => Leaving::Sulfonate,
    })
}

/// The kind of a CH2=C acceptor that polymerises with base, in words.
pub(super) fn polymerisable(molecule: &Molecule) -> Option<&'static str> {
    let is_open = |atom: usize| is(molecule, atom, CARBON) && molecule.atoms()[atom].hydrogens == 2;
    let open_ends = (0..molecule.atoms().len()).filter(|&atom| is_open(atom));
    let alpha = |end: usize| {
        let mut bonds = molecule.neighbours(end).iter();
        bonds
            .find(|&&(a, bond)| bond == Bond::Double && is(molecule, a, CARBON))
            .map(|&(a, _)| a)
    };
    open_ends.filter_map(alpha).find_map(|alpha| {
        let mut groups = molecule
            .neighbours(alpha)
            .iter()
            .filter(|(_, b)| *b == Bond::Single);
        groups.find_map(|&(atom, _)| acceptor_word(molecule, atom, alpha))
    })
}

fn acceptor_word(molecule: &Molecule, atom: usize, alpha: usize) -> Option<&'static str> {
    if has_bond(molecule, atom, Bond::Triple, NITROGEN) {
        return Some("a vinyl nitrile");
    }
    if is_nitro(molecule, atom) {
        return Some("a vinyl nitro compound");
    }
    if is(molecule, atom, SULFUR) && has_bond(molecule, atom, Bond::Double, OXYGEN) {
        return Some("a vinyl sulfone or sulfoxide");
    }
    if !has_bond(molecule, atom, Bond::Double, OXYGEN) || !is(molecule, atom, CARBON) {
        return None;
    }
    let single = molecule
        .neighbours(atom)
        .iter()
        .filter(|(_, bond)| *bond == Bond::Single);
    let other = single.map(|&(a, _)| a).find(|&a| a != alpha);
    Some(match other.map(|a| molecule.atoms()[a].element) {
        None => "a vinyl aldehyde",
        Some(CARBON) => "a vinyl ketone",
        Some(_) => "an acrylic ester or amide",
    })
}

/// Whether the molecule has an aldehyde group with a hydrogen next to it.
pub(super) fn enolisable_aldehyde(molecule: &Molecule) -> bool {
    let is_aldehyde = |atom: usize| {
        is(molecule, atom, CARBON)
            && molecule.atoms()[atom].hydrogens >= 1
            && has_bond(molecule, atom, Bond::Double, OXYGEN)
    };
    let has_alpha_hydrogen = |atom: usize| {
        let mut alpha = molecule.neighbours(atom).iter().map(|&(a, _)| a);
        alpha.any(|a| is_saturated_carbon(molecule, a) && molecule.atoms()[a].hydrogens > 0)
    };
    (0..molecule.atoms().len()).any(|atom| is_aldehyde(atom) && has_alpha_hydrogen(atom))
}

/// Whether a nitro group sits on a saturated carbon with hydrogen.
pub(super) fn is_nitroalkane(molecule: &Molecule) -> bool {
    let acidic = |a: usize| is_saturated_carbon(molecule, a) && molecule.atoms()[a].hydrogens > 0;
    (0..molecule.atoms().len()).any(|atom| {
        is_nitro(molecule, atom) && molecule.neighbours(atom).iter().any(|&(a, _)| acidic(a))
    })
}

/// Whether the molecule has a COOH group.
pub(super) fn has_carboxylic_acid(molecule: &Molecule) -> bool {
    (0..molecule.atoms().len()).any(|atom| {
        is(molecule, atom, CARBON)
            && has_bond(molecule, atom, Bond::Double, OXYGEN)
            && molecule.neighbours(atom).iter().any(|&(a, bond)| {
                let oxygen = molecule.atoms()[a];
                bond == Bond::Single && oxygen.element == OXYGEN && oxygen.hydrogens == 1
            })
    })
}

/// A group that may explode, with the rule of the trade for azides: (C + O) / N at least 3.
pub(super) fn explosive_group(molecule: &Molecule, name: &str) -> Option<Caution> {
    let count = |element| {
        molecule
            .atoms()
            .iter()
            .filter(|a| a.element == element)
            .count()
    };
    let group = (0..molecule.atoms().len()).find_map(|atom| explosive_at(molecule, atom))?;
    let text = format!("{name} has {group}: shock, heat and metals may set it off");
    let is_thin = count(CARBON) + count(OXYGEN) < 3 * count(NITROGEN);
    Some(if group == AZIDE && is_thin {
        Caution::stop(
            Category::Explosive,
            format!("{text}; (C + O) / N is below 3"),
        )
    } else {
        Caution::warning(Category::Explosive, text)
    })
}

const AZIDE: &str = "an azide group";

fn explosive_at(molecule: &Molecule, atom: usize) -> Option<&'static str> {
    let here = molecule.atoms()[atom];
    let neighbours = molecule.neighbours(atom);
    let count = |element: u8| {
        neighbours
            .iter()
            .filter(|(a, _)| is(molecule, *a, element))
            .count()
    };
    let nitro = neighbours
        .iter()
        .filter(|(a, _)| is_nitro(molecule, *a))
        .count();
    match here.element {
        NITROGEN if here.charge == 1 && neighbours.len() == 2 && count(NITROGEN) == 2 => {
            Some(AZIDE)
        }
        NITROGEN if here.charge == 1 && neighbours.len() == 2 && count(NITROGEN) == 1 => {
            Some("a diazo group")
        }
        // The nitro group's own oxygens end there.
        NITROGEN | OXYGEN if nitro > 0 && neighbours.len() > 1 => {
            Some("a nitrate or nitramine group")
        }
        OXYGEN if count(OXYGEN) > 0 => Some("a peroxide group"),
        NITROGEN if is_tetrazole(molecule, atom) => Some("a tetrazole ring"),
        CARBON if !here.aromatic && nitro > 1 => Some("several nitro groups on one carbon"),
        CARBON if here.aromatic && is_trinitroarene(molecule, atom) => {
            Some("three nitro groups on one ring")
        }
        _ => None,
    }
}

fn is_tetrazole(molecule: &Molecule, atom: usize) -> bool {
    let nitrogens = |ring: &Vec<usize>| ring.iter().filter(|&&a| is(molecule, a, NITROGEN)).count();
    molecule
        .rings()
        .iter()
        .any(|r| r.contains(&atom) && r.len() == 5 && nitrogens(r) == 4)
}

fn is_trinitroarene(molecule: &Molecule, atom: usize) -> bool {
    let has_nitro = |a: usize| {
        molecule
            .neighbours(a)
            .iter()
            .any(|&(n, _)| is_nitro(molecule, n))
    };
    let nitro = |ring: &Vec<usize>| ring.iter().filter(|&&a| has_nitro(a)).count();
    molecule
        .rings()
        .iter()
        .any(|ring| ring.contains(&atom) && nitro(ring) >= 3)
}

/// Whether the molecule has an epoxide, aziridine or other three-ring with a heteroatom.
pub(super) fn has_strained_heterocycle(molecule: &Molecule) -> bool {
    let mut rings = molecule.rings().iter();
    rings.any(|ring| ring.len() == 3 && ring.iter().any(|&atom| is_donor(molecule, atom)))
}

/// Whether the atom is oxygen, nitrogen or sulfur.
fn is_donor(molecule: &Molecule, atom: usize) -> bool {
    matches!(molecule.atoms()[atom].element, OXYGEN | NITROGEN | SULFUR)
}

/// Whether the atom is the nitrogen of a nitro group.
fn is_nitro(molecule: &Molecule, atom: usize) -> bool {
    let end =
        |&&(a, _): &&(usize, Bond)| is(molecule, a, OXYGEN) && molecule.neighbours(a).len() == 1;
    is(molecule, atom, NITROGEN) && molecule.neighbours(atom).iter().filter(end).count() == 2
}

/// Whether the atom is the carbon of a carbonyl or nitrile group.
fn is_acceptor(molecule: &Molecule, atom: usize) -> bool {
    has_bond(molecule, atom, Bond::Double, OXYGEN)
        || has_bond(molecule, atom, Bond::Triple, NITROGEN)
}

fn is_saturated_carbon(molecule: &Molecule, atom: usize) -> bool {
    let single = |&(_, bond): &(usize, Bond)| bond == Bond::Single;
    is(molecule, atom, CARBON)
        && !molecule.atoms()[atom].aromatic
        && molecule.neighbours(atom).iter().all(single)
}

fn is(molecule: &Molecule, atom: usize, element: u8) -> bool {
    molecule.atoms()[atom].element == element
}

fn has_bond(molecule: &Molecule, atom: usize, bond: Bond, element: u8) -> bool {
    let mut neighbours = molecule.neighbours(atom).iter();
    neighbours.any(|&(a, b)| b == bond && is(molecule, a, element))
}
