//! What an acid of a kind can have: an estimate beyond is held there.

use enolattice_molecule::AnionClass;

/// Least and greatest pKa in DMSO of acids that leave an anion of this class, pK units.
///
/// Each lies a little beyond the extremes that are known or extrapolated (all from memory): methane 56 and cyclopentane 59; tricyanomethane
/// −5 and bis(triflyl)methane 2 among C–H acids with nitriles and sulfonyls, nitroform 0, pentacyanocyclopentadiene −11,
/// triacylmethanes and acylpyridinium ions 5 to 10; picric acid −1; tert-butanol 32 and perfluoro-tert-butanol 11; sulfonic acids 1;
/// tetrazoles 8, with nitro about 0; triflimide −12; ammonia 41; phosphazenium ions up to 34.
///
/// A sum of increments knows no such floor: where four groups crowd on one carbon it may run away.
pub(super) fn bounds(class: AnionClass) -> (f64, f64) {
    use AnionClass::*;
    match class {
        Ketone | ArylKetone | Aldehyde | Ester | Amide => (4.0, 42.0),
        BetaDicarbonyl | CyclicBetaDicarbonyl | CyclicDiester => (2.0, 30.0),
        Nitrile | Sulfone => (-6.0, 42.0),
        Nitronate => (-2.0, 30.0),
        Carbanion => (-12.0, 60.0),
        Alkoxide | Hydroxide => (8.0, 34.0),
        Phenoxide => (-2.0, 30.0),
        Carboxylate | Carbonate => (-6.0, 16.0),
        AmideNitrogen | ImideNitrogen => (-12.0, 36.0),
        AzoleNitrogen => (-2.0, 26.0),
        ArylNitrogen => (5.0, 35.0),
        AlkylNitrogen | SilylNitrogen => (15.0, 46.0),
        Thiolate => (0.0, 20.0),
        Neutral => (-12.0, 36.0),
        Hydride | Fluoride => (10.0, 40.0),
    }
}

/// The pKa, held within [`bounds`].
pub(super) fn held(pka: f64, class: AnionClass) -> f64 {
    let (least, most) = bounds(class);
    pka.clamp(least, most)
}

#[cfg(test)]
mod tests {
    use enolattice_molecule::{Molecule, sites};
    use enolattice_reagents::Library;

    use super::*;

    /// No bound cuts off a value that was measured.
    #[test]
    fn every_measured_acid_lies_within_the_bounds() {
        for acidity in Library::builtin().unwrap().acidities() {
            let Some(atom) = acidity.atom else { continue };
            let molecule = Molecule::parse(&acidity.smiles).unwrap();
            let Some(site) = sites(&molecule)
                .into_iter()
                .find(|site| site.equivalent.contains(&atom))
            else {
                continue;
            };
            let (least, most) = bounds(site.class);
            let pka = acidity.pka_dmso.value;
            assert!((least..=most).contains(&pka), "{} {pka}", acidity.smiles);
        }
    }
}
