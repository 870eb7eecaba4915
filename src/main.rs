//! The program that people start.

fn main() {}
