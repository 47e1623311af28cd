//! Prints what the compiled-in time-zone data says for 2026 to 2028, one zone a line.
//!
//! `cargo run --example zone_transitions > target/compiled-in.txt`; `tests/outside/zone_corrections.py` compares it with
//! a newer release. It looks at the data itself, not at the corrected clock.

use chrono_tz::{TZ_VARIANTS, Tz};
use snugdown::time::moment::{Minutes, Moment};
use snugdown::time::zone::{ZoneOffset, compiled_offset};

/// 2026-01-01T00:00Z and 2029-01-01T00:00Z in minutes since 1970.
const FIRST: i64 = 29_453_760;
const LAST: i64 = 31_032_000;

/// No zone changes its offset twice within this time.
const STEP: Minutes = Minutes::hours(3);

fn transitions(zone: Tz) -> Vec<(Moment, ZoneOffset)> {
    let state = |at: Moment| compiled_offset(zone, at.to_utc());
    let mut at = Moment::from_epoch_minutes(FIRST);
    let mut found = vec![(at, state(at))];
    while at.epoch_minutes() + STEP.get() < LAST {
        let (mut low, mut high) = (at, at + STEP);
        at = high;
        if state(low) == state(high) {
            continue;
        }
        let before = state(low);
        while high - low > Minutes::new(1) {
            let middle = low + Minutes::new((high - low).get() / 2);
            *(if state(middle) == before { &mut low } else { &mut high }) = middle;
        }
        found.push((high, state(high)));
    }
    found
}

#[expect(clippy::print_stdout, reason = "printing is this program's job")]
fn main() {
    for zone in TZ_VARIANTS {
        let stretches = transitions(zone);
        let words: Vec<String> = stretches
            .iter()
            .map(|(from, offset)| format!("{from}={}/{}", offset.east.get(), offset.abbreviation))
            .collect();
        println!("{} {}", zone.name(), words.join(" "));
    }
}
