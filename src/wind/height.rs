//! Wind at other heights than 10 m.

use crate::geo::exposure::ExposureClass;
use crate::units::length::Metres;

/// Heights are held within these bounds (m): below, a mean wind profile means little; above, the surface
/// layer ends.
const HEIGHT_BOUNDS_M: (f64, f64) = (2.0, 200.0);

/// Exponent of the power law for 3-s gusts: they grow less with height than means do, as gust factors fall.
/// 0.10 is the upper of 0.08 to 0.10 in common use (from memory): the stronger gust aloft, the safe side.
const GUST_EXPONENT: f64 = 0.10;

/// Roughness length in metres of the ground that the wind of a class has crossed.
///
/// Davenport and WMO-No. 8 classes, from memory: sea 0.0002, open coast 0.005, open land 0.03. Wind off the
/// land has crossed land.
#[must_use]
pub fn roughness_m(class: ExposureClass) -> f64 {
    match class {
        ExposureClass::AtSea => 0.0002,
        ExposureClass::OffSea => 0.005,
        ExposureClass::OffLand | ExposureClass::InLand => 0.03,
    }
}

/// V(z) / V(10 m) of the logarithmic law: ln(z / z0) / ln(10 / z0), z and z0 in metres.
#[must_use]
pub fn logarithmic(z_m: f64, z0_m: f64) -> f64 {
    libm::log(z_m / z0_m) / libm::log(10.0 / z0_m)
}

/// V(z) / V(10 m) of the power law: (z / 10)^alpha, z in metres.
#[must_use]
pub fn power(z_m: f64, alpha: f64) -> f64 {
    libm::pow(z_m / 10.0, alpha)
}

/// What to multiply a mean wind at 10 m with, to have it at a height.
#[must_use]
pub fn mean_factor(class: ExposureClass, height: Metres) -> f64 {
    logarithmic(held(height), roughness_m(class))
}

/// The same for a 3-s gust.
#[must_use]
pub fn gust_factor(height: Metres) -> f64 {
    power(held(height), GUST_EXPONENT)
}

fn held(height: Metres) -> f64 {
    height.get().clamp(HEIGHT_BOUNDS_M.0, HEIGHT_BOUNDS_M.1)
}

#[cfg(test)]
mod tests {
    use super::{logarithmic, power};
    use approx::assert_abs_diff_eq;

    #[test]
    fn the_wind_at_fifty_metres_agrees_with_both_laws() {
        assert_abs_diff_eq!(power(50.0, 1.0 / 7.0), 1.2585, epsilon = 5e-5);
        assert_abs_diff_eq!(power(50.0, 0.11), 1.1937, epsilon = 5e-5);
        assert_abs_diff_eq!(logarithmic(50.0, 0.0002), 1.1487, epsilon = 5e-5);
        assert_abs_diff_eq!(logarithmic(50.0, 0.03), 1.2771, epsilon = 5e-5);
    }
}
