//! A place's exposure, and the wind over the open sea at which a limit is met there.

use crate::geo::exposure::{Exposure, ExposureClass};
use crate::units::bearing::Bearing;
use crate::units::length::Metres;
use crate::units::speed::Knots;
use crate::units::wind::{Averaging, WindLimit};
use crate::wind::averaging::conversion;
use crate::wind::height::{gust_factor, mean_factor};

/// The mean wind at a place as a share of that over the open sea.
///
/// At sea and with the wind off the sea 1 (WMO/TD-No. 1555 carries the 10-min mean across the beach unchanged). Over land 0.8 (Knaff et al. 2011, as used by public
/// wind-field codes). Off the land at the shore 0.9: our choice, half way, as the wind has not yet settled to the sea.
#[must_use]
pub fn land_share(class: ExposureClass) -> f64 {
    match class {
        ExposureClass::AtSea | ExposureClass::OffSea => 1.0,
        ExposureClass::OffLand => 0.9,
        ExposureClass::InLand => 0.8,
    }
}

/// A limit as seen from the open sea.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct OpenSeaLimit {
    /// The wind over the open sea, at 10 m, in the advisory's averaging, at which the limit is met at the place.
    pub speed: Knots,
    /// The wind at the place, averaged and at the height of the limit, as a multiple of that.
    pub factor: f64,
    /// The exposure it was reckoned with.
    pub class: ExposureClass,
    /// Another exposure of the place would have given a greater one: the smallest is taken, and this should be said.
    pub is_least_of_several: bool,
}

/// The wind over the open sea (10 m, averaged as `advisory`) that stands for `limit` at this place.
///
/// speed = limit / factor, factor = wind at the place / wind over the open sea:
/// * at sea: averaging of the advisory -> averaging of the limit, by [`conversion`];
/// * elsewhere: averaging of the advisory -> 10 min at sea, times [`land_share`], times 10 min -> averaging of the limit in the place's class;
/// * both times the factor of the height: logarithmic law over the class's ground for means, power law for gusts.
///
/// Where exposure differs by direction, the direction at the time is not known beforehand: the smallest such speed of all its classes is taken, so that the limit is never met later than
/// reckoned.
#[must_use]
pub fn open_sea_limit(exposure: &Exposure, limit: &WindLimit, advisory: Averaging) -> OpenSeaLimit {
    let of = |class| (class, place_factor(class, limit.averaging, limit.height, advisory));
    let mut greatest = of(exposure.otherwise);
    let mut is_least_of_several = false;
    for (class, factor) in exposure.classes().into_iter().map(of) {
        is_least_of_several |= class != greatest.0;
        if factor > greatest.1 {
            greatest = (class, factor);
        }
    }
    let (class, factor) = greatest;
    OpenSeaLimit { speed: Knots::clamped(limit.speed.get() / factor), factor, class, is_least_of_several }
}

/// Whether a wind measured at a place, 10 m above it, meets a limit there; `None` if it is averaged over less time than
/// the limit, as a gust says little about a mean.
///
/// measured x [`conversion`] to the limit's averaging x factor of the limit's height >= limit, with the greatest product of
/// all exposures of the place.
#[must_use]
pub fn observed_meets(
    exposure: &Exposure,
    (measured, averaging): (Knots, Averaging),
    limit: &WindLimit,
) -> Option<bool> {
    if averaging.seconds() < limit.averaging.seconds() {
        return None;
    }
    let factor = |class| {
        conversion(class, averaging, limit.averaging) * height_factor(class, limit.averaging, limit.height)
    };
    let greatest = exposure.classes().into_iter().map(factor).fold(0.0, f64::max);
    Some(measured.get() * greatest >= limit.speed.get() - SAME_KT)
}

/// Speeds nearer than this are the same: far below what anybody measures, above the errors of arithmetic.
const SAME_KT: f64 = 1e-6;

/// What turns the wind over the open sea into the wind at one place, whatever its direction.
#[derive(Clone, Debug, PartialEq)]
pub struct Shelter<'a> {
    exposure: &'a Exposure,
    by_class: [Factors; 4],
}

/// Multiples of the open-sea wind (10 m, averaged as the advisory).
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Factors {
    /// The mean wind at the place.
    pub mean: f64,
    /// The 3-s gust there.
    pub gust: f64,
}

