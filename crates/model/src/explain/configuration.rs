//! Stereocentres whose C–H the base takes.

use enolattice_molecule::Molecule;
use enolattice_reagents::Library;

use crate::acidity::acid_sites;
use crate::kinetics::Kinetics;
use crate::{AcidSite, Cell};

/// A C–H this many pK units weaker than the acid of the base still exchanges its proton within hours (a working rule, from
/// memory: ketones racemise with amines and alkoxides).
const REACHED_PK: f64 = 8.0;

/// A sentence for each stereocentre of the substrate and of the wanted product, as far as the SMILES give them, that loses its
/// configuration by way of its carbanion.
pub(super) fn at_risk(
    cell: &Cell,
    kinetics: &Kinetics<'_>,
    library: &Library,
    site: usize,
) -> Vec<String> {
    let substrate = &cell.substrate;
    let mut sentences = in_molecule("substrate", &substrate.molecule, &substrate.sites, kinetics);
    let product = cell.pair.by_site.get(site).and_then(Option::as_ref);
    if let Some(made) = product {
        let molecule = &made.product.molecule;
        let sites = acid_sites(molecule, library);
        sentences.extend(in_molecule("product", molecule, &sites, kinetics));
    }
    sentences
}

fn in_molecule(
    what: &str,
    molecule: &Molecule,
    sites: &[AcidSite],
    kinetics: &Kinetics<'_>,
) -> Vec<String> {
    const CARBON: u8 = 6;
    let is_reached = |site: &&AcidSite| {
        site.element == CARBON
            && molecule.has_configuration(site.atom)
            && kinetics.pka(site.pka_dmso, site.class) < kinetics.pka_base() + REACHED_PK
    };
    let reached = sites.iter().filter(is_reached);
    reached
        .map(|site| {
            format!(
                "the stereocentre at atom {} of the {what} is a C–H that the base takes (pKa {:.1} in the medium): it loses its configuration",
                site.atom,
                kinetics.pka(site.pka_dmso, site.class)
            )
        })
        .collect()
}

#[cfg(test)]
mod tests {
    use crate::sample::{cell, model};

    /// An α-aryl ketone racemises with alkoxide; without a configuration given, with the centre in β and with an ester and a
    /// weak amine there is nothing to tell.
    #[test]
    fn acidic_stereocentres_are_named_and_others_are_not() {
        let model = model();
        for (substrate, base, named) in [
            ("CCC(=O)[C@H](C)c1ccccc1", "NaOEt", true),
            ("CCC(=O)C(C)c1ccccc1", "NaOEt", false),
            ("CC(=O)C[C@H](C)CC", "NaOEt", false),
            ("CCOC(=O)[C@H](C)CC", "Et3N", false),
        ] {
            let cell = cell(&model, substrate, base, "CI", "EtOH");
            let told = model.explain(&cell, 0.5).expect("explains");
            let of_substrate = |s: &&String| s.contains("stereocentre") && s.contains("substrate");
            let found = told.limits.iter().find(of_substrate);
            assert_eq!(found.is_some(), named, "{substrate}: {:?}", told.limits);
        }
    }
}
