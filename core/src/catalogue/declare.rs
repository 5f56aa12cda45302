//! The macro that declares calculations.

/// Declares calculations of one file and lists them in `ENTRIES`.
///
/// ```text
/// calculations! {
///     /// One sentence; further lines, with the example, follow it.
///     fn name(
///         /// What it is.
///         input: Type in unit [range] = default,    // [any] [> 0.0] [>= 0.0] [0.0 ..= 1.0] [> 0.0 ..= 1.0]; default optional
///         kind: Enum in choice [choice],            // an enum that is a `Choice`
///     ) -> output: Type in unit                     // or several: => Struct { /// What it is. output: Type in unit, … }
///     where (a < b) a in unit: "why, and what to do"  // joint conditions on valid inputs, each naming the one at fault
///     where (a < b) => (error)                      // … or giving an error of its own
///     formula "…" source "…"
///     { body }                                      // plain quantities, no Result
///     fallible "when it is refused" { body }        // … or a Result, for what conditions cannot say
/// }
/// ```
///
/// A body of plain quantities is computed for whole columns without a jump but its own and those of choices; it meets
/// inputs that are not valid, too. A `fallible` body has no such path: its columns are computed row by row, and its
/// `formula` is a `Result`.
///
/// Emits the typed, checked function `name`, and a hidden module `name` with the unchecked `formula` for rooms that
/// have checked already, and the `ENTRY`. A result that is infinite or NaN is an error too.
macro_rules! calculations {
    ($(
        #[doc = $summary:literal]
        $(#[doc = $more:literal])*
        fn $name:ident(
            $(
                $(#[doc = $about:literal])+
                $input:ident: $type:ident in $unit:ident [$($range:tt)+] $(= $default:literal)?
            ),+ $(,)?
        )
        $(-> $one:ident: $one_type:ident in $one_unit:ident)?
        $(=> $many:ident {
            $($(#[doc = $field_about:literal])+ $field:ident: $field_type:ident in $field_unit:ident),+ $(,)?
        })?
        $(where ($condition:expr) $($culprit:ident in $culprit_unit:ident: $why:literal)? $(=> ($error:expr))?)*
        formula $formula:literal
        source $source:literal
        $(fallible $refusal:literal)?
        $body:block
    )+) => {
        $(
            $(
                #[doc = concat!("Result of [`", stringify!($name), "()`].")]
                #[derive(Clone, Copy, Debug, PartialEq)]
                pub struct $many {
                    $($(#[doc = $field_about])+ pub $field: $field_type,)+
                }
            )?

            #[doc = $summary]
            ///
            /// | input | unit | valid | |
            /// | --- | --- | --- | --- |
            $(#[doc = concat!(
                "| `", stringify!($input), "` | ", $crate::catalogue::unit::unit!(symbol $unit), " | ", $crate::catalogue::unit::range_text!($($range)+), " |", $($about),+, " |"
            )])+
            ///
            /// # Errors
            #[doc = concat!(
                "[`Error::OutOfRange`](crate::Error::OutOfRange) if an input is NaN, infinite or outside the table, ",
                "or if the result is too large for a number."
            )]
            $(#[doc = concat!("\n", "Refused also unless `", stringify!($condition), "`.")])*
            $(#[doc = concat!("\n", "Refused also where ", $refusal, ".")])?
            ///
            /// # Source
            #[doc = concat!($formula, ". ", $source)]
            ///
            $(#[doc = $more])*
            #[inline]
            pub fn $name($($input: $type),+) -> Result<$crate::catalogue::calculations!(@type $($one_type)? $($many)?), $crate::Error> {
                $($crate::catalogue::calculations!(@check $unit $type $input [$($range)+]);)+
                $(let fulfilled: bool = $condition;
                if !fulfilled {
                    $(return Err($crate::Error::Contradiction {
                        name: stringify!($culprit),
                        value: $crate::catalogue::unit::plain!($culprit_unit $culprit),
                        unit: $crate::catalogue::unit::unit!(symbol $culprit_unit),
                        why: $why,
                    });)?
                    $(return Err($error);)?
                })*
                let result = $crate::catalogue::calculations!(@settle [$($refusal)?] $name::formula($($input),+));
                $($crate::catalogue::calculations!(@result $one_unit $one result);)?
                $($($crate::catalogue::calculations!(@result $field_unit $field (result.$field));)+)?
                Ok(result)
            }

            #[doc(hidden)]
            pub mod $name {
                #[allow(unused_imports)]
                use super::*;
                use $crate::catalogue::{Calculation, Entry, Input, Output, scalar};

                const K: usize = [$(stringify!($input)),+].len();
                const N: usize = [$(stringify!($one))? $($(stringify!($field)),+)?].len();

                /// Marks the calculation.
                pub struct This;

                /// The formula alone, for inputs that are checked.
                #[inline(always)]
                #[allow(clippy::inline_always, reason = "array loops become vector code only with the formula in them")]
                #[allow(unused_variables, reason = "an input may serve a condition alone")]
                pub fn formula($($input: $type),+) -> $crate::catalogue::calculations!(@type $([$refusal])? $($one_type)? $($many)?) $body

                impl Calculation<K, N> for This {
                    #[inline]
                    fn one([$($input),+]: [f64; K]) -> Result<[f64; N], $crate::Error> {
                        $(let $input = $crate::catalogue::unit::entered!($unit $type $input);)+
                        let result = super::$name($($input),+)?;
                        Ok([$($crate::catalogue::unit::plain!($one_unit result))? $($($crate::catalogue::unit::plain!($field_unit result.$field)),+)?])
                    }
                }

                $crate::catalogue::calculations!(@infallible [$($refusal)?] {
                impl $crate::catalogue::Lane<K, N> for This {
                    #[inline(always)]
                    #[allow(clippy::inline_always, reason = "as `formula`")]
                    fn lane([$($input),+]: [f64; K]) -> (bool, [f64; N]) {
                        let mut all = true;
                        $(
                            all &= $crate::catalogue::unit::code_valid!($unit $type $input);
                            let $input = $crate::catalogue::unit::value!($unit $type $input);
                            all &= $crate::catalogue::unit::valid!($unit $type $input; $($range)+);
                        )+
                        $(all &= $condition;)*
                        let result = formula($($input),+);
                        $(all &= $crate::catalogue::unit::result_valid!($one_unit result);)?
                        $($(all &= $crate::catalogue::unit::result_valid!($field_unit result.$field);)+)?
                        (all, [$($crate::catalogue::unit::plain!($one_unit result))? $($($crate::catalogue::unit::plain!($field_unit result.$field)),+)?])
                    }
                }
                });

                /// What the faces know.
                pub const ENTRY: Entry = Entry {
                    name: stringify!($name),
                    summary: str::trim_ascii($summary),
                    inputs: &[$(Input {
                        name: stringify!($input),
                        unit: $crate::catalogue::unit::unit!(symbol $unit),
                        suffix: $crate::catalogue::unit::unit!(suffix $unit),
                        doc: str::trim_ascii(concat!($($about),+)),
                        range: $crate::catalogue::unit::range!($type $($range)+),
                        default: $crate::catalogue::calculations!(@default $($default)?),
                        choices: $crate::catalogue::unit::words!($unit $type),
                    }),+],
                    outputs: &[
                        $(Output {
                            name: stringify!($one),
                            unit: $crate::catalogue::unit::unit!(symbol $one_unit),
                            suffix: $crate::catalogue::unit::unit!(suffix $one_unit),
                            doc: "",
                        })?
                        $($(Output {
                            name: stringify!($field),
                            unit: $crate::catalogue::unit::unit!(symbol $field_unit),
                            suffix: $crate::catalogue::unit::unit!(suffix $field_unit),
                            doc: str::trim_ascii(concat!($($field_about),+)),
                        }),+)?
                    ],
                    conditions: &[$(stringify!($condition)),*],
                    refusal: $crate::catalogue::calculations!(@default $($refusal)?),
                    formula: $formula,
                    source: $source,
                    scalar: scalar::<This, K, N>,
                    #[cfg(feature = "std")]
                    array: $crate::catalogue::calculations!(@array [$($refusal)?]),
                };
            }
        )+

        /// The calculations of this file.
        pub(crate) const ENTRIES: &[$crate::catalogue::Entry] = &[$($name::ENTRY),+];
    };

    (@type $type:ident) => { $type };
    (@type [$refusal:literal] $type:ident) => { Result<$type, $crate::Error> };
    (@settle [] $result:expr) => { $result };
    (@settle [$refusal:literal] $result:expr) => { $result? };
    (@infallible [] { $($item:tt)* }) => { $($item)* };
    (@infallible [$refusal:literal] { $($item:tt)* }) => {};
    (@array []) => { $crate::catalogue::array::<This, K, N> };
    (@array [$refusal:literal]) => { $crate::catalogue::array_by_row::<This, K, N> };
    (@default) => { None };
    (@default $default:literal) => { Some($default) };
    (@check choice $type:ident $input:ident [$($range:tt)+]) => {};
    (@check $unit:ident $type:ident $input:ident [$($range:tt)+]) => {
        if !$crate::catalogue::unit::valid!($unit $type $input; $($range)+) {
            return Err($crate::Error::OutOfRange {
                name: stringify!($input),
                value: $crate::catalogue::unit::plain!($unit $input),
                unit: $crate::catalogue::unit::unit!(symbol $unit),
                allowed: $crate::catalogue::unit::range!($type $($range)+),
            });
        }
    };
    (@result $unit:ident $name:ident $result:expr) => {
        if !$crate::catalogue::unit::result_valid!($unit $result) {
            return Err($crate::Error::OutOfRange {
                name: stringify!($name),
                value: $crate::catalogue::unit::plain!($unit $result),
                unit: $crate::catalogue::unit::unit!(symbol $unit),
                allowed: $crate::catalogue::unit::result_range!($unit),
            });
        }
    };
}
pub(crate) use calculations;
