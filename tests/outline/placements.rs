//! Where wells and neighbours may stand.

use mirrorwell::site::{Anisotropy, Length, Subject};

use crate::plans::{With, only, only_refusal, refusals, refused, site};

fn beside_ostra(wells: &[(f64, f64)]) -> mirrorwell::site::Site {
    site(wells).river("Ostra", &[(0.0, -50.0), (0.0, 80.0)])
}

#[test]
fn a_well_on_an_edge_or_its_extension_is_refused() {
    let refused = refused(&beside_ostra(&[(50.0, 0.0), (0.0005, 400.0)]));
    assert_eq!(refused.len(), 1);
    assert_eq!(refused[0].subject, Subject::Well(1, None));
    assert_eq!(
        refused[0].to_string(),
        "well PW-2 lies on river Ostra: 0.5 mm from it; move it into the aquifer, off the line"
    );
}

#[test]
fn a_well_whose_rim_crosses_an_edge_is_refused_with_both_lengths() {
    let text = only_refusal(&beside_ostra(&[(0.15, 0.0)]));
    assert_eq!(
        text,
        "the rim of well PW-1 crosses river Ostra: it lies 0.150 m away, within its radius of \
         0.200 m; move it at least 0.200 m away from the line, or correct the radius"
    );
    assert_eq!(only(&beside_ostra(&[(0.21, 0.0)])).wells, [0]);
}

#[test]
fn the_rim_is_measured_in_the_site_also_where_conductivity_differs_with_direction() {
    // Stretched by 2 across the river, 0.15 m would read as 0.30 m.
    let mut plan = beside_ostra(&[(0.15, 0.0)]);
    plan.aquifer.anisotropy = Some(Anisotropy {
        ratio: 16.0,
        azimuth_deg: 0.0,
    });
    assert!(only_refusal(&plan).contains("it lies 0.150 m away"));
}

#[test]
fn a_rim_that_crosses_a_circle_is_measured_on_the_circle() {
    let mut plan = site(&[(100.5, 0.0)]).lake("Round lake", (0.0, 0.0), 100.0);
    plan.wells[0].radius = Length::from_si(0.6);
    assert!(only_refusal(&plan).contains("it lies 0.500 m away, within its radius of 0.600 m"));
}

#[test]
fn a_neighbour_on_the_other_bank_is_refused_by_the_edge_between() {
    let plan = beside_ostra(&[(50.0, 0.0)])
        .barrier("far dyke", &[(-900.0, 0.0), (-900.0, 10.0)])
        .neighbour("Lot 3", (-20.0, 5.0))
        .neighbour("Lot 4", (20.0, 5.0));
    let refused = refused(&plan);
    assert_eq!(refused.len(), 1);
    assert_eq!(refused[0].subject, Subject::Neighbour(0, None));
    assert!(
        refused[0].what.contains(
            "neighbour Lot 3 lies on the other bank of river Ostra, where the plan has no well"
        ),
        "{}",
        refused[0]
    );
    assert_eq!(refused[0].related[0].0, Subject::Edge(0, None));
}

#[test]
fn a_neighbour_on_an_edge_is_refused() {
    let text = only_refusal(&beside_ostra(&[(50.0, 0.0)]).neighbour("spring", (0.0, 900.0)));
    assert!(
        text.starts_with("neighbour spring lies on river Ostra: 0.0 mm from it"),
        "{text}"
    );
}

#[test]
fn a_property_belongs_to_the_aquifer_that_holds_part_of_it() {
    // Half of it lies beyond the river, where nothing is pumped.
    let corners = [(-10.0, 0.0), (10.0, 0.0), (10.0, 10.0), (-10.0, 10.0)];
    let plan = beside_ostra(&[(50.0, 0.0)]).property("Lot 5", &corners);
    assert_eq!(only(&plan).neighbours, [0]);
    let along = [(0.0, 0.0), (10.0, 0.0), (10.0, 10.0), (0.0, 10.0)];
    let plan = beside_ostra(&[(50.0, 0.0), (-50.0, 0.0)]).property("Lot 5", &along);
    let outlines = mirrorwell::outline::find(&plan).expect("a bank may bound a property");
    assert_eq!(outlines[0].neighbours, [0]);
    assert!(outlines[1].neighbours.is_empty());
}

#[test]
fn a_property_with_no_corner_in_the_aquifer_still_belongs_where_its_sides_pass() {
    // A wedge of the aquifer points into the property from the right.
    let plan = site(&[(100.0, 0.0)])
        .river("north", &[(0.0, 0.0), (300.0, 100.0)])
        .river("south", &[(0.0, 0.0), (300.0, -100.0)])
        .property(
            "Lot 6",
            &[(-50.0, -50.0), (30.0, -50.0), (30.0, 50.0), (-50.0, 50.0)],
        );
    assert_eq!(only(&plan).neighbours, [0]);
}

#[test]
fn a_property_in_two_aquifers_or_in_none_is_refused() {
    let corners = [(-10.0, 0.0), (10.0, 0.0), (10.0, 10.0), (-10.0, 10.0)];
    let plan = beside_ostra(&[(50.0, 0.0), (-50.0, 0.0)]).property("Lot 5", &corners);
    assert_eq!(
        only_refusal(&plan),
        "neighbour Lot 5 lies in several aquifers: that of well PW-1 and that of well PW-2, with \
         river Ostra between them; split the area into one neighbour for each side"
    );
    let beyond = [(-20.0, 0.0), (-10.0, 0.0), (-10.0, 10.0)];
    let plan = beside_ostra(&[(50.0, 0.0)]).property("Lot 6", &beyond);
    assert!(only_refusal(&plan).contains("neighbour Lot 6 lies on the other bank of river Ostra"));
}

#[test]
fn all_misplaced_wells_and_neighbours_are_named_at_once() {
    let plan = beside_ostra(&[(50.0, 0.0), (0.0, 5.0), (0.1, 9.0)])
        .neighbour("Lot 3", (-20.0, 5.0))
        .neighbour("Lot 4", (-30.0, 5.0));
    assert_eq!(refusals(&plan).len(), 4);
}
