//! How wrong forecasts are: standard deviations by lead time, their biases and correlations, and for which
//! seas they hold.

use crate::advisory::forecast::Advisory;
use crate::arrival::basin::Basin;

/// The errors at one lead time. Arrays hold along, cross (n mi), intensity (kt), size (as a share of the
/// radii), in the order of [`crate::arrival::keyed::Component::ALL`].
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct ErrorRow {
    /// Hours after the base time of the forecast.
    pub lead_h: f64,
    /// Standard deviations.
    pub deviation: [f64; 4],
    /// Mean of (what happens - what was forecast): ahead, to the right of the motion in the northern
    /// hemisphere and to the left in the southern, stronger, larger.
    pub bias: [f64; 4],
    /// Correlation between the error 12 h earlier and the error at this lead; unused at lead 0.
    pub serial: [f64; 4],
}

/// The greatest wind (kt) and the mean reach of 34 kt (n mi) of the storms whose deviations stand in a table.
pub const WIND_OF_THE_TABLE_KT: f64 = 60.0;
/// See [`WIND_OF_THE_TABLE_KT`].
pub const REACH_OF_THE_TABLE_NMI: f64 = 100.0;

/// A fault in an error table's numbers.
#[derive(Clone, Debug, PartialEq, thiserror::Error)]
pub enum TableError {
    /// No row at all, or the first is not at lead 0.
    #[error("the first lead must be 0 h")]
    NoStart,
    /// A lead is not after the one before.
    #[error("lead {lead_h} h does not come after the one before")]
    LeadNotRising {
        /// The lead.
        lead_h: f64,
    },
    /// A number is not finite or out of its range.
    #[error("{what} at {lead_h} h is {value}, outside {least} to {most}")]
    OutOfRange {
        /// Which number.
        what: &'static str,
        /// At which lead.
        lead_h: f64,
        /// What it is.
        value: f64,
        /// The least allowed.
        least: f64,
        /// The most allowed.
        most: f64,
    },
}

/// Forecast errors of one office in one or more seas. Rows start at lead 0 and rise; deviations are not
/// negative; correlations lie within 0..1.
#[derive(Clone, Debug, PartialEq)]
pub struct ErrorTable {
    name: String,
    sources: Vec<String>,
    rows: Vec<ErrorRow>,
    settings: Settings,
    notes: Vec<String>,
}

/// The single numbers of an error table.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Settings {
    /// Correlation of the innovations of intensity and size, -1..1.
    pub intensity_with_size: f64,
    /// How far the radii of a storm follow its strength where it differs from the forecast, 0..1; 1 is as in
    /// the mean vortex.
    pub size_follows_intensity: f64,
    /// Hours in which a storm's own size relaxes by the factor e to the mean vortex after the last given
    /// radii, 1..1000.
    pub radii_relaxation_h: f64,
    /// The usual accuracy that advisories state of the present centre, n mi, 1..300: the centre's deviations in the table are of such
    /// forecasts.
    pub accuracy_usual_nmi: f64,
    /// With which power the centre's deviations grow with the stated accuracy at lead 0, 0..2.
    pub accuracy_power: f64,
    /// Hours of lead in which that power falls to 0, 1..1000.
    pub accuracy_fades_h: f64,
    /// With which power deviations grow: of along, cross and intensity with the forecast wind / 60 kt, of size with the forecast reach of
    /// gales / 100 n mi; each -2..2.
    pub scaling: [f64; 4],
}

impl ErrorTable {
    /// A table from checked numbers.
    ///
    /// # Errors
    /// [`TableError`] for the first number that breaks the table's invariant.
    pub fn new(
        name: impl Into<String>,
        sources: Vec<String>,
        rows: Vec<ErrorRow>,
        settings: Settings,
    ) -> Result<ErrorTable, TableError> {
        let Some(first) = rows.first() else { return Err(TableError::NoStart) };
        if first.lead_h.abs() > 0.0 {
            return Err(TableError::NoStart);
        }
        for pair in rows.windows(2) {
            let [a, b] = pair else { continue };
            if b.lead_h.is_nan() || b.lead_h <= a.lead_h {
                return Err(TableError::LeadNotRising { lead_h: b.lead_h });
            }
        }
        for row in &rows {
            row.check()?;
        }
        within("intensity_with_size", 0.0, settings.intensity_with_size, MUTUAL_BOUNDS)?;
        within("size_follows_intensity", 0.0, settings.size_follows_intensity, FOLLOWS_BOUNDS)?;
        within("radii_relaxation_h", 0.0, settings.radii_relaxation_h, RELAXATION_BOUNDS)?;
        within("accuracy_usual_nmi", 0.0, settings.accuracy_usual_nmi, ACCURACY_BOUNDS)?;
        within("accuracy_power", 0.0, settings.accuracy_power, POWER_BOUNDS)?;
        within("accuracy_fades_h", 0.0, settings.accuracy_fades_h, FADING_BOUNDS)?;
        for (name, value) in SCALING.iter().zip(settings.scaling) {
            within(name, 0.0, value, SCALING_BOUNDS)?;
        }
        Ok(ErrorTable { name: name.into(), sources, rows, settings, notes: Vec::new() })
    }

