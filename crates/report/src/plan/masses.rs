//! What the LC-MS is to look for in each well.

use enolattice_plate::{ClashKind, IonKind, Plan, SpeciesMasses, WellMasses};
use maud::{Markup, html};

use crate::numbers::percent;
use crate::page::boxed;

/// Name of the wanted product among the species of a well.
const WANTED: &str = "wanted product";

/// One row a well: the wanted product with its ions, what else may be there, what mass alone does not tell apart.
pub(super) fn masses(plan: &Plan) -> Markup {
    let many = plan.plates.len() > 1;
    let table = html! {
        table.data.long data-tools="" {
            thead {
                tr {
                    th scope="col" { "well" } th scope="col" { "wanted product" } th.num scope="col" { "mass, Da" }
                    th.num scope="col" { "[M+H]+" } th.num scope="col" { "[M+Na]+" } th.num scope="col" { "[M\u{2212}H]\u{2212}" }
                    th scope="col" { "also there" } th scope="col" { "not told apart by mass" }
                }
            }
            tbody {
                @for (at, (plate, well)) in plan.wells().enumerate().filter(|(_, (_, well))| !well.masses.species.is_empty()) {
                    @let wanted = well.masses.species.iter().find(|species| species.name == WANTED);
                    tr {
                        td data-v=(at) { strong { (well.well) } @if many { span.n { " " (plate.name) } } }
                        @if let Some(wanted) = wanted {
                            td { (wanted.formula) @if let Some(other) = &wanted.detection.other_method { span.words { (other) } } }
                            td.num { (format!("{:.4}", wanted.monoisotopic_da)) }
                            (ion(wanted, IonKind::Protonated)) (ion(wanted, IonKind::Sodiated)) (ion(wanted, IonKind::Deprotonated))
                        } @else {
                            td { "none" } td {} td {} td {} td {}
                        }
                        td.wide { (others(&well.masses)) }
                        td { (clashes(&well.masses)) }
                    }
                }
            }
        }
    };
    html! {
        p.aside { "Monoisotopic masses; the mass of the electron is counted in m/z. Adducts and isotope patterns of all species stand in the file of masses." }
        (boxed("Masses", table))
    }
}

fn ion(species: &SpeciesMasses, kind: IonKind) -> Markup {
    let found = species.ions.iter().find(|ion| ion.kind == kind);
    html! { td.num { @if let Some(ion) = found { (format!("{:.4}", ion.mz)) } @else { "—" } } }
}

fn others(masses: &WellMasses) -> Markup {
    let others = masses
        .species
        .iter()
        .filter(|species| species.name != WANTED);
    html! {
        @for (i, species) in others.enumerate() {
            @if i > 0 { "; " }
            (species.name) " " (format!("{:.4}", species.monoisotopic_da))
            @if species.share > 0.0 { " (" (percent(Some(species.share))) ")" }
        }
    }
}

fn clashes(masses: &WellMasses) -> Markup {
    let name = |at: usize| {
        masses
            .species
            .get(at)
            .map_or("", |species| species.name.as_str())
    };
    html! {
        @if masses.clashes.is_empty() { "—" }
        @for (i, clash) in masses.clashes.iter().enumerate() {
            @if i > 0 { "; " }
            (name(clash.one)) " and " (name(clash.other))
            @match clash.kind {
                ClashKind::SameCompound => " (same compound)",
                ClashKind::SameFormula => " (same formula)",
                ClashKind::SameMz { difference_ppm, .. } => { " (" (format!("{difference_ppm:.1}")) " ppm)" }
            }
        }
    }
}
