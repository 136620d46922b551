//! The fields of `--json` are those that `docs/commands.md` lists, in its order.

use enolattice_engine::{
    AcidityAgreement, Agreement, Axis, AxisOverlap, CellDescription, CellMap, CheckedAcidity,
    CheckedRun, ComparedCell, Comparison, Copied, Difference, Distribution, DryRun, Health,
    Histogram, Job, JobState, MapAxis, MapField, Miss, Mover, OpenReport, PlanSummary, RankedCell,
    ReagentRow, SetAside, Terms, YieldAgreement,
};
use enolattice_grid::{BlockId, CampaignSpec, Decile, MeasuredEntry};
use enolattice_model::{
    Advice, Category, Caution, Channel, CoursePoint, Doubt, ExplainedProduct, ExplainedRate,
    ExplainedSite, Explanation, Neighbour, Origin, Severity, SiteReasons, Term,
};
use serde::Serialize;
use serde_json::Value;

use super::{
    AgreementDocument, CellLine, ComparisonDocument, CopiedDocument, DistributionDocument,
    DryRunDocument, ExplanationDocument, HealthDocument, JobRecord, MapLine, MoleculeSites,
    PlanRecord, ReagentRecord, ScreenedDocument,
};

const DOCUMENT: &str = include_str!("../../docs/commands.md");

/// The fields in the table below a heading.
fn documented(heading: &str) -> Vec<String> {
    let mut lines = DOCUMENT.lines().skip_while(|line| *line != heading).skip(1);
    let section: Vec<&str> = lines
        .by_ref()
        .take_while(|line| !line.starts_with('#'))
        .collect();
    let names = section
        .iter()
        .filter_map(|line| line.strip_prefix("| `")?.split('`').next());
    names.map(str::to_owned).collect()
}

/// The fields of an object, or of the first element of a list, in their order in the text.
fn fields(value: &impl Serialize) -> Vec<String> {
    let text = serde_json::to_string(value).expect("serialises");
    let value: Value = serde_json::from_str(&text).expect("is JSON");
    let object = value
        .as_object()
        .or_else(|| value.get(0)?.as_object())
        .expect("an object");
    let mut names: Vec<&String> = object.keys().collect();
    names.sort_by_key(|name| text.find(&format!("\"{name}\":")));
    names.into_iter().cloned().collect()
}

fn cell() -> RankedCell {
    RankedCell {
        rank: 1,
        cell: 2,
        substrate: String::new(),
        base: String::new(),
        electrophile: String::new(),
        solvent: String::new(),
        additive: None,
        temperature_c: 25.0,
        formation_temperature_c: 25.0,
        base_equiv: 1.1,
        electrophile_equiv: 1.2,
        additive_equiv: None,
        concentration_m: 0.2,
        time_h: 16.0,
        dosing_min: 10.0,
        addition: String::new(),
        expected_yield: None,
        p_hit: None,
        feasibility: None,
        selectivity: None,
        largest_loss: None,
        cautions: Vec::new(),
        severity: None,
        measured_yield: None,
    }
}

fn job() -> Job {
    Job {
        job: String::new(),
        title: String::new(),
        state: JobState::Done,
        cells: 1,
        cells_done: 1,
        best_yield: None,
        campaign_fingerprint: String::new(),
        model_fingerprint: String::new(),
        submitted_unix_ms: 0,
        ended_unix_ms: None,
        failure: String::new(),
        warnings: Vec::new(),
        planning: None,
        terms: Terms::default(),
    }
}

fn description() -> CellDescription {
    CellDescription {
        cell: None,
        substrate: String::new(),
        substrate_smiles: String::new(),
        base: String::new(),
        electrophile: String::new(),
        electrophile_smiles: String::new(),
        solvent: String::new(),
        additive: None,
        temperature_c: 25.0,
        formation_temperature_c: 25.0,
        base_equiv: 1.1,
        electrophile_equiv: 1.2,
        additive_equiv: None,
        concentration_m: 0.2,
        time_h: 16.0,
        dosing_min: 10.0,
        addition: String::new(),
        measured: None,
    }
}

