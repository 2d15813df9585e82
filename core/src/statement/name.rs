//! The names of the keys that are worked out.

use crate::keys::{self, Key, Place};
use crate::sides::Side;
use std::fmt;

/// A key that is worked out, in its parts: put together only where a problem names it.
#[derive(Clone, Copy)]
pub(super) struct Name {
    pub(super) phase: Option<u8>,
    /// Its slot, or that of the key behind `phaseN.`; one more than there are for `phaseN.from`.
    slot: usize,
}

impl Name {
    /// The key of a row for the whole engagement.
    pub(super) const fn whole(row: usize) -> Name {
        Name {
            phase: None,
            slot: 2 * row,
        }
    }

    /// The key of a row for one side.
    pub(super) const fn of_side(side: Side, row: usize) -> Name {
        Name {
            phase: None,
            slot: 2 * row + matches!(side, Side::Y) as usize,
        }
    }

    /// `phaseN.from`.
    pub(super) const fn from_of_phase(number: u8) -> Name {
        Name {
            phase: Some(number),
            slot: keys::SLOTS,
        }
    }

    pub(super) const fn in_phase(self, number: u8) -> Name {
        Name {
            phase: Some(number),
            ..self
        }
    }

    /// The slot of the key, or of that behind `phaseN.`; one more than there are for `phaseN.from`.
    pub(super) fn slot(self) -> usize {
        self.slot
    }

    pub(super) fn row(self) -> &'static Key {
        if self.slot == keys::SLOTS {
            &keys::PHASE_FROM
        } else {
            keys::row(self.slot)
        }
    }

    fn side(self) -> Option<Side> {
        let side = if self.slot.is_multiple_of(2) {
            Side::X
        } else {
            Side::Y
        };
        (self.row().place == Place::Side).then_some(side)
    }

    /// Whether `key` is this key of the phase with `number`.
    pub(super) fn is_in_phase(self, number: u8, key: &str) -> bool {
        let behind = |key| {
            let key = behind_phase(number, key)?;
            match self.side() {
                Some(side) => key.strip_prefix(side.letter())?.strip_prefix('.'),
                None => Some(key),
            }
        };
        behind(key) == Some(self.row().name)
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
        if let Some(side) = self.side() {
            write!(f, "{}.", side.letter())?;
        }
        f.write_str(self.row().name)
    }
}
