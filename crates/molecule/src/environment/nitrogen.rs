//! Descriptors of N–H sites, neutral and cationic.

use super::descriptors::Descriptors;
use super::group::{Group, beyond, double_bonded, group, is_trigonal};
use super::hammett::{Conjugation, has_quinoid_acceptor, inductive, ring_sigma};
use super::skeleton::smallest_ring;
use crate::{AnionClass, Bond, Molecule};

/// Share of a sulfonyl's effect that a second one has on the same nitrogen: dibenzenesulfonimide is about as strong as
/// saccharin (1.5 and 1.6 in water, from memory).
const SHARE_OF_SECOND_SULFONYL: f64 = 0.3;

/// What a nitrogen is bound to, as far as its acidity goes.
#[derive(Default)]
struct Substituents {
    acyls: Vec<usize>,
    sulfonyls: Vec<usize>,
    phosphonyls: usize,
    silyls: usize,
    aryls: Vec<usize>,
    alkyls: Vec<usize>,
    nitriles: usize,
    amidines: Vec<usize>,
    heteroatoms: Vec<usize>,
}

impl Substituents {
    /// The nitrogen with its acyls and sulfonyls.
    fn all_acyls(&self, site: usize) -> Vec<usize> {
        let bound = self.acyls.iter().chain(&self.sulfonyls).copied();
        bound.chain([site]).collect()
    }
}

fn substituents(molecule: &Molecule, site: usize) -> Substituents {
    let mut s = Substituents::default();
    for (other, _) in molecule.neighbours(site) {
        let other = *other;
        match group(molecule, other, site) {
            Group::Imidoyl => s.amidines.push(other),
            Group::Nitrile => s.nitriles += 1,
            kind if kind.is_carbonyl() => s.acyls.push(other),
            kind if kind.is_sulfonyl() => s.sulfonyls.push(other),
            Group::Phosphonyl => s.phosphonyls += 1,
            Group::Silyl => s.silyls += 1,
            Group::Aryl => s.aryls.push(other),
            Group::Amino | Group::Alkoxy | Group::Imino | Group::Ammonium => {
                s.heteroatoms.push(other)
            }
            _ if molecule.atoms()[other].element == 6 => s.alkyls.push(other),
            _ => {}
        }
    }
    s
}

/// Describes an N–H.
pub(super) fn describe(molecule: &Molecule, site: usize) -> Option<(AnionClass, Descriptors)> {
    let mut d = Descriptors::default();
    let atom = molecule.atoms()[site];
    let class = if atom.charge > 0 {
        cation(molecule, site, &mut d);
        AnionClass::Neutral
    } else if atom.charge < 0 {
        return None;
    } else if atom.aromatic {
        azole(molecule, site, &mut d)
    } else if let Some((partner, _)) = molecule
        .neighbours(site)
        .iter()
        .find(|(_, bond)| *bond == Bond::Double)
    {
        imine(molecule, site, *partner, &mut d)
    } else {
        saturated(molecule, site, &mut d)
    };
    Some((class, d))
}

fn cation(molecule: &Molecule, site: usize, d: &mut Descriptors) {
    if molecule.atoms()[site].aromatic {
        d.add("pyridinium N–H", 1.0);
        d.add(
            "σ of pyridinium",
            ring_sigma(molecule, site, Conjugation::Insulated),
        );
        return;
    }
    let double = molecule
        .neighbours(site)
        .iter()
        .find(|(_, bond)| *bond == Bond::Double);
    if let Some((carbon, _)) = double {
        let nitrogens = beyond(molecule, *carbon, site)
            .filter(|(other, _)| molecule.atoms()[*other].element == 7)
            .count();
        d.add(
            if nitrogens == 0 {
                "iminium N–H"
            } else {
                "amidinium N–H"
            },
            1.0,
        );
        return;
    }
    d.add("ammonium N–H", 1.0);
    for (other, _) in molecule.neighbours(site) {
        if molecule.atoms()[*other].aromatic {
            d.add("aryl on ammonium", 1.0);
            d.add(
                "σ of aryl on ammonium",
                ring_sigma(molecule, *other, Conjugation::Insulated),
            );
        } else {
            d.add("carbon on ammonium", 1.0);
            d.add("σI of ammonium", inductive(molecule, *other, site));
        }
    }
}

