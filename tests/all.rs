//! Every test of the program, in one binary.

#![allow(clippy::unwrap_used, clippy::expect_used, clippy::panic)]

mod faults;
mod outside;
mod random_jobs;
