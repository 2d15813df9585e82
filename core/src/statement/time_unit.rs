//! The unit of every time and rate of a link.

/// The unit of every time and rate of a link.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub enum TimeUnit {
    /// `s`
    Second,
    /// `min`
    Minute,
    /// `h`
    #[default]
    Hour,
    /// `d`
    Day,
    /// `wk`
    Week,
}

impl TimeUnit {
    /// The unit of a word of the link.
    pub fn of_word(word: &str) -> Option<TimeUnit> {
        match word {
            "s" => Some(TimeUnit::Second),
            "min" => Some(TimeUnit::Minute),
            "h" => Some(TimeUnit::Hour),
            "d" => Some(TimeUnit::Day),
            "wk" => Some(TimeUnit::Week),
            _ => None,
        }
    }

    /// The unit as it stands behind a number, and in the link.
    pub fn symbol(self) -> &'static str {
        match self {
            TimeUnit::Second => "s",
            TimeUnit::Minute => "min",
            TimeUnit::Hour => "h",
            TimeUnit::Day => "d",
            TimeUnit::Week => "wk",
        }
    }

    /// How many of it make a day.
    pub fn in_a_day(self) -> f64 {
        match self {
            TimeUnit::Second => 86_400.0,
            TimeUnit::Minute => 1440.0,
            TimeUnit::Hour => 24.0,
            TimeUnit::Day => 1.0,
            TimeUnit::Week => 1.0 / 7.0,
        }
    }
}
