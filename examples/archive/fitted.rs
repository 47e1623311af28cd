//! An error table fitted to an archive.
//!
//! Deviations are mean absolute errors x 1.2533, as offices publish mean errors and as single wild forecasts weigh less in them; of
//! size errors those of storms that reach far weigh more, as they come to more places. How deviations
//! grow with wind, stated accuracy and reach is the least-squares slope of ln |error|. Serial correlations are those of the errors over
//! their deviations.

use super::Archive;
use super::cases::{Case, LEADS_H, cases};
use snugdown::arrival::errors::{ErrorRow, ErrorTable, Settings};
use std::collections::BTreeMap;

/// Leads of a table; 60 h lies half way between its neighbours.
const TABLE_H: [f64; 9] = [0.0, 12.0, 24.0, 36.0, 48.0, 60.0, 72.0, 96.0, 120.0];

/// sqrt(pi / 2): the deviation of a normal error over its mean size.
const OVER_MEAN: f64 = 1.253_314_137_315_5;

/// Lead at which the stated accuracy no longer tells anything. Of 12, 36, 60 and 90 h the last two fit alike, and better than the others.
const ACCURACY_FADES_H: f64 = 60.0;

/// One component's errors over the factor by which they grow: for each lead, entry and value.
type Scaled = [Vec<(usize, f64)>; 8];

/// The fitted table of Atlantic forecasts, without one season if it is named.
pub fn table(archive: &Archive, without: Option<&str>) -> ErrorTable {
    let relaxation_h = relaxation(archive, without);
    let cases = cases(archive, without, &blank(relaxation_h));
    let seen = Seen { usual_accuracy_nmi: usual_accuracy(&cases), follows: following(&cases) };
    let [along, cross, intensity, size] = [0, 1, 2, 3]
        .map(|component| slopes(&cases, |case| seen.error(component, case), |case| seen.of(component, case)));
    let settings = Settings {
        intensity_with_size: 0.0,
        size_follows_intensity: seen.follows,
        radii_relaxation_h: relaxation_h,
        accuracy_usual_nmi: seen.usual_accuracy_nmi,
        accuracy_power: rounded(f64::midpoint(along[1], cross[1])),
        accuracy_fades_h: ACCURACY_FADES_H,
        scaling: [along[0], cross[0], intensity[0], size[0]].map(rounded),
    };
    let scaled = [0, 1, 2, 3].map(|component| seen.scaled(component, &cases, &settings));
    let together = [2, 3, 4].map(|lead| correlation(&scaled[2][lead], &scaled[3][lead]));
    let settings = Settings { intensity_with_size: rounded(together.iter().sum::<f64>() / 3.0), ..settings };
    let mut rows: Vec<ErrorRow> =
        TABLE_H.iter().map(|lead_h| ErrorRow { lead_h: *lead_h, ..ErrorRow::NONE }).collect();
    for (component, of) in scaled.iter().enumerate() {
        let reaches = if component == 3 { reaches(&cases) } else { BTreeMap::new() };
        let decimals = if component == 3 { 100.0 } else { 10.0 };
        let deviations = deviations(of, |entry, lead| reaches.get(&(entry, lead)).copied().unwrap_or(1.0));
        for ((row, deviation), serial) in rows.iter_mut().zip(deviations).zip(serials(of)) {
            row.deviation[component] = libm::round(deviation * decimals) / decimals;
            row.serial[component] = rounded(serial.min(1.0));
        }
    }
    ErrorTable::new("Atlantic, fitted", Vec::new(), rows, settings).unwrap_or_else(|error| panic!("{error}"))
}

fn rounded(value: f64) -> f64 {
    libm::round(value * 100.0) / 100.0
}

/// What errors are seen against.
struct Seen {
    usual_accuracy_nmi: f64,
    follows: f64,
}

impl Seen {
    /// The error of a component: along, cross (n mi), intensity (kt), size (share of the forecast radii once they followed the wind that
    /// came).
    fn error(&self, component: usize, case: &Case) -> Option<f64> {
        match component {
            0 => Some(case.along),
            1 => Some(case.cross),
            2 => Some(case.came_kt - case.wind_kt),
            _ => {
                let [forecast, came] = case.reach_nmi?;
                Some(
                    came * growth(self.follows, case.wind_kt)
                        / (forecast * growth(self.follows, case.came_kt))
                        - 1.0,
                )
            }
        }
    }

