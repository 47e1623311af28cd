//! The JSON that programs read. Keys are kept once they are here; more may join. `schema` rises only if a key changes.
//!
//! Times are UTC in RFC 3339 to the second, exact where people are told rounded ones. Durations end in `_min` and are
//! whole minutes. Chances are shares between 0 and 1.

pub mod arrivals;
pub mod calls;
pub mod changes;
pub mod findings;
pub mod head;
pub mod now;
pub mod plan;
pub mod port;
pub mod record;
pub mod review;
pub mod task;
pub mod value;
pub mod wind;
