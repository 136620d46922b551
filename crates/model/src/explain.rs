//! Everything about one cell, in numbers and sentences.

mod configuration;
mod fate;
mod products;
mod rates;
mod summary;

pub(crate) use fate::fate;

use enolattice_molecule::{AnionClass, element_symbol};
use enolattice_reagents::{Cation, Library};
use enolattice_units::{LN_10, R_KJ, delta_g_kj_mol, log10_k_at};

use crate::advice::advice;
use crate::balance::{Reached, proton_balance, whole_pot};
use crate::explanation::{CoursePoint, ExplainedSite};
use crate::formation::Pots;
use crate::kinetics::{Kinetics, Nudge};
use crate::march::march;
use crate::network::{Amounts, Network, Species};
use crate::outcome::{Outcome, made_of_losses};
use crate::parameters::Values;
use crate::program::Charge;
use crate::reference::{Course, integrate};
use crate::screen::{Coverage, Spread, cautions_of, coverage, feasibility, over_uncertainty};
use crate::{
    AcidSite, Cell, Contents, Doubt, Draw, Explanation, Model, ModelError, Origin, SiteReasons,
    Term, reasons,
};

/// The stiff reference of a cell at the mean of all parameters, and its network of the reaction.
pub(crate) fn reference(cell: &Cell, values: &Values) -> Result<(Course, Network), ModelError> {
    let charge = Charge::of(cell);
    let [forming] = charge.forming(cell, values, [Nudge::default()]);
    let [reacting] = charge.reacting(cell, values, [Nudge::default()]);
    let forming = charge.forms_first().then_some(&forming);
    let course = integrate(forming, &reacting, charge.start())?;
    Ok((course, reacting))
}

/// The end that the fast solver finds, without a time course, and its network of the reaction.
fn by_fast_solver(cell: &Cell, values: &Values, pots: &Pots) -> (Course, Network) {
    let networks = Charge::of(cell).reacting(cell, values, [Nudge::default()]);
    let [end] = march(&networks, [pots.mean]);
    let [network] = networks;
    let course = Course {
        points: Vec::new(),
        formed: pots.mean,
        end,
    };
    (course, network)
}

/// What the uncertainty of the yield rests on; nothing where it is certain.
fn in_doubt(model: &Model, cell: &Cell) -> Vec<Doubt> {
    const DRAWS: u32 = 512;
    const SEED: u64 = 1;
    let draws: Vec<Draw> = (1..=DRAWS).map(|number| model.draw(SEED, number)).collect();
    match model.yields(cell, &draws) {
        Some(yields) => model.doubts(cell, &draws, &yields),
        None => Vec::new(),
    }
}

