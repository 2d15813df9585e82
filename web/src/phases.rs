//! The phases as small tables: when each begins, and a line for each key that it changes. The fields bear the link's keys,
//! and what stands there is what the text holds.

use crate::dom::{Dom, append, set};
use crate::form;
use aftercount_core::keys::{self, KEYS, Key, Place};
use aftercount_core::laws::FireLaw;
use aftercount_core::number;
use aftercount_core::order::sort_by;
use aftercount_core::pairs::Pairs;
use aftercount_core::sides::Side;
use aftercount_core::statement::TimeUnit;
use aftercount_core::words::meaning;
use web_sys::{Element, HtmlElement, HtmlInputElement, HtmlSelectElement};

/// The most phases of a link.
const MOST: u8 = 9;

/// The tables as they were built last.
pub(crate) struct Phases {
    dom: Dom,
    /// The phases and their changes, and the names in their words.
    built: Option<(Vec<Shown>, [String; 2])>,
    /// Keys whose field was just emptied: it stays as long as somebody is in it.
    emptied: Vec<String>,
}

/// A phase: its number and the keys that it changes, `x.rate`.
#[derive(Clone, PartialEq, Eq)]
struct Shown {
    number: u8,
    changes: Vec<String>,
}

/// What a button asks for.
pub(crate) enum Ask {
    AddPhase,
    RemovePhase(u8),
    AddChange(u8),
    RemoveChange(String),
}

impl Ask {
    pub(crate) fn of(button: &Element) -> Option<Ask> {
        let number = || button.get_attribute("data-phase")?.parse().ok();
        match button.get_attribute("data-ask")?.as_str() {
            "add-phase" => Some(Ask::AddPhase),
            "remove-phase" => number().map(Ask::RemovePhase),
            "add-change" => number().map(Ask::AddChange),
            "remove-change" => button.get_attribute("data-key").map(Ask::RemoveChange),
            _ => None,
        }
    }
}

/// Whether `name` is a key of a phase.
pub(crate) fn is_phase_key(name: &str) -> bool {
    name.starts_with("phase") && keys::is_numbered(name)
}

/// The keys that a phase may change, in the order of the page: `x.fire`, `x.rate`, …
fn changeable() -> impl Iterator<Item = (&'static Key, String)> {
    let of_side = |letter: &'static str| KEYS.iter().map(move |key| (key, key.on(letter)));
    let all = of_side("x").chain(of_side("y"));
    all.filter(|(key, name)| key.place == Place::Side && keys::is_numbered(&format!("phase1.{name}")))
}

/// The text of a key with its outer blanks off; `None` where nothing stands.
fn written<'a>(pairs: &'a Pairs, key: &str) -> Option<&'a str> {
    pairs.get(key).map(str::trim).filter(|text| !text.is_empty())
}

/// What a change begins with: the value that holds without it, so that it changes nothing yet.
fn beginning(pairs: &Pairs, change: &str) -> String {
    let default = keys::find(change).and_then(|row| row.default).unwrap_or("1");
    written(pairs, change).unwrap_or(default).to_owned()
}

/// What a change to the law of fire needs beside it.
fn needed_with(law: &str) -> Vec<&'static str> {
    match FireLaw::of_word(law) {
        Some(FireLaw::None) | None => Vec::new(),
        Some(law) => ["rate"]
            .into_iter()
            .chain(law.law().needs.iter().copied())
            .collect(),
    }
}

/// Writes a change into a phase, with what it needs.
fn write_change(pairs: &mut Pairs, number: u8, change: &str) {
    let key = format!("phase{number}.{change}");
    pairs.set(&key, &beginning(pairs, change));
    if let Some(letter) = change.strip_suffix(".fire") {
        for needed in needed_with(&beginning(pairs, change)) {
            let key = format!("phase{number}.{letter}.{needed}");
            if written(pairs, &key).is_none() {
                pairs.set(&key, &beginning(pairs, &format!("{letter}.{needed}")));
            }
        }
    }
}

impl Phases {
    pub(crate) fn new(dom: &Dom) -> Phases {
        Phases {
            dom: dom.clone(),
            built: None,
            emptied: Vec::new(),
        }
    }

