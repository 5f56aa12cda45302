//! What shade on a part of an array costs, wired in series and wired in parallel: a stated effect, not a measured one.
//!
//! Two groups of modules, one in full light and one in less, each with its own current-voltage curve, are joined
//! numerically. In series each shaded group has a bypass diode; in parallel there is none in the way.

use uom::si::{electric_potential::volt, power::watt, ratio::ratio};

use super::curve::ModuleCurve;
use super::diode::SingleDiode;
use super::module::{Conditions, checked};
use crate::error::{Allowed, Error};
use crate::quantity::{ElectricPotential, Power, Ratio};

/// Points of a scan, and steps that narrow the best of them.
const SCAN: u32 = 256;
const NARROW: u32 = 80;

/// Shade on a part of an array.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct ShadeCase {
    /// Light on the rest, and temperature of all cells.
    pub conditions: Conditions,
    /// Part of the module groups that are shaded, 0 … 1; a group is what one bypass diode spans.
    pub shaded_part: Ratio,
    /// Light that is left on them, as a part of the rest's, 0 … 1.
    pub light_left: Ratio,
    /// Forward voltage of the bypass diodes of one module together, 0 … 5 V.
    pub bypass_drop: ElectricPotential,
    /// Modules.
    pub modules: u16,
}

/// Power of an array partly in shade.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Shaded {
    /// Without any shade.
    pub unshaded: Power,
    /// If every module could give its own maximum: what the light that is left is worth.
    pub available: Power,
    /// All in series, held at its highest peak.
    pub series: Power,
    /// All in parallel, held at its highest peak.
    pub parallel: Power,
}

/// Power of an array partly in shade, in series and in parallel.
///
/// In parallel the shade falls on whole modules: half a module in shade is a string of groups of its own.
///
/// # Errors
/// [`Error::OutOfRange`] for a case outside its ranges.
///
/// # Example
/// A quarter of four modules with a fifth of the light:
/// ```
/// # use ampwright::array::*;
/// # use ampwright::quantity::{parse, readable};
/// # let points = KeyPoints { voc: parse("22.5 V")?, isc: parse("6.1 A")?, vmp: parse("18.6 V")?, imp: parse("5.38 A")? };
/// # let module = Module::new(ModuleSheet {
/// #     voc_coefficient: Some(parse("-0.3 %/K")?),
/// #     power_coefficient: Some(parse("-0.4 %/K")?),
/// #     series_fuse: Some(parse("15 A")?),
/// #     system_voltage: Some(parse("600 V")?),
/// #     ..ModuleSheet::plain(parse("100 W")?, points)
/// # })?;
/// let case = ShadeCase {
///     conditions: Conditions::standard(),
///     shaded_part: parse("25 %")?,
///     light_left: parse("20 %")?,
///     bypass_drop: parse("1 V")?,
///     modules: 4,
/// };
/// let shaded = shade(&ModuleCurve::of(&module)?, &case)?;
/// assert_eq!(readable(shaded.unshaded).to_string(), "400 W");
/// assert_eq!(readable(shaded.series).to_string(), "295 W");
/// assert_eq!(readable(shaded.parallel).to_string(), "318 W");
/// # Ok::<(), ampwright::Error>(())
/// ```
pub fn shade(curve: &ModuleCurve, case: &ShadeCase) -> Result<Shaded, Error> {
    let part = case.shaded_part.get::<ratio>();
    let left = case.light_left.get::<ratio>();
    let bypass = case.bypass_drop.get::<volt>();
    checked("shaded_part", part, "", Allowed::Between(0.0, 1.0))?;
    checked("light_left", left, "", Allowed::Between(0.0, 1.0))?;
    checked("bypass_drop", bypass, "V", Allowed::Between(0.0, 5.0))?;
    checked("modules", f64::from(case.modules), "", Allowed::AtLeast(1.0))?;
    let lit = curve.at(&case.conditions)?;
    let dim = curve.at(&Conditions { irradiance: case.conditions.irradiance * left, ..case.conditions })?;
    let whole = f64::from(case.modules);
    let most = |one: &SingleDiode| one.key_points().power().get::<watt>();
    let w = |one: f64| Power::new::<watt>(one * whole);
    let available = (1.0 - part) * most(&lit) + part * most(&dim);
    Ok(Shaded {
        unshaded: w(most(&lit)),
        available: w(available),
        series: w(in_series(&lit, &dim, part, bypass).min(available)),
        parallel: w(in_parallel(&lit, &dim, part).min(available)),
    })
}

/// Greatest power of one module's worth of groups in series: voltages add at one current.
fn in_series(lit: &SingleDiode, dim: &SingleDiode, part: f64, bypass: f64) -> f64 {
    let power = |amps: f64| {
        let bright = lit.voltage_at(amps).unwrap_or(-bypass).max(-bypass);
        let dark = dim.voltage_at(amps).unwrap_or(-bypass).max(-bypass);
        amps * ((1.0 - part) * bright + part * dark)
    };
    // Two peaks: one below the shaded groups' short-circuit current, one between the two.
    let (low, high) = (dim.current_at(0.0), lit.current_at(0.0));
    peak(power, 0.0, low).max(peak(power, low, high)).max(0.0)
}

