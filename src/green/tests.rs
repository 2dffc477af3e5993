//! Values of every Green's function against independent sums and against
//! gradients by differences. The published values are in `tests/published/`.

use super::*;

use Kind::{FixedHead as D, NoFlow as N};

const L: f64 = 3.0;
const H: f64 = 2.0;

fn two(width_m: f64, kinds: [Kind; 2]) -> Axis {
    Axis::TwoEdges { width_m, kinds }
}

/// G and its regular part for a box 3 × 2 with a well at 1.1 + 0.7i, seen
/// from 2.2 + 1.45i: eigenfunction series computed to 1e-15 (recipe and
/// digits in `tests/references/box`).
const BOX: [([Kind; 2], [Kind; 2], f64, f64); 15] = [
    ([D, D], [D, D], 0.03005489061273, 0.011392289515106),
    ([D, D], [D, N], 0.07092991378721, 0.032735917829819),
    ([D, D], [N, D], 0.056746856798981, 0.12848350513526),
    ([D, D], [N, N], 0.13181059723398, 0.18222446334171),
    ([D, N], [D, D], 0.036007540970977, 0.012605555125141),
    ([D, N], [D, N], 0.12845483556125, 0.044676493249823),
    ([D, N], [N, D], 0.10022203002135, 0.16013732729335),
    ([D, N], [N, N], 0.53253608211917, 0.38420648142283),
    ([N, D], [D, D], 0.032264056000271, 0.02747115280077),
    ([N, D], [D, N], 0.10161411379289, 0.090780021854065),
    ([N, D], [N, D], 0.079878617608207, 0.27678937105031),
    ([N, D], [N, N], 0.38417997896063, 0.78812758593278),
    ([N, N], [D, D], 0.038620814451705, 0.028847568483098),
    ([N, N], [D, N], 0.18946690882206, 0.11521321224644),
    ([N, N], [N, D], 0.14617157072407, 0.34170702690817),
];

fn well() -> Complex64 {
    Complex64::new(1.1, 0.7)
}

fn point() -> Complex64 {
    Complex64::new(2.2, 1.45)
}

#[test]
fn every_solvable_box_agrees_with_its_eigenfunction_series() {
    for (x, y, value, regular) in BOX {
        let shape = Shape::Axes {
            x: two(L, x),
            y: two(H, y),
        };
        let green = of(&shape, None).unwrap();
        let got = green.value(point(), well());
        assert!((got - value).abs() < 2e-14, "{x:?} {y:?}: {got} {value}");
        let got = green.regular_part(well());
        assert!(
            (got - regular).abs() < 2e-14,
            "{x:?} {y:?}: {got} {regular}"
        );
    }
}

/// All the shapes that have a Green's function, with a well and a point.
fn cases() -> Vec<(Shape, Option<f64>)> {
    let mut shapes = vec![
        Shape::Disk { radius_m: 4.0 },
        Shape::DiskExterior { radius_m: 0.5 },
        Shape::CloggedHalfPlane { skin_m: 0.02 },
        Shape::CloggedHalfPlane { skin_m: 1.3 },
    ];
    let kinds = [D, N];
    let mut axes = vec![Axis::Open];
    axes.extend(kinds.map(Axis::OneEdge));
    for low in kinds {
        axes.extend(kinds.map(|high| two(L, [low, high])));
        for high in kinds {
            for angle_rad in [0.9, 2.5, 5.5, std::f64::consts::TAU] {
                shapes.push(Shape::Wedge {
                    angle_rad,
                    kinds: [low, high],
                });
            }
        }
    }
    let edges = |axis: &Axis| {
        Shape::Axes {
            x: *axis,
            y: Axis::Open,
        }
        .side_kinds()
        .len()
    };
    for x in &axes {
        for y in axes.iter().filter(|y| edges(y) <= edges(x)) {
            shapes.push(Shape::Axes { x: *x, y: *y });
        }
    }
    shapes
        .into_iter()
        .map(|shape| (shape, Some(40.0)))
        .collect()
}

#[test]
fn green_functions_are_symmetric_and_positive() {
    for (shape, radius) in cases() {
        let green = of(&shape, radius).unwrap();
        let (there, back) = (green.value(point(), well()), green.value(well(), point()));
        assert!(
            (there - back).abs() < 1e-14 * (1.0 + there.abs()),
            "{shape:?}: {there} {back}"
        );
        if shape.side_kinds().contains(&D) {
            assert!(there > 0.0, "{shape:?}: {there}");
        }
    }
}

