//! Laws that hold for every place, direction and mirror image of a shape.

use std::f64::consts::{FRAC_PI_2, PI, TAU};

use geo::Area;
use mirrorwell::outline::{Axis, Kind, Outline, Shape};
use mirrorwell::site::{Anisotropy, EdgeShape, Extent, Point, Site};
use num_complex::Complex64;
use proptest::prelude::*;

use crate::plans::{With, only, site};

const ZERO: f64 = 0.0;

/// A move of the plane: mirror, turn, shift.
#[derive(Clone, Copy, Debug)]
struct Motion {
    mirrored: bool,
    turn: f64,
    shift: (f64, f64),
}

impl Motion {
    fn of(&self, at: (f64, f64)) -> (f64, f64) {
        let z = Complex64::new(at.0, if self.mirrored { -at.1 } else { at.1 });
        let z = z * Complex64::cis(self.turn);
        (z.re + self.shift.0, z.im + self.shift.1)
    }

    fn point(&self, at: (f64, f64)) -> Point {
        let at = self.of(at);
        Point::new(at.0, at.1)
    }

    fn line(&self, places: &[(f64, f64)]) -> Vec<(f64, f64)> {
        places.iter().map(|at| self.of(*at)).collect()
    }
}

fn motion() -> impl Strategy<Value = Motion> {
    let shift = (-9e4..9e4, -9e4..9e4);
    (any::<bool>(), 0.0..TAU, shift).prop_map(|(mirrored, turn, shift)| Motion {
        mirrored,
        turn,
        shift,
    })
}

fn kind() -> impl Strategy<Value = Kind> {
    prop_oneof![Just(Kind::FixedHead), Just(Kind::NoFlow)]
}

/// Adds a line of a kind.
fn draw(plan: Site, motion: &Motion, kind: Kind, line: &[(f64, f64)]) -> Site {
    let name = format!("E{}", plan.edges.len());
    let line = motion.line(line);
    match kind {
        Kind::FixedHead => plan.river(&name, &line),
        Kind::NoFlow => plan.barrier(&name, &line),
    }
}

/// What `holds` must say of a place in the canonical frame, by the definition
/// of each shape.
fn inside(shape: &Shape, z: Complex64) -> bool {
    let between = |axis: Axis, value: f64| match axis {
        Axis::Open => true,
        Axis::OneEdge(_) => value > 0.0,
        Axis::TwoEdges { width_m, .. } => value > 0.0 && value < width_m,
    };
    match *shape {
        Shape::Axes { x, y } => between(x, z.re) && between(y, z.im),
        Shape::Wedge { angle_rad, .. } => z.arg().rem_euclid(TAU) < angle_rad,
        Shape::Disk { radius_m } => z.norm() < radius_m,
        Shape::DiskExterior { radius_m } => z.norm() > radius_m,
        Shape::CloggedHalfPlane { .. } => z.re > 0.0,
        Shape::General => panic!("a named shape expected"),
    }
}

/// The widths of an axis-parallel outline, and its kinds in canonical order.
fn axes(outline: &Outline) -> (Vec<f64>, Vec<Kind>) {
    let Shape::Axes { x, y } = outline.shape else {
        panic!("{:?}", outline.shape);
    };
    let widths = [x, y].into_iter().filter_map(|axis| match axis {
        Axis::TwoEdges { width_m, .. } => Some(width_m),
        _ => None,
    });
    (widths.collect(), outline.shape.side_kinds())
}

fn close(value: f64, expected: f64) -> bool {
    (value - expected).abs() <= 1e-9 * expected.abs()
}

/// Checks what holds for every outline: its well inside, places tested by the
/// canonical inequality agree with `holds` and with the edges drawn, distances
/// agree, pieces join without gaps.
fn check(outline: &Outline, plan: &Site, motion: &Motion, places: &[(f64, f64)]) {
    assert!(outline.holds(plan.wells[0].at));
    for at in places {
        let point = motion.point(*at);
        let distance = outline.distance_to_edge_m(point);
        let z = outline.frame.to_canonical(point);
        assert!((outline.frame.to_site(z) - point).norm() < 1e-9 * (1.0 + z.norm()));
        if distance > 1e-3 {
            assert_eq!(outline.holds(point), inside(&outline.shape, z), "{at:?}");
        }
    }
    for pieces in &outline.sides {
        assert!(!pieces.is_empty());
        for (piece, next) in pieces.iter().zip(pieces.iter().skip(1)) {
            assert_eq!(piece.along.end, next.along.start);
        }
        assert!(
            pieces
                .iter()
                .all(|piece| piece.along.start < piece.along.end)
        );
    }
}