/// Pyrrole-like N–H in an aromatic ring; a lactam where a carbonyl stands beside it.
fn azole(molecule: &Molecule, site: usize, d: &mut Descriptors) -> AnionClass {
    let oxo = |atom: usize| {
        double_bonded(molecule, atom, 8)
            .or(double_bonded(molecule, atom, 16))
            .is_some()
    };
    let beside: Vec<usize> = molecule
        .neighbours(site)
        .iter()
        .map(|(other, _)| *other)
        .filter(|other| oxo(*other))
        .collect();
    let ring = molecule
        .rings()
        .iter()
        .filter(|ring| ring.contains(&site))
        .min_by_key(|ring| ring.len());
    let carbonyls = ring.map_or(0, |ring| ring.iter().filter(|atom| oxo(**atom)).count());
    let nitrogen_beside = molecule
        .neighbours(site)
        .iter()
        .any(|(other, _)| molecule.atoms()[*other].element == 7);
    if carbonyls > 0 {
        let imide = beside.len() >= 2;
        d.add(
            if imide {
                "imide N–H"
            } else {
                "aromatic lactam N–H"
            },
            1.0,
        );
        if !imide {
            d.add(
                "further carbonyl in aromatic lactam",
                (carbonyls - 1) as f64,
            );
            if nitrogen_beside {
                d.add("nitrogen beside lactam nitrogen", 1.0);
            }
        }
        if beside
            .iter()
            .any(|atom| double_bonded(molecule, *atom, 16).is_some())
        {
            d.add("thio lactam", 1.0);
        }
        return if imide {
            AnionClass::ImideNitrogen
        } else {
            AnionClass::AmideNitrogen
        };
    }
    d.add("azole N–H", 1.0);
    if let Some(ring) = ring {
        let aza = ring
            .iter()
            .filter(|atom| **atom != site && molecule.atoms()[**atom].element == 7)
            .count();
        d.add("aza in azole", aza as f64);
        if nitrogen_beside {
            d.add("aza beside azole nitrogen", 1.0);
        }
        let fused: Vec<&Vec<usize>> = molecule
            .rings()
            .iter()
            .filter(|other| {
                other.as_slice() != ring.as_slice()
                    && other.iter().all(|atom| molecule.atoms()[*atom].aromatic)
                    && other.iter().filter(|atom| ring.contains(atom)).count() == 2
            })
            .collect();
        d.add("benzo on azole", fused.len() as f64);
        let outer_aza = fused
            .iter()
            .flat_map(|other| other.iter())
            .filter(|atom| !ring.contains(atom) && molecule.atoms()[**atom].element == 7)
            .count();
        d.add("aza in ring fused to azole", outer_aza as f64);
        for member in ring.iter().filter(|member| **member != site) {
            for (other, bond) in molecule.neighbours(*member) {
                let acceptor = group(molecule, *other, *member);
                if *bond == Bond::Single
                    && (acceptor.is_acceptor() || acceptor == Group::Perfluoroalkyl)
                {
                    d.add("acceptor on azole", 1.0);
                }
            }
        }
    }
    AnionClass::AzoleNitrogen
}

fn imine(molecule: &Molecule, site: usize, partner: usize, d: &mut Descriptors) -> AnionClass {
    match molecule.atoms()[partner].element {
        16 => d.add("sulfoximine N–H", 1.0),
        6 => {
            let nitrogens = beyond(molecule, partner, site)
                .filter(|(other, _)| molecule.atoms()[*other].element == 7)
                .count();
            match nitrogens {
                0 => d.add("imine N–H", 1.0),
                _ => amidine(d, molecule, partner),
            }
        }
        _ => d.add("other N–H", 1.0),
    }
    AnionClass::AmideNitrogen
}

