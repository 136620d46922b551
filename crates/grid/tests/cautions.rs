//! The tabled caution bits of a screen are those of the cautions that an explanation lists.

use std::sync::Arc;

use enolattice_grid::{
    AxisSpec, Campaign, CampaignSpec, CellId, ConditionsSpec, Entry, Grid, SubstrateEntry,
};
use enolattice_model::{Contents, Model, Severity, caution_bits, cautions};
use enolattice_reagents::Library;

fn axis(entries: impl IntoIterator<Item = Entry>) -> AxisSpec {
    AxisSpec {
        all: false,
        entries: entries.into_iter().collect(),
    }
}

fn named(names: &[&str]) -> AxisSpec {
    axis(names.iter().map(|name| Entry {
        name: (*name).into(),
        ..Entry::default()
    }))
}

fn grid() -> Grid {
    let library = Library::builtin().expect("the tables are sound");
    let model = Arc::new(Model::new(Arc::new(library)));
    let substrates = ["CCOC(=O)CC(=O)OCC", "CC[N+](=O)[O-]", "CC(=O)CCNC"];
    let electrophiles = ["BrCc1ccccc1", "CC(=O)Cl", "S=C=S", "O=C1CCC(=O)N1Br"];
    let spec = CampaignSpec {
        substrates: substrates
            .map(|smiles| SubstrateEntry {
                smiles: smiles.into(),
                ..SubstrateEntry::default()
            })
            .into(),
        bases: named(&["LDA", "NaH", "NaOH", "K2CO3", "DBU"]),
        electrophiles: axis(electrophiles.map(|smiles| Entry {
            smiles: smiles.into(),
            ..Entry::default()
        })),
        solvents: named(&["THF", "DMF", "DMSO", "CHCl3", "acetone"]),
        additives: named(&["TBAB", "TMEDA"]),
        conditions: ConditionsSpec {
            temperature_c: vec![-20.0, 90.0],
            formation_temperature_c: vec![-78.0, 60.0],
            time_h: vec![1.0, 4.0],
            ..ConditionsSpec::default()
        },
        ..CampaignSpec::default()
    };
    let campaign = Campaign::new(&spec, &model).expect("a sound campaign");
    Grid::new(campaign, model).expect("a small grid")
}

#[test]
fn tabled_bits_are_those_of_the_cautions_of_the_cell() {
    let grid = grid();
    let mut stops = 0;
    for number in (0..grid.cells()).step_by(7) {
        let cell = grid.cell(CellId(number)).expect("a cell of the grid");
        let listed = cautions(&Contents::from(&cell));
        let tabled = grid.caution_bits(CellId(number));
        assert_eq!(tabled, caution_bits(&listed), "{number}: {listed:#?}");
        stops += u32::from(Severity::from_bits(tabled) == Some(Severity::Stop));
    }
    assert!(stops > 0, "NaH in hot DMSO is there");
}