#[test]
fn gradients_are_the_differences_of_values() {
    const STEP: f64 = 1e-5;
    for (shape, radius) in cases() {
        let green = of(&shape, radius).unwrap();
        let along = |step: Complex64| {
            (green.value(point() + step, well()) - green.value(point() - step, well()))
                / (2.0 * STEP)
        };
        let expected = Complex64::new(
            along(Complex64::new(STEP, 0.0)),
            along(Complex64::new(0.0, STEP)),
        );
        let got = green.gradient(point(), well());
        assert!(
            (got - expected).norm() < 1e-9,
            "{shape:?}: {got} {expected}"
        );
    }
}

#[test]
fn batches_agree_with_single_values_and_keep_the_rim() {
    let points: Vec<_> = (0..77)
        .map(|step| {
            Complex64::new(
                0.02 + 0.011 * f64::from(step),
                0.3 + 0.007 * f64::from(step),
            )
        })
        .chain([well(), well() + 1e-3])
        .collect();
    for (shape, radius) in cases() {
        let green = of(&shape, radius).unwrap();
        let source = |pole, strength_m| Source {
            pole,
            strength_m,
            rim_m: 0.01,
        };
        let sources = [source(well(), 2.0), source(Complex64::new(0.7, 0.9), -0.5)];
        let mut sums = vec![1.0; points.len()];
        green.superpose(&sources, &points, &mut sums);
        for (point, sum) in points.iter().zip(sums) {
            let expected = sources.iter().fold(1.0, |sum, source| {
                sum + source.strength_m * green.value_outside_rim(*point, source.pole, source.rim_m)
            });
            assert!(
                (sum - expected).abs() < 1e-13,
                "{shape:?} {point}: {sum} {expected}"
            );
        }
    }
}

/// The sides of a shape, each whole.
fn sides(shape: &Shape) -> Vec<Range<f64>> {
    let along = |axis: &Axis| match axis {
        Axis::Open => f64::NEG_INFINITY..f64::INFINITY,
        Axis::OneEdge(_) => 0.0..f64::INFINITY,
        Axis::TwoEdges { width_m, .. } => 0.0..*width_m,
    };
    let count = |axis: &Axis| {
        Shape::Axes {
            x: *axis,
            y: Axis::Open,
        }
        .side_kinds()
        .len()
    };
    match shape {
        Shape::Axes { x, y } => {
            let mut sides = vec![along(y); count(x)];
            sides.extend(vec![along(x); count(y)]);
            sides
        }
        Shape::Wedge { .. } => vec![0.0..f64::INFINITY; 2],
        Shape::CloggedHalfPlane { .. } => sides(&shape.unclogged()),
        _ => vec![0.0..std::f64::consts::TAU],
    }
}

#[test]
fn shares_of_all_rivers_sum_to_one_and_lie_between_zero_and_one() {
    for (shape, _) in cases() {
        let kinds = shape.side_kinds();
        if !kinds.contains(&D) {
            continue;
        }
        let green = of(&shape, None).unwrap();
        let shares: Vec<_> = sides(&shape)
            .into_iter()
            .enumerate()
            .map(|(side, along)| green.share(side, along, well()))
            .collect();
        let total: f64 = shares.iter().sum();
        assert!((total - 1.0).abs() < 1e-13, "{shape:?}: {shares:?}");
        for (kind, share) in kinds.iter().zip(&shares) {
            assert!((0.0..=1.0 + 1e-14).contains(share), "{shape:?}: {shares:?}");
            assert!(*kind == D || *share == 0.0, "{shape:?}: {shares:?}");
        }
    }
}

/// −∫ ∂G/∂n dl by Gauss's rule on the gradient, over a part of each river.
#[test]
fn shares_are_the_integrals_of_the_gradient() {
    for (shape, _) in cases() {
        let kinds = shape.side_kinds();
        if !kinds.contains(&D) || matches!(shape, Shape::Disk { .. } | Shape::DiskExterior { .. }) {
            continue;
        }
        let green = of(&shape, None).unwrap();
        for (side, kind) in kinds.iter().enumerate().filter(|(_, kind)| **kind == D) {
            let part = 0.4..1.9;
            let (origin, along, inward) = place_of_side(&shape, side);
            let steps = 20_000;
            let width = (part.end - part.start) / f64::from(steps);
            let flux: f64 = (0..steps)
                .map(|step| part.start + (f64::from(step) + 0.5) * width)
                .map(|a| {
                    let gradient = green.gradient(origin + along * a, well());
                    (gradient * inward.conj()).re * width
                })
                .sum();
            let share = green.share(side, part, well());
            assert!(
                (share - flux).abs() < 1e-8,
                "{shape:?} {kind:?} {side}: {share} {flux}"
            );
        }
    }
}

