//! A plan as a page of text.

use enolattice_plate::{Content, Form, Gains, Plan, PlannedWell, Plate, Stock, Worth};

use super::numbers::{count, percent, short};
use super::safety_notice;
use super::table::{Side, table, wrapped};

/// The page that `plan` prints.
pub(crate) fn plan_page(plan: &Plan) -> String {
    let mut parts = vec![wrapped("", &plan.precedence), head(plan)];
    parts.push(format!(
        "What the choice is worth\n{}",
        worth(&plan.gains, plan)
    ));
    for plate in &plan.plates {
        parts.push(format!(
            "{}\n{}",
            plate_heading(plate, plan),
            map(plate, plan)
        ));
    }
    parts.push(format!("Cells\n{}", cells(plan)));
    parts.push(format!("Stocks\n{}", stocks(plan)));
    parts.push(format!("Program\n{}", program(plan)));
    parts.push(format!("Checks\n{}", checks(plan)));
    if !plan.left_out.is_empty() {
        let lines = plan
            .left_out
            .iter()
            .map(|left| wrapped(&format!("  {:>12}  ", count(left.cells)), &left.reason));
        parts.push(format!(
            "Cells that could not be chosen\n{}",
            lines.collect::<Vec<_>>().join("\n")
        ));
    }
    parts.push(safety_notice());
    parts.join("\n\n")
}

fn head(plan: &Plan) -> String {
    let title = if plan.title.is_empty() {
        &plan.campaign
    } else {
        &plan.title
    };
    let wells: usize = plan.plates.iter().map(|plate| plate.wells.len()).sum();
    let plates = match plan.plates.len() {
        1 => "1 plate".to_owned(),
        plates => format!("{plates} plates"),
    };
    format!(
        "{title}\n{plates} of {}, {} wells filled with {} uL; job {}, model {}",
        plan.request.plates.wells,
        wells,
        short(plan.volume_ul),
        plan.job,
        plan.model.get(..12).unwrap_or(&plan.model),
    )
}

fn worth(gains: &Gains, plan: &Plan) -> String {
    let unit = match plan.request.choice.hits_of {
        enolattice_plate::HitsOf::Substrates => "substrates with at least one hit, expected",
        enolattice_plate::HitsOf::Products => "products with at least one hit, expected",
    };
    let row = |name: &str, of: &dyn Fn(&Worth) -> String| {
        let sets = [
            &gains.chosen,
            &gains.unlimited,
            &gains.top_list,
            &gains.random,
        ];
        let mut row = vec![name.to_owned()];
        row.extend(sets.map(of));
        row
    };
    let mut rows = vec![
        row(unit, &|worth| short1(worth.units_with_hit)),
        row("cells that hit, expected", &|worth| {
            short1(worth.cells_that_hit)
        }),
        row("mean expected yield", &|worth| {
            percent(Some(worth.mean_yield))
        }),
        row("what the results would tell, nats", &|worth| {
            short1(worth.information_nats)
        }),
        row("evenness over the axes, 0 to 1", &|worth| {
            format!("{:.2}", worth.spread)
        }),
    ];
    let mut relative = vec![
        "all by their weights, the plan is 1".to_owned(),
        "1.00".to_owned(),
    ];
    relative.extend(gains.relative.map(|value| format!("{value:.2}")));
    rows.push(relative);
    let heading = [
        ("", Side::Left),
        ("plan", Side::Right),
        ("no limits", Side::Right),
        ("top of ranking", Side::Right),
        ("random", Side::Right),
    ];
    let remark = format!(
        "Chosen among {} cells in {} joint draws, {} exchanged; at least {} of what the best set among them would be worth.",
        count(gains.shortlist as u64),
        gains.draws,
        gains.exchanged,
        percent(Some(gains.at_least_of_best)),
    );
    format!("{}\n{}", table(&heading, rows), wrapped("", &remark))
}

