//! The keys of the plant: place, weather, banks, arrays, controllers, generators, loads in time, readings, and the
//! stock of them. The manner is that of [`super::keys`], which holds the keys of the wiring; in which section each
//! stands tells [`super::sections`].

use super::keys::{
    AIR, AMPERE_HOURS, AMPERES, ANY, Key, METRES, OHMS, PART, Range, VOLTS, WATTS, count, flag, key,
};
use crate::error::Allowed;

const DEGREE: f64 = core::f64::consts::PI / 180.0;
const TIME_OF_DAY: Range = Range::new(Allowed::AboveUpTo(0.0, 24.0), "h").scaled(3600.0);
const SUN: Range = Range::new(Allowed::Between(0.0, 15.0), "kWh/m2").scaled(3.6e6);
const COEFFICIENT: Range = Range::new(Allowed::Between(-2.0, 2.0), "%/K").scaled(0.01);
// Voltage and power fall as a module warms: a positive figure is a slip of the pen.
const FALLING: Range = Range::new(Allowed::Between(-2.0, 0.0), "%/K").scaled(0.01);
const WHOLE: Range = count(1.0, 100_000.0);

// [site]
pub(super) const LATITUDE: Key = key(
    "latitude",
    "an angle",
    "\"58.2 deg\"",
    Range::new(Allowed::Between(-90.0, 90.0), "deg").scaled(DEGREE),
);
pub(super) const LONGITUDE: Key = key(
    "longitude",
    "an angle",
    "\"-4.1 deg\"",
    Range::new(Allowed::Between(-180.0, 180.0), "deg").scaled(DEGREE),
);
pub(super) const ALTITUDE: Key =
    key("altitude", "a length", "\"40 m\"", Range::new(Allowed::Between(-500.0, 9000.0), "m"));
pub(super) const AUTONOMY: Key =
    key("autonomy", "a time", "\"5 d\"", Range::new(Allowed::AboveUpTo(0.0, 60.0), "d").scaled(86_400.0));
pub(super) const CRITICAL: Key = flag("critical");
pub(super) const LOSSES: Key =
    key("losses", "a ratio", "\"3 %\"", Range::new(Allowed::Between(0.0, 0.5), ""));
pub(super) const MARGIN: Key =
    key("margin", "a ratio", "\"10 %\"", Range::new(Allowed::Between(0.0, 1.0), ""));
pub(super) const BONDS: Key = key("bonds", "a whole number", "1", count(0.0, 20.0));
pub(super) const BONDING: Key = key("bonding", "a conductor size", "\"16 mm2\"", ANY);
pub(super) const MONITORING: Key = key("monitoring", "a kind of monitoring", "\"insulation\"", ANY);
pub(super) const COVERED: Key = flag("covered");
pub(super) const SURGE_PROTECTION: Key = flag("surge_protection");
pub(super) const MAST: Key = flag("mast");

// [weather]
pub(super) const IN_PLANE: Key = key(
    "in_plane",
    "a list of twelve irradiations (January first)",
    "[\"0.6 kWh/m2\", \"1.4 kWh/m2\", …]",
    SUN,
);
pub(super) const MEANS: Key =
    key("temperature", "a list of twelve temperatures (January first)", "[\"2 degC\", \"2 degC\", …]", AIR);
pub(super) const COLDEST_MORNING: Key = key("coldest_morning", "a temperature", "\"-25 degC\"", AIR);

// [[bank]]
pub(super) const BATTERY: Key = key("battery", "the name of a [[stock.battery]]", "\"six volt\"", ANY);
pub(super) const UNIT: Key = key("unit", "a voltage", "\"6 V\"", VOLTS);
pub(super) const UNIT_CAPACITY: Key = key("unit_capacity", "a charge", "\"225 Ah\"", AMPERE_HOURS);
pub(super) const UNITS: Key = key("units", "a whole number", "8", WHOLE);
pub(super) const SERIES: Key = key("series", "a whole number", "4", count(1.0, 1000.0));
pub(super) const RATE: Key =
    key("rate", "a time", "\"20 h\"", Range::new(Allowed::Between(0.1, 240.0), "h").scaled(3600.0));
