//! What the generator starts from: the committed links, the names of the keys, and marks that have a meaning somewhere.

use aftercount_core::demo::DEMO;
use aftercount_core::golden;
use aftercount_core::keys::{KEYS, Kind, Place};

use crate::tables;

/// The tables with a column of links.
const TABLES: [&str; 8] = [
    "links.tsv",
    "bad_texts.tsv",
    "bad_schedules.tsv",
    "library.tsv",
    "schedules.tsv",
    "schedule_work.tsv",
    "pure_fights.tsv",
    "every_law.tsv",
];

/// What `{BASE}` stands for in the tables.
const BASE: &str = "x.start=600&x.rate=0.04&y.start=400&y.rate=0.05";

/// Links, keys and words to mutate and to mix.
#[derive(Clone, Debug)]
pub struct Corpus {
    /// Links, good and bad.
    pub links: Vec<String>,
    /// Every key as it may stand in a link, those of phases and variants too.
    pub keys: Vec<String>,
    /// Every word that some key takes.
    pub words: Vec<&'static str>,
}

impl Corpus {
    /// All that is committed.
    pub fn committed() -> Corpus {
        let mut links: Vec<String> = TABLES
            .iter()
            .flat_map(|name| tables::read(name))
            .map(|row| row.text("link").replace("{BASE}", BASE))
            .collect();
        links.push(DEMO.to_owned());
        links.extend((0..golden::COUNT).map(golden::link));
        let words = KEYS.iter().filter_map(|key| match key.kind {
            Kind::Choice(words) => Some(words),
            _ => None,
        });
        Corpus {
            links,
            keys: every_key(),
            words: words.flatten().copied().collect(),
        }
    }
}

fn every_key() -> Vec<String> {
    let plain = KEYS.iter().flat_map(|key| match key.place {
        Place::Whole => vec![key.on("")],
        Place::Side => vec![key.on("x"), key.on("y")],
    });
    let plain: Vec<String> = plain.collect();
    let in_phases = plain.iter().filter(|key| key.contains(".")).cloned();
    let mut all: Vec<String> = in_phases
        .chain(["from".to_owned()])
        .flat_map(|key| [1, 2, 9].map(|n| format!("phase{n}.{key}")))
        .collect();
    all.extend(
        plain
            .iter()
            .flat_map(|key| [1, 8].map(|n| format!("also{n}.{key}"))),
    );
    all.extend(plain);
    all
}

/// The dictionary for a fuzzer: each key with its `=`, each word of a key, and the marks of the grammar.
pub fn dictionary() -> String {
    let corpus = Corpus::committed();
    let marks = [
        "&",
        "=",
        "%",
        "%25",
        "+",
        "..",
        "?",
        "@",
        "/",
        ",",
        "-",
        "e",
        ".",
        "#",
        "1e9",
        "1e-300",
        "%E2%88%92",
        "%FF",
    ];
    let mut entries: Vec<String> = corpus.keys.iter().map(|key| format!("&{key}=")).collect();
    entries.extend(corpus.words.iter().map(|word| word.to_string()));
    entries.extend(marks.map(str::to_owned));
    entries.sort();
    entries.dedup();
    let lines: Vec<String> = entries.iter().map(|entry| format!("\"{entry}\"\n")).collect();
    format!(
        "# Written from the table of keys: tests/tests/hostile.rs says how.\n{}",
        lines.concat()
    )
}
