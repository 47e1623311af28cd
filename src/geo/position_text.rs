//! A position as people write it: "22 18.0 N 040 48.0 W".

use crate::geo::position::Position;

/// Reads degrees and minutes, latitude first; `None` for anything else.
#[must_use]
pub fn read_position(text: &str) -> Option<Position> {
    let words: Vec<&str> = text.split_whitespace().collect();
    let [lat_d, lat_m, ns, lon_d, lon_m, ew] = words.as_slice() else { return None };
    let part = |degrees: &str, minutes: &str| -> Option<f64> {
        let degrees: u32 = degrees.parse().ok()?;
        let minutes: f64 = minutes.parse().ok()?;
        (0.0..60.0).contains(&minutes).then(|| f64::from(degrees) + minutes / 60.0)
    };
    let latitude = part(lat_d, lat_m)?
        * match *ns {
            "N" => 1.0,
            "S" => -1.0,
            _ => return None,
        };
    let longitude = part(lon_d, lon_m)?
        * match *ew {
            "E" => 1.0,
            "W" => -1.0,
            _ => return None,
        };
    Position::new(latitude, longitude).ok()
}