pub(super) const GREATEST_CHARGE: Key = key("greatest_charge", "a current", "\"100 A\"", AMPERES);
pub(super) const CHARGE_FROM: Key = key("charge_from", "a temperature", "\"0 degC\"", AIR);
pub(super) const CELLS_AT: Key =
    key("temperature", "a list of the least and the greatest temperature", "[\"5 degC\", \"30 degC\"]", AIR);
pub(super) const COLD_CAPACITY: Key = key("cold_capacity", "a ratio", "\"60 %\"", PART);
pub(super) const DEPTH: Key = key("depth", "a ratio", "\"80 %\"", PART);
pub(super) const DAILY_DEPTH: Key = key("daily_depth", "a ratio", "\"20 %\"", PART);
pub(super) const DISCONNECT: Key = key("disconnect", "a voltage", "\"22.8 V\"", VOLTS);
pub(super) const RECONNECT: Key = key("reconnect", "a voltage", "\"25.2 V\"", VOLTS);
pub(super) const TAKE_OFF: Key = key("take_off", "a way of joining strings", "\"busbar\"", ANY);
pub(super) const LINK: Key = key("link", "a resistance", "\"0.3 mohm\"", OHMS);
pub(super) const STRING_JOINT: Key = key("joint", "a resistance", "\"0.1 mohm\"", OHMS);
pub(super) const STRING_DEVICE: Key = key("string_device", "a current", "\"100 A\"", AMPERES);
pub(super) const MAX_SERIES: Key = key("max_series", "a whole number", "4", count(1.0, 1000.0));
pub(super) const MAX_PARALLEL: Key = key("max_parallel", "a whole number", "4", count(1.0, 1000.0));
pub(super) const MIXED: Key = flag("mixed");
pub(super) const DATA_LINK: Key = flag("data_link");
pub(super) const OPENS_UNDER_CHARGE: Key = flag("opens_under_charge");
pub(super) const ROOM: Key = key("space", "a space", "\"room\"", ANY);
pub(super) const AIR_FLOW: Key = key(
    "air",
    "a flow of air",
    "\"5 m3/h\"",
    Range::new(Allowed::Between(0.0, 1e5), "m3/h").scaled(1.0 / 3600.0),
);
pub(super) const OPENING: Key =
    key("opening", "an area", "\"150 cm2\"", Range::new(Allowed::Between(0.0, 1e6), "cm2").scaled(1e-4));
pub(super) const ROUTE: Key = key("route", "a length", "\"12 m\"", METRES);
pub(super) const BOARD_NAME: Key = key("board", "the name of a board", "\"main\"", ANY);

// Charging
pub(super) const ABSORPTION: Key = key("absorption", "a voltage", "\"28.8 V\"", VOLTS);
pub(super) const FLOAT: Key = key("float", "a voltage", "\"27 V\"", VOLTS);
pub(super) const EQUALISE: Key = key("equalise", "a voltage", "\"31 V\"", VOLTS);
pub(super) const COMPENSATION: Key = key(
    "compensation",
    "a voltage per kelvin and cell",
    "\"-5 mV/K\"",
    Range::new(Allowed::Between(-20.0, 0.0), "mV/K").scaled(1e-3),
);
pub(super) const SENSE: Key = key("sense", "a place", "\"bank\"", ANY);

// Modules and arrays
pub(super) const MODULE: Key = key("module", "the name of a [[stock.module]]", "\"m120\"", ANY);
pub(super) const VOC: Key = key("voc", "a voltage", "\"22.1 V\"", VOLTS);
pub(super) const ISC: Key = key("isc", "a current", "\"7.3 A\"", AMPERES);
pub(super) const VMP: Key = key("vmp", "a voltage", "\"17.6 V\"", VOLTS);
pub(super) const IMP: Key = key("imp", "a current", "\"6.8 A\"", AMPERES);
pub(super) const VOC_COEFFICIENT: Key = key("voc_coefficient", "a ratio per kelvin", "\"-0.3 %/K\"", FALLING);
pub(super) const ISC_COEFFICIENT: Key =
    key("isc_coefficient", "a ratio per kelvin", "\"0.05 %/K\"", COEFFICIENT);
