//! Reagents prepared for the model: structure, acidities, reactivity.

use enolattice_molecule::{
    AnionClass, Bond, ElectrophilicGroup, Molecule, Product, c_product, dehydrated, o_product,
    recognise,
};
use enolattice_reagents::{BaseKind, Cation, Library, NamedElectrophile};

use crate::Addition;
use crate::acidity::{AcidSite, Origin, acid_sites};
use crate::carbonyl::{Carbonyl, cleavable_at, ester_group, self_acceptor};
use crate::electrophilicity::electrophilicity;
use crate::features::{
    Closure, alcohol_of, closure, e_of_alkene, enamine_of, exchanging_alcohol, leaves_in_beta,
};
use crate::medium::{Loosening, Onium};
use crate::parameters::P;

/// Carbon sites that compete in a cell; further ones are less acidic and left out.
pub(crate) const SITES: usize = 3;

/// A site of a product less acidic by more than this is too rarely ionised to take a second electrophile; a substituent
/// slows the first site by hardly more (a working rule).
const NEXT_SITE_PK: f64 = 2.0;

/// An N–H and a C–H that share an acceptor give one ambident anion, which takes the electrophile at
/// carbon, unless the N–H is more acidic by more than this (oxindoles; common practice).
const AMBIDENT_PK: f64 = 2.5;

/// A laboratory's own pKa for a substrate.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct MeasuredPka {
    /// pKa on the DMSO scale of the most acidic C–H.
    pub pka_dmso: f64,
    /// Standard uncertainty.
    pub sigma: f64,
}

/// A group next to a carbanion that makes it a better or worse nucleophile than others of its basicity.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) enum Beside {
    /// The nitrogen of an imine: a 2-azaallyl anion.
    Imino,
    /// A phosphoryl group.
    Phosphoryl,
    /// A cyano group beside a carbonyl group or a second one.
    Cyano,
}

/// A carbon site of a substrate and what it is as a nucleophile.
#[derive(Clone, Debug)]
pub(crate) struct CarbonSite {
    /// The site.
    pub(crate) acid: AcidSite,
    /// Hydrogens on all equivalent atoms.
    pub(crate) hydrogens: f64,
    /// Heavy neighbours of the atom: 1 for a methyl group.
    pub(crate) degree: u8,
    /// Heavy neighbours beyond two, but for cyano and ethynyl groups, which take no room: 1 where the new bond makes a
    /// quaternary carbon.
    pub(crate) crowding: u8,
    /// Branches of the plain carbon substituents next to the site.
    pub(crate) branches: u8,
    /// A neighbour that counts for the rate.
    pub(crate) beside: Option<Beside>,
    /// Whether a ketone or aldehyde activates it, whose oxygen competes with the carbon more than that of an ester.
    pub(crate) beside_ketone: bool,
    /// Whether a cyano group activates it.
    pub(crate) beside_cyano: bool,
    /// Rate at which its carbanion loses a group in β, where it has one.
    pub(crate) leaves_in_beta: Option<P>,
}

/// A substrate with its acidic sites.
#[derive(Clone, Debug)]
pub struct Substrate {
    /// Name in the campaign.
    pub name: String,
    /// Structure.
    pub molecule: Molecule,
    /// Acidic sites, most acidic first.
    pub sites: Vec<AcidSite>,
    /// The most acidic carbon sites.
    pub(crate) carbon: Vec<CarbonSite>,
    /// The most acidic heteroatom site.
    pub(crate) heteroatom: Option<AcidSite>,
    /// The substrate's own carbonyl group as an acceptor.
    pub(crate) acceptor: Option<Carbonyl>,
    /// Its ester group, where it has one.
    pub(crate) ester: Option<Carbonyl>,
    /// The alcohol of its ester group, where that can be exchanged for another.
    pub(crate) alcohol: Option<String>,
    /// The weaker acceptor of a 1,3-diketone or β-keto ester.
    pub(crate) cleavable: Option<Carbonyl>,
    /// Rate of exchange of the halogen on an arene or alkene that alkyllithiums take first.
    pub(crate) exchangeable_halogen: Option<P>,
}

