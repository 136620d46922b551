//! Mayr's E of Michael acceptors and aldehydes: published where known, else by class.

use enolattice_molecule::{Acceptor, ElectrophileKind, ElectrophilicGroup, Molecule};
use enolattice_reagents::Library;

/// Standard uncertainty of an estimate by class.
const SIGMA_BY_CLASS: f64 = 1.5;

/// E with its standard uncertainty and source; `None` for alkylating agents.
///
/// The estimates are the differences in the electrophilicities table: a β-alkyl group −4.6
/// (acrylate −19.1, crotonate −23.6), a β-aryl group −5.5 (acrylate, cinnamate −24.5), an α-alkyl
/// group −3.7 (methacrylate −22.8), a second acceptor +4 (benzylidenemalonate −20.6); aldehydes by
/// Hammett σ with slope 3.4 (benzaldehyde −19.5, 4-nitrobenzaldehyde −16.9, from memory).
pub(crate) fn electrophilicity(
    molecule: &Molecule,
    group: &ElectrophilicGroup,
    library: &Library,
) -> Option<(f64, f64, String)> {
    let by_class = match group.kind {
        ElectrophileKind::Michael {
            acceptor,
            further_acceptors,
            beta_alkyl,
            beta_aryl,
            alpha_alkyl,
            ..
        } => {
            by_acceptor(acceptor) + 4.0 * f64::from(further_acceptors)
                - 4.6 * f64::from(beta_alkyl)
                - by_aryl(acceptor) * f64::from(beta_aryl)
                - 3.7 * f64::from(alpha_alkyl)
        }
        ElectrophileKind::Aldehyde {
            aromatic,
            hammett_sigma,
            ..
        } => {
            if aromatic {
                -19.5 + 3.4 * hammett_sigma
            } else {
                -17.5
            }
        }
        _ => return None,
    };
    Some(match library.electrophilicity(molecule.canonical()) {
        Some(known) => (known.e.value, known.e.sigma, known.e.source.clone()),
        None => (
            by_class,
            SIGMA_BY_CLASS,
            "estimated by class from the electrophilicities table".to_owned(),
        ),
    })
}

/// E of CH2=CH–acceptor.
///
/// # Source
/// The electrophilicities table (Mayr database): 1-phenylpropenone −15.3, butenone −16.8, phenyl
/// vinyl sulfone −18.4, methyl acrylate −18.8, N,N-dimethylacrylamide −23.5, acrolein −15.5 (from
/// memory); acrylonitrile −19.1 and nitroethylene −10 from memory.
fn by_acceptor(acceptor: Acceptor) -> f64 {
    match acceptor {
        Acceptor::Nitro => -10.0,
        Acceptor::Aldehyde => -15.5,
        Acceptor::Ketone => -16.8,
        Acceptor::Sulfone => -18.4,
        Acceptor::Ester => -18.9,
        Acceptor::Nitrile => -19.1,
        Acceptor::Amide => -23.5,
    }
}

/// What a β-aryl group costs: nitrostyrene −13.9 against nitroethylene −10, else cinnamates.
fn by_aryl(acceptor: Acceptor) -> f64 {
    if acceptor == Acceptor::Nitro {
        3.9
    } else {
        5.5
    }
}
