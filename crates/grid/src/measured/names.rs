//! What a word of a row means: a substance of the campaign or of the library, by name or structure.

use std::collections::{HashMap, HashSet};

use enolattice_molecule::{Molecule, Salt};
use enolattice_reagents::{Library, ReagentKind};

use crate::campaign::Checked;
use crate::keys::nearest;
use crate::resolve::{self, NO_ADDITIVE, Structures};
use crate::{AxisSpec, CampaignSpec, FaultCode};

/// Names of the campaign with which an unknown one is compared; more would take too long.
const MOST_COMPARED: usize = 1_000;

/// What a word means.
#[derive(Clone, Debug)]
pub(super) enum Meaning {
    /// A substance, by what tells it from all others: its canonical SMILES or its name in the library.
    One(String),
    /// A substance of the campaign that is itself at fault, which is told where it stands.
    AtFault,
    /// Nothing that can be known; why, and what to do.
    None {
        code: FaultCode,
        reason: String,
        remedy: String,
    },
}

/// An answer for any word.
type OfWord<'c, T> = Box<dyn Fn(&str) -> T + 'c>;

/// Names of one axis, and what they mean.
pub(super) struct Names<'c> {
    /// Names that the campaign gives, in small letters, with what they stand for; none where they
    /// stand for several structures.
    given: HashMap<String, Option<String>>,
    /// Every word by which the campaign names a value of the axis.
    written: HashSet<&'c str>,
    /// What a word means beyond the campaign.
    elsewhere: OfWord<'c, Option<String>>,
    /// What to say of a word that means nothing.
    unknown: OfWord<'c, Meaning>,
    looked_up: HashMap<String, Meaning>,
}

impl<'c> Names<'c> {
    /// What a word means.
    pub(super) fn meaning(&mut self, word: &str) -> Meaning {
        if let Some(known) = self.looked_up.get(word) {
            return known.clone();
        }
        let meaning = self.look_up(word);
        self.looked_up.insert(word.to_owned(), meaning.clone());
        meaning
    }

    fn look_up(&self, word: &str) -> Meaning {
        match self.given.get(&word.to_lowercase()) {
            Some(Some(known)) => return Meaning::One(known.clone()),
            Some(None) => {
                return Meaning::None {
                    code: FaultCode::ValueUnknown,
                    reason: "the campaign has several structures of this name".to_owned(),
                    remedy: "give its SMILES".to_owned(),
                };
            }
            None => {}
        }
        match (self.elsewhere)(word) {
            Some(known) => Meaning::One(known),
            None if self.written.contains(word) => Meaning::AtFault,
            None => (self.unknown)(word),
        }
    }

    pub(super) fn of_substrates(spec: &'c CampaignSpec, axes: &'c Checked<'_>) -> Names<'c> {
        let named = axes.substrates.iter().map(|s| (s.name.as_str(), &s.salt));
        let written = spec.substrates.iter();
        Names {
            given: structures(named.clone()),
            written: written
                .flat_map(|s| [s.name.as_str(), s.smiles.as_str()])
                .collect(),
            elsewhere: Box::new(structure),
            unknown: Box::new(move |word| {
                let known = named.clone().map(|(name, _)| name).take(MOST_COMPARED);
                Meaning::None {
                    code: FaultCode::ReagentUnknown,
                    reason: "the campaign has no substrate of this name, and it is no SMILES"
                        .to_owned(),
                    remedy: match nearest(word, known) {
                        Some(near) => format!("did you mean `{near}`?"),
                        None => "give its name in the campaign, or its SMILES".to_owned(),
                    },
                }
            }),
            looked_up: HashMap::new(),
        }
    }

    pub(super) fn of_electrophiles(
        spec: &'c CampaignSpec,
        axes: &'c Checked<'_>,
        library: &'c Library,
    ) -> Names<'c> {
        let named = axes.reagents.electrophiles.iter();
        let named = named.map(|e| (e.name.as_str(), &e.salt));
        let of_library = |word: &str| structure(&library.electrophile(word)?.smiles);
        Names {
            given: structures(named),
            elsewhere: Box::new(move |word| of_library(word).or_else(|| structure(word))),
            ..Names::of_axis(
                &spec.electrophiles,
                ReagentKind::Electrophile,
                library,
                |_, _| None,
            )
        }
    }

