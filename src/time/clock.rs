//! The port's clock: local time at the edges, UTC inside.
