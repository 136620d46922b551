//! The worked examples of `docs/worked-examples.md`, by plain arithmetic, against the model.
//!
//! Nothing here comes from the model but what it says in the end: constants are those that the page names.

use std::sync::Arc;

use enolattice_model::{Cell, Conditions, Explanation, Model};
use enolattice_molecule::Molecule;
use enolattice_reagents::Library;

/// Gas constant, J/(mol K), and kB/h, 1/(K s): CODATA 2018.
const R: f64 = 8.314462618;
const KB_OVER_H: f64 = 2.083661912e10;

fn kelvin(celsius: f64) -> f64 {
    celsius + 273.15
}

/// log10 k at another temperature after Eyring, from ΔS‡ in cal/(mol K).
fn at(log10_k: f64, from_c: f64, to_c: f64, entropy_cal: f64) -> f64 {
    let (t0, t1) = (kelvin(from_c), kelvin(to_c));
    let free_energy = R * t0 * std::f64::consts::LN_10 * ((KB_OVER_H * t0).log10() - log10_k);
    let enthalpy = free_energy + t0 * entropy_cal * 4.184;
    log10_k + (t1 / t0).log10() - enthalpy / (R * std::f64::consts::LN_10) * (1.0 / t1 - 1.0 / t0)
}

struct Reagents {
    substrate: &'static str,
    base: &'static str,
    electrophile: &'static str,
    solvent: &'static str,
}

fn explained(reagents: &Reagents, conditions: Conditions) -> Explanation {
    let model = Model::new(Arc::new(Library::builtin().unwrap()));
    let library = model.library();
    let molecule = |smiles: &str| Molecule::parse(smiles).unwrap();
    let substrate = model.substrate("substrate", molecule(reagents.substrate), None);
    let electrophile = model.electrophile("electrophile", molecule(reagents.electrophile));
    let cell = Cell {
        pair: Arc::new(model.pair(&substrate, &electrophile)),
        substrate: Arc::new(substrate),
        electrophile: Arc::new(electrophile),
        base: Arc::new(model.base(library.base(reagents.base).unwrap())),
        solvent: Arc::new(model.solvent(library.solvent(reagents.solvent).unwrap())),
        additive: None,
        conditions,
    };
    model.explain(&cell, 0.5).unwrap()
}

fn conditions(formation_temperature_c: f64, temperature_c: f64, time_h: f64) -> Conditions {
    Conditions {
        temperature_c,
        formation_temperature_c,
        base_equiv: 1.1,
        electrophile_equiv: 1.2,
        additive_equiv: 0.0,
        concentration_m: 0.2,
        time_h,
        dosing_min: 10.0,
        addition: None,
    }
}

fn rate(told: &Explanation, step: &str) -> f64 {
    let found = told.rates.iter().find(|rate| rate.step == step);
    found.unwrap_or_else(|| panic!("no step {step}")).log10_k
}

fn pka(told: &Explanation, molecule: &str) -> f64 {
    let found = told.sites.iter().find(|site| site.molecule == molecule);
    found
        .unwrap_or_else(|| panic!("no site of {molecule}"))
        .pka_medium
}

fn loss(told: &Explanation, channel: &str) -> f64 {
    let found = told.losses.iter().find(|(of, _)| of.name() == channel);
    found.map_or(0.0, |(_, share)| *share)
}

#[track_caller]
fn close(name: &str, by_hand: f64, of_model: f64, tolerance: f64) {
    assert!(
        (by_hand - of_model).abs() <= tolerance,
        "{name}: {by_hand:.4} by hand, {of_model:.4} by the model"
    );
}

/// What the pot of the malonate holds while it is butylated, mol/L; proton transfers are at equilibrium all the time.
struct Malonate {
    /// Diethyl malonate, its butyl and its dibutyl derivative, all with their anions; what lost an ester group.
    malonate: f64,
    butyl: f64,
    dibutyl: f64,
    saponified: f64,
    bromide: f64,
    /// Ethoxide and all carbanions.
    base: f64,
    /// Share of the water that has not been used up by saponification.
    water_left: f64,
}

