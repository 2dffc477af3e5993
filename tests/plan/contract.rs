//! The example plan of the README is read as it says.

use mirrorwell::plan::UnitSystem;
use mirrorwell::site::{EdgeKind, EdgeShape, Place, Stage, Subject};

use crate::support::read;

const CONTRACT: &str = include_str!("contract.toml");

#[test]
fn the_full_example_plan_is_read_key_by_key() {
    let plan = match read(CONTRACT) {
        Ok(plan) => plan,
        Err(faults) => panic!("{faults}"),
    };
    assert_eq!(plan.title, "Harrow Bend well field");
    assert_eq!(plan.crs.epsg(), Some(32633));
    assert_eq!(plan.units, UnitSystem::Metric);
    assert_eq!(
        plan.material.map(|material| material.key.as_str()),
        Some("alluvial-gravel")
    );

    let site = &plan.site;
    assert_eq!(site.aquifer.transmissivity.si(), 836.0);
    assert_eq!(site.aquifer.thickness.map(|length| length.si()), Some(22.0));
    assert_eq!(site.aquifer.roof.map(|level| level.si()), Some(41.0));
    assert_eq!(
        site.aquifer.influence_radius.map(|length| length.si()),
        Some(1500.0)
    );
    let anisotropy = site.aquifer.anisotropy.unwrap();
    assert_eq!((anisotropy.ratio, anisotropy.azimuth_deg), (3.0, 40.0));

    let ambient = site.ambient.as_ref().unwrap();
    assert_eq!(ambient.head.map(|level| level.si()), Some(62.0));
    assert_eq!(
        plan.to_plan_xy(ambient.at.unwrap()),
        (412_300.0, 5_361_200.0)
    );
    assert_eq!(
        (ambient.gradient, ambient.toward_deg),
        (0.0012, Some(205.0))
    );

    let names: Vec<_> = site.edges.iter().map(|edge| edge.name.as_str()).collect();
    assert_eq!(names, ["Ostra", "Round lake", "granite edge"]);
    let EdgeKind::River {
        stage,
        bank_resistance,
    } = &site.edges[0].kind
    else {
        panic!("Ostra is a river");
    };
    assert!(matches!(stage, Stage::Constant(level) if level.si() == 61.4));
    assert_eq!(bank_resistance.map(|time| time.si()), Some(2.0));
    assert!(
        matches!(&site.edges[1].shape, EdgeShape::Circle { radius, .. } if radius.si() == 350.0)
    );
    assert!(matches!(site.edges[2].kind, EdgeKind::Barrier));

    let well = &site.wells[0];
    assert_eq!(well.pumping.si(), 2160.0);
    assert_eq!(plan.to_plan_xy(well.at), (412_450.0, 5_361_020.0));
    assert_eq!(plan.to_site(412_450.0, 5_361_020.0), well.at);
    assert_eq!(well.lowest_level.map(|level| level.si()), Some(46.0));
    assert_eq!(well.ground.map(|level| level.si()), Some(66.0));
    assert!(matches!(site.neighbours[0].place, Place::At(_)));
    assert_eq!(site.interference_share, 0.20);
    assert_eq!(site.head_tolerance.si(), 0.0001);
    assert_eq!(site.map.spacing.map(|length| length.si()), Some(10.0));
    let extent = site.map.extent.unwrap();
    assert_eq!(plan.to_plan_xy(extent.min), (411_000.0, 5_359_000.0));

    let place = plan.locate(&Subject::Edge(2, Some("line"))).to_string();
    assert_eq!(place, "plan.toml:34:8");
    let place = plan.locate(&Subject::Well(0, None)).to_string();
    assert_eq!(place, "plan.toml:36:1");
}
