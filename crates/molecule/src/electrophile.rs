//! Electrophilic groups recognised from structure.

mod aldehyde;
mod alkylating;
mod conjugate;
mod hammett;
mod skeleton;
mod uncovered;

use crate::Molecule;

/// The carbon skeleton at the reacting carbon of an alkylating agent.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum AlkylGroup {
    /// CH3–X.
    Methyl,
    /// CH3CH2–X.
    Ethyl,
    /// RCH2CH2–X without branch at the β carbon.
    Primary,
    /// R2CHCH2–X.
    Isobutyl,
    /// R3CCH2–X.
    Neopentyl,
    /// R2CH–X, open chain or ring of other size.
    Secondary,
    /// Cyclohexyl.
    Cyclohexyl,
    /// R3C–X.
    Tertiary,
    /// C=C–CH2–X.
    Allyl,
    /// C≡C–CH2–X.
    Propargyl,
    /// Aryl–CH2–X.
    Benzyl,
    /// Aryl–CHR–X, C=C–CHR–X, C≡C–CHR–X and X–CHR–C(=O)R.
    SecondaryActivated,
    /// X–CH2–C(=O)R and X–CH2–CN.
    AlphaCarbonyl,
}

/// What leaves.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum LeavingGroup {
    /// Fluoride.
    Fluoride,
    /// Chloride.
    Chloride,
    /// Bromide.
    Bromide,
    /// Iodide.
    Iodide,
    /// Arenesulfonate.
    Tosylate,
    /// Alkanesulfonate.
    Mesylate,
    /// Perfluoroalkanesulfonate.
    Triflate,
    /// Monoalkyl sulfate (from a dialkyl sulfate).
    Sulfate,
}

/// The group that makes an alkene a Michael acceptor.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash, PartialOrd, Ord)]
pub enum Acceptor {
    /// Nitro.
    Nitro,
    /// Aldehyde.
    Aldehyde,
    /// Ketone.
    Ketone,
    /// Sulfone.
    Sulfone,
    /// Ester.
    Ester,
    /// Nitrile.
    Nitrile,
    /// Amide.
    Amide,
}

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
    },
    /// A carbon–halogen bond that does not react with carbanions under these conditions.
    Inert {
        /// Why, as a sentence for the user.
        reason: &'static str,
    },
}

/// The electrophilic group of a molecule that reacts.
#[derive(Clone, Debug, PartialEq)]
pub struct ElectrophilicGroup {
    /// How it reacts.
    pub kind: ElectrophileKind,
    /// The carbon that is attacked.
    pub carbon: usize,
    /// The atom bound to `carbon` that leaves with everything behind it; none for additions.
    pub leaving_atom: Option<usize>,
    /// Other positions of the same kind that stay reactive after the first has reacted
    /// (1 for 1,4-dibromobutane; 0 for dimethyl sulfate and for fumarates).
    pub further_positions: u8,
}

/// Recognises the group that reacts with carbanions, or says why the molecule is not covered.
///
/// Alkylating groups, Michael acceptors and aldehydes are looked for. Esters,
/// nitriles, ethers, ketones, nitroarenes, aryl halides and fluorides beside one
/// of these are spectators. Vinyl and aryl halides alone are recognised as
/// [`ElectrophileKind::Inert`]: there the model knows that nothing happens.
///
/// # Errors
/// The reason, as a sentence for the user: no known electrophilic group, several
/// different ones, or a class that the model does not cover (epoxides, acyl
/// halides, esters, ketones, halogenating agents, ...).
pub fn recognise(molecule: &Molecule) -> Result<ElectrophilicGroup, String> {
    if let Some(reason) = uncovered::reactive(molecule) {
        return Err(reason.to_owned());
    }
    let found = [
        ("an alkylating group", alkylating::find(molecule)?),
        ("a Michael acceptor", conjugate::find(molecule)?),
        ("an aldehyde", aldehyde::find(molecule)),
    ];
    let mut groups = found
        .into_iter()
        .filter_map(|(name, group)| Some((name, group?)));
    match (groups.next(), groups.next()) {
        (Some((one, _)), Some((other, _))) => Err(format!(
            "it has {one} and {other}: which of them reacts is not covered"
        )),
        (Some((_, group)), None) => Ok(group),
        _ => unreactive(molecule),
    }
}

/// What is left when there is no group that reacts readily.
fn unreactive(molecule: &Molecule) -> Result<ElectrophilicGroup, String> {
    if let Some(reason) = uncovered::sluggish(molecule) {
        return Err(reason.to_owned());
    }
    alkylating::fluoride(molecule)
        .or_else(|| alkylating::inert(molecule))
        .ok_or_else(|| {
            "it has no electrophilic group known here (alkyl, allyl or benzyl halide or \
             sulfonate, Michael acceptor, aldehyde)"
                .to_owned()
        })
}