fn amidine(d: &mut Descriptors, molecule: &Molecule, carbon: usize) {
    d.add("amidine N–H", 1.0);
    let nitrogens: Vec<usize> = molecule
        .neighbours(carbon)
        .iter()
        .map(|(other, _)| *other)
        .filter(|other| molecule.atoms()[*other].element == 7)
        .collect();
    if nitrogens.len() == 3 {
        d.add("third nitrogen in guanidine", 1.0);
    }
    let drawn = nitrogens.iter().any(|nitrogen| {
        beyond(molecule, *nitrogen, carbon).any(|(other, _)| {
            let kind = group(molecule, other, *nitrogen);
            kind.is_sulfonyl()
                || kind.is_carbonyl()
                || matches!(kind, Group::Nitro | Group::Nitrile)
        })
    });
    if drawn {
        d.add("acceptor on amidine nitrogen", 1.0);
    }
}

fn saturated(molecule: &Molecule, site: usize, d: &mut Descriptors) -> AnionClass {
    let s = substituents(molecule, site);
    let class = if s.acyls.len() + s.sulfonyls.len() >= 2 {
        d.add("imide N–H", 1.0);
        // the second takes what the first has left
        let sulfonyls = [0.0, 1.0, 1.0 + SHARE_OF_SECOND_SULFONYL][s.sulfonyls.len().min(2)];
        d.add("sulfonyl in imide", sulfonyls);
        let thio = s
            .acyls
            .iter()
            .filter(|acyl| double_bonded(molecule, **acyl, 16).is_some());
        d.add("thio in imide", thio.count() as f64);
        if smallest_ring(molecule, &s.all_acyls(site)).is_none() {
            d.add("open-chain imide", 1.0);
        } else {
            let drawn = s.acyls.iter().filter(|acyl| {
                beyond(molecule, **acyl, site).any(|(far, bond)| {
                    bond == Bond::Single && matches!(molecule.atoms()[far].element, 8 | 16)
                })
            });
            d.add(
                "oxygen or sulfur on carbonyl of ring imide",
                drawn.count() as f64,
            );
        }
        AnionClass::ImideNitrogen
    } else if let Some(sulfonyl) = s.sulfonyls.first() {
        sulfonamide(molecule, site, *sulfonyl, d);
        AnionClass::ImideNitrogen
    } else if let Some(acyl) = s.acyls.first() {
        amide(molecule, site, *acyl, d);
        AnionClass::AmideNitrogen
    } else if s.phosphonyls > 0 {
        d.add("phosphoramide N–H", 1.0);
        AnionClass::AmideNitrogen
    } else if let Some(carbon) = s.amidines.first() {
        amidine(d, molecule, *carbon);
        AnionClass::AmideNitrogen
    } else if s.nitriles > 0 {
        d.add("cyanamide N–H", 1.0);
        AnionClass::AmideNitrogen
    } else if !s.aryls.is_empty() {
        d.add("aniline N–H", 1.0);
        AnionClass::ArylNitrogen
    } else if s.silyls >= 2 {
        d.add("disilylamine N–H", 1.0);
        AnionClass::SilylNitrogen
    } else {
        d.add("amine N–H", 1.0);
        for carbon in &s.alkyls {
            d.add("σI of amine", inductive(molecule, *carbon, site));
        }
        AnionClass::AlkylNitrogen
    };
    nitrogen_corrections(molecule, &s, d, class);
    class
}

