//! The port's clock: local time at the edges, UTC inside.

/// A port's local time.
#[derive(Clone, Debug)]
pub struct PortClock {
    zone: String,
}

impl PortClock {
    /// The zone's name.
    #[must_use]
    pub fn zone_name(&self) -> &str {
        &self.zone
    }
}
