//! What is said about passing an engagement on.

use crate::keys::{Kind, find};

/// Stands beside every copy of the text.
pub use crate::words::HANDLE;

/// Stands in place of the address of a page that was opened from a file.
pub const NO_ADDRESS: &str = "This copy was opened from a file: its path means nothing on another machine, and tells too much. Use \
     “The text” instead.";

/// Stands in place of what needs an outcome.
pub const NO_OUTCOME: &str =
    "There is no outcome for the text as it stands: only the text itself can be passed on.";

/// Stands behind the name of a file in a frame, or in a window that a frame has opened: either may allow no downloads.
pub const FRAMED: &str = "may not have come: a frame, or a window opened from one, often allows no downloads. Then open \
the page by itself, or copy what stands below.";

/// The same where there is nothing to copy.
pub const FRAMED_PICTURE: &str = "may not have come: a frame, or a window opened from one, often allows no downloads. Then open the page by itself.";

/// Stands beside a file that was offered.
pub const OFFERED: &str = "The file went to the browser's downloads.";

/// Stands beside a picture that could not be made.
pub const NO_PICTURE: &str = "This browser could not make the picture.";

/// Stands where the browser keeps nothing for the page.
pub const NO_STORAGE: &str = "This browser does not let the page keep anything here, as in some frames and windows. Save a file instead.";

/// Stands where there is no room.
pub const NO_ROOM: &str =
    "There is no room left to keep it. Forget something that is kept, or save a file instead.";

/// Stands where nothing is kept.
pub const NOTHING_KEPT: &str = "Nothing is kept here.";

/// Stands beside what is kept.
pub const KEPT_WHERE: &str = "In this browser, on this machine, until it is forgotten: whoever uses this browser can \
read it, and in some browsers so can other pages opened from files.";

/// Stands after everything was forgotten.
pub const FORGOTTEN: &str = "Everything kept here is forgotten.";

/// Stands where a file is too large to hold an engagement, or could not be read.
pub const UNREADABLE: &str = "This file could not be read as text. Nothing was opened.";

/// How much of a text of so many characters the limit of its key leaves: "12 of 1000 characters".
pub fn room(key: &str, text: &str) -> Option<String> {
    let row = find(key)?;
    let Kind::Text(most) = row.kind else { return None };
    Some(format!("{} of {most} characters", text.trim().chars().count()))
}

#[cfg(test)]
mod tests {
    use super::room;

    #[test]
    fn the_room_of_a_text_is_counted_in_characters() {
        assert_eq!(room("note", "größe ").as_deref(), Some("5 of 1000 characters"));
        assert_eq!(room("x.start", "6"), None);
    }
}
