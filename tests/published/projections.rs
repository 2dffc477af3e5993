//! Source: PROJ, by `tests/references/projections.py`, and the sweep of the
//! whole registry behind `src/plan/crs/checked.txt`.

use mirrorwell::plan::crs::{Crs, CrsError, utm_zone};
use proptest::prelude::*;

use crate::table::rows;

/// Sum of the roundings of PROJ and of proj4rs: 1e7 m at 2⁻⁵³ is 1e-9 m, and
/// their series are documented to agree within 1e-6 of a unit.
const SAME_UNIT: f64 = 1e-6;
/// Systems off WGS 84 by a rotation that two libraries round differently:
/// for them the limit of the checked list holds.
const SHIFTED: [u32; 3] = [5174, 27700, 28992];
/// What the list lets pass without a word.
const LIST_LIMIT_M: f64 = 0.01;
/// 1e-6 m on the ground, in degrees.
const SAME_DEG: f64 = 1e-11;

fn refusal(code: u32) -> CrsError {
    Crs::from_epsg(code).expect_err("the code is refused")
}

#[test]
fn places_in_twenty_systems_project_forward_and_back_as_in_proj() {
    for row in rows("projections") {
        let crs = match row.number("epsg") as u32 {
            0 => Crs::local(
                row.number("origin_longitude"),
                row.number("origin_latitude"),
            ),
            code => Crs::from_epsg(code),
        }
        .expect("the system is accepted");
        let (longitude, latitude) = (row.number("longitude"), row.number("latitude"));
        let (x, y) = (row.number("x"), row.number("y"));
        let slack = match crs.epsg() {
            Some(code) if SHIFTED.contains(&code) => LIST_LIMIT_M,
            _ => SAME_UNIT,
        };
        let (our_x, our_y) = crs.from_longitude_latitude(longitude, latitude).unwrap();
        assert!(
            (our_x - x).abs() <= slack && (our_y - y).abs() <= slack,
            "{}: {our_x}, {our_y} for {x}, {y}",
            crs.name()
        );
        let (our_longitude, our_latitude) = crs.to_longitude_latitude(x, y).unwrap();
        let slack = SAME_DEG * slack / SAME_UNIT / latitude.to_radians().cos();
        assert!(
            (our_longitude - longitude).abs() <= slack && (our_latitude - latitude).abs() <= slack,
            "{}: {our_longitude}, {our_latitude} for {longitude}, {latitude}",
            crs.name()
        );
    }
}

#[test]
fn state_plane_new_york_counts_in_us_survey_feet() {
    let crs = Crs::from_epsg(2263).unwrap();
    // 1200/3937 m: the US survey foot by its definition of 1893.
    assert!((crs.metres_per_unit() - 1200.0 / 3937.0).abs() < 1e-15);
    assert_eq!(
        crs.name(),
        "NAD83 / New York Long Island (ftUS) (EPSG:2263)"
    );
    assert_eq!(crs.note(), None);
}

/// PROJ uses different shifts in the Czech Republic and in Slovakia.
#[test]
fn krovak_is_refused_with_a_checked_alternative() {
    let refusal = refusal(5514);
    assert!(matches!(
        refusal,
        CrsError::Unchecked {
            alternative: Some(_),
            ..
        }
    ));
    assert!(refusal.to_string().contains("S-JTSK / Krovak East North"));
    assert!(refusal.help().contains("EPSG:"), "{}", refusal.help());
}

#[test]
fn grids_that_need_a_datum_grid_are_refused() {
    // NAD27 rests on grid files wherever the United States are concerned.
    assert!(matches!(refusal(26715), CrsError::Unchecked { .. }));
}

#[test]
fn systems_with_westing_and_southing_are_refused() {
    // EPSG:2048 Hartebeesthoek94 / Lo19.
    assert!(matches!(refusal(2048), CrsError::Unchecked { .. }));
}

#[test]
fn degrees_are_refused_with_the_utm_zone_as_remedy() {
    let refusal = refusal(4326);
    assert!(matches!(refusal, CrsError::Geographic { .. }));
    assert!(refusal.help().contains("326zz"));
}

#[test]
fn numbers_that_are_no_code_are_refused() {
    for code in [0, 1, 99_999, u32::MAX] {
        assert!(matches!(refusal(code), CrsError::Unknown { .. }), "{code}");
    }
}

