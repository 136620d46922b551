//! Descriptors of a saturated C–H site.

use super::descriptors::Descriptors;
use super::group::{Group, beyond, double_bonded, group};
use super::hammett::{Conjugation, aza_beside, ring_sigma};
use super::skeleton::{Bridge, bridge, cyclopentadiene_ring};
use crate::{AnionClass, Bond, Molecule};

/// σ⁻ of a benzylic ring from which on the ring alone makes the carbon acidic enough for metal amides and
/// alkyllithiums (nitro, cyano, ester, 2- and 4-pyridyl).
const ACTIVATING_SIGMA: f64 = 0.7;

/// What a carbon site is.
pub(super) struct CarbonSite {
    pub(super) class: AnionClass,
    pub(super) activated: bool,
    pub(super) descriptors: Descriptors,
}

/// The surroundings of a site, collected once.
pub(super) struct Surroundings<'a> {
    pub(super) molecule: &'a Molecule,
    pub(super) site: usize,
    /// Each neighbour with what it is.
    pub(super) groups: Vec<(usize, Group)>,
    /// Acceptor at the far end of a vinyl group, by its neighbour's index.
    pub(super) vinylogous: Vec<(usize, Group)>,
    pub(super) bridge: Bridge,
    pub(super) in_cyclopentadiene: bool,
}

/// Describes a saturated carbon; `None` where an anion cannot be (Bredt).
pub(super) fn describe(molecule: &Molecule, site: usize) -> Option<CarbonSite> {
    let groups: Vec<_> = molecule
        .neighbours(site)
        .iter()
        .map(|(other, _)| (*other, group(molecule, *other, site)))
        .collect();
    let vinylogous = groups
        .iter()
        .filter(|(_, kind)| *kind == Group::Vinyl)
        .filter_map(|(vinyl, _)| vinylogous_acceptor(molecule, *vinyl, site))
        .collect();
    let surroundings = Surroundings {
        molecule,
        site,
        groups,
        vinylogous,
        bridge: bridge(molecule, site),
        in_cyclopentadiene: cyclopentadiene_ring(molecule, site).is_some(),
    };
    if surroundings.bridge == Bridge::ForbiddenHead {
        return None;
    }
    let mut descriptors = Descriptors::default();
    descriptors.add("carbon acid", 1.0);
    surroundings.count_groups(&mut descriptors);
    surroundings.aryl_terms(&mut descriptors);
    surroundings.carbonyl_terms(&mut descriptors);
    surroundings.sulfur_terms(&mut descriptors);
    surroundings.heteroatom_terms(&mut descriptors);
    surroundings.alkyl_terms(&mut descriptors);
    surroundings.vinyl_terms(&mut descriptors);
    surroundings.ring_terms(&mut descriptors);
    Some(CarbonSite {
        class: surroundings.class(),
        activated: surroundings.activated(),
        descriptors,
    })
}

/// Name of the increment of a group on the site; `None` where it makes no anion (alkyl, H).
fn increment(of: Group) -> Option<&'static str> {
    use Group::*;
    Some(match of {
        Aldehyde | AlkylKetone | AcylHalide => "alkyl ketone",
        ArylKetone => "aryl ketone",
        Ester | CarboxylicAcid | Imide | Thioester => "ester",
        Amide | Imidoyl => "amide",
        Thiocarbonyl => "thiocarbonyl",
        Thioamide => "thioamide",
        Nitrile => "nitrile",
        Isocyano => "isocyano",
        Nitro => "nitro",
        Sulfone | SulfonicEster | Sulfonamide | SulfonylHalide | Thiosulfonate => "sulfone",
        Triflone => "triflone",
        Sulfoxide => "sulfoxide",
        Sulfoximine => "sulfoximine",
        Sulfilimine => "sulfilimine",
        Phosphonyl => "phosphonyl",
        Phosphonium => "phosphonium",
        Sulfonium | Sulfoxonium => "sulfonium",
        Ammonium => "ammonium",
        Pyridinium => "pyridinium",
        Aryl => "aryl",
        Vinyl => "vinyl",
        Alkynyl => "alkynyl",
        Perfluoroalkyl => "perfluoroalkyl",
        Fluoro => "fluoro",
        Chloro | Bromo | Iodo => "chloro",
        Alkoxy => "alkoxy",
        Amino => "amino",
        Imino => "imino",
        Sulfanyl => "sulfanyl",
        Phosphanyl => "phosphanyl",
        Silyl => "silyl",
        Alkyl | Carboxylate | Other => return None,
    })
}

/// The acceptor conjugated with the site through the double bond at `vinyl`.
fn vinylogous_acceptor(molecule: &Molecule, vinyl: usize, site: usize) -> Option<(usize, Group)> {
    let (next, far, kind) = acceptor_or_vinyl(molecule, vinyl, site)?;
    if kind.is_acceptor() {
        return Some((next, kind));
    }
    // A second double bond passes the charge on about as well (sorbates).
    let (end, _, kind) = acceptor_or_vinyl(molecule, next, far)?;
    (kind.is_acceptor() && end != site).then_some((end, kind))
}

