//! Checks of the whole against something outside it, and of the program as people use it. One binary: it links once.

mod checks;
mod cli;
mod house;
mod properties;
mod walls;
