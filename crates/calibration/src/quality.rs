//! The page on what the model is good for, by class of reaction, kind of base and class of solvent.

use std::collections::BTreeMap;
use std::fmt::Write;

use enolattice_model::Cell;
use enolattice_molecule::{AcylDonor, AnionClass, Donor, ElectrophileKind, recognise};
use enolattice_reagents::BaseKind;
use serde::Deserialize;

use crate::table::rows;
use crate::{practice, reactions};

const NOTES: &str = include_str!("../data/quality_notes.tsv");

/// Checks below which a share says little.
const FEW: usize = 8;
/// Share of checks met from which a class is trusted, and below which it is not.
const TRUSTED: f64 = 0.85;
const DISTRUSTED: f64 = 0.65;

/// Where a reaction is counted.
#[derive(Clone, Debug, Default, PartialEq, Eq)]
pub struct Groups {
    /// Class of reaction.
    pub class: &'static str,
    /// Kind of base.
    pub base: &'static str,
    /// Class of solvent.
    pub solvent: &'static str,
}

impl Groups {
    /// The groups of a cell.
    pub(crate) fn of(cell: &Cell) -> Groups {
        Groups {
            class: class(cell),
            base: kind_of_base(cell.base.record.kind),
            solvent: cell.solvent.record.class.name(),
        }
    }
}

/// The class of reaction by what the electrophile is, and for carbonyl compounds by what the carbanion is.
fn class(cell: &Cell) -> &'static str {
    let Ok(group) = recognise(&cell.electrophile.molecule) else {
        return "not covered";
    };
    match group.kind {
        ElectrophileKind::Alkyl { .. } => "alkylation",
        ElectrophileKind::Acyl { donor, .. } => match donor {
            AcylDonor::Ester
            | AcylDonor::TertAlkylEster
            | AcylDonor::Formate
            | AcylDonor::Oxalate => "Claisen condensation",
            _ => "acylation",
        },
        ElectrophileKind::Aldehyde { .. } | ElectrophileKind::Ketone { .. } => {
            let mut sites = cell.substrate.sites.iter();
            match sites
                .find(|site| site.element == 6)
                .map(|s| (s.class, s.pka_dmso))
            {
                Some((AnionClass::Nitronate, _)) => "nitroaldol reaction",
                Some((_, pka)) if pka < DOUBLY_ACTIVATED_PKA => "Knoevenagel condensation",
                _ => "aldol reaction",
            }
        }
        ElectrophileKind::Imine { .. } => "Mannich reaction",
        ElectrophileKind::Michael { .. } => "Michael addition",
        ElectrophileKind::Ring { .. } => "opening of epoxides and aziridines",
        ElectrophileKind::Aryl { .. } => "SNAr",
        ElectrophileKind::Cumulene { .. } => "addition to CO2, isocyanates and their kin",
        ElectrophileKind::Silyl { .. } => "silylation",
        ElectrophileKind::Transfer { donor } => match donor {
            Donor::Halogen(..) => "halogenation",
            Donor::Chalcogen(..) => "sulfenylation and selenylation",
            _ => "amination, diazo transfer and their kin",
        },
        ElectrophileKind::Inert { .. } => "not covered",
    }
}

/// Acids with two activating groups are stronger than this, pKa (DMSO).
const DOUBLY_ACTIVATED_PKA: f64 = 18.5;

fn kind_of_base(kind: BaseKind) -> &'static str {
    match kind {
        BaseKind::Amide => "metal amides",
        BaseKind::Alkoxide => "alkoxides",
        BaseKind::Hydroxide => "hydroxides",
        BaseKind::Hydride => "hydrides",
        BaseKind::Carbonate => "carbonates and phosphates",
        BaseKind::Fluoride => "fluorides",
        BaseKind::Carboxylate => "carboxylates",
        BaseKind::Amine => "amines, amidines, phosphazenes",
        BaseKind::Organolithium => "alkyllithiums",
        BaseKind::Grignard => "Grignard reagents",
    }
}

/// What was counted in a group.
#[derive(Clone, Debug, Default)]
pub struct Count {
    /// Common reactions, and those whose expected bounds are met.
    pub common: (usize, usize),
    /// Published reactions, those covered, those with the right product, those thought possible too.
    pub published: [usize; 4],
    /// Differences of the expected from the published yield where one was published, per cent.
    pub errors: Vec<f64>,
}

impl Count {
    /// Checks: common reactions and covered published ones.
    pub fn checks(&self) -> usize {
        self.common.0 + self.published[1]
    }

    /// Share of the checks that are met.
    pub fn met(&self) -> f64 {
        (self.common.1 + self.published[3]) as f64 / self.checks() as f64
    }

    fn advice(&self) -> &'static str {
        match self.checks() {
            0 => "no check: do not trust",
            few if few < FEW => "few checks: check",
            _ if self.met() >= TRUSTED => "trust",
            _ if self.met() >= DISTRUSTED => "check",
            _ => "do not trust",
        }
    }

    fn typical_error(&self) -> String {
        let mut sizes: Vec<f64> = self.errors.iter().map(|error| error.abs()).collect();
        sizes.sort_by(f64::total_cmp);
        match sizes.get(sizes.len() / 2) {
            Some(median) => format!("{median:.0} ({})", sizes.len()),
            None => String::new(),
        }
    }
}

