//! Prints one cell.
use enolattice_model::*;
use enolattice_molecule::Molecule;
use enolattice_reagents::Library;
use std::sync::Arc;
fn main() {
    let a: Vec<String> = std::env::args().collect();
    let lib = Arc::new(Library::builtin().unwrap());
    let m = Model::new(lib.clone());
    let f = |i: usize, d: f64| a.get(i).map_or(d, |s| s.parse().unwrap());
    let s = m.substrate(&a[1], Molecule::parse(&a[1]).unwrap(), None);
    let e = m.electrophile(&a[3], Molecule::parse(&a[3]).unwrap());
    let pair = m.pair(&s, &e);
    let c = Cell {
        pair: Arc::new(pair),
        substrate: Arc::new(s),
        electrophile: Arc::new(e),
        base: Arc::new(m.base(lib.base(&a[2]).unwrap())),
        solvent: Arc::new(m.solvent(lib.solvent(&a[4]).unwrap())),
        conditions: Conditions {
            temperature_c: f(5, 25.0),
            formation_temperature_c: f(6, f(5, 25.0)),
            base_equiv: f(7, 1.1),
            electrophile_equiv: f(8, 1.1),
            concentration_m: 0.2,
            time_h: f(9, 16.0),
            dosing_min: 10.0,
            addition: None,
        },
    };
    let x = m.explain(&c, 0.5).unwrap();
    println!(
        "{:#?}",
        Explanation {
            cautions: vec![],
            ..x.clone()
        }
        .course
    );
    println!(
        "yield {:?} sigma {:?} ref {:?} fast {:?} p {:?} feas {:?} sel {:?} enolate {:?} logK {:?}",
        x.expected_yield,
        x.yield_sigma,
        x.reference_yield,
        x.fast_yield,
        x.p_hit,
        x.feasibility,
        x.selectivity,
        x.enolate_fraction,
        x.log10_k
    );
    for s in &x.sites {
        println!(
            "{} {}{} H{} dmso {:.1} medium {:.1} ± {:.1} {:?}",
            s.molecule, s.element, s.atom, s.hydrogens, s.pka_dmso, s.pka_medium, s.sigma, s.origin
        );
    }
    for r in &x.rates {
        println!("{:70} {:.2}", r.step, r.log10_k);
    }
    println!(
        "L {:?}\n{:?}\n{:?} {:?}",
        x.losses, x.limits, x.product_smiles, x.advice
    );
}
