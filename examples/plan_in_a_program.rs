//! Uses the library from a program of one's own: reads a plan, and asks what its
//! neighbours would suffer if the first well pumped twice as much.
//!
//! ```text
//! cargo run --release --example plan_in_a_program -- examples/demo.toml
//! ```

use std::error::Error;
use std::path::Path;

use mirrorwell::findings::{Solution, WellsAndNeighbours};
use mirrorwell::plan::Plan;
use mirrorwell::site::Rate;

fn main() -> Result<(), Box<dyn Error>> {
    let path = std::env::args()
        .nth(1)
        .unwrap_or("examples/demo.toml".into());
    let plan = Plan::read(Path::new(&path))?;
    let solve = |site| Solution::of(site).map_err(|refusals| plan.diagnose(&refusals));

    let today = WellsAndNeighbours::of(&solve(plan.site.clone())?);
    let mut site = plan.site.clone();
    if let Some(well) = site.wells.first_mut() {
        well.pumping = Rate::from_si(2.0 * well.pumping.si());
        println!("with {} at twice its rate:", well.name);
    }
    let then = WellsAndNeighbours::of(&solve(site)?);

    let neighbours = plan.site.neighbours.iter();
    for (neighbour, (before, after)) in
        neighbours.zip(today.neighbours.iter().zip(&then.neighbours))
    {
        if let (Some(before), Some(after)) = (&before.worst, &after.worst) {
            println!(
                "  {}: drawn down {:.2} m instead of {:.2} m",
                neighbour.name, after.drawdown_m, before.drawdown_m
            );
        }
    }
    Ok(())
}
