//! All aquifers of a site, each solved: where a river parts the wells, both
//! banks stand side by side.

use super::interference;
use crate::field::WellField;
use crate::outline;
use crate::site::{Point, Refusal, Site};

/// A site with the heads of every aquifer that holds a well.
pub struct Solution {
    site: Site,
    fields: Vec<WellField>,
    field_of_well: Vec<Option<usize>>,
}

impl Solution {
    /// Finds the aquifers of a site and solves each.
    ///
    /// # Errors
    /// A site whose tables would be too large, or every refusal of every
    /// aquifer, in the plan's order of aquifers.
    pub fn of(site: Site) -> Result<Self, Vec<Refusal>> {
        interference::refuse_large(&site).map_err(|refusal| vec![refusal])?;
        let mut fields = Vec::new();
        let mut refusals = Vec::new();
        for outline in outline::find(&site)? {
            match WellField::solve(&site, outline) {
                Ok(field) => fields.push(field),
                Err(found) => refusals.extend(found),
            }
        }
        if !refusals.is_empty() {
            return Err(refusals);
        }
        let mut field_of_well = vec![None; site.wells.len()];
        for (index, field) in fields.iter().enumerate() {
            for &well in &field.outline().wells {
                if let Some(slot) = field_of_well.get_mut(well) {
                    *slot = Some(index);
                }
            }
        }
        Ok(Self {
            site,
            fields,
            field_of_well,
        })
    }

    /// The problem that was solved.
    pub fn site(&self) -> &Site {
        &self.site
    }

    /// One field an aquifer.
    pub fn fields(&self) -> &[WellField] {
        &self.fields
    }

    /// The aquifer that holds a well, by its index in `Site::wells`.
    pub fn field_of_well(&self, well: usize) -> Option<&WellField> {
        self.fields
            .get(self.field_of_well.get(well).copied().flatten()?)
    }

    /// The aquifer that holds a place; on a river between two of them the
    /// first, whose head there is the same stage.
    pub fn field_at(&self, point: Point) -> Option<&WellField> {
        self.fields.iter().find(|field| field.holds(point))
    }

    /// Heads, metres, in point order; NaN outside every aquifer.
    pub fn heads_m(&self, points: &[Point]) -> Vec<f64> {
        self.gather(points, WellField::heads_m)
    }

    /// Drawdowns, metres, positive where the head falls; NaN outside.
    pub fn drawdowns_m(&self, points: &[Point]) -> Vec<f64> {
        self.gather(points, WellField::drawdowns_m)
    }

    /// Heads before any pumping, metres, in point order; NaN outside.
    pub fn ambient_heads_m(&self, points: &[Point]) -> Vec<f64> {
        self.gather(points, WellField::ambient_heads_m)
    }

    /// Drawdown, metres, that one well causes at a place; nothing in another
    /// aquifer than its own, since edges penetrate fully.
    pub fn drawdown_by_m(&self, well: usize, point: Point) -> f64 {
        self.field_of_well(well)
            .filter(|field| field.holds(point))
            .map_or(0.0, |field| field.drawdown_by_m(well, point))
    }

    /// The head at a place before any pumping, metres; NaN outside.
    pub fn ambient_head_m(&self, point: Point) -> f64 {
        self.field_at(point)
            .map_or(f64::NAN, |field| field.ambient_head_m(point))
    }

    /// The largest of the fields' proven bounds on the error of a head, metres.
    pub fn error_bound_m(&self) -> f64 {
        self.fields
            .iter()
            .map(WellField::error_bound_m)
            .fold(0.0, f64::max)
    }

    /// Asks each aquifer for the points it holds.
    fn gather(
        &self,
        points: &[Point],
        evaluate: impl Fn(&WellField, &[Point]) -> Vec<f64>,
    ) -> Vec<f64> {
        if let [field] = self.fields.as_slice() {
            return evaluate(field, points);
        }
        let mut values = vec![f64::NAN; points.len()];
        for field in &self.fields {
            let (places, held): (Vec<usize>, Vec<Point>) = points
                .iter()
                .enumerate()
                .filter(|&(place, &point)| {
                    values.get(place).is_some_and(|value| value.is_nan()) && field.holds(point)
                })
                .map(|(place, &point)| (place, point))
                .unzip();
            for (place, value) in places.into_iter().zip(evaluate(field, &held)) {
                if let Some(slot) = values.get_mut(place) {
                    *slot = value;
                }
            }
        }
        values
    }
}
