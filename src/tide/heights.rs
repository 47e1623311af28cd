//! The height of the tide at an instant.

/// A port's tide.
#[derive(Clone, Debug)]
pub struct Tide;
