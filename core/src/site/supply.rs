//! What arrays and generators bring into a bank on the mean day of each month (R10, R11).

use uom::si::energy::joule;
use uom::si::heat_flux_density::watt_per_square_meter;
use uom::si::ratio::ratio;
use uom::si::temperature_coefficient::per_kelvin;
use uom::si::thermodynamic_temperature::degree_celsius;
use uom::si::time::hour;

use super::parts::{ControllerKind, ControllerPart, GeneratorKind};
use super::pv::module_of;
use super::system::{Array, BankEntry, ChargerKind, Site};
use crate::array::{Module, cell_temperature, sun_hours};
use crate::battery::data;
use crate::generator::ALTERNATOR_HOT;
use crate::quantity::{ElectricPotential, Energy, Irradiance, Power, Ratio, Time};

/// Lost to dirt, mismatch and wiring of an array. Common practice, no source.
pub(super) const ARRAY_LOSS: f64 = 0.1;
/// Efficiency of a tracking controller where none is stated. Common practice, no source.
const TRACKING: f64 = 0.95;
/// Coefficient of power where none is stated, 1/K: crystalline silicon. Common practice, no source.
const POWER_PER_K: f64 = -0.004;
/// Irradiance in which the cells of a mean day stand while they give most. Common practice, no source.
const MEAN_SUN: f64 = 800.0;

/// Sun-hours of a month's mean day, where there is any weather.
pub(super) fn sun(site: &Site, month: usize) -> Option<Time> {
    site.weather.as_ref()?.in_plane.get(month).and_then(|h| sun_hours(*h).ok())
}

/// Power of a module with the cells of a month's mean day.
pub(super) fn module_power(site: &Site, module: &Module, month: usize) -> Power {
    let air = site
        .weather
        .as_ref()
        .and_then(|w| w.temperature)
        .and_then(|t| t.get(month).copied())
        .unwrap_or(site.ambient.1);
    let cell = cell_temperature(air, module.noct().0, Irradiance::new::<watt_per_square_meter>(MEAN_SUN));
    let sheet = module.sheet();
    let coefficient = sheet.power_coefficient.map_or(POWER_PER_K, |c| c.get::<per_kelvin>());
    let rise = cell.map_or(0.0, |c| c.get::<degree_celsius>() - 25.0);
    // The cold gives no more than the label: what clouds leave is warm enough.
    sheet.power * (1.0 + coefficient * rise).clamp(0.1, 1.0)
}

/// Efficiency of a controller: stated, or usual.
pub(super) fn efficiency(controller: &ControllerPart) -> Ratio {
    controller.efficiency.unwrap_or_else(|| Ratio::new::<ratio>(TRACKING))
}

/// Energy that so many modules give through their controller on a month's mean day, before losses.
pub(super) fn day_energy(
    site: &Site,
    module: &Module,
    controller: &ControllerPart,
    (series, strings): (u32, u32),
    nominal: ElectricPotential,
    month: usize,
) -> Option<Energy> {
    let sun = sun(site, month)?;
    Some(if controller.kind == Some(ControllerKind::Pwm) {
        module.sheet().points.imp * f64::from(strings) * nominal * sun
    } else {
        module_power(site, module, month)
            * f64::from(series)
            * f64::from(strings)
            * efficiency(controller)
            * sun
    })
}

/// Part of a charge, counted at nominal voltage, that the bank gives back.
pub(super) fn stored_charge(bank: &BankEntry) -> Ratio {
    Ratio::new::<ratio>(bank.chemistry().map_or(1.0, |c| data(c).charge_efficiency.value))
}

/// Part of an energy that the bank gives back: its charge goes in at a higher voltage than it comes out.
pub(super) fn stored_energy(bank: &BankEntry) -> Ratio {
    Ratio::new::<ratio>(bank.chemistry().map_or(1.0, |c| data(c).energy_efficiency.value))
}

/// Energy of an array that its bank stores on a month's mean day.
pub(super) fn array_energy(site: &Site, array: &Array, bank: &BankEntry, month: usize) -> Option<Energy> {
    let controller = site.controllers.get(array.controller?)?;
    let module = module_of(&array.module).ok()?;
    let whole = day_energy(site, &module, controller, (array.series, array.strings), bank.nominal, month)?;
    let shaded = array.part.shade.map_or(0.0, |s| s.get::<ratio>());
    let stored =
        if controller.kind == Some(ControllerKind::Pwm) { stored_charge(bank) } else { stored_energy(bank) };
    Some(whole * (1.0 - ARRAY_LOSS) * (1.0 - shaded) * stored)
}

/// Energy of all arrays of some banks in each month; `None` without weather or arrays.
pub(super) fn arrays_of(site: &Site, banks: &[usize]) -> Option<[Energy; 12]> {
    site.weather.as_ref()?;
    let mut months = [Energy::new::<joule>(0.0); 12];
    let mut any = false;
    for array in &site.arrays {
        let charger = array
            .controller
            .and_then(|c| site.chargers.iter().find(|x| x.kind == ChargerKind::Controller(c)));
        let bank = charger.and_then(|c| c.bank).filter(|b| banks.contains(b));
        let Some(entry) = bank.and_then(|b| site.banks.get(b)) else { continue };
        any = true;
        for (month, cell) in months.iter_mut().enumerate() {
            *cell += array_energy(site, array, entry, month).unwrap_or_default();
        }
    }
    any.then_some(months)
}

/// Energy that generators bring into some banks in a day: a stated figure, or their lasting current over the hours they
/// may run.
pub(super) fn generators_of(site: &Site, banks: &[usize]) -> Energy {
    let mut sum = Energy::default();
    for charger in &site.chargers {
        let ChargerKind::Generator(index) = charger.kind else { continue };
        let bank = charger.bank.filter(|b| banks.contains(b)).and_then(|b| site.banks.get(b));
        let (Some(part), Some(entry)) = (site.generators.get(index), bank) else { continue };
        let by_hours = || {
            let hours = part.hours?.get::<hour>().min(24.0);
            let usual = if part.kind == GeneratorKind::Alternator { ALTERNATOR_HOT } else { 1.0 };
            let hot = part.hot_output.map_or(usual, |h| h.get::<ratio>());
            Some(part.output? * hot * entry.nominal * Time::new::<hour>(hours))
        };
        sum += match part.daily {
            Some(daily) => daily * stored_energy(entry),
            None => by_hours().unwrap_or_default() * stored_charge(entry),
        };
    }
    sum
}
