//! The Beaufort scale against its published table.
#![allow(clippy::unwrap_used, reason = "helpers of tests may fail loudly")]

use snugdown::units::speed::{Knots, METRES_PER_SECOND_PER_KNOT};
use snugdown::wind::beaufort::{force, middle};

struct Row {
    force: u8,
    least_kt: f64,
    most_kt: Option<f64>,
    least_ms: f64,
    middle_ms: Option<f64>,
}

fn table() -> Vec<Row> {
    let read = |line: &str| {
        let cells: Vec<&str> = line.split(',').collect();
        Row {
            force: cells[0].parse().unwrap(),
            least_kt: cells[1].parse().unwrap(),
            most_kt: cells[2].parse().ok(),
            least_ms: cells[3].parse().unwrap(),
            middle_ms: cells[4].parse().ok(),
        }
    };
    include_str!("data/wmo-beaufort/scale.csv").lines().skip(1).map(read).collect()
}

#[test]
fn every_whole_knot_has_the_force_of_the_table() {
    let rows = table();
    assert_eq!(rows.len(), 13);
    let mut most_before = -1.0;
    for row in rows {
        assert_eq!(force(Knots::new(row.least_kt).unwrap()), row.force);
        assert_eq!(force(Knots::new(row.most_kt.unwrap_or(150.0)).unwrap()), row.force);
        // The m/s column starts between the last knot of the force before and the first of this one, both
        // rounded.
        let knots = row.least_ms / METRES_PER_SECOND_PER_KNOT;
        assert!(knots > most_before - 0.5 && knots < row.least_kt + 0.1, "{} m/s", row.least_ms);
        most_before = row.most_kt.unwrap_or(64.0);
    }
}

#[test]
fn the_middle_of_a_force_follows_the_formula() {
    for row in table() {
        let middle_kt = middle(row.force).get();
        if let Some(ms) = row.middle_ms {
            assert!((middle_kt * METRES_PER_SECOND_PER_KNOT - ms).abs() < 0.005, "force {}", row.force);
        }
        // Except for the ends, the middle lies in its own force.
        if (1..12).contains(&row.force) {
            assert_eq!(force(Knots::new(middle_kt).unwrap()), row.force);
        }
    }
}
