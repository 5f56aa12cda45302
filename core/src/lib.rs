//! Low-voltage DC power where there is no grid: banks, arrays, controllers, inverters, cables and fuses, computed with
//! units and reasons.
//!
//! A quantity of the wrong kind does not compile, a number out of range is an error that names it, and a result
//! carries its reason: which limit decided, from which table of which edition, and whether that page was seen. What
//! cannot be checked for want of a datum is *not checked*, never passed.
//!
//! # A worked case
//!
//! 20 A for hours, 12 m away from a 24 V board, flexible PVC cable in conduit, after IEC 60364:
//!
//! ```
//! use ampwright::prelude::*;
//!
//! let rules = Rules::named("iec")?;
//! let run = Run::plain(
//!     rules,
//!     ElectricPotential::new::<volt>(24.0),
//!     Length::new::<meter>(12.0), // the route: there and back is counted inside
//!     Demand::Current {
//!         continuous: ElectricCurrent::new::<ampere>(20.0),
//!         other: ElectricCurrent::new::<ampere>(0.0),
//!     },
//! );
//! let cables: Vec<_> = rules
//!     .sizes()
//!     .iter()
//!     .map(|&size| Conductor::flexible_copper(size, rules.usual_insulation()))
//!     .collect();
//! let fuses = Offer::standard(
//!     Family::Gg,
//!     ElectricPotential::new::<volt>(80.0),
//!     ElectricCurrent::new::<kiloampere>(25.0),
//! );
//!
//! let sized = size_run(&run, &cables, &[fuses])?;
//! assert_eq!(sized.conductor.size.to_string(), "10 mm2");
//!
//! // Why not 6 mm2: the drop.
//! let refused = sized.rejected.last().and_then(|r| r.failed).expect("smaller sizes were tried");
//! assert_eq!(refused.numbers().to_string(), "7.15 %, at most 5 %");
//!
//! // No fault current was stated, so the fuse's breaking capacity is not checked, and that is said.
//! assert!(sized.judgement.checks.iter().any(|c| c.outcome == Outcome::NotChecked));
//! # Ok::<(), Error>(())
//! ```
//!
//! A whole site, from loads and a place or from what is built, is read from a file by `site::read` and answered by
//! `site::inspect`: what is stated is checked, what is left out is designed.
//!
//! # Guide
//!
//! | page of `guide` | what it holds |
//! | --- | --- |
//! | `first_hour` | from nothing to a report, then from Rust |
//! | `bank_sizing` | how bank, array and inverter are sized, with one case by hand |
//! | `run_sizing` | how a run is sized, the case above by hand, check by check |
//! | `site_file` | every key of a site file |
//! | `report` | the report as JSON |
//! | `rule_sets` | what each rule set holds and leaves out |
//! | `rules` | the rules R1 to R22, and every finding by its slug |
//! | `not_covered` | what is missing or simplified, and what that leaves to whoever signs |
//!
//! # Features
//!
//! | feature | gives | without it |
//! | --- | --- | --- |
//! | `site` (default; takes `std`) | the site file, its design and checks, the report | every law, table, check and solver is still there |
//! | `std` (takes `alloc`) | the standard library's square root; calculations on arrays | runs without an operating system |
//! | `alloc` | nothing of its own yet | runs without a heap: nothing below `site` allocates |
//!
//! Each of these sets is tested by itself.
//!
//! # Rooms
//!
//! A room uses only what stands on the floors below it.
//!
//! | floor | rooms |
//! | --- | --- |
//! | 6 | `site`: document, design, checks, readings, report, comparison |
//! | 4 | [`network`] volts and amperes in a tree, [`protection`] devices and their place, [`circuit`] judging and sizing one run |
//! | 3 | [`rules`] rule sets as data |
//! | 2 | [`cable`] conductors, insulation, joints; [`device`] fuses and breakers |
//! | 2 | [`battery`] chemistries, capacity, charge, cold, sharing, air; [`mod@array`] modules, strings, layouts |
//! | 2 | [`converter`] charge controllers, DC–DC converters, inverters; [`generator`] engine sets, alternators, what sources give together; [`load`] schedules, duty, starts, what coincides |
//! | 1 | [`law`] Ohm, power, energy, sources; [`catalogue`] how calculations are declared |
//! | 0 | [`quantity`] units and their text form, [`error`], [`citation`] |
//!
//! The rooms of one floor know nothing of each other: they pass numbers. [`prelude`] brings together what everyday work
//! needs.
//!
//! # Cautions
//!
//! - A bank stores enough energy to melt tools, and drives thousands of amperes through a fault.
//! - A DC arc does not go out by itself: nothing is opened under load that is not made for it. An array in light cannot
//!   be switched off.
//! - Lead-acid and nickel banks give off hydrogen while they charge.
//! - Isolate, secure against switching on, and prove dead before work.
//! - Local codes and licensed practice decide; the text of each standard governs, in the edition in force. Which
//!   edition was applied stands in [`rules::RuleSet::edition`]; a figure marked *recalled* came from memory and wants
//!   its page looked up.
#![no_std]
#![forbid(unsafe_code)]
#![deny(missing_docs)]
#![cfg_attr(
    not(test),
    deny(
        clippy::unwrap_used,
        clippy::expect_used,
        clippy::panic,
        clippy::unreachable,
        clippy::indexing_slicing,
        clippy::string_slice
    )
)]

