//! Which group of a molecule reacts: the order of reactivity.

use super::aromatic::Readiness;
use super::imine::Reactivity;
use super::{
    ElectrophileKind, ElectrophilicGroup, acyl, alkylating, aromatic, carbonyl, conjugate,
    cumulene, imine, silyl, strained, transfer, uncovered,
};
use crate::Molecule;

type Found = Result<Option<ElectrophilicGroup>, String>;

/// Looks for groups from the fastest to the slowest; the rest of the molecule is spectator.
pub(super) fn first_to_react(molecule: &Molecule) -> Result<ElectrophilicGroup, String> {
    for stage in [at_once, fast, slow, sluggish] {
        if let Some(group) = stage(molecule)? {
            return Ok(group);
        }
    }
    Err(
        "it has no electrophilic group known here (alkyl halide or sulfonate, activated aryl \
         halide, epoxide or aziridine, Michael acceptor, carbonyl or imine, acyl, sulfonyl or \
         silyl donor, heterocumulene, halogen, sulfur, selenium, nitrogen or oxygen transfer)"
            .to_owned(),
    )
}

/// Transfer reagents, heterocumulenes, acid chlorides and their kin, silyl halides.
fn at_once(molecule: &Molecule) -> Found {
    if let Some(reason) = uncovered::bifunctional(molecule) {
        return Err(reason.to_owned());
    }
    if let Some(group) = transfer::fast(molecule).or_else(|| cumulene::find(molecule)) {
        return Ok(Some(group));
    }
    if let Some(group) = acyl::find(molecule, acyl::FAST)? {
        return Ok(Some(group));
    }
    Ok(silyl::find(molecule))
}

/// Activated imines; then alkylating groups, Michael acceptors and aldehydes, of which none is
/// clearly before the others; then strained rings.
fn fast(molecule: &Molecule) -> Found {
    if let Some(reason) = uncovered::reactive(molecule) {
        return Err(reason.to_owned());
    }
    if let Some(group) = imine::find(molecule, Reactivity::Activated) {
        return Ok(Some(group));
    }
    let ring = strained::find(molecule);
    let alkylating = alkylating::find(molecule)?;
    if alkylating.is_some() && !matches!(ring, Ok(None)) {
        return Err(both("an alkylating group", "a three-membered ring"));
    }
    let found = [
        ("an alkylating group", alkylating),
        ("a Michael acceptor", conjugate::find(molecule)?),
        ("an aldehyde", carbonyl::aldehyde(molecule)),
    ];
    let mut groups = found
        .into_iter()
        .filter_map(|(name, group)| Some((name, group?)));
    match (groups.next(), groups.next()) {
        (Some((one, _)), Some((other, _))) => Err(both(one, other)),
        (Some((_, group)), None) => Ok(Some(group)),
        _ => match ring? {
            Some(_) if carbonyl::ketone(molecule).is_some() => {
                Err(both("a three-membered ring", "a ketone"))
            }
            group => Ok(group),
        },
    }
}

/// Activated ketones and esters, disulfides, activated aryl halides, ketones, aldimines, esters, amides.
fn slow(molecule: &Molecule) -> Found {
    let is_activated = |group: &ElectrophilicGroup| {
        matches!(
            group.kind,
            ElectrophileKind::Ketone {
                activated: true,
                ..
            }
        )
    };
    if let Some(group) = carbonyl::ketone(molecule).filter(is_activated) {
        return Ok(Some(group));
    }
    if let Some(group) = acyl::find(molecule, acyl::ACTIVE)? {
        return Ok(Some(group));
    }
    if let Some(group) = transfer::slow(molecule)? {
        return Ok(Some(group));
    }
    let aryl = aromatic::find(molecule);
    if let Some((Readiness::Strong, group)) = aryl {
        return Ok(Some(group));
    }
    let carbonyl = at_carbonyl(molecule);
    match aryl {
        Some((Readiness::Medium, group)) => {
            let is_rival = match &carbonyl {
                Ok(None) => false,
                Ok(Some(group)) => !acyl::is_late(group),
                Err(_) => true,
            };
            if is_rival {
                return Err(both(
                    "an aryl halide activated by one ring nitrogen",
                    "a carbonyl group or imine",
                ));
            }
            Ok(Some(group))
        }
        Some((_, group)) => Ok(carbonyl?.or(Some(group))),
        None => carbonyl,
    }
}

fn at_carbonyl(molecule: &Molecule) -> Found {
    let first =
        carbonyl::ketone(molecule).or_else(|| imine::find(molecule, Reactivity::PlainAldimine));
    match first {
        Some(group) => Ok(Some(group)),
        None => acyl::find(molecule, acyl::SLOW),
    }
}

/// Ketimines and phosphates; alkyl fluorides and halides that do not react, where nothing else is there
/// that might.
fn sluggish(molecule: &Molecule) -> Found {
    if let Some(group) =
        imine::find(molecule, Reactivity::PlainKetimine).or_else(|| alkylating::phosphate(molecule))
    {
        return Ok(Some(group));
    }
    if let Some(reason) = uncovered::sluggish(molecule) {
        return Err(reason.to_owned());
    }
    Ok(alkylating::fluoride(molecule).or_else(|| alkylating::inert(molecule)))
}

fn both(one: &str, other: &str) -> String {
    format!("it has {one} and {other}: which of them reacts is not covered")
}
