//! How each class of electrophile makes its bond: what leaves, and which anion the product begins as.

use enolattice_molecule::{
    AcylDonor, AnionClass, ChalcogenDonor, Cumulene, Donor, ElectrophileKind, HalogenDonor,
    ImineNitrogen, RingHeteroatom,
};

/// How the electrophile's bond forms.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) enum Bonding {
    /// Substitution: the product is neutral, the charge leaves.
    Substitution,
    /// Conjugate addition: the product is a carbanion.
    Michael,
    /// Addition to a multiple bond or opening of a ring: the product keeps the charge on a heteroatom.
    Adduct,
}

/// An X–H acid by its pKa (DMSO) and the class of its anion.
pub(crate) type HeteroatomAcid = (f64, AnionClass);

/// How this class bonds.
pub(crate) fn bonding(kind: &ElectrophileKind) -> Bonding {
    match kind {
        ElectrophileKind::Michael { .. }
        | ElectrophileKind::Cumulene {
            cumulene: Cumulene::Ketene,
        } => Bonding::Michael,
        ElectrophileKind::Aldehyde { .. }
        | ElectrophileKind::Ketone { .. }
        | ElectrophileKind::Ring { .. }
        | ElectrophileKind::Cumulene { .. }
        | ElectrophileKind::Transfer {
            donor: Donor::Azo | Donor::Nitroso,
        } => Bonding::Adduct,
        // the charge of an iminium ion and that of the carbanion cancel
        ElectrophileKind::Imine { nitrogen, .. } if *nitrogen != ImineNitrogen::Iminium => {
            Bonding::Adduct
        }
        _ => Bonding::Substitution,
    }
}

/// The X–H of the neutral adduct of an addition; `None` for substitutions and conjugate additions.
///
/// # Source
/// From memory, by kin of known pKa in DMSO (Bordwell 1988): 2-propanol 30.3 with an acceptor in β;
/// benzenesulfonamide 16.1, acetamide 25.5, urethane 24.8, aniline 30.6, acetic acid 12.3,
/// acetanilide 21.5, thioacetanilide about 15, benzenethiol 10.3 and butanethiol 17.
pub(crate) fn adduct_acid(kind: &ElectrophileKind) -> Option<HeteroatomAcid> {
    Some(match kind {
        ElectrophileKind::Aldehyde { .. } => (29.0, AnionClass::Alkoxide),
        ElectrophileKind::Ketone { .. } => (30.0, AnionClass::Alkoxide),
        ElectrophileKind::Ring { heteroatom, .. } => match heteroatom {
            RingHeteroatom::Oxygen => (29.8, AnionClass::Alkoxide),
            RingHeteroatom::ActivatedNitrogen => (16.5, AnionClass::ImideNitrogen),
            RingHeteroatom::Nitrogen => (36.0, AnionClass::AlkylNitrogen),
            RingHeteroatom::Sulfur => (17.0, AnionClass::Thiolate),
        },
        ElectrophileKind::Imine { nitrogen, .. } => match nitrogen {
            ImineNitrogen::Iminium => return None,
            ImineNitrogen::Sulfonyl => (16.5, AnionClass::ImideNitrogen),
            ImineNitrogen::Acyl | ImineNitrogen::Phosphinoyl => (24.5, AnionClass::AmideNitrogen),
            ImineNitrogen::Plain => (30.0, AnionClass::ArylNitrogen),
        },
        ElectrophileKind::Cumulene { cumulene } => match cumulene {
            Cumulene::CarbonDioxide => (12.0, AnionClass::Carboxylate),
            Cumulene::CarbonDisulfide | Cumulene::CarbonylSulfide => (8.0, AnionClass::Thiolate),
            Cumulene::Isocyanate => (20.0, AnionClass::AmideNitrogen),
            Cumulene::Isothiocyanate => (14.5, AnionClass::AmideNitrogen),
            Cumulene::Carbodiimide => (24.0, AnionClass::AmideNitrogen),
            Cumulene::Ketene => return None,
        },
        ElectrophileKind::Transfer { donor: Donor::Azo } => (17.5, AnionClass::AmideNitrogen),
        ElectrophileKind::Transfer {
            donor: Donor::Nitroso,
        } => (24.0, AnionClass::Alkoxide),
        _ => return None,
    })
}

