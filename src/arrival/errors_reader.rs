//! Reads a file of forecast-error tables.

use crate::arrival::basin::Basin;
use crate::arrival::errors::{
    ACCURACY_BOUNDS, COLUMNS, ErrorRow, ErrorTable, ErrorTables, FADING_BOUNDS, FOLLOWS_BOUNDS, LEAD_BOUNDS,
    MUTUAL_BOUNDS, POWER_BOUNDS, RELAXATION_BOUNDS, SCALING, SCALING_BOUNDS, Settings, is_within,
};
use crate::finding::fault::{Finding, nearest, sort_findings};
use crate::finding::source::SourceText;
use serde::Deserialize;
use std::collections::BTreeMap;
use std::ops::Range;
use toml::Spanned;

/// Numbers with the places they were written at.
type Numbers = Spanned<Vec<Spanned<f64>>>;

#[derive(Deserialize)]
#[serde(deny_unknown_fields)]
struct RawFile {
    table: Vec<RawTable>,
    elsewhere: RawElsewhere,
}

#[derive(Deserialize)]
#[serde(deny_unknown_fields)]
struct RawElsewhere {
    table: Spanned<String>,
    widen: Spanned<f64>,
}

#[derive(Deserialize)]
#[serde(deny_unknown_fields)]
struct RawTable {
    name: Spanned<String>,
    basins: Vec<Spanned<String>>,
    sources: Vec<String>,
    caution: Option<String>,
    radii_relaxation_h: Spanned<f64>,
    accuracy_usual_nmi: Spanned<f64>,
    accuracy_power: Spanned<f64>,
    accuracy_fades_h: Spanned<f64>,
    along_by_wind: Option<Spanned<f64>>,
    cross_by_wind: Option<Spanned<f64>>,
    intensity_by_wind: Option<Spanned<f64>>,
    size_by_reach: Option<Spanned<f64>>,
    intensity_with_size: Spanned<f64>,
    size_follows_intensity: Spanned<f64>,
    lead_h: Numbers,
    along_nmi: Numbers,
    cross_nmi: Numbers,
    intensity_kt: Numbers,
    size_share: Numbers,
    along_bias_nmi: Option<Numbers>,
    cross_bias_nmi: Option<Numbers>,
    intensity_bias_kt: Option<Numbers>,
    size_bias_share: Option<Numbers>,
    along_serial: Numbers,
    cross_serial: Numbers,
    intensity_serial: Numbers,
    size_serial: Numbers,
}

/// Reads error tables.
///
/// # Errors
/// All findings of the file: what is not TOML or not a known key (`arrival-errors-unreadable`), a number out
/// of range (`arrival-errors-range`), columns of different length (`arrival-errors-length`), leads that do
/// not start at 0 and rise (`arrival-errors-leads`), an unknown or doubled basin (`arrival-errors-basin`), a
/// doubled name (`arrival-errors-name`), an `elsewhere` that names no table (`arrival-errors-elsewhere`).
pub fn read_error_tables(source: &SourceText) -> Result<ErrorTables, Vec<Finding>> {
    let raw: RawFile = match toml::from_str(source.text()) {
        Ok(raw) => raw,
        Err(error) => {
            return Err(vec![Finding::error(
                "arrival-errors-unreadable",
                source.place(error.span().unwrap_or(0..0)),
                error.message(),
                "an error table is TOML with the keys that the shipped rules/forecast-errors.toml explains",
                "correct the line",
            )]);
        }
    };
    let mut reader = Reader { source, findings: Vec::new() };
    let tables = reader.tables(&raw);
    let elsewhere = reader.elsewhere(&raw, &tables);
    sort_findings(&mut reader.findings);
    match elsewhere {
        Some(elsewhere) if reader.findings.is_empty() => Ok(ErrorTables::new(tables, elsewhere)),
        _ => Err(reader.findings),
    }
}

struct Reader<'a> {
    source: &'a SourceText,
    findings: Vec<Finding>,
}