fn place_of_side(shape: &Shape, side: usize) -> (Complex64, Complex64, Complex64) {
    let i = Complex64::i();
    let one = Complex64::new(1.0, 0.0);
    match &shape.unclogged() {
        Shape::Wedge { angle_rad, .. } => {
            let along = Complex64::from_polar(1.0, if side == 0 { 0.0 } else { *angle_rad });
            (
                0.0 * one,
                along,
                if side == 0 { along * i } else { -along * i },
            )
        }
        Shape::Axes { x, y } => {
            let width = |axis: &Axis| match axis {
                Axis::TwoEdges { width_m, .. } => *width_m,
                _ => 0.0,
            };
            let across_x = Shape::Axes {
                x: *x,
                y: Axis::Open,
            }
            .side_kinds()
            .len();
            match side {
                0 if across_x > 0 => (0.0 * one, i, one),
                1 if across_x > 1 => (width(x) * one, i, -one),
                n if n == across_x => (0.0 * one, one, i),
                _ => (width(y) * i, one, -i),
            }
        }
        _ => (0.0 * one, one, i),
    }
}

#[test]
fn a_wedge_that_divides_the_circle_equals_its_image_wells() {
    for (angle_degrees, kinds) in [
        (45.0, [D, D]),
        (45.0, [D, N]),
        (45.0, [N, D]),
        (60.0, [D, D]),
        (30.0, [D, N]),
        (90.0, [N, D]),
    ] {
        let angle = f64::to_radians(angle_degrees);
        let wedge = Wedge::new(angle, kinds);
        let (z, pole) = (Complex64::new(2.1, 0.45), Complex64::new(1.3, 0.3));
        let sum: f64 = wedge::images_in_wedge(angle, kinds, pole)
            .iter()
            .map(|image| -image.sign * (z - image.at).norm().ln() / std::f64::consts::TAU)
            .sum();
        let got = wedge.value(z, pole);
        assert!(
            (got - sum).abs() < 1e-14,
            "{angle_degrees} {kinds:?}: {got} {sum}"
        );
    }
}

#[test]
fn the_continued_wedge_between_barriers_equals_its_image_wells_where_it_has_some() {
    let pole = Complex64::new(1.3, 0.3);
    let z = Complex64::new(2.1, 0.45);
    let angle = std::f64::consts::FRAC_PI_4;
    let value = |angle_rad| {
        let shape = Shape::Wedge {
            angle_rad,
            kinds: [N, N],
        };
        of(&shape, Some(100.0)).unwrap().value(z, pole)
    };
    let (exact, continued) = (value(angle), value(angle * (1.0 + 1e-8)));
    assert!((exact - continued).abs() < 1e-6, "{exact} {continued}");
}

#[test]
fn mirrored_places_of_nearest_images_carry_the_boundary_signs() {
    let shape = Shape::Axes {
        x: two(10.0, [D, N]),
        y: Axis::Open,
    };
    let green = of(&shape, None).unwrap();
    let images = green.nearest_images(Complex64::new(3.0, 1.0), 3);
    let seen: Vec<_> = images
        .iter()
        .map(|image| (image.at.re, image.sign, image.order))
        .collect();
    assert_eq!(seen, [(-3.0, -1.0, 1), (17.0, 1.0, 1), (23.0, -1.0, 2)]);
}

#[test]
fn within_its_rim_a_well_keeps_the_value_of_its_regular_part() {
    const RIM: f64 = 0.01;
    for (shape, radius) in cases() {
        let green = of(&shape, radius).unwrap();
        let at_pole = green.value_outside_rim(well(), well(), RIM);
        let expected = green.regular_part(well()) - RIM.ln() / std::f64::consts::TAU;
        assert!(
            (at_pole - expected).abs() < 1e-14,
            "{shape:?}: {at_pole} {expected}"
        );
    }
}
