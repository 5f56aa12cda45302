//! Python binding of `ampwright`.
