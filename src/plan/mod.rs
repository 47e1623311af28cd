//! From rules, record and odds to a timed plan; its audit; what changed since the one before.

pub mod adjust;
pub mod adoption;
pub mod audit;
pub mod audit_case;
pub mod audit_people;
pub mod audit_record;
pub mod audit_times;
pub mod audit_water;
pub mod calendar;
pub mod chain;
pub mod changes;
pub mod draft;
pub mod fold;
pub mod heads;
pub mod in_force;
pub mod inputs;
pub mod lines;
pub mod make;
pub mod news;
pub mod odds;
pub mod problem;
pub mod relief;
pub mod review;
pub mod roles;
pub mod sheet;
pub mod storms;
