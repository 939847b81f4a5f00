//! Values from outside: published tables, worked examples, exact geometry, general-purpose libraries.
