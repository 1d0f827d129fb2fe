//! Keys that are read and checked but whose capability is not built yet.

/// Which forms of a value are meant.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(super) enum Form {
    /// Every form.
    Any,
    /// Only a list, a table or a number; a word such as "dry, observed" is answered already.
    NotAWord,
}

/// One capability that is not built yet.
#[derive(Debug, Clone, Copy)]
pub(super) struct NotYet {
    /// Key path with `[]` for any entry of a list and `*` for any name.
    pub(super) key: &'static str,
    /// Forms that are refused.
    pub(super) form: Form,
    /// What the key asks for.
    pub(super) what: &'static str,
}

const fn not_yet(key: &'static str, form: Form, what: &'static str) -> NotYet {
    NotYet { key, form, what }
}

/// The list; an entry is deleted when its capability is built.
pub(super) const NOT_YET_AVAILABLE: &[NotYet] = &[
    not_yet("joint_sets", Form::Any, "sets of planes of weakness"),
    not_yet("cracks", Form::Any, "seen cracks"),
    not_yet("situations[].groundwater", Form::NotAWord, "a water table"),
    not_yet("situations[].sea_level_m", Form::NotAWord, "the sea on the face"),
    not_yet("situations[].above_table", Form::NotAWord, "suction above the water table"),
    not_yet("situations[].crack_water_above_tip_m", Form::Any, "water in cracks"),
    not_yet("remedies", Form::Any, "remedies"),
];

/// The entry for a key pattern, if its capability is not built yet.
pub(super) fn find(pattern: &str, is_word: bool) -> Option<&'static NotYet> {
    NOT_YET_AVAILABLE.iter().find(|entry| entry.key == pattern && !(is_word && entry.form == Form::NotAWord))
}
