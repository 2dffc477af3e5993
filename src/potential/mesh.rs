//! The panels of a region: where its sides are cut, at first and when refined.

use num_complex::Complex64;

use super::cut::{cut, cut_beside_strong_corners, cut_near_poles, cut_toward_corners};
use super::legendre::Rule;
use super::panel::{Panel, Place, SMALLEST};
use super::region::{Condition, Region};
use super::span::Span;

/// How much better than one panel those at the corners of a side are to do whose
/// density is made of few functions, and cannot be cut any more;
const SPAN_GAIN: f64 = 1e5;

/// and those of a side whose nodes are free.
const FREE_GAIN: f64 = 1e3;

/// The panels of one side, and what their density is made of.
#[derive(Clone, Debug)]
pub(super) struct Stretch {
    pub panels: Vec<Panel>,
    /// The functions that make it up; none where each node has a density of
    /// its own.
    pub span: Option<Span>,
}

impl Stretch {
    /// A side as first solved: made of few functions where it can be and neither a
    /// pole nor a corner of other sides is near; otherwise cut until all of these
    /// are well off its panels, and where its own corners ask for it.
    fn new(region: &Region, side: usize, poles: &[Complex64], rule: &Rule, target_m: f64) -> Self {
        let Some(curve) = region.sides().get(side).map(|side| side.curve) else {
            return Self {
                panels: Vec::new(),
                span: None,
            };
        };
        let whole = Panel::whole(region, side, curve);
        let poles: Vec<_> = (poles.iter().copied())
            .chain(region.other_corners(side))
            .collect();
        let off_poles = cut_near_poles(whole, &poles);
        if !Span::suits(region, side) {
            return Self {
                panels: cut_beside_strong_corners(region, off_poles),
                span: None,
            };
        }
        let is_off_poles = off_poles.len() == 1;
        let gain = if is_off_poles { SPAN_GAIN } else { FREE_GAIN };
        let panels = cut_toward_corners(region, whole, gain).into_iter();
        let panels: Vec<_> = panels
            .flat_map(|panel| cut_near_poles(panel, &poles))
            .collect();
        let span = is_off_poles.then(|| Span::new(region, side, &panels, rule, target_m));
        Self { panels, span }
    }

    /// Number of its unknowns.
    pub fn unknowns(&self, rule: &Rule) -> usize {
        match &self.span {
            Some(span) => span.count(),
            None => self.panels.len() * rule.order(),
        }
    }

    /// The same made finer where its panels miss their aim; none where none does
    /// or none can be cut. On a stretch of few functions its nodes are set free.
    fn refined(&self, region: &Region, excess: &[f64]) -> Option<Self> {
        let is_over = |(panel, excess): (&Panel, &f64)| *excess > 1.0 && panel.half > SMALLEST;
        let are_over: Vec<bool> = self.panels.iter().zip(excess).map(is_over).collect();
        if !are_over.contains(&true) {
            return None;
        }
        let mut panels = Vec::with_capacity(2 * self.panels.len());
        for ((panel, excess), is_over) in self.panels.iter().zip(excess).zip(are_over) {
            if is_over {
                cut(region, *panel, *excess, &mut panels);
            } else {
                panels.push(*panel);
            }
        }
        Some(Self { panels, span: None })
    }
}

/// The panels of a region, side after side.
#[derive(Clone, Debug)]
pub(super) struct Mesh {
    pub stretches: Vec<Stretch>,
    pub rule: Rule,
}

impl Mesh {
    /// The first mesh of a region, for errors of the head up to a target.
    pub fn new(region: &Region, poles: &[Complex64], order: usize, target_m: f64) -> Self {
        let rule = Rule::new(order);
        let sides = 0..region.sides().len();
        Self {
            stretches: sides
                .map(|side| Stretch::new(region, side, poles, &rule, target_m))
                .collect(),
            rule,
        }
    }

    /// All panels.
    pub fn panels(&self) -> impl Iterator<Item = &Panel> + '_ {
        self.stretches.iter().flat_map(|stretch| &stretch.panels)
    }

    /// Number of unknowns.
    pub fn unknowns(&self) -> usize {
        let stretches = self.stretches.iter();
        stretches.map(|stretch| stretch.unknowns(&self.rule)).sum()
    }

    /// A density at a place that its panel, or its side of few functions, can
    /// take up: dw on a panel, so that panels graded into a corner are alike.
    pub fn profile(&self, place: &Place) -> f64 {
        let stretch = self.stretches.get(place.side);
        let span = stretch.and_then(|stretch| stretch.span.as_ref());
        span.map_or(place.half, |span| span.profile(place))
    }

    /// The nodes, panel after panel.
    pub fn nodes(&self, region: &Region) -> Vec<Place> {
        self.places(region, |_| &self.rule.nodes)
    }

    /// The places between the nodes, panel after panel.
    pub fn checks(&self, region: &Region) -> Vec<Place> {
        self.places(region, |stretch| match stretch.span {
            Some(_) => &self.rule.few_checks,
            None => &self.rule.checks,
        })
    }

    fn places<'a>(&'a self, region: &Region, at: impl Fn(&Stretch) -> &'a [f64]) -> Vec<Place> {
        let mut places = Vec::new();
        let mut index = 0;
        for stretch in &self.stretches {
            for panel in &stretch.panels {
                let side = region.sides().get(panel.side);
                let condition = side.map_or(Condition::Head, |side| side.condition);
                places.extend(
                    at(stretch)
                        .iter()
                        .map(|&t| panel.place(index, condition, t)),
                );
                index += 1;
            }
        }
        places
    }

    /// A finer mesh where panels miss their aim by the given factors; none
    /// where nothing can be refined. A flux side of few functions beside one whose
    /// nodes are set free is freed too: it could not follow what goes on there.
    pub fn refined(&self, region: &Region, excess: &[f64]) -> Option<Self> {
        let mut rest = excess;
        let mut finer = Vec::with_capacity(self.stretches.len());
        for stretch in &self.stretches {
            let (here, after) = rest.split_at_checked(stretch.panels.len())?;
            rest = after;
            finer.push(stretch.refined(region, here));
        }
        if finer.iter().all(Option::is_none) {
            return None;
        }
        let stretches = finer.iter().zip(&self.stretches);
        let mut stretches: Vec<Stretch> = stretches
            .map(|(finer, stretch)| finer.as_ref().unwrap_or(stretch).clone())
            .collect();
        for side in self.beside_freed(region, &stretches) {
            if let Some(stretch) = stretches.get_mut(side) {
                stretch.span = None;
            }
        }
        Some(Self {
            stretches,
            rule: self.rule.clone(),
        })
    }

    /// The flux sides beside flux sides whose nodes are newly free.
    fn beside_freed(&self, region: &Region, finer: &[Stretch]) -> Vec<usize> {
        let is_flux = |side: usize| {
            let side = region.sides().get(side);
            side.is_some_and(|side| side.condition == Condition::Flux)
        };
        let are_freed = self.stretches.iter().zip(finer).enumerate();
        are_freed
            .filter(|(side, (old, new))| old.span.is_some() && new.span.is_none() && is_flux(*side))
            .flat_map(|(side, _)| {
                let after = region.joint(side).map(|joint| joint.next);
                [Some(region.before(side)), after]
            })
            .flatten()
            .filter(|side| is_flux(*side))
            .collect()
    }
}