impl Substrate {
    pub(crate) fn new(
        name: &str,
        molecule: Molecule,
        measured: Option<MeasuredPka>,
        library: &Library,
    ) -> Substrate {
        let mut sites = acid_sites(&molecule, library);
        if let Some(measured) = measured
            && let Some(first) = sites.iter_mut().find(|site| site.element == 6)
        {
            let shift = measured.pka_dmso - first.pka_dmso;
            first.pka_dmso += shift;
            first.sigma = measured.sigma;
            first.origin = Origin::Measured;
            first.source = "measured by the laboratory, given with the campaign".to_owned();
        }
        let carbon: Vec<_> = sites
            .iter()
            .filter(|site| site.element == 6 && site.hydrogens > 0)
            .take(SITES)
            .map(|site| carbon_site(&molecule, site))
            .collect();
        let heteroatom = sites
            .iter()
            .find(|site| site.element != 6 && site.hydrogens > 0)
            .cloned();
        let acceptor = self_acceptor(&molecule);
        let exchangeable_halogen = exchangeable_halogen(&molecule);
        let ester = ester_group(&molecule);
        let alcohol = ester.and_then(|kind| alcohol_of(&molecule, kind));
        let first = carbon.first().map(|site| site.acid.atom);
        let cleavable = first.and_then(|atom| cleavable_at(&molecule, atom));
        Substrate {
            name: name.to_owned(),
            molecule,
            sites,
            carbon,
            heteroatom,
            acceptor,
            ester,
            alcohol,
            cleavable,
            exchangeable_halogen,
        }
    }

    /// The site by which the substrate condenses with itself: an acidic and open one.
    pub(crate) fn condensing_site(&self) -> usize {
        // a substituent costs an addition to a carbonyl group about as much as this in acidity (from memory)
        const SUBSTITUENT_PK: f64 = 1.5;
        let cost = |site: &CarbonSite| site.acid.pka_dmso + SUBSTITUENT_PK * f64::from(site.degree);
        let sites = self.carbon.iter().enumerate();
        let best = sites.min_by(|a, b| cost(a.1).total_cmp(&cost(b.1)));
        best.map_or(0, |(i, _)| i)
    }

    /// Whether the site by which the substrate condenses with itself has a hydrogen left then.
    pub(crate) fn keeps_hydrogen_on_condensing(&self) -> bool {
        let site = self.carbon.get(self.condensing_site());
        site.is_some_and(|site| site.acid.hydrogens > 1)
    }

    /// The heteroatom site, where it is more acidic than every carbon site.
    pub(crate) fn stronger_heteroatom(&self) -> Option<&AcidSite> {
        let heteroatom = self.heteroatom.as_ref()?;
        let carbon = self
            .carbon
            .first()
            .map_or(f64::INFINITY, |site| site.acid.pka_dmso);
        let margin = match self.carbon.first() {
            Some(site) if self.share_an_acceptor(site.acid.atom, heteroatom.atom) => AMBIDENT_PK,
            _ => 0.0,
        };
        (heteroatom.pka_dmso + margin < carbon).then_some(heteroatom)
    }

    /// Whether one carbonyl group or its kin activates both atoms.
    fn share_an_acceptor(&self, carbon: usize, heteroatom: usize) -> bool {
        let beside = |atom: usize| {
            self.molecule
                .neighbours(atom)
                .iter()
                .map(|&(other, _)| other)
        };
        beside(carbon).any(|middle| beside(heteroatom).any(|other| other == middle))
    }
}

const BROMINE: u8 = 35;
const IODINE: u8 = 53;

/// Iodine goes before bromine; both sit on an arene or a double bond.
fn exchangeable_halogen(molecule: &Molecule) -> Option<P> {
    if halogens_on_sp2(molecule, IODINE).next().is_some() {
        Some(P::HALOGEN_LITHIUM_IODIDE)
    } else {
        let bromine = halogens_on_sp2(molecule, BROMINE).next();
        bromine.map(|_| P::HALOGEN_LITHIUM_BROMIDE)
    }
}

/// The halogen that alkyllithiums take first; `None` where there are several that are not equivalent.
pub(crate) fn exchangeable_halogen_atom(molecule: &Molecule) -> Option<usize> {
    let classes = molecule.symmetry_classes();
    let first = |element| {
        let halogen = halogens_on_sp2(molecule, element).next()?;
        Some((halogen, element))
    };
    let (halogen, element) = first(IODINE).or_else(|| first(BROMINE))?;
    halogens_on_sp2(molecule, element)
        .all(|other| classes[other] == classes[halogen])
        .then_some(halogen)
}

