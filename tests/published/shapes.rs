//! Makes shapes and their Green's functions from the letters of the tables:
//! D a river, N a barrier.

use mirrorwell::green::{self, Green};
use mirrorwell::outline::{Axis, Kind, Shape};

pub fn kind(letter: char) -> Kind {
    match letter {
        'D' => Kind::FixedHead,
        'N' => Kind::NoFlow,
        other => panic!("no kind of edge is called {other:?}"),
    }
}

pub fn kinds(letters: &str) -> [Kind; 2] {
    let mut both = letters.chars().map(kind);
    [both.next().unwrap(), both.next().unwrap()]
}

/// The edges across one axis: none, one, or two at a width.
pub fn axis(letters: &str, width_m: f64) -> Axis {
    match letters.len() {
        0 => Axis::Open,
        1 => Axis::OneEdge(kind(letters.chars().next().unwrap())),
        _ => Axis::TwoEdges {
            width_m,
            kinds: kinds(letters),
        },
    }
}

pub fn axes(x: Axis, y: Axis) -> Shape {
    Shape::Axes { x, y }
}

pub fn wedge(angle_rad: f64, letters: &str) -> Shape {
    Shape::Wedge {
        angle_rad,
        kinds: kinds(letters),
    }
}

/// The Green's function of a shape that has a river.
pub fn green(shape: &Shape) -> Box<dyn Green> {
    green::of(shape, None).expect("a river holds the head")
}

/// The Green's function of an open plane or of barriers alone.
pub fn green_within(shape: &Shape, radius_m: f64) -> Box<dyn Green> {
    green::of(shape, Some(radius_m)).expect("the radius bounds the cone")
}