impl<'a> Shelter<'a> {
    /// The factors of a place for means over `averaging` and for gusts, both at `height`.
    #[must_use]
    pub fn of(
        exposure: &'a Exposure,
        averaging: Averaging,
        height: Metres,
        advisory: Averaging,
    ) -> Shelter<'a> {
        let by_class = ExposureClass::ALL.map(|class| Factors {
            mean: place_factor(class, averaging, height, advisory),
            gust: place_factor(class, Averaging::Gust3s, height, advisory),
        });
        Shelter { exposure, by_class }
    }

    /// The factors for a wind from this direction.
    #[must_use]
    pub fn from(&self, direction: Bearing) -> Factors {
        self.by_class[self.exposure.to_wind_from(direction) as usize]
    }
}

/// The wind at a place of this class, averaged over `averaging` at `height`, as a multiple of the open-sea wind of the
/// advisory.
fn place_factor(class: ExposureClass, averaging: Averaging, height: Metres, advisory: Averaging) -> f64 {
    let at_ten_metres = match class {
        ExposureClass::AtSea => conversion(class, advisory, averaging),
        ExposureClass::InLand | ExposureClass::OffLand | ExposureClass::OffSea => {
            conversion(ExposureClass::AtSea, advisory, Averaging::Minute10)
                * land_share(class)
                * conversion(class, Averaging::Minute10, averaging)
        }
    };
    at_ten_metres * height_factor(class, averaging, height)
}

/// A wind at a height as a multiple of that at 10 m.
fn height_factor(class: ExposureClass, averaging: Averaging, height: Metres) -> f64 {
    match averaging {
        Averaging::Gust3s => gust_factor(height),
        Averaging::Minute1 | Averaging::Minute2 | Averaging::Minute3 | Averaging::Minute10 => {
            mean_factor(class, height)
        }
    }
}

#[cfg(test)]
mod tests {
    use super::open_sea_limit;
    use crate::geo::exposure::{Exposure, ExposureClass, ExposureSector};
    use crate::units::bearing::Bearing;
    use crate::units::length::Metres;
    use crate::units::speed::Knots;
    use crate::units::wind::{Averaging, WindLimit};
    use approx::assert_abs_diff_eq;

    fn limit(speed: f64, averaging: Averaging, height: f64) -> WindLimit {
        WindLimit { speed: Knots::new(speed).unwrap(), averaging, height: Metres::new(height).unwrap() }
    }

    #[test]
    fn a_gale_at_sea_in_the_advisorys_own_averaging_is_itself() {
        for averaging in Averaging::ALL {
            let seen = open_sea_limit(
                &Exposure::all_round(ExposureClass::AtSea),
                &limit(34.0, averaging, 10.0),
                averaging,
            );
            assert_abs_diff_eq!(seen.speed.get(), 34.0, epsilon = 1e-12);
        }
    }

    #[test]
    fn a_gust_limit_is_met_in_less_wind_than_its_number() {
        // 50 kt over 1 min at sea bring gusts of 64.2 kt on a coast open to the sea: 46.4 x 1.38 by the table's own 10-min factor.
        let seen = open_sea_limit(
            &Exposure::all_round(ExposureClass::OffSea),
            &limit(64.2, Averaging::Gust3s, 10.0),
            Averaging::Minute1,
        );
        assert_abs_diff_eq!(seen.speed.get(), 50.0, epsilon = 0.15);
    }

    #[test]
    fn a_cranes_limit_high_up_is_met_earlier_than_at_ten_metres() {
        let exposure = Exposure::all_round(ExposureClass::OffSea);
        let at = |height| {
            open_sea_limit(&exposure, &limit(38.9, Averaging::Gust3s, height), Averaging::Minute1).speed.get()
        };
        assert_abs_diff_eq!(at(10.0) / at(50.0), libm::pow(5.0, 0.10), epsilon = 1e-12);
    }

    #[test]
    fn the_smallest_equivalent_is_taken_where_exposure_differs_by_direction() {
        let sector = ExposureSector {
            from: Bearing::wrapped(300.0),
            to: Bearing::wrapped(60.0),
            class: ExposureClass::OffSea,
        };
        let mixed = Exposure { otherwise: ExposureClass::InLand, sectors: vec![sector] };
        let ten_minutes = limit(34.0, Averaging::Minute10, 10.0);
        let seen = open_sea_limit(&mixed, &ten_minutes, Averaging::Minute1);
        assert_eq!((seen.class, seen.is_least_of_several), (ExposureClass::OffSea, true));
        let uniform =
            open_sea_limit(&Exposure::all_round(ExposureClass::OffSea), &ten_minutes, Averaging::Minute1);
        assert_eq!((uniform.speed, uniform.is_least_of_several), (seen.speed, false));
        assert_eq!(mixed.to_wind_from(Bearing::wrapped(10.0)), ExposureClass::OffSea);
        assert_eq!(mixed.to_wind_from(Bearing::wrapped(180.0)), ExposureClass::InLand);
    }
}
