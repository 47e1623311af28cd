//! What a port is: places, water, berths, ships, plant, people and craft; and the reader of its files.

pub mod codes;
pub mod contact;
pub mod fleet;
pub mod folder;
pub mod harbour;
pub mod kind;
pub mod known;
pub mod means;
pub mod reader_contact;
pub mod reader_fleet;
pub mod reader_means;
pub mod reader_places;
pub mod reader_tide;
pub mod reader_water;
pub mod water;
