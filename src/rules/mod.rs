//! A port's rules: stages, duties, and the tasks that closing it takes; and the reader of their files.

pub mod codes;
pub mod desk;
pub mod folder;
pub mod limit;
pub mod pick;
pub mod reader_amount;
pub mod reader_limit;
pub mod reader_link;
pub mod reader_need;
pub mod reader_pick;
pub mod reader_stage;
pub mod reader_task;
pub mod stage;
pub mod task;
