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

/// The fitted table of Atlantic forecasts, without one season if it is named.
pub fn table(archive: &Archive, without: Option<&str>) -> ErrorTable {
    let relaxation_h = relaxation(archive, without);
    let cases = cases(archive, without, &blank(relaxation_h));
    let usual = usual_accuracy(&cases);
    let scaling_of =
        |error: &dyn Fn(&Case) -> Option<f64>, of: &[&dyn Fn(&Case) -> f64]| slopes(&cases, error, of);
    let wind: &dyn Fn(&Case) -> f64 = &|case| libm::log(case.wind_kt.clamp(25.0, 130.0) / 60.0);
    let accuracy: &dyn Fn(&Case) -> f64 = &|case| {
        let fading = (1.0 - LEADS_H[case.lead] as f64 / ACCURACY_FADES_H).max(0.0);
        fading * libm::log(case.accuracy_nmi.map_or(1.0, |stated| stated.max(5.0) / usual))
    };
    let follows = following(&cases);
    let size = move |case: &Case| {
        let g = |wind: f64| 1.0 - follows * libm::pow(34.0 / wind.max(34.0), 3.0);
        case.reach_nmi.map(|[forecast, came]| came / (forecast * g(case.came_kt) / g(case.wind_kt)) - 1.0)
    };
    let reach: &dyn Fn(&Case) -> f64 =
        &|case| case.reach_nmi.map_or(0.0, |[forecast, _]| libm::log(forecast.clamp(30.0, 250.0) / 100.0));
    let errors: [&dyn Fn(&Case) -> Option<f64>; 4] = [
        &|case| Some(case.along),
        &|case| Some(case.cross),
        &|case| Some(case.came_kt - case.wind_kt),
        &size,
    ];
    let along = scaling_of(errors[0], &[wind, accuracy]);
    let cross = scaling_of(errors[1], &[wind, accuracy]);
    let scaling = [along[0], cross[0], scaling_of(errors[2], &[wind])[0], scaling_of(errors[3], &[reach])[0]]
        .map(rounded);
    let accuracy_power = rounded(f64::midpoint(along[1], cross[1]));
    let factor = |component: usize, case: &Case| {
        let of = if component == 3 { reach(case) } else { wind(case) };
        let centre = if component < 2 { accuracy_power * accuracy(case) } else { 0.0 };
        libm::exp(scaling[component] * of + centre)
    };
    // By component, then lead: entry and error over factor.
    let scaled: [[Vec<(usize, f64)>; 8]; 4] = std::array::from_fn(|component| {
        std::array::from_fn(|lead| {
            let at_lead = cases.iter().filter(|case| case.lead == lead);
            at_lead
                .filter_map(|case| Some((case.entry, errors[component](case)? / factor(component, case))))
                .collect()
        })
    });
    let settings = Settings {
        intensity_with_size: rounded(
            [2, 3, 4].map(|lead| correlation(&scaled[2][lead], &scaled[3][lead])).iter().sum::<f64>() / 3.0,
        ),
        size_follows_intensity: follows,
        radii_relaxation_h: relaxation_h,
        accuracy_usual_nmi: usual,
        accuracy_power,
        accuracy_fades_h: ACCURACY_FADES_H,
        scaling,
    };
    let reaches: BTreeMap<(usize, usize), f64> =
        cases.iter().filter_map(|case| Some(((case.entry, case.lead), case.reach_nmi?[0]))).collect();
    let rows = rows(&scaled, |case| reaches.get(case).copied().unwrap_or(0.0));
    ErrorTable::new("Atlantic, fitted", Vec::new(), rows, settings).unwrap_or_else(|error| panic!("{error}"))
}

fn rounded(value: f64) -> f64 {
    libm::round(value * 100.0) / 100.0
}