/// The acid of the group that leaves, where its anion is a base that counts: pKa (DMSO) of 14 and more.
///
/// # Source
/// Bordwell 1988 (from memory): ethanol 29.8, tert-butanol 32.2, phenol 18.0, imidazole 18.6,
/// succinimide 14.7, benzenesulfonamide 16.1, butanethiol 17.0.
pub(crate) fn leaving_acid(kind: &ElectrophileKind) -> Option<HeteroatomAcid> {
    let acid = match kind {
        ElectrophileKind::Acyl { donor, .. } => match donor {
            AcylDonor::Ester | AcylDonor::Formate | AcylDonor::Oxalate | AcylDonor::Carbonate => {
                (29.8, AnionClass::Alkoxide)
            }
            AcylDonor::TertAlkylEster | AcylDonor::Dicarbonate => (32.2, AnionClass::Alkoxide),
            AcylDonor::ActiveEster => (18.0, AnionClass::Phenoxide),
            AcylDonor::Thioester => (17.0, AnionClass::Thiolate),
            AcylDonor::Azole => (18.6, AnionClass::AzoleNitrogen),
            AcylDonor::ChelatingAmide => (30.0, AnionClass::AlkylNitrogen),
            AcylDonor::Amide => (36.0, AnionClass::AlkylNitrogen),
            _ => return None,
        },
        ElectrophileKind::Transfer { donor } => match donor {
            Donor::Nitrite => (29.8, AnionClass::Alkoxide),
            Donor::SulfonylAzide => (16.1, AnionClass::ImideNitrogen),
            Donor::Halogen(_, HalogenDonor::Imide) => (14.7, AnionClass::ImideNitrogen),
            Donor::Halogen(_, HalogenDonor::Hypohalite) => (32.2, AnionClass::Alkoxide),
            Donor::Chalcogen(_, ChalcogenDonor::Dichalcogenide) => (15.0, AnionClass::Thiolate),
            Donor::Chalcogen(_, ChalcogenDonor::Imide) => (14.7, AnionClass::ImideNitrogen),
            _ => return None,
        },
        _ => return None,
    };
    Some(acid)
}

/// Whether the acyl group is handed over reversibly: the leaving alkoxide can bring it back.
pub(crate) fn is_claisen(kind: &ElectrophileKind) -> bool {
    matches!(
        kind,
        ElectrophileKind::Acyl {
            donor: AcylDonor::Ester
                | AcylDonor::TertAlkylEster
                | AcylDonor::Formate
                | AcylDonor::Oxalate
                | AcylDonor::Carbonate
                | AcylDonor::ActiveEster,
            ..
        }
    )
}

/// What an oxygen, nitrogen or sulfur base does to the electrophile at its reacting atom.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) enum TakenByBase {
    /// The electrophile is lost.
    Lost,
    /// Alkoxides exchange an ester group and lose nothing that counts; hydroxide and amides do.
    ExceptByAlkoxides,
    /// Oxygen bases exchange halogen and give it back; amines and metal amides keep it.
    ByNitrogen,
    /// Additions to carbonyl groups and acceptors come back.
    ComesBack,
}

/// Whether a base that attacks this class spends it for good.
pub(crate) fn taken_by_base(kind: &ElectrophileKind) -> TakenByBase {
    match kind {
        _ if is_claisen(kind) => TakenByBase::ExceptByAlkoxides,
        ElectrophileKind::Transfer {
            donor:
                Donor::Azo
                | Donor::Nitroso
                | Donor::Diazonium
                | Donor::Nitrite
                | Donor::SulfonylAzide
                | Donor::Oxaziridine,
        } => TakenByBase::ComesBack,
        ElectrophileKind::Transfer {
            donor: Donor::Halogen(..),
        } => TakenByBase::ByNitrogen,
        ElectrophileKind::Ring { .. } | ElectrophileKind::Cumulene { .. } => TakenByBase::Lost,
        ElectrophileKind::Imine { .. } => TakenByBase::ComesBack,
        _ if bonding(kind) == Bonding::Substitution => TakenByBase::Lost,
        _ => TakenByBase::ComesBack,
    }
}

/// Whether a tertiary amine that takes the electrophile hands it on again: acyl, silyl, sulfonyl and halogen
/// transfer by way of its onium salt (common practice).
pub(crate) fn is_carried_by_amines(kind: &ElectrophileKind) -> bool {
    matches!(
        kind,
        ElectrophileKind::Acyl { .. }
            | ElectrophileKind::Silyl { .. }
            | ElectrophileKind::Cumulene { .. }
            | ElectrophileKind::Transfer {
                donor: Donor::Halogen(..)
            }
    )
}