pub(super) const POWER_COEFFICIENT: Key =
    key("power_coefficient", "a ratio per kelvin", "\"-0.4 %/K\"", FALLING);
pub(super) const NOCT: Key = key("noct", "a temperature", "\"45 degC\"", Range::celsius(20.0, 100.0));
pub(super) const SERIES_FUSE: Key = key("series_fuse", "a current", "\"15 A\"", AMPERES);
pub(super) const GREATEST_VOLTAGE: Key = key("greatest_voltage", "a voltage", "\"600 V\"", VOLTS);
pub(super) const REAR_GAIN: Key =
    key("rear_gain", "a ratio", "\"10 %\"", Range::new(Allowed::Between(0.0, 0.5), ""));
pub(super) const CELLS: Key = key("cells", "a whole number", "36", count(1.0, 400.0));
pub(super) const SHELF_COUNT: Key = key("count", "a whole number", "4", count(0.0, 100_000.0));
pub(super) const MODULES: Key = key("modules", "a whole number", "6", WHOLE);
pub(super) const TILT: Key =
    key("tilt", "an angle", "\"60 deg\"", Range::new(Allowed::Between(0.0, 90.0), "deg").scaled(DEGREE));
pub(super) const AZIMUTH: Key =
    key("azimuth", "an angle", "\"180 deg\"", Range::new(Allowed::Between(0.0, 360.0), "deg").scaled(DEGREE));
pub(super) const SHADE: Key = key("shade", "a ratio", "\"20 %\"", Range::new(Allowed::Between(0.0, 1.0), ""));
pub(super) const CONTROLLER_NAME: Key = key("controller", "the name of a controller", "\"regulator\"", ANY);
pub(super) const STRING_FUSE: Key = key("string_fuse", "a current", "\"15 A\"", AMPERES);
pub(super) const ISOLATOR: Key = key("isolator", "a voltage", "\"150 V\"", VOLTS);
pub(super) const ISOLATOR_CURRENT: Key = key("isolator_current", "a current", "\"32 A\"", AMPERES);
pub(super) const LOAD_BREAK: Key = flag("load_break");
pub(super) const EXPOSED: Key = flag("exposed");

// Controllers
pub(super) const CONTROLLER_KIND: Key = key("kind", "a kind of controller", "\"mppt\"", ANY);
pub(super) const MODEL: Key = key("model", "the name of an entry of the stock", "\"c30\"", ANY);
pub(super) const GREATEST_INPUT: Key = key("greatest_input", "a voltage", "\"100 V\"", VOLTS);
pub(super) const INPUT_CURRENT: Key = key("input_current", "a current", "\"30 A\"", AMPERES);
pub(super) const OPERATING: Key =
    key("operating", "a list of the least and the greatest voltage", "[\"20 V\", \"90 V\"]", VOLTS);
pub(super) const START_MARGIN: Key =
    key("start_margin", "a voltage", "\"5 V\"", Range::new(Allowed::Between(0.0, 100.0), "V"));
pub(super) const OUTPUT: Key = key("output", "a current", "\"30 A\"", AMPERES);
pub(super) const NOMINALS: Key = key("nominals", "a list of voltages", "[\"12 V\", \"24 V\"]", VOLTS);
pub(super) const BANK_NAME: Key = key("bank", "the name of a bank", "\"house\"", ANY);

// Generators and converters
pub(super) const GENERATOR_KIND: Key = key("kind", "a kind of source", "\"engine\"", ANY);
pub(super) const HOT_OUTPUT: Key = key("hot_output", "a ratio", "\"55 %\"", PART);
pub(super) const POWER_FACTOR: Key = key("power_factor", "a ratio", "0.8", PART);
pub(super) const HOURS: Key = key("hours", "a time", "\"4 h\"", TIME_OF_DAY);
pub(super) const DAILY: Key =
    key("daily", "an energy", "\"1.2 kWh\"", Range::new(Allowed::Between(0.0, 1e6), "kWh").scaled(3.6e6));
