//! Salts and solvates: one molecule with its counter-ions.

mod companions;
mod neutral;

use crate::{Molecule, StructureError, reading};
use companions::Known;

/// What a companion of a molecule is.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum CompanionRole {
    /// An anion.
    Anion,
    /// A cation.
    Cation,
    /// A neutral acid, as in an amine written beside HCl.
    Acid,
    /// Water or solvent of crystallisation.
    Solvent,
}

/// A counter-ion, acid or solvent beside the molecule.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct CounterIon {
    /// Name, for instance `chloride`.
    pub name: &'static str,
    /// What it is.
    pub role: CompanionRole,
    /// How often it is written.
    pub count: u8,
}

/// A molecule as it is supplied.
#[derive(Clone, Debug)]
pub struct Salt {
    /// The molecule. Where counter-ions stand beside it, N–H⁺ has lost its proton and anions of O, S,
    /// N and C have got one; iminium, diazonium, oxonium and quaternary ions stay what they are.
    pub molecule: Molecule,
    /// What stands beside it.
    pub companions: Vec<CounterIon>,
    /// Protons that use up base, mol per mol of molecule: 1 for a hydrochloride, −1 for a hydroxide.
    pub acid_equivalents: f64,
    /// Protons that the molecule has lost already, mol per mol of molecule: 1 for a sodium carboxylate.
    pub deprotonated: f64,
    /// Molar mass of what is weighed, per mol of molecule, g/mol.
    pub molar_mass_g_mol: f64,
}

impl Salt {
    /// What a user must know of the form in which the molecule is supplied; `None` for the molecule
    /// alone.
    pub fn note(&self) -> Option<String> {
        if self.companions.is_empty() {
            return None;
        }
        let names: Vec<String> = self
            .companions
            .iter()
            .map(|companion| match companion.count {
                1 => companion.name.to_owned(),
                n => format!("{n} {}", companion.name),
            })
            .collect();
        let mut note = format!("supplied with {}", names.join(", "));
        if self.acid_equivalents > 0.0 {
            note += &format!(
                "; brings {} mol of acid per mol, which uses up base",
                self.acid_equivalents
            );
        }
        if self.deprotonated > 0.0 {
            note += &format!("; has lost {} proton(s) already", self.deprotonated);
        }
        Some(note)
    }
}

/// Most fragments read.
const MAX_FRAGMENTS: usize = 12;

/// One fragment of the text.
struct Fragment<'a> {
    text: &'a str,
    known: Option<&'static Known>,
    molecule: Option<Molecule>,
}

impl Fragment<'_> {
    fn charge(&self) -> i32 {
        match (&self.molecule, self.known) {
            (Some(molecule), _) => molecule.atoms().iter().map(|a| i32::from(a.charge)).sum(),
            (None, Some(known)) => known.charge(),
            (None, None) => 0,
        }
    }

    fn molar_mass(&self) -> f64 {
        match (&self.molecule, self.known) {
            (Some(molecule), _) => molecule.molar_mass(),
            (None, Some(known)) => known.molar_mass_g_mol,
            (None, None) => 0.0,
        }
    }

    fn is_organic(&self) -> bool {
        self.molecule
            .as_ref()
            .is_some_and(|molecule| molecule.atoms().iter().any(|atom| atom.element == 6))
    }
}

/// Reads a molecule with its counter-ions.
pub(crate) fn read(text: &str) -> Result<Salt, StructureError> {
    let given = text.trim();
    reading::check_text(given)?;
    if !given.contains('.') {
        let molecule = Molecule::parse(given)?;
        return Ok(Salt {
            molar_mass_g_mol: molecule.molar_mass(),
            molecule,
            companions: Vec::new(),
            acid_equivalents: 0.0,
            deprotonated: 0.0,
        });
    }
    let fragments = fragments(given)?;
    check_charge(given, &fragments)?;
    let main = main_fragment(given, &fragments)?;
    assembled(&fragments, main)
}

