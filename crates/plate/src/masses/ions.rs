//! Ions of electrospray and their m/z.

use std::fmt;

use enolattice_molecule::Molecule;
use serde::{Deserialize, Serialize};

/// Mass of the electron, u: CODATA 2022.
const ELECTRON_U: f64 = 5.485_799_090_441e-4;
/// ¹H, u: atomic mass evaluation 2012 (Wang et al. 2012, doi:10.1088/1674-1137/36/12/003), as NIST lists it.
const HYDROGEN_U: f64 = 1.007_825_032_23;
/// ²³Na, u; the same source.
const SODIUM_U: f64 = 22.989_769_282_0;
/// ¹⁴N, u; the same source.
const NITROGEN_U: f64 = 14.003_074_004_43;

/// What a molecule becomes in the source.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash, Serialize, Deserialize)]
pub enum IonKind {
    /// `[M+H]+`
    Protonated,
    /// `[M+Na]+`
    Sodiated,
    /// `[M+NH4]+`
    Ammoniated,
    /// `[M-H]-`
    Deprotonated,
    /// A molecule that is a cation itself.
    Cation,
    /// A molecule that is an anion itself.
    Anion,
}

impl IonKind {
    /// Whether the ion is seen in the positive mode.
    pub fn is_positive(self) -> bool {
        !matches!(self, IonKind::Deprotonated | IonKind::Anion)
    }
}

impl fmt::Display for IonKind {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.write_str(match self {
            IonKind::Protonated => "[M+H]+",
            IonKind::Sodiated => "[M+Na]+",
            IonKind::Ammoniated => "[M+NH4]+",
            IonKind::Deprotonated => "[M-H]-",
            IonKind::Cation => "M+",
            IonKind::Anion => "M-",
        })
    }
}

/// An ion with its m/z, the mass of the electron counted.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct Ion {
    /// What it is.
    pub kind: IonKind,
    /// Mass over charge of the monoisotopic ion.
    pub mz: f64,
}

/// The ions of a neutral molecule whatever its groups, or what a charged one is already.
pub(super) fn ions(molecule: &Molecule) -> Vec<Ion> {
    let mass = molecule.exact_mass();
    let charge: i32 = molecule
        .atoms()
        .iter()
        .map(|atom| i32::from(atom.charge))
        .sum();
    if charge != 0 {
        // the mass of a charged molecule is without its electrons already
        let kind = if charge > 0 {
            IonKind::Cation
        } else {
            IonKind::Anion
        };
        let mz = mass / f64::from(charge.abs());
        return vec![Ion { kind, mz }];
    }
    let proton = HYDROGEN_U - ELECTRON_U;
    let mut ions = vec![
        Ion {
            kind: IonKind::Protonated,
            mz: mass + proton,
        },
        Ion {
            kind: IonKind::Sodiated,
            mz: mass + SODIUM_U - ELECTRON_U,
        },
        Ion {
            kind: IonKind::Ammoniated,
            mz: mass + NITROGEN_U + 4.0 * HYDROGEN_U - ELECTRON_U,
        },
    ];
    if molecule.atoms().iter().any(|atom| atom.hydrogens > 0) {
        ions.push(Ion {
            kind: IonKind::Deprotonated,
            mz: mass - proton,
        });
    }
    ions
}