fn rows(scaled: &[[Vec<(usize, f64)>; 8]; 4], reach_of: impl Fn(&(usize, usize)) -> f64) -> Vec<ErrorRow> {
    let mut rows: Vec<ErrorRow> =
        TABLE_H.iter().map(|lead_h| ErrorRow { lead_h: *lead_h, ..ErrorRow::NONE }).collect();
    for component in 0..4 {
        let of = &scaled[component];
        let deviation: [f64; 8] = std::array::from_fn(|lead| {
            let weight = |entry: &usize| if component == 3 { reach_of(&(*entry, lead)) } else { 1.0 };
            let weights: f64 = of[lead].iter().map(|(entry, _)| weight(entry)).sum();
            OVER_MEAN * of[lead].iter().map(|(entry, error)| weight(entry) * error.abs()).sum::<f64>()
                / weights.max(1e-9)
        });
        // What is measured at issue lies a quarter of the way from lead 0 to 12 h.
        let start = ((deviation[0] - 0.25 * deviation[1]) / 0.75).max(0.25 * deviation[0]);
        let between = f64::midpoint(deviation[4], deviation[5]);
        let columns = [
            start,
            deviation[1],
            deviation[2],
            deviation[3],
            deviation[4],
            between,
            deviation[5],
            deviation[6],
            deviation[7],
        ];
        // Over 12 h: from the 9 h of the first pair, and from the 24 h of the last three.
        let over = |lead: usize, power: f64| libm::pow(correlation(&of[lead - 1], &of[lead]).max(0.0), power);
        let day = over(5, 0.5);
        let first = over(1, 12.0 / 9.0);
        let serial =
            [first, first, over(2, 1.0), over(3, 1.0), over(4, 1.0), day, day, over(6, 0.5), over(7, 0.5)];
        for ((row, deviation), serial) in rows.iter_mut().zip(columns).zip(serial) {
            let decimals = if component == 3 { 100.0 } else { 10.0 };
            row.deviation[component] = libm::round(deviation * decimals) / decimals;
            row.serial[component] = rounded(serial.min(1.0));
        }
    }
    rows
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

/// Slopes of ln |error| against one or two quantities, with a mean of its own at each lead (so the quantities are taken from their means
/// there). Errors below a quarter of the mean size are counted as that: the logarithm would make too much of
/// them, and winds are told in steps of 5 kt.
fn slopes(cases: &[Case], error: &dyn Fn(&Case) -> Option<f64>, of: &[&dyn Fn(&Case) -> f64]) -> [f64; 2] {
    let (mut xx, mut xz, mut zz, mut xy, mut zy) = (1e-9, 0.0, 1e-9, 0.0, 0.0);
    for lead in 0..LEADS_H.len() {
        let counted: Vec<(&Case, f64)> = cases
            .iter()
            .filter(|case| case.lead == lead)
            .filter_map(|case| Some((case, error(case)?.abs())))
            .collect();
        let n = counted.len().max(1) as f64;
        let mean = counted.iter().map(|(_, e)| e).sum::<f64>() / n;
        let line: Vec<[f64; 3]> = counted
            .iter()
            .map(|(case, e)| {
                [of[0](case), of.get(1).map_or(0.0, |of| of(case)), libm::log(e.max(0.25 * mean))]
            })
            .collect();
        let centre: [f64; 3] = std::array::from_fn(|i| line.iter().map(|l| l[i]).sum::<f64>() / n);
        for l in &line {
            let [x, z, y] = std::array::from_fn(|i| l[i] - centre[i]);
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

/// How far radii follow the strength: the c of g(V) = 1 - c (34 / V)^3 with the least squares of ln(come / forecast) at 12 to 72 h.
fn following(cases: &[Case]) -> f64 {
    let g = |c: f64, wind: f64| libm::log(1.0 - c * libm::pow(34.0 / wind.max(34.0), 3.0));
    let squares = |c: f64| {
        let logs: Vec<f64> = cases
            .iter()
            .filter(|case| (1..=5).contains(&case.lead))
            .filter_map(|case| {
                case.reach_nmi.map(|[f, came]| libm::log(came / f) - g(c, case.came_kt) + g(c, case.wind_kt))
            })
            .collect();
        logs.iter().map(|l| l * l).sum::<f64>()
    };
    let tried = (0..=90).map(|percent| f64::from(percent) / 100.0);
    tried.min_by(|a, b| squares(*a).total_cmp(&squares(*b))).unwrap_or(0.0)
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
