//! How sure an office says it is of its track: probability circles, and mean errors quoted for days 4 and 5.

use crate::advisory::forecast::{Advisory, ProbabilityCircle};
use crate::units::length::NauticalMiles;
use chrono::{DateTime, Duration, Utc};

/// A standard deviation of the track on each of two axes, and when it holds.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct TrackDeviation {
    /// Hours after the base time.
    pub lead_h: f64,
    /// On each axis, in n mi.
    pub deviation_nmi: f64,
}

/// The mean of a distance whose two components are normal with deviation 1: sqrt(pi / 2).
const MEAN_OF_RAYLEIGH: f64 = 1.253_314_137_315_500_1;

impl ProbabilityCircle {
    /// The standard deviation on each axis.
    ///
    /// ```text
    /// sigma = r_p / sqrt(-2 ln(1 - p))
    /// ```
    /// as the distance of a centre with two independent normal components of deviation sigma exceeds r with the chance
    /// exp(-r^2 / (2 sigma^2)). A 70 % circle has r = 1.5518 sigma.
    #[must_use]
    pub fn deviation_nmi(&self) -> f64 {
        let p = self.chance.get().clamp(0.01, 0.99);
        self.radius.get() / f64::sqrt(-2.0 * libm::log(1.0 - p))
    }
}

impl Advisory {
    /// What must be said where the office's own figures make the spread of the track; `None` if it gives none.
    #[must_use]
    pub fn own_spread_words(&self) -> Option<String> {
        match (self.circles.is_empty(), self.quoted_track_errors) {
            (false, _) => Some("track errors: from the office's own probability circles".to_owned()),
            (true, Some((day_4, day_5))) => {
                Some(format!("track errors on day 4 and day 5: the office's own means, {day_4} and {day_5}"))
            }
            (true, None) => None,
        }
    }

    /// The office's own track deviations, leads rising: from its circles, else from the mean errors that it quotes for
    /// day 4 and day 5; empty if it says nothing.
    ///
    /// ```text
    /// sigma = mean error / sqrt(pi / 2)
    /// ```
    #[must_use]
    pub fn own_track_deviations(&self) -> Vec<TrackDeviation> {
        let lead_h = |valid: DateTime<Utc>| (valid - self.base).num_minutes() as f64 / 60.0;
        let mut own: Vec<TrackDeviation> = self
            .circles
            .iter()
            .map(|circle| TrackDeviation {
                lead_h: lead_h(circle.valid),
                deviation_nmi: circle.deviation_nmi(),
            })
            .collect();
        if own.is_empty()
            && let Some((day_4, day_5)) = self.quoted_track_errors
        {
            let quoted = |hours: i64, mean: NauticalMiles| TrackDeviation {
                lead_h: lead_h(self.base + Duration::hours(hours)),
                deviation_nmi: mean.get() / MEAN_OF_RAYLEIGH,
            };
            own.extend([quoted(96, day_4), quoted(120, day_5)]);
        }
        own.retain(|one| one.lead_h > 0.0 && one.deviation_nmi > 0.0);
        own.sort_by(|a, b| a.lead_h.total_cmp(&b.lead_h));
        own.dedup_by(|later, earlier| (later.lead_h - earlier.lead_h).abs() < 0.01);
        own
    }
}

#[cfg(test)]
mod tests {
    use crate::advisory::forecast::ProbabilityCircle;
    use crate::units::chance::Chance;
    use crate::units::length::NauticalMiles;
    use approx::assert_abs_diff_eq;
    use chrono::DateTime;

    #[test]
    fn a_circle_gives_the_deviation_that_leaves_its_chance_outside() {
        // 1 - exp(-1.5518^2 / 2) = 0.7000; two thirds: 1.4823 (both also in the notes on cone radii).
        for (radius, chance, sigma) in [(155.18, 0.7, 100.0), (148.23, 2.0 / 3.0, 100.0)] {
            let circle = ProbabilityCircle {
                valid: DateTime::UNIX_EPOCH,
                radius: NauticalMiles::new(radius).unwrap(),
                chance: Chance::new(chance).unwrap(),
            };
            assert_abs_diff_eq!(circle.deviation_nmi(), sigma, epsilon = 0.01);
        }
    }
}
