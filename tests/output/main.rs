//! What people and programs are shown, from plans built by hand.
#![cfg(test)]

mod fixture;
mod on_one_screen;
mod read_as_text;
mod read_by_programs;
mod told_to_people;