#[cfg(feature = "alloc")]
extern crate alloc;
#[cfg(feature = "std")]
extern crate std;

// Floor 0
pub mod citation;
pub mod error;
pub mod quantity;
// Floor 1
pub mod catalogue;
pub mod law;
// Floor 2
pub mod array;
pub mod battery;
pub mod cable;
pub mod converter;
pub mod device;
pub mod generator;
pub mod load;
// Floor 3
pub mod rules;
// Floor 4
pub mod circuit;
pub mod network;
pub mod protection;
// Floor 6
#[cfg(feature = "site")]
pub mod site;
// Above them
pub mod prelude;

/// The longer pages, whose examples are tested with the rest.
#[cfg(doc)]
pub mod guide {
    #[cfg(feature = "site")]
    #[doc = include_str!("../guide/first_hour.md")]
    pub mod first_hour {}
    #[doc = include_str!("../guide/run_sizing.md")]
    pub mod run_sizing {}
    #[cfg(feature = "site")]
    #[doc = include_str!("../guide/bank_sizing.md")]
    pub mod bank_sizing {}
    #[cfg(feature = "site")]
    #[doc = include_str!("../guide/site_file.md")]
    pub mod site_file {}
    #[cfg(feature = "site")]
    #[doc = include_str!("../guide/report.md")]
    pub mod report {}
    #[doc = include_str!("../guide/rule_sets.md")]
    pub mod rule_sets {}
    #[doc = include_str!("../guide/rules.md")]
    pub mod rules {}
    #[cfg(feature = "site")]
    #[doc = include_str!("../guide/not_covered.md")]
    pub mod not_covered {}
}

pub use error::Error;

/// Every calculation that all faces offer, room by room, lowest first.
///
/// ```
/// let entry = ampwright::entries().find(|entry| entry.name == "ohm_current").unwrap();
/// let mut current = [0.0];
/// (entry.scalar)(&[12.0, 7.2], &mut current)?;
/// assert_eq!(current, [12.0 / 7.2]);
/// # Ok::<(), ampwright::Error>(())
/// ```
pub fn entries() -> impl Iterator<Item = &'static catalogue::Entry> {
    [
        law::CATALOGUE,
        cable::CATALOGUE,
        device::CATALOGUE,
        battery::CATALOGUE,
        array::CATALOGUE,
        converter::CATALOGUE,
        generator::CATALOGUE,
        load::CATALOGUE,
        network::CATALOGUE,
        protection::CATALOGUE,
        circuit::CATALOGUE,
    ]
    .into_iter()
    .flatten()
    .copied()
    .flatten()
}
