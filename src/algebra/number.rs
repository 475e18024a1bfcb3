//! Exact integers with a machine-word fast path, and the rationals built on them.