/// Explains one cell.
pub(crate) fn explain(
    model: &Model,
    cell: &Cell,
    values: &Values,
    yield_at_least: f64,
) -> Result<Explanation, ModelError> {
    let kinetics = Kinetics::new(
        cell,
        cell.conditions.temperature_c,
        values,
        Nudge::default(),
    );
    let mut explanation = Explanation {
        sites: sites(cell, &kinetics, model.library()),
        cautions: cautions_of(cell),
        hazards: Contents::from(cell).hazards(),
        model: model.fingerprint().to_string(),
        ..Explanation::default()
    };
    deprotonation(&mut explanation, cell, &kinetics);
    match coverage(cell) {
        Coverage::Unknown(reason) => {
            let sentence = format!("not covered by the model: {reason}");
            explanation.summary.push(sentence.clone());
            explanation.limits.push(sentence);
            return Ok(explanation);
        }
        Coverage::Nothing(channel, reason) => {
            for number in [
                &mut explanation.expected_yield,
                &mut explanation.yield_sigma,
                &mut explanation.yield_on_limiting,
                &mut explanation.p_hit,
                &mut explanation.feasibility,
                &mut explanation.selectivity,
            ] {
                *number = Some(0.0);
            }
            explanation.losses.push((channel, 1.0));
            explanation
                .summary
                .push(format!("nothing is to be had: {reason}"));
            explanation.limits.push(reason);
            return Ok(explanation);
        }
        Coverage::Covered => {}
    }
    let pots = Pots::form(cell, values);
    let (centre, uncertain) = over_uncertainty(cell, values, &pots, yield_at_least);
    let (course, network) = match reference(cell, values) {
        Ok(found) => found,
        Err(error) => {
            explanation
                .limits
                .push(format!("{error}; what follows is the fast solver's"));
            by_fast_solver(cell, values, &pots)
        }
    };
    let is_reference = !course.points.is_empty();
    let outcome = Outcome::read(cell, &kinetics, &network, &course.end, &course.formed);
    explanation.expected_yield = Some(uncertain.mean);
    explanation.yield_sigma = Some(uncertain.sigma);
    explanation.p_hit = Some(uncertain.p_hit);
    explanation.doubts = in_doubt(model, cell);
    let limiting = Limiting::of(&kinetics);
    explanation.yield_on_limiting = Some((uncertain.mean / limiting.equiv).min(1.0));
    explanation.limiting_reagent = Some(limiting.reagent.to_owned());
    explanation.feasibility = Some(feasibility(cell, &kinetics));
    explanation.selectivity = Some(outcome.selectivity);
    explanation.reference_yield = is_reference.then_some(outcome.product);
    explanation.fast_yield = Some(centre.outcome.product);
    explanation.enolate_fraction = Some(enolate_fraction(
        &course,
        &network,
        Charge::of(cell).forms_first(),
    ));
    explanation.rates = rates::rates(cell, &network, &course);
    explanation.course = course_points(&course, &network, &outcome);
    product(&mut explanation, cell, outcome.site);
    explanation.products = products::products(
        cell,
        &kinetics,
        &network,
        &course,
        model.library(),
        outcome.site,
    );
    explanation.limits.extend(limits(cell, &outcome));
    explanation.limits.extend(configuration::at_risk(
        cell,
        &kinetics,
        model.library(),
        outcome.site,
    ));
    explanation.limits.push(at_equilibrium(cell, &kinetics));
    explanation.losses = outcome.losses.clone();
    explanation.summary = summary::summary(cell, &kinetics, &network, &outcome, &explanation);
    explanation.advice = advice(model, cell, yield_at_least, uncertain.mean);
    Ok(explanation)
}

/// Carbanion as a share of the substrate when the electrophile comes; where it is there from the
/// beginning, the largest share at any time.
fn enolate_fraction(course: &Course, network: &Network, forms_first: bool) -> f64 {
    let charged = network.charged[0];
    let at_addition = course.formed.carbanions() / charged;
    if forms_first {
        return at_addition.clamp(0.0, 1.0);
    }
    let largest = course
        .points
        .iter()
        .map(|(_, pot)| pot.carbanions())
        .fold(0.0, f64::max);
    (largest / charged).clamp(0.0, 1.0)
}

/// The reagent of which there is least.
struct Limiting {
    reagent: &'static str,
    /// Equivalents on substrate.
    equiv: f64,
}

impl Limiting {
    /// A base that comes back, as in additions, limits nothing.
    fn of(kinetics: &Kinetics<'_>) -> Limiting {
        let conditions = &kinetics.cell.conditions;
        let mut least = Limiting {
            reagent: "substrate",
            equiv: 1.0,
        };
        let base = ("base", conditions.base_equiv);
        let electrophile = ("electrophile", conditions.electrophile_equiv);
        let counted = [
            Some(electrophile),
            (!kinetics.regenerates_base()).then_some(base),
        ];
        for (reagent, equiv) in counted.into_iter().flatten() {
            if equiv < least.equiv {
                least = Limiting { reagent, equiv };
            }
        }
        least
    }
}

fn product(explanation: &mut Explanation, cell: &Cell, site: usize) {
    let Some(product) = cell.pair.by_site.get(site).and_then(Option::as_ref) else {
        return;
    };
    let molecule = &product.product.molecule;
    explanation.product_smiles = Some(molecule.canonical().to_owned());
    explanation.product_formula = Some(molecule.formula().to_owned());
    explanation.product_mass = Some(molecule.exact_mass());
    explanation.condensation_smiles = product
        .dehydrated
        .as_ref()
        .map(|m| m.canonical().to_owned());
}

fn deprotonation(explanation: &mut Explanation, cell: &Cell, kinetics: &Kinetics<'_>) {
    if let Some(site) = cell.substrate.carbon.first() {
        let log10_k = kinetics.pka_base() - kinetics.site_pka(site);
        explanation.log10_k = Some(log10_k);
        explanation.log10_k_sigma = Some(log10_k_sigma(cell));
        explanation.delta_g_deprotonation_kj_mol =
            Some(delta_g_kj_mol(log10_k, cell.conditions.temperature_c));
    }
}

