//! What to buy, switching order, labels, maintenance.

use alloc::vec::Vec;

use super::common::texts;
use super::number::{Number, tidy};
use super::shape::object;
use super::words::Direction;
use crate::site::sheet;

object! {
    /// One line of what to buy.
    Purchase<'a> {
        /// How much, in `unit`.
        amount: Number,
        /// `m` of single conductor, or `pcs`.
        unit: &'static str,
        /// What.
        what: &'a str,
        /// Where it goes.
        places: Vec<&'a str>,
        /// Price of all of it, in the money that the stock counts in; null where it states none.
        price: Number,
        /// What lies on the shelf of it, in `unit`; null where the stock does not say.
        shelf: Number,
    }
}

object! {
    /// What all of it costs, as far as the stock states prices.
    PurchaseTotal {
        /// Sum of the prices known, in the money that the stock counts in.
        price: Number,
        /// Lines without a price.
        without_price_count: usize,
    }
}

object! {
    /// One step of the switching order.
    SwitchingStep<'a> {
        /// Which way.
        direction: Direction,
        /// What is done.
        what: &'a str,
    }
}

object! {
    /// Like labels.
    Label<'a> {
        /// How many.
        label_count: u32,
        /// Where they go.
        place: &'a str,
        /// What stands on it, line by line.
        lines: Vec<&'a str>,
    }
}

object! {
    /// One thing to look after; one of the two intervals is null.
    MaintenanceTask<'a> {
        /// So many hours of running, h.
        every_running_h: Option<u32>,
        /// So many months.
        every_month_count: Option<u32>,
        /// At what.
        place: &'a str,
        /// What.
        what: &'a str,
    }
}

impl<'a> From<&'a sheet::Purchase> for Purchase<'a> {
    fn from(purchase: &'a sheet::Purchase) -> Self {
        let sheet::Purchase { amount, unit, what, places, price, shelf } = purchase;
        Self {
            amount: tidy(*amount),
            unit,
            what,
            places: texts(places),
            price: price.and_then(tidy),
            shelf: shelf.and_then(tidy),
        }
    }
}

impl From<&sheet::PurchaseTotal> for PurchaseTotal {
    fn from(total: &sheet::PurchaseTotal) -> Self {
        let sheet::PurchaseTotal { sum, without_price } = *total;
        Self { price: tidy(sum), without_price_count: without_price }
    }
}

impl<'a> From<&'a sheet::SwitchingStep> for SwitchingStep<'a> {
    fn from(step: &'a sheet::SwitchingStep) -> Self {
        let sheet::SwitchingStep { direction, what } = step;
        Self { direction: direction.into(), what }
    }
}

impl<'a> From<&'a sheet::Label> for Label<'a> {
    fn from(label: &'a sheet::Label) -> Self {
        let sheet::Label { count, place, lines } = label;
        Self { label_count: *count, place, lines: texts(lines) }
    }
}

impl<'a> From<&'a sheet::MaintenanceTask> for MaintenanceTask<'a> {
    fn from(task: &'a sheet::MaintenanceTask) -> Self {
        let sheet::MaintenanceTask { every, place, what } = task;
        let (every_running_h, every_month_count) = match *every {
            sheet::Every::RunningHours(hours) => (Some(hours), None),
            sheet::Every::Months(months) => (None, Some(months)),
        };
        Self { every_running_h, every_month_count, place, what }
    }
}
