//! Placed bars and tables become finished sheets: scenes in mm on paper. Draws what stands in the model; measures nothing for a table.

pub mod across;
pub mod along;
pub mod area;
pub mod bands;
pub mod bookmarks;
pub mod choose;
pub mod close_up;
pub mod column;
pub mod dimension;
pub mod form;
pub mod frame;
pub mod heads;
pub mod index;
pub mod inner;
pub mod label;
pub mod lists;
pub mod mass_page;
pub mod notes;
pub mod paper;
pub mod picture;
pub mod plan_view;
pub mod rows;
pub mod schedule;
pub mod section;
pub mod sheet;
pub mod sketch;
pub mod view;

pub use choose::sheets;
pub use schedule::schedule;
