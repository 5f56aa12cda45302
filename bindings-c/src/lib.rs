//! C binding of `ampwright`.