    /// What it is called.
    #[must_use]
    pub fn name(&self) -> &str {
        &self.name
    }

    /// Where its numbers come from.
    #[must_use]
    pub fn sources(&self) -> &[String] {
        &self.sources
    }

    /// What must be printed wherever its odds are.
    #[must_use]
    pub fn notes(&self) -> &[String] {
        &self.notes
    }

    /// The single numbers.
    #[must_use]
    pub fn settings(&self) -> Settings {
        self.settings
    }

    /// The errors at a lead: linear between rows, along the last two beyond the end; before lead 0 as at 0.
    #[must_use]
    pub fn at(&self, lead_h: f64) -> ErrorRow {
        let next = self.rows.partition_point(|row| row.lead_h <= lead_h).clamp(1, self.rows.len().max(2) - 1);
        let (Some(a), Some(b)) = (self.rows.get(next - 1), self.rows.get(next)) else {
            return ErrorRow { lead_h, ..self.rows.first().copied().unwrap_or(ErrorRow::NONE) };
        };
        let share = ((lead_h - a.lead_h) / (b.lead_h - a.lead_h)).max(0.0);
        let mix = |x: [f64; 4], y: [f64; 4]| {
            let mut out = x;
            for (o, to) in out.iter_mut().zip(y) {
                *o += (to - *o) * share;
            }
            out
        };
        ErrorRow {
            lead_h,
            deviation: mix(a.deviation, b.deviation).map(|d| d.max(0.0)),
            bias: mix(a.bias, b.bias),
            serial: if share > 0.0 { b.serial } else { a.serial },
        }
    }

    /// The same table with one more thing to print.
    #[must_use]
    pub fn with_note(mut self, note: String) -> ErrorTable {
        self.notes.push(note);
        self
    }

    /// The same table with every deviation multiplied by `factor` and one more thing to print.
    #[must_use]
    pub fn widened(&self, factor: f64, note: String) -> ErrorTable {
        let mut table = self.clone();
        for row in &mut table.rows {
            row.deviation = row.deviation.map(|d| d * factor.max(1.0));
        }
        table.notes.push(note);
        table
    }
}

impl ErrorRow {
    /// No error at all: what the single track is made with.
    pub const NONE: ErrorRow =
        ErrorRow { lead_h: 0.0, deviation: [0.0; 4], bias: [0.0; 4], serial: [0.0; 4] };

    fn check(&self) -> Result<(), TableError> {
        within("lead_h", self.lead_h, self.lead_h, LEAD_BOUNDS)?;
        for (columns, values) in COLUMNS.iter().zip([self.deviation, self.bias, self.serial]) {
            for (column, value) in columns.iter().zip(values) {
                within(column.name, self.lead_h, value, column.bounds)?;
            }
        }
        Ok(())
    }
}

/// Least and most lead in hours.
pub const LEAD_BOUNDS: (f64, f64) = (0.0, 400.0);

/// A column of numbers in an error table.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Column {
    /// Its key in the file.
    pub name: &'static str,
    /// Least and most allowed value. Wide enough for any real table: a number beyond is a slip of the keyboard.
    pub bounds: (f64, f64),
}

/// Columns of deviations, biases and serial correlations, each in the order of
/// [`crate::arrival::keyed::Component::ALL`].
pub const COLUMNS: [[Column; 4]; 3] = [
    [
        Column { name: "along_nmi", bounds: (0.0, 3000.0) },
        Column { name: "cross_nmi", bounds: (0.0, 3000.0) },
        Column { name: "intensity_kt", bounds: (0.0, 200.0) },
        Column { name: "size_share", bounds: (0.0, 3.0) },
    ],
    [
        Column { name: "along_bias_nmi", bounds: (-3000.0, 3000.0) },
        Column { name: "cross_bias_nmi", bounds: (-3000.0, 3000.0) },
        Column { name: "intensity_bias_kt", bounds: (-200.0, 200.0) },
        Column { name: "size_bias_share", bounds: (-3.0, 3.0) },
    ],
    [
        Column { name: "along_serial", bounds: (0.0, 1.0) },
        Column { name: "cross_serial", bounds: (0.0, 1.0) },
        Column { name: "intensity_serial", bounds: (0.0, 1.0) },
        Column { name: "size_serial", bounds: (0.0, 1.0) },
    ],
];

/// Keys of [`Settings::scaling`].
pub const SCALING: [&str; 4] = ["along_by_wind", "cross_by_wind", "intensity_by_wind", "size_by_reach"];

