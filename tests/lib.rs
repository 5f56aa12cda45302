//! What the test targets share: reading `tests/reference`.
