//! Faulty and hostile job files.
