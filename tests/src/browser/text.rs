//! How the page's text lies: whether any of it runs over other text, is cut off, or sticks out.

use serde_json::{Value, json};

use super::{Browser, Engine};

/// Every line of text that can be seen, and what is wrong with it. What covers by design is left out: the sentence that
/// stays in sight, and what waits in a strip that rolls.
const LOOK: &str = "
    const apart = '.said, .unseen, .skip, .formula, pre, option, svg, canvas, noscript, [hidden]';
    const lines = [], wrong = [], width = document.documentElement.clientWidth; // without a bar at the side
    const clipped = (part) => part && (getComputedStyle(part).clipPath === 'inset(50%)' || clipped(part.parentElement));
    const walk = document.createTreeWalker(document.body, NodeFilter.SHOW_TEXT);
    for (let node = walk.nextNode(); node; node = walk.nextNode()) {
      const parent = node.parentElement;
      if (!node.data.trim() || parent.closest(apart) || !parent.checkVisibility({visibilityProperty: true}) || clipped(parent)) continue;
      const range = document.createRange();
      range.selectNodeContents(node);
      const strip = parent.closest('.roll, .rows-roll');
      for (const box of range.getClientRects()) {
        if (box.width < 1 || box.height < 1) continue;
        const words = node.data.trim().slice(0, 40);
        if (!strip && (box.right > width + 1 || box.left < -1)) wrong.push('sticks out: ' + words);
        // A line's box is higher than its letters: what only touches is no overlap.
        const slack = box.height * 0.22;
        lines.push({top: box.top + slack, bottom: box.bottom - slack, left: box.left + 1, right: box.right - 1, parent, words, strip});
      }
    }
    for (let i = 0; i < lines.length; i += 1)
      for (let j = i + 1; j < lines.length; j += 1) {
        const a = lines[i], b = lines[j];
        if (a.parent === b.parent || a.strip || b.strip) continue;
        if (a.left < b.right && b.left < a.right && a.top < b.bottom && b.top < a.bottom) wrong.push(a.words + ' | over | ' + b.words);
      }
    for (const part of document.querySelectorAll('body *')) {
      if (part.closest(apart + ', .roll') || !part.checkVisibility()) continue;
      const style = getComputedStyle(part), cuts = (flow) => flow === 'hidden' || flow === 'clip';
      // A name that is longer than its field is moved along in it; a number must be seen whole.
      if (part.tagName === 'INPUT' && part.inputMode !== 'decimal') continue;
      if (cuts(style.overflowX) && part.scrollWidth > part.clientWidth + 1 && part.clientWidth > 1) wrong.push('cut: ' + part.tagName + '#' + part.id + '.' + part.className);
      // A choice or a button must show its words whole.
      if (part.tagName === 'BUTTON' && part.scrollWidth > part.clientWidth + 1) wrong.push('button cut: ' + part.innerText);
    }
    const over = document.documentElement.scrollWidth - width;
    if (over > 0) {
      const wide = [...document.querySelectorAll('body *')].filter((part) => !part.closest('.roll > *, .formula > *') && part.checkVisibility() && part.getBoundingClientRect().right > width);
      wrong.push('the page is ' + over + ' px too wide: ' + wide.slice(0, 8).map((part) => part.tagName + '#' + part.id + '.' + part.className).join(', '));
    }
    return wrong;";

impl Browser {
    /// What is wrong with how the text lies, each with `what` before it.
    #[track_caller]
    pub fn text_that_lies_badly(&self, what: &str) -> Vec<String> {
        let found = self.script(LOOK, vec![]);
        let wrong = found.as_array().expect("a list");
        let words = wrong.iter().filter_map(Value::as_str);
        words.map(|words| format!("{what}: {words}")).collect()
    }

    /// Gives all text another size, in parts of the usual: as a reader sets it for every page, so that what is measured
    /// in letters follows, or for this page alone.
    pub fn text_size(&self, times: f64, for_every_page: bool) {
        if for_every_page && self.engine == Engine::Firefox {
            let script = "for (const font of ['variable', 'monospace']) {
                const name = `font.size.${font}.x-western`;
                Services.prefs.setIntPref(name, Math.round((font === 'variable' ? 16 : 13) * arguments[0]));
            }";
            self.firefox(script, vec![json!(times)]);
        } else if for_every_page {
            self.devtools(
                "Page.setFontSizes",
                json!({"fontSizes": {"standard": (16.0 * times).round(), "fixed": (13.0 * times).round()}}),
            );
        } else {
            let script = "document.documentElement.style.fontSize = arguments[0];
                dispatchEvent(new Event('resize'));";
            self.script(script, vec![json!(format!("{}%", 100.0 * times))]);
        }
    }
}
