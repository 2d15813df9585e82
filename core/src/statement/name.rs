//! The names of the keys that are worked out.

use crate::keys::{self, Key};
use crate::sides::Side;
use std::fmt;

/// A key that is worked out, in its parts: put together only where a problem names it.
#[derive(Clone, Copy)]
pub(super) struct Name {
    pub(super) phase: Option<u8>,
    side: Option<Side>,
    pub(super) key: &'static str,
}

impl Name {
    pub(super) fn whole(key: &'static str) -> Name {
        Name {
            phase: None,
            side: None,
            key,
        }
    }

    pub(super) fn of_side(side: Side, key: &'static str) -> Name {
        Name {
            side: Some(side),
            ..Name::whole(key)
        }
    }

    pub(super) fn in_phase(self, number: u8) -> Name {
        Name {
            phase: Some(number),
            ..self
        }
    }

    /// The slot of the key, or of that behind `phaseN.`.
    pub(super) fn slot(self) -> Option<usize> {
        keys::slot_of(self.side, self.key)
    }

    pub(super) fn row(self) -> Option<&'static Key> {
        if self.phase.is_some() && self.key == "from" {
            return Some(&keys::PHASE_FROM);
        }
        self.slot().map(keys::row)
    }

    /// Whether `key` is this key of the phase with `number`.
    pub(super) fn is_in_phase(self, number: u8, key: &str) -> bool {
        let behind = |key| {
            let key = behind_phase(number, key)?;
            match self.side {
                Some(side) => key.strip_prefix(side.letter())?.strip_prefix('.'),
                None => Some(key),
            }
        };
        behind(key) == Some(self.key)
    }
}

/// What stands behind `phaseN.` in a key.
pub(super) fn behind_phase(number: u8, key: &str) -> Option<&str> {
    key.strip_prefix("phase")?
        .strip_prefix(char::from(b'0' + number))?
        .strip_prefix('.')
}

/// The row of a key as it stands in a link, also behind `phaseN.`.
pub(super) fn row_of(key: &str) -> Option<&'static Key> {
    match (1..=9).find_map(|number| behind_phase(number, key)) {
        Some("from") => Some(&keys::PHASE_FROM),
        Some(behind) => keys::find(behind),
        None => keys::find(key),
    }
}

impl fmt::Display for Name {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        if let Some(number) = self.phase {
            write!(f, "phase{number}.")?;
        }
        if let Some(side) = self.side {
            write!(f, "{}.", side.letter())?;
        }
        f.write_str(self.key)
    }
}