    /// The logarithms of what it grows with: the wind or the reach, and the stated accuracy.
    fn of(&self, component: usize, case: &Case) -> [f64; 2] {
        let wind = libm::log(case.wind_kt.clamp(25.0, 130.0) / 60.0);
        let reach =
            case.reach_nmi.map_or(0.0, |[forecast, _]| libm::log(forecast.clamp(30.0, 250.0) / 100.0));
        let fading = (1.0 - LEADS_H[case.lead] as f64 / ACCURACY_FADES_H).max(0.0);
        let accuracy =
            case.accuracy_nmi.map_or(0.0, |stated| libm::log(stated.max(5.0) / self.usual_accuracy_nmi));
        match component {
            0 | 1 => [wind, fading * accuracy],
            2 => [wind, 0.0],
            _ => [reach, 0.0],
        }
    }

    fn scaled(&self, component: usize, cases: &[Case], settings: &Settings) -> Scaled {
        let value = |case: &Case| {
            let [of, accuracy] = self.of(component, case);
            let factor = libm::exp(settings.scaling[component] * of + settings.accuracy_power * accuracy);
            Some((case.entry, self.error(component, case)? / factor))
        };
        std::array::from_fn(|lead| cases.iter().filter(|case| case.lead == lead).filter_map(value).collect())
    }
}

/// g = 1 - c (34 / V)^3.
fn growth(follows: f64, wind_kt: f64) -> f64 {
    1.0 - follows * libm::pow(34.0 / wind_kt.max(34.0), 3.0)
}

/// The forecast reach by entry and lead.
fn reaches(cases: &[Case]) -> BTreeMap<(usize, usize), f64> {
    cases.iter().filter_map(|case| Some(((case.entry, case.lead), case.reach_nmi?[0]))).collect()
}

/// Deviations at the leads of a table.
fn deviations(of: &Scaled, weight: impl Fn(usize, usize) -> f64) -> [f64; 9] {
    let at: [f64; 8] = std::array::from_fn(|lead| {
        let weights: f64 = of[lead].iter().map(|(entry, _)| weight(*entry, lead)).sum();
        let errors: f64 = of[lead].iter().map(|(entry, error)| weight(*entry, lead) * error.abs()).sum();
        OVER_MEAN * errors / weights.max(1e-9)
    });
    // What is measured at issue lies a quarter of the way from lead 0 to 12 h.
    let start = ((at[0] - 0.25 * at[1]) / 0.75).max(0.25 * at[0]);
    [start, at[1], at[2], at[3], at[4], f64::midpoint(at[4], at[5]), at[5], at[6], at[7]]
}

/// Correlations over 12 h: from the 9 h of the first pair of leads, and from the 24 h of the last three.
fn serials(of: &Scaled) -> [f64; 9] {
    let over = |lead: usize, power: f64| libm::pow(correlation(&of[lead - 1], &of[lead]).max(0.0), power);
    let (first, day) = (over(1, 12.0 / 9.0), over(5, 0.5));
    [first, first, over(2, 1.0), over(3, 1.0), over(4, 1.0), day, day, over(6, 0.5), over(7, 0.5)]
}

/// The correlation of two kinds of errors of the same advisories.
fn correlation(a: &[(usize, f64)], b: &[(usize, f64)]) -> f64 {
    let b: BTreeMap<usize, f64> = b.iter().copied().collect();
    let pairs: Vec<(f64, f64)> = a.iter().filter_map(|(entry, x)| Some((*x, *b.get(entry)?))).collect();
    let n = pairs.len().max(1) as f64;
    let (ma, mb) = (pairs.iter().map(|p| p.0).sum::<f64>() / n, pairs.iter().map(|p| p.1).sum::<f64>() / n);
    let sum = |f: &dyn Fn(f64, f64) -> f64| pairs.iter().map(|(x, y)| f(x - ma, y - mb)).sum::<f64>();
    sum(&|x, y| x * y) / f64::sqrt(sum(&|x, _| x * x) * sum(&|_, y| y * y))
}