    /// Does what a button asks, to the pairs; the id of what then has the focus. `now` is when a new phase begins.
    pub(crate) fn ask(&self, pairs: &mut Pairs, ask: &Ask, now: &str) -> Option<String> {
        match ask {
            Ask::AddPhase => {
                let free = (1..=MOST).find(|number| !self.stands(pairs, *number))?;
                pairs.set(&format!("phase{free}.from"), now);
                Some(format!("phase{free}.from"))
            }
            Ask::RemovePhase(number) => {
                let stem = format!("phase{number}.");
                let keys: Vec<String> = pairs.iter().map(|(key, _)| key.to_owned()).collect();
                for key in keys.iter().filter(|key| key.starts_with(&stem)) {
                    pairs.set(key, "");
                }
                Some("add-phase".into())
            }
            Ask::AddChange(number) => {
                let order = ["x.rate", "y.rate"].map(str::to_owned);
                let all = order.into_iter().chain(changeable().map(|(_, name)| name));
                let mut free =
                    all.filter(|change| written(pairs, &format!("phase{number}.{change}")).is_none());
                let change = free.next()?;
                write_change(pairs, *number, &change);
                Some(format!("phase{number}.{change}.key"))
            }
            Ask::RemoveChange(key) => {
                pairs.set(key, "");
                let stem = key.split('.').next().unwrap_or_default();
                Some(format!("{stem}.add"))
            }
        }
    }

    /// Puts one change in the place of another; the id of what then has the focus.
    pub(crate) fn exchange(&self, pairs: &mut Pairs, old: &str, change: &str) -> Option<String> {
        let number = old.strip_prefix("phase")?.split('.').next()?.parse().ok()?;
        pairs.set(old, "");
        write_change(pairs, number, change);
        Some(format!("phase{number}.{change}.key"))
    }

    /// A field was typed in.
    pub(crate) fn typed(&mut self, key: &str, text: &str) {
        if is_phase_key(key) && text.is_empty() {
            self.emptied.push(key.to_owned());
        }
    }

    /// A field was left.
    pub(crate) fn left(&mut self, pairs: &Pairs) {
        let focused = self.dom.document.active_element().map(|element| element.id());
        let before = self.emptied.len();
        self.emptied.retain(|key| focused.as_ref() == Some(key));
        if self.emptied.len() != before {
            self.show(pairs);
        }
    }

    /// Shows what the pairs hold; what is there already stays as it is, with the focus in it.
    pub(crate) fn show(&mut self, pairs: &Pairs) {
        let names = ["x", "y"].map(|letter| form::name_of(pairs, letter));
        let shown: Vec<Shown> = (1..=MOST)
            .filter(|number| self.stands(pairs, *number))
            .map(|number| self.shown(pairs, number))
            .collect();
        let now = (shown, names);
        if self.built.as_ref() != Some(&now) {
            self.build(&now.0, &now.1);
            self.built = Some(now);
        }
        if let Some((shown, _)) = &self.built {
            for phase in shown {
                self.fill(pairs, phase);
            }
        }
    }

    fn stands(&self, pairs: &Pairs, number: u8) -> bool {
        let stem = format!("phase{number}.");
        pairs
            .iter()
            .any(|(key, text)| key.starts_with(&stem) && !text.trim().is_empty())
            || self.emptied.iter().any(|key| key.starts_with(&stem))
    }

    fn shown(&self, pairs: &Pairs, number: u8) -> Shown {
        let key = |change: &str| format!("phase{number}.{change}");
        let needed = |change: &str| {
            let Some((letter, bare)) = change.split_once('.') else {
                return false;
            };
            written(pairs, &key(&format!("{letter}.fire")))
                .is_some_and(|law| needed_with(law).contains(&bare))
        };
        let stands = |change: &String| {
            pairs.get(&key(change)).is_some() || self.emptied.contains(&key(change)) || needed(change)
        };
        Shown {
            number,
            changes: changeable().map(|(_, name)| name).filter(stands).collect(),
        }
    }

    /// Builds the tables anew, and gives the focus back to where it was.
    fn build(&self, shown: &[Shown], names: &[String; 2]) {
        let Some(place) = self.dom.element("phase-list") else {
            return;
        };
        let focused = self.dom.document.active_element();
        let focused = focused
            .filter(|element| place.contains(Some(element)))
            .map(|element| element.id());
        place.set_text_content(None);
        for phase in shown {
            if let Some(table) = self.phase(phase, names) {
                append(&place, &table);
            }
        }
        if let Some(element) = focused.and_then(|id| self.dom.typed::<HtmlElement>(&id)) {
            // Where the browser refuses, the focus is lost and nothing else.
            let _ = element.focus();
        }
    }

