//! The test suite: one binary, one module a question.

mod answers;
mod bare;
mod command;
mod common_practice;
mod compare;
mod demos;
mod library;
mod limits;
mod no_panic;
mod outside;
mod program;
mod published;
mod quantities;
mod readme;
mod rooms;
mod second_road;
mod wrong_input;