/// Share of a 4 km square around a place that the aquifer fills.
fn clipped_area(outline: &Outline, centre: Point) -> f64 {
    let reach = mirrorwell::site::Vector::new(2000.0, 2000.0);
    let extent = Extent {
        min: centre - reach,
        max: centre + reach,
    };
    outline.clip(extent).unsigned_area()
}

/// Whether a drawn line passes through the interior of an outline: whether any
/// of 200 places along it lies inside, more than 2 mm from the edge.
fn crosses_a_drawn_line(outline: &Outline, plan: &Site) -> bool {
    let lines = plan.edges.iter().filter_map(|edge| match &edge.shape {
        EdgeShape::Line(points) => Some(points),
        EdgeShape::Circle { .. } => None,
    });
    let mut segments = lines.flat_map(|points| points.iter().zip(points.iter().skip(1)));
    segments.any(|(from, to)| {
        (0..=200).any(|step| {
            let point = from + (to - from) * (f64::from(step) / 200.0);
            outline.holds(point) && outline.distance_to_edge_m(point) > 2e-3
        })
    })
}

fn place() -> impl Strategy<Value = (f64, f64)> {
    (-1500.0..1500.0, -1500.0..1500.0)
}

fn places() -> impl Strategy<Value = Vec<(f64, f64)>> {
    proptest::collection::vec(place(), 20)
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(128))]

    #[test]
    fn a_moved_half_plane_is_a_half_plane_at_the_same_distance(
        motion in motion(), kind in kind(), distance in 1.0..2000.0, places in places(),
    ) {
        let plan = draw(site(&[motion.of((distance, 30.0))]), &motion, kind, &[(ZERO, -40.0), (ZERO, 500.0)]);
        let outline = only(&plan);
        check(&outline, &plan, &motion, &places);
        prop_assert_eq!(outline.shape.name(), "half-plane");
        prop_assert_eq!(outline.shape.side_kinds(), vec![kind]);
        let z = outline.frame.to_canonical(plan.wells[0].at);
        prop_assert!((z.re - distance).abs() <= 1e-9 * 1e3);
        // Half of every square whose centre lies on the edge.
        let area = clipped_area(&outline, motion.point((0.0, 0.0)));
        prop_assert!(close(area, 8e6));
    }

    #[test]
    fn a_moved_strip_is_a_strip_of_the_same_width_and_kinds(
        motion in motion(), kinds in (kind(), kind()), width in 10.0..3000.0, places in places(),
    ) {
        let plan = site(&[motion.of((0.3 * width, 30.0))]);
        let plan = draw(plan, &motion, kinds.0, &[(ZERO, -400.0), (ZERO, 500.0)]);
        let plan = draw(plan, &motion, kinds.1, &[(width, 90.0), (width, -700.0)]);
        let outline = only(&plan);
        check(&outline, &plan, &motion, &places);
        let (widths, found) = axes(&outline);
        prop_assert_eq!(outline.shape.name(), "strip");
        prop_assert!(close(widths[0], width), "{} for {}", widths[0], width);
        // The edge named first is x = 0.
        prop_assert_eq!(found, vec![kinds.0, kinds.1]);
    }

    #[test]
    fn an_anisotropic_strip_is_stretched_and_still_lies_where_it_is_drawn(
        motion in motion(), width in 10.0_f64..3000.0, ratio in 1.0_f64..30.0,
        azimuth in 0.0_f64..360.0, places in places(),
    ) {
        let plan = site(&[motion.of((0.3 * width, 30.0))]);
        let plan = draw(plan, &motion, Kind::FixedHead, &[(ZERO, -400.0), (ZERO, 500.0)]);
        let mut plan = draw(plan, &motion, Kind::NoFlow, &[(width, 90.0), (width, -700.0)]);
        plan.aquifer.anisotropy = Some(Anisotropy { ratio, azimuth_deg: azimuth });
        let outline = only(&plan);
        check(&outline, &plan, &motion, &places);
        // The stretch S = r^(-1/4) along u, r^(1/4) across it, makes the normal
        // n of a line S⁻¹n, and the width w/abs(S⁻¹n): coordinate geometry.
        let angle = (90.0 - azimuth).to_radians() - motion.turn;
        let quarter = ratio.powf(0.25);
        let stretched = (angle.cos() * quarter).hypot(angle.sin() / quarter);
        let (widths, _) = axes(&outline);
        prop_assert!(close(widths[0], width / stretched), "{} for {}", widths[0], width / stretched);
        for at in places {
            let point = motion.point(at);
            prop_assert_eq!(outline.holds(point), at.0 >= 0.0 && at.0 <= width);
            let distance = at.0.abs().min((at.0 - width).abs());
            prop_assert!((outline.distance_to_edge_m(point) - distance).abs() < 1e-8);
        }
    }

    #[test]
    fn a_moved_quarter_plane_keeps_its_kinds_in_place(
        motion in motion(), kinds in (kind(), kind()), gap in 0.0..300.0, places in places(),
    ) {
        let plan = site(&[motion.of((250.0, 130.0))]);
        let plan = draw(plan, &motion, kinds.0, &[(ZERO, gap), (ZERO, 900.0)]);
        let plan = draw(plan, &motion, kinds.1, &[(800.0, ZERO), (gap, ZERO)]);
        let outline = only(&plan);
        check(&outline, &plan, &motion, &places);
        let (_, found) = axes(&outline);
        prop_assert_eq!(outline.shape.name(), "quarter-plane");
        // A mirror image exchanges the axes.
        let (expected, x, y) = if motion.mirrored {
            (vec![kinds.1, kinds.0], 130.0, 250.0)
        } else {
            (vec![kinds.0, kinds.1], 250.0, 130.0)
        };
        prop_assert_eq!(found, expected);
        let z = outline.frame.to_canonical(plan.wells[0].at);
        prop_assert!((z - Complex64::new(x, y)).norm() < 1e-7);
        let area = clipped_area(&outline, motion.point((0.0, 0.0)));
        prop_assert!(close(area, 4e6));
    }

    #[test]
    fn a_moved_half_strip_keeps_its_width_and_kinds(
        motion in motion(), kinds in (kind(), kind(), kind()), width in 10.0..3000.0, places in places(),
    ) {
        let plan = site(&[motion.of((0.3 * width, 30.0))]);
        let plan = draw(plan, &motion, kinds.0, &[(ZERO, ZERO), (ZERO, 800.0)]);
        let plan = draw(plan, &motion, kinds.1, &[(width, ZERO), (ZERO, ZERO)]);
        let plan = draw(plan, &motion, kinds.2, &[(width, ZERO), (width, 500.0)]);
        let outline = only(&plan);
        check(&outline, &plan, &motion, &places);
        let (widths, found) = axes(&outline);
        prop_assert_eq!(outline.shape.name(), "half-strip");
        prop_assert!(close(widths[0], width));
        let expected = if motion.mirrored {
            vec![kinds.2, kinds.0, kinds.1]
        } else {
            vec![kinds.0, kinds.2, kinds.1]
        };
        prop_assert_eq!(found, expected);
    }

    #[test]
    fn a_moved_box_keeps_its_widths_with_the_shorter_first(
        motion in motion(), kinds in (kind(), kind(), kind(), kind()),
        width in 100.0..1000.0, height in 100.0..1000.0, places in places(),
    ) {
        let corners = [(0.0, 0.0), (width, 0.0), (width, height), (0.0, height)];
        let mut plan = site(&[motion.of((0.3 * width, 0.4 * height))]);
        let each = [kinds.0, kinds.1, kinds.2, kinds.3];
        for ((from, to), kind) in corners.iter().zip(corners.iter().cycle().skip(1)).zip(each) {
            plan = draw(plan, &motion, kind, &[*from, *to]);
        }
        let outline = only(&plan);
        check(&outline, &plan, &motion, &places);
        let (widths, _) = axes(&outline);
        prop_assert!(close(widths[0], width.min(height)));
        prop_assert!(close(widths[1], width.max(height)));
        for (side, kind) in outline.sides.iter().zip(outline.shape.side_kinds()) {
            prop_assert_eq!(each[side[0].edge], kind);
        }
        // Opposite sides are edges two apart; x low has the lower number.
        prop_assert_eq!(outline.sides[0][0].edge + 2, outline.sides[1][0].edge);
        let area = clipped_area(&outline, motion.point((0.5 * width, 0.5 * height)));
        prop_assert!(close(area, width * height));
    }

    #[test]
    fn a_moved_wedge_keeps_its_angle_and_kinds(
        motion in motion(), kinds in (kind(), kind()), angle in 0.05_f64..(TAU - 0.05), places in places(),
    ) {
        prop_assume!((angle - FRAC_PI_2).abs() > 1e-3 && (angle - PI).abs() > 1e-3);
        let ray = |angle: f64, reach: f64| (reach * angle.cos(), reach * angle.sin());
        let plan = site(&[motion.of(ray(0.4 * angle, 200.0))]);
        let plan = draw(plan, &motion, kinds.0, &[(ZERO, ZERO), (900.0, ZERO)]);
        let plan = draw(plan, &motion, kinds.1, &[(ZERO, ZERO), ray(angle, 700.0)]);
        let outline = only(&plan);
        check(&outline, &plan, &motion, &places);
        let Shape::Wedge { angle_rad, kinds: found } = outline.shape else {
            panic!("{:?}", outline.shape);
        };
        // Coordinates near 1e5 m are known to 1e-11 m, lines of 700 m thus to
        // 2e-14 rad each.
        prop_assert!((angle_rad - angle).abs() < 2e-13);
        let expected = if motion.mirrored { [kinds.1, kinds.0] } else { [kinds.0, kinds.1] };
        prop_assert_eq!(found, expected);
        // The wedge and its complement fill the square.
        let mut behind = plan.clone();
        behind.wells[0].at = motion.point(ray(angle + 0.4 * (TAU - angle), 200.0));
        let centre = motion.point((100.0, -30.0));
        let area = clipped_area(&outline, centre) + clipped_area(&only(&behind), centre);
        prop_assert!(close(area, 1.6e7));
    }

    #[test]
    fn a_moved_lake_keeps_its_radius(
        motion in motion(), radius in 10.0_f64..1500.0, from_centre in 0.01_f64..3.0, places in places(),
    ) {
        let distance: f64 = from_centre * radius;
        prop_assume!((distance - radius).abs() > 0.3);
        let plan = site(&[motion.of((0.6 * distance, 0.8 * distance))])
            .lake("Round lake", motion.of((0.0, 0.0)), radius);
        let outline = only(&plan);
        check(&outline, &plan, &motion, &places);
        let expected = if distance < radius {
            Shape::Disk { radius_m: radius }
        } else {
            Shape::DiskExterior { radius_m: radius }
        };
        prop_assert_eq!(outline.shape, expected);
    }

    #[test]
    fn any_tangle_of_lines_ends_in_outlines_that_hold_their_wells_or_in_refusals(
        lines in proptest::collection::vec((any::<bool>(), proptest::collection::vec(place(), 2..5)), 1..7),
        wells in proptest::collection::vec(place(), 1..6),
        whole in any::<bool>(),
    ) {
        // Whole metres make coincidences and parallels likely.
        let round = |at: &(f64, f64)| if whole {
            ((at.0 / 300.0).round() * 300.0, (at.1 / 300.0).round() * 300.0)
        } else {
            *at
        };
        let wells: Vec<(f64, f64)> = wells.iter().map(|at| (round(at).0 + 31.0, round(at).1 + 17.0)).collect();
        let mut plan = site(&wells);
        for (index, (river, line)) in lines.iter().enumerate() {
            let line: Vec<(f64, f64)> = line.iter().map(round).collect();
            let name = format!("E{index}");
            plan = if *river { plan.river(&name, &line) } else { plan.barrier(&name, &line) };
        }
        match mirrorwell::outline::find(&plan) {
            Ok(outlines) => {
                let mut held = 0;
                for outline in &outlines {
                    held += outline.wells.len();
                    for (index, well) in plan.wells.iter().enumerate() {
                        prop_assert_eq!(outline.holds(well.at), outline.wells.contains(&index));
                    }
                    prop_assert!(!crosses_a_drawn_line(outline, &plan));
                }
                prop_assert_eq!(held, plan.wells.len());
            }
            Err(refusals) => prop_assert!(!refusals.is_empty()),
        }
    }
}