    fn phase(&self, phase: &Shown, names: &[String; 2]) -> Option<Element> {
        let (dom, number) = (&self.dom, phase.number);
        let group = dom.make("div", "")?;
        set(&group, "class", "phase");
        set(&group, "role", "group");
        set(&group, "aria-label", &format!("Phase {number}"));
        append(&group, &self.beginning_field(number)?);
        let (table, body) = (dom.make("table", "")?, dom.make("tbody", "")?);
        set(&table, "class", "rows changes");
        for change in &phase.changes {
            append(&body, &self.change(phase, change, names)?);
        }
        append(&table, &body);
        append(&group, &table);
        let acts = dom.make("p", "")?;
        set(&acts, "class", "acts");
        let stem = format!("phase{number}");
        for (ask, words, id) in [
            ("add-change", "add a change", "add"),
            ("remove-phase", "remove the phase", "remove"),
        ] {
            let button = button(dom, words, ask, &format!("{stem}.{id}"))?;
            set(&button, "data-phase", &number.to_string());
            set(&button, "aria-label", &format!("Phase {number}: {words}"));
            append(&acts, &button);
        }
        append(&group, &acts);
        Some(group)
    }

    fn beginning_field(&self, number: u8) -> Option<Element> {
        let (dom, key) = (&self.dom, format!("phase{number}.from"));
        let (field, label, entry) = (
            dom.make("div", "")?,
            dom.make("label", &format!("Phase {number}, from"))?,
            dom.make("span", "")?,
        );
        set(&field, "class", "field short");
        set(&label, "for", &key);
        set(&entry, "class", "entry");
        append(&field, &label);
        // A blank between words is text that can always be appended.
        let _ = field.append_with_str_1(" ");
        append(&field, &dom.make("code", &key)?);
        append(&entry, &self.value(&key, None)?);
        let unit = dom.make("span", "")?;
        set(&unit, "class", "unit");
        set(&unit, "id", &format!("{key}.unit"));
        append(&entry, &unit);
        append(&field, &entry);
        append(&field, &problem(dom, &key)?);
        Some(field)
    }

    fn change(&self, phase: &Shown, change: &str, names: &[String; 2]) -> Option<Element> {
        let dom = &self.dom;
        let key = format!("phase{}.{change}", phase.number);
        let (line, what, value, moves) = (
            dom.make("tr", "")?,
            dom.make("td", "")?,
            dom.make("td", "")?,
            dom.make("td", "")?,
        );
        let select = dom.make("select", "")?;
        set(&select, "id", &format!("{key}.key"));
        set(&select, "data-change", &key);
        set(&select, "autocomplete", "off");
        set(
            &select,
            "aria-label",
            &format!("Phase {}: what changes", phase.number),
        );
        for (row, name) in changeable() {
            let option = dom.make("option", &label(row, &name, names))?;
            set(&option, "value", &name);
            if name == change {
                set(&option, "selected", "");
            } else if phase.changes.contains(&name) {
                set(&option, "disabled", "");
            }
            append(&select, &option);
        }
        append(&what, &select);
        append(&what, &dom.make("code", &key)?);
        let spoken = keys::find(change).map(|row| label(row, change, names));
        let spoken = format!("Phase {}, {}", phase.number, spoken.unwrap_or_default());
        append(&value, &self.value(&key, Some(&spoken))?);
        let unit = dom.make("p", "")?;
        set(&unit, "class", "unit");
        set(&unit, "id", &format!("{key}.unit"));
        append(&value, &unit);
        append(&value, &problem(dom, &key)?);
        set(&moves, "class", "moves");
        let remove = button(dom, "×", "remove-change", &format!("{key}.remove"))?;
        set(&remove, "data-key", &key);
        set(&remove, "aria-label", &format!("{spoken}: remove"));
        append(&moves, &remove);
        for cell in [&what, &value, &moves] {
            append(&line, cell);
        }
        Some(line)
    }

