//! Brier scores by lead: mean square of (chance - happened), beside the official odds.

use crate::archive::official::LEADS_H;
use crate::reckoned::{Row, Teller};
use crate::resampled::{Sums, Table, with_interval};

/// The scores.
pub fn table(rows: &[Row]) -> Table {
    let columns = [
        "by (h)",
        "rows",
        "came",
        "told",
        "ours",
        "official",
        "recalibrated",
        "single track",
        "told / official",
        "ours / official",
        "ours / recalibrated",
        "ours / single",
    ];
    let mut table =
        Table::new("Brier scores of 34 kt by each lead, with 90 % intervals of the ratios.", &columns);
    for (i, lead) in LEADS_H.iter().enumerate() {
        table.rows.push(line(&lead.to_string(), rows, &[i]));
    }
    table.rows.push(line("all", rows, &[0, 1, 2, 3, 4, 5, 6]));
    table
}

fn line(name: &str, rows: &[Row], leads: &[usize]) -> Vec<String> {
    let square = |row: &Row, teller| {
        leads
            .iter()
            .map(|i| {
                (row.chance(teller, *i) - row.happened(*i)) * (row.chance(teller, *i) - row.happened(*i))
            })
            .sum::<f64>()
    };
    let mean =
        |teller| rows.iter().map(|row| square(row, teller)).sum::<f64>() / (rows.len() * leads.len()) as f64;
    let came: f64 = rows.iter().map(|row| leads.iter().map(|i| row.happened(*i)).sum::<f64>()).sum();
    let mut cells = vec![name.to_owned(), (rows.len() * leads.len()).to_string(), came.to_string()];
    cells.extend(
        [Teller::Told, Teller::Ours, Teller::Official, Teller::Recalibrated, Teller::Single]
            .map(|t| format!("{:.4}", mean(t))),
    );
    let sums = Sums::of(rows, |row| Some([square(row, Teller::Told), square(row, Teller::Official)]));
    cells.push(with_interval(sums.ratio(), sums.interval(), 3));
    for other in [Teller::Official, Teller::Recalibrated, Teller::Single] {
        let sums = Sums::of(rows, |row| Some([square(row, Teller::Ours), square(row, other)]));
        cells.push(with_interval(sums.ratio(), sums.interval(), 3));
    }
    cells
}