/// Halogens of an element on an arene or a double bond.
fn halogens_on_sp2(molecule: &Molecule, element: u8) -> impl Iterator<Item = usize> + '_ {
    let atoms = molecule.atoms();
    (0..atoms.len()).filter(move |&halogen| {
        let mut carbons = molecule
            .neighbours(halogen)
            .iter()
            .map(|&(carbon, _)| carbon);
        atoms[halogen].element == element
            && carbons.any(|carbon| {
                let mut bonds = molecule.neighbours(carbon).iter();
                atoms[carbon].aromatic || bonds.any(|&(_, bond)| bond == Bond::Double)
            })
    })
}

/// Whether an atom is the carbon of a ketone or an aldehyde.
fn is_ketone(molecule: &Molecule, atom: usize) -> bool {
    let atoms = molecule.atoms();
    let (mut oxo, mut other) = (false, false);
    for &(next, bond) in molecule.neighbours(atom) {
        match (atoms[next].element, bond) {
            (8, Bond::Double) => oxo = true,
            (6, _) => {}
            _ => other = true,
        }
    }
    oxo && !other
}

fn beside(molecule: &Molecule, site: usize) -> Option<Beside> {
    const NITROGEN: u8 = 7;
    const OXYGEN: u8 = 8;
    const PHOSPHORUS: u8 = 15;
    const CARBON: u8 = 6;
    let atoms = molecule.atoms();
    let doubly = |atom: usize, element: u8| {
        let mut bonds = molecule.neighbours(atom).iter();
        bonds.any(|&(other, bond)| bond == Bond::Double && atoms[other].element == element)
    };
    let mut neighbours = molecule.neighbours(site).iter();
    neighbours.find_map(|&(atom, _)| match atoms[atom].element {
        PHOSPHORUS if doubly(atom, OXYGEN) => Some(Beside::Phosphoryl),
        NITROGEN if doubly(atom, CARBON) => Some(Beside::Imino),
        _ => None,
    })
}

fn carbon_site(molecule: &Molecule, site: &AcidSite) -> CarbonSite {
    let atoms = molecule.atoms();
    let neighbours = molecule.neighbours(site.atom);
    let plain = |atom: usize| {
        atoms[atom].element == 6
            && molecule
                .neighbours(atom)
                .iter()
                .all(|&(_, bond)| bond == Bond::Single)
    };
    let branches: usize = neighbours
        .iter()
        .filter(|&&(atom, _)| plain(atom))
        .map(|&(atom, _)| molecule.neighbours(atom).len().saturating_sub(2))
        .sum();
    let is_linear = |atom: usize| {
        let mut bonds = molecule.neighbours(atom).iter();
        bonds.any(|&(_, bond)| bond == Bond::Triple)
    };
    let bulky = neighbours
        .iter()
        .filter(|&&(atom, _)| !is_linear(atom))
        .count();
    CarbonSite {
        acid: site.clone(),
        hydrogens: f64::from(site.hydrogens) * site.equivalent.len().max(1) as f64,
        degree: neighbours.len() as u8,
        crowding: bulky.saturating_sub(2) as u8,
        branches: branches as u8,
        beside: beside(molecule, site.atom),
        beside_cyano: neighbours.iter().any(|&(atom, _)| is_linear(atom)),
        leaves_in_beta: leaves_in_beta(molecule, site.atom),
        beside_ketone: neighbours
            .iter()
            .any(|&(atom, _)| is_ketone(molecule, atom)),
    }
}

/// A base.
#[derive(Clone, Debug)]
pub struct Base {
    /// The library's record.
    pub record: enolattice_reagents::Base,
    /// What its conjugate acid is, where that is a cation.
    pub(crate) onium: Onium,
    /// Whether it is a primary or secondary amine, which makes iminium ions of aldehydes.
    pub(crate) makes_iminium: bool,
    /// Whether it is a neutral amine without an N–H, which cannot keep an acyl or silyl group.
    pub(crate) is_tertiary_amine: bool,
    /// log10 reactivity of its enamines against those of pyrrolidine; none for what makes no enamines.
    pub(crate) enamine: Option<f64>,
    /// The alcohol of an alkoxide that exchanges ester groups.
    pub(crate) alcohol: Option<String>,
}