/// Standard uncertainty of what the charge of the first anion adds to a second pKa.
const SECOND_CHARGE_SIGMA: f64 = 2.0;

/// Standard uncertainty of ΔS° of a proton transfer between two acids, J/(mol K): charge and number of
/// molecules stay, solvation of the anions differs (from memory).
const ENTROPY_SIGMA_J: f64 = 15.0;

/// Standard uncertainty of log10 K at the temperature of the reaction.
///
/// `log K(T) = ΔpKa·298.15/T + ΔS°·(1 − 298.15/T)/(R·ln 10)` with ΔS° = 0 ± [`ENTROPY_SIGMA_J`].
fn log10_k_sigma(cell: &Cell) -> f64 {
    let ratio = log10_k_at(1.0, cell.conditions.temperature_c);
    let acidities = Spread::of(cell).acidity * ratio;
    let entropy = ENTROPY_SIGMA_J * 1e-3 / (R_KJ * LN_10);
    acidities.hypot(entropy * (1.0 - ratio))
}

fn sites(cell: &Cell, kinetics: &Kinetics<'_>, library: &Library) -> Vec<ExplainedSite> {
    let medium = &kinetics.medium;
    // contact ion pairs have no scale of free ions to be put on
    let own_scale = match medium.is_paired() && medium.cation != Cation::None {
        true => 0.0,
        false => medium.own_scale(kinetics.values).unwrap_or(0.0),
    };
    let explained = |molecule: &'static str, site: &AcidSite| ExplainedSite {
        molecule,
        atom: site.atom,
        element: element_symbol(site.element),
        hydrogens: site.hydrogens,
        pka_dmso: site.pka_dmso,
        pka_medium: kinetics.pka(site.pka_dmso, site.class) + own_scale,
        sigma: site.sigma,
        origin: site.origin,
        source: site.source.clone(),
        reasons: reasons(site, library),
    };
    let mut sites: Vec<_> = cell
        .substrate
        .sites
        .iter()
        .map(|site| explained("substrate", site))
        .collect();
    sites.extend(second_proton(kinetics, own_scale, library));
    sites.extend(
        cell.electrophile
            .acid
            .iter()
            .map(|site| explained("electrophile", site)),
    );
    if let Some(product) = cell.pair.by_site.iter().flatten().next() {
        sites.extend(
            product
                .carbon
                .iter()
                .map(|site| explained("product", &site.acid)),
        );
        sites.extend(
            product
                .heteroatom
                .iter()
                .map(|site| explained("product", site)),
        );
    }
    let base = &cell.base.record;
    sites.push(ExplainedSite {
        molecule: "base",
        atom: 0,
        element: protonated_element(base.class),
        hydrogens: 1,
        pka_dmso: base.pka_dmso.value,
        pka_medium: kinetics.pka_base() + own_scale,
        sigma: base.pka_dmso.sigma,
        origin: Origin::Measured,
        source: base.pka_dmso.source.clone(),
        reasons: SiteReasons::default(),
    });
    if let Some((acid, class)) = &cell.solvent.record.acid {
        sites.push(ExplainedSite {
            molecule: "solvent",
            atom: 0,
            element: protonated_element(*class),
            hydrogens: 1,
            pka_dmso: acid.value,
            pka_medium: kinetics.pka(acid.value, *class) + own_scale,
            sigma: acid.sigma,
            origin: Origin::Measured,
            source: acid.source.clone(),
            reasons: SiteReasons::default(),
        });
    }
    sites
}

/// The C–H that the substrate's anion loses in its turn, where bases of the trade reach it.
fn second_proton(
    kinetics: &Kinetics<'_>,
    own_scale: f64,
    library: &Library,
) -> Option<ExplainedSite> {
    let (i, pka_dmso) = kinetics.second_site()?;
    let site = &kinetics.cell.substrate.carbon[i].acid;
    let mut reasons = reasons(site, library);
    let charge = pka_dmso - site.pka_dmso;
    if !reasons.terms.is_empty() {
        reasons.terms.push(Term {
            name: "charge of the first anion".to_owned(),
            contribution: charge,
            standard_error: SECOND_CHARGE_SIGMA,
        });
    }
    Some(ExplainedSite {
        molecule: "substrate anion",
        atom: site.atom,
        element: element_symbol(site.element),
        hydrogens: site.hydrogens,
        pka_dmso,
        pka_medium: kinetics.pka(pka_dmso, site.class) + own_scale,
        sigma: site.sigma.hypot(SECOND_CHARGE_SIGMA),
        origin: Origin::Estimated,
        source: format!("the first pKa of the site and {charge:.0} for the charge of the anion"),
        reasons,
    })
}

