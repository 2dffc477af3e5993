//! Whether a place lies in the aquifer that a general boundary bounds.
//!
//! Method: a quadtree over the boundary's pieces. Each leaf knows one place of
//! its own and on which side that lies; the way from there to another place of
//! the leaf crosses the pieces in it an even or odd number of times. All
//! crossings are decided by exact predicates (`lines`), so no rounding can
//! upset the count. Cost: a descent, and some six pieces.

use num_complex::Complex64;

use super::general::{Boundary, Curve};
use super::lines::{self, Line};

/// Pieces that a leaf may hold.
const CAPACITY: usize = 6;

/// Halvings of the square around all vertices.
const DEEPEST: u32 = 52;

/// Side of the smallest square, metres: vertices lie 1 mm apart.
const SMALLEST_M: f64 = 4e-3;

/// Length of half-lines, and the farthest that a place is looked at, in sizes
/// of the square. A place further out is moved in, by less than 1e-9 of its
/// distance as seen from there.
const RAY_SIZES: f64 = 1e12;
const FARTHEST_SIZES: f64 = 1e10;

/// How far pieces may lie beyond a leaf and still be listed in it, as a share of
/// the distance from the origin and in metres: more than what counts as on the
/// edge.
const MARGIN: f64 = 2e-9;
const MARGIN_M: f64 = 1e-6;

/// The quadtree.
#[derive(Debug)]
pub(super) struct Inside {
    lines: Vec<Line>,
    /// The half-lines among them.
    rays: Vec<Line>,
    nodes: Vec<Node>,
    /// The pieces of all leaves, by their numbers.
    listed: Vec<u32>,
    root: Square,
}

/// A square by its centre and half its side.
#[derive(Clone, Copy, Debug)]
struct Square {
    centre: Complex64,
    half: f64,
}

#[derive(Clone, Copy, Debug)]
enum Node {
    /// Four quarters from this number on: south-west, south-east, north-west,
    /// north-east.
    Split(u32),
    /// A range of `listed`, and a place with its side of the chords.
    Leaf {
        start: u32,
        end: u32,
        known: Complex64,
        is_inside: bool,
    },
}

impl Inside {
    /// The tree of a boundary; `well` is a place inside it.
    pub fn of(boundary: &Boundary, well: Complex64) -> Self {
        let root = Square::around(boundary, well);
        let lines = lines::of(boundary, RAY_SIZES * root.half);
        let is_ray = |line: &&Line| (line.b - line.a).norm() > FARTHEST_SIZES * root.half;
        let rays = lines.iter().filter(is_ray).copied().collect();
        let mut tree = Self {
            rays,
            nodes: Vec::new(),
            listed: Vec::new(),
            root,
            lines,
        };
        let all: Vec<u32> = (0u32..).take(tree.lines.len()).collect();
        // Inside an arc but beyond its chord is outside the chords.
        let beyond = tree.lines.iter().filter(|line| line.holds_beyond(well));
        let is_inside = beyond.count() % 2 == 0;
        let known = root.known();
        let is_inside = is_inside ^ tree.crosses(&all, well, known);
        tree.grow(root, 0, all, known, is_inside);
        tree
    }

    /// Whether a place lies in the aquifer, or within a small distance of its
    /// edge.
    pub fn holds(&self, place: Complex64, slack: f64) -> bool {
        let reach = FARTHEST_SIZES * self.root.half;
        let offset = place - self.root.centre;
        let scale = (reach / offset.re.abs().max(offset.im.abs())).min(1.0);
        let place = self.root.centre + offset * scale;
        let within = self.root.nearest(place);
        let (list, known, is_inside) = self.leaf(within);
        let mut is_inside = is_inside ^ self.crosses(list, within, known);
        if within != place {
            let crossed = self.rays.iter().filter(|ray| ray.is_crossed(place, within));
            is_inside ^= crossed.count() % 2 == 1;
            let near = || {
                self.rays
                    .iter()
                    .any(|ray| ray.is_near(place, slack * scale))
            };
            return is_inside || near();
        }
        let listed = || {
            list.iter()
                .filter_map(|&line| self.lines.get(line as usize))
        };
        is_inside ^= listed().filter(|line| line.holds_beyond(place)).count() % 2 == 1;
        is_inside || listed().any(|line| line.is_near(place, slack))
    }

    /// Whether a way crosses an odd number of some pieces.
    fn crosses(&self, list: &[u32], from: Complex64, to: Complex64) -> bool {
        let lines = list
            .iter()
            .filter_map(|&line| self.lines.get(line as usize));
        lines.filter(|line| line.is_crossed(from, to)).count() % 2 == 1
    }

