//! From one neutral document tree to the forms of output.
