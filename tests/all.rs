//! Every test of the program, in one binary.

#![allow(clippy::unwrap_used, clippy::expect_used, clippy::panic, clippy::print_stderr, clippy::disallowed_methods, clippy::type_complexity)]

mod command_line;
mod faults;
mod floors;
mod hostile;
mod outside;
mod random_jobs;
mod readme;
mod rules_hold;
mod samples;
mod sheets;
mod sheets_outside;
mod tables_cited;
