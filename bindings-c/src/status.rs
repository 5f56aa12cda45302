//! Outcome of a call.

use core::ffi::{CStr, c_char};

use ampwright::Error;

/// Outcome of a call. Numbers never change meaning; retired ones stay reserved. 0 is success, 1–99 the call itself,
/// 100–199 an input, 200–299 no solution.
#[repr(i32)]
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Status {
    /// The outputs are written.
    AW_STATUS_OK = 0,
    /// A pointer that must not be NULL is.
    AW_STATUS_NULL_POINTER = 1,
    /// An input is NaN, infinite or outside its range.
    AW_STATUS_OUT_OF_RANGE = 100,
    /// Two inputs do not go together.
    AW_STATUS_CONTRADICTION = 101,
    /// An input is refused for a reason that has no number in this interface version.
    AW_STATUS_REFUSED = 199,
    /// The line cannot deliver the power asked of it.
    AW_STATUS_NO_SOLUTION = 200,
}

impl From<Error> for Status {
    fn from(error: Error) -> Self {
        match error {
            Error::OutOfRange { .. } => Self::AW_STATUS_OUT_OF_RANGE,
            Error::Contradiction { .. } => Self::AW_STATUS_CONTRADICTION,
            Error::NoSolution { .. } => Self::AW_STATUS_NO_SOLUTION,
            _ => Self::AW_STATUS_REFUSED,
        }
    }
}

// One row a status; a number that is not here has no text of its own.
const TEXTS: [(Status, &CStr); 6] = [
    (Status::AW_STATUS_OK, c"ok"),
    (Status::AW_STATUS_NULL_POINTER, c"a pointer is NULL; pass the address of a variable"),
    (
        Status::AW_STATUS_OUT_OF_RANGE,
        c"an input is NaN, infinite or outside its range; see the function's list",
    ),
    (Status::AW_STATUS_CONTRADICTION, c"two inputs do not go together; see the function's list"),
    (Status::AW_STATUS_REFUSED, c"an input is refused; see the function's list"),
    (
        Status::AW_STATUS_NO_SOLUTION,
        c"the line cannot deliver that power; use a larger cross-section or a shorter run",
    ),
];

/// What a status means, as a sentence. Any number is taken, also one that this library does not know.
///
/// @param[in] status  as a call returned it
/// @return static text in UTF-8, never NULL
#[unsafe(no_mangle)]
pub extern "C" fn aw_status_text(status: i32) -> *const c_char {
    let known = TEXTS.iter().find(|(known, _)| *known as i32 == status);
    known
        .map_or(
            c"a status that this library does not know; compare aw_abi_version with AW_ABI_VERSION",
            |(_, text)| text,
        )
        .as_ptr()
}
