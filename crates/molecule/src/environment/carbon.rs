//! Descriptors of a saturated C–H site.

use super::descriptors::Descriptors;
use super::group::{Group, beyond, double_bonded, group, is_saturated_carbon, is_trigonal};
use super::hammett::{Conjugation, inductive, ring_sigma, six_ring};
use super::skeleton::{Bridge, bridge, cyclopentadiene_ring, smallest_ring};
use crate::{AnionClass, Bond, Molecule};

/// σ⁻ of a benzylic ring from which on the ring alone makes the carbon acidic (nitro, cyano).
const ACTIVATING_SIGMA: f64 = 0.9;

/// What a carbon site is.
pub(super) struct CarbonSite {
    pub(super) class: AnionClass,
    pub(super) activated: bool,
    pub(super) descriptors: Descriptors,
}

/// The surroundings of a site, collected once.
struct Surroundings<'a> {
    molecule: &'a Molecule,
    site: usize,
    /// Each neighbour with what it is.
    groups: Vec<(usize, Group)>,
    /// Acceptor at the far end of a vinyl group, by its neighbour's index.
    vinylogous: Vec<(usize, Group)>,
    bridge: Bridge,
    in_cyclopentadiene: bool,
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
        Phosphonyl => "phosphonyl",
        Phosphonium => "phosphonium",
        Sulfonium => "sulfonium",
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
    let far = double_bonded(molecule, vinyl, 6)?;
    beyond(molecule, far, vinyl)
        .filter(|(other, bond)| *bond == Bond::Single && *other != site)
        .map(|(other, _)| (other, group(molecule, other, far)))
        .find(|(_, kind)| kind.is_acceptor() && *kind != Group::Ammonium)
}