/// What a reaction is counted by.
pub type By = fn(&Groups) -> &'static str;

/// Counts of groups by name.
pub type Counts = BTreeMap<&'static str, Count>;

/// Counts by what `group` says of a reaction.
pub fn counts(common: &[practice::Judged], published: &[reactions::Judged], group: By) -> Counts {
    let mut counts = Counts::new();
    for one in common {
        let count = counts.entry(group(&one.groups)).or_default();
        count.common.0 += 1;
        count.common.1 += usize::from(one.is_met);
    }
    for one in published {
        let Some(groups) = &one.groups else {
            continue;
        };
        let count = counts.entry(group(groups)).or_default();
        count.published[0] += 1;
        if one.not_covered.is_some() {
            continue;
        }
        count.published[1] += 1;
        count.published[2] += usize::from(one.right_product);
        count.published[3] += usize::from(one.right_product && one.is_possible());
        if let Some(reported) = one.reported_yield {
            count.errors.push(100.0 * (one.expected_yield - reported));
        }
    }
    counts
}

/// A sentence on a group, in plain words.
#[derive(Deserialize)]
struct Note {
    group: String,
    note: String,
}

/// The page, from common and published reactions.
///
/// # Errors
/// A sentence that names a row of the notes which cannot be read.
pub fn page(
    common: &[practice::Judged],
    published: &[reactions::Judged],
) -> Result<String, String> {
    let notes: Vec<Note> = rows(NOTES)?;
    let mut page = format!(
        "# What the model is good for\n\n\
         Written by `cargo run -p enolattice-calibration -- rates` from the figures of [rates.md](rates.md); do not edit. The words on each class \
         stand in `crates/calibration/data/quality_notes.tsv`.\n\n\
         Two kinds of checks are counted. *Common reactions*: what texts and collections of procedures lead one to expect, as generous bounds of the \
         yield; the model was developed with these at hand. *Published reactions*: from patents, with conditions that are partly guessed; \
         one is met where the model draws the product that was reported and expects {:.0} % of it or more. *Typical error*: median difference of the expected from the published \
         yield, in points of per cent (number of published yields); chemists report reactions that worked, so that the model stands below them.\n\n\
         *Advice*: trust, where {:.0} % of at least {FEW} checks are met; do not trust, where fewer than {:.0} % are; else check: run one or two \
         cells first, and read what `explain` names as the doubt. Even where the advice is trust, a single yield is no promise: read the order of cells and p_hit, not the second digit of a yield.\n\n\
         ## In short\n\n{IN_SHORT}",
        100.0 * reactions::POSSIBLE,
        100.0 * TRUSTED,
        100.0 * DISTRUSTED,
    );
    let parts: [(&str, &str, By); 3] = [
        ("By class of reaction", "class", |groups| groups.class),
        ("By kind of base", "base", |groups| groups.base),
        ("By class of solvent", "solvent", |groups| groups.solvent),
    ];
    for (title, name, group) in parts {
        let counts = counts(common, published, group);
        part(&mut page, title, name, &counts, &notes);
    }
    Ok(page)
}

fn part(page: &mut String, title: &str, name: &str, counts: &Counts, notes: &[Note]) {
    let _ = writeln!(
        page,
        "\n## {title}\n\n\
         | {name} | common reactions met | published, not covered | right product | product right and yield possible | typical error | advice |\n\
         | --- | --- | --- | --- | --- | --- | --- |"
    );
    for (group, count) in counts {
        let [all, covered, right, possible] = count.published;
        let _ = writeln!(
            page,
            "| {group} | {} of {} | {all}, {} | {right} of {covered} | {possible} of {covered} | {} | {} |",
            count.common.1,
            count.common.0,
            all - covered,
            count.typical_error(),
            count.advice()
        );
    }
    let of_part = notes
        .iter()
        .filter(|note| counts.contains_key(&*note.group));
    for (i, note) in of_part.enumerate() {
        let gap = if i == 0 { "\n" } else { "" };
        let _ = writeln!(page, "{gap}- **{}**: {}", note.group, note.note);
    }
}

const IN_SHORT: &str = "\
- Good for: which base is strong enough and in which solvent, which site reacts, which reagents destroy each other, what comes to stand in the way \
(self-condensation, over-alkylation, elimination, attack of the base on the electrophile), and the order of many cells of one class.\n\
- Weak: yields to better than a quarter of the scale, reactions that need a catalyst or an intermediate which was not charged (enamines made first, \
silyl enol ethers, palladium, enols in acid), slow condensations that a chemist drives by distilling off water or alcohol, dissolving \
of salts, anything that depends on stirring, and stereochemistry, of which it says nothing.\n\
- p_hit says how sure the model is of itself, not how sure one may be of the model: [uncertainty.md](uncertainty.md) has how well the screen's value \
agrees with joint draws of all that is uncertain.\n";
