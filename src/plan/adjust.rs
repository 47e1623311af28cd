//! What a plan may do beyond the plain tasks: cuts, stand-ins, more members, lifted orders.

use std::collections::{BTreeMap, BTreeSet};

/// Choices that a plan is made with. The plain plan has none; reliefs are found by planning again with some.
#[derive(Clone, Debug, PartialEq, Eq, Default, PartialOrd, Ord)]
pub struct Adjustments {
    /// Tasks that take their shorter way.
    pub cut: BTreeSet<String>,
    /// Tasks that are given up for their stand-ins.
    pub substituted: BTreeSet<String>,
    /// Members more than the files give, by pool.
    pub more: BTreeMap<usize, usize>,
    /// Tasks whose ordered start is lifted.
    pub lifted: BTreeSet<String>,
}
