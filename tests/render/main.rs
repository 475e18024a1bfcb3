//! What is printed: formulas in every form, and whole documents.

mod brackets;
mod compile;
mod documents;
mod formulas;
mod pages;
mod reader;
mod reading_back;
mod samples;
mod scrambled;
mod settings;
mod shared;
