//! Corrections for what the groups on a C–H site carry further out.

use super::carbon::Surroundings;
use super::descriptors::Descriptors;
use super::group::{Group, beyond, double_bonded, group, is_saturated_carbon, is_trigonal};
use super::hammett::{
    Conjugation, aza_beside, has_quinoid_acceptor, inductive, ring_sigma, ring_sigma_alone,
    six_ring, takes_charge_by_nitrogen,
};
use super::skeleton::smallest_ring;
use crate::Bond;

/// A nitrogen at the site whose lone pair is a ring's or that of two acyl groups.
const TIED_UP: &str = "azolyl or imide in place of amino";

impl Surroundings<'_> {
    pub(super) fn aryl_terms(&self, descriptors: &mut Descriptors) {
        let sharing = self.sharing();
        let sigma_name = match sharing {
            0 | 1 => "σ of aryl, alone",
            2 => "σ of aryl, charge shared by two",
            _ => "σ of aryl, charge shared by three",
        };
        let quinoid_name = match sharing {
            0 | 1 => "nitro or acyl through aryl, alone",
            _ => "nitro or acyl through aryl, charge shared",
        };
        for aryl in self.with(|kind| kind == Group::Aryl) {
            let in_site_ring = self.in_cyclopentadiene
                && smallest_ring(self.molecule, &[aryl, self.site]) == Some(5);
            match six_ring(self.molecule, aryl) {
                Some(ring) => {
                    let sigma = if sharing <= 1 {
                        ring_sigma_alone(self.molecule, aryl)
                    } else {
                        ring_sigma(self.molecule, aryl, Conjugation::Direct)
                    };
                    descriptors.add(sigma_name, sigma);
                    let quinoid = f64::from(has_quinoid_acceptor(self.molecule, aryl));
                    descriptors.add(quinoid_name, quinoid);
                    if sharing <= 1 && takes_charge_by_nitrogen(self.molecule, aryl) {
                        descriptors.add("aza in ring that takes the charge alone", 1.0);
                    }
                    if !in_site_ring {
                        let fused = self.fused_rings(ring);
                        let name = if self.acceptors() == 0 {
                            "ring fused to aryl, no acceptor"
                        } else {
                            "ring fused to aryl, with acceptor"
                        };
                        descriptors.add(name, fused as f64);
                        if self.lies_between_fused_rings(aryl, ring) {
                            let others = self.groups.len().saturating_sub(1);
                            descriptors.add("group beside peri-crowded aryl", others as f64);
                        }
                    }
                }
                None => self.five_ring_terms(descriptors, aryl, sharing),
            }
        }
        if self.in_cyclopentadiene {
            return;
        }
        let unsaturated =
            self.count(|kind| matches!(kind, Group::Aryl | Group::Vinyl | Group::Alkynyl));
        let donors =
            self.count(|kind| matches!(kind, Group::Imino | Group::Sulfanyl | Group::Phosphanyl));
        if unsaturated == 1 && donors == 0 && self.acceptors() == 0 && self.vinylogous.is_empty() {
            descriptors.add("nothing but one aryl or vinyl", 1.0);
        }
        let crowded = match (self.count(|kind| kind == Group::Aryl), self.acceptors()) {
            (3, _) => "third aryl",
            (2, 1..) => "second aryl beside acceptor",
            (1, 1) if self.has_lone_pairs() => "heteroatom beside aryl and acceptor",
            (1, 2..) if self.aryl_is_turned_between_carbonyls() => "aryl between carbonyls",
            _ => return,
        };
        descriptors.add(crowded, 1.0);
    }

    /// Whether O, N or S stands at the site.
    fn has_lone_pairs(&self) -> bool {
        self.count(|kind| matches!(kind, Group::Alkoxy | Group::Amino | Group::Sulfanyl)) > 0
    }

    /// How many groups share the charge: acceptors and aryls, and where there is no acceptor what else takes some.
    fn sharing(&self) -> usize {
        use Group::*;
        let acceptors = self.acceptors();
        let others = self.count(|kind| matches!(kind, Sulfanyl | Phosphanyl | Imino | Vinyl));
        let aryls = self.count(|kind| kind == Aryl);
        match acceptors {
            0 => aryls + others,
            _ => aryls + acceptors,
        }
    }

    /// An aryl between two carbonyls is turned out of their plane, unless these are tied back in a ring of five.
    fn aryl_is_turned_between_carbonyls(&self) -> bool {
        let carbonyls: Vec<usize> = self.with(Group::is_carbonyl).collect();
        match carbonyls.as_slice() {
            [first, second] => {
                smallest_ring(self.molecule, &[*first, self.site, *second]) != Some(5)
            }
            several => several.len() > 2,
        }
    }

    /// Furyl and thienyl take up little charge; azolyl with its C=N on the site takes up much.
    fn five_ring_terms(&self, descriptors: &mut Descriptors, aryl: usize, sharing: usize) {
        descriptors.add("five-membered heteroaryl", 1.0);
        if !aza_beside(self.molecule, aryl) {
            return;
        }
        descriptors.add(
            match sharing {
                0 | 1 => "aza beside in five-membered heteroaryl, alone",
                _ => "aza beside in five-membered heteroaryl, charge shared",
            },
            1.0,
        );
        let ring = self
            .molecule
            .rings()
            .iter()
            .find(|ring| ring.len() == 5 && ring.contains(&aryl));
        let Some(ring) = ring else { return };
        descriptors.add(
            "benzo on five-membered heteroaryl",
            self.fused_rings(ring) as f64,
        );
        let gives = |atom: &usize| {
            let this = self.molecule.atoms()[*atom];
            this.element == 7
                && self.molecule.neighbours(*atom).len() + usize::from(this.hydrogens) == 3
        };
        if ring.iter().any(gives) {
            descriptors.add("amine nitrogen in five-membered heteroaryl", 1.0);
        }
    }

    /// Whether both ring atoms beside `aryl` bear fused rings, as in 9-anthryl.
    fn lies_between_fused_rings(&self, aryl: usize, ring: &[usize]) -> bool {
        self.molecule
            .neighbours(aryl)
            .iter()
            .filter(|(other, _)| ring.contains(other))
            .all(|(other, _)| {
                self.molecule
                    .rings()
                    .iter()
                    .filter(|fused| fused.contains(other))
                    .count()
                    >= 2
            })
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

    pub(super) fn carbonyl_terms(&self, descriptors: &mut Descriptors) {
        descriptors.add(
            "third acceptor",
            self.count(|kind| kind.is_acceptor() && kind != Group::Ammonium)
                .saturating_sub(2) as f64,
        );
        for (carbonyl, kind) in &self.groups {
            if !kind.is_carbonyl() {
                continue;
            }
            match kind {
                Group::Aldehyde => descriptors.add("aldehyde in place of ketone", 1.0),
                Group::Thioester => descriptors.add("sulfur in place of ester oxygen", 1.0),
                Group::Imidoyl => self.imidoyl_terms(descriptors, *carbonyl),
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
                Group::Vinyl => {
                    descriptors.add("vinyl beyond carbonyl", 1.0);
                    self.vinylogous_donor(descriptors, carbonyl, far);
                }
                kind if kind.is_carbonyl() => descriptors.add("σI beyond carbonyl", 1.0),
                _ => {}
            }
        }
    }

    /// Oxygen, sulfur or nitrogen at the far end of an enone gives to its carbonyl as in an ester or amide.
    fn vinylogous_donor(&self, descriptors: &mut Descriptors, carbonyl: usize, vinyl: usize) {
        let Some(end) = double_bonded(self.molecule, vinyl, 6) else {
            return;
        };
        for (far, _) in beyond(self.molecule, end, vinyl).filter(|(far, _)| *far != carbonyl) {
            let drawn_away = beyond(self.molecule, far, end)
                .any(|(other, _)| group(self.molecule, other, far).is_acceptor());
            match group(self.molecule, far, end) {
                _ if drawn_away => {}
                Group::Alkoxy | Group::Sulfanyl => {
                    descriptors.add("vinylogous ester beyond carbonyl", 1.0);
                }
                Group::Amino => descriptors.add("vinylogous amide beyond carbonyl", 1.0),
                _ => {}
            }
        }
    }

    /// Imines, hydrazones, oximes, imidates and amidines.
    fn imidoyl_terms(&self, descriptors: &mut Descriptors, carbon: usize) {
        descriptors.add("imine or hydrazone in place of amide", 1.0);
        for (far, bond) in beyond(self.molecule, carbon, self.site) {
            match group(self.molecule, far, carbon) {
                Group::Aryl => descriptors.add("aryl on imidoyl carbon", 1.0),
                Group::Alkoxy | Group::Sulfanyl => {
                    descriptors.add("oxygen or sulfur on imidoyl carbon", 1.0);
                }
                Group::Amino => descriptors.add("amino on imidoyl carbon", 1.0),
                _ => {}
            }
            if bond != Bond::Double {
                continue;
            }
            let aryls = beyond(self.molecule, far, carbon)
                .filter(|(end, _)| group(self.molecule, *end, far) == Group::Aryl)
                .count();
            descriptors.add("aryl on imidoyl nitrogen", aryls as f64);
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

    pub(super) fn sulfur_terms(&self, descriptors: &mut Descriptors) {
        for (sulfur, kind) in &self.groups {
            match kind {
                Group::Sulfoxonium => descriptors.add("sulfoxonium", 1.0),
                Group::Sulfoximine | Group::Sulfilimine => {
                    self.sulfoximine_terms(descriptors, *sulfur)
                }
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

    /// What the nitrogen of a sulfoximine or sulfilimine carries.
    fn sulfoximine_terms(&self, descriptors: &mut Descriptors, sulfur: usize) {
        let Some(nitrogen) = double_bonded(self.molecule, sulfur, 7) else {
            return;
        };
        if self.molecule.atoms()[nitrogen].charge > 0 {
            descriptors.add("charged sulfoximine", 1.0);
        }
        let drawn = beyond(self.molecule, nitrogen, sulfur)
            .any(|(far, _)| group(self.molecule, far, nitrogen).is_sulfonyl());
        if drawn {
            descriptors.add("sulfonyl on sulfoximine nitrogen", 1.0);
        }
    }

    pub(super) fn heteroatom_terms(&self, descriptors: &mut Descriptors) {
        for (atom, kind) in &self.groups {
            let name = match kind {
                Group::Sulfanyl => "aryl on sulfanyl",
                Group::Alkoxy => "aryl or acyl on alkoxy",
                Group::Amino => "aryl on amino",
                Group::Imino => {
                    self.imino_terms(descriptors, *atom);
                    continue;
                }
                Group::Silyl | Group::Phosphanyl => {
                    let aryls = beyond(self.molecule, *atom, self.site)
                        .filter(|(far, _)| self.molecule.atoms()[*far].aromatic)
                        .count();
                    descriptors.add("aryl on silyl or phosphanyl", aryls as f64);
                    continue;
                }
                Group::Fluoro => {
                    self.lone_pairs_beside_sulfonyl(descriptors);
                    continue;
                }
                _ => continue,
            };
            if *kind == Group::Alkoxy {
                if self.molecule.atoms()[*atom].hydrogens > 0 {
                    descriptors.add("hydroxy in place of alkoxy", 1.0);
                }
                self.lone_pairs_beside_sulfonyl(descriptors);
            }
            if self.molecule.atoms()[*atom].aromatic {
                if *kind == Group::Amino {
                    self.azolyl_terms(descriptors, *atom);
                }
                continue;
            }
            let beyond_it: Vec<(usize, Group)> = beyond(self.molecule, *atom, self.site)
                .map(|(far, _)| (far, group(self.molecule, far, *atom)))
                .collect();
            let acyls = beyond_it
                .iter()
                .filter(|(_, far)| far.is_acceptor())
                .count();
            let is_acylated = acyls > 0;
            if *kind == Group::Amino && is_acylated {
                descriptors.add("acyl on amino", 1.0);
                if acyls > 1 {
                    descriptors.add(TIED_UP, 1.0);
                }
            } else if is_acylated
                || beyond_it
                    .iter()
                    .any(|(far, _)| is_trigonal(self.molecule, *far))
            {
                descriptors.add(name, 1.0);
            }
        }
    }

    /// The lone pair of a pyrrole-like nitrogen is the ring's: its field is left.
    fn azolyl_terms(&self, descriptors: &mut Descriptors, nitrogen: usize) {
        let mut rings = self.molecule.rings().iter();
        let Some(ring) = rings.find(|ring| ring.len() == 5 && ring.contains(&nitrogen)) else {
            return;
        };
        descriptors.add(TIED_UP, 1.0);
        let aza = ring
            .iter()
            .filter(|atom| **atom != nitrogen && self.molecule.atoms()[**atom].element == 7)
            .count();
        descriptors.add("aza in azolyl", aza as f64);
    }

    /// The carbanion beside a sulfonyl is pyramidal and keeps its charge: lone pairs repel it.
    fn lone_pairs_beside_sulfonyl(&self, descriptors: &mut Descriptors) {
        let planar = self.count(Group::is_carbonyl) > 0 || self.has(Group::Nitro);
        if self.count(Group::is_sulfonyl) > 0 && !planar {
            descriptors.add("alkoxy or fluoro beside sulfonyl", 1.0);
        }
    }

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
            let substituents = |atom, from| {
                beyond(self.molecule, atom, from)
                    .filter(|(other, _)| self.molecule.atoms()[*other].element != 1)
                    .count()
            };
            let in_ring = smallest_ring(self.molecule, &[self.site, nitrogen, far]).is_some();
            if !in_ring
                && substituents(far, nitrogen) >= 2
                && substituents(self.site, nitrogen) >= 2
            {
                descriptors.add("two groups at each end of azaallyl", 1.0);
            }
            let donors = beyond(self.molecule, far, nitrogen)
                .filter(|(atom, _)| matches!(self.molecule.atoms()[*atom].element, 7 | 8 | 16))
                .count();
            descriptors.add("heteroatom at far end of azaallyl", donors as f64);
        }
    }

    pub(super) fn vinyl_terms(&self, descriptors: &mut Descriptors) {
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
                conjugated.min(1) as f64,
            );
            let sulfanyls = beyond(self.molecule, far, vinyl)
                .filter(|(atom, _)| group(self.molecule, *atom, far) == Group::Sulfanyl)
                .count();
            descriptors.add("sulfanyl at far end of vinyl", sulfanyls as f64);
            descriptors.add(
                "second aryl or vinyl at far end of vinyl",
                f64::from(u8::from(conjugated > 1)),
            );
        }
        if !self.in_cyclopentadiene && self.acceptors() == 0 && self.vinylogous.is_empty() {
            let vinyls = self.count(|kind| kind == Group::Vinyl);
            descriptors.add("vinyl of an open allyl anion", vinyls as f64);
        }
        for (_, kind) in &self.vinylogous {
            let name = match kind {
                Group::Nitro => "vinylogous nitro",
                Group::Aldehyde | Group::AlkylKetone | Group::ArylKetone => "vinylogous ketone",
                kind if kind.is_carbonyl() => "vinylogous ester",
                _ => "vinylogous nitrile or sulfone",
            };
            descriptors.add(name, 1.0);
            // each acceptor on the site itself leaves less for the one at a distance
            let beside = self.acceptors().min(2);
            descriptors.add("vinylogous acceptor beside acceptor", beside as f64);
        }
    }
}