fn explanation() -> Explanation {
    Explanation {
        summary: Vec::new(),
        limiting_reagent: None,
        expected_yield: None,
        yield_sigma: None,
        yield_on_limiting: None,
        p_hit: None,
        feasibility: None,
        selectivity: None,
        reference_yield: None,
        fast_yield: None,
        product_smiles: None,
        product_formula: None,
        product_mass: None,
        condensation_smiles: None,
        delta_g_deprotonation_kj_mol: None,
        log10_k: None,
        log10_k_sigma: None,
        enolate_fraction: None,
        sites: vec![site()],
        rates: vec![ExplainedRate {
            step: String::new(),
            log10_k: 0.0,
            sigma: 0.7,
            source: String::new(),
            extent: None,
        }],
        doubts: vec![Doubt {
            quantity: String::new(),
            parameter: None,
            value: 0.0,
            sigma: 0.0,
            unit: String::new(),
            source: String::new(),
            share: 0.0,
            raises_yield: false,
        }],
        losses: vec![(Channel::SlowAttack, 0.5)],
        products: vec![ExplainedProduct {
            channel: None,
            smiles: String::new(),
            formula: String::new(),
            monoisotopic_mass: 0.0,
            fraction: None,
        }],
        course: vec![CoursePoint {
            time_s: 0.0,
            substrate: 1.0,
            anions: 0.0,
            electrophile: 0.0,
            product: 0.0,
            losses: Vec::new(),
        }],
        cautions: vec![Caution {
            category: Category::Gas,
            severity: Severity::Note,
            text: String::new(),
            source: String::new(),
        }],
        hazards: Vec::new(),
        limits: Vec::new(),
        advice: vec![Advice {
            change: String::new(),
            expected_yield: 0.5,
            p_hit: None,
            selectivity: None,
            largest_loss: None,
        }],
        model: String::new(),
    }
}

fn site() -> ExplainedSite {
    ExplainedSite {
        molecule: "substrate",
        atom: 0,
        element: "C",
        hydrogens: 3,
        pka_dmso: 26.5,
        pka_medium: 19.3,
        sigma: 0.2,
        origin: Origin::Measured,
        source: String::new(),
        reasons: SiteReasons {
            terms: vec![Term {
                name: String::new(),
                contribution: 1.0,
                standard_error: 0.1,
            }],
            neighbours: vec![Neighbour {
                smiles: String::new(),
                atom: 0,
                pka_dmso: 26.5,
                residual: 0.1,
                held_out_error: -0.1,
                similarity: 1.0,
                source: String::new(),
            }],
        },
    }
}

fn plan() -> PlanSummary {
    PlanSummary {
        plan: String::new(),
        job: String::new(),
        title: String::new(),
        made_unix_ms: 0,
        plates: 1,
        wells: 96,
    }
}

fn reagent() -> ReagentRow {
    ReagentRow {
        kind: String::new(),
        name: String::new(),
        synonyms: Vec::new(),
        cas: String::new(),
        smiles: String::new(),
        facts: String::new(),
        h_codes: Vec::new(),
    }
}