/// Constants of the first example at 60 °C.
struct Constants {
    /// [anion]/[neutral] per mol/L of ethoxide, of malonate and butylmalonate.
    ionised: [f64; 2],
    butylation: f64,
    second_butylation: f64,
    /// E2 and ether by ethoxide.
    by_ethoxide: f64,
    /// Saponification by the hydroxide that goes with 1 mol/L of ethoxide while all the water is there, L/(mol s).
    saponification: f64,
    /// Water in the beginning, mol/L.
    water_m: f64,
}

impl Malonate {
    /// Ethoxide and the two carbanions, mol/L, by bisection.
    fn anions(&self, constants: &Constants) -> [f64; 3] {
        let at = |ethoxide: f64| {
            let anion =
                |all: f64, ionised: f64| all * ionised * ethoxide / (1.0 + ionised * ethoxide);
            let [of_malonate, of_butyl] = constants.ionised;
            [
                ethoxide,
                anion(self.malonate, of_malonate),
                anion(self.butyl, of_butyl),
            ]
        };
        let (mut low, mut high) = (0.0, self.base.max(0.0));
        for _ in 0..50 {
            let middle = 0.5 * (low + high);
            if at(middle).iter().sum::<f64>() > self.base {
                high = middle;
            } else {
                low = middle;
            }
        }
        at(low)
    }

    fn step(&mut self, constants: &Constants, dosed: f64, dt_s: f64) {
        let [ethoxide, malonate, butyl] = self.anions(constants);
        let first = constants.butylation * malonate * self.bromide * dt_s;
        let second = constants.second_butylation * butyl * self.bromide * dt_s;
        let lost = constants.by_ethoxide * ethoxide * self.bromide * dt_s;
        // hydroxide takes the neutral esters
        let by_hydroxide = constants.saponification * self.water_left * ethoxide * dt_s;
        let of_malonate = by_hydroxide * (self.malonate - malonate);
        let of_butyl = by_hydroxide * (self.butyl - butyl);
        let saponified = of_malonate + of_butyl;
        self.malonate -= first + of_malonate;
        self.butyl += first - second - of_butyl;
        self.dibutyl += second;
        self.saponified += saponified;
        self.water_left -= saponified / constants.water_m;
        self.bromide += dosed - first - second - lost;
        self.base -= first + second + lost + saponified;
    }
}

