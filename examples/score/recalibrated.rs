//! The official odds, recalibrated: what the same frequency table would say if it were made again from other seasons.

use crate::reckoned::Row;

/// Fills in the recalibrated odds of each season from all the others, lead by lead.
///
/// logit q = a + b logit p, a and b of greatest likelihood; p is held within 0.5 % of 0 and 1.
pub fn fill(rows: &mut [Row], seasons: &[String]) {
    for season in seasons {
        for i in 0..7 {
            let others: Vec<(f64, f64)> = rows
                .iter()
                .filter(|row| row.season() != season)
                .map(|row| (logit(row.official[i]), row.happened(i)))
                .collect();
            // With a single season there is nothing to learn from.
            let (a, b) = if others.is_empty() { (0.0, 1.0) } else { fitted(&others) };
            for row in rows.iter_mut().filter(|row| row.season() == season) {
                row.recalibrated[i] = chance(a + b * logit(row.official[i]));
            }
        }
    }
}

fn logit(p: f64) -> f64 {
    let p = p.clamp(0.005, 0.995);
    libm::log(p / (1.0 - p))
}

fn chance(x: f64) -> f64 {
    1.0 / (1.0 + libm::exp(-x))
}

/// Newton's method for the two coefficients.
fn fitted(pairs: &[(f64, f64)]) -> (f64, f64) {
    let (mut a, mut b) = (0.0, 1.0);
    for _ in 0..50 {
        let (mut ga, mut gb, mut haa, mut hab, mut hbb) = (0.0, 0.0, 1e-9, 0.0, 1e-9);
        for (x, y) in pairs {
            let q = chance(a + b * x);
            let weight = q * (1.0 - q);
            ga += y - q;
            gb += (y - q) * x;
            haa += weight;
            hab += weight * x;
            hbb += weight * x * x;
        }
        let determinant = haa * hbb - hab * hab;
        a += (hbb * ga - hab * gb) / determinant;
        b += (haa * gb - hab * ga) / determinant;
    }
    (a, b)
}
