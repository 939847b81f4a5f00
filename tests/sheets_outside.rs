//! Sheets and schedules as a reader has them: pages of the schedule, links and bookmarks of the PDFs, and what programs nobody here wrote
//! make of the files.

mod half_size;
mod links;
mod readers;
mod scales;
mod schedule_pages;
