//! Sizes one cable run and says why each smaller size was refused: `cargo run --example size_run`.

use ampwright::prelude::*;

fn main() -> Result<(), Error> {
    let rules = Rules::named("iec")?;
    // 20 A for hours, 12 m away (the route: there and back is counted inside), from a 24 V board.
    let mut run = Run::plain(
        rules,
        ElectricPotential::new::<volt>(24.0),
        Length::new::<meter>(12.0),
        Demand::Current {
            continuous: ElectricCurrent::new::<ampere>(20.0),
            other: ElectricCurrent::new::<ampere>(0.0),
        },
    );
    run.highest = ElectricPotential::new::<volt>(32.4); // equalising charge in the cold
    run.beginning = ElectricPotential::new::<volt>(22.0); // bank at cut-off, less the drop to the board
    run.drop_before = ElectricPotential::new::<volt>(0.2);
    run.joints = 4.0 * joint_resistance(JointKind::Lug);
    // What a fault draws, at most and at least. Left out, the checks that need it are not made.
    run.greatest_fault = Some(ElectricCurrent::new::<kiloampere>(3.3));
    run.weakest_source = Some(Source {
        emf: ElectricPotential::new::<volt>(22.2),
        resistance: ElectricalResistance::new::<milliohm>(30.0),
    });

    let insulation: Insulation = "PVC 70 degC".parse()?;
    let cables: Vec<_> =
        rules.sizes().iter().map(|&size| Conductor::flexible_copper(size, insulation)).collect();
    let fuses = Offer::standard(
        Family::Gg,
        ElectricPotential::new::<volt>(80.0),
        ElectricCurrent::new::<kiloampere>(25.0),
    );

    let sized = size_run(&run, &cables, &[fuses])?;
    println!("20 A over 12 m at 24 V, {}", rules.set().edition);
    for refused in &sized.rejected {
        match (refused.failed, refused.error) {
            (Some(check), _) => println!("  {} refused: {check}", refused.size),
            (None, Some(error)) => println!("  {} refused: {error}", refused.size),
            (None, None) => println!("  {} refused", refused.size),
        }
    }
    println!("  {} taken", sized.conductor.size);
    if let Some(guard) = sized.guard {
        println!("  {} {}", guard.device.family, readable(guard.device.rating));
    }
    println!("  drop {}, loss {}", readable(sized.judgement.drop), readable(sized.judgement.loss));
    for check in &sized.judgement.checks {
        println!("    {check}");
    }
    Ok(())
}
