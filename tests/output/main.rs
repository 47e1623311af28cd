//! What people and programs are shown, from plans built by hand.
#![cfg(test)]

mod fixture;
mod on_one_screen;
mod read_as_text;
