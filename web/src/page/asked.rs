//! A question of the text beside all else that the page does: its answer, its map, and what is put into the fields from there.

use super::Page;
use crate::canvas;
use crate::form;
use crate::listen::After;
use aftercount_core::picture::Picture;
use aftercount_core::statement::Statement;

impl Page {
    /// Goes on with the question for a slice.
    pub(super) fn ask_on(&mut self) {
        self.ask_on.stop();
        let news = self.asking.go_on(&self.pairs);
        if !self.asking.is_done() {
            self.ask_on.start(0);
        }
        if self.good.is_none() {
            let sentence = self.sentence();
            self.dom.set_text("sentence", &sentence);
        }
        if news || self.asking.is_done() {
            self.frame.ask();
        }
    }

    /// The picture of the answer with what was stated, where the text as it stands has one.
    pub(crate) fn asked_picture(&self) -> Option<(&Picture, &Statement)> {
        let asked = self.asking.picture().filter(|_| self.current);
        asked.map(|(_, picture, statement)| (picture, statement))
    }

    /// The pointer is over the map.
    pub(crate) fn pointed_on_map(&mut self, at: (f64, f64)) {
        let ink = canvas::ink(&self.dom);
        self.asking.mapping().pointed(at, &ink);
    }

    /// A key on the map; whether it was one of its keys.
    pub(crate) fn map_key(&mut self, key: &str, far: bool) -> bool {
        let ink = canvas::ink(&self.dom);
        self.asking.mapping().key(key, far, &ink)
    }

    /// Another second reading of the map was chosen.
    pub(crate) fn choose_second(&mut self) {
        self.asking.mapping().choose_second();
        self.frame.ask();
    }

    /// Puts the place on the map into its two fields.
    pub(crate) fn put_place(&mut self) -> After {
        if let Some(changed) = self.asking.mapping().putting(&self.pairs) {
            self.change_at_once(|pairs| *pairs = changed);
            form::fill(&self.dom, &self.pairs);
        }
        After::Nothing
    }

    /// Puts an answer into its field.
    pub(crate) fn put_answer(&mut self, place: usize) -> After {
        let Some((key, changed)) = self.asking.putting(&self.pairs, place) else {
            return After::Nothing;
        };
        self.change_at_once(|pairs| *pairs = changed);
        form::fill(&self.dom, &self.pairs);
        After::GoTo(key)
    }

    /// Adds the condition that was chosen to what is wanted.
    pub(crate) fn add_condition(&mut self) -> After {
        if let Some(conditions) = self.asking.with_choice(&self.pairs) {
            self.change_at_once(|pairs| pairs.set("sothat", &conditions));
            form::fill(&self.dom, &self.pairs);
        }
        After::GoTo("sothat".into())
    }
}