    /// The leaf that holds a place of the root square.
    fn leaf(&self, place: Complex64) -> (&[u32], Complex64, bool) {
        let mut square = self.root;
        let mut node = self.nodes.first();
        while let Some(Node::Split(first)) = node {
            let quarter = square.quarter_of(place);
            square = square.quarter(quarter);
            node = self.nodes.get(*first as usize + quarter);
        }
        match node {
            Some(Node::Leaf {
                start,
                end,
                known,
                is_inside,
            }) => {
                let list = self.listed.get(*start as usize..*end as usize);
                (list.unwrap_or_default(), *known, *is_inside)
            }
            _ => (&[], place, false),
        }
    }

    /// Adds the nodes of a square with its pieces, breadth first.
    fn grow(
        &mut self,
        square: Square,
        depth: u32,
        list: Vec<u32>,
        known: Complex64,
        is_inside: bool,
    ) {
        self.nodes.push(Node::Split(0));
        let mut waiting = std::collections::VecDeque::new();
        waiting.push_back((0, square, depth, list, known, is_inside));
        while let Some((number, square, depth, list, known, is_inside)) = waiting.pop_front() {
            let is_small = depth >= DEEPEST || square.half <= 0.5 * SMALLEST_M;
            let node = if list.len() <= CAPACITY || is_small {
                let start = self.listed.len() as u32;
                self.listed.extend(&list);
                Node::Leaf {
                    start,
                    end: self.listed.len() as u32,
                    known,
                    is_inside,
                }
            } else {
                let first = self.nodes.len();
                for quarter in 0..4 {
                    let part = square.quarter(quarter);
                    let place = part.known();
                    let side = is_inside ^ self.crosses(&list, known, place);
                    let touching = |line: &&u32| {
                        let line = self.lines.get(**line as usize);
                        line.is_some_and(|line| part.touches(line))
                    };
                    let of_part = list.iter().filter(touching).copied().collect();
                    self.nodes.push(Node::Split(0));
                    waiting.push_back((first + quarter, part, depth + 1, of_part, place, side));
                }
                Node::Split(first as u32)
            };
            if let Some(slot) = self.nodes.get_mut(number) {
                *slot = node;
            }
        }
    }
}

impl Square {
    /// The square around all vertices and a well, a quarter larger.
    fn around(boundary: &Boundary, well: Complex64) -> Self {
        let (mut low, mut high) = (well, well);
        let mut take = |z: Complex64, reach: f64| {
            low = Complex64::new(low.re.min(z.re - reach), low.im.min(z.im - reach));
            high = Complex64::new(high.re.max(z.re + reach), high.im.max(z.im + reach));
        };
        for side in &boundary.sides {
            match side.curve {
                Curve::Arc { centre, radius, .. } => take(centre, radius),
                curve => curve
                    .from()
                    .into_iter()
                    .chain(curve.to())
                    .for_each(|z| take(z, 0.0)),
            }
        }
        let size = high - low;
        Self {
            centre: 0.5 * (low + high),
            half: 0.625 * size.re.max(size.im) + 1.0,
        }
    }

    /// A place of the square that no drawn line is likely to pass.
    fn known(&self) -> Complex64 {
        self.centre + self.half * Complex64::new(0.153_846_227_114, -0.087_193_660_417)
    }

    /// The place of the square that is nearest to another.
    fn nearest(&self, place: Complex64) -> Complex64 {
        let (low, high) = (self.centre - self.half, self.centre + self.half);
        let (south, north) = (self.centre.im - self.half, self.centre.im + self.half);
        Complex64::new(
            place.re.clamp(low.re, high.re),
            place.im.clamp(south, north),
        )
    }

    fn quarter_of(&self, place: Complex64) -> usize {
        usize::from(place.re >= self.centre.re) + 2 * usize::from(place.im >= self.centre.im)
    }

    fn quarter(&self, number: usize) -> Self {
        let half = 0.5 * self.half;
        let toward = |is_high: bool| if is_high { half } else { -half };
        let step = Complex64::new(toward(number % 2 == 1), toward(number >= 2));
        Self {
            centre: self.centre + step,
            half,
        }
    }

    /// Whether a piece comes within the margin of the square: no axis of the
    /// square and no normal of the piece parts them.
    fn touches(&self, line: &Line) -> bool {
        let margin = MARGIN_M + MARGIN * (self.centre.norm() + self.half);
        let sagitta = line.arc.map_or(0.0, |arc| arc.sagitta);
        let half = self.half + margin + sagitta;
        let (a, b) = (line.a - self.centre, line.b - self.centre);
        let apart = |a: f64, b: f64| a.min(b) > half || a.max(b) < -half;
        let along = (b - a) / (b - a).norm();
        let offset = (along.conj() * a).im.abs();
        // A long piece is told from the end nearer to the square, which
        // rounding does not move.
        let other = (along.conj() * b).im.abs();
        let offset = if a.norm() <= b.norm() { offset } else { other };
        !apart(a.re, b.re)
            && !apart(a.im, b.im)
            && offset <= half * (along.re.abs() + along.im.abs())
    }
}
