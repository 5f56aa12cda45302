//! Overcurrent devices and their place: which ends can feed, which poles need one, which rating is chosen.

mod choose;
mod place;

pub use choose::{Guard, Offer, choose, least_rating};
pub use place::{Earthing, End, Feeds, Pole, PoleFault, feeds, pole_fault};
