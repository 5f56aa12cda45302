//! Version macros. cbindgen copies literals, so they stand here again and are compared with Cargo's.

/// First part of the version.
pub const AW_VERSION_MAJOR: u32 = 0;
/// Second part of the version.
pub const AW_VERSION_MINOR: u32 = 1;
/// Third part of the version.
pub const AW_VERSION_PATCH: u32 = 0;
/// The whole version as one number that can be compared: major · 10000 + minor · 100 + patch.
pub const AW_VERSION_NUMBER: u32 = 100;
/// Changes when a struct, a status number or the meaning of a function does.
pub const AW_ABI_VERSION: u32 = 1;

const fn same(written: u32, cargo: &str) -> bool {
    matches!(u32::from_str_radix(cargo, 10), Ok(number) if number == written)
}

const _: () = assert!(
    same(AW_VERSION_MAJOR, env!("CARGO_PKG_VERSION_MAJOR"))
        && same(AW_VERSION_MINOR, env!("CARGO_PKG_VERSION_MINOR"))
        && same(AW_VERSION_PATCH, env!("CARGO_PKG_VERSION_PATCH"))
        && AW_VERSION_NUMBER == AW_VERSION_MAJOR * 10_000 + AW_VERSION_MINOR * 100 + AW_VERSION_PATCH,
    "the version in src/version.rs is not Cargo.toml's"
);

/// The interface version that the library was built with; compare it with the header's AW_ABI_VERSION.
#[unsafe(no_mangle)]
pub extern "C" fn aw_abi_version() -> u32 {
    AW_ABI_VERSION
}