/// Aryl, amino and alkoxy on an N–H whose anion has other support.
fn nitrogen_corrections(
    molecule: &Molecule,
    s: &Substituents,
    d: &mut Descriptors,
    class: AnionClass,
) {
    let supported = class != AnionClass::ArylNitrogen;
    for (i, aryl) in s.aryls.iter().enumerate() {
        let sigma = ring_sigma(molecule, *aryl, Conjugation::Direct);
        if supported {
            d.add("aryl on amide-like nitrogen", 1.0);
            d.add("σ of aryl on amide-like nitrogen", sigma);
        } else {
            d.add("σ of aniline", sigma);
            d.add(
                "nitro or acyl through aniline",
                f64::from(has_quinoid_acceptor(molecule, *aryl)),
            );
            if i > 0 {
                d.add("second aryl on aniline", 1.0);
            }
        }
    }
    for heteroatom in &s.heteroatoms {
        let oxygen = molecule.atoms()[*heteroatom].element == 8;
        let aryls = molecule
            .neighbours(*heteroatom)
            .iter()
            .filter(|(far, _)| molecule.atoms()[*far].aromatic)
            .count();
        if !oxygen && aryls > 0 {
            d.add("aryl on amino of hydrazine", aryls as f64);
        }
        d.add(
            match class {
                AnionClass::ImideNitrogen => "oxygen or amino on imide-like nitrogen",
                _ if oxygen => "oxygen on N–H",
                AnionClass::ArylNitrogen | AnionClass::AlkylNitrogen
                    if double_bonded(molecule, *heteroatom, 6).is_some() =>
                {
                    "imino on amine or aniline (hydrazone)"
                }
                AnionClass::ArylNitrogen | AnionClass::AlkylNitrogen => "amino on amine or aniline",
                _ => "amino on amide-like nitrogen",
            },
            1.0,
        );
    }
    if supported && class != AnionClass::AlkylNitrogen {
        d.add("carbon on amide-like nitrogen", s.alkyls.len() as f64);
    }
}

fn sulfonamide(molecule: &Molecule, site: usize, sulfonyl: usize, d: &mut Descriptors) {
    d.add("sulfonamide N–H", 1.0);
    for (far, bond) in beyond(molecule, sulfonyl, site) {
        if bond != Bond::Single || molecule.atoms()[far].element != 6 {
            continue;
        }
        if molecule.atoms()[far].aromatic {
            d.add("aryl on sulfonyl of sulfonamide", 1.0);
            d.add(
                "σ of aryl on sulfonyl of sulfonamide",
                ring_sigma(molecule, far, Conjugation::Insulated),
            );
        } else {
            d.add(
                "σI on sulfonyl of sulfonamide",
                inductive(molecule, far, sulfonyl),
            );
        }
    }
}

fn amide(molecule: &Molecule, site: usize, acyl: usize, d: &mut Descriptors) {
    d.add("amide N–H", 1.0);
    if double_bonded(molecule, acyl, 16).is_some() {
        d.add("thioamide N–H", 1.0);
    }
    if molecule.atoms()[acyl].hydrogens > 0 {
        d.add("formyl on amide nitrogen", 1.0);
    }
    for (far, bond) in beyond(molecule, acyl, site) {
        let atom = molecule.atoms()[far];
        match atom.element {
            _ if bond != Bond::Single => {}
            6 if atom.aromatic => {
                d.add("aryl on acyl of amide", 1.0);
                d.add(
                    "σ of aryl on acyl of amide",
                    ring_sigma(molecule, far, Conjugation::Insulated),
                );
            }
            6 if is_trigonal(molecule, far) => d.add("vinyl or acyl on acyl of amide", 1.0),
            6 => d.add("σI on acyl of amide", inductive(molecule, far, acyl)),
            7 => {
                d.add("nitrogen on acyl (urea)", 1.0);
                if beyond(molecule, far, acyl)
                    .any(|(other, _)| molecule.atoms()[other].element == 7)
                {
                    d.add("hydrazine on acyl", 1.0);
                }
            }
            8 | 16 => d.add("oxygen on acyl (carbamate)", 1.0),
            _ => {}
        }
    }
    match smallest_ring(molecule, &[site, acyl]) {
        Some(..=5) => d.add("lactam of five or fewer", 1.0),
        Some(6) => d.add("lactam of six", 1.0),
        _ => {}
    }
}
