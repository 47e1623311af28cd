//! The invented storms of demo-port.

use crate::bulletin::{Line, Storm};

/// All of them.
pub const STORMS: [Storm; 4] = [OSKELA, TILVASK, MURGELA, ZERUNDA];

/// The way all of them come: hours before the nearest approach, latitude north, longitude east.
const WAY: [(f64, f64, f64); 21] = [
    (-144.0, 10.39, -22.58),
    (-132.0, 10.89, -24.54),
    (-120.0, 11.43, -26.48),
    (-108.0, 12.00, -28.40),
    (-96.0, 12.61, -30.30),
    (-84.0, 13.25, -32.17),
    (-72.0, 13.97, -34.01),
    (-60.0, 14.81, -35.77),
    (-48.0, 15.82, -37.44),
    (-36.0, 17.06, -38.94),
    (-24.0, 18.55, -40.16),
    (-12.0, 20.33, -41.00),
    (0.0, 22.35, -41.35),
    (12.0, 24.60, -41.08),
    (24.0, 27.03, -39.99),
    (36.0, 29.50, -37.98),
    (48.0, 31.93, -34.98),
    (60.0, 34.27, -31.41),
    (72.0, 36.20, -27.40),
    (96.0, 39.00, -19.50),
    (144.0, 43.00, -12.00),
];

/// And how strong they are on it, kt.
const LIFE: [(f64, f64); 9] = [
    (-144.0, 38.0),
    (-96.0, 46.0),
    (-48.0, 57.0),
    (-12.0, 69.0),
    (0.0, 70.0),
    (24.0, 61.0),
    (60.0, 46.0),
    (96.0, 38.0),
    (200.0, 35.0),
];

/// The storm of the main demonstration: approaches from the east-south-east, turns north and passes close to the west
/// of the port.
const OSKELA: Storm = Storm {
    name: "OSKELA",
    id: "AL802026",
    folder: "",
    track: &WAY,
    life: &LIFE,
    lines: &[
        on_its_way(1, (14, 15), -132.0, 128.25, 1.0),
        on_its_way(2, (14, 21), -126.0, 122.25, 1.0),
        on_its_way(3, (15, 3), -120.0, 115.5, 1.0),
        on_its_way(4, (15, 9), -114.0, 110.0, 1.0),
        on_its_way(5, (15, 15), -108.0, 102.75, 1.0),
        on_its_way(6, (15, 21), -102.0, 97.5, 1.0),
        on_its_way(7, (16, 3), -96.0, 91.0, 1.0),
        on_its_way(8, (16, 9), -90.0, 85.25, 1.0),
        on_its_way(9, (16, 15), -84.0, 79.5, 1.0),
        on_its_way(10, (16, 21), -78.0, 71.75, 1.0),
        on_its_way(11, (17, 3), -72.0, 62.5, 1.0),
        on_its_way(12, (17, 9), -64.0, 49.25, 1.1),
        on_its_way(13, (17, 15), -56.0, 42.0, 1.1),
        on_its_way(14, (17, 21), -48.0, 34.25, 1.1),
        on_its_way(15, (18, 3), -40.0, 27.25, 1.1),
        on_its_way(16, (18, 9), -32.0, 21.5, 1.1),
    ],
};

/// A near miss: from one advisory to the next it is forecast to turn north earlier.
const TILVASK: Storm = Storm {
    name: "TILVASK",
    id: "AL812026",
    folder: "storms/near-miss/",
    track: &WAY,
    life: &LIFE,
    lines: &[
        tilvask(5, (16, 3), -84.0, 84.0, 60.0),
        tilvask(6, (16, 9), -78.0, 79.0, 110.0),
        tilvask(7, (16, 15), -72.0, 73.0, 150.0),
        tilvask(8, (16, 21), -66.0, 67.0, 190.0),
        tilvask(9, (17, 3), -60.0, 61.0, 215.0),
        tilvask(10, (17, 9), -54.0, 55.0, 235.0),
    ],
};

/// A storm that stalls on its way: each advisory puts its passage off.
const MURGELA: Storm = Storm {
    name: "MURGELA",
    id: "AL822026",
    folder: "storms/stall/",
    track: &WAY,
    life: &LIFE,
    lines: &[
        on_its_way(11, (16, 9), -62.0, 72.0, 1.0),
        on_its_way(12, (16, 15), -57.0, 70.0, 1.0),
        on_its_way(13, (16, 21), -54.0, 76.0, 1.0),
        on_its_way(14, (17, 3), -52.0, 88.0, 1.0),
        on_its_way(15, (17, 9), -51.0, 102.0, 1.0),
    ],
};

/// A storm that forms near the port and is first named thirty hours before its gale may come.
const ZERUNDA: Storm = Storm {
    name: "ZERUNDA",
    id: "AL832026",
    folder: "storms/late-named/",
    track: &WAY,
    life: &[
        (-60.0, 30.0),
        (-40.0, 36.0),
        (-12.0, 56.0),
        (0.0, 61.0),
        (24.0, 56.0),
        (96.0, 38.0),
        (200.0, 35.0),
    ],
    lines: &[on_its_way(1, (17, 3), -40.0, 53.0, 1.1), on_its_way(2, (17, 9), -35.0, 45.0, 1.1)],
};

/// An advisory of a storm on its usual way, so strong as usual.
const fn on_its_way(number: u32, issued: (u32, u32), here: f64, passes_in: f64, larger: f64) -> Line {
    Line { number, issued, here, passes_in, aside: 0.0, stronger: 0.0, larger }
}

/// An advisory of the near miss, weaker and smaller than usual.
const fn tilvask(number: u32, issued: (u32, u32), here: f64, passes_in: f64, aside: f64) -> Line {
    Line { number, issued, here, passes_in, aside, stronger: -5.0, larger: 0.9 }
}