impl Base {
    pub(crate) fn new(record: &enolattice_reagents::Base) -> Base {
        let is_amine = record.kind == BaseKind::Amine;
        let bears_hydrogen = nitrogen_hydrogens(&record.smiles, |_| true) > 0;
        Base {
            record: record.clone(),
            onium: parts(&record.conjugate_acid)
                .find_map(|acid| Onium::of(&acid))
                .unwrap_or(Onium::TERTIARY),
            makes_iminium: is_amine && parts(&record.smiles).any(|part| has_amine_hydrogen(&part)),
            is_tertiary_amine: is_amine && !bears_hydrogen,
            enamine: parts(&record.smiles)
                .find_map(|part| enamine_of(&part))
                .filter(|_| is_amine),
            alcohol: exchanging_alcohol(&record.conjugate_acid)
                .filter(|_| record.class == AnionClass::Alkoxide),
        }
    }

    /// `substrate into base` for metal amides of lithium, sodium and potassium, else `base into substrate`.
    pub fn usual_addition(&self) -> Addition {
        Base::usual_addition_of(&self.record)
    }

    /// The same for a record of the library.
    pub fn usual_addition_of(record: &enolattice_reagents::Base) -> Addition {
        match (record.kind, record.cation) {
            (BaseKind::Amide, Cation::Lithium | Cation::Sodium | Cation::Potassium) => {
                Addition::SubstrateIntoBase
            }
            _ => Addition::BaseIntoSubstrate,
        }
    }
}

/// The parts of a base's structure that are molecules: an ammonium acetate has two.
fn parts(smiles: &str) -> impl Iterator<Item = Molecule> + '_ {
    smiles
        .split('.')
        .filter_map(|part| Molecule::parse(part).ok())
}

/// Whether a nitrogen of a molecule is that of an amine with a hydrogen: saturated, not aromatic, and beside
/// no double bond (amidines and guanidines have one).
fn has_amine_hydrogen(molecule: &Molecule) -> bool {
    const NITROGEN: u8 = 7;
    let saturated = |atom: usize| {
        let bonds = molecule.neighbours(atom);
        bonds.iter().all(|&(_, bond)| bond == Bond::Single)
    };
    (0..molecule.atoms().len()).any(|i| {
        let atom = &molecule.atoms()[i];
        let beside = molecule.neighbours(i);
        atom.element == NITROGEN
            && atom.hydrogens > 0
            && saturated(i)
            && beside.iter().all(|&(other, _)| saturated(other))
    })
}

/// Hydrogens on nitrogen atoms whose charge counts.
fn nitrogen_hydrogens(smiles: &str, counts: impl Fn(i8) -> bool) -> u8 {
    const NITROGEN: u8 = 7;
    let atoms = parts(smiles).flat_map(|part| part.atoms().to_vec());
    atoms
        .filter(|atom| atom.element == NITROGEN && counts(atom.charge))
        .map(|atom| atom.hydrogens)
        .sum()
}

/// A solvent.
#[derive(Clone, Debug)]
pub struct Solvent {
    /// The library's record.
    pub record: enolattice_reagents::Solvent,
    /// The alcohol that it is, where its alkoxide exchanges ester groups.
    pub(crate) alcohol: Option<String>,
}

impl Solvent {
    pub(crate) fn new(record: &enolattice_reagents::Solvent) -> Solvent {
        let is_alcohol = matches!(record.acid, Some((_, AnionClass::Alkoxide)));
        let alcohol = exchanging_alcohol(&record.smiles);
        Solvent {
            record: record.clone(),
            alcohol: alcohol.filter(|_| is_alcohol && record.parts.is_empty()),
        }
    }

    /// Water of the usual grade, mol/L; 0 where water is the acid of the solvent itself.
    pub(crate) fn water_m(&self) -> f64 {
        const WATER_G_MOL: f64 = 18.015;
        if matches!(self.record.acid, Some((_, AnionClass::Hydroxide))) {
            return 0.0;
        }
        self.record.water_ppm * 1e-6 * 1000.0 * self.record.density_g_ml / WATER_G_MOL
    }
}

/// An additive.
#[derive(Clone, Debug)]
pub struct Additive {
    /// The library's record.
    pub record: enolattice_reagents::Additive,
    /// The proton that it gives or takes.
    pub(crate) proton: Option<AdditiveProton>,
}

