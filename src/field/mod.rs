//! Superposes wells on the ambient head; evaluates points and grids in
//! parallel and in batches.
//!
//! h(x) = h₀(x) − Σ Qⱼ/T · G(x, xⱼ), one [`WellField`] for each aquifer.

mod accuracy;
mod ambient;
mod ambient_error;
mod evaluate;
mod exchange;
mod free_flow;
mod recharge;
mod solved;
mod stated;
mod steady;

use std::f64::consts::FRAC_1_PI;
use std::ops::Range;
use std::sync::Arc;

use num_complex::Complex64;

use crate::green::Green;
use crate::outline::{Kind, Outline, Shape};
use crate::site::{Length, Point, Refusal, Site};
use ambient::AmbientHead;
use ambient_error::AmbientError;

/// The heads of one aquifer with its wells.
pub struct WellField {
    outline: Outline,
    green: Arc<dyn Green>,
    transmissivity_m2_d: f64,
    wells: Vec<FieldWell>,
    ambient: AmbientHead,
    /// In a closed basin whose head is fixed at one place: that place.
    datum: Option<Complex64>,
    influence_radius_m: Option<f64>,
    error_bound_m: f64,
    hardest_edge: Option<usize>,
    notes: Vec<String>,
}

/// A well in the canonical frame.
#[derive(Clone, Copy, Debug)]
struct FieldWell {
    /// Index in `Site::wells`.
    index: usize,
    pole: Complex64,
    pumping_m3_d: f64,
    /// Radius of the circle that draws as the (stretched) borehole does.
    rim_m: f64,
}

impl WellField {
    /// Solves one aquifer.
    ///
    /// # Errors
    /// Where no steady state exists, the ambient head contradicts the edges, or
    /// the solver finds no heads; the refusals say what would help.
    pub fn solve(site: &Site, outline: Outline) -> Result<Self, Vec<Refusal>> {
        let mut notes = Vec::new();
        let refusals = |faults: Vec<AmbientError>| -> Vec<Refusal> {
            faults.into_iter().map(Refusal::from).collect()
        };
        outline
            .check_drainage(site)
            .map_err(|fault| vec![fault.into()])?;
        let wells = wells_of(site, &outline);
        let stated = stated::stated_gradient(site).map_err(refusals)?;
        let canonical = outline.frame.gradient_to_canonical(stated);
        let solved =
            solved::solve(site, &outline, &wells, canonical).map_err(|fault| vec![fault])?;
        let green: Arc<dyn Green> = match &solved {
            Some(solved) => solved.general.clone(),
            None => steady::green_of(site, &outline)
                .map_err(|fault| vec![fault])?
                .into(),
        };
        steady::note_radius(site, &outline, &mut notes);
        let hardest_edge = solved
            .as_ref()
            .and_then(|solved| solved.hardest_edge(&outline));
        let parts = match solved {
            Some(solved) => ambient::Built::BySolver(solved),
            None => ambient::Built::InClosedForm(recharge::of(site, &outline)),
        };
        let ambient =
            ambient::solve(site, &outline, green.as_ref(), parts, &mut notes).map_err(refusals)?;
        let datum = steady::datum(site, &outline, &mut notes);
        let has_river = outline.side_kinds().contains(&Kind::FixedHead);
        let mut field = Self {
            wells,
            transmissivity_m2_d: site.aquifer.transmissivity.si(),
            influence_radius_m: if has_river {
                None
            } else {
                site.aquifer.influence_radius.map(|radius| radius.si())
            },
            green,
            outline,
            ambient,
            datum,
            error_bound_m: 0.0,
            hardest_edge,
            notes,
        };
        field.error_bound_m = accuracy::bound_m(&field);
        accuracy::check(&field).map_err(|fault| vec![fault])?;
        Ok(field)
    }

    /// The outline it was solved on.
    pub fn outline(&self) -> &Outline {
        &self.outline
    }

    /// Whether a point lies in this aquifer or on its edge.
    pub fn holds(&self, point: Point) -> bool {
        self.outline.holds(point)
    }

    /// Drawdown, metres, that the well `Site::wells[well]` of this aquifer
    /// causes at a point; that of its rim within its rim. Well loss is left
    /// out. NaN where the aquifer holds no such well or not the point.
    pub fn drawdown_by_m(&self, well: usize, point: Point) -> f64 {
        self.well(well).map_or(f64::NAN, |source| {
            source.pumping_m3_d * self.unit_drawdown_by(well, point)
        })
    }

    /// Drawdown at `point` for each m³/d that `Site::wells[well]` pumps, G/T in
    /// d/m²; that of its rim within its rim. NaN as for `drawdown_by_m`.
    pub fn unit_drawdown_by(&self, well: usize, point: Point) -> f64 {
        let Some(source) = self.well(well).filter(|_| self.holds(point)) else {
            return f64::NAN;
        };
        let z = self.outline.frame.to_canonical(point);
        let green = self.green.value_outside_rim(z, source.pole, source.rim_m);
        (green - self.green_at_datum(source)) / self.transmissivity_m2_d
    }

    /// The well's own drawdown at its rim, metres, well loss left out:
    /// Q/(2πT) ln(1/r_w) + Q/T · R.
    pub fn own_drawdown_m(&self, well: usize) -> f64 {
        self.well(well).map_or(f64::NAN, |source| {
            let logarithm = -source.rim_m.ln() * 0.5 * FRAC_1_PI;
            let at_rim = logarithm + self.green.regular_part(source.pole);
            let green = at_rim - self.green_at_datum(source);
            self.strength_m(source) * green
        })
    }