    /// The field of a key: a choice of laws, or a text.
    fn value(&self, key: &str, spoken: Option<&str>) -> Option<Element> {
        let dom = &self.dom;
        let control = if key.ends_with(".fire") {
            let select = dom.make("select", "")?;
            for law in FireLaw::ALL.map(FireLaw::law) {
                let option = dom.make("option", law.label)?;
                set(&option, "value", law.word);
                append(&select, &option);
            }
            select
        } else {
            let input = dom.make("input", "")?;
            for (name, value) in [
                ("type", "text"),
                ("inputmode", "decimal"),
                ("autocorrect", "off"),
                ("autocapitalize", "off"),
                ("spellcheck", "false"),
            ] {
                set(&input, name, value);
            }
            input
        };
        set(&control, "id", key);
        set(&control, "name", key);
        set(&control, "autocomplete", "off");
        set(&control, "aria-describedby", &format!("{key}.unit {key}.problem"));
        if let Some(spoken) = spoken {
            set(&control, "aria-label", spoken);
        }
        Some(control)
    }

    fn fill(&self, pairs: &Pairs, phase: &Shown) {
        let unit = TimeUnit::of_word(written(pairs, "unit").unwrap_or("h")).unwrap_or_default();
        let from = format!("phase{}.from", phase.number);
        self.dom.set_text(&format!("{from}.unit"), unit.symbol());
        let changes = phase
            .changes
            .iter()
            .map(|change| format!("phase{}.{change}", phase.number));
        for key in changes.chain([from]) {
            let text = pairs.get(&key);
            if let Some(select) = self.dom.typed::<HtmlSelectElement>(&key) {
                form::choose(&self.dom, &select, text, "");
            } else if let Some(input) = self.dom.typed::<HtmlInputElement>(&key)
                && input.value() != text.unwrap_or_default()
            {
                input.set_value(text.unwrap_or_default());
            }
        }
        for change in &phase.changes {
            let words = unit_of(pairs, phase.number, change, unit);
            self.dom
                .set_text(&format!("phase{}.{change}.unit", phase.number), &words);
        }
    }
}

fn button(dom: &Dom, words: &str, ask: &str, id: &str) -> Option<Element> {
    let button = dom.make("button", words)?;
    set(&button, "type", "button");
    set(&button, "id", id);
    set(&button, "data-ask", ask);
    Some(button)
}

fn problem(dom: &Dom, key: &str) -> Option<Element> {
    let problem = dom.make("p", "")?;
    set(&problem, "class", "problem");
    set(&problem, "id", &format!("{key}.problem"));
    set(&problem, "hidden", "");
    Some(problem)
}

/// A key that a phase changes, in words: "Ondrel: rate".
fn label(row: &Key, name: &str, names: &[String; 2]) -> String {
    let side = if name.starts_with('x') {
        &names[0]
    } else {
        &names[1]
    };
    format!("{side}: {}", row.label.to_ascii_lowercase())
}

/// What a change is measured in, by the law of fire that holds in its phase.
fn unit_of(pairs: &Pairs, number: u8, change: &str, unit: TimeUnit) -> String {
    let Some((letter, bare)) = change.split_once('.') else {
        return String::new();
    };
    let side = if letter == "x" { Side::X } else { Side::Y };
    let name = form::name_of(pairs, letter);
    let enemy = form::name_of(pairs, side.enemy().letter());
    match (bare, law_in(pairs, number, letter)) {
        ("rate", Some(law)) => meaning::rate_unit(law, &name, &enemy, unit),
        _ => meaning::parameter_unit(bare, &name, &enemy, unit),
    }
}

/// The law of fire of a side in a phase: its own, or the last one given before it.
fn law_in(pairs: &Pairs, number: u8, letter: &str) -> Option<FireLaw> {
    let from = |number: u8| number::plain(written(pairs, &format!("phase{number}.from"))?);
    let here = (from(number)?, number);
    let mut before: Vec<(f64, u8)> = (1..=MOST)
        .filter_map(|number| Some((from(number)?, number)))
        .filter(|other| *other <= here)
        .collect();
    sort_by(&mut before, |a, b| b.0.total_cmp(&a.0).then(b.1.cmp(&a.1)));
    let keys = before
        .into_iter()
        .map(|(_, number)| format!("phase{number}.{letter}.fire"));
    let word = keys
        .chain([format!("{letter}.fire")])
        .find_map(|key| written(pairs, &key));
    FireLaw::of_word(word.unwrap_or("aimed"))
}