    pub(super) fn of_bases(spec: &'c CampaignSpec, library: &'c Library) -> Names<'c> {
        let structures = Structures::of(library.bases(), |base| &base.smiles);
        Names::of_axis(
            &spec.bases,
            ReagentKind::Base,
            library,
            move |name, smiles| {
                let known = library.base(name).or_else(|| structures.find(smiles))?;
                Some(known.name.clone())
            },
        )
    }

    pub(super) fn of_solvents(spec: &'c CampaignSpec, library: &'c Library) -> Names<'c> {
        let structures = Structures::of(library.solvents(), |solvent| &solvent.smiles);
        let find = move |name: &str, smiles: &str| {
            let pure = library.solvent(name).or_else(|| structures.find(smiles));
            if let Some(known) = pure {
                return Some(known.name.clone());
            }
            let mixture = resolve::is_mixture(name).then(|| library.solvent_or_mixture(name));
            Some(mixture?.ok()?.name)
        };
        let mut names = Names::of_axis(&spec.solvents, ReagentKind::Solvent, library, find);
        let pure = names.unknown;
        names.unknown = Box::new(move |word| {
            let mixture = resolve::is_mixture(word).then(|| library.solvent_or_mixture(word));
            match mixture {
                Some(Err(error)) => {
                    let (code, reason, remedy) = resolve::fault_of_mixture(&error);
                    Meaning::None {
                        code,
                        reason,
                        remedy,
                    }
                }
                _ => pure(word),
            }
        });
        names
    }

    pub(super) fn of_additives(spec: &'c CampaignSpec, library: &'c Library) -> Names<'c> {
        let structures = Structures::of(library.additives(), |additive| &additive.smiles);
        let find = move |name: &str, smiles: &str| {
            let known = library
                .additive(name)
                .or_else(|| structures.find(smiles))
                .map(|known| known.name.clone());
            let is_none = name.eq_ignore_ascii_case(NO_ADDITIVE);
            known.or_else(|| is_none.then(|| NO_ADDITIVE.to_owned()))
        };
        let mut names = Names::of_axis(&spec.additives, ReagentKind::Additive, library, find);
        let one = names.unknown;
        names.unknown = Box::new(move |word| match resolve::are_additives(word, library) {
            true => Meaning::None {
                code: FaultCode::NotYetAllowed,
                reason: "two additives in one cell are not computed yet".to_owned(),
                remedy: "leave the row out".to_owned(),
            },
            false => one(word),
        });
        names
    }

    /// Names of an axis whose values stand in the library; `find` takes a name and a SMILES.
    fn of_axis(
        axis: &'c AxisSpec,
        kind: ReagentKind,
        library: &'c Library,
        find: impl Fn(&str, &str) -> Option<String> + 'c,
    ) -> Names<'c> {
        let entries = axis.entries.iter();
        let named = entries.clone().filter(|entry| !entry.name.is_empty());
        let known = named.filter_map(|entry| {
            let known = find(&entry.name, &entry.smiles)?;
            Some((entry.name.to_lowercase(), Some(known)))
        });
        Names {
            given: known.collect(),
            written: entries
                .flat_map(|entry| [entry.name.as_str(), entry.smiles.as_str()])
                .collect(),
            elsewhere: Box::new(move |word| find(word, word)),
            unknown: Box::new(move |word| {
                let given = axis.entries.iter().map(|entry| entry.name.as_str());
                let near = nearest(word, given.take(MOST_COMPARED));
                let name = kind.name();
                Meaning::None {
                    code: FaultCode::ReagentUnknown,
                    reason: format!(
                        "neither the campaign nor the library has {} of this name",
                        with_article(name)
                    ),
                    remedy: match near.or_else(|| library.suggest(kind, word)) {
                        Some(near) => format!("did you mean `{near}`?"),
                        None => format!("`enolattice reagents` lists every {name} of the library"),
                    },
                }
            }),
            looked_up: HashMap::new(),
        }
    }
}

/// A noun with its article.
fn with_article(noun: &str) -> String {
    let article = if noun.starts_with(['a', 'e', 'i', 'o', 'u']) {
        "an"
    } else {
        "a"
    };
    format!("{article} {noun}")
}

/// Structures by their names in small letters; none where a name has several.
fn structures<'s>(
    named: impl Iterator<Item = (&'s str, &'s Salt)>,
) -> HashMap<String, Option<String>> {
    let mut by_name: HashMap<String, Option<String>> = HashMap::new();
    for (name, salt) in named {
        let structure = Some(salt.molecule.canonical().to_owned());
        by_name
            .entry(name.to_lowercase())
            .and_modify(|known| {
                if *known != structure {
                    *known = None;
                }
            })
            .or_insert(structure);
    }
    by_name
}

/// The canonical form of a SMILES, without counter-ions.
fn structure(smiles: &str) -> Option<String> {
    let salt = Molecule::parse_salt(smiles).ok()?;
    Some(salt.molecule.canonical().to_owned())
}
