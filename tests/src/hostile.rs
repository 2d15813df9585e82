//! Texts that nobody would write, made from those that somebody did, and the judgement of what comes back.
//!
//! The generator is seeded: text number N of a seed is the same on every machine, so that one that shows a fault can be
//! made again by its number. It takes the committed links of `reference/` and the table of keys and mutates them: bytes,
//! pairs, numbers and lists; others it makes from nothing, near the edges of what the keys allow.

mod corpus;
mod judge;
mod mutations;
mod numbers;
mod report;
mod run;
mod scratch;

pub use corpus::{Corpus, dictionary};
pub use judge::{Depth, MOST_SHOWN, MOST_WORK, Verdict, judge};
pub use report::Report;
pub use run::run;

use fastrand::Rng;

/// The seed of every run that does not ask for another.
pub const SEED: u64 = 1914;

/// A maker of hostile texts.
#[derive(Clone, Debug)]
pub struct Generator {
    corpus: Corpus,
    seed: u64,
}

impl Generator {
    /// The generator of a seed.
    pub fn new(seed: u64) -> Generator {
        Generator {
            corpus: Corpus::committed(),
            seed,
        }
    }

    /// Text number `index`.
    pub fn text(&self, index: u64) -> String {
        // Far apart, since neighbouring seeds of a generator may begin alike.
        let mut rng = Rng::with_seed(self.seed ^ index.wrapping_mul(0x9e37_79b9_7f4a_7c15));
        let mut text = if rng.u8(..4) == 0 {
            scratch::engagement(&mut rng)
        } else {
            rng.choice(&self.corpus.links).cloned().unwrap_or_default()
        };
        // Half of the texts are changed little, so that they get past the reader and into the mathematics.
        let changes = if rng.bool() { rng.u8(..3) } else { rng.u8(1..8) };
        for _ in 0..changes {
            text = mutations::mutate(&mut rng, &self.corpus, text);
        }
        text
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_text_can_be_made_again_by_its_number() {
        let (one, other) = (Generator::new(1), Generator::new(1));
        let texts: Vec<String> = (0..200).map(|index| one.text(index)).collect();
        assert_eq!(texts, (0..200).map(|index| other.text(index)).collect::<Vec<_>>());
        assert_ne!(Generator::new(2).text(7), texts[7]);
    }
}
