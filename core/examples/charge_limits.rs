//! Charge limits of a bank over temperature: `cargo run --example charge_limits`.

use ampwright::prelude::*;

fn main() -> Result<(), Error> {
    let capacity = ElectricCharge::new::<ampere_hour>(100.0);
    for chemistry in [Chemistry::Flooded, Chemistry::Lfp] {
        println!("100 Ah {chemistry}: charge current of all sources together");
        println!("  cells at  default  on stated limit  least");
        for celsius in [-25.0, -10.0, -0.5, 0.0, 5.0, 10.0, 15.0, 20.0, 25.0, 35.0, 45.0, 50.0, 55.0] {
            let temperature = ThermodynamicTemperature::new::<degree_celsius>(celsius);
            let limit = charge_current_limit(chemistry, capacity, temperature)?;
            let (usual, ceiling) = (limit.usual.get::<ampere>(), limit.ceiling.get::<ampere>());
            if ceiling == 0.0 {
                println!("  {celsius:>5} °C  no charge");
                continue;
            }
            let least = match limit.least.get::<ampere>() {
                0.0 => "-".to_owned(),
                amperes => format!("{amperes:.0} A"),
            };
            println!("  {celsius:>5} °C  {usual:>5.0} A  {ceiling:>13.0} A  {least:>5}");
        }
        let source = charge_limit(chemistry, ThermodynamicTemperature::new::<degree_celsius>(20.0))?.citation;
        println!("  source: {source}; the maker's stated limits govern\n");
    }
    Ok(())
}