#[test]
fn swapped_coordinates_are_outside_the_zone() {
    let crs = Crs::from_epsg(32633).unwrap();
    let refusal = crs
        .to_longitude_latitude(5_361_200.0, 412_300.0)
        .unwrap_err();
    assert!(matches!(refusal, CrsError::GridOutside { .. }));
    assert!(refusal.help().contains("x east"));
    assert!(crs.from_longitude_latitude(48.0, 15.0).is_err());
    assert!(matches!(
        crs.to_longitude_latitude(f64::NAN, 0.0),
        Err(CrsError::NotFinite { .. })
    ));
}

#[test]
fn an_old_datum_shift_is_told_of() {
    // EPSG:27221 NZGD49: the registry gives its shift 4 m.
    let note = Crs::from_epsg(27221).unwrap().note().unwrap();
    assert!(note.contains("4 m"), "{note}");
}

#[test]
fn no_local_grid_is_laid_at_a_pole_or_at_no_place() {
    for (longitude, latitude) in [(0.0, 90.0), (f64::NAN, 0.0), (181.0, 0.0), (0.0, -89.5)] {
        assert!(Crs::local(longitude, latitude).is_err());
    }
}

/// The scale of a UTM zone is 0.9996 on its central meridian; a Mercator map
/// is 1/cos(latitude) too large. Source: Snyder (1987), *Map Projections*,
/// USGS Professional Paper 1395, chapters 7 and 8.
#[test]
fn length_error_is_that_of_snyder_1987() {
    let utm = Crs::from_epsg(32633).unwrap();
    let error = utm.length_error(500_000.0, 5_316_308.0).unwrap();
    assert!((error - 0.0004).abs() < 1e-7, "{error}");
    let world = Crs::from_epsg(3857).unwrap();
    let error = world.length_error(0.0, 8_399_737.889_818_361).unwrap();
    // Latitude 60 on the sphere; its ellipsoid differs by up to 0.7 %.
    assert!((error - 1.0).abs() < 0.01, "{error}");
}

/// The same source: a world map at latitude 52.5 draws 1 m as 1.64 m.
#[test]
fn a_world_map_is_refused_for_its_lengths() {
    let world = Crs::from_epsg(3857).unwrap();
    let refusal = world.check_lengths(1_492_229.0, 6_894_723.0).unwrap_err();
    assert!(refusal.to_string().contains("64."), "{refusal}");
    assert!(refusal.help().contains("EPSG:32633"), "{}", refusal.help());
    let utm = Crs::from_epsg(32633).unwrap();
    assert_eq!(utm.check_lengths(412_300.0, 5_361_200.0), Ok(()));
}

/// EPSG 16033: zone 33 spans 12 to 18 degrees east.
#[test]
fn the_utm_zone_of_a_place_is_found() {
    assert_eq!(utm_zone(15.0, 48.0), 32633);
    assert_eq!(utm_zone(-77.0, -12.0), 32718);
    assert_eq!(utm_zone(-180.0, 1.0), 32601);
    assert_eq!(utm_zone(180.0, 1.0), 32601);
}

proptest! {
    #[test]
    fn utm_coordinates_survive_the_round_trip(
        zone in 1u32..=60, east in -3.0f64..3.0, latitude in 0.0f64..83.9,
    ) {
        let crs = Crs::from_epsg(32600 + zone).unwrap();
        let longitude = f64::from(zone) * 6.0 - 183.0 + east;
        let (x, y) = crs.from_longitude_latitude(longitude, latitude).unwrap();
        let (back_longitude, back_latitude) = crs.to_longitude_latitude(x, y).unwrap();
        let (back_x, back_y) = crs.from_longitude_latitude(back_longitude, back_latitude).unwrap();
        prop_assert!((back_x - x).abs() < SAME_UNIT && (back_y - y).abs() < SAME_UNIT);
        prop_assert!((back_latitude - latitude).abs() < SAME_DEG * 10.0);
    }

    #[test]
    fn a_local_grid_is_true_at_its_origin(
        longitude in -180.0f64..180.0, latitude in -89.0f64..89.0,
        x in -30_000.0f64..30_000.0, y in -30_000.0f64..30_000.0,
    ) {
        let crs = Crs::local(longitude, latitude).unwrap();
        prop_assert!(crs.length_error(0.0, 0.0).unwrap() < 1e-6);
        let (east, north) = crs.to_longitude_latitude(x, y).unwrap();
        let (back_x, back_y) = crs.from_longitude_latitude(east, north).unwrap();
        prop_assert!((back_x - x).abs() < SAME_UNIT && (back_y - y).abs() < SAME_UNIT);
    }
}