fn fragments(given: &str) -> Result<Vec<Fragment<'_>>, StructureError> {
    let count = given.split('.').count();
    if count > MAX_FRAGMENTS {
        return Err(StructureError::new(
            format!(
                "{} has {count} fragments, more than the {MAX_FRAGMENTS} that are read",
                reading::quoted(given)
            ),
            "give one molecule with its counter-ions",
        ));
    }
    given
        .split('.')
        .map(|text| {
            if text.is_empty() {
                return Err(StructureError::new(
                    format!("{} has an empty fragment", reading::quoted(given)),
                    "remove the dot that has nothing on one side",
                ));
            }
            if let Some(known) = companions::by_text(text) {
                return Ok(Fragment {
                    text,
                    known: Some(known),
                    molecule: None,
                });
            }
            let molecule = Molecule::parse(text)?;
            Ok(Fragment {
                text,
                known: companions::by_structure(&molecule),
                molecule: Some(molecule),
            })
        })
        .collect()
}

fn check_charge(given: &str, fragments: &[Fragment<'_>]) -> Result<(), StructureError> {
    let sum: i32 = fragments.iter().map(Fragment::charge).sum();
    if sum == 0 {
        return Ok(());
    }
    Err(StructureError::new(
        format!(
            "the charges of {} add up to {sum:+}",
            reading::quoted(given)
        ),
        "write as many counter-ions as balance the charge",
    ))
}

/// The fragment that is no counter-ion; where all might be one, the only organic one.
fn main_fragment(given: &str, fragments: &[Fragment<'_>]) -> Result<usize, StructureError> {
    let unknown = |fragment: &Fragment<'_>| fragment.known.is_none();
    let mut distinct = distinct(fragments, unknown);
    if distinct.is_empty() {
        distinct = self::distinct(fragments, |fragment| fragment.is_organic());
    }
    match distinct[..] {
        [main] => Ok(main),
        [] => Err(StructureError::new(
            format!("{} has no organic molecule", reading::quoted(given)),
            "give the molecule that reacts with its counter-ions",
        )),
        [one, other, ..] => Err(StructureError::new(
            format!(
                "{} is a mixture: neither {} nor {} is a counter-ion known here",
                reading::quoted(given),
                reading::quoted(fragments[one].text),
                reading::quoted(fragments[other].text)
            ),
            "give each molecule in a line of its own",
        )),
    }
}

/// The first fragment of each structure among those wanted.
fn distinct(fragments: &[Fragment<'_>], wanted: impl Fn(&Fragment<'_>) -> bool) -> Vec<usize> {
    let canonical = |index: usize| fragments[index].molecule.as_ref().map(Molecule::canonical);
    let mut found: Vec<usize> = Vec::new();
    for (index, fragment) in fragments.iter().enumerate() {
        let seen = found.iter().any(|f| canonical(*f) == canonical(index));
        if fragment.molecule.is_some() && wanted(fragment) && !seen {
            found.push(index);
        }
    }
    found
}

fn assembled(fragments: &[Fragment<'_>], main: usize) -> Result<Salt, StructureError> {
    let canonical = |fragment: &Fragment<'_>| {
        let molecule = fragment.molecule.as_ref();
        molecule.map(|molecule| molecule.canonical().to_owned())
    };
    let is_main = |fragment: &&Fragment<'_>| canonical(fragment) == canonical(&fragments[main]);
    let copies = fragments.iter().filter(is_main).count() as f64;
    let neutral = neutral::of(fragments[main].text)?;
    let beside = || {
        fragments
            .iter()
            .filter(|f| !is_main(f))
            .filter_map(|f| f.known)
    };
    let mut companions: Vec<CounterIon> = Vec::new();
    for known in beside() {
        match companions.iter_mut().find(|c| c.name == known.name) {
            Some(companion) => companion.count += 1,
            None => companions.push(CounterIon {
                name: known.name,
                role: known.role,
                count: 1,
            }),
        }
    }
    let protons: f64 = beside().map(|known| f64::from(known.protons)).sum();
    Ok(Salt {
        molecule: neutral.molecule,
        companions,
        acid_equivalents: f64::from(neutral.lost) + protons / copies,
        deprotonated: f64::from(neutral.gained),
        molar_mass_g_mol: fragments.iter().map(Fragment::molar_mass).sum::<f64>() / copies,
    })
}
