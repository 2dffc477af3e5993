//! Why a command ended without doing its work, and the exit status for it.

use std::io;
use std::process::ExitCode;

use super::console::Console;
use crate::findings::SurveyError;
use crate::layers::{LayerError, WriteError};
use crate::plan::PlanFaults;

/// Why a command ended.
#[derive(Debug)]
pub enum Failure {
    /// The plan is refused; every fault at its place.
    Plan(PlanFaults),
    /// Something else the user can change, in one or more lines.
    Refused(String),
    /// Everything was done, with `--strict`, and something is not as it must be.
    NotKept {
        /// How many limits are broken.
        limits: usize,
        /// How many aquifers miss the plan's accuracy.
        aquifers: usize,
    },
    /// It has been said already.
    Said,
    /// Whoever read the output stopped reading.
    BrokenPipe,
}

impl Failure {
    /// Says why, and gives the exit status.
    pub fn report(&self, console: &Console) -> ExitCode {
        match self {
            Self::Plan(faults) => {
                console.error(&faults.render(console.colour_on_stderr()));
                ExitCode::from(2)
            }
            Self::Refused(reason) => {
                console.error(&format!("error: {reason}"));
                ExitCode::from(2)
            }
            Self::NotKept { limits, aquifers } => {
                console.error(&not_kept(*limits, *aquifers));
                ExitCode::from(3)
            }
            Self::Said => ExitCode::from(2),
            Self::BrokenPipe => ExitCode::SUCCESS,
        }
    }
}

/// How much is not as it must be.
fn not_kept(limits: usize, aquifers: usize) -> String {
    let broken = match limits {
        0 => None,
        1 => Some("1 limit is broken".to_owned()),
        _ => Some(format!("{limits} limits are broken")),
    };
    let missed = match aquifers {
        0 => None,
        1 => Some("1 aquifer misses the plan's accuracy".to_owned()),
        _ => Some(format!("{aquifers} aquifers miss the plan's accuracy")),
    };
    let said: Vec<String> = broken.into_iter().chain(missed).collect();
    said.join("; ")
}

impl From<PlanFaults> for Failure {
    fn from(faults: PlanFaults) -> Self {
        Self::Plan(faults)
    }
}

impl From<WriteError> for Failure {
    fn from(error: WriteError) -> Self {
        Self::Refused(error.to_string())
    }
}

impl From<LayerError> for Failure {
    fn from(error: LayerError) -> Self {
        Self::Refused(error.to_string())
    }
}

impl From<SurveyError> for Failure {
    fn from(error: SurveyError) -> Self {
        Self::Refused(format!("the map cannot be drawn: {error}"))
    }
}

impl From<io::Error> for Failure {
    fn from(error: io::Error) -> Self {
        if error.kind() == io::ErrorKind::BrokenPipe {
            Self::BrokenPipe
        } else {
            Self::Refused(format!("cannot write the results: {error}"))
        }
    }
}
