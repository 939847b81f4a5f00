//! Placed bars and tables become finished sheets: scenes in mm on paper. Draws what stands in the model; measures nothing for a table.

pub mod column;
pub mod detail;
pub mod frame;
pub mod notes;
pub mod paper;
pub mod picture;
pub mod plan_view;
pub mod rows;
pub mod schedule;
pub mod sheet;
pub mod view;

pub use schedule::schedule;
pub use sheet::sheets;
