//! Michael acceptors: alkenes and alkynes with an acceptor, and vinylpyridines.

use super::{Acceptor, ElectrophileKind, ElectrophilicGroup, quinone};
use crate::groups::CARBON;
use crate::{Bond, Molecule};

/// An alkene read with one end as α carbon.
struct Alkene {
    alpha: usize,
    beta: usize,
    /// Acceptors on the α carbon, the strongest first.
    acceptors: Vec<Acceptor>,
    beta_acceptors: u8,
    beta_alkyl: u8,
    beta_aryl: u8,
    alpha_alkyl: u8,
}

impl Alkene {
    /// Sorts the end and the alkene that react first to the front.
    fn precedence(&self) -> (Acceptor, i16, u8, usize) {
        (
            self.acceptors[0],
            -(self.acceptors.len() as i16) - i16::from(self.beta_acceptors),
            self.beta_alkyl + self.beta_aryl,
            self.beta,
        )
    }

    fn same_kind(&self, other: &Alkene) -> bool {
        self.acceptors == other.acceptors
            && self.beta_acceptors == other.beta_acceptors
            && self.beta_alkyl == other.beta_alkyl
            && self.beta_aryl == other.beta_aryl
    }
}

/// The strongest Michael acceptor of a molecule.
///
/// # Errors
/// An acceptor alkene with a heteroatom on the double bond, or a quinone that [`quinone::find`] refuses.
pub(super) fn find(molecule: &Molecule) -> Result<Option<ElectrophilicGroup>, String> {
    if let Some(group) = quinone::find(molecule)? {
        return Ok(Some(group));
    }
    let mut alkenes = Vec::new();
    for one in 0..molecule.atoms().len() {
        let unsaturated = [Bond::Double, Bond::Triple];
        for other in unsaturated
            .into_iter()
            .flat_map(|b| molecule.bound_to(one, CARBON, b))
        {
            if molecule.element(one) == CARBON && one < other {
                alkenes.extend(better_reading(molecule, one, other)?);
            }
        }
    }
    if alkenes.is_empty() {
        alkenes.extend(vinyl_azines(molecule));
    }
    alkenes.sort_by_key(Alkene::precedence);
    let Some(best) = alkenes.first() else {
        return Ok(None);
    };
    let further = alkenes[1..].iter().filter(|a| a.same_kind(best)).count();
    Ok(Some(ElectrophilicGroup {
        kind: ElectrophileKind::Michael {
            alpha: best.alpha,
            acceptor: best.acceptors[0],
            further_acceptors: best.acceptors.len() as u8 - 1,
            beta_acceptors: best.beta_acceptors,
            beta_alkyl: best.beta_alkyl,
            beta_aryl: best.beta_aryl,
            alpha_alkyl: best.alpha_alkyl,
        },
        atom: best.beta,
        leaving_atom: None,
        further_positions: u8::try_from(further).unwrap_or(u8::MAX),
    }))
}

/// Which end of the alkene is α: the one with the stronger acceptors.
fn better_reading(molecule: &Molecule, one: usize, other: usize) -> Result<Option<Alkene>, String> {
    let readings = [read(molecule, one, other)?, read(molecule, other, one)?];
    Ok(readings
        .into_iter()
        .flatten()
        .min_by_key(Alkene::precedence))
}

fn read(molecule: &Molecule, alpha: usize, beta: usize) -> Result<Option<Alkene>, String> {
    let mut alkene = Alkene {
        alpha,
        beta,
        acceptors: Vec::new(),
        beta_acceptors: 0,
        beta_alkyl: 0,
        beta_aryl: 0,
        alpha_alkyl: 0,
    };
    let mut heteroatom = false;
    for around in substituents(molecule, alpha, beta) {
        match molecule.acceptor(around) {
            Some(acceptor) => alkene.acceptors.push(acceptor),
            None if molecule.is_saturated_carbon(around) => alkene.alpha_alkyl += 1,
            None => heteroatom |= molecule.element(around) != CARBON,
        }
    }
    if alkene.acceptors.is_empty() {
        return Ok(None);
    }
    alkene.acceptors.sort_unstable();
    for around in substituents(molecule, beta, alpha) {
        match molecule.acceptor(around) {
            Some(_) => alkene.beta_acceptors += 1,
            None if molecule.is_saturated_carbon(around) => alkene.beta_alkyl += 1,
            None if molecule.element(around) == CARBON => alkene.beta_aryl += 1,
            None => heteroatom = true,
        }
    }
    if heteroatom {
        return Err(
            "an acceptor alkene with a heteroatom or halogen on its double bond is not covered"
                .to_owned(),
        );
    }
    Ok(Some(alkene))
}

/// CH2=CH or CH2=CR at the 2 or 4 position of a pyridine or another azine.
fn vinyl_azines(molecule: &Molecule) -> Vec<Alkene> {
    let mut found = Vec::new();
    for beta in 0..molecule.atoms().len() {
        if molecule.element(beta) != CARBON || molecule.atoms()[beta].hydrogens != 2 {
            continue;
        }
        for alpha in molecule.bound_to(beta, CARBON, Bond::Double) {
            let around: Vec<usize> = substituents(molecule, alpha, beta).collect();
            if around.iter().any(|atom| molecule.is_azine_position(*atom)) {
                found.push(Alkene {
                    alpha,
                    beta,
                    acceptors: vec![Acceptor::Pyridyl],
                    beta_acceptors: 0,
                    beta_alkyl: 0,
                    beta_aryl: 0,
                    alpha_alkyl: around
                        .iter()
                        .filter(|atom| molecule.is_saturated_carbon(**atom))
                        .count() as u8,
                });
            }
        }
    }
    found
}

fn substituents(
    molecule: &Molecule,
    carbon: usize,
    partner: usize,
) -> impl Iterator<Item = usize> + '_ {
    molecule
        .neighbours(carbon)
        .iter()
        .map(|(other, _)| *other)
        .filter(move |other| *other != partner && molecule.element(*other) != 1)
}