/// The proton that an additive gives or takes.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct AdditiveProton {
    /// pKa of its acid on the DMSO scale.
    pub(crate) pka_dmso: f64,
    /// Class of the base that the acid leaves.
    pub(crate) class: AnionClass,
    /// What its acid is, where that is a cation.
    pub(crate) onium: Option<Onium>,
    /// Charge of its acid.
    pub(crate) charge: i8,
    /// Whether it is charged as the base.
    pub(crate) as_base: bool,
}

/// The most acidic X–H of an additive, else the amine that it is.
fn additive_proton(smiles: &str, library: &Library) -> Option<AdditiveProton> {
    let acids = parts(smiles).flat_map(|part| {
        let sites = acid_sites(&part, library).into_iter();
        let charge = part.atoms().iter().map(|atom| atom.charge).sum();
        let onium = Onium::of(&part);
        sites
            .filter(|site| site.element != 6)
            .map(move |site| AdditiveProton {
                pka_dmso: site.pka_dmso + if charge < 0 { SECOND_OF_OXOACID } else { 0.0 },
                class: site.class,
                onium: onium.filter(|_| site.class == AnionClass::Neutral),
                charge,
                as_base: false,
            })
    });
    let strongest = acids.min_by(|a, b| a.pka_dmso.total_cmp(&b.pka_dmso));
    strongest.or_else(|| {
        let is_amine = parts(smiles).any(|part| is_tertiary_amine(&part));
        is_amine.then_some(AdditiveProton {
            pka_dmso: PKA_TERTIARY_AMINE,
            class: AnionClass::Neutral,
            onium: Some(Onium::TERTIARY),
            charge: 1,
            as_base: true,
        })
    })
}

/// By how much the anion of an oxoacid is a weaker acid than the acid itself: sulfuric acid in DMSO, 1.4 and 14.5 (Kolthoff and
/// Chantooni, from memory).
const SECOND_OF_OXOACID: f64 = 13.0;

/// pKa of the acids of tertiary amines in DMSO, near triethylammonium's (Bordwell 1988, from memory).
const PKA_TERTIARY_AMINE: f64 = 9.0;

fn is_tertiary_amine(molecule: &Molecule) -> bool {
    const NITROGEN: u8 = 7;
    let atoms = molecule.atoms();
    let saturated = |atom: usize| {
        let mut bonds = molecule.neighbours(atom).iter();
        !atoms[atom].aromatic && bonds.all(|&(_, bond)| bond == Bond::Single)
    };
    (0..atoms.len()).any(|i| {
        let mut around = molecule.neighbours(i).iter();
        atoms[i].element == NITROGEN
            && atoms[i].charge == 0
            && molecule.neighbours(i).len() == 3
            && saturated(i)
            && around.all(|&(other, _)| atoms[other].element == 6 && saturated(other))
    })
}

impl Additive {
    pub(crate) fn new(record: &enolattice_reagents::Additive, library: &Library) -> Additive {
        Additive {
            record: record.clone(),
            proton: additive_proton(&record.smiles, library),
        }
    }

    /// What this many equivalents on the base do to contact pairs of a counter-ion and to aggregates.
    pub(crate) fn loosening(&self, cation: Cation, equiv_on_base: f64) -> Loosening {
        let dose = equiv_on_base.clamp(0.0, 1.0);
        let freed = self.record.frees.iter().find(|(known, _)| *known == cation);
        Loosening {
            freed: dose * freed.map_or(0.0, |(_, share)| *share),
            disaggregated: dose * self.record.breaks_aggregates.value,
        }
    }
}

/// An electrophile.
#[derive(Clone, Debug)]
pub struct Electrophile {
    /// Name in the campaign or library; the SMILES where it has none.
    pub name: String,
    /// Structure.
    pub molecule: Molecule,
    /// Why the model does not cover it, if so.
    pub not_covered: Option<String>,
    /// The library's row, for hazards and boiling point.
    pub(crate) named: Option<NamedElectrophile>,
    /// The group that reacts.
    pub(crate) group: Option<ElectrophilicGroup>,
    /// Mayr's E with its source, for additions.
    pub(crate) e: Option<(f64, f64, String)>,
    /// The electrophile's own most acidic C–H.
    pub(crate) acid: Option<AcidSite>,
    /// Mayr's E of the acceptor that an alkylating agent becomes by elimination, where a carbanion then makes the same bond.
    pub(crate) e_of_alkene: Option<f64>,
}

