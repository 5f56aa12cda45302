//! Declaration of the calculations that every face offers.
//!
//! Each is declared once, in its room, by the macro `calculations!` of `declare.rs`: from it come the typed
//! function with its table of inputs, and an [`Entry`] that the faces are generated from. Faces hand over plain
//! numbers in the declared units; everything is checked on the value in the base unit, so that all faces agree.
//! [`entries()`](crate::entries()) lists those of every room.

#[cfg(feature = "std")]
mod array;
mod choice;
mod declare;
mod entry;
pub(crate) mod unit;

#[cfg(feature = "std")]
pub use self::{array::AtIndex, entry::Array};
pub use choice::Choice;
pub(crate) use choice::codes;
pub(crate) use declare::calculations;
#[doc(hidden)]
pub use entry::{Calculation, Lane, scalar};
pub use entry::{Entry, Input, Output};

#[cfg(feature = "std")]
pub(crate) use array::{array, array_by_row};

#[cfg(test)]
mod tests;
