//! How an electrophilic group reacts.

use super::{
    Acceptor, AcylDonor, AlkylGroup, Cumulene, Donor, ImineNitrogen, LeavingGroup, RingHeteroatom,
};

/// How a group reacts.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum ElectrophileKind {
    /// Nucleophilic substitution at saturated carbon.
    Alkyl {
        /// Skeleton at the carbon.
        group: AlkylGroup,
        /// What leaves.
        leaving: LeavingGroup,
        /// Number of β hydrogens on saturated carbon (0: no E2).
        beta_hydrogens: u8,
        /// Whether a β hydrogen is activated by aryl, vinyl or an acceptor.
        activated_beta_hydrogen: bool,
    },
    /// Conjugate addition.
    Michael {
        /// Carbon that becomes the carbanion.
        alpha: usize,
        /// Strongest acceptor on the alkene.
        acceptor: Acceptor,
        /// Further acceptors on the α carbon.
        further_acceptors: u8,
        /// Acceptors on the β carbon (fumarates, maleimides).
        beta_acceptors: u8,
        /// Alkyl groups on the β carbon.
        beta_alkyl: u8,
        /// Aryl, alkenyl and alkynyl groups on the β carbon.
        beta_aryl: u8,
        /// Alkyl groups on the α carbon.
        alpha_alkyl: u8,
    },
    /// Addition to an aldehyde.
    Aldehyde {
        /// Whether the carbonyl sits on an aromatic ring.
        aromatic: bool,
        /// Number of α hydrogens.
        alpha_hydrogens: u8,
        /// Sum of Hammett σ (para-like) of the substituents on an aromatic ring.
        hammett_sigma: f64,
        /// Whether a group next to the carbonyl pulls electrons (C=O, CF3, CCl3, CN).
        activated: bool,
    },
    /// Addition to a ketone.
    Ketone {
        /// Whether the carbonyl sits on an aromatic ring.
        aromatic: bool,
        /// Whether a group next to the carbonyl pulls electrons (CF3, a second carbonyl, CN).
        activated: bool,
        /// Number of α hydrogens.
        alpha_hydrogens: u8,
    },
    /// Addition to C=N (Mannich).
    Imine {
        /// What the nitrogen bears.
        nitrogen: ImineNitrogen,
        /// Whether the carbon sits on an aromatic ring.
        aromatic: bool,
        /// Whether the carbon bears two carbon groups (a ketimine).
        is_ketimine: bool,
    },
    /// Acyl transfer: the leaving group goes, the carbanion bears the acyl group.
    Acyl {
        /// What the acyl group is bound to.
        donor: AcylDonor,
        /// Number of hydrogens α to the carbonyl, on saturated carbon.
        alpha_hydrogens: u8,
        /// Heavy neighbours of the α carbon beyond one (2 for pivaloyl); 0 for aryl and formyl.
        branches: u8,
    },
    /// Opening of a three-membered ring at its carbon; the heteroatom keeps the charge.
    Ring {
        /// The heteroatom.
        heteroatom: RingHeteroatom,
        /// Carbon groups on the attacked carbon beside the ring: 0 for terminal.
        degree: u8,
        /// Whether aryl, vinyl or carbonyl activates the attacked carbon.
        activated: bool,
    },
    /// Addition to a heterocumulene; the heteroatom keeps the charge.
    Cumulene {
        /// Which.
        cumulene: Cumulene,
    },
    /// Nucleophilic aromatic substitution.
    Aryl {
        /// What leaves.
        leaving: LeavingGroup,
        /// Nitro groups ortho or para to it.
        nitro: u8,
        /// Other acceptors ortho or para to it (CN, C=O, CF3, SO2).
        acceptors: u8,
        /// Ring nitrogens ortho or para to it.
        ring_nitrogens: u8,
        /// Further halogens on the ring.
        halogens: u8,
    },
    /// An atom or group is handed over by a heteroatom that leaves.
    Transfer {
        /// What is handed over, and by what.
        donor: Donor,
    },
    /// Silylation, at oxygen where the anion has one.
    Silyl {
        /// What leaves.
        leaving: LeavingGroup,
        /// Bulk of the silyl group: 0 for trimethylsilyl, 1 for triethylsilyl, 2 for tert-butyldimethylsilyl, 3 for triisopropylsilyl and beyond.
        bulk: u8,
    },
    /// A carbon–halogen bond that does not react with carbanions under these conditions.
    Inert {
        /// Why, as a sentence for the user.
        reason: &'static str,
    },
}
