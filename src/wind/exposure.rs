//! A place's exposure, and the wind over the open sea at which a limit is met there.

use crate::units::bearing::Bearing;
use crate::units::speed::Knots;
use crate::units::wind::{Averaging, WindLimit};
use crate::wind::averaging::{ExposureClass, conversion};
use crate::wind::height::{gust_factor, mean_factor};

/// The mean wind at a place as a share of that over the open sea.
///
/// At sea and with the wind off the sea 1 (WMO/TD-No. 1555 carries the 10-min mean across the beach
/// unchanged). Over land 0.8 (Knaff et al. 2011, as used by public wind-field codes). Off the land at the
/// shore 0.9: our choice, half way, as the wind has not yet settled to the sea.
#[must_use]
pub fn land_share(class: ExposureClass) -> f64 {
    match class {
        ExposureClass::AtSea | ExposureClass::OffSea => 1.0,
        ExposureClass::OffLand => 0.9,
        ExposureClass::InLand => 0.8,
    }
}

/// From which directions the wind has another exposure.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Sector {
    /// Where it begins, going clockwise; the direction from which the wind blows.
    pub from: Bearing,
    /// Where it ends.
    pub to: Bearing,
    /// The exposure in it.
    pub class: ExposureClass,
}

impl Sector {
    /// Whether a wind from `direction` falls in it; a sector whose ends are equal is the whole circle.
    #[must_use]
    pub fn contains(&self, direction: Bearing) -> bool {
        let width = Bearing::wrapped(self.to.get() - self.from.get()).get();
        let offset = Bearing::wrapped(direction.get() - self.from.get()).get();
        width <= 0.0 || offset <= width
    }
}

/// How a place lies to the wind.
#[derive(Clone, Debug, PartialEq)]
pub struct Exposure {
    /// The exposure to winds from outside all sectors.
    pub class: ExposureClass,
    /// Directions with another exposure; where they overlap the first holds.
    pub sectors: Vec<Sector>,
}

/// A limit as seen from the open sea.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct OpenSeaLimit {
    /// The wind over the open sea, at 10 m, in the advisory's averaging, at which the limit is met at the
    /// place.
    pub speed: Knots,
    /// The wind at the place, averaged and at the height of the limit, as a multiple of that.
    pub factor: f64,
    /// The exposure it was reckoned with.
    pub class: ExposureClass,
    /// Another exposure of the place would have given a greater one: the smallest is taken, and this should
    /// be said.
    pub is_least_of_several: bool,
}

impl Exposure {
    /// The same exposure to all winds.
    #[must_use]
    pub fn uniform(class: ExposureClass) -> Exposure {
        Exposure { class, sectors: Vec::new() }
    }

    /// The class for a wind from a direction.
    #[must_use]
    pub fn class_for(&self, from: Bearing) -> ExposureClass {
        self.sectors.iter().find(|sector| sector.contains(from)).map_or(self.class, |sector| sector.class)
    }

    /// The wind over the open sea (10 m, averaged as `advisory`) that stands for `limit` at this place.
    ///
    /// speed = limit / factor, factor = wind at the place / wind over the open sea:
    /// * at sea: averaging of the advisory -> averaging of the limit, by [`conversion`];
    /// * elsewhere: averaging of the advisory -> 10 min at sea, times [`land_share`], times 10 min ->
    ///   averaging of the limit in the place's class;
    /// * both times the factor of the height: logarithmic law over the class's ground for means, power
    ///   law for gusts.
    ///
    /// Where exposure differs by direction, the direction at the time is not known beforehand: the smallest
    /// such speed of all its classes is taken, so that the limit is never met later than reckoned.
    #[must_use]
    pub fn open_sea_limit(&self, limit: &WindLimit, advisory: Averaging) -> OpenSeaLimit {
        let classes = std::iter::once(self.class).chain(self.sectors.iter().map(|sector| sector.class));
        let of = |class| (class, place_factor(class, limit, advisory));
        let mut greatest = of(self.class);
        let mut is_least_of_several = false;
        for (class, factor) in classes.map(of) {
            is_least_of_several |= class != greatest.0;
            if factor > greatest.1 {
                greatest = (class, factor);
            }
        }
        let (class, factor) = greatest;
        OpenSeaLimit { speed: Knots::clamped(limit.speed.get() / factor), factor, class, is_least_of_several }
    }
}

