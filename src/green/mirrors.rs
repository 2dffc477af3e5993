//! The images of a coordinate in the edges across one axis.
//!
//! Between edges at 0 and L the images of c stand at 2nL + c and 2nL − c; each
//! mirroring turns the sign at a fixed-head edge and keeps it at a no-flow
//! edge. Like edges repeat after 2L, unlike edges after 4L.
//! Source: Ferris et al. (1962), USGS Water-Supply Paper 1536-E.

use crate::outline::{Axis, Kind};

/// An image of a coordinate.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) struct AxisImage {
    /// Where it stands.
    pub position: f64,
    /// +1 or −1.
    pub sign: f64,
    /// In how many edges the coordinate was mirrored.
    pub order: u32,
}

/// What mirroring in an edge does to the sign.
pub(super) fn sign_of(kind: Kind) -> f64 {
    match kind {
        Kind::FixedHead => -1.0,
        Kind::NoFlow => 1.0,
    }
}

/// The images of `coordinate` up to a number of mirrorings, by rising order;
/// the coordinate itself comes first.
pub(super) fn images_up_to(axis: Axis, coordinate: f64, order: u32) -> Vec<AxisImage> {
    let itself = AxisImage {
        position: coordinate,
        sign: 1.0,
        order: 0,
    };
    match axis {
        Axis::Open => vec![itself],
        Axis::OneEdge(kind) => {
            let mirrored = AxisImage {
                position: -coordinate,
                sign: sign_of(kind),
                order: 1,
            };
            [itself, mirrored]
                .into_iter()
                .filter(|image| image.order <= order)
                .collect()
        }
        Axis::TwoEdges { width_m, kinds } => {
            let [low, high] = kinds.map(sign_of);
            let mut images = vec![itself];
            let (mut first_low, mut first_high) = (itself, itself);
            for step in 1..=order {
                // The chain that starts at the low edge meets the high edge
                // next, and so on; the other chain the other way round.
                let odd = step % 2 == 1;
                let at_low = |image: AxisImage| AxisImage {
                    position: -image.position,
                    sign: image.sign * low,
                    order: step,
                };
                let at_high = |image: AxisImage| AxisImage {
                    position: 2.0 * width_m - image.position,
                    sign: image.sign * high,
                    order: step,
                };
                (first_low, first_high) = if odd {
                    (at_low(first_low), at_high(first_high))
                } else {
                    (at_high(first_low), at_low(first_high))
                };
                images.extend([first_low, first_high]);
            }
            images
        }
    }
}

/// The period of the images between two edges.
pub(super) fn period(width: f64, kinds: [Kind; 2]) -> f64 {
    if kinds[0] == kinds[1] {
        2.0 * width
    } else {
        4.0 * width
    }
}

/// The images in one period between two edges: two of like edges, four of
/// unlike ones.
pub(super) fn images_of_one_period(
    width: f64,
    kinds: [Kind; 2],
    coordinate: f64,
) -> Vec<AxisImage> {
    let axis = Axis::TwoEdges {
        width_m: width,
        kinds,
    };
    let images = images_up_to(axis, coordinate, 2);
    // c, −c, 2L − c, then 2L + c and c − 2L, of which one period holds c − 2L.
    if kinds[0] == kinds[1] {
        images.into_iter().take(2).collect()
    } else {
        // By order, as a coordinate on an edge puts 2L + c within reach too.
        let within = |image: &AxisImage| image.order < 2 || image.position < coordinate;
        images.into_iter().filter(within).collect()
    }
}

/// The images of `coordinate`, in order of their mirrorings, whose distance
/// from the aquifer's own interval is at most `reach`.
pub(super) fn images_within(axis: Axis, coordinate: f64, reach: f64) -> Vec<AxisImage> {
    match axis {
        Axis::Open | Axis::OneEdge(_) => images_up_to(axis, coordinate, 1),
        Axis::TwoEdges { width_m, .. } => {
            let order = (reach / width_m).ceil() + 1.0;
            let near =
                |image: &AxisImage| -image.position <= reach && image.position - width_m <= reach;
            let images = images_up_to(axis, coordinate, order as u32);
            images.into_iter().filter(near).collect()
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn positions(images: &[AxisImage]) -> Vec<(f64, f64)> {
        images
            .iter()
            .map(|image| (image.position, image.sign))
            .collect()
    }

    /// Ferris et al. (1962), two parallel boundaries: images at 2nL ± c.
    #[test]
    fn images_between_a_river_and_a_barrier_stand_where_ferris_1962_puts_them() {
        let axis = Axis::TwoEdges {
            width_m: 10.0,
            kinds: [Kind::FixedHead, Kind::NoFlow],
        };
        let expected = [
            (3.0, 1.0),
            (-3.0, -1.0),
            (17.0, 1.0),
            (23.0, -1.0),
            (-17.0, -1.0),
        ];
        assert_eq!(positions(&images_up_to(axis, 3.0, 2)), expected);
    }

    #[test]
    fn one_period_between_unlike_edges_holds_four_images() {
        let images = images_of_one_period(10.0, [Kind::FixedHead, Kind::NoFlow], 3.0);
        let expected = [(3.0, 1.0), (-3.0, -1.0), (17.0, 1.0), (-17.0, -1.0)];
        assert_eq!(positions(&images), expected);
    }
}
