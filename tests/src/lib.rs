//! What the tests share.

#[cfg(feature = "browser")]
pub mod browser;
pub mod budgets;
pub mod hostile;
pub mod shown;
pub mod tables;
pub mod ugly;