/// The geometric mean of the stated accuracies, to 1 n mi.
fn usual_accuracy(cases: &[Case]) -> f64 {
    let logs: Vec<f64> =
        cases.iter().filter_map(|case| case.accuracy_nmi).map(|a| libm::log(a.max(5.0))).collect();
    libm::round(libm::exp(logs.iter().sum::<f64>() / logs.len().max(1) as f64))
}

/// Slopes of ln |error| against two quantities, with a mean of its own at each lead (so the quantities are taken from their means
/// there). Errors below a quarter of the mean size are counted as that: the logarithm would make too much of them, and winds are told
/// in steps of 5 kt.
fn slopes(cases: &[Case], error: impl Fn(&Case) -> Option<f64>, of: impl Fn(&Case) -> [f64; 2]) -> [f64; 2] {
    let (mut xx, mut xz, mut zz, mut xy, mut zy) = (1e-9, 0.0, 1e-9, 0.0, 0.0);
    for lead in 0..LEADS_H.len() {
        let at_lead = cases.iter().filter(|case| case.lead == lead);
        let counted: Vec<([f64; 2], f64)> =
            at_lead.filter_map(|case| Some((of(case), error(case)?.abs()))).collect();
        let n = counted.len().max(1) as f64;
        let mean = counted.iter().map(|(_, size)| size).sum::<f64>() / n;
        let points: Vec<[f64; 3]> =
            counted.iter().map(|([x, z], size)| [*x, *z, libm::log(size.max(0.25 * mean))]).collect();
        let centre: [f64; 3] = std::array::from_fn(|i| points.iter().map(|point| point[i]).sum::<f64>() / n);
        for point in &points {
            let [x, z, y] = std::array::from_fn(|i| point[i] - centre[i]);
            xx += x * x;
            xz += x * z;
            zz += z * z;
            xy += x * y;
            zy += z * y;
        }
    }
    let determinant = xx * zz - xz * xz;
    [(zz * xy - xz * zy) / determinant, (xx * zy - xz * xy) / determinant]
}

/// How far radii follow the strength: the c of [`growth`] with the least squares of ln(come / forecast) at 12 to 72 h.
fn following(cases: &[Case]) -> f64 {
    let misfit = |c: f64| {
        let counted = cases.iter().filter(|case| (1..=5).contains(&case.lead));
        let logs = counted.filter_map(|case| {
            let [forecast, came] = case.reach_nmi?;
            Some(libm::log(came * growth(c, case.wind_kt) / (forecast * growth(c, case.came_kt))))
        });
        logs.map(|log| log * log).sum::<f64>()
    };
    let tried = (0..=90).map(|percent| f64::from(percent) / 100.0);
    tried.min_by(|a, b| misfit(*a).total_cmp(&misfit(*b))).unwrap_or(0.0)
}

/// In which time the storm's own size is forgotten: the one of these hours with the least mean |ln(come / forecast)| at 96 and 120 h.
fn relaxation(archive: &Archive, without: Option<&str>) -> f64 {
    let misfit = |hours: &f64| {
        let logs: Vec<f64> = cases(archive, without, &blank(*hours))
            .iter()
            .filter(|case| case.lead >= 6)
            .filter_map(|case| case.reach_nmi.map(|[forecast, came]| libm::log(came / forecast).abs()))
            .collect();
        logs.iter().sum::<f64>() / logs.len().max(1) as f64
    };
    let tried = [12.0, 24.0, 36.0, 48.0, 72.0, 96.0, 144.0, 192.0].map(|hours| (misfit(&hours), hours));
    tried.into_iter().min_by(|a, b| a.0.total_cmp(&b.0)).map_or(36.0, |(_, hours)| hours)
}

/// A table that only says how radii relax.
fn blank(radii_relaxation_h: f64) -> ErrorTable {
    let settings = Settings {
        intensity_with_size: 0.0,
        size_follows_intensity: 0.0,
        radii_relaxation_h,
        accuracy_usual_nmi: 30.0,
        accuracy_power: 0.0,
        accuracy_fades_h: 1.0,
        scaling: [0.0; 4],
    };
    ErrorTable::new("", Vec::new(), vec![ErrorRow::NONE], settings).unwrap_or_else(|error| panic!("{error}"))
}
