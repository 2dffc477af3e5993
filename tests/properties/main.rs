//! Laws that hold for every plan, on random plans of every shape.
//!
//! | file | law |
//! |---|---|
//! | `rivers` | the head is the stage on rivers |
//! | `barriers` | no water crosses a barrier |
//! | `gradients` | the gradient of the head is what heads differ by |
//! | `harmonicity` | the head is the mean of the heads around it |
//! | `reciprocity` | G(a, b) = G(b, a) > 0 |
//! | `superposition` | wells superpose; double rates double drawdowns |
//! | `balance` | rivers give what the wells pump, in shares of 0 to 1 |
//! | `mounds` | recharge obeys T ∇²h = −N, and rivers take up N times the area |
//! | `clogged_banks` | K ∂h/∂n = (h − stage)/c on a clogged bank |
//! | `motions` | moving, turning, mirroring and enlarging carry the answer along |
//! | `rims` | the level in a well does not depend on where in its rim one looks |
//! | `contours` | contours never cross and lie on their level |
//! | `bends` | all of these in outlines without a closed form, within the bound |
//! | `solvers` | closed forms and the general solver agree within its bound |
//! | `texts` | a plan as text, in either unit, says the same |
//!
//! Tolerances: drawdowns are a few metres, Σ abs(Q/T)/(2π) at most 5 m. The
//! closed forms promise 1e-9 m at places within some sizes of the wells, which
//! is asserted wherever heads are compared; narrower bounds are derived beside
//! their assertion.

#![expect(
    clippy::expect_used,
    clippy::panic,
    clippy::indexing_slicing,
    reason = "a test stops where its plan is not what it expects"
)]

mod balance;
mod barriers;
mod bends;
mod bent_drawings;
mod clogged_banks;
mod contours;
mod drawings;
mod gradients;
mod harmonicity;
mod motions;
mod mounds;
mod reciprocity;
mod rims;
mod rivers;
mod solvers;
mod superposition;
mod texts;

/// What the closed forms promise of a head, metres.
const HEAD_TOLERANCE_M: f64 = 1e-9;

/// So many random plans a law, or as many as the environment variable
/// `PROPTEST_CASES` says. Failing plans are printed, not kept in files.
fn cases(count: u32) -> proptest::test_runner::Config {
    let wished = std::env::var("PROPTEST_CASES").ok();
    proptest::test_runner::Config {
        cases: wished.and_then(|text| text.parse().ok()).unwrap_or(count),
        failure_persistence: None,
        ..proptest::test_runner::Config::default()
    }
}