impl Surroundings<'_> {
    fn with<'s>(&'s self, wanted: impl Fn(Group) -> bool + 's) -> impl Iterator<Item = usize> + 's {
        self.groups
            .iter()
            .filter(move |(_, kind)| wanted(*kind))
            .map(|(atom, _)| *atom)
    }

    fn count(&self, wanted: impl Fn(Group) -> bool) -> usize {
        self.groups.iter().filter(|(_, kind)| wanted(*kind)).count()
    }

    fn acceptors(&self) -> usize {
        self.count(Group::is_acceptor)
    }

    fn has(&self, wanted: Group) -> bool {
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

    fn aryl_terms(&self, descriptors: &mut Descriptors) {
        let sharing = self.acceptors() + self.count(|kind| matches!(kind, Group::Aryl));
        let sigma_name = match sharing {
            0 | 1 => "σ of aryl, alone",
            2 => "σ of aryl, charge shared by two",
            _ => "σ of aryl, charge shared by three",
        };
        for aryl in self.with(|kind| kind == Group::Aryl) {
            let in_site_ring = self.in_cyclopentadiene
                && smallest_ring(self.molecule, &[aryl, self.site]) == Some(5);
            match six_ring(self.molecule, aryl) {
                Some(ring) => {
                    let sigma = ring_sigma(self.molecule, aryl, Conjugation::Direct);
                    descriptors.add(sigma_name, sigma);
                    if !in_site_ring {
                        let fused = self.fused_rings(ring);
                        let name = if self.acceptors() == 0 {
                            "ring fused to aryl, no acceptor"
                        } else {
                            "ring fused to aryl, with acceptor"
                        };
                        descriptors.add(name, fused as f64);
                    }
                }
                None => descriptors.add("five-membered heteroaryl", 1.0),
            }
        }
        if self.in_cyclopentadiene {
            return;
        }
        let crowded = match (self.count(|kind| kind == Group::Aryl), self.acceptors()) {
            (3, _) => "third aryl",
            (2, 1..) => "second aryl beside acceptor",
            (1, 2..) if self.count(Group::is_carbonyl) >= 2 => "aryl between carbonyls",
            _ => return,
        };
        descriptors.add(crowded, 1.0);
    }

    fn fused_rings(&self, ring: &[usize]) -> usize {
        self.molecule
            .rings()
            .iter()
            .filter(|other| {
                other.as_slice() != ring
                    && other
                        .iter()
                        .all(|atom| self.molecule.atoms()[*atom].aromatic)
                    && other.iter().filter(|atom| ring.contains(atom)).count() == 2
            })
            .count()
    }

    fn carbonyl_terms(&self, descriptors: &mut Descriptors) {
        for (carbonyl, kind) in &self.groups {
            if !kind.is_carbonyl() {
                continue;
            }
            match kind {
                Group::Aldehyde => descriptors.add("aldehyde in place of ketone", 1.0),
                Group::Thioester => descriptors.add("sulfur in place of ester oxygen", 1.0),
                _ => {}
            }
            let in_ring = smallest_ring(self.molecule, &[self.site, *carbonyl]).is_some();
            for (far, bond) in beyond(self.molecule, *carbonyl, self.site) {
                if bond != Bond::Single {
                    continue;
                }
                match kind {
                    Group::ArylKetone => {
                        let sigma = ring_sigma(self.molecule, far, Conjugation::Insulated);
                        descriptors.add("σ of aroyl", sigma);
                    }
                    Group::AlkylKetone => self.ketone_terms(descriptors, *carbonyl, far, in_ring),
                    Group::Ester | Group::Thioester if !in_ring => {
                        self.ester_terms(descriptors, *carbonyl, far)
                    }
                    Group::Amide => self.amide_terms(descriptors, *carbonyl, far),
                    _ => {}
                }
            }
        }
    }

    fn ketone_terms(
        &self,
        descriptors: &mut Descriptors,
        carbonyl: usize,
        far: usize,
        in_ring: bool,
    ) {
        if is_saturated_carbon(self.molecule, far) {
            descriptors.add(
                "σI beyond carbonyl",
                inductive(self.molecule, far, carbonyl),
            );
            if !in_ring {
                let branches = beyond(self.molecule, far, carbonyl)
                    .filter(|(atom, _)| is_saturated_carbon(self.molecule, *atom))
                    .count();
                descriptors.add("branch beyond carbonyl", branches as f64);
            }
        } else if is_trigonal(self.molecule, far) {
            match group(self.molecule, far, carbonyl) {
                Group::Vinyl => descriptors.add("vinyl beyond carbonyl", 1.0),
                kind if kind.is_carbonyl() => descriptors.add("σI beyond carbonyl", 1.0),
                _ => {}
            }
        }
    }

    fn ester_terms(&self, descriptors: &mut Descriptors, carbonyl: usize, oxygen: usize) {
        for (carbon, _) in beyond(self.molecule, oxygen, carbonyl) {
            if is_trigonal(self.molecule, carbon) {
                descriptors.add("aryl ester", 1.0);
            } else {
                let branches = beyond(self.molecule, carbon, oxygen)
                    .filter(|(atom, _)| is_saturated_carbon(self.molecule, *atom))
                    .count();
                descriptors.add("branch in ester alkyl", branches as f64);
                descriptors.add(
                    "σI in ester alkyl",
                    inductive(self.molecule, carbon, oxygen),
                );
            }
        }
    }

    fn amide_terms(&self, descriptors: &mut Descriptors, carbonyl: usize, nitrogen: usize) {
        for (atom, _) in beyond(self.molecule, nitrogen, carbonyl) {
            match group(self.molecule, atom, nitrogen) {
                Group::Alkoxy => descriptors.add("alkoxy on amide nitrogen", 1.0),
                Group::Aryl => descriptors.add("aryl on amide nitrogen", 1.0),
                _ => {}
            }
        }
    }

    fn sulfur_terms(&self, descriptors: &mut Descriptors) {
        for (sulfur, kind) in &self.groups {
            match kind {
                Group::SulfonicEster => descriptors.add("sulfonic ester", 1.0),
                Group::Sulfonamide => descriptors.add("sulfonamide", 1.0),
                Group::SulfonylHalide => descriptors.add("sulfonyl halide", 1.0),
                Group::Thiosulfonate => descriptors.add("thiosulfonate", 1.0),
                Group::Sulfone | Group::Sulfoxide => {
                    let alkyl = beyond(self.molecule, *sulfur, self.site)
                        .any(|(atom, _)| is_saturated_carbon(self.molecule, atom));
                    if alkyl {
                        descriptors.add("alkyl on sulfonyl or sulfinyl", 1.0);
                    }
                }
                _ => {}
            }
        }
    }

    fn heteroatom_terms(&self, descriptors: &mut Descriptors) {
        for (atom, kind) in &self.groups {
            let name = match kind {
                Group::Sulfanyl => "aryl on sulfanyl",
                Group::Alkoxy => "aryl or acyl on alkoxy",
                Group::Amino => "aryl or acyl on amino",
                Group::Imino => {
                    self.imino_terms(descriptors, *atom);
                    continue;
                }
                _ => continue,
            };
            if self.molecule.atoms()[*atom].aromatic {
                continue;
            }
            let drawn_away = beyond(self.molecule, *atom, self.site).any(|(far, _)| {
                is_trigonal(self.molecule, far) || group(self.molecule, far, *atom).is_acceptor()
            });
            if drawn_away {
                descriptors.add(name, 1.0);
            }
        }
    }

    /// 2-Azaallyl anions: aryl groups at the far end of C–N=C.
    fn imino_terms(&self, descriptors: &mut Descriptors, nitrogen: usize) {
        if let Some(far) = double_bonded(self.molecule, nitrogen, 6) {
            let aryls = beyond(self.molecule, far, nitrogen)
                .filter(|(atom, _)| self.molecule.atoms()[*atom].aromatic)
                .count();
            let name = if self.acceptors() == 0 {
                "aryl at far end of azaallyl, no acceptor"
            } else {
                "aryl at far end of azaallyl, with acceptor"
            };
            descriptors.add(name, aryls as f64);
            let donors = beyond(self.molecule, far, nitrogen)
                .filter(|(atom, _)| matches!(self.molecule.atoms()[*atom].element, 7 | 8 | 16))
                .count();
            descriptors.add("heteroatom at far end of azaallyl", donors as f64);
        }
    }

    fn alkyl_terms(&self, descriptors: &mut Descriptors) {
        let alkyls = self.count(|kind| kind == Group::Alkyl);
        for alkyl in self.with(|kind| kind == Group::Alkyl) {
            descriptors.add("σI of alkyl", inductive(self.molecule, alkyl, self.site));
        }
        if alkyls == 0 {
            return;
        }
        let ring_acceptor = self
            .with(Group::is_carbonyl)
            .any(|carbonyl| smallest_ring(self.molecule, &[self.site, carbonyl]).is_some());
        let site_in_ring = smallest_ring(self.molecule, &[self.site]).is_some();
        if self.has(Group::Nitro) {
            descriptors.add("alkyl beside nitro", alkyls as f64);
        } else if self.acceptors() >= 2 {
            if self.between_ring_carbonyls().is_none() {
                let name = if ring_acceptor {
                    "ring alkyl between acceptors"
                } else {
                    "alkyl between acceptors"
                };
                descriptors.add(name, 1.0);
                for alkyl in self.with(|kind| kind == Group::Alkyl) {
                    let branches = beyond(self.molecule, alkyl, self.site)
                        .filter(|(atom, _)| is_saturated_carbon(self.molecule, *atom))
                        .count();
                    if branches >= 2 && !site_in_ring {
                        descriptors.add("branched alkyl between acceptors", (branches - 1) as f64);
                    }
                }
            }
        } else if self.has(Group::Aldehyde) && self.acceptors() == 1 {
            descriptors.add("alkyl beside aldehyde", alkyls as f64);
        } else if self.has(Group::Aryl) && self.acceptors() == 1 {
            descriptors.add("alkyl beside aryl and acceptor", alkyls as f64);
        } else if ring_acceptor {
            descriptors.add("alkyl branch in ring beside carbonyl", (alkyls - 1) as f64);
        } else if self.count(Group::is_carbonyl) == 1 {
            descriptors.add("first alkyl beside carbonyl", 1.0);
            descriptors.add("second alkyl beside carbonyl", (alkyls - 1).min(1) as f64);
        } else if self.acceptors() == 1 {
            let name = if self.has(Group::Nitrile) {
                "alkyl beside nitrile"
            } else {
                "alkyl beside sulfonyl or phosphonyl"
            };
            descriptors.add(name, alkyls as f64);
        } else {
            descriptors.add("alkyl on hydrocarbon acid", alkyls as f64);
        }
    }

    fn vinyl_terms(&self, descriptors: &mut Descriptors) {
        for vinyl in self.with(|kind| matches!(kind, Group::Vinyl)) {
            let Some(far) = double_bonded(self.molecule, vinyl, 6) else {
                continue;
            };
            let conjugated = beyond(self.molecule, far, vinyl)
                .filter(|(atom, _)| {
                    *atom != self.site
                        && matches!(group(self.molecule, *atom, far), Group::Aryl | Group::Vinyl)
                })
                .count();
            descriptors.add(
                "aryl or vinyl at far end of vinyl",
                conjugated.min(2) as f64,
            );
        }
        for (_, kind) in &self.vinylogous {
            let name = match kind {
                Group::Nitro => "vinylogous nitro",
                Group::Aldehyde | Group::AlkylKetone | Group::ArylKetone => "vinylogous ketone",
                kind if kind.is_carbonyl() => "vinylogous ester",
                _ => "vinylogous nitrile or sulfone",
            };
            descriptors.add(name, 1.0);
        }
    }

    /// Whether the site lies between two carbonyls of one ring: `Some(both are esters)`.
    fn between_ring_carbonyls(&self) -> Option<bool> {
        let carbonyls: Vec<_> = self
            .groups
            .iter()
            .filter(|(_, kind)| kind.is_carbonyl())
            .collect();
        for (i, (first, first_kind)) in carbonyls.iter().enumerate() {
            for (second, second_kind) in &carbonyls[i + 1..] {
                if smallest_ring(self.molecule, &[*first, self.site, *second])
                    .is_some_and(|size| size < 9)
                {
                    let diester = [first_kind, second_kind]
                        .iter()
                        .all(|kind| matches!(kind, Group::Ester | Group::Imide));
                    return Some(diester);
                }
            }
        }
        None
    }

    fn ring_terms(&self, descriptors: &mut Descriptors) {
        let molecule = self.molecule;
        if let Some(ring) = cyclopentadiene_ring(molecule, self.site) {
            descriptors.add("cyclopentadienide ring", 1.0);
            self.cyclopentadiene_substituents(descriptors, ring);
            return;
        }
        match self.between_ring_carbonyls() {
            Some(true) => descriptors.add("between two esters of a ring", 1.0),
            Some(false) => descriptors.add("between two carbonyls of a ring", 1.0),
            None => self.one_carbonyl_in_ring(descriptors),
        }
        if smallest_ring(molecule, &[self.site]) == Some(3) {
            let name = if self.has(Group::Nitro) {
                "cyclopropane beside nitro"
            } else if self.count(Group::is_carbonyl) > 0 {
                "cyclopropane beside carbonyl"
            } else {
                "cyclopropane beside other acceptor"
            };
            descriptors.add(name, 1.0);
        }
        match self.bridge {
            Bridge::Spanning => descriptors.add("in bridged bicycle", 1.0),
            Bridge::StrainedHead => descriptors.add("at bridgehead", 1.0),
            _ => {}
        }
    }

    fn one_carbonyl_in_ring(&self, descriptors: &mut Descriptors) {
        let molecule = self.molecule;
        for (carbonyl, kind) in self.groups.iter().filter(|(_, kind)| kind.is_carbonyl()) {
            let Some(size) = smallest_ring(molecule, &[self.site, *carbonyl]) else {
                continue;
            };
            let aryl_in_ring = self
                .with(|kind| kind == Group::Aryl)
                .find(|aryl| smallest_ring(molecule, &[*aryl, self.site, *carbonyl]) == Some(size));
            let fused = aryl_in_ring.and_then(|aryl| self.arene_fused(aryl, *carbonyl, size));
            let name = match (fused, kind) {
                (Some(name), _) => name,
                (None, Group::Ester) => "lactone",
                (None, Group::AlkylKetone | Group::ArylKetone) => match size {
                    ..=5 => "ketone in ring of four or five",
                    6 => "ketone in ring of six",
                    7..=9 => "ketone in ring of seven to nine",
                    _ => "ketone in large ring",
                },
                _ => continue,
            };
            descriptors.add(name, 1.0);
        }
    }

    /// Site between arene and C=X in one small ring: what the enolate is then part of.
    fn arene_fused(&self, aryl: usize, carbonyl: usize, size: usize) -> Option<&'static str> {
        let hetero = self.molecule.rings().iter().any(|ring| {
            ring.len() == size
                && [aryl, self.site, carbonyl]
                    .iter()
                    .all(|atom| ring.contains(atom))
                && ring
                    .iter()
                    .any(|atom| self.molecule.atoms()[*atom].element != 6)
        });
        match (size, hetero) {
            (..=4, _) => Some("antiaromatic enolate"),
            (5, true) => Some("enolate becomes indole or benzofuran"),
            (5, false) => Some("enolate becomes indene"),
            _ => None,
        }
    }

    fn cyclopentadiene_substituents(&self, descriptors: &mut Descriptors, ring: &[usize]) {
        for member in ring.iter().filter(|member| **member != self.site) {
            if self.molecule.atoms()[*member].aromatic {
                continue;
            }
            for (other, _) in self.molecule.neighbours(*member) {
                if ring.contains(other) {
                    continue;
                }
                match group(self.molecule, *other, *member) {
                    Group::Alkyl => descriptors.add("alkyl on cyclopentadienide", 1.0),
                    Group::Aryl => descriptors.add("aryl on cyclopentadienide", 1.0),
                    _ => {}
                }
            }
        }
    }

    fn activated(&self) -> bool {
        let carbanion_of_hydrocarbon = self.in_cyclopentadiene
            || self.count(|kind| matches!(kind, Group::Aryl | Group::Vinyl | Group::Imino)) >= 2;
        let real_acceptor = self
            .groups
            .iter()
            .any(|(_, kind)| kind.is_acceptor() && *kind != Group::Ammonium);
        real_acceptor
            || carbanion_of_hydrocarbon
            || !self.vinylogous.is_empty()
            || self.with(|kind| kind == Group::Aryl).any(|aryl| {
                ring_sigma(self.molecule, aryl, Conjugation::Direct) >= ACTIVATING_SIGMA
            })
    }

    /// The class of the anion: the acceptor that carries most of the charge.
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
        let single: [(fn(Group) -> bool, AnionClass); 7] = [
            (|kind| kind == Group::Aldehyde, AnionClass::Aldehyde),
            (|kind| kind == Group::ArylKetone, AnionClass::ArylKetone),
            (
                |kind| matches!(kind, Group::AlkylKetone | Group::AcylHalide),
                AnionClass::Ketone,
            ),
            (
                |kind| {
                    matches!(
                        kind,
                        Group::Ester
                            | Group::Imide
                            | Group::CarboxylicAcid
                            | Group::Thioester
                            | Group::Thiocarbonyl
                    )
                },
                AnionClass::Ester,
            ),
            (
                |kind| matches!(kind, Group::Amide | Group::Thioamide | Group::Imidoyl),
                AnionClass::Amide,
            ),
            (|kind| kind == Group::Nitrile, AnionClass::Nitrile),
            (
                |kind| kind.is_sulfonyl() || kind == Group::Sulfoxide,
                AnionClass::Sulfone,
            ),
        ];
        single
            .into_iter()
            .find(|(is, _)| has(*is))
            .map_or(AnionClass::Carbanion, |(_, class)| class)
    }
}
