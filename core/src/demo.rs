//! The engagement that the page shows when no key stands: invented, and marked so.

/// Two invented forces that lose the same number per hour at the start, though one is half as strong again. The reserve
/// comes in time and reverses the outcome; an hour later it would not.
pub const DEMO: &str = "title=Demo,%20invented:%20the%20reserve&marking=EXERCISE%20%E2%80%93%20invented%20figures\
&x.name=Ondrel&x.start=600&x.rate=0.04&x.break=0.3&y.name=Vessary&y.start=400&y.rate=0.06&y.break=0.39&y.join=64@4&v=1";

#[cfg(test)]
mod tests {
    use super::*;
    use crate::fight::{Effort, fight};
    use crate::outcome::Breaks;
    use crate::pairs::Pairs;
    use crate::statement::Statement;

    #[test]
    fn the_reserve_decides_and_an_hour_later_would_not() {
        let breaks = |join: &str| {
            let mut pairs = Pairs::parse(DEMO);
            pairs.set("y.join", join);
            let statement = Statement::read(&pairs).expect(join);
            let engagement = statement.engagement();
            let losses = engagement.sides.y.fire.rate * engagement.sides.y.start;
            assert_eq!(losses, engagement.sides.x.fire.rate * engagement.sides.x.start);
            fight(&engagement, Effort::Outcome).outcome.breaks
        };
        assert_eq!(breaks(""), Breaks::Y);
        assert_eq!(breaks("64@4"), Breaks::X);
        assert_eq!(breaks("64@5"), Breaks::Y);
    }
}
