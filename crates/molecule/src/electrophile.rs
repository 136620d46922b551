//! Electrophilic groups recognised from structure.

mod acyl;
mod alkylating;
mod aromatic;
mod carbonyl;
mod conjugate;
mod cumulene;
mod donors;
mod groups;
mod imine;
mod kind;
mod matching;
mod order;
mod quinone;
mod silyl;
mod skeleton;
mod strained;
mod transfer;
mod uncovered;

pub use donors::{AcylDonor, ChalcogenDonor, Donor, HalogenDonor};
pub use groups::{Acceptor, AlkylGroup, Cumulene, ImineNitrogen, LeavingGroup, RingHeteroatom};
pub use kind::ElectrophileKind;
pub(crate) use skeleton::{is_activated_beta_carbon, is_bridgehead};

use crate::Molecule;

/// The electrophilic group of a molecule that reacts.
#[derive(Clone, Debug, PartialEq)]
pub struct ElectrophilicGroup {
    /// How it reacts.
    pub kind: ElectrophileKind,
    /// The atom that is attacked.
    pub atom: usize,
    /// The atom bound to `atom` that leaves with everything behind it, or stays behind with a hydrogen
    /// where a ring opens; none for additions and for three-membered rings.
    pub leaving_atom: Option<usize>,
    /// Other positions of the same kind that stay reactive after the first has reacted
    /// (1 for 1,4-dibromobutane; 0 for dimethyl sulfate and for fumarates).
    pub further_positions: u8,
}

/// Recognises the group that reacts with carbanions, or says why the molecule is not covered.
///
/// Groups are looked for in this order of reactivity (common practice); what comes later in it is a
/// spectator beside what comes earlier, and so are nitriles, ethers, nitroarenes and free O–H,
/// N–H and S–H:
///
/// 1. transfer reagents (halogen, sulfur, selenium, nitrogen, oxygen) but disulfides;
/// 2. heterocumulenes; 3. acid halides, sulfonyl donors, anhydrides, acyl cyanides and azoles,
///    chloroformates, dicarbonates, carbamoyl chlorides; 4. silyl halides and sulfonates;
/// 5. iminium ions and imines with sulfonyl, acyl or phosphinoyl on nitrogen;
/// 6. alkylating groups, Michael acceptors, aldehydes: two of these in one molecule are refused;
/// 7. epoxides, aziridines, thiiranes (refused beside an alkylating group or a ketone);
/// 8. activated ketones; 9. active esters and oxalates; 10. disulfides;
/// 11. aryl halides activated by nitro, two ring nitrogens or five halogens;
/// 12. ketones; 13. aldimines;
/// 14. formates, thioesters, esters, carbonates, tertiary amides;
/// 15. aryl halides activated by other acceptors (by one ring nitrogen: refused beside 12 to
///     14, but before tert-alkyl esters, carbonates and amides);
/// 16. ketimines; 17. phosphates; 18. lone alkyl fluorides;
/// 19. vinyl, aryl and bridgehead halides, as [`ElectrophileKind::Inert`]: there the model knows
///     that nothing happens.
///
/// # Errors
/// The reason, as a sentence for the user: no known electrophilic group, two between which the
/// order does not decide, or a class that the model does not cover.
pub fn recognise(molecule: &Molecule) -> Result<ElectrophilicGroup, String> {
    order::first_to_react(molecule)
}