#[test]
fn malonate_with_ethoxide_and_bromobutane() {
    let told = explained(
        &Reagents {
            substrate: "CCOC(=O)CC(=O)OCC",
            base: "NaOEt",
            electrophile: "CCCCBr",
            solvent: "EtOH",
        },
        conditions(60.0, 60.0, 16.0),
    );

    // acidity: DMSO values less hydrogen bonds (α of ethanol over that of water), plus the cost of two charges
    let (warm, donation) = (298.15 / kelvin(60.0), 0.86 / 1.17);
    let malonate = (16.4 - 3.8 * donation + 3.2) * warm;
    let butylmalonate = (18.8 - 3.8 * donation + 3.2) * warm;
    let ethanol = (29.8 - 13.7 * 0.95 + 3.2) * warm;
    let water = (31.4 - 15.7 * 0.95 + 3.2) * warm;
    close("pKa of malonate", malonate, pka(&told, "substrate"), 0.05);
    close("pKa of ethanol", ethanol, pka(&told, "base"), 0.05);
    let log10_k = ethanol - malonate;
    close("log10 K", log10_k, told.log10_k.unwrap(), 0.05);
    let free_energy = -R * 1e-3 * kelvin(60.0) * std::f64::consts::LN_10 * log10_k;
    close(
        "ΔG°",
        free_energy,
        told.delta_g_deprotonation_kj_mol.unwrap(),
        0.3,
    );

    // x·[EtOH]/((0.20 − x)(0.22 − x)) = K
    let solvent_m = 0.7852e3 / 46.07;
    let per_ethoxide = 10_f64.powf(log10_k) / solvent_m;
    let half = 0.5 * (0.42 + 1.0 / per_ethoxide);
    let ionised = (half - (half * half - 0.20 * 0.22).sqrt()) / 0.20;
    close("ionised", ionised, told.enolate_fraction.unwrap(), 0.02);

    // rate constants: anchor, butyl against ethyl, basicity, hydrogen bonds, one more group at the carbanion
    let shift = 3.8 * donation;
    let butylation = at(
        -0.4 + 0.35 * (16.4 - 22.0) - 0.60 * shift,
        25.0,
        60.0,
        -10.0,
    );
    let second = at(
        -0.4 + 0.35 * (18.8 - 22.0) - 0.60 * shift - 0.9,
        25.0,
        60.0,
        -10.0,
    );
    close(
        "butylation",
        butylation,
        rate(&told, "carbanion + electrophile → product"),
        0.05,
    );
    close(
        "second butylation",
        second,
        rate(
            &told,
            "anion of the product + electrophile → product that reacted again",
        ),
        0.05,
    );
    // as the model has them: what ethoxide does to the bromide is a small matter here
    let elimination = rate(
        &told,
        "NaOEt + electrophile → eliminated electrophile + acid of NaOEt",
    );
    let ether = rate(&told, "NaOEt + electrophile → electrophile spent on base");
    let saponification = at(-1.0 - 1.2, 25.0, 60.0, -10.0);
    // 500 ppm of water in the ethanol, and 0.01 equivalents with the base
    let water_m = 500e-6 * 785.2 / 18.015 + 0.01 * 0.22;
    let hydroxide_over_ethoxide = water_m / solvent_m * 10_f64.powf(ethanol - water);

    let constants = Constants {
        ionised: [
            per_ethoxide,
            10_f64.powf(ethanol - butylmalonate) / solvent_m,
        ],
        butylation: 10_f64.powf(butylation),
        second_butylation: 10_f64.powf(second),
        by_ethoxide: 10_f64.powf(elimination) + 10_f64.powf(ether),
        saponification: 10_f64.powf(saponification) * hydroxide_over_ethoxide,
        water_m,
    };
    let mut pot = Malonate {
        malonate: 0.20,
        butyl: 0.0,
        dibutyl: 0.0,
        saponified: 0.0,
        bromide: 0.0,
        base: 0.22,
        water_left: 1.0,
    };
    // 25 min between half of the base and the bromide, which comes over 10 min; 16 h in all
    const DT_S: f64 = 5.0;
    for _ in 0..(25 * 12) {
        pot.step(&constants, 0.0, DT_S);
    }
    for i in 0..(16 * 720) {
        let dosed = if i < 120 { 0.24 / 120.0 } else { 0.0 };
        pot.step(&constants, dosed, DT_S);
    }
    close(
        "yield",
        pot.butyl / 0.20,
        told.reference_yield.unwrap(),
        0.03,
    );
    close(
        "over-alkylation",
        pot.dibutyl / 0.20,
        loss(&told, "over-alkylation"),
        0.03,
    );
    close(
        "saponification",
        pot.saponified / 0.20,
        loss(&told, "base adds to substrate"),
        0.03,
    );
    // the page's second-order law, [E]/[S] = 1.2·exp(Δ·k·f·t) with the first ionised fraction, is an upper bound
    let law = 1.2 * (0.04 * constants.butylation * ionised * 57_600.0).exp();
    assert!(1.0 - 0.2 / (law - 1.0) >= 1.0 - pot.malonate / 0.20);
    // and its consecutive reactions (malonate gone to a hundredth) foretell the dibutyl ester
    let kappa = 10_f64.powf(second - butylation + malonate - butylmalonate);
    let butyl = (0.01_f64.powf(kappa) - 0.01) / (1.0 - kappa);
    close("consecutive", 0.99 - butyl, pot.dibutyl / 0.20, 0.02);
}