/// The wind that `limit` speaks of, at a place of this class, as a multiple of the open-sea wind of the
/// advisory.
fn place_factor(class: ExposureClass, limit: &WindLimit, advisory: Averaging) -> f64 {
    let at_ten_metres = match class {
        ExposureClass::AtSea => conversion(class, advisory, limit.averaging),
        ExposureClass::InLand | ExposureClass::OffLand | ExposureClass::OffSea => {
            conversion(ExposureClass::AtSea, advisory, Averaging::Minute10)
                * land_share(class)
                * conversion(class, Averaging::Minute10, limit.averaging)
        }
    };
    let height = match limit.averaging {
        Averaging::Gust3s => gust_factor(limit.height),
        Averaging::Minute1 | Averaging::Minute2 | Averaging::Minute3 | Averaging::Minute10 => {
            mean_factor(class, limit.height)
        }
    };
    at_ten_metres * height
}

#[cfg(test)]
mod tests {
    use super::{Exposure, Sector};
    use crate::units::bearing::Bearing;
    use crate::units::length::Metres;
    use crate::units::speed::Knots;
    use crate::units::wind::{Averaging, WindLimit};
    use crate::wind::averaging::ExposureClass;
    use approx::assert_abs_diff_eq;

    fn limit(speed: f64, averaging: Averaging, height: f64) -> WindLimit {
        WindLimit { speed: Knots::new(speed).unwrap(), averaging, height: Metres::new(height).unwrap() }
    }

    #[test]
    fn a_gale_at_sea_in_the_advisorys_own_averaging_is_itself() {
        for averaging in Averaging::ALL {
            let seen = Exposure::uniform(ExposureClass::AtSea)
                .open_sea_limit(&limit(34.0, averaging, 10.0), averaging);
            assert_abs_diff_eq!(seen.speed.get(), 34.0, epsilon = 1e-12);
        }
    }

    #[test]
    fn a_gust_limit_is_met_in_less_wind_than_its_number() {
        // 50 kt over 1 min at sea bring gusts of 64.2 kt on a coast open to the sea: 46.4 x 1.38 by the
        // table's own 10-min factor.
        let seen = Exposure::uniform(ExposureClass::OffSea)
            .open_sea_limit(&limit(64.2, Averaging::Gust3s, 10.0), Averaging::Minute1);
        assert_abs_diff_eq!(seen.speed.get(), 50.0, epsilon = 0.15);
    }

    #[test]
    fn a_cranes_limit_high_up_is_met_earlier_than_at_ten_metres() {
        let exposure = Exposure::uniform(ExposureClass::OffSea);
        let at = |height| {
            exposure.open_sea_limit(&limit(38.9, Averaging::Gust3s, height), Averaging::Minute1).speed.get()
        };
        assert_abs_diff_eq!(at(10.0) / at(50.0), libm::pow(5.0, 0.10), epsilon = 1e-12);
    }

    #[test]
    fn the_smallest_equivalent_is_taken_where_exposure_differs_by_direction() {
        let sector = Sector {
            from: Bearing::wrapped(300.0),
            to: Bearing::wrapped(60.0),
            class: ExposureClass::OffSea,
        };
        let mixed = Exposure { class: ExposureClass::InLand, sectors: vec![sector] };
        let ten_minutes = limit(34.0, Averaging::Minute10, 10.0);
        let seen = mixed.open_sea_limit(&ten_minutes, Averaging::Minute1);
        assert_eq!((seen.class, seen.is_least_of_several), (ExposureClass::OffSea, true));
        let uniform =
            Exposure::uniform(ExposureClass::OffSea).open_sea_limit(&ten_minutes, Averaging::Minute1);
        assert_eq!((uniform.speed, uniform.is_least_of_several), (seen.speed, false));
        assert_eq!(mixed.class_for(Bearing::wrapped(10.0)), ExposureClass::OffSea);
        assert_eq!(mixed.class_for(Bearing::wrapped(180.0)), ExposureClass::InLand);
    }
}
