//! Low-voltage DC power where there is no grid: cables, fuses, banks, computed with units and reasons.
//!
//! Nothing is computed without its reason, and a check without data is `not checked`, never passed.
//! Local codes and licensed practice decide; the text of each standard governs.
#![no_std]
#![forbid(unsafe_code)]
#![deny(missing_docs)]
#![cfg_attr(
    not(test),
    deny(clippy::unwrap_used, clippy::expect_used, clippy::panic, clippy::indexing_slicing)
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
pub mod battery;
pub mod cable;
pub mod device;
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
        network::CATALOGUE,
        protection::CATALOGUE,
        circuit::CATALOGUE,
    ]
    .into_iter()
    .flatten()
    .copied()
    .flatten()
}
