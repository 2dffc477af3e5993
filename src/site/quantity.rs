//! Quantities with their dimension in the type, held in SI metres and days.
//!
//! A length is not a rate: each kind is a type of its own, made from its SI
//! value and read back by it. Units as people write them live in `plan`.

/// Declares one kind of quantity: a number with its dimension in the type.
macro_rules! quantity {
    ($(#[$doc:meta])* $name:ident, $unit:literal) => {
        $(#[$doc])*
        #[derive(Clone, Copy, Debug, PartialEq, PartialOrd)]
        pub struct $name(f64);

        impl $name {
            #[doc = concat!("The quantity whose value in ", $unit, " is `value`.")]
            pub const fn from_si(value: f64) -> Self {
                Self(value)
            }

            #[doc = concat!("The value in ", $unit, ".")]
            pub const fn si(self) -> f64 {
                self.0
            }
        }
    };
}

quantity!(
    /// A length, thickness, distance or drawdown.
    Length,
    "metres"
);
quantity!(
    /// An elevation above the plan's datum: a head, a stage, a roof.
    Level,
    "metres"
);
quantity!(
    /// A volume each day; positive pumps water out of the aquifer.
    Rate,
    "m³/d"
);
quantity!(
    /// Hydraulic conductivity.
    Conductivity,
    "m/d"
);
quantity!(
    /// Transmissivity: conductivity times thickness.
    Transmissivity,
    "m²/d"
);
quantity!(
    /// A length each day: areal recharge.
    Flux,
    "m/d"
);
quantity!(
    /// A span of time.
    Time,
    "days"
);
quantity!(
    /// The coefficient C of the well loss s = C Q².
    WellLoss,
    "d²/m⁵"
);

impl std::fmt::Display for Flux {
    /// "0.0002295 m/d": four figures, more than any recharge is known to.
    fn fmt(&self, formatter: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        let rounded = format!("{:.3e}", self.0);
        let shown = rounded.parse::<f64>().unwrap_or(self.0);
        write!(formatter, "{shown} m/d")
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    /// 3.3 in/yr by hand: 3.3 · 0.0254 / 365.25 = 0.000229486653 m/d.
    #[test]
    fn a_flux_is_told_with_four_figures() {
        let flux = Flux::from_si(3.3 * 0.0254 / 365.25);
        assert_eq!(flux.to_string(), "0.0002295 m/d");
        assert_eq!(Flux::from_si(0.0005).to_string(), "0.0005 m/d");
    }
}