#[test]
fn every_field_is_documented_and_every_documented_field_is_there() {
    let explained = serde_json::to_value(ExplanationDocument::new(description(), explanation()))
        .expect("serialises");
    let screened = ScreenedDocument {
        job: job().into(),
        seconds: 1.0,
        cells_per_second: 1.0,
        cells_not_covered: 0,
        top: Vec::new(),
        best_of_each_substrate: Vec::new(),
    };
    let sites = MoleculeSites {
        smiles: String::new(),
        sites: Vec::new(),
    };
    let dry = DryRunDocument::from(DryRun {
        job: job(),
        axes: Vec::new(),
        seconds: 1.0,
        disk_bytes: 1,
        memory_bytes: 1,
        cells_scored: 1,
        cells_scored_not_covered: 0,
        not_covered: Vec::new(),
        pairs_looked_at: 1,
        pairs_not_covered: Vec::new(),
        cells_looked_at: 1,
        cautions: Vec::new(),
    });
    for (heading, found) in [
        ("### `screen --json`", fields(&screened)),
        ("### `screen --dry-run --json`", fields(&dry)),
        ("### `jobs --json`", fields(&JobRecord::from(job()))),
        ("### `plans --json`", fields(&PlanRecord::from(plan()))),
        ("### `rank --json`", fields(&CellLine::from(cell()))),
        (
            "### `explain --json`",
            fields(&ExplanationDocument::new(description(), explanation())),
        ),
        ("### `sites --json`", fields(&sites)),
        (
            "### `reagents --json`",
            fields(&ReagentRecord::from(reagent())),
        ),
    ] {
        assert_eq!(documented(heading), found, "{heading}");
    }
    // Within a value the order of keys is lost: compare as sets.
    let site = &explained["sites"][0];
    compare_as_sets(&[
        ("sites", &explained["sites"]),
        ("terms", &site["terms"]),
        ("neighbours", &site["neighbours"]),
        ("rates", &explained["rates"]),
        ("doubts", &explained["doubts"]),
        ("losses", &explained["losses"]),
        ("products", &explained["products"]),
        ("course", &explained["course"]),
        ("cautions", &explained["cautions"]),
        ("advice", &explained["advice"]),
        ("cell", &explained["cell"]),
    ]);
}

#[test]
fn every_field_of_maps_and_distributions_is_documented() {
    let axis = |axis| MapAxis {
        axis,
        values: vec![String::new()],
    };
    let map = CellMap {
        rows: axis(Axis::Base),
        columns: axis(Axis::Solvent),
        fields: vec![MapField::default()],
        total: 0,
        cells_done: 0,
    };
    let lines: Vec<MapLine> = MapLine::all(&map).collect();
    assert_eq!(documented("### `rank --map --json`"), fields(&lines));
    let histogram = Histogram {
        bins: vec![0; 20],
        unknown: 0,
    };
    let known = DistributionDocument::from(Distribution {
        expected_yield: histogram.clone(),
        p_hit: histogram,
        total: 0,
        cells_done: 0,
    });
    assert_eq!(
        documented("### `rank --distribution --json`"),
        fields(&known)
    );
}

/// Holds objects within a document, whose keys have lost their order, against the tables of their names.
fn compare_as_sets(parts: &[(&str, &Value)]) {
    for (part, value) in parts {
        let mut documented = documented(&format!("#### `{part}`"));
        let mut found = fields(value);
        documented.sort();
        found.sort();
        assert_eq!(documented, found, "{part}");
    }
}

#[test]
fn every_field_of_a_comparison_is_documented() {
    let compared = |limits| ComparedCell {
        cell: description(),
        expected_yield: None,
        p_hit: None,
        feasibility: None,
        selectivity: None,
        largest_loss: None,
        limits,
    };
    let document = ComparisonDocument::from(Comparison {
        before: job(),
        after: job(),
        axes: vec![AxisOverlap {
            axis: "substrates",
            shared: 1,
            left_only: 0,
            right_only: 0,
            changed: None,
        }],
        cells: 1,
        cells_missing: 0,
        cells_compared: 1,
        covered_before_only: 0,
        covered_after_only: 0,
        spearman: None,
        mean_change: None,
        mean_absolute_change: None,
        cells_moved: 0,
        hits_before: 0,
        hits_after: 0,
        hits_entered: 0,
        hits_left: 0,
        movers: vec![Mover {
            before: compared(Vec::new()),
            after: compared(Vec::new()),
            differences: vec![Difference {
                what: String::new(),
                before: String::new(),
                after: String::new(),
            }],
        }],
        remarks: Vec::new(),
    });
    // the jobs within have fields of the same names: their order cannot be told
    let of_top = [documented("### `compare --json`"), fields(&document)];
    let [listed, found] = of_top.map(|mut names| {
        names.sort();
        names
    });
    assert_eq!(listed, found);
    let value = serde_json::to_value(&document).expect("serialises");
    let mover = &value["movers"][0];
    compare_as_sets(&[
        ("axes", &value["axes"]),
        ("before", &mover["before"]),
        ("before", &mover["after"]),
        ("differences", &mover["differences"]),
    ]);
}

