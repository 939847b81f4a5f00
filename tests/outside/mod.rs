//! Values from outside: published tables, worked examples, exact geometry, general-purpose libraries.
//! The figures are copied here with their source beside them, so that the tests stand alone.

mod areas;
mod bs8666_lengths;
mod bs8666_tables;
mod drawing_tables;
mod geometry;
mod geometry_bounds;
mod ice_manual;
mod lb_rqd;
mod libraries;
mod live;
mod worked_examples;
