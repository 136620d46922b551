//! The columns and their types; documented in the program's `docs/columns.md`.

use std::sync::Arc;

use arrow_array::builder::{ListBuilder, StringBuilder};
use arrow_array::{ArrayRef, Float64Array, RecordBatch, StringArray, UInt64Array};
use arrow_schema::{ArrowError, DataType, Field, Schema};
use enolattice_engine::RankedCell;

/// The rows as columns, those of `rank --json`.
pub(crate) fn batch(rows: &[RankedCell]) -> Result<RecordBatch, ArrowError> {
    let mut columns = Columns::default();
    columns.whole("rank", rows, |row| row.rank);
    columns.whole("cell", rows, |row| row.cell);
    columns.text("substrate", rows, |row| &row.substrate);
    columns.text("base", rows, |row| &row.base);
    columns.text("electrophile", rows, |row| &row.electrophile);
    columns.text("solvent", rows, |row| &row.solvent);
    columns.word("additive", rows, |row| row.additive.as_deref());
    columns.number("temperature_c", rows, |row| row.temperature_c);
    columns.number("formation_temperature_c", rows, |row| {
        row.formation_temperature_c
    });
    columns.number("base_equiv", rows, |row| row.base_equiv);
    columns.number("electrophile_equiv", rows, |row| row.electrophile_equiv);
    columns.known("additive_equiv", rows, |row| row.additive_equiv);
    columns.number("concentration_m", rows, |row| row.concentration_m);
    columns.number("time_h", rows, |row| row.time_h);
    columns.number("dosing_min", rows, |row| row.dosing_min);
    columns.text("addition", rows, |row| &row.addition);
    columns.known("expected_yield", rows, |row| row.expected_yield);
    columns.known("p_hit", rows, |row| row.p_hit);
    columns.known("feasibility", rows, |row| row.feasibility);
    columns.known("selectivity", rows, |row| row.selectivity);
    columns.word("largest_loss", rows, |row| {
        row.largest_loss.map(|channel| channel.name())
    });
    columns.cautions(rows);
    columns.word("severity", rows, |row| row.severity.as_deref());
    columns.known("measured_yield", rows, |row| row.measured_yield);
    RecordBatch::try_new(Arc::new(Schema::new(columns.fields)), columns.arrays)
}

#[derive(Default)]
struct Columns {
    fields: Vec<Field>,
    arrays: Vec<ArrayRef>,
}

impl Columns {
    fn add(&mut self, name: &str, is_nullable: bool, array: ArrayRef) {
        let kind: DataType = array.data_type().clone();
        self.fields.push(Field::new(name, kind, is_nullable));
        self.arrays.push(array);
    }

    fn whole(&mut self, name: &str, rows: &[RankedCell], of: fn(&RankedCell) -> u64) {
        let array: UInt64Array = rows.iter().map(|row| Some(of(row))).collect();
        self.add(name, false, Arc::new(array));
    }

    fn number(&mut self, name: &str, rows: &[RankedCell], of: fn(&RankedCell) -> f64) {
        let array: Float64Array = rows.iter().map(|row| Some(of(row))).collect();
        self.add(name, false, Arc::new(array));
    }

    fn known(&mut self, name: &str, rows: &[RankedCell], of: fn(&RankedCell) -> Option<f64>) {
        let array: Float64Array = rows.iter().map(of).collect();
        self.add(name, true, Arc::new(array));
    }

    fn text(&mut self, name: &str, rows: &[RankedCell], of: fn(&RankedCell) -> &String) {
        let array: StringArray = rows.iter().map(|row| Some(of(row))).collect();
        self.add(name, false, Arc::new(array));
    }

    fn word(&mut self, name: &str, rows: &[RankedCell], of: fn(&RankedCell) -> Option<&str>) {
        let array: StringArray = rows.iter().map(of).collect();
        self.add(name, true, Arc::new(array));
    }

    fn cautions(&mut self, rows: &[RankedCell]) {
        let item = Field::new("item", DataType::Utf8, false);
        let mut list = ListBuilder::new(StringBuilder::new()).with_field(item);
        for row in rows {
            row.cautions
                .iter()
                .for_each(|category| list.values().append_value(category));
            list.append(true);
        }
        self.add("cautions", false, Arc::new(list.finish()));
    }
}