/// The acceptor on the far end of the double bond at `vinyl`, else a vinyl there, with that end.
fn acceptor_or_vinyl(
    molecule: &Molecule,
    vinyl: usize,
    from: usize,
) -> Option<(usize, usize, Group)> {
    let far = double_bonded(molecule, vinyl, 6)?;
    let ends: Vec<(usize, usize, Group)> = beyond(molecule, far, vinyl)
        .filter(|(other, bond)| *bond == Bond::Single && *other != from)
        .map(|(other, _)| (other, far, group(molecule, other, far)))
        .collect();
    let acceptor = |kind: Group| kind.is_acceptor() && kind != Group::Ammonium;
    ends.iter()
        .find(|(_, _, kind)| acceptor(*kind))
        .or(ends.iter().find(|(_, _, kind)| *kind == Group::Vinyl))
        .copied()
}

impl Surroundings<'_> {
    pub(super) fn with<'s>(
        &'s self,
        wanted: impl Fn(Group) -> bool + 's,
    ) -> impl Iterator<Item = usize> + 's {
        self.groups
            .iter()
            .filter(move |(_, kind)| wanted(*kind))
            .map(|(atom, _)| *atom)
    }

    pub(super) fn count(&self, wanted: impl Fn(Group) -> bool) -> usize {
        self.groups.iter().filter(|(_, kind)| wanted(*kind)).count()
    }

    pub(super) fn acceptors(&self) -> usize {
        self.count(Group::is_acceptor)
    }

    pub(super) fn has(&self, wanted: Group) -> bool {
        self.groups.iter().any(|(_, kind)| *kind == wanted)
    }

    fn count_groups(&self, descriptors: &mut Descriptors) {
        for (_, kind) in &self.groups {
            if let Some(name) = increment(*kind) {
                descriptors.add(name, 1.0);
            }
            if *kind == Group::Other {
                descriptors.add("unknown group", 1.0);
            }
        }
    }

    fn activated(&self) -> bool {
        // dithianes and benzyl sulfides are lithiated like diarylmethanes
        let supports = |kind| {
            use Group::*;
            matches!(kind, Aryl | Vinyl | Imino | Sulfanyl | Phosphanyl)
        };
        let carbanion_of_hydrocarbon = self.in_cyclopentadiene || self.count(supports) >= 2;
        let real_acceptor = self
            .groups
            .iter()
            .any(|(_, kind)| kind.is_acceptor() && *kind != Group::Ammonium);
        real_acceptor
            || carbanion_of_hydrocarbon
            || !self.vinylogous.is_empty()
            || self.with(|kind| kind == Group::Aryl).any(|aryl| {
                ring_sigma(self.molecule, aryl, Conjugation::Direct) >= ACTIVATING_SIGMA
                    || aza_beside(self.molecule, aryl)
            })
    }

    fn class(&self) -> AnionClass {
        let mut kinds: Vec<Group> = self.groups.iter().map(|(_, kind)| *kind).collect();
        if !kinds
            .iter()
            .any(|kind| kind.is_carbonyl() || *kind == Group::Nitro)
        {
            kinds.extend(self.vinylogous.iter().map(|(_, kind)| *kind));
        }
        let has = |wanted: fn(Group) -> bool| kinds.iter().any(|kind| wanted(*kind));
        if has(|kind| kind == Group::Nitro) {
            return AnionClass::Nitronate;
        }
        let second_acceptor = kinds
            .iter()
            .filter(|kind| {
                kind.is_carbonyl()
                    || kind.is_sulfonyl()
                    || matches!(kind, Group::Nitrile | Group::Phosphonyl)
            })
            .count()
            >= 2;
        if has(Group::is_carbonyl) && second_acceptor {
            return match self.between_ring_carbonyls() {
                Some(true) => AnionClass::CyclicDiester,
                Some(false) => AnionClass::CyclicBetaDicarbonyl,
                None => AnionClass::BetaDicarbonyl,
            };
        }
        kinds
            .into_iter()
            .map(class_alone)
            .min()
            .unwrap_or(AnionClass::Carbanion)
    }
}

/// Class of the anion beside this group and no other acceptor; classes sort by what the charge
/// prefers.
fn class_alone(acceptor: Group) -> AnionClass {
    use Group::*;
    match acceptor {
        AlkylKetone | AcylHalide => AnionClass::Ketone,
        ArylKetone => AnionClass::ArylKetone,
        Aldehyde => AnionClass::Aldehyde,
        Ester | Imide | CarboxylicAcid | Thioester | Thiocarbonyl => AnionClass::Ester,
        Amide | Thioamide | Imidoyl => AnionClass::Amide,
        Nitrile => AnionClass::Nitrile,
        Sulfoxide | Sulfoximine | Sulfilimine => AnionClass::Sulfone,
        kind if kind.is_sulfonyl() => AnionClass::Sulfone,
        _ => AnionClass::Carbanion,
    }
}
