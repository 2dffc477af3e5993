//! How a panel is cut: in two, or geometrically into its corner.

use num_complex::Complex64;

use super::legendre::ellipse;
use super::panel::{Panel, SMALLEST};
use super::region::{LOGARITHMIC, Region};

/// A panel that touches a corner gives it this share of itself when it is cut.
const CORNER_SHARE: f64 = 0.25;

/// A pole is kept at least this far, as an ellipse, from every panel.
const POLE_ELLIPSE: f64 = 2.2;

/// Corners of a smaller λ are cut from the start.
const STRONG: f64 = 0.85;

/// A smooth panel that misses its aim by more is cut in four.
const QUARTERS: f64 = 100.0;

/// A straight side is cut here, from each end,
const MIDDLE_CUT: f64 = 0.35;

/// and here beside strong corners,
const STRONG_CUTS: &[f64] = &[0.175, 0.09, 0.045];

/// and here beside others.
const WEAK_CUTS: &[f64] = &[0.12, 0.04];

/// Largest m.
const HIGHEST_POWER: u32 = 8;

/// Cuts a panel where it is singular, or in two.
pub(super) fn cut(region: &Region, panel: Panel, excess: f64, panels: &mut Vec<Panel>) {
    if panel.power > 1 && panel.reaches_end() {
        // Bent toward its own corner it cannot follow the other one.
        let (near, far) = panel.unbent_halves();
        panels.push(near);
        cut(region, far, excess, panels);
        return;
    }
    let turned = panel.turned(region);
    match exponents(region, &panel) {
        (None, None) => halve(panel, excess, panels),
        (Some(first), None) if panel.power == 1 => {
            bend(panel, first, excess, panels);
        }
        (Some(first), None) if is_whole(first, panel.power) => halve(panel, excess, panels),
        (Some(first), None) => grade(panel, levels(excess, first, panel.power), panels),
        (None, Some(last)) => bend(turned, last, excess, panels),
        (Some(first), Some(last)) => {
            let [near, _] = panel.halves();
            let [far, _] = turned.halves();
            bend(near, first, excess, panels);
            bend(far, last, excess, panels);
        }
    }
}

/// Lets a panel run through wᵐ from its corner on, and cuts it where it misses
/// its aim by more than that gains.
fn bend(panel: Panel, exponent: f64, excess: f64, panels: &mut Vec<Panel>) {
    let bent = panel.with_power(power_for(exponent));
    if excess <= QUARTERS {
        panels.push(bent);
    } else if is_whole(exponent, bent.power) {
        panels.extend(bent.halves());
    } else {
        grade(
            bent,
            levels(excess / QUARTERS, exponent, bent.power),
            panels,
        );
    }
}

/// λ of the corners that a panel touches, first and last; that of a logarithm
/// where the sides go straight on, for the head may have a kink there.
fn exponents(region: &Region, panel: &Panel) -> (Option<f64>, Option<f64>) {
    let exponent = |corner: usize, touches: bool| {
        let joint = region.joint(corner).filter(|_| touches)?;
        Some(joint.exponent.min(LOGARITHMIC))
    };
    let end = panel.turned(region).corner;
    (
        exponent(panel.corner, panel.is_first()),
        exponent(end, panel.is_last()),
    )
}

/// Whether a panel touches a corner at which its density is far from smooth.
fn has_strong_corner(region: &Region, panel: &Panel) -> bool {
    let (first, last) = exponents(region, panel);
    let is_strong = |exponent: Option<f64>| exponent.is_some_and(|exponent| exponent < STRONG);
    is_strong(first) || is_strong(last)
}

/// Cuts a smooth panel in two, or in four where it misses its aim by much.
fn halve(panel: Panel, excess: f64, panels: &mut Vec<Panel>) {
    for half in panel.halves() {
        if excess > QUARTERS {
            panels.extend(half.halves());
        } else {
            panels.push(half);
        }
    }
}

/// m for a corner's λ: the least that makes mλ whole, or else at least 2.
pub(super) fn power_for(exponent: f64) -> u32 {
    (2..=HIGHEST_POWER)
        .find(|&power| is_whole(exponent, power))
        .unwrap_or_else(|| ((2.0 / exponent).ceil() as u32).clamp(3, HIGHEST_POWER))
}

/// Whether the density is smooth in w: mλ is a whole number.
fn is_whole(exponent: f64, power: u32) -> bool {
    let product = f64::from(power) * exponent;
    product > 0.5 && (product - product.round()).abs() < 1e-9
}

/// How often a panel at a corner is to be cut so that its residual, which
/// falls as the power mλ of its size, loses a factor.
fn levels(excess: f64, exponent: f64, power: u32) -> usize {
    let gain = -exponent * f64::from(power) * CORNER_SHARE.ln();
    (excess.ln() / gain).ceil().clamp(1.0, 8.0) as usize
}

/// Cuts a panel geometrically into its corner.
fn grade(panel: Panel, levels: usize, panels: &mut Vec<Panel>) {
    let mut rest = panel;
    for _ in 0..levels {
        if rest.half < SMALLEST {
            break;
        }
        let at = rest.to() * CORNER_SHARE;
        panels.push(rest.part(at, rest.to()));
        rest = rest.part(0.0, at);
    }
    panels.push(rest);
}

/// A side's panel, cut until every pole is well off all its parts.
pub(super) fn cut_near_poles(panel: Panel, poles: &[Complex64]) -> Vec<Panel> {
    let is_near = |pole: &Complex64| {
        let u = panel.curve.parameter(*pole);
        ellipse(panel.local(u)) < POLE_ELLIPSE
    };
    if panel.half > SMALLEST && poles.iter().any(is_near) {
        let halves = panel.halves().into_iter();
        halves
            .flat_map(|half| cut_near_poles(half, poles))
            .collect()
    } else {
        vec![panel]
    }
}

/// Panels cut where they touch a corner at which the density is far from
/// smooth.
pub(super) fn cut_beside_strong_corners(region: &Region, uncut: Vec<Panel>) -> Vec<Panel> {
    let mut panels = Vec::new();
    for panel in uncut {
        if has_strong_corner(region, &panel) {
            cut(region, panel, 1.0, &mut panels);
        } else {
            panels.push(panel);
        }
    }
    panels
}

/// A straight side cut so that polynomials on its panels resolve the powers of
/// the distances from its corners, by a factor better than one panel does.
pub(super) fn cut_toward_corners(region: &Region, side: Panel, gain: f64) -> Vec<Panel> {
    let mut panels = Vec::new();
    let mut end = Vec::new();
    for (side, panels) in [(side, &mut panels), (side.turned(region), &mut end)] {
        let exponent = region.joint(side.corner).map(|joint| joint.exponent);
        let exponent = exponent.filter(|exponent| exponent.is_finite());
        let cuts = match exponent {
            Some(exponent) if exponent < STRONG => STRONG_CUTS,
            Some(_) => WEAK_CUTS,
            None => &[],
        };
        let mut to = MIDDLE_CUT;
        for &cut in cuts {
            panels.push(side.part(cut, to));
            to = cut;
        }
        let corner = side.part(0.0, to);
        match exponent {
            Some(exponent) => {
                let bent = corner.with_power(power_for(exponent));
                if is_whole(exponent, bent.power) {
                    panels.push(bent);
                } else {
                    grade(bent, levels(gain, exponent, bent.power), panels);
                }
            }
            None => panels.push(corner),
        }
    }
    panels.push(side.part(MIDDLE_CUT, 1.0 - MIDDLE_CUT));
    panels.extend(end);
    panels
}
