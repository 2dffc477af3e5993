//! A plan says the same as text: at the size of real coordinates, and in feet
//! and gallons a minute as in metres and cubic metres a day.
//!
//! Grids: EPSG:32633 in metres, and EPSG:2263 in US survey feet, 1200/3937 m
//! by definition; heights of a us plan are in international feet, 0.3048 m; a
//! US gallon is 231 cubic inches (NIST SP 811, appendix B).

use std::fmt::Write as _;
use std::path::Path;

use mirrorwell::findings::Solution;
use mirrorwell::outline::Kind::FixedHead;
use mirrorwell::plan::Plan;
use mirrorwell::site::Point;
use num_complex::Complex64;
use proptest::prelude::*;

use crate::drawings::{Course, Drawing, Setting, case_of, drawing};

/// The units of a plan.
struct Written {
    heading: &'static str,
    /// Metres in a unit of its grid, and a place of the site's zero.
    grid_m: f64,
    zero: [f64; 2],
    foot_m: f64,
    gpm_m3_d: f64,
}

const METRIC: Written = Written {
    heading: "crs = \"EPSG:32633\"\nunits = \"metric\"\n",
    grid_m: 1.0,
    zero: [412_000.0, 5_360_000.0],
    foot_m: 1.0,
    gpm_m3_d: 1.0,
};

const US: Written = Written {
    heading: "crs = \"EPSG:2263\"\nunits = \"us\"\n",
    grid_m: 1200.0 / 3937.0,
    zero: [1_100_000.0, 220_000.0],
    foot_m: 0.3048,
    gpm_m3_d: 231.0 * 0.0254 * 0.0254 * 0.0254 * 1440.0,
};

impl Written {
    fn point(&self, point: Point) -> String {
        let [x, y] = self.xy(point);
        format!("[{x:?}, {y:?}]")
    }

    fn xy(&self, point: Point) -> [f64; 2] {
        [
            point.x / self.grid_m + self.zero[0],
            point.y / self.grid_m + self.zero[1],
        ]
    }

    fn plan(&self, drawing: &Drawing, setting: &Setting) -> String {
        let site = drawing.site(setting);
        let length = |metres: f64| metres / self.foot_m;
        let mut text = self.heading.to_owned();
        let transmissivity = drawing.transmissivity_m2_d / (self.foot_m * self.foot_m);
        let _ = writeln!(text, "[aquifer]\ntransmissivity = {transmissivity:?}");
        if let Some(radius) = site.aquifer.influence_radius {
            let _ = writeln!(text, "influence_radius = {:?}", length(radius.si()));
        }
        if let Some(anisotropy) = site.aquifer.anisotropy {
            let (ratio, azimuth) = (anisotropy.ratio, anisotropy.azimuth_deg.rem_euclid(180.0));
            let _ = writeln!(
                text,
                "anisotropy = {{ ratio = {ratio:?}, azimuth = {azimuth:?} }}"
            );
        }
        if let Some(ambient) = &site.ambient {
            let _ = writeln!(text, "[ambient]\ngradient = {:?}", ambient.gradient);
            if let (Some(head), Some(at)) = (ambient.head, ambient.at) {
                let _ = writeln!(
                    text,
                    "head = {:?}\nat = {}",
                    length(head.si()),
                    self.point(at)
                );
            }
            if let Some(toward) = ambient.toward_deg {
                let _ = writeln!(text, "toward = {:?}", toward.rem_euclid(360.0));
            }
        }
        for (number, edge) in drawing.edges.iter().enumerate() {
            let key = if edge.kind == FixedHead {
                "river"
            } else {
                "barrier"
            };
            let _ = writeln!(text, "[[{key}]]\nname = \"E{number}\"");
            match edge.course {
                Course::Straight { drawn, .. } => {
                    let [from, to] = drawn.map(|z| self.point(setting.place(z)));
                    let _ = writeln!(text, "line = [{from}, {to}]");
                }
                Course::Round(radius) => {
                    // A radius is a distance of the grid, in its unit.
                    let centre = self.point(setting.place(Complex64::ZERO));
                    let radius = radius * setting.scale / self.grid_m;
                    let _ = writeln!(
                        text,
                        "circle = {{ centre = {centre}, radius = {radius:?} }}"
                    );
                }
            }
            if edge.kind == FixedHead {
                let [first, last] = edge.stages_m.map(length);
                let _ = if first == last {
                    writeln!(text, "stage = {first:?}")
                } else {
                    writeln!(text, "stage = [{first:?}, {last:?}]")
                };
            }
        }
        for well in &site.wells {
            let (at, radius) = (self.point(well.at), length(well.radius.si()));
            let rate = well.pumping.si() / self.gpm_m3_d;
            let key = if rate < 0.0 { "injection" } else { "pumping" };
            let rate = rate.abs();
            let _ = writeln!(
                text,
                "[[well]]\nname = \"{}\"\nat = {at}\n{key} = {rate:?}\nradius = {radius:?}",
                well.name
            );
        }
        text
    }

    /// Heads at the drawing's places, from the text.
    fn heads_m(&self, drawing: &Drawing, setting: &Setting) -> Vec<f64> {
        let text = self.plan(drawing, setting);
        let plan = Plan::from_text("law.toml", &text, Path::new("."))
            .unwrap_or_else(|faults| panic!("{faults}\n{text}"));
        let solution = Solution::of(plan.site.clone())
            .unwrap_or_else(|refusals| panic!("{}\n{text}", plan.diagnose(&refusals)));
        let places = drawing.places_in(setting).into_iter().map(|point| {
            let [x, y] = self.xy(point);
            plan.to_site(x, y)
        });
        solution.heads_m(&places.collect::<Vec<_>>())
    }
}

proptest! {
    #![proptest_config(crate::cases(60))]

    /// Coordinates of 5e6 m are written to 1e-9 m; where the head slopes most,
    /// at a rim of 0.05 m, Q/(2πT r_w) is some 15, so a head moves 1e-8 m.
    #[test]
    fn a_plan_says_the_same_as_text_in_metres_and_in_feet(
        (drawing, setting) in case_of(drawing()),
    ) {
        let direct_m = drawing.solve(&setting).heads_m(&drawing.places_in(&setting));
        let metric_m = METRIC.heads_m(&drawing, &setting);
        let us_m = US.heads_m(&drawing, &setting);
        for ((direct_m, metric_m), us_m) in direct_m.iter().zip(metric_m).zip(us_m) {
            prop_assert!((direct_m - metric_m).abs() <= 1e-7, "{direct_m}, metric {metric_m}");
            prop_assert!((direct_m - us_m).abs() <= 1e-7, "{direct_m}, us {us_m}");
        }
    }
}
