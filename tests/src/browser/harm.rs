//! What a hard day does to a page: a program that traps, and a browser that refuses what it is asked for.
//!
//! The page has nothing in it for this. A trap is a true one: the program's own function for memory, which its glue
//! has at hand, is asked for more than there is, in the middle of one of the program's calls to the browser. So the
//! page that is tested is the very page that is shipped.

use std::time::Instant;

use fantoccini::wd::WindowHandle;

use super::{Browser, PATIENCE};

/// Defines `trapIn(object, method, which)`: the next call of the method for whose arguments `which` is true traps.
const TRAP: &str = "window.trapIn = (object, method, which) => {
    const sound = object[method];
    object[method] = function (...all) {
      if (!which(...all)) return sound.apply(this, all);
      object[method] = sound;
      window.trapped = true;
      return wasm_bindgen.initSync({}).__wbindgen_malloc(-1, 1); // the program that runs
    };
  };";

/// In what the program is when it traps.
#[derive(Clone, Copy, Debug)]
pub enum Doing {
    /// It works out what was typed: it looks for the sentence's place.
    Working,
    /// It draws.
    Drawing,
    /// It speaks, as a timer told it to.
    Speaking,
    /// It shows the title, which is before it works anything out, and also at the start.
    Naming,
}

impl Doing {
    fn script(self) -> String {
        let found =
            |id: &str| format!("trapIn(Document.prototype, 'getElementById', (id) => id === '{id}');");
        match self {
            Self::Working => found("sentence"),
            Self::Speaking => found("live"),
            Self::Naming => found("shown-title"),
            Self::Drawing => {
                "trapIn(CanvasRenderingContext2D.prototype, 'beginPath', () => true);".to_owned()
            }
        }
    }
}

impl Browser {
    /// Has the program trap at the next such moment.
    pub fn trap(&self, doing: Doing) {
        self.script(&format!("{TRAP}{}", doing.script()), vec![]);
    }

    /// Waits until it has.
    #[track_caller]
    pub fn wait_for_trap(&self) {
        self.wait("the trap", "return window.trapped;");
    }

    /// Has every program trap at its first such moment, so many times a document, from the next document on.
    pub fn trap_from_the_start(&self, doing: Doing, times: usize) {
        self.before_each_page(&format!("{TRAP}{}", doing.script().repeat(times)));
    }

    /// All that went wrong, but for traps; fails where nothing trapped.
    #[track_caller]
    pub fn complaints_but_traps(&self) -> Vec<String> {
        let (traps, others): (Vec<String>, Vec<String>) = self
            .complaints()
            .into_iter()
            .partition(|complaint| complaint.contains("RuntimeError: unreachable"));
        assert!(!traps.is_empty(), "nothing trapped");
        others
    }

    /// Opens another tab of the same browser and goes there; hands back the tab before, and the new one.
    pub fn new_tab(&self) -> (WindowHandle, WindowHandle) {
        let before = self.run("this tab", self.client().window());
        let fresh = self.run("another tab", self.client().new_window(true)).handle;
        self.go_to_tab(&fresh);
        (before, fresh)
    }

    /// Goes to the window that the page has opened.
    ///
    /// # Panics
    /// Where there is none but the first.
    pub fn go_to_opened_window(&self) {
        let before = self.run("this window", self.client().window());
        let end = Instant::now() + PATIENCE;
        let opened = loop {
            let windows = self.run("the windows", self.client().windows());
            if let Some(opened) = windows.into_iter().find(|window| *window != before) {
                break opened;
            }
            assert!(Instant::now() < end, "no window was opened");
        };
        self.go_to_tab(&opened);
    }

    /// Goes to a tab.
    pub fn go_to_tab(&self, tab: &WindowHandle) {
        self.run("a tab", self.client().switch_to_window(tab.clone()));
    }
}
