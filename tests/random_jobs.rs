//! Properties over random jobs.