impl Electrophile {
    /// The library's row, if the electrophile is in it.
    pub fn named(&self) -> Option<&NamedElectrophile> {
        self.named.as_ref()
    }

    pub(crate) fn new(name: &str, molecule: Molecule, library: &Library) -> Electrophile {
        let (group, not_covered) = match recognise(&molecule) {
            Ok(group) => (Some(group), None),
            Err(reason) => (None, Some(reason)),
        };
        let e = group
            .as_ref()
            .and_then(|group| electrophilicity(&molecule, group, library));
        let acid = acid_sites(&molecule, library)
            .into_iter()
            .find(|site| site.hydrogens > 0);
        let named = library
            .electrophile_by_structure(molecule.canonical())
            .cloned();
        let e_of_alkene = group
            .as_ref()
            .and_then(|group| e_of_alkene(&molecule, group, library));
        Electrophile {
            name: name.to_owned(),
            molecule,
            not_covered,
            named,
            group,
            e,
            acid,
            e_of_alkene,
        }
    }
}

/// The product at one site and what it can do next.
#[derive(Clone, Debug)]
pub(crate) struct SiteProduct {
    /// The product.
    pub(crate) product: Product,
    /// Its most acidic carbon site.
    pub(crate) carbon: Option<CarbonSite>,
    /// Its next carbon sites, where they are hardly less acidic.
    pub(crate) further_carbon: Vec<CarbonSite>,
    /// Its most acidic heteroatom site.
    pub(crate) heteroatom: Option<AcidSite>,
    /// The α,β-unsaturated product after loss of water; where a halide leaves instead, the three-membered ring.
    pub(crate) dehydrated: Option<Molecule>,
    /// How the product's anion closes a ring by loss of a halide.
    pub(crate) closes: Option<Closure>,
    /// The weaker acceptor of a 1,3-diketone or β-keto ester.
    pub(crate) cleavable: Option<Carbonyl>,
    /// Whether the anion of this site can attack with oxygen.
    pub(crate) has_oxygen_attack: bool,
}

/// What a substrate and an electrophile make together.
#[derive(Clone, Debug)]
pub struct Pair {
    /// By carbon site of the substrate, in the same order.
    pub(crate) by_site: Vec<Option<SiteProduct>>,
}

impl Pair {
    pub(crate) fn new(
        substrate: &Substrate,
        electrophile: &Electrophile,
        library: &Library,
    ) -> Pair {
        let Some(group) = &electrophile.group else {
            return Pair {
                by_site: vec![None; substrate.carbon.len()],
            };
        };
        let by_site = substrate
            .carbon
            .iter()
            .map(|site| site_product(substrate, site.acid.atom, electrophile, group, library))
            .collect();
        Pair { by_site }
    }
}

fn site_product(
    substrate: &Substrate,
    atom: usize,
    electrophile: &Electrophile,
    group: &ElectrophilicGroup,
    library: &Library,
) -> Option<SiteProduct> {
    let product = c_product(&substrate.molecule, atom, &electrophile.molecule, group).ok()?;
    let sites = acid_sites(&product.molecule, library);
    let mut carbons = sites
        .iter()
        .filter(|site| site.element == 6 && site.hydrogens > 0)
        .take(SITES)
        .map(|site| carbon_site(&product.molecule, site));
    let carbon = carbons.next();
    let hardly_less_acidic = |site: &CarbonSite| {
        let first = carbon.as_ref().map(|first| first.acid.pka_dmso);
        first.is_some_and(|pka| site.acid.pka_dmso < pka + NEXT_SITE_PK)
    };
    let further_carbon = carbons.filter(hardly_less_acidic).collect();
    let heteroatom = sites
        .iter()
        .find(|site| site.element != 6 && site.hydrogens > 0)
        .cloned();
    let (dehydrated, closes) = match closure(&substrate.molecule, &product, group) {
        Some((ring, how)) => (Some(ring), Some(how)),
        None => (dehydrated(&product).ok().flatten(), None),
    };
    let cleavable = cleavable_at(&product.molecule, product.site);
    let has_oxygen_attack = o_product(&substrate.molecule, atom, &electrophile.molecule, group)
        .is_ok_and(|p| p.is_some());
    Some(SiteProduct {
        product,
        carbon,
        further_carbon,
        heteroatom,
        dehydrated,
        closes,
        cleavable,
        has_oxygen_attack,
    })
}
