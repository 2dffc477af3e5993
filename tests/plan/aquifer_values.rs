//! What a plan's numbers become, and what is said of the numbers it leaves out.

use approx::assert_relative_eq;
use mirrorwell::plan::{Plan, materials};
use mirrorwell::site::Stage;

use crate::support::{SOUND, read, spoilt};

fn aquifer(lines: &str) -> Plan {
    match read(&spoilt("transmissivity = 800.0", lines)) {
        Ok(plan) => plan,
        Err(faults) => panic!("{faults}"),
    }
}

/// Bouwer (1978) gives sand and gravel mixes 5 to 100 m/d; the typical value
/// is the geometric mean, √500 m/d.
#[test]
fn a_material_gives_its_typical_conductivity_and_says_so() {
    let plan = aquifer("material = \"alluvial-gravel\"\nthickness = 20.0");
    let expected = 500.0_f64.sqrt() * 20.0;
    assert_relative_eq!(
        plan.site.aquifer.transmissivity.si(),
        expected,
        max_relative = 1e-14
    );
    assert_eq!(
        plan.notes,
        [
            "the conductivity, 22.4 m/d, is the typical value of the material alluvial-gravel, whose \
             published range is 5 to 100 m/d (Bouwer (1978), Groundwater Hydrology: sand and gravel \
             mixes); a pumping test decides"
        ]
    );
    assert_eq!(
        plan.material.map(|material| material.name.as_str()),
        Some("Alluvial sand and gravel")
    );
}

#[test]
fn a_conductivity_far_from_its_material_is_noted() {
    let plan = aquifer("material = \"fine-sand\"\nconductivity = 50.0\nthickness = 20.0");
    assert_eq!(plan.site.aquifer.transmissivity.si(), 1000.0);
    assert_eq!(
        plan.notes,
        [
            "the conductivity, 50 m/d, lies outside the published range of the material fine-sand, \
             1 to 5 m/d (Bouwer (1978), Groundwater Hydrology: fine sand)"
        ]
    );
}

#[test]
fn two_ways_that_agree_to_a_thousandth_are_accepted() {
    let plan = aquifer("transmissivity = 836.5\nconductivity = 38.0\nthickness = 22.0");
    assert_eq!(plan.site.aquifer.transmissivity.si(), 836.5);
    assert!(plan.notes.is_empty());
}

#[test]
fn a_thickness_left_out_is_transmissivity_over_conductivity_and_said() {
    let plan = aquifer("transmissivity = 800.0\nconductivity = 40.0");
    assert_eq!(
        plan.site.aquifer.thickness.map(|length| length.si()),
        Some(20.0)
    );
    assert_eq!(
        plan.notes,
        ["the thickness, 20 m, is transmissivity over conductivity"]
    );
}

/// Freeze & Cherry (1979), table 2.2 (from memory), in m/s; Domenico &
/// Schwartz (1990), table 3.2 (from memory), in m/s.
#[test]
fn ranges_published_in_metres_a_second_are_read_as_such() {
    let range = |key: &str| {
        let found = materials().iter().find(|material| material.key == key);
        found.unwrap_or_else(|| panic!("{key}")).conductivity
    };
    assert_relative_eq!(
        range("silty-sand").least.si(),
        1e-7 * 86_400.0,
        max_relative = 1e-14
    );
    assert_relative_eq!(
        range("karst-limestone").most.si(),
        2e-2 * 86_400.0,
        max_relative = 1e-14
    );
}

/// All factors from the foot, the US gallon and the day; see `unit_tables`.
#[test]
fn bare_numbers_of_a_us_plan_are_feet_and_gallons_a_minute() {
    let text = r#"crs = "EPSG:32633"
units = "us"

[aquifer]
conductivity = 100.0
thickness = 70.0
roof = 130.0
recharge = 2.0

[[river]]
name = "Ostra"
line = [[412000.0, 5360000.0], [413500.0, 5362600.0]]
stage = [200.0, "61.4 m"]

[[well]]
name = "PW-1"
at = [412450.0, 5361020.0]
pumping = 400.0
radius = 0.5
well_loss = 1e-5

[[well]]
name = "IW-1"
at = [412550.0, 5361020.0]
injection = "10 L/s"
radius = "6 in"
"#;
    let plan = read(text).unwrap_or_else(|faults| panic!("{faults}"));
    let aquifer = &plan.site.aquifer;
    assert_relative_eq!(
        aquifer.transmissivity.si(),
        7000.0 * 0.3048 * 0.3048,
        max_relative = 1e-14
    );
    assert_relative_eq!(
        aquifer.recharge.si(),
        2.0 * 0.0254 / 365.25,
        max_relative = 1e-14
    );
    let [pumping, injecting] = plan.site.wells.as_slice() else {
        panic!("two wells");
    };
    assert_relative_eq!(
        pumping.pumping.si(),
        400.0 * 5.450_992_968_96,
        max_relative = 1e-12
    );
    let loss = pumping.well_loss.si() * pumping.pumping.si().powi(2);
    assert_relative_eq!(loss, 1.6 * 0.3048, max_relative = 1e-12);
    assert_relative_eq!(injecting.pumping.si(), -864.0, max_relative = 1e-14);
    assert_relative_eq!(injecting.radius.si(), 0.1524, max_relative = 1e-14);
    assert_relative_eq!(
        plan.site.head_tolerance.si(),
        0.0001 * 0.3048,
        max_relative = 1e-14
    );
    let mirrorwell::site::EdgeKind::River {
        stage: Stage::AtVertices(levels),
        ..
    } = &plan.site.edges[0].kind
    else {
        panic!("two stages");
    };
    assert_relative_eq!(levels[0].si(), 60.96, max_relative = 1e-14);
    assert_eq!(levels[1].si(), 61.4);
}

#[test]
fn what_a_plan_leaves_out_has_the_documented_default() {
    let plan = read(SOUND).unwrap_or_else(|faults| panic!("{faults}"));
    assert_eq!(plan.title, "plan");
    assert_eq!(plan.site.interference_share, 0.20);
    assert_eq!(plan.site.head_tolerance.si(), 0.0001);
    assert_eq!(plan.site.wells[0].well_loss.si(), 0.0);
    assert!(plan.site.map.extent.is_none() && plan.site.ambient.is_none());
    assert!(plan.material.is_none());
}