    /// Water that edge `Site::edges[edge]` gives to well `Site::wells[well]`,
    /// m³/d; negative for an injecting well, zero for a barrier.
    pub fn inflow_m3_d(&self, edge: usize, well: usize) -> f64 {
        let Some(source) = self.well(well) else {
            return 0.0;
        };
        let share: f64 = self
            .outline
            .sides
            .iter()
            .enumerate()
            .flat_map(|(side, pieces)| pieces.iter().map(move |piece| (side, piece)))
            .filter(|(_, piece)| piece.edge == edge)
            .map(|(side, piece)| self.green.share(side, piece.along.clone(), source.pole))
            .sum();
        source.pumping_m3_d * share
    }

    /// Water that a part of a side gives to all wells of this aquifer, m³/d.
    pub fn inflow_through_m3_d(&self, side: usize, along: &Range<f64>) -> f64 {
        let given =
            |well: &FieldWell| well.pumping_m3_d * self.green.share(side, along.clone(), well.pole);
        self.wells.iter().map(given).sum()
    }

    /// Recharge that leaves the aquifer through a part of a side, m³/d; none
    /// where the part is endless. It does so with or without wells: what they
    /// take from a river is `inflow_m3_d`.
    pub fn recharge_through_m3_d(&self, side: usize, along: &Range<f64>) -> Option<f64> {
        let through = |recharge: recharge::Recharge| recharge.through_m3_d(side, along);
        self.ambient.recharge.map_or(Some(0.0), through)
    }

    /// Recharge that edge `Site::edges[edge]` takes up, m³/d, none where it
    /// takes up recharge along an endless reach. Over all edges of a closed outline this is
    /// N times its area.
    pub fn recharge_to_m3_d(&self, edge: usize) -> Option<f64> {
        let pieces = self.outline.sides.iter().enumerate();
        pieces
            .flat_map(|(side, pieces)| pieces.iter().map(move |piece| (side, piece)))
            .filter(|(_, piece)| piece.edge == edge)
            .map(|(side, piece)| self.recharge_through_m3_d(side, &piece.along))
            .sum()
    }

    /// A proven bound on the error of a head, metres; of a closed form, which
    /// has no other error, on its rounding.
    pub fn error_bound_m(&self) -> f64 {
        self.error_bound_m
    }

    /// Whether the heads are proven right to within `accepted`.
    pub fn is_accurate(&self, accepted: Length) -> bool {
        self.error_bound_m <= accepted.si()
    }

    /// The edge, by its index in `Site::edges`, beside which the bound is
    /// largest; none where rounding alone makes it.
    pub fn hardest_edge(&self) -> Option<usize> {
        self.hardest_edge
    }

    /// Number of unknowns of the general solver; none in closed form.
    pub fn unknowns(&self) -> Option<usize> {
        let solved = self.ambient.solved.as_ref();
        solved.map(|solved| solved.general.unknowns())
    }

    /// How it was computed, in a few words.
    pub fn method(&self) -> String {
        if let Some(radius_m) = self.influence_radius_m {
            return format!("Thiem's formula with superposed images within {radius_m:.0} m");
        }
        match self.outline.shape {
            Shape::Wedge { .. } => "image wells in closed form, as a strip in the logarithm",
            Shape::Disk { .. } | Shape::DiskExterior { .. } => "one image by inversion",
            Shape::CloggedHalfPlane { .. } => {
                "one image well and a line of image sinks behind it, in closed form"
            }
            Shape::General => "general solver on the edges, its error proven",
            Shape::Axes { .. } if self.is_closed_basin() => {
                "image wells in closed form, pumping and injection in balance"
            }
            Shape::Axes { .. } => "image wells in closed form",
        }
        .to_owned()
    }

    /// What the reader should know of this solution: assumptions made where
    /// the plan was silent.
    pub fn notes(&self) -> &[String] {
        &self.notes
    }

    /// The nearest images of a well in site coordinates, nearest first, with
    /// sign (±1) and order; at most `count`.
    pub fn images(&self, well: usize, count: usize) -> Vec<(Point, f64, u32)> {
        let Some(source) = self.well(well) else {
            return Vec::new();
        };
        let images = self.green.nearest_images(source.pole, count).into_iter();
        images
            .map(|image| {
                (
                    self.outline.frame.to_site(image.at),
                    image.sign,
                    image.order,
                )
            })
            .collect()
    }

    /// The wells stand in order of their index.
    fn well(&self, index: usize) -> Option<&FieldWell> {
        let found = self.wells.binary_search_by_key(&index, |well| well.index);
        found.ok().and_then(|position| self.wells.get(position))
    }

    /// Whether barriers close the aquifer on all sides, so that pumping and
    /// injection must balance.
    pub fn is_closed_basin(&self) -> bool {
        !self.outline.side_kinds().contains(&Kind::FixedHead) && self.influence_radius_m.is_none()
    }

    /// Q/T, metres.
    fn strength_m(&self, well: &FieldWell) -> f64 {
        well.pumping_m3_d / self.transmissivity_m2_d
    }

    fn green_at_datum(&self, well: &FieldWell) -> f64 {
        self.datum.map_or(0.0, |datum| {
            self.green.value_outside_rim(datum, well.pole, well.rim_m)
        })
    }
}

/// The wells of an outline in its canonical frame, in order of their index.
fn wells_of(site: &Site, outline: &Outline) -> Vec<FieldWell> {
    let rim_factor = outline.frame.stretch.rim_factor();
    let of_well = |&index: &usize| {
        let well = site.wells.get(index)?;
        Some(FieldWell {
            index,
            pole: outline.frame.to_canonical(well.at),
            pumping_m3_d: well.pumping.si(),
            rim_m: well.radius.si() * rim_factor,
        })
    };
    let mut wells: Vec<FieldWell> = outline.wells.iter().filter_map(of_well).collect();
    wells.sort_by_key(|well| well.index);
    wells
}
