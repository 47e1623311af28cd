//! Coverage: how many real onsets came before "earliest", by "likely", and after "latest".

use crate::reckoned::Row;
use crate::resampled::{Sums, Table, with_interval};

/// Classes by the likely onset, hours after issue.
const CLASSES: [(&str, f64, f64); 5] = [
    ("all", 0.0, 1000.0),
    ("to 24", 0.0, 24.0),
    ("24 to 48", 24.0, 48.0),
    ("48 to 72", 48.0, 72.0),
    ("from 72", 72.0, 1000.0),
];

/// Every real onset after issue and by the end of the forecast, against the quantiles of that span.
pub fn table(rows: &[Row]) -> Table {
    let columns =
        ["likely in (h)", "onsets", "storms", "before earliest (%)", "before likely (%)", "after latest (%)"];
    let mut table = Table::new("Coverage of real onsets: 10, 50 and 10 % are wanted.", &columns);
    for (name, from, to) in CLASSES {
        let quantiles = |row: &Row| {
            let onset = row.onset_h.filter(|onset| *onset <= row.end_h)?;
            let quantiles = row.quantiles_h.filter(|[_, likely, _]| *likely >= from && *likely < to)?;
            Some((onset, quantiles))
        };
        let share = |holds: &dyn Fn(f64, [f64; 3]) -> bool| {
            let sums = Sums::of(rows, |row| {
                quantiles(row).map(|(onset, q)| [100.0 * f64::from(holds(onset, q)), 1.0])
            });
            with_interval(sums.ratio(), sums.interval(), 1)
        };
        let counted: Vec<&Row> = rows.iter().filter(|row| quantiles(row).is_some()).collect();
        let mut storms: Vec<&str> = counted.iter().map(|row| row.storm.as_str()).collect();
        storms.sort_unstable();
        storms.dedup();
        table.rows.push(vec![
            name.to_owned(),
            counted.len().to_string(),
            storms.len().to_string(),
            share(&|onset, [earliest, _, _]| onset < earliest),
            share(&|onset, [_, likely, _]| onset < likely),
            share(&|onset, [_, _, latest]| onset > latest),
        ]);
    }
    table
}
