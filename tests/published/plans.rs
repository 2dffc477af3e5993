//! Plans from text to heads, the way a user's plan goes.

use std::path::Path;

use mirrorwell::field::WellField;
use mirrorwell::outline;
use mirrorwell::plan::Plan;
use mirrorwell::site::Point;

/// A plan with its one aquifer solved.
pub struct Solved {
    plan: Plan,
    pub field: WellField,
}

impl Solved {
    /// Reads and solves a plan with one aquifer.
    pub fn of(text: &str) -> Self {
        let plan = Plan::from_text("test.toml", text, Path::new("."))
            .unwrap_or_else(|faults| panic!("{faults}"));
        let outlines = outline::find(&plan.site).expect("the outline is found");
        let [outline] = <[_; 1]>::try_from(outlines).expect("one aquifer");
        let field = WellField::solve(&plan.site, outline).expect("a steady state exists");
        Self { plan, field }
    }

    /// A place in the plan's coordinates as one of the site.
    pub fn at(&self, x: f64, y: f64) -> Point {
        self.plan.to_site(x, y)
    }

    /// Drawdown at a place in the plan's coordinates, metres.
    pub fn drawdown_m(&self, x: f64, y: f64) -> f64 {
        self.field.drawdowns_m(&[self.at(x, y)])[0]
    }
}