#[test]
fn every_field_of_an_agreement_is_documented() {
    let decile = Decile {
        from: 0.0,
        to: 0.1,
        runs: 0,
        p_hit: None,
        hits: 0,
    };
    let run = CheckedRun {
        cell: description(),
        expected_yield: None,
        p_hit: None,
        not_covered: String::new(),
    };
    let agreement = Agreement {
        model: String::new(),
        yields: YieldAgreement {
            yield_at_least: 0.5,
            runs: vec![run],
            covered: 0,
            spearman: None,
            mean_absolute_error: None,
            mean_error: None,
            hits_expected: 0.0,
            hits_measured: 0,
            deciles: vec![decile],
            misses: vec![Miss {
                run: 0,
                explanation: explanation(),
            }],
        },
        acidities: AcidityAgreement {
            compounds: vec![CheckedAcidity {
                name: String::new(),
                smiles: String::new(),
                measured: 20.0,
                measured_sigma: 0.3,
                site: None,
            }],
            spearman: None,
            mean_absolute_error: None,
            mean_absolute_error_of_estimates: None,
            within_two_sigma: 0,
        },
    };
    let spec = CampaignSpec {
        measured: vec![MeasuredEntry::default()],
        ..CampaignSpec::default()
    };
    let document = AgreementDocument::new(agreement, &spec);
    assert_eq!(documented("### `check-measured --json`"), fields(&document));
    let value = serde_json::to_value(&document).expect("serialises");
    let (yields, acidities) = (&value["yields"], &value["acidities"]);
    compare_as_sets(&[
        ("yields", yields),
        ("deciles", &yields["deciles"]),
        ("runs", &yields["runs"]),
        ("acidities", acidities),
        ("compounds", &acidities["compounds"]),
    ]);
    let miss = yields["misses"][0].as_object().expect("an object");
    assert!(miss.contains_key("run") && miss.contains_key("explanation"));
}

#[test]
fn the_fields_of_data_directories_are_documented() {
    let path = || std::path::PathBuf::from("journal/x.json");
    let health = Health {
        report: OpenReport {
            damaged: vec![(
                "06f3k8a5zr0q2".parse().expect("an id"),
                BlockId {
                    segment: 0,
                    index: 1,
                },
                String::new(),
            )],
            unreadable: vec![(path(), String::new())],
            ..OpenReport::default()
        },
        format_damaged: None,
        jobs: 1,
        jobs_unfinished: 0,
        plans: 1,
        blocks: 1,
        cells: 1,
        set_aside: vec![SetAside {
            path: path(),
            bytes: 1,
        }],
    };
    let document = HealthDocument::new(&health, false);
    assert_eq!(documented("### `mend --json`"), fields(&document));
    let value = serde_json::to_value(&document).expect("serialises");
    compare_as_sets(&[
        ("damaged_blocks", &value["damaged_blocks"]),
        ("unreadable_records", &value["unreadable_records"]),
        ("set_aside", &value["set_aside"]),
    ]);
    let copied = CopiedDocument::new(&Copied::default(), &path());
    assert_eq!(documented("### `backup --json`"), fields(&copied));
}

#[test]
fn the_document_has_the_closed_vocabularies() {
    for name in Category::ALL.iter().map(|category| category.name()) {
        assert!(DOCUMENT.contains(&format!("`{name}`")), "{name}");
    }
    for command in [
        "screen FILE",
        "serve",
        "submit FILE",
        "jobs",
        "watch JOB",
        "cancel JOB",
        "rank JOB",
        "export JOB",
        "explain JOB CELL",
        "plan JOB",
        "plans [JOB]",
        "compare BEFORE AFTER",
        "check-measured FILE…",
        "mend",
        "backup",
        "restore",
        "completion SHELL",
        "man",
    ] {
        assert!(
            DOCUMENT.contains(&format!("\n## `{command}`\n")),
            "{command}"
        );
    }
}