/// Greatest power of one module's worth of groups in parallel: currents add at one voltage.
fn in_parallel(lit: &SingleDiode, dim: &SingleDiode, part: f64) -> f64 {
    let power = |volts: f64| volts * ((1.0 - part) * lit.current_at(volts) + part * dim.current_at(volts));
    let most = lit.open_circuit_voltage().get::<volt>();
    peak(power, 0.0, most).max(0.0)
}

/// Greatest value on a span: a scan, and the best point narrowed by thirds.
fn peak(power: impl Fn(f64) -> f64, from: f64, upto: f64) -> f64 {
    let step = (upto - from) / f64::from(SCAN);
    let mut best = (from, power(from));
    for i in 1..=SCAN {
        let at = from + step * f64::from(i);
        let here = power(at);
        if here > best.1 {
            best = (at, here);
        }
    }
    let (mut low, mut high) = ((best.0 - step).max(from), (best.0 + step).min(upto));
    for _ in 0..NARROW {
        let third = (high - low) / 3.0;
        if power(low + third) < power(high - third) { low += third } else { high -= third }
    }
    best.1.max(power(0.5 * (low + high)))
}

#[cfg(test)]
mod tests {
    use proptest::prelude::*;

    use super::*;
    use crate::array::sample::{module, q};

    fn at(shaded_part: f64, light_left: f64, bypass: &str) -> Shaded {
        let curve = ModuleCurve::of(&module()).unwrap();
        let case = ShadeCase {
            conditions: Conditions::standard(),
            shaded_part: Ratio::new::<ratio>(shaded_part),
            light_left: Ratio::new::<ratio>(light_left),
            bypass_drop: q(bypass),
            modules: 4,
        };
        shade(&curve, &case).unwrap()
    }

    fn close(a: Power, b: f64, relative: f64) -> bool {
        (a.value - b).abs() <= relative * b
    }

    #[test]
    fn without_shade_there_is_no_loss() {
        for shaded in [at(0.0, 0.2, "1 V"), at(0.5, 1.0, "1 V")] {
            assert!(close(shaded.unshaded, 4.0 * 18.6 * 5.38, 1e-6), "{shaded:?}");
            for power in [shaded.available, shaded.series, shaded.parallel] {
                assert!(close(power, shaded.unshaded.value, 1e-9), "{shaded:?}");
            }
        }
    }

    /// Dark groups in series are bypassed: what is left is the others' power less the diodes', which move the peak a little.
    #[test]
    fn in_series_dark_groups_are_bypassed() {
        let shaded = at(0.25, 0.0, "1 V");
        let (others, diodes) = (0.75 * shaded.unshaded.value, 0.25 * 4.0 * 1.0 * 5.38);
        assert!(close(shaded.series, others - diodes, 0.002), "{shaded:?}");
        assert!(close(at(0.25, 0.0, "0 V").series, others, 1e-9));
        // Two thirds lost to a quarter of shade is what a string without bypass would do; here it is a quarter.
        assert!(shaded.series.value > 0.7 * shaded.unshaded.value);
    }

    /// A little shade on a part: in series the string either runs at the weak groups' current or leaves them out.
    #[test]
    fn in_series_the_better_of_two_peaks_counts() {
        // Nine tenths of the light left on half: at their current all deliver.
        let light = at(0.5, 0.9, "1 V");
        assert!(light.series.value > 0.9 * light.unshaded.value, "{light:?}");
        // A fifth of the light on half: better without them, whatever their light.
        let (dim, dark) = (at(0.5, 0.2, "1 V"), at(0.5, 0.0, "1 V"));
        assert!(close(dim.series, dark.series.value, 1e-6), "{dim:?} {dark:?}");
    }

    #[test]
    fn in_parallel_dim_modules_still_deliver() {
        let shaded = at(0.5, 0.2, "1 V");
        assert!(shaded.parallel.value > 0.98 * shaded.available.value, "{shaded:?}");
        assert!(shaded.parallel > shaded.series);
    }

    proptest! {
        #[test]
        fn nothing_beats_what_the_light_is_worth(part in 0.0..1.0f64, left in 0.0..1.0f64) {
            let shaded = at(part, left, "1 V");
            prop_assert!(shaded.series <= shaded.available && shaded.parallel <= shaded.available);
            prop_assert!(shaded.available.value <= shaded.unshaded.value * (1.0 + 1e-12));
            prop_assert!(shaded.series.value >= 0.0 && shaded.parallel.value >= 0.0);
            // Two points at hand: all at the dim groups' best current, or the dim ones left out.
            let all_dim = at(1.0, left, "1 V").available;
            let left_out = (1.0 - part) * shaded.unshaded.value - part * 4.0 * 5.38;
            prop_assert!(shaded.series.value >= all_dim.value * (1.0 - 1e-9), "{shaded:?} {all_dim:?}");
            prop_assert!(shaded.series.value >= left_out * (1.0 - 1e-9), "{shaded:?}");
        }

        #[test]
        fn any_bits_give_an_answer_or_an_error(part: u64, left: u64, bypass: u64, modules: u16) {
            let curve = ModuleCurve::of(&module()).unwrap();
            let case = ShadeCase {
                conditions: Conditions::standard(),
                shaded_part: Ratio::new::<ratio>(f64::from_bits(part)),
                light_left: Ratio::new::<ratio>(f64::from_bits(left)),
                bypass_drop: ElectricPotential::new::<volt>(f64::from_bits(bypass)),
                modules,
            };
            let _ = shade(&curve, &case);
        }
    }
}
