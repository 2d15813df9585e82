//! What the page weighs.

use std::fmt;
use std::io::Write as _;

use anyhow::{Result, bail};
use flate2::Compression;
use flate2::write::GzEncoder;

/// The most a page may weigh, in bytes.
#[derive(Clone, Copy)]
pub(crate) struct Limits {
    /// As it is.
    pub(crate) raw: usize,
    /// Through gzip at its best.
    pub(crate) gzipped: usize,
}

/// What a page weighs, in bytes.
pub(crate) struct Sizes {
    raw: usize,
    gzipped: usize,
}

/// How many bytes gzip makes of these, as servers and mailers use it.
fn gzipped(bytes: &[u8]) -> Result<usize> {
    let mut packed = GzEncoder::new(Vec::new(), Compression::best());
    packed.write_all(bytes)?;
    Ok(packed.finish()?.len())
}

impl Sizes {
    /// Weighs a page.
    pub(crate) fn of(page: &[u8]) -> Result<Self> {
        Ok(Self {
            raw: page.len(),
            gzipped: gzipped(page)?,
        })
    }

    /// Fails where the page is heavier than it may be, naming the excess.
    pub(crate) fn check(&self, limits: Limits) -> Result<()> {
        for (what, size, limit) in [
            ("", self.raw, limits.raw),
            (" gzipped", self.gzipped, limits.gzipped),
        ] {
            if size > limit {
                bail!(
                    "the page{what} has {size} bytes, {} more than the {limit} allowed",
                    size - limit
                );
            }
        }
        Ok(())
    }
}

impl fmt::Display for Sizes {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(
            f,
            "{:.1} kB, {:.1} kB gzipped",
            self.raw as f64 / 1e3,
            self.gzipped as f64 / 1e3
        )
    }
}

#[cfg(test)]
mod tests {
    use super::{Limits, Sizes};

    #[test]
    fn either_limit_counts() {
        let sizes = Sizes::of(&[b'a'; 10_000]).expect("memory takes writes");
        assert!(
            sizes.gzipped < 200,
            "{} bytes for one letter repeated",
            sizes.gzipped
        );
        sizes
            .check(Limits {
                raw: 10_000,
                gzipped: 200,
            })
            .expect("within");
        let error = sizes
            .check(Limits {
                raw: 9_999,
                gzipped: 200,
            })
            .expect_err("over")
            .to_string();
        assert!(error.contains("1 more than the 9999"), "{error}");
        let error = sizes
            .check(Limits {
                raw: 10_000,
                gzipped: 1,
            })
            .expect_err("over")
            .to_string();
        assert!(error.contains("gzipped"), "{error}");
    }
}