/// Bounds of [`Settings::scaling`].
pub const SCALING_BOUNDS: (f64, f64) = (-2.0, 2.0);
/// Bounds of [`Settings::accuracy_fades_h`].
pub const FADING_BOUNDS: (f64, f64) = (1.0, 1000.0);
/// Bounds of [`Settings::intensity_with_size`].
pub const MUTUAL_BOUNDS: (f64, f64) = (-1.0, 1.0);
/// Bounds of [`Settings::size_follows_intensity`].
pub const FOLLOWS_BOUNDS: (f64, f64) = (0.0, 0.95);
/// Bounds of [`Settings::radii_relaxation_h`].
pub const RELAXATION_BOUNDS: (f64, f64) = (1.0, 1000.0);
/// Bounds of [`Settings::accuracy_usual_nmi`].
pub const ACCURACY_BOUNDS: (f64, f64) = (1.0, 300.0);
/// Bounds of [`Settings::accuracy_power`].
pub const POWER_BOUNDS: (f64, f64) = (0.0, 2.0);

fn within(what: &'static str, lead_h: f64, value: f64, (least, most): (f64, f64)) -> Result<(), TableError> {
    if is_within(value, (least, most)) {
        Ok(())
    } else {
        Err(TableError::OutOfRange { what, lead_h, value, least, most })
    }
}

/// Whether a number is finite and within bounds.
#[must_use]
pub fn is_within(value: f64, (least, most): (f64, f64)) -> bool {
    value.is_finite() && value >= least && value <= most
}

/// All tables of one file, and what to do in a sea that none was made for.
#[derive(Clone, Debug, PartialEq)]
pub struct ErrorTables {
    tables: Vec<(Vec<Basin>, ErrorTable)>,
    elsewhere: (ErrorTable, f64),
}

impl ErrorTables {
    /// Tables with the basins they hold for, and the table and widening (at least 1) for every other sea.
    #[must_use]
    pub fn new(tables: Vec<(Vec<Basin>, ErrorTable)>, elsewhere: (ErrorTable, f64)) -> ErrorTables {
        ErrorTables { tables, elsewhere }
    }

    /// The tables with the basins they hold for.
    #[must_use]
    pub fn tables(&self) -> &[(Vec<Basin>, ErrorTable)] {
        &self.tables
    }

    /// The table for an advisory's sea. Where none was made for it, the one for elsewhere, widened, with a
    /// note to print.
    #[must_use]
    pub fn for_advisory(&self, advisory: &Advisory) -> ErrorTable {
        let basin = Basin::of(advisory);
        let fitting = basin
            .and_then(|basin| self.tables.iter().find(|(basins, _)| basins.contains(&basin)))
            .map(|(_, table)| table.clone());
        fitting.unwrap_or_else(|| {
            let (table, factor) = &self.elsewhere;
            let sea = basin.map_or("this sea".to_owned(), |basin| format!("the {basin}"));
            table.widened(
                *factor,
                format!(
                    "not fitted here: no error table for {sea}; \"{}\" is used with all spreads times {factor}",
                    table.name
                ),
            )
        })
    }
}

#[cfg(test)]
mod tests {
    use super::{ErrorRow, ErrorTable, Settings, TableError};
    use approx::assert_abs_diff_eq;

    const SETTINGS: Settings = Settings {
        intensity_with_size: 0.0,
        size_follows_intensity: 0.5,
        radii_relaxation_h: 36.0,
        accuracy_usual_nmi: 15.0,
        accuracy_power: 1.0,
        accuracy_fades_h: 12.0,
        scaling: [0.0; 4],
    };

    fn row(lead_h: f64, along: f64) -> ErrorRow {
        ErrorRow { lead_h, deviation: [along, 1.0, 1.0, 0.1], ..ErrorRow::NONE }
    }

    #[test]
    fn errors_between_rows_are_linear_and_go_on_growing_beyond_the_last() {
        let table = ErrorTable::new(
            "t",
            Vec::new(),
            vec![row(0.0, 10.0), row(12.0, 20.0), row(24.0, 50.0)],
            SETTINGS,
        )
        .unwrap();
        for (lead, along) in
            [(-3.0, 10.0), (0.0, 10.0), (6.0, 15.0), (12.0, 20.0), (24.0, 50.0), (36.0, 80.0)]
        {
            assert_abs_diff_eq!(table.at(lead).deviation[0], along, epsilon = 1e-12);
        }
    }

    #[test]
    fn a_table_of_one_row_is_constant() {
        let table = ErrorTable::new("t", Vec::new(), vec![row(0.0, 10.0)], SETTINGS).unwrap();
        assert_abs_diff_eq!(table.at(72.0).deviation[0], 10.0);
    }

    #[test]
    fn a_table_that_does_not_start_at_zero_or_does_not_rise_or_is_not_finite_is_refused() {
        let refused = |rows| ErrorTable::new("t", Vec::new(), rows, SETTINGS).unwrap_err();
        assert_eq!(refused(vec![]), TableError::NoStart);
        assert_eq!(refused(vec![row(12.0, 1.0)]), TableError::NoStart);
        assert_eq!(refused(vec![row(0.0, 1.0), row(0.0, 1.0)]), TableError::LeadNotRising { lead_h: 0.0 });
        assert!(matches!(refused(vec![row(0.0, f64::NAN)]), TableError::OutOfRange { .. }));
        assert!(matches!(refused(vec![row(0.0, -1.0)]), TableError::OutOfRange { .. }));
    }
}
