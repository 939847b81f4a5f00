//! slabwright turns the finished design of a one-way continuous concrete slab into bars that can be ordered, bent and fixed.
//!
//! The way of the data, each stage a module:
//! - [`read`] and [`job`]: a TOML file becomes a validated job; every value keeps its place in the file, every fault is gathered.
//! - [`plan`]: what bars, from where to where, and why (detailing rules D1 to D20).
//! - [`place`]: rounded bars with marks, each placement in three dimensions. From here on nothing computes a length.
//! - [`audit`]: a second opinion that measures the placed bars anew.
//! - [`report`]: schedule, steel, explanations and the model as neutral tables.
//! - [`draw`]: sheets and printed schedule as scenes; [`write`]: scenes, tables and model as bytes.
//! - [`issue_set`]: the pipeline in one page; [`cli`]: arguments, terminal, files.
//!
//! Below them: [`rules`] (clause functions), [`steel`] (bent bars), [`tables`] (figures of the standards), and the primitives
//! [`base`], [`trace`], [`diagnose`], [`finding`], [`scene`], [`table`]. A module imports only from floors below its own; a test holds it to that.

pub mod audit;
pub mod base;
pub mod cli;
pub mod diagnose;
pub mod draw;
pub mod finding;
pub mod issue_set;
pub mod job;
pub mod place;
pub mod plan;
pub mod read;
pub mod report;
pub mod rules;
pub mod scene;
pub mod steel;
pub mod table;
pub mod tables;
pub mod trace;
pub mod write;
