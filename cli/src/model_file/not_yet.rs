//! Keys that are read and checked but whose capability is not built yet.

/// One capability that is not built yet.
#[derive(Debug, Clone, Copy)]
pub(super) struct NotYet {
    /// Key path with `[]` for any entry of a list and `*` for any name.
    pub(super) key: &'static str,
    /// What the key asks for.
    pub(super) what: &'static str,
}

const fn not_yet(key: &'static str, what: &'static str) -> NotYet {
    NotYet { key, what }
}

/// The list; an entry is deleted when its capability is built.
pub(super) const NOT_YET_AVAILABLE: &[NotYet] = &[
    not_yet("cracks", "seen cracks"),
    not_yet("situations[].crack_water_above_tip_m", "water in cracks"),
    not_yet("remedies", "remedies"),
];

/// The entry for a key pattern, if its capability is not built yet.
pub(super) fn find(pattern: &str) -> Option<&'static NotYet> {
    NOT_YET_AVAILABLE.iter().find(|entry| entry.key == pattern)
}