fn short1(value: f64) -> String {
    format!("{value:.1}")
}

fn plate_heading(plate: &Plate, plan: &Plan) -> String {
    let forming = match plate.formation_temperature_c == plate.temperature_c {
        true => String::new(),
        false => format!(
            "formed at {} °C, then ",
            short(plate.formation_temperature_c)
        ),
    };
    format!(
        "{}: {forming}{} °C for {} h; evenness of the layout {:.2}; p_hit in %, {}",
        plate.name,
        short(plate.temperature_c),
        short(plate.time_h),
        plate.balance.balance,
        legend(plan),
    )
}

fn legend(plan: &Plan) -> String {
    let used = |content: Content| plan.wells().any(|(_, well)| well.content == content);
    let all = [
        Content::Positive,
        Content::NoBase,
        Content::NoElectrophile,
        Content::Deuterium,
        Content::SolventOnly,
    ];
    let words = all
        .into_iter()
        .filter(|content| used(*content))
        .map(|content| format!("{} {}", mark(content), content.name()));
    words.collect::<Vec<_>>().join(", ")
}

/// Two letters for a control.
fn mark(content: Content) -> &'static str {
    match content {
        Content::Cell => "",
        Content::Positive => "++",
        Content::NoBase => "-B",
        Content::NoElectrophile => "-E",
        Content::Deuterium => "D2",
        Content::SolventOnly => "so",
    }
}

/// The plate as rows and columns, at most 80 wide: percent of p_hit, tenths on 1536 wells.
fn map(plate: &Plate, plan: &Plan) -> String {
    let format = plan.request.plates.wells;
    let wide = match format.columns() {
        0..=12 => 5,
        13..=24 => 3,
        _ => 1,
    };
    let shown = |well: &PlannedWell| match (well.content, wide) {
        (Content::Cell, 1) => format!("{}", (well.p_hit.unwrap_or(0.0) * 9.99) as u32),
        (Content::Cell, 3) => format!("{}", (well.p_hit.unwrap_or(0.0) * 99.4).round() as u32),
        (Content::Cell, _) => format!("{}", (well.p_hit.unwrap_or(0.0) * 100.0).round() as u32),
        (_, 1) => "c".to_owned(),
        (content, _) => mark(content).to_owned(),
    };
    let mut lines = Vec::new();
    if wide > 1 {
        let numbers = (1..=format.columns()).map(|column| format!("{column:>wide$}"));
        lines.push(format!("   {}", numbers.collect::<String>()));
    }
    for row in 0..format.rows() {
        let mut line = String::new();
        for column in 0..format.columns() {
            let at = enolattice_plate::Well::new(row, column);
            let text = plate
                .wells
                .iter()
                .find(|planned| planned.well == at)
                .map_or("·".to_owned(), shown);
            line.push_str(&format!("{text:>wide$}"));
        }
        let name = enolattice_plate::Well::new(row, 0).to_string();
        lines.push(format!(
            "{:>2} {line}",
            name.trim_end_matches(|c: char| c.is_ascii_digit())
        ));
    }
    lines.join("\n")
}

/// Wells that are listed; all are in the files and in `--json`.
const LISTED: usize = 24;

