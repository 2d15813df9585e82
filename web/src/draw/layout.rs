//! Where a picture's values stand on its canvas.

/// The field of a picture: values to CSS pixels and back.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Layout {
    /// The left edge of the field.
    pub left: f64,
    /// Its top.
    pub top: f64,
    /// Its right edge.
    pub right: f64,
    /// Its foot.
    pub foot: f64,
    /// The values at the left and the right edge.
    pub across: (f64, f64),
    /// The values at the foot and the top.
    pub up: (f64, f64),
}

impl Layout {
    /// The pixel of a value across.
    pub fn x(&self, value: f64) -> f64 {
        self.left + (value - self.across.0) / (self.across.1 - self.across.0) * (self.right - self.left)
    }

    /// The pixel of a value up.
    pub fn y(&self, value: f64) -> f64 {
        self.foot - (value - self.up.0) / (self.up.1 - self.up.0) * (self.foot - self.top)
    }

    /// The pixel of a point.
    pub fn place(&self, (x, y): (f64, f64)) -> (f64, f64) {
        (self.x(x), self.y(y))
    }

    /// The same field where everything is so many times as large.
    #[must_use]
    pub fn times(&self, zoom: f64) -> Layout {
        Layout {
            left: self.left * zoom,
            top: self.top * zoom,
            right: self.right * zoom,
            foot: self.foot * zoom,
            ..*self
        }
    }

    /// The value across at a pixel, kept inside the field.
    pub fn value_at(&self, pixel: f64) -> f64 {
        let part = ((pixel - self.left) / (self.right - self.left)).clamp(0.0, 1.0);
        self.across.0 + part * (self.across.1 - self.across.0)
    }

    /// The value up at a pixel, kept inside the field.
    pub fn value_up_at(&self, pixel: f64) -> f64 {
        let part = ((self.foot - pixel) / (self.foot - self.top)).clamp(0.0, 1.0);
        self.up.0 + part * (self.up.1 - self.up.0)
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn pixels_and_values_go_both_ways() {
        let field = Layout {
            left: 40.0,
            top: 10.0,
            right: 240.0,
            foot: 110.0,
            across: (0.0, 8.0),
            up: (0.0, 500.0),
        };
        assert_eq!(field.place((2.0, 250.0)), (90.0, 60.0));
        assert_eq!(field.value_at(90.0), 2.0);
        assert_eq!(field.value_at(-5.0), 0.0);
        assert_eq!(field.value_at(1e9), 8.0);
        assert_eq!(field.value_up_at(60.0), 250.0);
        assert_eq!(field.value_up_at(-5.0), 500.0);
        let larger = field.times(2.0);
        assert_eq!(larger.place((2.0, 250.0)), (180.0, 120.0));
        assert_eq!(larger.value_at(180.0), 2.0);
    }
}
