//! Resistance of one conductor over its whole length.
//!
//! The loop of a run is the sum of both its conductors, which may differ (R1), and of its joints.

use uom::si::area::square_millimeter;
use uom::si::ratio::ratio;

use super::resistance::{class_table, resistivity};
use super::resistance_table::{ResistanceTable, TABLE_8_SOLID, TABLE_8_STRANDED};
use super::{Class, Coating, Conductor, Insulation, Material, linear_resistance};
use crate::catalogue::calculations;
use crate::error::Error;
use crate::quantity::{Area, ConductorSize, ElectricalResistance, Length, Ratio, ThermodynamicTemperature};

calculations! {
    /// Resistance of one conductor from its metal and area.
    ///
    /// The least that such a conductor can have: strands are longer than the cable and wire may be thinner than its
    /// nominal size, which the tables' greatest values allow for.
    ///
    /// # Example
    /// 10 m of 16 mm² of copper at 20 °C:
    /// ```
    /// use ampwright::{cable::{Material, conductor_resistance}, quantity::{parse, readable}};
    /// let result = conductor_resistance(Material::Copper, parse("20 degC")?, parse("10 m")?, parse("16 mm2")?)?;
    /// assert_eq!(readable(result).to_string(), "10.78 mΩ");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn conductor_resistance(
        /// Of the conductor.
        material: Material in choice [choice],
        /// Of the conductor, not of the air.
        temperature: ThermodynamicTemperature in degree_celsius [-80.0 ..= 250.0],
        /// Of this one conductor, not of the route there and back.
        conductor_length: Length in meter [> 0.0],
        /// Of its metal.
        cross_section: Area in square_millimeter [> 0.0],
    ) -> resistance: ElectricalResistance in ohm
    formula "R = ρ(θ)·l/A"
    source "as `resistivity`"
    { resistivity::formula(material, temperature) * conductor_length / cross_section }

    /// Greatest resistance of one copper conductor of a metric size, by its class's table.
    ///
    /// # Example
    /// 10 m of 16 mm², class 5, at 70 °C: 1.21 Ω/km at 20 °C × 304.5/254.5:
    /// ```
    /// use ampwright::{cable::{Class, Coating, iec_conductor_resistance}, quantity::{parse, readable}};
    /// let of = |size| iec_conductor_resistance(
    ///     parse(size)?, Class::Flexible, Coating::Plain, parse("70 degC")?, parse("10 m")?,
    /// );
    /// assert_eq!(readable(of("16 mm2")?).to_string(), "14.48 mΩ");
    /// assert!(of("17 mm2").is_err());
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn iec_conductor_resistance(
        /// Nominal cross-section, one of 0.5, 0.75, 1, 1.5, 2.5, 4, 6, 10, 16, 25, 35, 50, 70, 95, 120, 150, 185, 240, 300 and 400 mm², where it ends; class 1 ends at 16 mm². Any other is refused.
        size: Area in square_millimeter [> 0.0 ..= 1000.0],
        /// After IEC 60228: solid, stranded, flexible, extra flexible.
        class: Class in choice [choice],
        /// Of the strands.
        coating: Coating in choice [choice],
        /// Of the conductor, not of the air.
        temperature: ThermodynamicTemperature in degree_celsius [-80.0 ..= 250.0],
        /// Of this one conductor, not of the route there and back.
        conductor_length: Length in meter [> 0.0],
    ) -> resistance: ElectricalResistance in ohm
    formula "R = R₂₀·(234.5 °C + θ)/254.5 °C·l, R₂₀ printed for size, class and coating"
    source "IEC 60228:2004, Tables 1 to 4 (class 6, the coated column of class 1 and single cells recalled; class 6 above 300 mm² as class 5)"
    fallible "no figure of the class's table is held for the size: above 400 mm², class 1 above 16 mm², and between the sizes"
    {
        let entered = size.get::<square_millimeter>();
        // Conversion to square metres and back may cost the last bit.
        let same = |row: f64| (row - entered).abs() <= 1e-9 * row;
        let tabled = class_table(class).rows.iter().map(|row| row.size).find(|size| same(size.area_mm2()));
        let tabled = tabled.filter(|size| class_table(class).cell(*size, coating).is_some());
        let size = tabled.ok_or(Error::Contradiction {
            name: "size",
            value: entered,
            unit: "mm²",
            why: "no figure of the class's table is held for it; take a size that is, or the area alone",
        })?;
        whole(size, class, coating, temperature, conductor_length)
    }

    /// Greatest resistance of one copper conductor of a gauge.
    ///
    /// A flexible conductor has no row of its own, as in [`linear_resistance`](super::linear_resistance()).
    ///
    /// # Example
    /// 10 m of 6 AWG, stranded, at 75 °C: 0.491 Ω per 1000 ft:
    /// ```
    /// use ampwright::{cable::{Class, Coating, gauge_conductor_resistance}, quantity::{parse, readable}};
    /// let result = gauge_conductor_resistance(
    ///     parse("6")?, Class::Stranded, Coating::Plain, parse("75 degC")?, parse("10 m")?,
    /// )?;
    /// assert_eq!(readable(result).to_string(), "16.11 mΩ");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn gauge_conductor_resistance(
        /// One of 18, 16, 14, 12, 10, 8, 6, 4, 3, 2, 1, then 0 for 1/0, −1 for 2/0, −2 for 3/0, −3 for 4/0; class 1 ends at 8. Any other is refused.
        gauge: Ratio in awg [-3.0 ..= 40.0],
        /// After IEC 60228: solid, stranded, flexible, extra flexible.
        class: Class in choice [choice],
        /// Of the strands.
        coating: Coating in choice [choice],
        /// Of the conductor, not of the air.
        temperature: ThermodynamicTemperature in degree_celsius [-80.0 ..= 250.0],
        /// Of this one conductor, not of the route there and back.
        conductor_length: Length in meter [> 0.0],
    ) -> resistance: ElectricalResistance in ohm
    formula "classes 1 and 2: R = R₇₅·(1 + 0.00323·(θ − 75 °C))·l, R₇₅ of Table 8, solid or stranded; classes 5 and 6: the greater \
        of that, stranded, and R = k/58 Ω·mm²/m·(234.5 °C + θ)/254.5 °C·l/A, with allowance k = 1.1571 plain, 1.1919 tinned, and \
        A = π/4·(0.127 mm)²·92^((36 − n)/19.5), n the gauge"
    source "NFPA 70-2023, Chapter 9, Table 8 and its note 2 (coated columns and single cells recalled); classes 5 and 6 also \
        IEC 60028:1925 and ASTM B258, k the worst ratio of printed maximum to 1/58 Ω·mm²/m over the area in IEC 60228:2004, Table 3"
    fallible "Table 8 has no figure for the gauge"
    {
        let entered = gauge.get::<ratio>();
        let table: &ResistanceTable = if class == Class::Solid { &TABLE_8_SOLID } else { &TABLE_8_STRANDED };
        let tabled = (-3..=40).find(|whole| f64::from(*whole) == entered);
        let tabled = tabled.and_then(|whole| ConductorSize::awg(whole).ok());
        let size = tabled.filter(|size| table.cell(*size, coating).is_some()).ok_or(Error::Contradiction {
            name: "gauge",
            value: entered,
            unit: "AWG",
            why: "NFPA 70 Chapter 9 Table 8 has no figure for it; take a gauge of the table, or the area alone",
        })?;
        whole(size, class, coating, temperature, conductor_length)
    }
}

fn whole(
    size: ConductorSize,
    class: Class,
    coating: Coating,
    temperature: ThermodynamicTemperature,
    length: Length,
) -> Result<ElectricalResistance, Error> {
    // Whatever its insulation.
    let conductor =
        Conductor { size, material: Material::Copper, class, coating, insulation: Insulation::PVC_60 };
    Ok(linear_resistance(&conductor, temperature)? * length)
}
