//! Michael acceptors.

use super::{Acceptor, ElectrophileKind, ElectrophilicGroup};
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
/// An acceptor alkene with a heteroatom on the double bond.
pub(super) fn find(molecule: &Molecule) -> Result<Option<ElectrophilicGroup>, String> {
    let mut alkenes = Vec::new();
    for one in 0..molecule.atoms().len() {
        for other in molecule.bound_to(one, CARBON, Bond::Double) {
            if molecule.element(one) == CARBON && one < other {
                alkenes.extend(better_reading(molecule, one, other)?);
            }
        }
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
        carbon: best.beta,
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
