//! Tables of restrictions that are known.
