//! The carbonate system of fresh water: pH, alkalinity, carbon dioxide, and what a dose does to them.
//!
//! | file | job |
//! | --- | --- |
//! | [`constants`] | pK1, pK2, Henry's constant, pKw, calcite, by temperature and ionic strength |
//! | [`state`] | alkalinity, inorganic carbon and pH: any two give the third |
//! | [`sample`] | a water as a farm measures it, and the carbon dioxide in it |
//! | [`gas`] | water that trades carbon dioxide with air |
//! | [`substance`] | the bases and acids that are dosed |
//! | [`dose`] | pH after a dose, and the dose to a pH |
//! | [`mixture`] | pH of two waters mixed |
//! | [`limestone`] | water in balance with calcite |
//!
//! pH is what a probe set in standard buffers reads (activity of hydrogen ion); everything else is a concentration.

pub mod constants;
pub mod dose;
pub mod gas;
pub mod limestone;
pub mod mixture;
pub mod sample;
pub mod state;
pub mod substance;

pub use sample::Sample;
