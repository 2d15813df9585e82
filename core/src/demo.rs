//! The engagement that the page shows when no key stands: invented, and marked so.

/// Two invented forces that lose the same number per hour at the start, though one is half as strong again.
pub const DEMO: &str = "title=Demo,%20invented:%20before%20the%20reserve&marking=EXERCISE%20%E2%80%93%20invented%20figures\
&x.name=Ondrel&x.start=600&x.rate=0.04&x.break=0.3&y.name=Vessary&y.start=400&y.rate=0.06&y.break=0.4&v=1";
