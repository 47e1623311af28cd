//! Intervals from resampling whole storms: advisories of one storm are not independent, storms nearly are.

use crate::reckoned::Row;
use std::collections::BTreeMap;
use std::fmt::Write;

/// How often storms are drawn again.
const DRAWS: usize = 2000;

/// The numbers of the storms that have rows, in order.
pub fn storms(rows: &[Row]) -> BTreeMap<String, usize> {
    let mut names: Vec<&String> = rows.iter().map(|row| &row.storm).collect();
    names.sort();
    names.dedup();
    names.into_iter().enumerate().map(|(number, name)| (name.clone(), number)).collect()
}

/// Sums over each storm's rows of two quantities.
#[derive(Clone, Debug)]
pub struct Sums {
    by_storm: Vec<[f64; 2]>,
}

impl Sums {
    /// The sums of what `pair` gives for each row; rows for which it gives nothing do not count.
    pub fn of(rows: &[Row], pair: impl Fn(&Row) -> Option<[f64; 2]>) -> Sums {
        let storms = storms(rows);
        let mut by_storm = vec![[0.0; 2]; storms.len()];
        for row in rows {
            let Some([a, b]) = pair(row) else { continue };
            let sums = &mut by_storm[storms[&row.storm]];
            sums[0] += a;
            sums[1] += b;
        }
        Sums { by_storm }
    }

    /// The first sum over the second.
    pub fn ratio(&self) -> f64 {
        let [a, b] = self.by_storm.iter().fold([0.0; 2], |[a, b], [x, y]| [a + x, b + y]);
        a / b
    }

    /// The interval that holds 90 % of the ratios of resampled storms.
    pub fn interval(&self) -> [f64; 2] {
        let mut ratios: Vec<f64> = (0..DRAWS).filter_map(|draw| self.drawn(draw)).collect();
        ratios.sort_by(f64::total_cmp);
        let at = |share: f64| {
            let last = ratios.len().saturating_sub(1);
            ratios.get((share * last as f64).round() as usize).copied().unwrap_or(f64::NAN)
        };
        [at(0.05), at(0.95)]
    }

    fn drawn(&self, draw: usize) -> Option<f64> {
        let storms = self.by_storm.len() as u64;
        let mut state = draw as u64;
        let (mut a, mut b) = (0.0, 0.0);
        for _ in 0..storms {
            state = state.wrapping_add(0x9e37_79b9_7f4a_7c15);
            let sums = self.by_storm[(stirred(state) % storms) as usize];
            a += sums[0];
            b += sums[1];
        }
        (b > 0.0).then_some(a / b)
    }
}

/// The finaliser of SplitMix64 (Steele, Lea & Flood 2014), started far apart for each draw.
fn stirred(x: u64) -> u64 {
    let x = (x ^ (x >> 30)).wrapping_mul(0xbf58_476d_1ce4_e5b9);
    let x = (x ^ (x >> 27)).wrapping_mul(0x94d0_49bb_1331_11eb);
    x ^ (x >> 31)
}

/// A table of results.
pub struct Table {
    /// What it shows.
    pub title: String,
    /// The names of its columns.
    pub columns: Vec<String>,
    /// Its rows, as long as the columns.
    pub rows: Vec<Vec<String>>,
}

impl Table {
    /// An empty table.
    pub fn new(title: &str, columns: &[&str]) -> Table {
        let columns = columns.iter().map(|&column| column.to_owned()).collect();
        Table { title: title.to_owned(), columns, rows: Vec::new() }
    }

    /// As Markdown.
    pub fn markdown(&self) -> String {
        let mut text = format!("{}\n\n", self.title);
        writeln!(text, "| {} |", self.columns.join(" | ")).unwrap();
        writeln!(text, "|{}", " --- |".repeat(self.columns.len())).unwrap();
        for row in &self.rows {
            writeln!(text, "| {} |", row.join(" | ")).unwrap();
        }
        text
    }

    /// As comma-separated values.
    pub fn csv(&self) -> String {
        let mut text = self.columns.join(",") + "\n";
        for row in &self.rows {
            text += &(row.join(",") + "\n");
        }
        text
    }
}

/// "0.756 (0.701 to 0.812)".
pub fn with_interval(value: f64, [low, high]: [f64; 2], decimals: usize) -> String {
    format!("{value:.decimals$} ({low:.decimals$} to {high:.decimals$})")
}
