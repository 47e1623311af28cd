//! Where land lies, coarsely: for the decay of storms over it and for orientation, never for navigation.

use std::sync::LazyLock;

/// Rings of the coast; see the first lines of the file for what they are.
const COASTLINE: &str = include_str!("coastline.txt");

/// A point of a ring: degrees east, degrees north.
type Corner = (f64, f64);

static RINGS: LazyLock<Vec<Vec<Corner>>> = LazyLock::new(|| COASTLINE.lines().filter_map(ring).collect());

fn ring(line: &str) -> Option<Vec<Corner>> {
    let hundredths = |text: &str| text.parse::<i32>().ok().map(|value| f64::from(value) / 100.0);
    let corner = |text: &str| {
        let (east, north) = text.split_once(',')?;
        Some((hundredths(east)?, hundredths(north)?))
    };
    (!line.starts_with('#')).then(|| line.split(' ').filter_map(corner).collect())
}

/// The rings of the coast, each a closed line of (degrees east, degrees north) without its first point again.
#[must_use]
pub fn coast() -> &'static [Vec<(f64, f64)>] {
    &RINGS
}

/// Side of a cell of a [`LandMask`] in degrees: about the detail of the coast itself. Our choice.
const CELL_DEGREES: f64 = 0.1;

/// Land and water in a part of the world, cell by cell.
#[derive(Clone, Debug, PartialEq)]
pub struct LandMask {
    south: f64,
    west: f64,
    columns: usize,
    is_land: Vec<bool>,
}

impl LandMask {
    /// The part between two latitudes, and from a longitude eastwards over `width` degrees; beyond it all counts as water.
    ///
    /// Cost: rows x edges in their latitudes; 30 x 40 degrees take about a millisecond.
    #[must_use]
    pub fn over(south: f64, north: f64, west: f64, width: f64) -> LandMask {
        let (south, north) = (south.clamp(-90.0, 90.0), north.clamp(-90.0, 90.0));
        let rows = f64::ceil((north - south).max(0.0) / CELL_DEGREES) as usize;
        let columns = f64::ceil(width.clamp(0.0, 360.0) / CELL_DEGREES) as usize;
        let mut mask = LandMask { south, west, columns, is_land: vec![false; rows * columns] };
        let mut crossings: Vec<Vec<f64>> = vec![Vec::new(); rows];
        for ring in coast() {
            let next = ring.iter().skip(1).chain(ring.first());
            for (a, b) in ring.iter().zip(next) {
                mask.cross(*a, *b, &mut crossings);
            }
        }
        for (row, easts) in crossings.iter_mut().enumerate() {
            easts.sort_unstable_by(f64::total_cmp);
            for pair in easts.chunks_exact(2) {
                let [from, to] = pair else { continue };
                // The same stretch stands again a turn of the globe further on.
                for turn in [-360.0, 0.0, 360.0] {
                    mask.fill(row, from - west + turn, to - west + turn);
                }
            }
        }
        mask
    }

    /// Notes where the edge from `a` to `b` crosses the middle lines of the rows.
    fn cross(&self, a: Corner, b: Corner, crossings: &mut [Vec<f64>]) {
        let ((x0, y0), (x1, y1)) = if a.1 <= b.1 { (a, b) } else { (b, a) };
        let row_at = |north: f64| f64::ceil((north - self.south) / CELL_DEGREES - 0.5).max(0.0) as usize;
        let last = row_at(y1).min(crossings.len());
        for (row, easts) in crossings.iter_mut().enumerate().take(last).skip(row_at(y0)) {
            let north = self.south + (row as f64 + 0.5) * CELL_DEGREES;
            easts.push(x0 + (x1 - x0) * (north - y0) / (y1 - y0));
        }
    }

    /// Makes cells land whose middles lie between two distances east of the west side, degrees.
    fn fill(&mut self, row: usize, from: f64, to: f64) {
        let column = |east: f64| (f64::ceil(east / CELL_DEGREES - 0.5).max(0.0) as usize).min(self.columns);
        let (first, end) = (column(from), column(to));
        let start = row * self.columns;
        if let Some(cells) = self.is_land.get_mut(start + first..start + end.max(first)) {
            cells.fill(true);
        }
    }

    /// Whether there is land at a point; beyond the mask there is none.
    #[must_use]
    pub fn is_land(&self, latitude: f64, longitude: f64) -> bool {
        let east = (longitude - self.west).rem_euclid(360.0);
        let (row, column) = ((latitude - self.south) / CELL_DEGREES, east / CELL_DEGREES);
        if row < 0.0 || column >= self.columns as f64 {
            return false;
        }
        self.is_land.get(row as usize * self.columns + column as usize).copied().unwrap_or(false)
    }

    /// Whether there is any land in it.
    #[must_use]
    pub fn has_land(&self) -> bool {
        self.is_land.contains(&true)
    }
}

#[cfg(test)]
mod tests {
    use super::{LandMask, coast};

    /// Land and sea as any atlas shows them.
    const LAND: [(f64, f64); 6] =
        [(40.0, -100.0), (28.0, -81.5), (23.5, 121.0), (-25.0, 135.0), (66.0, 178.0), (66.5, -178.0)];
    const SEA: [(f64, f64); 7] = [
        (25.0, -90.0),
        (22.5, -41.0),
        (30.0, -60.0),
        (-15.0, 180.0),
        (20.0, 115.0),
        (42.0, 51.0), // The Caspian Sea, a ring within a ring.
        (-40.0, -180.0),
    ];

    #[test]
    fn land_and_sea_lie_where_an_atlas_has_them_whatever_part_is_asked_for() {
        for west in [-180.0, -30.0, 100.0, 190.0] {
            let world = LandMask::over(-90.0, 90.0, west, 360.0);
            for (latitude, longitude) in LAND {
                assert!(world.is_land(latitude, longitude), "{latitude} {longitude} from {west}");
            }
            for (latitude, longitude) in SEA {
                assert!(!world.is_land(latitude, longitude), "{latitude} {longitude} from {west}");
            }
        }
        let part = LandMask::over(20.0, 35.0, -100.0, 30.0);
        assert!(part.is_land(28.0, -81.5) && !part.is_land(40.0, -100.0) && part.has_land());
        assert!(!LandMask::over(20.0, 25.0, -45.0, 8.0).has_land());
    }

    #[test]
    fn the_land_takes_up_as_much_of_the_globe_as_handbooks_say() {
        // 29 % of the surface of the Earth (common knowledge; 148.9 of 510.1 million km2), here to a point.
        let world = LandMask::over(-90.0, 90.0, -180.0, 360.0);
        let (mut land, mut all) = (0.0, 0.0);
        for (index, is_land) in world.is_land.iter().enumerate() {
            let latitude = -90.0 + ((index / world.columns) as f64 + 0.5) * 0.1;
            let area = libm::cos(latitude.to_radians());
            all += area;
            land += if *is_land { area } else { 0.0 };
        }
        assert!((land / all - 0.292).abs() < 0.01, "{}", land / all);
    }

    #[test]
    fn every_ring_is_read() {
        assert!(coast().len() > 100 && coast().iter().all(|ring| ring.len() >= 3));
    }

    #[test]
    fn odd_parts_of_the_world_are_empty_or_whole_but_never_a_fault() {
        for (south, north, west, width) in
            [(10.0, 5.0, 0.0, 10.0), (-200.0, 200.0, 900.0, 900.0), (0.0, 1.0, f64::NAN, f64::NAN)]
        {
            let mask = LandMask::over(south, north, west, width);
            let _ = mask.is_land(0.5, 20.0);
        }
    }
}
