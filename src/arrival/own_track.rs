//! An office's own track errors in place of a table's: its probability circles, or its mean errors for days 4 and 5.

use crate::advisory::own_spread::TrackDeviation;
use crate::arrival::errors::ErrorTable;

/// Hours before the first lead of an office's own track errors over which they take the place of the table's. Our choice.
const DAY_H: f64 = 24.0;

/// What to multiply the table's deviations along and across the track with at a lead (hours after the base time).
///
/// ```text
/// f(lead) = sigma_own / sqrt((sigma_along^2 + sigma_cross^2) / 2)
/// ```
/// at a lead for which the office says something, so that along and across keep the table's proportion; linear between
/// such leads, from 1 within a day before the first, and as at the last one after it. 1 where `own`, leads rising, is
/// empty.
#[must_use]
pub fn own_factor(own: &[TrackDeviation], table: &ErrorTable, lead_h: f64) -> f64 {
    let factor = |own: &TrackDeviation| {
        let [along, cross, ..] = table.at(own.lead_h).deviation;
        let sigma = f64::sqrt((along * along + cross * cross) / 2.0);
        if sigma > 0.0 { own.deviation_nmi / sigma } else { 1.0 }
    };
    let next = own.partition_point(|own| own.lead_h <= lead_h);
    match (next.checked_sub(1).and_then(|i| own.get(i)), own.get(next)) {
        (None, None) => 1.0,
        (Some(last), None) => factor(last),
        (before, Some(after)) => {
            let (from, start) =
                before.map_or(((after.lead_h - DAY_H).max(0.0), 1.0), |own| (own.lead_h, factor(own)));
            let share = ((lead_h - from) / (after.lead_h - from)).clamp(0.0, 1.0);
            start + (factor(after) - start) * share
        }
    }
}

#[cfg(test)]
mod tests {
    use super::own_factor;
    use crate::advisory::own_spread::TrackDeviation;
    use crate::arrival::errors::{ErrorRow, ErrorTable, Settings};
    use approx::assert_abs_diff_eq;

    fn table() -> ErrorTable {
        let settings = Settings {
            intensity_with_size: 0.0,
            size_follows_intensity: 0.5,
            radii_relaxation_h: 36.0,
            accuracy_usual_nmi: 30.0,
            accuracy_power: 0.0,
            accuracy_fades_h: 12.0,
            scaling: [0.0; 4],
        };
        let row =
            |lead_h, along, cross| ErrorRow { lead_h, deviation: [along, cross, 1.0, 0.1], ..ErrorRow::NONE };
        ErrorTable::new("t", Vec::new(), vec![row(0.0, 10.0, 10.0), row(100.0, 70.0, 10.0)], settings)
            .unwrap()
    }

    #[test]
    fn what_the_office_says_holds_at_its_leads_and_fades_in_over_the_day_before_the_first() {
        let own = [(96.0, 100.0), (120.0, 150.0)]
            .map(|(lead_h, deviation_nmi)| TrackDeviation { lead_h, deviation_nmi });
        // Along and across at 96 h: 10 + 0.96 x 60 = 67.6 and 10; sqrt((67.6^2 + 10^2) / 2) = 48.32.
        let (at_96, at_120) = (100.0 / 48.32, 150.0 / f64::sqrt((82.0 * 82.0 + 100.0) / 2.0));
        let cases = [
            (0.0, 1.0),
            (72.0, 1.0),
            (84.0, (1.0 + at_96) / 2.0),
            (96.0, at_96),
            (108.0, (at_96 + at_120) / 2.0),
            (120.0, at_120),
            (168.0, at_120),
        ];
        for (lead, factor) in cases {
            assert_abs_diff_eq!(own_factor(&own, &table(), lead), factor, epsilon = 0.001);
        }
        assert_abs_diff_eq!(own_factor(&[], &table(), 96.0), 1.0);
    }

    #[test]
    fn a_circle_for_the_first_half_day_replaces_the_table_from_the_start() {
        let own = [TrackDeviation { lead_h: 12.0, deviation_nmi: 30.0 }];
        let full = 30.0 / f64::sqrt((17.2 * 17.2 + 100.0) / 2.0);
        assert_abs_diff_eq!(own_factor(&own, &table(), 6.0), (1.0 + full) / 2.0, epsilon = 1e-9);
        assert_abs_diff_eq!(own_factor(&own, &table(), 12.0), full, epsilon = 1e-9);
    }
}