fn cells(plan: &Plan) -> String {
    let heading = [
        ("well", Side::Left),
        ("cell", Side::Right),
        ("substrate", Side::Left),
        ("base", Side::Left),
        ("electrophile", Side::Left),
        ("solvent", Side::Left),
        ("yield", Side::Right),
        ("as dosed", Side::Right),
        ("p_hit", Side::Right),
        ("worst caution", Side::Left),
    ];
    let name = |reagent: &Option<enolattice_plate::Reagent>| {
        reagent
            .as_ref()
            .map_or(String::new(), |reagent| reagent.name.clone())
    };
    let of_cells = || {
        plan.wells()
            .filter(|(_, well)| well.content == Content::Cell)
    };
    let rows = of_cells().take(LISTED).map(|(plate, well)| {
        let at = match plan.plates.len() {
            1 => well.well.to_string(),
            _ => format!("{} {}", plate.name.trim_start_matches("plate "), well.well),
        };
        vec![
            at,
            well.cell.to_string(),
            name(&well.substrate),
            name(&well.base),
            name(&well.electrophile),
            well.solvent.clone(),
            percent(well.expected_yield),
            well.yield_as_dosed
                .map_or("same".to_owned(), |y| percent(Some(y))),
            percent(well.p_hit),
            well.cautions
                .first()
                .map_or("none known".to_owned(), |caution| {
                    format!("{}: {}", caution.severity, caution.category)
                }),
        ]
    });
    let listed = table(&heading, rows);
    match of_cells().count().checked_sub(LISTED) {
        Some(further) if further > 0 => {
            format!("{listed}\n{further} more; all with `--out DIR` or `--json`")
        }
        _ => listed,
    }
}

fn stocks(plan: &Plan) -> String {
    let heading = [
        ("stock", Side::Left),
        ("of", Side::Left),
        ("form", Side::Left),
        ("in", Side::Left),
        ("mol/L", Side::Right),
        ("make/mL", Side::Right),
        ("take", Side::Right),
        ("wells", Side::Right),
        ("place", Side::Left),
        ("hazard statements", Side::Left),
    ];
    let rows = plan.stocks.iter().map(|stock| {
        let place = match &stock.sources[..] {
            [] => "into the wells".to_owned(),
            [one] => format!("{} {}", one.plate, one.well),
            [first, .., last] => format!("{} {} to {}", first.plate, first.well, last.well),
        };
        vec![
            stock.label.clone(),
            stock.reagent.clone(),
            stock.form.name().to_owned(),
            if stock.form == Form::Liquid {
                String::new()
            } else {
                stock.solvent.clone()
            },
            if stock.concentration_m > 0.0 {
                short(stock.concentration_m)
            } else {
                String::new()
            },
            if stock.made_ul > 0.0 {
                format!("{:.2}", stock.made_ul / 1000.0)
            } else {
                String::new()
            },
            taken(stock),
            stock.wells.to_string(),
            place,
            stock.hazards.clone(),
        ]
    });
    table(&heading, rows)
}

fn taken(stock: &Stock) -> String {
    match (stock.weigh_mg, stock.take) {
        (Some(mg), _) => format!("{mg:.1} mg"),
        (None, Some((volume_ul, molar))) => {
            format!("{:.2} mL of {} M", volume_ul / 1000.0, short(molar))
        }
        (None, None) => String::new(),
    }
}

fn program(plan: &Plan) -> String {
    let steps = plan.program.iter().map(|step| {
        let wait = match step.wait_min {
            0.0 => String::new(),
            min if min >= 120.0 => format!(", then {} h", short(min / 60.0)),
            min => format!(", then {} min", short(min)),
        };
        let group = step
            .group
            .map_or("  ".to_owned(), |group| format!("{group:>2}"));
        wrapped(
            &format!("  {}  {group}  ", step.plate),
            &format!("{}, {} °C{wait}", step.what, short(step.temperature_c)),
        )
    });
    let moves = plan.movements;
    let counted = format!(
        "{} transfers: {} uptakes where one serves many wells, {} deliveries of the head",
        count(moves.transfers as u64),
        count(moves.uptakes as u64),
        count(moves.deliveries as u64),
    );
    let mut lines: Vec<String> = steps.collect();
    lines.push(wrapped("  ", &counted));
    lines.join("\n")
}

fn checks(plan: &Plan) -> String {
    let lines = plan.findings.iter().map(|finding| {
        wrapped(
            &format!("  {:<8} {:<20} ", finding.severity, finding.check),
            &finding.text,
        )
    });
    lines.collect::<Vec<_>>().join("\n")
}
