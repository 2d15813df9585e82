//! Closing in on a change between two values, one look at a time.

/// Between these two lies a change: its near end is as before, its far end is behind it.
///
/// Each end has the lead of the side that holds there, negative at the near end, where there is one: both then fall to 0
/// at a clean crossing, and the secant through them finds it in a few looks. Where they do not, as at the moment of an
/// event, halving does.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct Bracket {
    /// As before.
    pub(crate) near: f64,
    /// Behind the change.
    pub(crate) far: f64,
    /// The leads at both ends.
    pub(crate) leads: Option<(f64, f64)>,
    /// Looks so far.
    pub(crate) looks: u32,
}

/// As near as ends come to each other, in parts of the larger: a hundredth of what is promised.
const NEAR: f64 = 1e-12;

/// Of so many looks one is a halving, whatever the secant says.
const HALVING: u32 = 3;

/// Looks at one change, at most.
const MOST_LOOKS: u32 = 400;

impl Bracket {
    /// Whether the ends are as near to each other as is asked; `least` is a distance that counts as none.
    pub(crate) fn is_closed(&self, least: f64) -> bool {
        let width = (self.far - self.near).abs();
        // Every third look halves: no bracket of doubles takes more.
        self.looks >= MOST_LOOKS
            || width <= self.tolerance(least)
            || self.middle() == self.near
            || self.middle() == self.far
    }

    /// Where to look next.
    pub(crate) fn next(&self, least: f64) -> f64 {
        let width = self.far - self.near;
        let secant = self.leads.map(|(near, far)| near / (near - far));
        // Where both leads have come to 0 there is no secant.
        let usable = secant.filter(|secant| secant.is_finite() && self.looks % HALVING != HALVING - 1);
        let Some(secant) = usable else {
            return self.middle();
        };
        // No nearer to an end than leaves the look some use: a root that lies at one end is then closed in from both sides.
        let part = (0.5 * self.tolerance(least) / width.abs()).min(0.5);
        self.near + width * secant.clamp(part, 1.0 - part)
    }

    /// Takes up what was seen at `value`: whether it lies behind the change, and the lead there.
    pub(crate) fn look(&mut self, value: f64, behind: bool, lead: Option<f64>) {
        self.looks += 1;
        let leads = self.leads.zip(lead);
        if behind {
            self.far = value;
            // The end that stays counts for half: without that it might stay for ever.
            self.leads = leads.map(|((near, _), lead)| (0.5 * near, lead));
        } else {
            self.near = value;
            self.leads = leads.map(|((_, far), lead)| (-lead, 0.5 * far));
        }
    }

    fn tolerance(&self, least: f64) -> f64 {
        (NEAR * self.near.abs().max(self.far.abs())).max(least)
    }

    /// Half-way; of ends that are far apart on one side of 0, by their ratio.
    fn middle(&self) -> f64 {
        let (near, far) = (self.near, self.far);
        if near * far > 0.0 && (near / far > 4.0 || far / near > 4.0) {
            return libm::sqrt(near.abs()) * libm::sqrt(far.abs()) * near.signum();
        }
        0.5 * near + 0.5 * far
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn closed(near: f64, far: f64, root: f64, lead: impl Fn(f64) -> Option<f64>) -> (f64, u32) {
        let behind = |value: f64| (value - root) * (far - near) > 0.0;
        let size = |value: f64| lead(value).map(f64::abs);
        let mut bracket = Bracket {
            near,
            far,
            leads: size(near).zip(size(far)).map(|(near, far)| (-near, far)),
            looks: 0,
        };
        while !bracket.is_closed(0.0) {
            let value = bracket.next(0.0);
            bracket.look(value, behind(value), size(value));
            assert!(bracket.looks < 200);
        }
        (bracket.far, bracket.looks)
    }

    #[test]
    fn a_clean_crossing_takes_few_looks_and_any_other_is_found() {
        for (near, far, root) in [
            (1.0, 4.0, 2.3),
            (4.0, 1.0, 2.3),
            (600.0, 0.0, 1e-3),
            (-3.0, 5.0, 0.4),
        ] {
            let square =
                |value: f64| Some((value * value * value - root * root * root) / (1.0 + value * value));
            let (found, looks) = closed(near, far, root, square);
            assert!(
                (found - root).abs() <= 2e-12 * root.abs(),
                "{found} is not {root}"
            );
            assert!(looks < 60, "{looks} for {root}");
            let (found, looks) = closed(near, far, root, |_| Some(0.25));
            assert!(
                (found - root).abs() <= 2e-12 * root.abs() && looks < 140,
                "{looks}"
            );
            let (found, looks) = closed(near, far, root, |_| None);
            assert!(
                (found - root).abs() <= 2e-12 * root.abs() && looks < 70,
                "{looks}"
            );
        }
        let (found, _) = closed(1.0, 1.2, 1.1, |_| Some(0.0));
        assert!((found - 1.1).abs() <= 2e-12, "{found}");
        let (_, looks) = closed(1.0, 1.2, 1.1, |value| Some(value - 1.1));
        assert!(looks < 12, "{looks}");
    }
}
