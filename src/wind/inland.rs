//! How a storm's greatest wind decays over land.

/// What the wind falls to over land, kt (Kaplan & DeMaria 1995).
pub const BACKGROUND_KT: f64 = 26.7;

/// At the coast the wind over land is this share of that over the sea, applied once (Kaplan & DeMaria 1995).
pub const AT_THE_COAST: f64 = 0.9;

/// Decay per hour (Kaplan & DeMaria 1995).
const ALPHA_PER_H: f64 = 0.095;

/// The greatest wind `hours` after a storm came ashore with `landfall_kt`, both in kt.
///
/// V(t) = Vb + (R V0 - Vb) exp(-alpha t), Vb = 26.7 kt, R = 0.9, alpha = 0.095 / h (Kaplan & DeMaria 1995, Journal of
/// Applied Meteorology 34:2499-2512; fitted to landfalls in the United States south of 37 N). A storm that is weaker at the
/// coast than Vb / R keeps its wind.
#[must_use]
pub fn wind_after(landfall_kt: f64, hours: f64) -> f64 {
    further_inland(ashore(landfall_kt), hours)
}

/// The wind just inland of the coast.
#[must_use]
pub fn ashore(landfall_kt: f64) -> f64 {
    if landfall_kt * AT_THE_COAST <= BACKGROUND_KT { landfall_kt } else { landfall_kt * AT_THE_COAST }
}

/// The wind `hours` later, all of them over land.
#[must_use]
pub fn further_inland(wind_kt: f64, hours: f64) -> f64 {
    if wind_kt <= BACKGROUND_KT {
        return wind_kt;
    }
    BACKGROUND_KT + (wind_kt - BACKGROUND_KT) * libm::exp(-ALPHA_PER_H * hours.max(0.0))
}

#[cfg(test)]
mod tests {
    use super::wind_after;
    use approx::assert_abs_diff_eq;

    #[test]
    fn the_wind_decays_as_published() {
        // Worked from the published formula: V0 64, 100, 130 kt after 0, 6, 12, 24 h.
        for (landfall, winds) in [
            (64.0, [57.6, 44.2, 36.6, 29.9]),
            (100.0, [90.0, 62.5, 46.9, 33.2]),
            (130.0, [117.0, 77.8, 55.6, 35.9]),
        ] {
            for (hours, wind) in [0.0, 6.0, 12.0, 24.0].into_iter().zip(winds) {
                assert_abs_diff_eq!(wind_after(landfall, hours), wind, epsilon = 0.06);
            }
        }
        // Down to 34 kt after 15.19, 22.74, 26.48 h.
        for (landfall, hours) in [(64.0, 15.19), (100.0, 22.74), (130.0, 26.48)] {
            assert_abs_diff_eq!(wind_after(landfall, hours), 34.0, epsilon = 0.01);
        }
    }

    #[test]
    fn a_weak_storm_does_not_decay_and_none_grows() {
        assert_abs_diff_eq!(wind_after(25.0, 24.0), 25.0);
        for landfall in 0..200 {
            let landfall = f64::from(landfall);
            assert!(wind_after(landfall, 3.0) <= landfall);
        }
    }
}
