//! The local frame: near the wells, exact, and back.

use approx::assert_relative_eq;
use mirrorwell::site::{EdgeShape, Point};

use crate::support::{SOUND, read, spoilt};

#[test]
fn the_origin_is_a_whole_metre_near_the_wells() {
    let plan = read(SOUND).unwrap_or_else(|faults| panic!("{faults}"));
    assert_eq!(plan.origin, Point::new(412_450.0, 5_361_020.0));
    assert_eq!(plan.site.wells[0].at, Point::origin());
    let EdgeShape::Line(line) = &plan.site.edges[0].shape else {
        panic!("a line");
    };
    assert_eq!(line[0], Point::new(-450.0, -1020.0));
    assert_eq!(plan.to_plan_xy(line[0]), (412_000.0, 5_360_000.0));
}

/// EPSG:2263 is in US survey feet, 1200/3937 m (EPSG registry, from memory).
#[test]
fn coordinates_in_feet_are_read_in_feet() {
    let text = spoilt("EPSG:32633", "EPSG:2263")
        .replace(
            "[[412000.0, 5360000.0], [413500.0, 5362600.0]]",
            "[[980000, 190000], [985000, 200000]]",
        )
        .replace("[412450.0, 5361020.0]", "[983000, 194000]");
    let plan = read(&text).unwrap_or_else(|faults| panic!("{faults}"));
    let EdgeShape::Line(line) = &plan.site.edges[0].shape else {
        panic!("a line");
    };
    let length = (line[1] - line[0]).norm();
    assert_relative_eq!(
        length,
        125e6_f64.sqrt() * 1200.0 / 3937.0,
        max_relative = 1e-10
    );
    let (x, y) = plan.to_plan_xy(plan.site.wells[0].at);
    assert_relative_eq!(x, 983_000.0, epsilon = 1e-8);
    assert_relative_eq!(y, 194_000.0, epsilon = 1e-8);
}

#[test]
fn a_local_grid_begins_at_its_longitude_and_latitude() {
    let text = spoilt("\"EPSG:32633\"", "{ origin = [15.1, 48.4] }")
        .replace(
            "[[412000.0, 5360000.0], [413500.0, 5362600.0]]",
            "[[-450, -1020], [1050, 1580]]",
        )
        .replace("[412450.0, 5361020.0]", "[0, 0]");
    let plan = read(&text).unwrap_or_else(|faults| panic!("{faults}"));
    let (longitude, latitude) = plan
        .to_longitude_latitude(plan.site.wells[0].at)
        .expect("the origin is on Earth");
    assert_relative_eq!(longitude, 15.1, epsilon = 1e-9);
    assert_relative_eq!(latitude, 48.4, epsilon = 1e-9);
}

proptest::proptest! {
    #[test]
    fn places_go_to_the_plan_and_back(x in -1e4..1e4, y in -1e4..1e4) {
        let plan = read(SOUND).unwrap();
        let (easting, northing) = plan.to_plan_xy(Point::new(x, y));
        let back = plan.to_site(easting, northing);
        // One ulp of a northing of 5e6 m.
        proptest::prop_assert!((back - Point::new(x, y)).norm() < 2e-9);
    }
}
