//! Reliability: how often the wind came where a chance was told, in classes of that chance.

use crate::archive::official::LEADS_H;
use crate::reckoned::{Row, Teller};
use crate::resampled::{Sums, Table, with_interval};

/// Bounds of the classes in per cent.
const BOUNDS: [f64; 13] = [0.0, 1.0, 5.0, 15.0, 25.0, 35.0, 45.0, 55.0, 65.0, 75.0, 85.0, 95.0, 101.0];

/// Classes of fewer storms say little.
const ENOUGH_STORMS: usize = 20;

/// The classes of 24, 48, 72 and 120 h.
pub fn table(rows: &[Row]) -> Table {
    let columns = [
        "by (h)",
        "class (%)",
        "rows",
        "storms",
        "told (%)",
        "came (%)",
        "came - told, 90 % interval",
        "off",
    ];
    let mut table = Table::new(
        "Reliability of ours. \"off\": the interval of 20 or more storms does not hold 0.",
        &columns,
    );
    for i in [1, 3, 4, 6] {
        for pair in BOUNDS.windows(2) {
            table.rows.extend(line(rows, i, [pair[0], pair[1]]));
        }
    }
    table
}

fn line(rows: &[Row], i: usize, [low, high]: [f64; 2]) -> Option<Vec<String>> {
    let is_in = |row: &Row| {
        let percent = 100.0 * row.chance(Teller::Ours, i);
        percent >= low && percent < high
    };
    let within: Vec<&Row> = rows.iter().filter(|row| is_in(row)).collect();
    let mut storms: Vec<&str> = within.iter().map(|row| row.storm.as_str()).collect();
    storms.sort_unstable();
    storms.dedup();
    if within.is_empty() {
        return None;
    }
    let mean = |of: &dyn Fn(&Row) -> f64| {
        100.0 * within.iter().map(|row| of(row)).sum::<f64>() / within.len() as f64
    };
    let sums = Sums::of(rows, |row| {
        is_in(row).then(|| [100.0 * (row.happened(i) - row.chance(Teller::Ours, i)), 1.0])
    });
    let told = mean(&|row| row.chance(Teller::Ours, i));
    let interval = widened(sums.interval(), mean(&|row| row.happened(i)), told, storms.len());
    let is_off = storms.len() >= ENOUGH_STORMS && (interval[0] > 0.0 || interval[1] < 0.0);
    Some(vec![
        LEADS_H[i].to_string(),
        format!("{low:.0} to {:.0}", high.min(100.0)),
        within.len().to_string(),
        storms.len().to_string(),
        format!("{told:.1}"),
        format!("{:.1}", mean(&|row| row.happened(i))),
        with_interval(sums.ratio(), interval, 1),
        if is_off { "off" } else { "" }.to_owned(),
    ])
}

/// Where the wind always came, or never, drawing storms again always finds the same. There the interval reaches as far as it would with
/// as many independent trials as storms: were the true share beyond it, all of them alike had a chance below 5 %.
fn widened([low, high]: [f64; 2], came: f64, told: f64, storms: usize) -> [f64; 2] {
    let least = 100.0 * libm::pow(0.05, 1.0 / storms as f64);
    if came >= 100.0 {
        [least - told, high]
    } else if came <= 0.0 {
        [low, 100.0 - least - told]
    } else {
        [low, high]
    }
}
