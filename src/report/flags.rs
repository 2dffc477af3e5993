//! Every flag with its reason, its rule and what would clear it.

use serde::Serialize;

use crate::findings::FlagCode;
use crate::layers::Planned;
use crate::layers::words::Words;

/// The flags of one kind.
#[derive(Serialize)]
pub struct FlagGroup {
    code: &'static str,
    title: &'static str,
    rule: String,
    /// Whether a limit is broken.
    breaks_a_limit: bool,
    flags: Vec<FlagRow>,
}

#[derive(Serialize)]
struct FlagRow {
    who: String,
    reason: String,
    clearing: String,
}

/// The flags, most severe first, kind by kind.
pub fn groups(planned: &Planned<'_>) -> Vec<FlagGroup> {
    let words = Words::of(planned);
    let flags = &planned.findings.flags;
    flags
        .chunk_by(|a, b| a.code == b.code)
        .filter_map(|group| {
            let code: FlagCode = group.first()?.code;
            Some(FlagGroup {
                code: code.name(),
                title: Words::flag_title(code),
                rule: words.rule(code),
                breaks_a_limit: code.breaks_a_limit(),
                flags: group
                    .iter()
                    .map(|flag| FlagRow {
                        who: words.who(flag.who),
                        reason: capitalised(&words.reason(flag)),
                        clearing: words.clearing(flag).unwrap_or_else(|| match code {
                            FlagCode::NoLimitGiven => "Cleared by giving a limit.".into(),
                            _ => "–".into(),
                        }),
                    })
                    .collect(),
            })
        })
        .collect()
}

/// A sentence with a capital at its head.
pub fn capitalised(sentence: &str) -> String {
    let mut characters = sentence.chars();
    characters.next().map_or_else(String::new, |first| {
        first.to_uppercase().chain(characters).collect()
    })
}
