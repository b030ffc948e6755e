//! The test suite: one binary, one module a question.

mod bare;
mod common_practice;
mod compare;
mod demos;
mod library;
mod limits;
mod outside;
mod published;
mod quantities;
mod readme;
mod rooms;
mod second_road;
