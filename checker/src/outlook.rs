//! When, how likely, how far back: from demands and strengths with their uncertainty to years, probability and setback.
//!
//! ```text
//! Variables ──► DemandModel ──► critical depths of samples ──► growth by year ──► probability by year, setback, triggers
//!                     └──────► design points (FORM) ──► importance sampling ──┘
//! ```
//!
//! A pure function of its input: every sample has a random stream of its own, sums run in index order, so that the same seed
//! gives the same bits for any number of threads. Equations (7.x) stand in `docs/theory.md`.
pub mod assess;
pub mod critical;
pub mod cycle;
pub mod demand_model;
pub mod evidence;
pub mod form;
pub mod from_section;
pub mod growth;
pub mod modes;
pub mod normal;
pub mod random;
pub mod rates;
pub mod refusals;
pub mod reliability;
pub mod sampling;
pub mod setback;
pub mod triggers;
pub mod variables;
pub mod words;
pub mod years;
