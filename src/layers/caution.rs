//! The caution that every output carries.

/// What a reader must know before acting on any result.
pub const CAUTION: &str = "Screening-level results for a homogeneous, confined aquifer in steady \
state whose rivers and barriers penetrate it fully. A licensed hydrogeologist must review them \
before anything is drilled or permitted; local permits and codes decide. Never drill a well, or \
change a supply well, on this alone.";
