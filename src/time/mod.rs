//! Time: whole minutes UTC inside, the port's clock at the edges.

pub mod clock;
pub mod local;
pub mod moment;
pub mod span;
pub mod windows;
pub mod zone;