/// Symbol of the atom that takes the proton of an anion of this class.
fn protonated_element(class: AnionClass) -> &'static str {
    use AnionClass::*;
    match class {
        AmideNitrogen | ImideNitrogen | AzoleNitrogen | ArylNitrogen | AlkylNitrogen
        | SilylNitrogen | Neutral => "N",
        Thiolate => "S",
        Hydride => "H",
        carbon if carbon.is_carbanion() => "C",
        _ => "O",
    }
}

fn course_points(course: &Course, network: &Network, outcome: &Outcome) -> Vec<CoursePoint> {
    let charged = network.charged[0];
    let made = |pot: &Amounts| {
        let made = made_of_losses(pot, charged, outcome.site);
        let listed = outcome.losses.iter();
        listed
            .filter_map(|(channel, _)| made.into_iter().find(|(other, _)| other == channel))
            .collect()
    };
    course
        .points
        .iter()
        .map(|(time_s, pot)| CoursePoint {
            time_s: *time_s,
            substrate: (pot.of(Species::Substrate) + pot.of(Species::HeteroatomAnion)) / charged,
            anions: pot.carbanions() / charged,
            electrophile: pot.of(Species::Electrophile) / charged,
            product: pot.product(outcome.site) / charged,
            losses: made(pot),
        })
        .collect()
}

/// What the proton balance alone, with all base dissolved and no electrophile, makes of the substrate.
fn at_equilibrium(cell: &Cell, kinetics: &Kinetics<'_>) -> String {
    format!(
        "proton balance with all base dissolved, before the electrophile: {:.3} of the substrate is carbanion at equilibrium",
        carbanion_at_equilibrium(kinetics) / cell.conditions.concentration_m
    )
}

/// Carbanion and dianion, mol/L: all forms of the substrate that lack a proton of carbon.
fn carbanion_at_equilibrium(kinetics: &Kinetics<'_>) -> f64 {
    let forms = proton_balance(&whole_pot(kinetics, Reached::BeforeElectrophile));
    // an X–H that goes first leaves an anion of the heteroatom
    let without = 1 + usize::from(kinetics.first_heteroatom().is_some());
    forms[0].free_m.iter().skip(without).sum()
}

fn limits(cell: &Cell, outcome: &Outcome) -> Vec<String> {
    let mut limits = Vec::new();
    if let Some((channel, share)) = outcome.losses.first() {
        limits.push(format!(
            "largest loss: {} ({:.0} % of the substrate)",
            channel.name(),
            share * 100.0
        ));
    }
    for site in cell
        .substrate
        .carbon
        .iter()
        .filter(|site| site.acid.outside)
    {
        limits.push(format!(
            "the pKa of atom {} is outside what the estimate has seen: ± {:.1}",
            site.acid.atom, site.acid.sigma
        ));
    }
    let further = cell
        .electrophile
        .group
        .as_ref()
        .map_or(0, |group| group.further_positions);
    if further > 0 {
        limits.push(
            "the electrophile has further reactive positions; only the first reaction is modelled"
                .to_owned(),
        );
    }
    limits
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::sample::{cell, model};

    /// Where the base is far the stronger, all of the substrate is carbanion, whether or not a second proton could go too; an
    /// X–H that goes first takes the base instead.
    #[test]
    fn carbanion_at_equilibrium_counts_every_form_that_lacks_a_proton_of_carbon() {
        let model = model();
        let values = Values::means();
        let share = |substrate: &str, base: &str| {
            let cell = cell(&model, substrate, base, "CI", "THF");
            let at = cell.conditions.temperature_c;
            let kinetics = Kinetics::new(&cell, at, &values, Nudge::default());
            carbanion_at_equilibrium(&kinetics) / cell.conditions.concentration_m
        };
        // one C–H that a base of the trade reaches; two
        assert!(share("CCOC(=O)Cc1ccccc1", "LDA") > 0.99);
        assert!(share("CC(=O)Cc1ccccc1", "KOtBu") > 0.99);
        assert!(share("CC(=O)CC(C)=O", "NaH") > 0.99);
        // 4'-hydroxyacetophenone: the phenol is the acid
        assert!(share("CC(=O)c1ccc(O)cc1", "K2CO3") < 0.01);
    }
}