#[test]
fn acetophenone_with_lda_and_benzyl_bromide() {
    let told = explained(
        &Reagents {
            substrate: "CC(=O)c1ccccc1",
            base: "LDA",
            electrophile: "BrCc1ccccc1",
            solvent: "THF",
        },
        conditions(-78.0, -20.0, 2.0),
    );

    // acidity: an enolate of a ketone is the zero of ion pairing, a lithium amide gains less by it
    let pairing = 1.2 * (1.0 / 7.43 - 1.0 / 46.7) / 0.112;
    let amine = 36.0 + 1.6 * pairing;
    let at_minus_20 = 298.15 / kelvin(-20.0);
    close(
        "pKa of acetophenone",
        24.7 * at_minus_20,
        pka(&told, "substrate"),
        0.05,
    );
    close(
        "pKa of diisopropylamine",
        amine * at_minus_20,
        pka(&told, "base"),
        0.1,
    );
    let log10_k = (amine - 24.7) * at_minus_20;
    close("log10 K", log10_k, told.log10_k.unwrap(), 0.1);

    // deprotonation within the complex of ketone and amide
    let deprotonation = |celsius: f64| {
        let delta = (amine - 24.7) * 298.15 / kelvin(celsius);
        at(1.2 + 0.2 * delta, 25.0, celsius, -20.0)
    };
    let step = "LDA + substrate → acid of LDA + carbanion";
    close(
        "deprotonation",
        deprotonation(-20.0),
        rate(&told, step),
        0.1,
    );
    // the last drop of ketone meets 0.02 mol/L of amide: it lives for milliseconds even at −78 °C
    let half_life_s = 2_f64.ln() / (10_f64.powf(deprotonation(-78.0)) * 0.02);
    assert!(half_life_s < 0.05, "{half_life_s}");
    close("ionised", 1.0, told.enolate_fraction.unwrap(), 0.01);

    // monomer: m + 4·K·m⁴ = c by bisection
    let (mut low, mut high) = (0.0_f64, 0.2);
    for _ in 0..60 {
        let m = 0.5 * (low + high);
        if m + 4.0 * 10_f64.powf(8.7) * m.powi(4) > 0.2 {
            high = m;
        } else {
            low = m;
        }
    }
    let monomer = (low / 0.2).log10();
    close("monomer", monomer, -1.80, 0.01);
    // benzyl against ethyl, basicity of lithium enolates, the contact pair, the monomer
    let benzylation = at(
        2.1 + 0.15 * (24.7 - 22.0) - 1.2 + monomer,
        25.0,
        -20.0,
        -40.0,
    );
    close(
        "benzylation",
        benzylation,
        rate(&told, "carbanion + electrophile → product"),
        0.05,
    );
    let oxygen = benzylation + 0.6 - 0.75 - 1.3;
    close(
        "O-benzylation",
        oxygen,
        rate(&told, "carbanion + electrophile → O-product"),
        0.05,
    );

    // second-order law from the middle of the dosing; the anion of the product makes the model a little slower
    let point = told
        .course
        .iter()
        .find(|point| point.time_s > 1200.0)
        .unwrap();
    let elapsed_s = point.time_s - 300.0;
    let ratio = 1.2 * (0.04 * 10_f64.powf(benzylation) * elapsed_s).exp();
    close("anions left", 0.2 / (ratio - 1.0), point.anions, 0.04);

    // 1.1 equivalents of anions meet 1.2 of benzyl bromide: every one is benzylated, a tenth of the substrate twice
    let to_oxygen = 10_f64.powf(oxygen - benzylation);
    let twice = 0.1;
    let once = (1.0 - twice) / (1.0 + to_oxygen);
    close(
        "over-alkylation",
        twice,
        loss(&told, "over-alkylation"),
        0.02,
    );
    close(
        "O-attack",
        1.0 - twice - once,
        loss(&told, "O-attack"),
        0.01,
    );
    close("yield", once, told.reference_yield.unwrap(), 0.02);
}