impl Reader<'_> {
    fn fault(&mut self, code: &'static str, at: Range<usize>, found: String, allowed: String, to_do: &str) {
        self.findings.push(Finding::error(code, self.source.place(at), found, allowed, to_do));
    }

    fn tables(&mut self, raw: &RawFile) -> Vec<(Vec<Basin>, ErrorTable)> {
        let mut names: BTreeMap<&str, ()> = BTreeMap::new();
        let mut taken: BTreeMap<Basin, &str> = BTreeMap::new();
        let mut tables = Vec::with_capacity(raw.table.len());
        for table in &raw.table {
            let name = table.name.get_ref();
            if names.insert(name, ()).is_some() {
                self.fault(
                    "arrival-errors-name",
                    table.name.span(),
                    format!("a second table is called \"{name}\""),
                    "each table has its own name".to_owned(),
                    "rename one of them",
                );
            }
            let mut basins = Vec::new();
            for letters in &table.basins {
                let Some(basin) = self.basin(letters) else { continue };
                if let Some(other) = taken.insert(basin, name) {
                    self.fault(
                        "arrival-errors-basin",
                        letters.span(),
                        format!("basin \"{}\" is in table \"{other}\" already", letters.get_ref()),
                        "a basin has one table".to_owned(),
                        "take it out of one of them",
                    );
                }
                basins.push(basin);
            }
            if let Some(checked) = self.table(table) {
                tables.push((basins, checked));
            }
        }
        tables
    }

    fn basin(&mut self, letters: &Spanned<String>) -> Option<Basin> {
        let basin = Basin::from_letters(letters.get_ref());
        if basin.is_none() {
            let known: Vec<&str> = Basin::ALL.iter().map(|basin| basin.letters()).collect();
            self.fault(
                "arrival-errors-basin",
                letters.span(),
                format!("basin \"{}\" is unknown", letters.get_ref()),
                format!("basins are {}", known.join(", ")),
                "correct the letters",
            );
        }
        basin
    }

    fn table(&mut self, raw: &RawTable) -> Option<ErrorTable> {
        let before = self.findings.len();
        let leads = self.numbers(&raw.lead_h, "lead_h", LEAD_BOUNDS);
        self.leads(&raw.lead_h);
        let deviation = [&raw.along_nmi, &raw.cross_nmi, &raw.intensity_kt, &raw.size_share].map(Some);
        let bias = [&raw.along_bias_nmi, &raw.cross_bias_nmi, &raw.intensity_bias_kt, &raw.size_bias_share]
            .map(Option::as_ref);
        let serial =
            [&raw.along_serial, &raw.cross_serial, &raw.intensity_serial, &raw.size_serial].map(Some);
        let mut rows: Vec<ErrorRow> =
            leads.iter().map(|lead_h| ErrorRow { lead_h: *lead_h, ..ErrorRow::NONE }).collect();
        for (kind, (columns, given)) in COLUMNS.iter().zip([deviation, bias, serial]).enumerate() {
            for (component, (column, numbers)) in columns.iter().zip(given).enumerate() {
                let Some(numbers) = numbers else { continue };
                let values = self.numbers(numbers, column.name, column.bounds);
                self.length(numbers, column.name, leads.len());
                for (row, value) in rows.iter_mut().zip(values) {
                    let kinds = [&mut row.deviation, &mut row.bias, &mut row.serial];
                    if let Some(cell) = kinds.into_iter().nth(kind).and_then(|c| c.get_mut(component)) {
                        *cell = value;
                    }
                }
            }
        }
        let scaling = [&raw.along_by_wind, &raw.cross_by_wind, &raw.intensity_by_wind, &raw.size_by_reach];
        let settings = Settings {
            intensity_with_size: self.number(&raw.intensity_with_size, "intensity_with_size", MUTUAL_BOUNDS),
            size_follows_intensity: self.number(
                &raw.size_follows_intensity,
                "size_follows_intensity",
                FOLLOWS_BOUNDS,
            ),
            radii_relaxation_h: self.number(&raw.radii_relaxation_h, "radii_relaxation_h", RELAXATION_BOUNDS),
            accuracy_usual_nmi: self.number(&raw.accuracy_usual_nmi, "accuracy_usual_nmi", ACCURACY_BOUNDS),
            accuracy_power: self.number(&raw.accuracy_power, "accuracy_power", POWER_BOUNDS),
            accuracy_fades_h: self.number(&raw.accuracy_fades_h, "accuracy_fades_h", FADING_BOUNDS),
            scaling: std::array::from_fn(|i| match scaling[i] {
                Some(value) => self.number(value, SCALING[i], SCALING_BOUNDS),
                None => 0.0,
            }),
        };
        let table = ErrorTable::new(raw.name.get_ref(), raw.sources.clone(), rows, settings).ok()?;
        let table = match &raw.caution {
            Some(caution) => table.with_note(caution.clone()),
            None => table,
        };
        (self.findings.len() == before).then_some(table)
    }

    fn number(&mut self, value: &Spanned<f64>, name: &str, (least, most): (f64, f64)) -> f64 {
        let number = *value.get_ref();
        if !is_within(number, (least, most)) {
            self.fault(
                "arrival-errors-range",
                value.span(),
                format!("{name} is {number}"),
                format!("it lies within {least} to {most}"),
                "correct the number",
            );
        }
        number
    }

    fn numbers(&mut self, values: &Numbers, name: &str, bounds: (f64, f64)) -> Vec<f64> {
        values.get_ref().iter().map(|value| self.number(value, name, bounds)).collect()
    }

    fn length(&mut self, values: &Numbers, name: &str, leads: usize) {
        let length = values.get_ref().len();
        if length != leads {
            self.fault(
                "arrival-errors-length",
                values.span(),
                format!("{name} has {length} numbers"),
                format!("lead_h has {leads}, and every column has as many"),
                "add or remove numbers",
            );
        }
    }

    fn leads(&mut self, leads: &Numbers) {
        let values: Vec<f64> = leads.get_ref().iter().map(|lead| *lead.get_ref()).collect();
        let starts = values.first().is_some_and(|lead| lead.abs() <= 0.0);
        let rises = values.windows(2).all(|pair| matches!(pair, [a, b] if a < b));
        if !starts || !rises {
            self.fault(
                "arrival-errors-leads",
                leads.span(),
                format!("lead_h is {values:?}"),
                "leads start at 0 and rise".to_owned(),
                "put them in order",
            );
        }
    }

    fn elsewhere(&mut self, raw: &RawFile, tables: &[(Vec<Basin>, ErrorTable)]) -> Option<(ErrorTable, f64)> {
        let name = raw.elsewhere.table.get_ref();
        let widen = self.number(&raw.elsewhere.widen, "widen", (1.0, 5.0));
        let known: Vec<&str> = raw.table.iter().map(|table| table.name.get_ref().as_str()).collect();
        if !known.contains(&name.as_str()) {
            let hint = nearest(name, known.iter().copied())
                .map_or("name one of the tables".to_owned(), |near| format!("did you mean \"{near}\"?"));
            self.fault(
                "arrival-errors-elsewhere",
                raw.elsewhere.table.span(),
                format!("no table is called \"{name}\""),
                format!("tables are \"{}\"", known.join("\", \"")),
                &hint,
            );
        }
        tables.iter().find(|(_, table)| table.name() == name).map(|(_, table)| (table.clone(), widen))
    }
}
