//! gillside: what is most likely wrong with the water of a fish farm, and what to do first.
//!
//! The map of the house. Data goes one way, from left to right; each room knows only the rooms before it.
//!
//! | room | job |
//! | --- | --- |
//! | [`fault`] | one fault in something a person wrote: where, what, and what to do |
//! | [`decode`] | TOML that people write, walked by hand so that every fault has its place |
//! | [`water`] | chemistry and biology as pure functions |
//! | [`vocabulary`] | the readings, signs and events there are words for |
//! | [`site`] | the site file: the farm, its water, its fish, its shifts |
//! | [`history`] | reading logs; what was known when; windows and trends |
//! | [`knowledge`] | TOML to a checked rule base |
//! | [`engine`] | forward chaining: tests, facts, findings, the proof of every fact |
//! | [`diagnosis`] | joint ranking of causes, the balance sheet, what to measure next |
//! | [`course`] | ranked steps, paced corrections, projections |
//! | [`assessment`] | causes, steps and cautions put together: the value that a page shows |
//! | [`walk`] | asking at the tank: what next, and when to stop |
//! | [`render`] | text and JSON of the values above |
//! | [`cli`] | one file a command: arguments in, a call, a page out |

pub mod assessment;
pub mod cli;
pub mod course;
pub mod decode;
pub mod diagnosis;
pub mod engine;
pub mod fault;
pub mod history;
pub mod incident;
pub mod knowledge;
pub mod record;
pub mod render;
pub mod shift;
pub mod site;
pub mod vocabulary;
pub mod walk;
pub mod water;
