//! Time to recharge: the plain quotient, and with the tail of a lead-acid battery.
//!
//! Model of the tail: below a knee the battery takes what the sources give. Above it the voltage is held and the current
//! falls in proportion to what is missing from full, beginning with the sources' current at the knee. So
//! ds/dt = η·I/C up to the knee k, then (1 − s)/τ with τ = (1 − k)·C/(η·I). Full is approached, never reached.

use crate::catalogue::calculations;
use crate::quantity::{ElectricCharge, ElectricCurrent, Ratio, Time};

calculations! {
    /// Time to put a charge back at a constant current.
    ///
    /// Without an acceptance tail: right for lithium banks, hopeful for lead-acid ones.
    ///
    /// # Example
    /// 120 Ah at 13 A, nothing lost:
    /// ```
    /// use ampwright::{law::recharge_time, quantity::{parse, readable}};
    /// let result = recharge_time(parse("120 Ah")?, parse("13 A")?, parse("100 %")?)?;
    /// assert_eq!(readable(result).to_string(), "9.23 h");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn recharge_time(
        /// Charge that is missing.
        missing: ElectricCharge in ampere_hour [>= 0.0],
        /// Of all sources together, at the bank.
        current: ElectricCurrent in ampere [> 0.0],
        /// Part of the charge that is stored.
        efficiency: Ratio in ratio [> 0.0 ..= 1.0],
    ) -> duration: Time in hour
    formula "t = Q/(η·I)"
    source "charge balance"
    { missing / (efficiency * current) }

    /// Time to recharge a lead-acid battery, with the tail in which it takes less and less.
    ///
    /// Up to the knee the battery takes what the sources give: ds/dt = η·I/C. Above it the voltage is held and the current falls
    /// in proportion to what is missing from full, beginning with the sources' current: ds/dt = (1 − s)/τ. That tail is an
    /// exponential; one charge efficiency holds throughout. Both flatter an old or cold battery.
    ///
    /// # Example
    /// 200 Ah from half to 95 % with 26 A:
    /// ```
    /// use ampwright::{law::recharge_time_lead_acid, quantity::{parse, readable}};
    /// let result = recharge_time_lead_acid(parse("200 Ah")?, parse("26 A")?, parse("50 %")?, parse("95 %")?, parse("80 %")?, parse("85 %")?)?;
    /// assert_eq!(readable(result.total).to_string(), "5.22 h");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn recharge_time_lead_acid(
        /// Rated capacity.
        capacity: ElectricCharge in ampere_hour [> 0.0],
        /// Of all sources together, at the bank.
        current: ElectricCurrent in ampere [> 0.0],
        /// State of charge at the start.
        start: Ratio in ratio [0.0 ..= 0.999],
        /// State of charge at the end; full itself is never reached.
        target: Ratio in ratio [> 0.0 ..= 0.999],
        /// State of charge from which the battery takes less; 0.8 is common practice, no source.
        knee: Ratio in ratio [0.0 ..= 0.99] = 0.8,
        /// Part of the charge that is stored.
        efficiency: Ratio in ratio [> 0.0 ..= 1.0],
    ) => LeadAcidRecharge {
        /// At the sources' current.
        bulk: Time in hour,
        /// At falling current.
        tail: Time in hour,
        /// Both.
        total: Time in hour,
    }
    where (start <= target) start in ratio: "it must not be above target"
    formula "bulk + tail = (min(k, s₁) − s₀)·C/(η·I) + τ·ln((1 − max(k, s₀))/(1 − s₁)), τ = (1 − k)·C/(η·I), each term at least 0; \
        s₀ start, s₁ target, k knee, η efficiency; up to the knee ds/dt = η·I/C, above it ds/dt = (1 − s)/τ: voltage held, current \
        falling in proportion to what is missing from full"
    source "integral of the two rates; that the current falls so, and from which knee, is common practice, no source"
    {
        let whole = capacity / (efficiency * current);
        let (start, target, knee) = (start.value, target.value, knee.value);
        let bulk = whole * (knee.min(target) - start).max(0.0);
        let left = (1.0 - knee.max(start)) / (1.0 - target);
        let tail = whole * ((1.0 - knee) * libm::log(left.max(1.0)));
        LeadAcidRecharge { bulk, tail, total: bulk + tail }
    }
}

#[cfg(test)]
mod tests {
    use proptest::prelude::*;
    use uom::si::{electric_charge::ampere_hour, electric_current::ampere, ratio::ratio, time::hour};

    use super::*;

    fn hours(start: f64, target: f64, knee: f64) -> LeadAcidRecharge {
        let r = Ratio::new::<ratio>;
        recharge_time_lead_acid(
            ElectricCharge::new::<ampere_hour>(200.0),
            ElectricCurrent::new::<ampere>(26.0),
            r(start),
            r(target),
            r(knee),
            r(0.85),
        )
        .unwrap()
    }

    /// Midpoint steps through the model's differential equation until the target is passed.
    fn integrated(start: f64, target: f64, knee: f64) -> f64 {
        let slope = 0.85 * 26.0 / 200.0;
        let rate = |s: f64| if s < knee { slope } else { slope * (1.0 - s) / (1.0 - knee) };
        let (mut s, mut t, step) = (start, 0.0, 1e-4);
        while s < target {
            let next = s + step * rate(s + 0.5 * step * rate(s));
            if next >= target {
                return t + step * (target - s) / (next - s);
            }
            s = next;
            t += step;
        }
        t
    }

    proptest! {
        #![proptest_config(ProptestConfig::with_cases(24))]
        #[test]
        fn closed_form_is_the_integral(a in 0.0..0.98f64, b in 0.0..0.98f64, knee in 0.0..0.95f64) {
            let (start, target) = (a.min(b), a.max(b));
            let closed = hours(start, target, knee).total.get::<hour>();
            // Midpoint with 0.36 s steps: error of the kink at the knee is below one step.
            prop_assert!((closed - integrated(start, target, knee)).abs() < 2e-4);
        }
    }

    #[test]
    fn below_the_knee_it_is_the_plain_quotient() {
        let result = hours(0.3, 0.7, 0.8);
        assert_eq!(result.tail.value, 0.0);
        assert!((result.total.get::<hour>() - 80.0 / (0.85 * 26.0)).abs() < 1e-12);
    }

    #[test]
    fn above_the_knee_there_is_no_bulk_and_standing_still_takes_no_time() {
        assert_eq!(hours(0.9, 0.95, 0.8).bulk.value, 0.0);
        assert_eq!(hours(0.9, 0.9, 0.8).total.value, 0.0);
    }

    #[test]
    fn a_target_below_the_start_names_the_start() {
        let r = Ratio::new::<ratio>;
        let error = recharge_time_lead_acid(
            ElectricCharge::new::<ampere_hour>(200.0),
            ElectricCurrent::new::<ampere>(26.0),
            r(0.9),
            r(0.8),
            r(0.8),
            r(0.85),
        )
        .unwrap_err();
        assert!(matches!(error, crate::Error::Contradiction { name: "start", value: 0.9, .. }), "{error}");
    }
}
