//! What people and programs get to see: text and JSON, and the words in them.

pub mod arrival_text;
pub mod arrivals_text;
pub mod asked;
pub mod beside;
pub mod beside_text;
pub mod call_text;
pub mod calls_text;
pub mod changes_brief;
pub mod changes_text;
pub mod clock_text;
pub mod escape;
pub mod given_up_text;
pub mod head_text;
pub mod layout;
pub mod now_lists;
pub mod now_text;
pub mod plan_text;
pub mod record_lines;
pub mod review_text;
pub mod setting;
pub mod task_text;
pub mod wind_asked;
pub mod wind_text;
pub mod wire;
pub mod words;
