//! Claims from text to verdict.

mod common;
mod unfolding;
mod verdicts;
