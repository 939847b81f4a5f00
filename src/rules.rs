//! Clause functions over plain values, symbols as the standard prints them. A rule never sees a job.
//! Each returns its value with its steps; one clause, one function, one table of tests.

pub mod anchorage;
pub mod areas;
pub mod spacing;