pub(super) const LOAD_DUMP: Key = flag("load_dump");
pub(super) const SELF_LIMITING: Key = flag("self_limiting");
pub(super) const OUTPUT_VOLTAGE: Key = key("output", "a voltage", "\"12 V\"", VOLTS);
pub(super) const LIMIT: Key = key("limit", "a current", "\"20 A\"", AMPERES);
pub(super) const ISOLATED: Key = flag("isolated");

// Inverters
pub(super) const SURGE_TIME: Key =
    key("surge_time", "a time", "\"5 s\"", Range::new(Allowed::AboveUpTo(0.0, 3600.0), "s"));
pub(super) const CAPACITANCE: Key =
    key("capacitance", "a capacitance", "\"10000 uF\"", Range::new(Allowed::AboveUpTo(0.0, 10.0), "F"));
pub(super) const PRECHARGE: Key = flag("precharge");

// Loads in time
pub(super) const AT_TIMES: Key = key("at", "a list of times from-to", "[\"18:00-23:00\"]", ANY);
pub(super) const MONTHS: Key = key("months", "a list of months", "[\"Nov\", \"Dec\", \"Jan\"]", ANY);
pub(super) const DAYS_PER_WEEK: Key = key("days_per_week", "a whole number", "2", count(1.0, 7.0));
pub(super) const DUTY: Key = key("duty", "a ratio", "\"40 %\"", PART);
pub(super) const DUTY_HOT: Key = key("duty_hot", "a ratio", "\"60 %\"", PART);
pub(super) const STANDING: Key = flag("standing");
pub(super) const PRIORITY: Key = key("priority", "a whole number", "1", count(1.0, 100.0));
pub(super) const AC: Key = flag("ac");
pub(super) const INVERTER_NAME: Key = key("inverter", "the name of an inverter", "\"inverter\"", ANY);
pub(super) const START_POWER: Key = key("start_power", "a power", "\"1440 W\"", WATTS);
pub(super) const START_TIME: Key =
    key("start_time", "a time", "\"0.5 s\"", Range::new(Allowed::AboveUpTo(0.0, 60.0), "s"));
pub(super) const PAST_DISCONNECT: Key = flag("past_disconnect");

// Readings
pub(super) const MEASURED_AT: Key = key("at", "the name of what was measured", "\"house\"", ANY);
pub(super) const ON: Key = key("on", "a list of loads", "[\"water pump\"]", ANY);
pub(super) const READ_VOLTS: Key =
    key("volts", "a voltage", "\"24.6 V\"", Range::new(Allowed::Between(0.0, 1500.0), "V"));
pub(super) const READ_DROP: Key =
    key("drop", "a voltage", "\"0.35 V\"", Range::new(Allowed::Between(0.0, 1500.0), "V"));
pub(super) const READ_AMPS: Key =
    key("amps", "a current", "\"12.4 A\"", Range::new(Allowed::Between(0.0, 100_000.0), "A"));
pub(super) const READ_TEMPERATURE: Key =
    key("temperature", "a temperature", "\"25 degC\"", Range::celsius(-90.0, 400.0));
pub(super) const DENSITY: Key =
    key("density", "a number", "1.225", Range::new(Allowed::Between(1.0, 1.4), ""));
pub(super) const REST: Key =
    key("rest", "a time", "\"4 h\"", Range::new(Allowed::Between(0.0, 1000.0), "h").scaled(3600.0));
pub(super) const DELIVERED: Key = key("delivered", "a charge", "\"60 Ah\"", AMPERE_HOURS);
pub(super) const ACCURACY: Key =
    key("accuracy", "a ratio", "\"0.5 %\"", Range::new(Allowed::Between(0.0, 0.2), ""));
pub(super) const RESOLUTION: Key =
    key("resolution", "a voltage", "\"10 mV\"", Range::new(Allowed::AboveUpTo(0.0, 10.0), "V"));

pub(super) const BATTERIES: Key = key("battery", "sections [[stock.battery]]", "", ANY);
pub(super) const STOCK_MODULES: Key = key("module", "sections [[stock.module]]", "", ANY);
pub(super) const STOCK_CONTROLLERS: Key = key("controller", "sections [[stock.controller]]", "", ANY);
pub(super) const STOCK_INVERTERS: Key = key("inverter", "sections [[stock.inverter]]", "", ANY);
