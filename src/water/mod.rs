//! Chemistry and biology of fish water as pure functions: numbers in, numbers out, no rules, no files, no clock.
//!
//! Every function says its units and the range it holds in; a value outside is an [`OutOfRange`] error, never a number.
//! Every constant stands beside its source. "From memory" means that the publication is known and was not opened again.
//!
//! | file | job |
//! | --- | --- |
//! | [`ammonia`] | un-ionized ammonia, and the total ammonia or pH at which it reaches a limit |
//! | [`ammonia_criteria`] | the U.S. EPA's limits for wild waters |
//! | [`oxygen`] | saturation by temperature, salinity and pressure; percent, both ways; density |
//! | [`activity`] | ionic strength and the Davies equation |
//! | [`carbonate`] | pH, alkalinity, carbon dioxide; doses, mixtures, limestone |
//! | [`nitrification`] | oxygen, alkalinity and cells for each gram of nitrogen |
//! | [`kinetics`] | growth of nitrifiers, doubling, theta |
//! | [`biofilter`] | what a wetted area turns over |
//! | [`media`] | the wetted area of a volume of media |
//! | [`feed`] | ammonia, solids, alkalinity and oxygen of a day's feed |
//! | [`plants`] | feed and plant area |
//! | [`anthonisen`] | free ammonia and free nitrous acid |
//! | [`nitrite`] | chloride against nitrite, and the salts that bring it |
//! | [`sulfide`] | hydrogen sulfide in total sulfide |
//! | [`chlorine`] | taking chlorine out, and what chloramine leaves |
//! | [`exchange`] | water exchange and mixing |
//! | [`respiration`] | oxygen that fish use, and minutes until it runs out |
//! | [`calculations`] | all of that by name, for `gillside water` and the reference checks |
//! | [`usual`] | what a farm is taken to be where it does not say |
//! | [`units`] | the units a number may be given in |
//! | [`masses`], [`range`], [`roots`] | molar masses; ranges and their error; one root finder |

pub mod activity;
pub mod ammonia;
pub mod ammonia_criteria;
pub mod anthonisen;
pub mod biofilter;
pub mod calculations;
pub mod carbonate;
pub mod chlorine;
pub mod exchange;
pub mod feed;
pub mod kinetics;
pub mod masses;
pub mod media;
pub mod nitrification;
pub mod nitrite;
pub mod oxygen;
pub mod plants;
pub mod range;
pub mod respiration;
pub mod roots;
pub mod sulfide;
pub mod units;
pub mod usual;

pub use range::{OutOfRange, Range};
